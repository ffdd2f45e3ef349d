package chart

import (
	"math"

	"steelyard/render/page"
)

// Group is what a figure shows of one group.
type Group struct {
	Name  string
	Mean  Point
	SD    float64 // half of the bar; 0: none
	Share Point   // 0 to 1, in place of a mean
	Text  string  // right of the plot
	Grey  bool
}

// Groups is the figure of group summaries: means with one standard deviation
// to each side, or shares as filled bars.
type Groups struct {
	Axis Axis // of the means or shares; that of shares begins at 0
	Rows []Group
}

// Draw makes the picture.
func (g Groups) Draw() *page.Drawing {
	const row = 15.0
	c := &canvas{w: Width, h: 12 + row*float64(len(g.Rows)) + 30}
	f := frame{x0: edge + 150, x1: Width - edge - 120, y0: 8, y1: 8 + row*float64(len(g.Rows))}
	hairline := stroke(page.Slate, 0.6)
	for i, r := range g.Rows {
		y := f.y0 + row*(float64(i)+0.5)
		ink, fill := page.Accent, page.Band
		if r.Grey {
			ink, fill = page.Faint, page.Paper
		}
		c.label(edge, y+3, fitText(r.Name, labelSize, 142), labelSize, page.Black, page.Start, false)
		c.label(Width-edge, y+3, fitText(r.Text, labelSize, 112), labelSize, page.Black, page.End, false)
		switch {
		case r.Share.OK:
			c.add(page.Rect{X: f.x0, Y: y - 4, W: g.Axis.At(r.Share.V) * (f.x1 - f.x0), H: 8, Fill: ink})
		case r.Mean.OK && !math.IsNaN(r.Mean.V):
			if r.SD > 0 && !math.IsInf(r.SD, 0) {
				x0, x1 := f.x(g.Axis, r.Mean.V-r.SD), f.x(g.Axis, r.Mean.V+r.SD)
				c.add(page.Rect{X: x0, Y: y - 4, W: x1 - x0, H: 8, Fill: fill, Outline: &hairline})
			}
			x := f.x(g.Axis, r.Mean.V)
			c.line(x, y-5.5, x, y+5.5, stroke(ink, 2))
		}
	}
	c.bottomAxis(f, g.Axis)
	c.axisTitle(f, g.Axis, f.y1+23)
	return c.drawing()
}
