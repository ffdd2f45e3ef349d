package pdf

import (
	"math"

	"github.com/go-pdf/fpdf"

	"steelyard/render/page"
)

// verdictMark draws the mark beside a verdict's word: a short beam from which
// a different thing hangs for every tone, so that the mark is told apart
// without colour. Upper left at x, y; about 20 wide, 19 high.
func (d *drawer) verdictMark(t page.Tone, c colour, x, y, k float64) {
	d.setFill(c)
	d.f.Rect(x, y+2.2*k, 20*k, 1.8*k, "F")
	cx, cy := x+10*k, y+11.6*k
	d.f.Rect(cx-0.5*k, y+4*k, k, 3.4*k, "F")
	switch t {
	case page.Established: // a full weight
		d.f.Circle(cx, cy, 4.8*k, "F")
	case page.Contradicted: // a weight on its point
		d.f.Polygon([]fpdf.PointType{{X: cx - 5.2*k, Y: cy - 4.4*k}, {X: cx + 5.2*k, Y: cy - 4.4*k}, {X: cx, Y: cy + 5*k}}, "F")
	case page.Open: // a ring
		d.ring(cx, cy, 4.1*k, 1.4*k, c)
	case page.Suggested: // a ring with a point
		d.ring(cx, cy, 4.3*k, k, c)
		d.setFill(c)
		d.f.Circle(cx, cy, 1.9*k, "F")
	case page.Neutral: // nothing yet
		d.f.Rect(cx-4.6*k, cy-0.8*k, 9.2*k, 1.6*k, "F")
	}
}

func (d *drawer) ring(x, y, r, width float64, c colour) {
	d.f.SetDrawColor(int(c.r), int(c.g), int(c.b))
	d.f.SetLineWidth(width)
	if d.dash {
		d.f.SetDashPattern([]float64{}, 0)
		d.dash = false
	}
	d.f.Circle(x, y, r, "D")
	d.known = false
}

// sign draws the mark of a callout, 12 by 12.
func (d *drawer) sign(kind page.CalloutKind, x, y, k float64) {
	cx, cy := x+6*k, y+6*k
	switch kind {
	case page.Note:
		c := ink(page.Slate)
		d.ring(cx, cy, 5.2*k, k, c)
		d.setFill(c)
		d.f.Circle(cx, cy-2.5*k, 0.75*k, "F")
		d.f.Rect(cx-0.6*k, cy-k, 1.2*k, 4*k, "F")
	case page.Caution:
		d.exclaim(cx, cy, k, 5.8, 3, math.Pi/2, ink(page.Warn))
	case page.Warning:
		d.exclaim(cx, cy, k, 6, 8, math.Pi/8, ink(page.Black))
	}
}

// exclaim is a filled regular polygon with a light exclamation mark.
func (d *drawer) exclaim(cx, cy, k, r float64, n int, turn float64, c colour) {
	pts := make([]fpdf.PointType, n)
	for i := range pts {
		a := turn + 2*math.Pi*float64(i)/float64(n)
		pts[i] = fpdf.PointType{X: cx + r*k*math.Cos(a), Y: cy - r*k*math.Sin(a)}
	}
	d.setFill(c)
	d.f.Polygon(pts, "F")
	d.setFill(ink(page.Paper))
	d.f.Rect(cx-0.6*k, cy-2.9*k, 1.2*k, 3.7*k, "F")
	d.f.Circle(cx, cy+1.9*k, 0.7*k, "F")
}
