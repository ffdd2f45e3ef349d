package pdf

import (
	"strings"

	"steelyard/render/page"
)

// cell is one cell, measured.
type cell struct {
	cs    []char
	whole float64 // width on one line
	word  float64 // width of the part that must stay together
	left  float64 // of decimal cells: up to the sign; negative for others
}

const (
	gutter   = 12.0
	rowSpace = 2.6
)

// table sets a table. Rows are not divided; the head is drawn again on each
// page, there as an artifact.
func (s *setter) table(b page.Table, fr frame, parent *elem) []piece {
	n := len(b.Columns)
	for _, r := range b.Rows {
		n = max(n, len(r.Cells))
	}
	n = max(n, len(b.Head))
	if n == 0 {
		return nil
	}
	cols := append([]page.Column(nil), b.Columns...)
	for len(cols) < n {
		cols = append(cols, page.Column{})
	}
	tab := parent.child("Table")
	var out []piece
	if len(b.Caption) > 0 {
		out = glued(s.text(b.Caption, captionStyle, frame{fr.x, min(fr.w, s.column+30)}, tab.child("Caption")))
		out[len(out)-1].keep = true
		out[len(out)-1].height += 3
	}
	var thead *elem
	body := tab
	if len(b.Head) > 0 {
		thead = tab.child("THead")
		body = tab.child("TBody")
	}
	heads := s.measureHead(b.Head, n, thead)
	rows := make([][]cell, len(b.Rows))
	tops := make([]*elem, len(b.Rows))
	for i, r := range b.Rows {
		tops[i] = body.child("TR")
		rows[i] = s.measureRow(r, cols, tops[i])
	}
	out = append(out, s.rows(b, fr, cols, heads, rows, thead, tops)...)
	if height(out) < 0.22*s.sheet.depth() {
		out = glued(out)
		out[len(out)-1].keep = len(b.Notes) > 0
	}
	if len(b.Notes) > 0 {
		notes := s.text(b.Notes, smallStyle, frame{fr.x, min(fr.w, s.column+30)}, parent.child("P"))
		if len(notes) > 0 {
			notes[0].before = 3.5
		}
		out = append(out, notes...)
	}
	out[0].before = 12
	out[len(out)-1].height += 6
	return out
}

// rows sets the head and the rows of a measured table; one whose widest words
// have no room is set smaller, as far as it stays readable.
func (s *setter) rows(b page.Table, fr frame, cols []page.Column, heads []cell, rows [][]cell, thead *elem, tops []*elem) []piece {
	g, tight := measure(cols, heads, rows, fr)
	k := 1.0
	if tight > 1 {
		k = max(1/tight, 0.8)
		fr.w /= k
		g, _ = measure(cols, heads, rows, fr)
	}
	var again *piece
	top := piece{height: 1, keep: true}
	if heads != nil {
		top = s.headPiece(g, heads, fr, thead)
		top.scale(fr.x, k)
		a := artifact(top)
		again = &a
	} else {
		top.rule(fr.x, 0, fr.w*k, 0.9, ink(page.Black))
	}
	out := []piece{top}
	for i := range rows {
		p := s.rowPiece(g, rows[i], fr, tops[i])
		last := i == len(rows)-1
		if last {
			p.rule(fr.x, p.height, fr.w, 0.9, ink(page.Black))
			p.height++
		} else {
			p.rule(fr.x, p.height, fr.w, 0.3, ink(page.Mist))
		}
		p.scale(fr.x, k)
		p.again = again
		p.keep = i == 0 && !last || i == len(rows)-2 || last && len(b.Notes) > 0
		out = append(out, p)
	}
	return out
}

func (s *setter) measureHead(head [][]page.Inline, n int, thead *elem) []cell {
	if len(head) == 0 {
		return nil
	}
	tr := thead.child("TR")
	out := make([]cell, n)
	for i := range out {
		el := tr.child("TH")
		el.attrs = "/O /Table /Scope /Column"
		if i < len(head) {
			out[i].cs = s.chars(head[i], headStyle, el)
		}
		out[i].whole, out[i].word = natural(out[i].cs)
		out[i].left = -1
		if len(out[i].cs) == 0 {
			out[i].cs = []char{{look: &look{el: el}}}
		}
	}
	return out
}

