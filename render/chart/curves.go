package chart

import (
	"math"

	"steelyard/render/number"
	"steelyard/render/page"
)

// Curve is a p-value function: the two-sided p of every value of the effect.
type Curve struct {
	Axis      Axis
	X, P      []float64 // on the shown scale, ascending in X
	Band      Band
	Null      Point
	Marks     []Mark
	Level     float64 // two-sided p at which the deciding interval is read off
	LevelText string
}

// Draw makes the picture.
func (d Curve) Draw() *page.Drawing {
	c := &canvas{w: Width, h: 136}
	f := frame{x0: edge + 30, x1: Width - edge - 10, y0: 18, y1: 104}
	up := Axis{Lo: 0, Hi: 1}
	d.ground(c, f)
	c.bottomAxis(f, d.Axis)
	c.sideAxis(f, up, 5, "two-sided p of each value")
	if d.Level > 0 && d.Level < 1 {
		y := f.y1 - d.Level*(f.y1-f.y0)
		c.line(f.x0, y, f.x1, y, dashed(page.Black, 0.8))
		w := textWidth(d.LevelText, smallSize) // above the plot, where no curve runs
		c.line(f.x1-w-28, f.y0-6.5, f.x1-w-6, f.y0-6.5, dashed(page.Black, 0.8))
		c.label(f.x1, f.y0-4, d.LevelText, smallSize, page.Black, page.End, false)
	}
	c.steps(f, d.Axis, up, d.X, d.P, stroke(page.Accent, 1.5))
	c.axisTitle(f, d.Axis, f.y1+24)
	return c.drawing()
}

// ground draws band, null and marks.
func (d Curve) ground(c *canvas, f frame) {
	c.band(f, d.Axis, d.Band, f.y0, f.y1)
	if d.Null.OK && d.Axis.Inside(d.Null.V) {
		x := f.x(d.Axis, d.Null.V)
		c.line(x, f.y0, x, f.y1, stroke(page.Slate, 0.7))
	}
	taken := math.Inf(-1)
	for _, m := range d.Marks {
		if !d.Axis.Inside(m.V) {
			continue
		}
		x := f.x(d.Axis, m.V)
		c.line(x, f.y0, x, f.y1, stroke(page.Black, 0.9))
		w := textWidth(m.Label, smallSize)
		left := math.Min(x+3, c.w-edge-w)
		if left > taken+3 {
			c.label(left, f.y0+7, m.Label, smallSize, page.Black, page.Start, false)
			taken = left + w
		}
	}
}

// steps draws a line through points, those on the axis only.
func (c *canvas) steps(f frame, ax, ay Axis, xs, ys []float64, s page.Stroke) {
	var px, py []float64
	flush := func() {
		if len(px) > 1 {
			c.add(page.Polyline{X: px, Y: py, Stroke: s})
		}
		px, py = nil, nil
	}
	for i := range xs {
		if i >= len(ys) || math.IsNaN(xs[i]) || math.IsNaN(ys[i]) || !ax.Inside(xs[i]) {
			flush()
			continue
		}
		px = append(px, f.x(ax, xs[i]))
		py = append(py, f.y1-ay.At(ys[i])*(f.y1-f.y0))
	}
	flush()
}

// MarginStep is how a claim's p falls as its margin widens.
type MarginStep struct {
	Axis     Axis // of the margin
	X, P     []float64
	Alpha    float64
	Smallest Point
	Stated   Point
}

