package chart

import (
	"math"
	"time"

	"steelyard/render/number"
	"steelyard/render/page"
)

// Survive is one group's curve.
type Survive struct {
	Name       string
	Time, Frac []float64 // steps: from Time[i] on, the share is Frac[i]
	Censored   []float64
	Risk       []float64 // numbers at risk at the figure's RiskTimes
}

// Survival is the figure of shares without the event over time.
type Survival struct {
	Groups    []Survive
	RiskTimes []float64
	Unit      string // of time
}

// Draw makes the picture: steps, ticks where observation ended, and the
// numbers at risk under the axis.
func (d Survival) Draw() *page.Drawing {
	c := &canvas{w: Width, h: 170 + 11*float64(len(d.Groups))}
	f := frame{x0: edge + 74, x1: Width - edge - 14, y0: 18, y1: 122}
	last := 0.0
	for _, g := range d.Groups {
		for _, t := range append(append([]float64(nil), g.Time...), g.Censored...) {
			if !math.IsInf(t, 0) && t > last {
				last = t
			}
		}
	}
	if last == 0 {
		last = 1
	}
	ax, up := Axis{Lo: 0, Hi: last, Title: "Time" + timeUnit(d.Unit)}, Axis{Lo: 0, Hi: 1}
	c.bottomAxis(f, ax)
	c.sideAxis(f, up, 5, "share without the event")
	styles := []page.Stroke{stroke(page.Accent, 1.6), dashed(page.Black, 1.3)}
	at := f.x0 + 130
	for i, g := range d.Groups {
		s := styles[i%len(styles)]
		x, y := stepPath(g, last)
		c.steps(f, ax, up, x, y, s)
		for _, t := range g.Censored {
			py := f.y1 - up.At(shareAt(g, t))*(f.y1-f.y0)
			c.line(f.x(ax, t), py-2.5, f.x(ax, t), py+2.5, stroke(page.Black, 0.7))
		}
		name := fitText(g.Name, labelSize, 110)
		if at+24+textWidth(name, labelSize) <= Width-edge { // the table of numbers at risk names every group
			c.line(at, 8, at+20, 8, s)
			c.label(at+24, 10.5, name, labelSize, page.Black, page.Start, false)
		}
		at += 40 + textWidth(name, labelSize)
	}
	c.axisTitle(f, ax, f.y1+24)
	c.atRisk(f, ax, d)
	return c.drawing()
}

// atRisk writes the numbers at risk under the time axis.
func (c *canvas) atRisk(f frame, ax Axis, d Survival) {
	if len(d.RiskTimes) == 0 {
		return
	}
	y := f.y1 + 36
	c.label(edge, y, "At risk", smallSize, page.Slate, page.Start, true)
	for _, g := range d.Groups {
		y += 11
		c.label(edge, y, fitText(g.Name, smallSize, f.x0-edge-14), smallSize, page.Black, page.Start, false)
		taken := math.Inf(-1)
		for k, t := range d.RiskTimes {
			if k >= len(g.Risk) || !ax.Inside(t) {
				continue
			}
			text := number.Count(g.Risk[k])
			x, w := f.x(ax, t), textWidth(text, smallSize)
			if x-w/2 > taken+4 {
				c.label(x, y, text, smallSize, page.Black, page.Middle, false)
				taken = x + w/2
			}
		}
	}
}

// tail is ", unit" or "".
func tail(unit string) string {
	if unit == "" {
		return ""
	}
	return ", " + unit
}

// timeUnit is ", unit"; without one the time is as the data have it.
func timeUnit(unit string) string {
	if unit == "" {
		return ", in the unit of the data"
	}
	return tail(unit)
}

// stepPath turns steps into a path that ends at the last time.
func stepPath(g Survive, last float64) (x, y []float64) {
	x, y = []float64{0}, []float64{1}
	for i := range g.Time {
		if i >= len(g.Frac) {
			break
		}
		x = append(x, g.Time[i], g.Time[i])
		y = append(y, y[len(y)-1], g.Frac[i])
	}
	end := x[len(x)-1]
	for _, t := range g.Censored {
		end = math.Max(end, math.Min(t, last))
	}
	return append(x, end), append(y, y[len(y)-1])
}

