package chart

import (
	"math"
	"strings"

	"steelyard/render/page"
)

// Row is one interval that hangs from the beam. Values are on the shown
// scale; an infinite limit is an open end.
type Row struct {
	Name      string // left of the plot; "" for none
	Est, Low  Point
	High      Point
	LowText   string // beside the ends and the estimate; "" for none
	HighText  string
	EstText   string
	Right     string  // right of the plot
	Weight    float64 // area of the estimate's mark, 0 to 1; 0: the plain mark
	Strong    bool    // pooled, or what decides
	Grey      bool    // shown, not analysed
	Wider     Point   // second, wider interval: low
	WiderHigh Point   // and high (prediction)
	Separate  bool    // a rule above this row
}

// Mark names a point on the beam: a margin, a limit.
type Mark struct {
	V     float64
	Label string
}

// Beam is the figure in which intervals hang from the effect axis. The band
// on the beam is the region too small to matter; the notch is the null.
type Beam struct {
	Axis   Axis
	Band   Band
	Null   Point
	Marks  []Mark
	Rows   []Row
	Names  float64 // width of the names on the left; 0: none
	Right  float64 // width of the texts on the right; 0: none
	Height float64 // of one row; 0: as needed
	Wide   float64 // of the picture; 0: the text block
}

// Geometry of the beam.
const (
	beamTop   = 14.0 // under the tick labels
	beamThick = 5.0
	sideRoom  = 44.0 // for the texts at the ends of an interval
)

// Draw makes the picture.
func (b Beam) Draw() *page.Drawing {
	row := b.Height
	if row == 0 {
		row = 22
	}
	markRoom := 0.0
	if len(b.Marks) > 0 {
		markRoom = 10
	}
	bottom := beamTop + beamThick + markRoom + row*float64(len(b.Rows)) + 4
	wide := b.Wide
	if wide == 0 {
		wide = Width
	}
	c := &canvas{w: wide, h: bottom + 14}
	room := min(sideRoom, 0.16*wide)
	f := frame{x0: edge + room, x1: wide - edge - room, y0: beamTop, y1: bottom}
	if b.Names > 0 {
		b.Names = b.widest(b.Names, func(r Row) string { return r.Name })
		f.x0 = edge + b.Names
	}
	if b.Right > 0 {
		b.Right = b.widest(b.Right, func(r Row) string { return r.Right })
		f.x1 = wide - edge - b.Right
	}
	b.ground(c, f)
	y := beamTop + beamThick + markRoom
	for i, r := range b.Rows {
		if r.Separate {
			c.line(edge, y, wide-edge, y, stroke(page.Mist, 0.6))
		}
		from := y
		if i == 0 {
			from = beamTop + beamThick
		}
		b.hang(c, f, r, y, row, from)
		y += row
	}
	c.axisTitle(f, b.Axis, bottom+9)
	return c.drawing()
}

// widest is the room that the texts beside the rows take: that of the longest,
// between 60 points and a most.
func (b Beam) widest(most float64, text func(Row) string) float64 {
	w := 0.0
	for _, r := range b.Rows {
		k := 1.0
		if r.Strong {
			k = 1.07 // bold
		}
		w = math.Max(w, k*textWidth(text(r), labelSize))
	}
	return math.Min(most, math.Max(60, w+14))
}

// side writes a name left of its row, on two lines where one is too short.
func (c *canvas) side(r Row, y, height, room float64, ink page.Ink) {
	if textWidth(r.Name, labelSize) <= room || height < 15 {
		c.label(edge, y+3, fitText(r.Name, labelSize, room), labelSize, ink, page.Start, r.Strong)
		return
	}
	first, rest := "", r.Name
	for _, word := range strings.SplitAfter(r.Name, " ") {
		if first != "" && textWidth(first+word, smallSize) > room {
			break
		}
		first, rest = first+word, rest[len(word):]
	}
	c.label(edge, y-1, fitText(strings.TrimSpace(first), smallSize, room), smallSize, ink, page.Start, r.Strong)
	c.label(edge, y+6.4, fitText(rest, smallSize, room), smallSize, ink, page.Start, r.Strong)
}