func (s *setter) measureRow(r page.Row, cols []page.Column, tr *elem) []cell {
	st := tableStyle
	if r.Strong {
		st.family = boldFamily
	}
	if r.Grey {
		st.colour = dim
		st.family = family{sansItalic, sansBold, sansItalic}
	}
	out := make([]cell, len(cols))
	for i := range out {
		el := tr.child("TD")
		out[i].left = -1
		var in []page.Inline
		if i < len(r.Cells) {
			in = r.Cells[i]
		}
		out[i].cs = s.chars(in, st, el)
		out[i].whole, out[i].word = natural(out[i].cs)
		if cols[i].Align == page.Decimal {
			if out[i].left = decimal(out[i].cs); out[i].whole-out[i].left > 48 {
				out[i].left = -1 // words after the number
			}
		}
		if len(out[i].cs) == 0 {
			out[i].cs = []char{{look: &look{el: el}}}
		}
	}
	return out
}

// decimal is the width of a number up to its decimal sign, or to the end of
// its digits when it has none; negative when the cell holds no number.
func decimal(cs []char) float64 {
	w, digits := 0.0, false
	for i, c := range cs {
		if c.r >= '0' && c.r <= '9' {
			digits = true
		} else if digits {
			if c.r == '.' || c.r != '\u00a0' && c.r != '\u2009' && c.r != '\u202f' && c.r != ',' {
				return w
			}
		} else if !strings.ContainsRune("−-+<>≤≥=±( \u00a0\u2009\u202f~≈", c.r) || i > 3 {
			return -1
		}
		w += c.w
	}
	if !digits {
		return -1
	}
	return w
}

func (s *setter) headPiece(g *grid, head []cell, fr frame, thead *elem) piece {
	p := piece{keep: true}
	lines := make([][]line, len(head))
	most := 0
	for i, c := range head {
		if c.cs[0].gid != 0 {
			lines[i] = wrap(c.cs, g.w[i])
		}
		most = max(most, len(lines[i]))
	}
	p.rule(fr.x, 0, fr.w, 0.9, ink(page.Black))
	top := 3.6
	p.height = top + float64(most)*headStyle.leading + 2.6
	for i, c := range head {
		p.items = append(p.items, item{kind: attachItem, el: c.cs[0].look.el})
		y := top + float64(most-len(lines[i]))*headStyle.leading // heads stand on the rule
		for _, l := range lines[i] {
			y += headStyle.leading
			p.put(s, l.cs, g.place(i, l.width, -1), y-headStyle.leading+headStyle.ascent())
		}
	}
	p.rule(fr.x, p.height, fr.w, 0.5, ink(page.Black))
	p.height += 0.8
	return p
}

func (s *setter) rowPiece(g *grid, row []cell, fr frame, tr *elem) piece {
	p := piece{height: tableStyle.leading + 2*rowSpace, items: make([]item, 0, 2*len(row)+2)}
	for i, c := range row {
		p.items = append(p.items, item{kind: attachItem, el: c.cs[0].look.el})
		if c.cs[0].gid == 0 {
			continue
		}
		left := c.left
		var lines []line
		if left >= 0 && c.whole <= g.w[i]+0.01 {
			lines = []line{{c.cs, c.whole}}
		} else {
			left = -1
			lines = wrap(c.cs, g.w[i])
		}
		y := rowSpace
		for _, l := range lines {
			p.put(s, l.cs, g.place(i, l.width, left), y+tableStyle.ascent())
			y += tableStyle.leading
		}
		p.height = max(p.height, y+rowSpace)
	}
	return p
}

// artifact is a copy that stays out of the structure.
func artifact(p piece) piece {
	q := p
	q.items = make([]item, 0, len(p.items))
	for _, it := range p.items {
		it.el = nil
		if it.kind != attachItem {
			q.items = append(q.items, it)
		}
	}
	return q
}
