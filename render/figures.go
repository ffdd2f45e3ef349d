package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/chart"
	"steelyard/render/number"
	"steelyard/render/page"
)

// plainColumns is the width of figures in characters.
const plainColumns = 72

// axis is the one axis of an outcome: every effect figure of the record uses
// it, so that all read the same way. It covers points, claims, pooled results
// and the middle of p-value functions; studies widen it at most threefold.
func (c *composer) axis(o *result.Outcome) chart.Axis {
	if a, ok := c.axes[o.Name]; ok {
		return a
	}
	f := number.Of(o)
	var core []float64
	add := func(to *[]float64, os ...result.Opt) {
		for _, x := range os {
			if finite(x) {
				*to = append(*to, f.Show(x.V))
			}
		}
	}
	add(&core, o.Low, o.Null, o.High)
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		if h.Outcome != o.Name {
			continue
		}
		add(&core, h.MarginLow, h.MarginHigh, h.Limit, h.Estimate, h.Low, h.High)
		for _, p := range h.Curve {
			if p.P >= 0.01 {
				add(&core, result.Some(p.Value))
			}
		}
	}
	for _, p := range c.res.Pooled {
		if p.Outcome == o.Name {
			add(&core, p.Estimate, p.Low, p.High)
		}
	}
	var studies []float64
	for _, s := range c.res.Studies {
		if s.Outcome == o.Name && s.Use != result.MaskedUse && s.Analysis.Method != "" {
			add(&studies, s.Analysis.Estimate, s.Analysis.Low, s.Analysis.High)
		}
	}
	a := chart.NewAxis(o.Ratio, core...).Widened(1, studies...)
	a.Title, a.Short, a.Unit, a.Better = axisTitle(o, f), axisShort(o, f), f.Unit, o.Better
	if a.Better == "neither" {
		a.Better = ""
	}
	if c.axes == nil {
		c.axes = map[string]chart.Axis{}
	}
	c.axes[o.Name] = a
	return a
}

// axisTitle names effect and unit.
func axisTitle(o *result.Outcome, f number.Format) string {
	s := capital(effectName(o)) // begins with our own noun
	if f.Unit != "" {
		s += ", " + f.Unit
	}
	return s
}

// axisShort is the same in fewer words.
func axisShort(o *result.Outcome, f number.Format) string {
	t := termOf(o.Measure)
	s := capital(t.short)
	switch {
	case t.joint == "" || o.Groups[0] == "":
	case o.Measure == "superiority-probability":
		s += " in which " + o.Groups[0] + " is higher than " + o.Groups[1]
	default:
		s += " (" + o.Groups[0] + " " + t.joint + " " + o.Groups[1] + ")"
	}
	if f.Unit != "" {
		s += ", " + f.Unit
	}
	return s
}

// point is a number on the shown scale.
func point(f number.Format, o result.Opt) chart.Point {
	return chart.Point{V: f.Show(o.V), OK: o.OK}
}

// band is a region on the shown scale.
func band(f number.Format, low, high result.Opt) chart.Band {
	return chart.Band{Low: f.Show(low.V), High: f.Show(high.V), OK: low.OK && high.OK}
}

// ground is a beam with the band, the null and the marks of a hypothesis.
func (c *composer) ground(v voice) chart.Beam {
	b := chart.Beam{Axis: c.axis(v.o), Band: band(v.f, v.h.MarginLow, v.h.MarginHigh), Null: point(v.f, v.o.Null)}
	switch v.h.Claim {
	case "noninferior":
		if m := v.harm(); m.OK {
			b.Marks = append(b.Marks, chart.Mark{V: v.f.Show(m.V), Label: "margin " + v.f.Point(m.V)})
		}
	case "below", "above":
		if v.h.Limit.OK {
			b.Marks = append(b.Marks, chart.Mark{V: v.f.Show(v.h.Limit.V), Label: "limit " + v.f.Point(v.h.Limit.V)})
		}
	}
	return b
}