// shareAt is the share just after a time.
func shareAt(g Survive, t float64) float64 {
	s := 1.0
	for i := range g.Time {
		if i < len(g.Frac) && g.Time[i] <= t {
			s = g.Frac[i]
		}
	}
	return s
}

// Event is one mark on a timeline.
type Event struct {
	At       time.Time
	Kind     string
	Unproven bool
}

// Timeline is the figure of what happened when: one line a kind.
type Timeline struct {
	Events []Event
	Kinds  []string // order of the lines
}

// Draw makes the picture; an open mark means that the order within its day
// cannot be proved.
func (d Timeline) Draw() *page.Drawing {
	c := &canvas{w: Width, h: 34 + 14*float64(len(d.Kinds))}
	f := frame{x0: edge + 80, x1: Width - edge - 20, y0: 8, y1: 8 + 14*float64(len(d.Kinds))}
	var lo, hi float64
	for i, e := range d.Events {
		t := float64(e.At.Unix())
		if i == 0 || t < lo {
			lo = t
		}
		if i == 0 || t > hi {
			hi = t
		}
	}
	if hi-lo < 86400 {
		lo, hi = lo-43200, hi+43200
	}
	w := (hi - lo) * 0.03
	ax := Axis{Lo: lo - w, Hi: hi + w}
	outline := stroke(page.Black, 1)
	for i, k := range d.Kinds {
		y := f.y0 + 14*float64(i) + 7
		c.line(f.x0, y, f.x1, y, stroke(page.Mist, 0.6))
		c.label(edge, y+3, fitText(k, labelSize, 74), labelSize, page.Black, page.Start, false)
		for _, e := range d.Events {
			if e.Kind != k {
				continue
			}
			x := f.x(ax, float64(e.At.Unix()))
			fill := page.Accent
			if e.Unproven {
				fill = page.Paper
			}
			c.add(page.Disc{X: x, Y: y, R: 3.2, Fill: fill, Outline: &outline})
		}
	}
	c.line(f.x0, f.y1, f.x1, f.y1, stroke(page.Slate, 0.8))
	taken := math.Inf(-1)
	for _, t := range dateTicks(ax.Lo, ax.Hi) {
		x, tw := f.x(ax, float64(t.at.Unix())), textWidth(t.text, smallSize)
		c.line(x, f.y1, x, f.y1+3, stroke(page.Slate, 0.8))
		if x-tw/2 > taken+4 {
			c.label(x, f.y1+11, t.text, smallSize, page.Slate, page.Middle, false)
			taken = x + tw/2
		}
	}
	return c.drawing()
}

// dateTick is a round date.
type dateTick struct {
	at   time.Time
	text string
}

// dateTicks are first days of years, months, or days, at most about ten.
func dateTicks(lo, hi float64) []dateTick {
	from, to := time.Unix(int64(lo), 0).UTC(), time.Unix(int64(hi), 0).UTC()
	days := (hi - lo) / 86400
	var out []dateTick
	add := func(t time.Time, format string) {
		if !t.Before(from) && !t.After(to) {
			out = append(out, dateTick{t, t.Format(format)})
		}
	}
	switch {
	case days > 3*365:
		step := int(math.Ceil(days / 365 / 10))
		for y := from.Year() / step * step; y <= to.Year(); y += step {
			add(time.Date(y, 1, 1, 0, 0, 0, 0, time.UTC), "2006")
		}
	case days > 60:
		step := int(math.Ceil(days / 30.4 / 10))
		for step > 1 && 12%step != 0 {
			step++
		}
		for t := time.Date(from.Year(), 1, 1, 0, 0, 0, 0, time.UTC); !t.After(to); t = t.AddDate(0, step, 0) {
			add(t, "2006-01")
		}
	default:
		step := max(1, int(math.Ceil(days/8)))
		for t := time.Date(from.Year(), from.Month(), from.Day(), 0, 0, 0, 0, time.UTC); !t.After(to); t = t.AddDate(0, 0, step) {
			add(t, "2006-01-02")
		}
	}
	return out
}
