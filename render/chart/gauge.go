package chart

import (
	"math"

	"steelyard/render/page"
)

// Gauge is one number against the value at which an assumption holds exactly.
type Gauge struct {
	Name      string  // left of the line
	V, Centre float64 // the number and the value it is held against
	Reach     float64 // the line goes so far to each side; on a log line by this factor
	Log       bool
	Below     string // what lies to the left and to the right, in a few words
	Above     string
	Text      string // the number
}

// Gauges is the figure of spread and shape at a glance: a line a number, the
// notch where the assumption holds exactly, the disc what the data show.
type Gauges struct{ Rows []Gauge }

// Draw makes the picture.
func (d Gauges) Draw() *page.Drawing {
	const row = 13.0
	c := &canvas{w: Width, h: row*float64(len(d.Rows)) + 6}
	x0, x1 := 208.0, 338.0
	mid := (x0 + x1) / 2
	for i, g := range d.Rows {
		y := row*(float64(i)+0.5) + 2
		c.label(edge, y+2.6, fitText(g.Name, labelSize, 122), labelSize, page.Black, page.Start, false)
		c.label(x0-8, y+2.4, fitText(g.Below, smallSize, 70), smallSize, page.Slate, page.End, false)
		c.label(x1+8, y+2.4, fitText(g.Above, smallSize, 74), smallSize, page.Slate, page.Start, false)
		c.label(Width-edge, y+2.6, g.Text, labelSize, page.Black, page.End, false)
		c.line(x0, y, x1, y, stroke(page.Slate, 1.2))
		c.add(page.Polygon{X: []float64{mid - 3.4, mid + 3.4, mid}, Y: []float64{y - 5.4, y - 5.4, y - 0.6}, Fill: page.Slate})
		at := g.place()
		x := mid + at*(x1-mid)
		switch {
		case at >= 1: // an arrow where it goes on
			c.add(page.Polygon{X: []float64{x1 - 2, x1 - 2, x1 + 4}, Y: []float64{y - 3.4, y + 3.4, y}, Fill: page.Accent})
		case at <= -1:
			c.add(page.Polygon{X: []float64{x0 + 2, x0 + 2, x0 - 4}, Y: []float64{y - 3.4, y + 3.4, y}, Fill: page.Accent})
		default:
			c.add(page.Disc{X: x, Y: y, R: 3, Fill: page.Accent})
		}
	}
	return c.drawing()
}

// place is where the number stands between −1 and 1, the centre at 0.
func (g Gauge) place() float64 {
	at := (g.V - g.Centre) / g.Reach
	if g.Log {
		at = math.Log(g.V/g.Centre) / math.Log(g.Reach)
	}
	switch {
	case math.IsNaN(at):
		return 0
	case at > 1:
		return 1
	case at < -1:
		return -1
	}
	return at
}
