package pdf

import (
	"math"

	"github.com/go-pdf/fpdf"

	"steelyard/render/page"
)

// verdictMark draws the mark beside a verdict's word: a short beam from which
// a different thing hangs for every tone, so that the mark is told apart
// without colour. Upper left at x, y; about 20 wide, 19 high.
func (d *drawer) verdictMark(t page.Tone, c colour, x, y float64) {
	d.setFill(c)
	d.f.Rect(x, y+2.2, 20, 1.8, "F")
	cx, cy := x+10, y+11.6
	d.f.Rect(cx-0.5, y+4, 1, 3.4, "F")
	switch t {
	case page.Established: // a full weight
		d.f.Circle(cx, cy, 4.8, "F")
	case page.Contradicted: // a weight cut through
		d.f.Polygon([]fpdf.PointType{{X: cx - 5.2, Y: cy - 4.4}, {X: cx + 5.2, Y: cy - 4.4}, {X: cx, Y: cy + 5}}, "F")
	case page.Open: // a ring
		d.ring(cx, cy, 4.1, 1.4, c)
	case page.Neutral: // nothing yet
		d.f.Rect(cx-4.6, cy-0.8, 9.2, 1.6, "F")
	}
}

func (d *drawer) ring(x, y, r, width float64, c colour) {
	d.f.SetDrawColor(int(c.r), int(c.g), int(c.b))
	d.f.SetLineWidth(width)
	d.f.Circle(x, y, r, "D")
	d.known = false
}

// sign draws the mark of a callout, 12 by 12.
func (d *drawer) sign(k page.CalloutKind, x, y float64) {
	cx, cy := x+6, y+6
	switch k {
	case page.Note:
		c := ink(page.Slate)
		d.ring(cx, cy, 5.2, 1, c)
		d.setFill(c)
		d.f.Circle(cx, cy-2.5, 0.75, "F")
		d.f.Rect(cx-0.6, cy-1, 1.2, 4, "F")
	case page.Caution:
		d.exclaim(cx, cy, 5.8, 3, math.Pi/2, ink(page.Warn))
	case page.Warning:
		d.exclaim(cx, cy, 6, 8, math.Pi/8, ink(page.Black))
	}
}

// exclaim is a filled regular polygon with a light exclamation mark.
func (d *drawer) exclaim(cx, cy, r float64, n int, turn float64, c colour) {
	pts := make([]fpdf.PointType, n)
	for i := range pts {
		a := turn + 2*math.Pi*float64(i)/float64(n)
		pts[i] = fpdf.PointType{X: cx + r*math.Cos(a), Y: cy - r*math.Sin(a)}
	}
	d.setFill(c)
	d.f.Polygon(pts, "F")
	d.setFill(ink(page.Paper))
	d.f.Rect(cx-0.6, cy-2.9, 1.2, 3.7, "F")
	d.f.Circle(cx, cy+1.9, 0.7, "F")
}
