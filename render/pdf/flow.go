package pdf

import "steelyard/render/page"

// item is one thing to draw, placed from the upper left of its piece until
// the piece has its page.
type item struct {
	kind itemKind
	el   *elem // nil: an artifact
	x, y float64

	// text: y is the baseline
	face   faceID
	size   float64
	colour colour
	text   string  // two bytes a glyph
	kerns  []kern  // where glyphs stand off their advance
	w      float64 // width of the text
	actual string

	// rules, boxes and the marks of drawings
	h     float64
	mark  page.Mark
	scale float64 // of marks and shapes
	place int     // of destinations
	shape func(d *drawer, x, y, k float64)
}

// kern moves what follows the first at bytes of a text, in thousandths.
type kern struct {
	at int
	by int16
}

type itemKind uint8

const (
	textItem   itemKind = iota
	ruleItem            // a filled box w by h, x,y its upper left
	markItem            // a mark of a drawing, scaled
	shapeItem           // drawn by a function
	attachItem          // puts an element in the tree though it has no content here
	destItem            // the place an anchor or bookmark points to
)

// piece is a strip of the page that is not divided.
type piece struct {
	before float64 // space above, dropped at the top of a page
	height float64
	items  []item
	keep   bool   // stays with the next piece
	fresh  bool   // starts a page
	back   []band // behind the piece, from the top of its space
	again  *piece // drawn above this piece when it is the first on a page
}

// band is a background box that goes on through all pieces of its block.
type band struct {
	x, w   float64
	colour colour
	first  bool // the block starts here: the space above stays free
}

// frame is where blocks are set.
type frame struct{ x, w float64 }

func (p *piece) rule(x, y, w, h float64, c colour) {
	p.items = append(p.items, item{kind: ruleItem, x: x, y: y, w: w, h: h, colour: c})
}

// put draws a line of characters with its baseline at y.
func (p *piece) put(s *setter, cs []char, x, y float64) {
	var textRoom [256]byte
	var kernRoom [32]kern
	for i := 0; i < len(cs); {
		c := cs[i]
		j, w := i, 0.0
		start := x + float64(c.dx)
		text, kerns := textRoom[:0], kernRoom[:0]
		for ; j < len(cs); j++ {
			n := cs[j]
			if n.face != c.face || n.look != c.look && !same(n.look, c.look) || j > i && (n.dx != 0 || n.dy != 0 || c.dx != 0 || c.dy != 0) {
				break
			}
			text = append(text, byte(n.gid>>8), byte(n.gid))
			s.cuts[n.face].use(int(n.gid), n.r)
			w += n.w
			if n.kern != 0 {
				kerns = append(kerns, kern{len(text), n.kern})
			}
		}
		p.items = append(p.items, item{
			kind: textItem, el: c.look.el, x: start, y: y - c.look.rise - float64(c.dy), face: c.face, size: c.look.size,
			colour: c.look.colour, text: string(text), kerns: append([]kern(nil), kerns...), w: w, actual: c.look.actual,
		})
		x += w
		i = j
	}
}

func same(a, b *look) bool {
	return a.el == b.el && a.size == b.size && a.rise == b.rise && a.colour == b.colour && a.actual == "" && b.actual == ""
}

// ascent is where the baseline of a first line stands below its top.
func (t textStyle) ascent() float64 { return t.leading/2 + t.size*0.34 }

// text sets inlines as pieces of one line each, with no line left alone at
// the foot or head of a page.
func (s *setter) text(in []page.Inline, st textStyle, fr frame, el *elem) []piece {
	cs := s.chars(in, st, el)
	lines := settle(cs, fr.w, st.family == boldFamily)
	out := make([]piece, len(lines))
	for i, l := range lines {
		out[i].height = st.leading
		out[i].keep = i == 0 && len(lines) > 1 || i == len(lines)-2
		out[i].put(s, l.cs, fr.x, st.ascent())
	}
	s.spare = cs
	return out
}

// block sets inlines as one piece, for cells and labels.
func (s *setter) block(in []page.Inline, st textStyle, fr frame, el *elem) piece {
	var p piece
	cs := s.chars(in, st, el)
	p.add(s, wrap(cs, fr.w), st, fr.x, 0)
	s.spare = cs
	return p
}

// add puts lines below what the piece holds and returns the new height.
func (p *piece) add(s *setter, lines []line, st textStyle, x, gap float64) float64 {
	if len(lines) == 0 {
		return p.height
	}
	p.height += gap
	for _, l := range lines {
		p.put(s, l.cs, x, p.height+st.ascent())
		p.height += st.leading
	}
	return p.height
}

// over lays q's items on p, moved; p's height grows to hold them.
func (p *piece) over(q piece, dx, dy float64) {
	for _, it := range q.items {
		it.x += dx
		it.y += dy
		p.items = append(p.items, it)
	}
	p.height = max(p.height, dy+q.height)
}

// scale makes a piece smaller about its left edge x0.
func (p *piece) scale(x0, k float64) {
	if k == 1 {
		return
	}
	p.before *= k
	p.height *= k
	for i := range p.items {
		it := &p.items[i]
		it.x, it.y = x0+(it.x-x0)*k, it.y*k
		it.size, it.w, it.h, it.scale = it.size*k, it.w*k, it.h*k, it.scale*k
	}
	for i := range p.back {
		b := &p.back[i]
		b.x, b.w = x0+(b.x-x0)*k, b.w*k
	}
	if p.again != nil {
		again := *p.again
		again.items = append([]item(nil), again.items...)
		again.scale(x0, k)
		p.again = &again
	}
}

// glued keeps all pieces together.
func glued(ps []piece) []piece {
	for i := range ps[:max(0, len(ps)-1)] {
		ps[i].keep = true
	}
	return ps
}

func height(ps []piece) float64 {
	h := 0.0
	for i := range ps {
		h += ps[i].before + ps[i].height
	}
	return h
}
