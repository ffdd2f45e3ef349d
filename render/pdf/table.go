package pdf

import (
	"math"
	"sort"
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

// grid is a table being measured.
type grid struct {
	cols []page.Column
	x    []float64
	w    []float64
	dec  []float64 // widest left part of decimal columns
	rest []float64 // widest right part
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
		out = glued(s.text(b.Caption, captionStyle, frame{fr.x, min(fr.w, readable+30)}, tab.child("Caption")))
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
	g, tight := measure(cols, heads, rows, fr)
	full, k := fr, 1.0
	if tight > 1 { // smaller type, as far as it stays readable
		k = max(1/tight, 0.8)
		fr.w = full.w / k
		g, _ = measure(cols, heads, rows, fr)
	}
	var again *piece
	if heads != nil {
		p := s.headPiece(g, heads, fr, thead)
		p.scale(fr.x, k)
		a := artifact(p)
		again = &a
		out = append(out, p)
	} else {
		p := piece{height: 1, keep: true}
		p.rule(fr.x, 0, full.w, 0.9, ink(page.Black))
		out = append(out, p)
	}
	for i := range rows {
		p := s.rowPiece(g, rows[i], fr, tops[i])
		last := i == len(rows)-1
		if last {
			p.rule(fr.x, p.height, fr.w, 0.9, ink(page.Black))
			p.height += 1
		} else {
			p.rule(fr.x, p.height, fr.w, 0.3, ink(page.Mist))
		}
		p.scale(fr.x, k)
		p.again = again
		p.keep = i == 0 && !last || i == len(rows)-2 || last && len(b.Notes) > 0
		out = append(out, p)
	}
	fr = full
	if height(out) < 0.34*s.sheet.depth() {
		out = glued(out)
		out[len(out)-1].keep = len(b.Notes) > 0
	}
	if len(b.Notes) > 0 {
		notes := s.text(b.Notes, smallStyle, frame{fr.x, min(fr.w, readable+30)}, parent.child("P"))
		if len(notes) > 0 {
			notes[0].before = 3.5
		}
		out = append(out, notes...)
	}
	out[0].before = 12
	out[len(out)-1].height += 6
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

// measure shares the width out: columns with a share get it, the others what
// their cells need, at least the widest word. Where the widest words have no
// room, the grid is wider than the frame and tight says by how much.
func measure(cols []page.Column, head []cell, rows [][]cell, fr frame) (g *grid, tight float64) {
	n := len(cols)
	g = &grid{cols: cols, x: make([]float64, n), w: make([]float64, n), dec: make([]float64, n), rest: make([]float64, n)}
	whole, word := make([]float64, n), make([]float64, n)
	for i := range cols {
		for _, r := range rows {
			c := r[i]
			whole[i], word[i] = max(whole[i], c.whole), max(word[i], c.word)
			if c.left >= 0 {
				g.dec[i], g.rest[i] = max(g.dec[i], c.left), max(g.rest[i], c.whole-c.left)
			}
		}
		whole[i] = max(whole[i], g.dec[i]+g.rest[i])
		if cols[i].Align == page.Decimal {
			word[i] = max(word[i], g.dec[i]+g.rest[i])
		}
		if head != nil {
			word[i] = max(word[i], head[i].word)
			whole[i] = max(whole[i], min(head[i].whole, max(word[i], 72)))
		}
	}
	room, least := fr.w-gutter*float64(n-1), 0.0
	for i, c := range cols {
		if c.Share > 0 {
			whole[i] = min(c.Share, 1) * fr.w
			word[i] = whole[i]
		}
		least += word[i]
	}
	tight = (least + fr.w - room) / fr.w
	share(g.w, whole, word, max(room, 8*float64(n)), cost(rows))
	x := fr.x
	for i := range g.x {
		g.x[i] = x
		x += g.w[i] + gutter
	}
	return g, tight
}

// share fills w. When all cells fit on one line the spare room goes to the
// columns in proportion to their width. Otherwise the narrowest columns stay
// on one line and the others wrap to about the same depth; how many stay is
// tried out, and the division with the lowest cost taken.
func share(w, whole, word []float64, room float64, cost func([]float64) float64) {
	want, least := 0.0, 0.0
	for i := range whole {
		want += whole[i]
		least += word[i]
	}
	if want <= room || least > room {
		for i := range w {
			if want <= room {
				w[i] = whole[i] * room / max(want, 1)
			} else {
				w[i] = word[i] * room / least
			}
		}
		return
	}
	order := make([]int, len(whole))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool { return whole[order[a]] < whole[order[b]] })
	stiff := append([]float64(nil), word...)
	try, best := make([]float64, len(w)), math.Inf(1)
	for n := 0; ; n++ {
		depth := lines(whole, stiff, room)
		if depth > 1e3 {
			return
		}
		total := 0.0
		for i := range try {
			try[i] = max(stiff[i], whole[i]/depth)
			total += try[i]
		}
		for i := range try {
			try[i] *= room / total
		}
		if c := cost(try); c <= best {
			best = c
			copy(w, try)
		}
		if n == len(order) {
			return
		}
		stiff[order[n]] = whole[order[n]]
	}
}

// cost is about how many lines the rows take at column widths w.
func cost(rows [][]cell) func(w []float64) float64 {
	return func(w []float64) float64 {
		sum := 0.0
		for _, r := range rows {
			most := 1.0
			for i, c := range r {
				if c.whole > w[i]+0.01 {
					most = max(most, math.Ceil(c.whole*1.04/w[i]))
				}
			}
			sum += most
		}
		return sum
	}
}

// lines is the smallest depth at which columns no narrower than least have
// room together; large when they have none at any.
func lines(whole, least []float64, room float64) float64 {
	need := func(depth float64) float64 {
		sum := 0.0
		for i := range whole {
			sum += max(least[i], whole[i]/depth)
		}
		return sum
	}
	lo, hi := 1.0, 64.0
	if need(hi) > room {
		return 1e6
	}
	for range 24 {
		if m := (lo + hi) / 2; need(m) > room {
			lo = m
		} else {
			hi = m
		}
	}
	return hi
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

// place is where a line of a cell starts.
func (g *grid) place(i int, width, left float64) float64 {
	switch g.cols[i].Align {
	case page.Left:
	case page.Right:
		return g.x[i] + g.w[i] - width
	case page.Center:
		return g.x[i] + (g.w[i]-width)/2
	case page.Decimal:
		if left >= 0 {
			return g.x[i] + g.w[i] - g.rest[i] - left
		}
		return g.x[i] + g.w[i] - width
	}
	return g.x[i]
}

func (s *setter) rowPiece(g *grid, row []cell, fr frame, tr *elem) piece {
	p := piece{height: tableStyle.leading + 2*rowSpace}
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
	q.items = nil
	for _, it := range p.items {
		it.el = nil
		if it.kind != attachItem {
			q.items = append(q.items, it)
		}
	}
	return q
}
