package pdf

import (
	"fmt"
	"math"

	"steelyard/render/page"
)

// setter turns a document's blocks into pieces.
type setter struct {
	doc   *page.Document
	sheet sheet
	cuts  [faceCount]*cut

	root    *elem
	titled  bool    // the document has a title heading, so sections are one level down
	column  float64 // widest line of running text; tables and figures use the whole measure
	places  []place
	anchors map[string]int // into places
	links   []*elem
	spare   []char // room for the next text: what was set from it is drawn
	level   int    // of the last heading in the tree

	where   string
	refused []BadRune
	err     error
}

// place is a heading that bookmarks and links point to.
type place struct {
	title string
	level int
	page  int
	y     float64 // from the top
}

func newSetter(doc *page.Document) *setter {
	s := &setter{doc: doc, sheet: sheetOf(doc.Paper), anchors: map[string]int{}, where: "the title page"}
	s.column = readable
	s.root = &elem{role: "Document", joined: true}
	for _, b := range doc.Blocks {
		if h, ok := b.(page.Heading); ok && h.Level == 0 {
			s.titled = true
		}
	}
	return s
}

// flow sets the whole document. What stands before the first page break is
// page one, which is made up to a sixth smaller when it then fits.
func (s *setter) flow() []piece {
	fr := frame{s.sheet.left, s.sheet.measure()}
	for i, b := range s.doc.Blocks {
		if _, ok := b.(page.PageBreak); ok {
			return append(s.pageOne(s.doc.Blocks[:i], fr), s.blocks(s.doc.Blocks[i:], fr, s.root)...)
		}
	}
	return s.blocks(s.doc.Blocks, fr, s.root)
}

func (s *setter) pageOne(bs []page.Block, fr frame) []piece {
	ps := s.blocks(bs, fr, s.root)
	depth := s.sheet.depth()
	h := height(ps)
	if h <= depth {
		return ps
	}
	for k := min(0.98, 1.06*math.Sqrt(depth/h)); k >= 1-1.0/6; k -= 0.02 {
		// Elements join the tree when drawn, so those of a trial are forgotten.
		s.restart()
		s.column = readable / k
		small := s.blocks(bs, frame{fr.x, fr.w / k}, s.root)
		s.column = readable
		if height(small)*k <= depth {
			for i := range small {
				small[i].scale(fr.x, k)
			}
			return small
		}
	}
	s.restart()
	return s.blocks(bs, fr, s.root)
}

// restart forgets what a trial has noted.
func (s *setter) restart() {
	s.places, s.links, s.anchors, s.level = nil, nil, map[string]int{}, 0
}

// link makes the element of a link.
func (s *setter) link(parent *elem, l page.Link) *elem {
	e := parent.child("Link")
	e.target, e.alt = l.Target, s.clean(l.Text)
	s.links = append(s.links, e)
	return e
}

// blocks sets a list of blocks below one another.
func (s *setter) blocks(bs []page.Block, fr frame, parent *elem) []piece {
	var out []piece
	fresh, headed := false, false
	for _, b := range bs {
		var ps []piece
		switch b := b.(type) {
		case page.Heading:
			ps = s.heading(b, fr, parent)
		case page.Paragraph:
			ps = s.paragraph(b, fr, parent)
		case page.List:
			ps = s.list(b, fr, parent)
		case page.Table:
			ps = s.table(b, fr, parent)
		case page.Facts:
			ps = s.facts(b, fr, parent)
		case page.Figure:
			ps = s.figure(b, fr, parent)
		case page.Verdict:
			ps = s.verdict(b, fr, parent)
		case page.Callout:
			ps = s.callout(b, fr, parent)
		case page.Verbatim:
			ps = s.verbatim(b, fr, parent)
		case page.Signatures:
			ps = s.signatures(b, fr, parent)
		case page.PageBreak:
			fresh = true
			continue
		default:
			if s.err == nil {
				s.err = fmt.Errorf("pdf: block of unknown type %T", b)
			}
			continue
		}
		if len(ps) > 0 && fresh {
			ps[0].fresh, fresh = true, false
		}
		h, head := b.(page.Heading)
		if head && headed && len(ps) > 0 && h.Level > 1 {
			ps[0].before = min(ps[0].before, 7) // headings that follow one another stand close
		}
		headed = head && h.Level > 0
		out = append(out, ps...)
	}
	return out
}