// ground draws beam, band, notch, ticks and marks.
func (b Beam) ground(c *canvas, f frame) {
	a := b.Axis
	c.band(f, a, b.Band, beamTop+beamThick, f.y1)
	c.add(page.Rect{X: f.x0, Y: beamTop, W: f.x1 - f.x0, H: beamThick, Fill: page.Slate})
	if b.Band.OK && b.Band.High >= a.Lo && b.Band.Low <= a.Hi {
		x0, x1 := f.x(a, b.Band.Low), f.x(a, b.Band.High)
		c.add(page.Rect{X: x0, Y: beamTop + 1.2, W: math.Max(0, x1-x0), H: beamThick - 2.4, Fill: page.Band})
		for _, v := range []float64{b.Band.Low, b.Band.High} {
			if a.Inside(v) {
				x := f.x(a, v)
				c.line(x, beamTop+beamThick, x, f.y1, dashed(page.Slate, 0.6))
			}
		}
	}
	if b.Null.OK && a.Inside(b.Null.V) {
		x := f.x(a, b.Null.V)
		c.add(page.Polygon{X: []float64{x - 4, x + 4, x}, Y: []float64{beamTop - 0.2, beamTop - 0.2, beamTop + beamThick - 0.5}, Fill: page.Paper})
		c.line(x, beamTop+beamThick-0.5, x, f.y1, stroke(page.Slate, 0.6))
	}
	for _, t := range ticksFor(a, f.x1-f.x0) {
		x := f.x(a, t.V)
		c.line(x, beamTop-2.5, x, beamTop, stroke(page.Slate, 0.6))
		c.label(x, beamTop-4, t.Text, smallSize, page.Slate, page.Middle, false)
	}
	b.namedMarks(c, f)
}

// namedMarks draws margins and limits under the beam, their names beside
// them and never over one another.
func (b Beam) namedMarks(c *canvas, f frame) {
	a := b.Axis
	y := beamTop + beamThick
	taken := math.Inf(-1)
	for _, m := range b.Marks {
		if !a.Inside(m.V) {
			continue
		}
		x := f.x(a, m.V)
		c.add(page.Polygon{X: []float64{x - 3, x + 3, x}, Y: []float64{y + 5, y + 5, y}, Fill: page.Black})
		c.line(x, y+5, x, f.y1, stroke(page.Black, 0.7))
		w := textWidth(m.Label, smallSize)
		anchor, at, left := page.Start, x+5, x+5
		if x+5+w > c.w-edge {
			anchor, at, left = page.End, x-5, x-5-w
		}
		if left > taken+3 {
			c.label(at, y+8, m.Label, smallSize, page.Black, anchor, false)
			taken = left + w
		}
	}
}

// hang draws one interval under the beam: in the row that begins at top, by
// hangers that begin at from.
func (b Beam) hang(c *canvas, f frame, r Row, top, height, from float64) {
	a := b.Axis
	y := top + height*0.45
	ink := page.Accent
	if r.Grey {
		ink = page.Faint
	}
	width := 1.4
	if r.Strong {
		width = 3.2
	}
	if b.Names > 0 {
		text := page.Black
		if r.Grey {
			text = page.Slate
		}
		c.side(r, y, height, b.Names-8, text)
	}
	if b.Right > 0 {
		c.label(c.w-edge, y+3, fitText(r.Right, labelSize, b.Right-8), labelSize, page.Black, page.End, r.Strong)
	}
	if r.Wider.OK && r.WiderHigh.OK {
		x0, x1 := f.x(a, r.Wider.V), f.x(a, r.WiderHigh.V)
		c.line(x0, y, x1, y, dashed(ink, 0.9))
		c.end(f, a, r.Wider, y, ink, -1, from)
		c.end(f, a, r.WiderHigh, y, ink, 1, from)
	}
	if r.Low.OK || r.High.OK {
		low, high := r.Low, r.High
		if !low.OK {
			low = Point{math.Inf(-1), true}
		}
		if !high.OK {
			high = Point{math.Inf(1), true}
		}
		x0, x1 := f.x(a, low.V), f.x(a, high.V)
		c.line(x0, y, x1, y, stroke(ink, width))
		c.end(f, a, low, y, ink, -1, from)
		c.end(f, a, high, y, ink, 1, from)
		apart := x1+6+textWidth(r.HighText, labelSize) <= c.w-edge && x0-6-textWidth(r.LowText, labelSize) >= edge
		if b.Names == 0 && (apart || c.w == Width) { // a narrow picture leaves the limits to the text
			b.cleared(c, f, x0-6-textWidth(r.LowText, labelSize), y, r.LowText)
			b.cleared(c, f, x1+6, y, r.HighText)
		}
	}
	b.estimate(c, f, r, y, ink)
}