// Draw makes the picture.
func (d MarginStep) Draw() *page.Drawing {
	c := &canvas{w: Width, h: 126}
	f := frame{x0: edge + 34, x1: Width - edge - 10, y0: 18, y1: 92}
	top := 1e-6
	for _, p := range append([]float64{d.Alpha * 4}, d.P...) {
		if p > top {
			top = p
		}
	}
	up := Axis{Lo: 0, Hi: math.Min(1, top*1.05)}
	if d.Stated.OK && d.Axis.Inside(d.Stated.V) {
		x := f.x(d.Axis, d.Stated.V)
		c.line(x, f.y0, x, f.y1, stroke(page.Slate, 0.8))
		c.label(x+3, f.y0+7, "stated margin", smallSize, page.Slate, page.Start, false)
	}
	if d.Smallest.OK && d.Axis.Inside(d.Smallest.V) {
		x := f.x(d.Axis, d.Smallest.V)
		c.line(x, f.y0, x, f.y1, dashed(page.Black, 0.8))
		c.label(x+3, f.y0+17, "verdict steps here", smallSize, page.Black, page.Start, false)
	}
	if d.Alpha > 0 {
		y := f.y1 - up.At(d.Alpha)*(f.y1-f.y0)
		c.line(f.x0, y, f.x1, y, dashed(page.Black, 0.8))
		c.label(f.x1, y-3, "error level "+number.Error(d.Alpha), smallSize, page.Black, page.End, false)
	}
	c.bottomAxis(f, d.Axis)
	c.sideAxis(f, up, 4, "p of the claim")
	c.steps(f, d.Axis, up, d.X, d.P, stroke(page.Accent, 1.5))
	c.axisTitle(f, d.Axis, f.y1+24)
	return c.drawing()
}

// Hill is one belief as a curve: heights are relative to the highest.
type Hill struct {
	X, H   []float64
	Name   string
	Dashed bool
}

// Beliefs is the figure of stated beliefs before and after.
type Beliefs struct {
	Axis  Axis
	Band  Band
	Null  Point
	Hills []Hill
}

// Draw makes the picture.
func (d Beliefs) Draw() *page.Drawing {
	c := &canvas{w: Width, h: 118}
	f := frame{x0: edge + 10, x1: Width - edge - 10, y0: 20, y1: 86}
	top := 0.0
	for _, h := range d.Hills {
		for _, v := range h.H {
			if v > top && !math.IsInf(v, 0) {
				top = v
			}
		}
	}
	up := Axis{Lo: 0, Hi: math.Max(top*1.05, math.SmallestNonzeroFloat64*4)}
	c.band(f, d.Axis, d.Band, f.y0, f.y1)
	if d.Null.OK && d.Axis.Inside(d.Null.V) {
		x := f.x(d.Axis, d.Null.V)
		c.line(x, f.y0, x, f.y1, stroke(page.Slate, 0.7))
	}
	at := f.x0
	for _, h := range d.Hills {
		s := stroke(page.Accent, 1.6)
		if h.Dashed {
			s = dashed(page.Slate, 1.2)
		}
		c.steps(f, d.Axis, up, h.X, h.H, s)
		name := fitText(h.Name, smallSize, 110)
		if at+22+textWidth(name, smallSize) <= Width-edge {
			c.line(at, 10, at+18, 10, s)
			c.label(at+22, 12.5, name, smallSize, page.Black, page.Start, false)
		}
		at += 34 + textWidth(name, smallSize)
	}
	c.bottomAxis(f, d.Axis)
	c.axisTitle(f, d.Axis, f.y1+24)
	return c.drawing()
}

// Tally is how many results point toward a claim: one disc a result.
type Tally struct {
	Toward, With      int
	TowardText, Other string
}

// Draw makes the picture.
func (d Tally) Draw() *page.Drawing {
	c := &canvas{w: Width, h: 30}
	n := max(d.With, 1)
	room := Width - 2*edge
	step := math.Min(14, room/2/float64(n))
	r := math.Max(0.5, step*0.36)
	outline := stroke(page.Slate, 1)
	for i := range d.With {
		x := edge + step*(float64(i)+0.5)
		if i < d.Toward {
			c.add(page.Disc{X: x, Y: 12, R: r, Fill: page.Accent})
		} else {
			c.add(page.Disc{X: x, Y: 12, R: math.Max(0.2, r-0.5), Fill: page.Paper, Outline: &outline})
		}
	}
	c.label(edge+step*float64(d.With)+10, 15, d.TowardText, labelSize, page.Black, page.Start, false)
	c.label(edge, 27, d.Other, smallSize, page.Slate, page.Start, false)
	return c.drawing()
}