func (s *setter) heading(h page.Heading, fr frame, parent *elem) []piece {
	level := h.Level
	if s.titled {
		level++
	}
	el := parent.child("H")
	title := s.clean(page.Plain(h.Text))
	s.where = fmt.Sprintf("the section %q", title)
	st, before, after := h1Style, 26.0, 5.0
	switch h.Level {
	case 0:
		st, before, after = titleStyle, 0, 4
		s.where = "the title page"
	case 2:
		st, before, after = h2Style, 17, 2.5
	case 3:
		st, before, after = h3Style, 12, 1
	}
	ps := s.text(h.Text, st, fr, el)
	if len(ps) == 0 {
		return nil
	}
	s.level = max(1, min(level, s.level+1)) // no level of the tree is left out
	el.role = fmt.Sprintf("H%d", s.level)
	p := piece{before: before}
	if h.Level == 1 {
		p.rule(fr.x, 0, fr.w, 0.8, ink(page.Black))
		p.height = 6
	}
	dest := item{kind: destItem, place: len(s.places), y: -4}
	if h.Anchor != "" {
		s.anchors[h.Anchor] = len(s.places)
	}
	s.places = append(s.places, place{title: title, level: h.Level})
	p.items = append(p.items, dest)
	for _, l := range ps {
		p.over(l, 0, p.height)
	}
	p.height += after
	p.keep = true
	return []piece{p}
}

func (s *setter) paragraph(b page.Paragraph, fr frame, parent *elem) []piece {
	st, before, role := bodyStyle, 6.0, "P"
	switch b.Style {
	case page.Body:
	case page.Lead:
		st, before = leadStyle, 7
	case page.Small:
		st, before = smallStyle, 4
	case page.Quote:
		st, before, role = quoteStyle, 8, "BlockQuote"
	}
	el := parent.child(role)
	fr.w = min(fr.w, s.column*max(1, st.size/bodyStyle.size))
	if b.Style == page.Quote {
		fr.x, fr.w = fr.x+16, fr.w-28
		el = el.child("P")
	}
	ps := s.text(b.Text, st, fr, el)
	if len(ps) == 0 {
		return nil
	}
	ps[0].before = before
	if b.Style == page.Quote {
		for i := range ps {
			ps[i].back = append(ps[i].back, band{x: fr.x - 12, w: 1.4, colour: ink(page.Mist), first: i == 0})
		}
	}
	return ps
}

func (s *setter) list(b page.List, fr frame, parent *elem) []piece {
	l := parent.child("L")
	l.attrs = "/O /List /ListNumbering /Disc"
	indent := 13.0
	if b.Ordered {
		l.attrs = "/O /List /ListNumbering /Decimal"
		indent = 17
	}
	fr.w = min(fr.w, s.column)
	var out []piece
	for i, item := range b.Items {
		li := l.child("LI")
		mark := "•"
		if b.Ordered {
			mark = fmt.Sprintf("%d.", i+1)
		}
		label := s.chars(page.T(mark+" "), bodyStyle, li.child("Lbl"))
		ps := s.text(item, bodyStyle, frame{fr.x + indent, fr.w - indent}, li.child("LBody"))
		if len(ps) == 0 {
			continue
		}
		var head piece
		head.put(s, label, fr.x+1, bodyStyle.ascent())
		head.height, head.keep = ps[0].height, ps[0].keep
		head.over(ps[0], 0, 0)
		head.before = 3
		if i == 0 {
			head.before, head.keep = 5, true
		}
		ps[0] = head
		out = append(out, ps...)
	}
	return out
}