// row is one judgement as an interval of a figure.
func (v voice) row(name string, j *result.Judged) chart.Row {
	s := v.shown(j)
	r := chart.Row{Name: name, Est: point(v.f, j.Estimate), Low: point(v.f, j.Low), High: point(v.f, j.High), EstText: s.Estimate}
	if finite(j.Low) {
		r.LowText = s.Low
	}
	if finite(j.High) {
		r.HighText = s.High
	}
	r.Right = s.Estimate
	if rg := s.Bare(); rg != "" {
		r.Right += " (" + rg + ")"
	}
	return r
}

// hasInterval reports whether there is anything to hang from the beam.
func hasInterval(j *result.Judged) bool {
	return j.Verdict != result.Masked && (j.Estimate.OK || j.Low.OK || j.High.OK)
}

// beam is the figure of page one: one interval under the beam. A claim that
// waits for results shows the empty beam.
func (c *composer) beam(h *result.Hypothesis, dense, crowded bool) *page.Figure {
	v := voiceOf(c.res, h)
	if !v.o.Null.OK && !h.Limit.OK && !hasInterval(&h.Judged) {
		return nil
	}
	b := c.ground(v)
	b.Height = 27
	if dense {
		b.Height = 15
	}
	if hasInterval(&h.Judged) {
		r := v.row("", &h.Judged)
		if dense {
			r.EstText = ""
		}
		b.Rows = []chart.Row{r}
	}
	if crowded {
		b.Wide = 196
	}
	return &page.Figure{Alt: c.beamAlt(v), Drawing: b.Draw(), Plain: b.Plain(plainColumns)}
}

// beamAlt says in words what the beam shows.
func (c *composer) beamAlt(v voice) string {
	s := "Interval on the axis of the " + v.effect() + " of " + v.label()
	if v.f.Unit != "" {
		s += " in " + v.f.Unit
	}
	if d := direction(v.o); d != "" {
		s += "; " + d
	}
	s += "."
	if e := v.evidence(&v.h.Judged); e != "" && hasInterval(&v.h.Judged) {
		s += " " + capital(e) + "."
	} else {
		s += " No result is shown."
	}
	if v.o.Null.OK {
		s += " Null at " + v.null() + "."
	}
	if r := v.region(); r != "" {
		s += " Region too small to matter: " + r + "."
	}
	if v.h.Limit.OK {
		s += " Limit" + v.limit() + "."
	}
	return s
}

// figure wraps a drawing.
func figure(caption, alt string, d *page.Drawing, plain []string) *page.Figure {
	return &page.Figure{Caption: page.T(caption), Alt: alt, Drawing: d, Plain: plain}
}

// beamFull shows the judgement that decides with those that stand beside it:
// other sets, the sealed plan, left-out results, the descriptive interval.
func (c *composer) beamFull(h *result.Hypothesis) *page.Figure {
	v := voiceOf(c.res, h)
	if !hasInterval(&h.Judged) {
		return nil
	}
	b := c.ground(v)
	b.Names, b.Right = 172, 170
	first := v.row("decides, "+number.Level(h.Level), &h.Judged)
	if !h.IntervalDecides {
		first.Name = "shown, " + number.Level(h.Level)
	}
	first.Strong = true
	b.Rows = append(b.Rows, first)
	if d := h.Descriptive; d.Low.OK && d.High.OK && d.Level != h.Level {
		b.Rows = append(b.Rows, v.row("descriptive, "+number.Level(d.Level), &result.Judged{Analysis: d}))
	}
	for i := range h.BySet {
		if j := &h.BySet[i]; hasInterval(j) && j.Set != h.Set {
			b.Rows = append(b.Rows, v.row("set "+j.Set, j))
		}
	}
	for i := range h.Alternatives {
		j := &h.Alternatives[i]
		if !hasInterval(j) {
			continue
		}
		name := becauseText(j.Because)
		if strings.HasPrefix(j.Because, "method:") {
			name = methodName(j.Method)
		}
		r := v.row(name, j)
		r.Grey, r.Separate = true, i == 0
		b.Rows = append(b.Rows, r)
	}
	if len(b.Rows) < 2 && (h.Role == "primary" || h.Role == "") {
		return nil // page one shows it
	}
	b.Height = 17
	if len(b.Rows) > 6 {
		b.Height = 15
	}
	caption := h.Name + ": the interval on the beam. The notch is the null."
	if b.Band.OK {
		caption = h.Name + ": the interval on the beam. The band is the region too small to matter, the notch the null."
	}
	alt := c.beamAlt(v)
	if len(b.Rows) > 1 {
		alt += " In full: " + rowsText(b.Rows) + "."
	}
	return figure(caption, alt, b.Draw(), b.Plain(plainColumns))
}