// cleared writes a text from x on, over a ground that hides the lines of
// null, band and marks behind it.
func (b Beam) cleared(c *canvas, f frame, x, y float64, text string) {
	if text == "" {
		return
	}
	w := textWidth(text, labelSize)
	x = math.Max(edge, math.Min(x, c.w-edge-w))
	lines := []float64{}
	if b.Null.OK {
		lines = append(lines, f.x(b.Axis, b.Null.V))
	}
	for _, m := range b.Marks {
		lines = append(lines, f.x(b.Axis, m.V))
	}
	inside := false
	if b.Band.OK {
		x0, x1 := f.x(b.Axis, b.Band.Low), f.x(b.Axis, b.Band.High)
		lines = append(lines, x0, x1)
		inside = x0 < x && x+w < x1
	}
	for _, l := range lines {
		if l > x-1 && l < x+w+1 {
			fill := page.Paper
			if inside {
				fill = page.Band
			}
			c.add(page.Rect{X: x - 1, Y: y - 4.5, W: w + 2, H: 9.5, Fill: fill})
			break
		}
	}
	c.label(x, y+3, text, labelSize, page.Black, page.Start, false)
}

// end draws the end of an interval: a hanger up toward the beam where the
// limit exists and is on the axis, an arrow where it goes on.
func (c *canvas) end(f frame, a Axis, p Point, y float64, ink page.Ink, dir, from float64) {
	x := f.x(a, p.V)
	if math.IsInf(p.V, 0) || !a.Inside(p.V) {
		c.add(page.Polygon{X: []float64{x, x - dir*6, x - dir*6}, Y: []float64{y, y - 3.2, y + 3.2}, Fill: ink})
		return
	}
	c.line(x, from, x, y+2.5, stroke(ink, 1))
}

// estimate draws the weight that hangs at the estimate.
func (b Beam) estimate(c *canvas, f frame, r Row, y float64, ink page.Ink) {
	if !r.Est.OK || math.IsNaN(r.Est.V) {
		return
	}
	x := f.x(b.Axis, r.Est.V)
	radius := 3.6
	if r.Weight > 0 {
		radius = 1.6 + 4.6*math.Sqrt(math.Min(1, r.Weight))
	}
	outline := stroke(ink, 1)
	switch {
	case !b.Axis.Inside(r.Est.V):
	case r.Strong:
		// The pooled or deciding estimate is a plate, not a disc.
		c.add(page.Rect{X: x - 2, Y: y - 6, W: 4, H: 12, Fill: ink, Outline: &outline})
	case r.Grey:
		c.add(page.Disc{X: x, Y: y, R: radius, Fill: page.Paper, Outline: &outline})
	default:
		c.add(page.Disc{X: x, Y: y, R: radius, Fill: ink})
	}
	if b.Names == 0 && r.EstText != "" {
		c.label(x, y+13, r.EstText, labelSize, page.Black, page.Middle, true)
	}
}