func (s *setter) verbatim(b page.Verbatim, fr frame, parent *elem) []piece {
	st := textStyle{family{mono, monoBold, mono}, 7.8, 10.8, ink(page.Black)}
	div := parent.child("Div")
	var out []piece
	for _, l := range b.Lines {
		code := div.child("P").child("Code")
		cs := s.run(nil, expand(l), look{face: mono, size: st.size, colour: st.colour, el: code, code: true})
		breaks(cs)
		for i := range cs { // lines are set as written: spaces are no glue
			if cs[i].after == glue {
				cs[i].after = allowed
			}
		}
		if len(cs) == 0 {
			out = append(out, piece{height: st.leading})
			continue
		}
		x, w := fr.x+8, fr.w-16
		first := wrap(cs, w)
		lines := first[:1]
		if rest := cs[len(first[0].cs):]; len(rest) > 0 {
			lines = append(lines, wrap(rest, w-14)...)
		}
		for i, ln := range lines {
			p := piece{height: st.leading}
			dx := 0.0
			if i > 0 {
				dx = 14
			}
			p.put(s, ln.cs, x+dx, st.ascent())
			out = append(out, p)
		}
	}
	if len(out) == 0 {
		return nil
	}
	return s.boxed(out, 7, 5, []band{{x: fr.x, w: fr.w, colour: tint}})
}

// tint is the ground of set-apart boxes, lighter than Band.
var tint = colour{0xf3, 0xf5, 0xf7}

// expand turns tabs into spaces up to columns of eight.
func expand(l string) string {
	var out []rune
	for _, r := range l {
		if r != '\t' {
			out = append(out, r)
			continue
		}
		for ok := true; ok; ok = len(out)%8 != 0 {
			out = append(out, ' ')
		}
	}
	return string(out)
}

// boxed puts bands behind pieces, with room above and below, and keeps two
// pieces together at each end.
func (s *setter) boxed(ps []piece, before, pad float64, bands []band) []piece {
	out := append([]piece{{before: before, height: pad, keep: true}}, ps...)
	if n := len(out); n > 2 {
		out[1].keep = true
		out[n-2].keep = true
	}
	out[len(out)-1].keep = true
	out = append(out, piece{height: pad})
	if height(out) < 0.3*s.sheet.depth() {
		out = glued(out)
	}
	for i := range out {
		under := make([]band, 0, len(bands)+len(out[i].back))
		for _, b := range bands {
			b.first = i == 0
			under = append(under, b)
		}
		out[i].back = append(under, out[i].back...)
	}
	return out
}

func (s *setter) callout(b page.Callout, fr frame, parent *elem) []piece {
	sect := parent.child("Sect")
	bar := ink(page.Slate)
	switch b.Kind {
	case page.Note:
	case page.Caution:
		bar = ink(page.Warn)
	case page.Warning:
		bar = ink(page.Black)
	}
	in := frame{fr.x + 30, fr.w - 42}
	var ps []piece
	if b.Title != "" {
		st := textStyle{boldFamily, 9.4, 13, bar}
		if b.Kind == page.Note {
			st.colour = ink(page.Black)
		}
		ps = append(ps, glued(s.text(page.T(b.Title), st, in, sect.child("P")))...)
	}
	body := s.blocks(b.Blocks, in, sect)
	if len(body) > 0 {
		if len(ps) == 0 {
			body[0].before = 0
		} else {
			body[0].before = min(body[0].before, 2)
			ps[len(ps)-1].keep = true
		}
	}
	ps = append(ps, body...)
	if len(ps) == 0 {
		return nil
	}
	kind := b.Kind
	ps[0].items = append(ps[0].items, item{kind: shapeItem, x: fr.x + 9, y: ps[0].height/2 - 6, scale: 1, shape: func(d *drawer, x, y, k float64) { d.sign(kind, x, y, k) }})
	return s.boxed(ps, 10, 8, []band{{x: fr.x, w: fr.w, colour: tint}, {x: fr.x, w: 2.2, colour: bar}})
}