// sharedBeams draws several claims of one outcome under one beam.
func (c *composer) sharedBeams() {
	for i := range c.res.Outcomes {
		o := &c.res.Outcomes[i]
		var b chart.Beam
		var names []string
		for k := range c.res.Hypotheses {
			h := &c.res.Hypotheses[k]
			if h.Outcome != o.Name || !hasInterval(&h.Judged) {
				continue
			}
			v := voiceOf(c.res, h)
			if len(names) == 0 {
				b = chart.Beam{Axis: c.axis(o), Band: band(v.f, o.Low, o.High), Null: point(v.f, o.Null), Names: 160, Right: 170, Height: 17}
			}
			names = append(names, h.Name)
			r := v.row(h.Name+" "+h.Claim+", "+number.Level(h.Level), &h.Judged)
			r.Strong = h.Role == "primary"
			b.Rows = append(b.Rows, r)
			b.Marks = append(b.Marks, c.ground(v).Marks...)
		}
		if len(names) < 2 {
			continue
		}
		c.heading(2, "Claims on "+o.Label+", under one beam", "")
		alt := "Intervals of " + join(names) + " on one axis of the " + effectName(o) + ": " + rowsText(b.Rows) + "."
		c.add2(figure("Claims on "+o.Label+", each with the interval of its own level.", alt, b.Draw(), b.Plain(plainColumns)))
	}
}

// curveFigure is the p-value function.
func (c *composer) curveFigure(h *result.Hypothesis) *page.Figure {
	if len(h.Curve) < 2 {
		return nil
	}
	v := voiceOf(c.res, h)
	g := c.ground(v)
	d := chart.Curve{Axis: g.Axis, Band: g.Band, Null: g.Null, Marks: g.Marks}
	for _, p := range h.Curve {
		d.X, d.P = append(d.X, v.f.Show(p.Value)), append(d.P, p.P)
	}
	if h.Level > 0 && h.Level < 1 {
		d.Level = 1 - h.Level
		d.LevelText = "p = " + number.Error(d.Level) + ": the " + number.Level(h.Level) + " interval"
	}
	s := v.shown(&h.Judged)
	alt := "The two-sided p-value of every value of the " + v.effect() + ": highest at the estimate"
	if s.Estimate != "" {
		alt += ", " + s.EstimateUnit()
	}
	alt += ", falling to both sides."
	if r := s.Range(); r != "" {
		alt += " At the level that decides it spans " + r + "."
	}
	return figure(h.Name+": the p-value of every value of the effect. Where the curve lies under the dashed line, the value is excluded at the claim's level.", alt, d.Draw(), nil)
}

// marginFigure is the claim's p against its margin.
func (c *composer) marginFigure(v voice, s *result.Sensitivity) *page.Figure {
	if len(s.Curve) < 2 {
		return nil
	}
	var d chart.MarginStep
	for _, m := range s.Curve {
		d.X, d.P = append(d.X, v.f.Show(m.Margin)), append(d.P, m.P.P)
	}
	d.Axis = chart.NewAxis(v.o.Ratio, d.X...)
	d.Axis.Title = "Margin"
	if v.f.Unit != "" {
		d.Axis.Title += ", " + v.f.Unit
	}
	d.Alpha, d.Smallest = v.h.Alpha, point(v.f, s.Smallest)
	way := "falls"
	if d.P[len(d.P)-1] > d.P[0] {
		way = "rises"
	}
	alt := "The p-value of the claim " + way + " as its margin widens."
	if s.Smallest.OK {
		alt += " The verdict steps at a margin of " + number.Significant(v.f.Show(s.Smallest.V), 3) + unitTail(v) + "."
	}
	return figure(v.h.Name+": how the verdict changes with the margin.", alt, d.Draw(), nil)
}

// joinKinds lists the kinds of a timeline.
func joinKinds(k []string) string { return strings.Join(k, ", ") }
