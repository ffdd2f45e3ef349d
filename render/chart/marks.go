package chart

import (
	"math"
	"strings"

	"steelyard/render/page"
)

// The measures of every figure, in points.
const (
	Width     = 480.0 // of the text block
	labelSize = 8.0
	smallSize = 7.0
	edge      = 6.0 // nothing is drawn nearer to the border
)

// canvas gathers marks.
type canvas struct {
	w, h  float64
	marks []page.Mark
}

func (c *canvas) add(m ...page.Mark) { c.marks = append(c.marks, m...) }

// drawing is the finished picture.
func (c *canvas) drawing() *page.Drawing {
	return &page.Drawing{Width: c.w, Height: c.h, Marks: c.marks}
}

// stroke makes a solid stroke.
func stroke(ink page.Ink, w float64) page.Stroke { return page.Stroke{Ink: ink, Width: w} }

// dashed makes a dashed stroke.
func dashed(ink page.Ink, w float64) page.Stroke {
	return page.Stroke{Ink: ink, Width: w, Dash: []float64{3, 2}}
}

// line draws a straight line.
func (c *canvas) line(x1, y1, x2, y2 float64, s page.Stroke) {
	c.add(page.Line{X1: x1, Y1: y1, X2: x2, Y2: y2, Stroke: s})
}

// label writes a text, moved sideways where it would leave the picture and
// cut where it is wider than it.
func (c *canvas) label(x, y float64, s string, size float64, ink page.Ink, anchor page.Anchor, bold bool) {
	if s == "" {
		return
	}
	s = fitText(s, size, c.w-2*edge)
	w := textWidth(s, size)
	left := x
	switch anchor {
	case page.Start:
	case page.Middle:
		left = x - w/2
	case page.End:
		left = x - w
	}
	moved := math.Max(edge, math.Min(left, c.w-edge-w))
	c.add(page.Label{X: x + moved - left, Y: y, Text: s, Size: size, Ink: ink, Bold: bold, Anchor: anchor})
}

// fitText cuts a text to a width, with an ellipsis.
func fitText(s string, size, w float64) string {
	if textWidth(s, size) <= w {
		return s
	}
	r := []rune(s)
	for len(r) > 1 && textWidth(string(r)+"…", size) > w {
		r = r[:len(r)-1]
	}
	return string(r) + "…"
}

// frame is the place of a plot inside its picture.
type frame struct{ x0, x1, y0, y1 float64 }

// x is where a value of the axis stands.
func (f frame) x(a Axis, v float64) float64 { return f.x0 + a.At(v)*(f.x1-f.x0) }

// ticksFor chooses ticks whose labels do not touch.
func ticksFor(a Axis, width float64) []Tick {
	for n := 9; n >= 2; n-- {
		t := a.Ticks(n)
		ok := true
		for i := 1; i < len(t); i++ {
			room := (a.At(t[i].V) - a.At(t[i-1].V)) * width
			if room < textWidth(t[i].Text, smallSize)/2+textWidth(t[i-1].Text, smallSize)/2+6 {
				ok = false
				break
			}
		}
		if ok {
			return t
		}
	}
	t := a.Ticks(2)
	if len(t) > 1 {
		t = t[:1]
	}
	return t
}

// axisTitle writes the axis's name and its better direction under a plot.
func (c *canvas) axisTitle(f frame, a Axis, y float64) {
	mid := (f.x0 + f.x1) / 2
	left, right := edge, c.w-edge // a narrow plot's title may use the whole width
	if f.x1-f.x0 > 0.7*c.w {
		left, right = f.x0, f.x1
	}
	better := ""
	switch a.Better {
	case "higher":
		better = "higher is better →"
	case "lower":
		better = "← lower is better"
	}
	if better != "" && c.w < Width { // little room: the title comes first
		better = map[string]string{"higher": "better →", "lower": "← better"}[a.Better]
	}
	size := labelSize
	bw := textWidth(better, size)
	room := f.x1 - left - bw - 10
	if a.Better == "lower" {
		room = right - f.x0 - bw - 10
	}
	if better == "" {
		room = right - left
	}
	title := a.named(size, room)
	switch a.Better {
	case "higher":
		c.label(f.x1, y, better, size, page.Slate, page.End, false)
		c.label(left, y, title, size, page.Black, page.Start, false)
	case "lower":
		c.label(f.x0, y, better, size, page.Slate, page.Start, false)
		c.label(right, y, title, size, page.Black, page.End, false)
	default:
		c.label(mid, y, title, size, page.Black, page.Middle, false)
	}
}

// named is the title as far as there is room: in full, in short, or cut before
// its unit.
func (a Axis) named(size, room float64) string {
	for _, s := range []string{a.Title, a.Short} {
		if s != "" && textWidth(s, size) <= room {
			return s
		}
	}
	s := a.Title
	if a.Short != "" {
		s = a.Short
	}
	if bare, _, ok := strings.Cut(s, " ("); ok && textWidth(bare+tail(a.Unit), size) <= room {
		return bare + tail(a.Unit)
	}
	if end := tail(a.Unit); end != "" && strings.HasSuffix(s, end) {
		return fitText(strings.TrimSuffix(s, end), size, room-textWidth(end, size)) + end
	}
	return fitText(s, size, room)
}

// bottomAxis draws a plain axis under a plot.
func (c *canvas) bottomAxis(f frame, a Axis) {
	c.line(f.x0, f.y1, f.x1, f.y1, stroke(page.Slate, 0.8))
	for _, t := range ticksFor(a, f.x1-f.x0) {
		x := f.x(a, t.V)
		c.line(x, f.y1, x, f.y1+3, stroke(page.Slate, 0.8))
		c.label(x, f.y1+11, t.Text, smallSize, page.Slate, page.Middle, false)
	}
}

// sideAxis draws the vertical axis of a plot from lo to hi with ticks.
func (c *canvas) sideAxis(f frame, a Axis, n int, title string) {
	c.line(f.x0, f.y0, f.x0, f.y1, stroke(page.Slate, 0.8))
	for _, t := range a.Ticks(n) {
		y := f.y1 - a.At(t.V)*(f.y1-f.y0)
		c.line(f.x0-3, y, f.x0, y, stroke(page.Slate, 0.8))
		c.label(f.x0-5, y+smallSize*0.35, t.Text, smallSize, page.Slate, page.End, false)
	}
	c.label(f.x0, f.y0-4, title, smallSize, page.Slate, page.Start, false)
}

// band shades the region too small to matter across a plot.
func (c *canvas) band(f frame, a Axis, b Band, y0, y1 float64) {
	if !b.OK || b.High < a.Lo || b.Low > a.Hi {
		return
	}
	x0, x1 := f.x(a, b.Low), f.x(a, b.High)
	if x1 > x0 {
		c.add(page.Rect{X: x0, Y: y0, W: x1 - x0, H: y1 - y0, Fill: page.Band})
	}
}

// Band is the region too small to matter, on the shown scale.
type Band struct {
	Low, High float64
	OK        bool
}

// Point is a value that a figure marks.
type Point struct {
	V  float64
	OK bool
}
