package pdf

import (
	"fmt"
	"math"
	"strings"

	"steelyard/render/page"
)

// facts sets labels with their values, in rows of one or two.
func (s *setter) facts(b page.Facts, fr frame, parent *elem) []piece {
	cols := 1
	if b.Columns == 2 {
		cols = 2
	}
	l := parent.child("L")
	l.attrs = "/O /List /ListNumbering /None"
	const gap = 22.0
	w := (fr.w - gap*float64(cols-1)) / float64(cols)
	labelW := make([]float64, cols)
	labels := make([][]char, len(b.Items))
	lis := make([]*elem, len(b.Items))
	for i, it := range b.Items {
		lis[i] = l.child("LI")
		labels[i] = s.chars(page.T(it.Label+" "), labelStyle, lis[i].child("Lbl"))
		whole, _ := natural(labels[i])
		labelW[i%cols] = max(labelW[i%cols], whole)
	}
	for i := range labelW {
		labelW[i] = min(labelW[i]+9, 0.42*w)
	}
	var out []piece
	for i := 0; i < len(b.Items); i += cols {
		var p piece
		for c := 0; c < cols && i+c < len(b.Items); c++ {
			x := fr.x + float64(c)*(w+gap)
			var q piece
			st := labelStyle
			st.size = valueStyle.size // the baselines of label and value are one
			q.add(s, wrap(labels[i+c], labelW[c]-6), st, x, 0)
			p.over(q, 0, 2)
			v := s.block(b.Items[i+c].Value, valueStyle, frame{x + labelW[c], w - labelW[c]}, lis[i+c].child("LBody"))
			p.over(v, 0, 2)
		}
		p.height += 2
		for c := 0; c < cols && i+c < len(b.Items); c++ {
			p.rule(fr.x+float64(c)*(w+gap), p.height, w, 0.3, ink(page.Mist))
		}
		p.height += 0.3
		p.keep = i == 0 || i+2*cols >= len(b.Items) && i+cols < len(b.Items)
		out = append(out, p)
	}
	if len(out) == 0 {
		return nil
	}
	out[0].before = 8
	out[len(out)-1].height += 4
	return out
}

// figure sets a drawing under its caption; a drawing wider than the frame is
// made smaller as a whole.
func (s *setter) figure(b page.Figure, fr frame, parent *elem) []piece {
	el := parent.child("Figure")
	if el.alt = s.clean(b.Alt); el.alt == "" {
		el.alt = s.clean(page.Plain(b.Caption))
	}
	el.boxed = true
	var out []piece
	if len(b.Caption) > 0 {
		out = glued(s.text(b.Caption, captionStyle, frame{fr.x, min(fr.w, s.column+30)}, el.child("Caption")))
		out[len(out)-1].keep = true
		out[len(out)-1].height += 4
	}
	if b.Drawing == nil || b.Drawing.Width <= 0 || b.Drawing.Height <= 0 {
		el.role = "P"
		el.boxed, el.alt = false, ""
		note := s.text(page.T(b.Alt), smallStyle, fr, el)
		return append(out, note...)
	}
	p := s.drawing(b.Drawing, fr, el)
	out = append(out, p)
	out[0].before = 12
	out[len(out)-1].height += 6
	return out
}

// drawing places the marks of a picture.
func (s *setter) drawing(d *page.Drawing, fr frame, el *elem) piece {
	scale := min(1, fr.w/d.Width, 0.86*s.sheet.depth()/d.Height)
	p := piece{height: d.Height * scale, items: make([]item, 0, len(d.Marks)+1)}
	for _, m := range d.Marks {
		if l, ok := m.(page.Label); ok {
			s.label(&p, l, fr.x, scale, el)
			continue
		}
		p.items = append(p.items, item{kind: markItem, el: el, x: fr.x, mark: m, scale: scale})
	}
	p.items = append(p.items, item{kind: attachItem, el: el, x: fr.x, w: d.Width * scale, h: d.Height * scale})
	return p
}

// label sets the text of a drawing on one line.
func (s *setter) label(p *piece, l page.Label, x0, scale float64, el *elem) {
	id := sans
	if l.Bold {
		id = sansBold
	}
	cs := s.run(s.spare[:0], l.Text, look{face: id, size: l.Size * scale, colour: ink(l.Ink), el: el})
	w, _ := natural(cs)
	x := x0 + l.X*scale
	switch l.Anchor {
	case page.Start:
	case page.Middle:
		x -= w / 2
	case page.End:
		x -= w
	}
	p.put(s, cs, x, l.Y*scale)
	s.spare = cs
}

func toneColour(t page.Tone) colour {
	switch t {
	case page.Established, page.Suggested:
		return ink(page.Accent)
	case page.Contradicted:
		return ink(page.Warn)
	case page.Open:
		return ink(page.Black)
	case page.Neutral:
	}
	return ink(page.Slate)
}

// verdict sets what a hypothesis has come to: the mark and word, then claim,
// answer, reading, the beam and the region.
func (s *setter) verdict(b page.Verdict, fr frame, parent *elem) []piece {
	sect := parent.child("Sect")
	tone := toneColour(b.Tone)
	in := frame{fr.x + 30, fr.w - 30}
	narrow := frame{in.x, min(in.w, s.column)}

	word := s.chars(page.T(b.Word+" "), textStyle{boldFamily, 12.6, 17, tone}, sect.child("P"))
	at := word[:]
	el := (*elem)(nil)
	if len(at) > 0 {
		el = at[0].look.el
	} else {
		el = sect.child("P")
	}
	if b.Qualify != "" {
		at = append(at, s.chars(page.T(" "+b.Qualify+" "), textStyle{sansFamily, 9, 17, ink(page.Slate)}, el)...)
	}
	name := s.chars(page.T(b.Name), textStyle{boldFamily, 9.4, 17, ink(page.Slate)}, el)
	head := piece{height: 19, keep: true}
	t := b.Tone
	head.items = append(head.items, item{kind: shapeItem, x: fr.x, scale: 1, shape: func(d *drawer, x, y, k float64) { d.verdictMark(t, tone, x, y, k) }})
	beside := b.Figure != nil && b.Figure.Drawing != nil && b.Figure.Drawing.Width <= 0.55*fr.w
	if beside {
		narrow.w = min(narrow.w, in.w-b.Figure.Drawing.Width-8)
	}
	lines := wrap(at, min(in.w-40, narrow.w+40))
	for i, l := range lines {
		head.put(s, l.cs, in.x, float64(i)*17+13)
	}
	head.height += float64(max(0, len(lines)-1)) * 17
	nameW, _ := natural(name)
	head.put(s, name, fr.x+fr.w-nameW, 13)

	out := []piece{head}
	put := func(in []page.Inline, st textStyle, before float64) {
		ps := s.text(in, st, narrow, sect.child("P"))
		if len(ps) > 0 {
			ps[0].before = before
		}
		out = append(out, ps...)
	}
	put(b.Claim, bodyStyle, 0)
	put(b.Answer, textStyle{family{sansBold, sansBold, sansItalic}, 9.8, 14, ink(page.Black)}, 4)
	put(b.Reading, bodyStyle, 3)
	if b.Figure != nil && !beside {
		fig := s.figure(*b.Figure, fr, sect)
		if len(fig) > 0 {
			fig[0].before = 6
			fig[len(fig)-1].height -= 4
		}
		out = append(out, fig...)
	}
	put(b.Region, smallStyle, 3)
	if beside {
		out = []piece{s.beside(out, *b.Figure, fr, sect)}
	}
	out = glued(out)
	rule := piece{before: 10, height: 5.5, keep: true}
	if beside {
		rule.before = 6
	}
	rule.rule(fr.x, 0, fr.w, 0.5, ink(page.Slate))
	out = append([]piece{rule}, out...)
	out[len(out)-1].height += 4
	return out
}

// beside stacks pieces into one, with a narrow figure right of them.
func (s *setter) beside(ps []piece, f page.Figure, fr frame, parent *elem) piece {
	var p piece
	for _, q := range ps {
		p.over(q, 0, p.height+q.before)
	}
	w := f.Drawing.Width
	fig := s.figure(f, frame{fr.x + fr.w - w, w}, parent)
	y := 12.0 // under the name of the hypothesis
	for _, q := range fig {
		q.height -= 6
		p.over(q, 0, y)
		y += q.height
	}
	return p
}

// signatures sets lines to sign.
func (s *setter) signatures(b page.Signatures, fr frame, parent *elem) []piece {
	sect := parent.child("Sect")
	var out []piece
	left := fr.w * 0.40
	sign, date := fr.x+left+14, fr.x+fr.w-86
	for _, r := range b.Rows {
		el := sect.child("P")
		p := piece{before: 12}
		p.height = 2
		st := textStyle{sansFamily, 9, 12.4, ink(page.Black)}
		who := []page.Inline{page.Strong(r.Role + " ")}
		p.add(s, wrap(s.chars(who, st, el), left), st, fr.x, 0)
		if r.Name != "" {
			p.add(s, wrap(s.chars(page.T(r.Name+" "), st, el), left), st, fr.x, 0)
		}
		if r.Meaning != "" {
			p.add(s, wrap(s.chars(page.T(r.Meaning+" "), smallStyle, el), left), smallStyle, fr.x, 1)
		}
		p.height = max(p.height, 40)
		base := p.height - 11
		p.rule(sign, base, date-14-sign, 0.6, ink(page.Black))
		p.rule(date, base, 86, 0.6, ink(page.Black))
		p.put(s, s.chars(page.T("Signature "), runStyle, el), sign, base+9)
		p.put(s, s.chars(page.T("Date and time"), runStyle, el), date, base+9)
		p.height += 2
		out = append(out, p)
	}
	if len(out) > 0 && len(b.Note) > 0 {
		out[len(out)-1].keep = true
	}
	notes := s.text(b.Note, smallStyle, frame{fr.x, min(fr.w, s.column)}, sect.child("P"))
	if len(notes) > 0 {
		notes[0].before = 7
	}
	return append(out, notes...)
}

// matter is the running head and foot of one page, as a piece over the whole
// sheet. The first page has no running head: its title stands there.
func (s *setter) matter(n, total int) piece {
	sh := s.sheet
	var p piece
	number := s.chars(page.T(fmt.Sprintf("page %d of %d", n, total)), runStyle, nil)
	numberW, _ := natural(number)
	if status := s.doc.Status; status != "" {
		cs := s.chars(page.T(strings.ToUpper(status)), textStyle{boldFamily, 7.2, 9.6, ink(page.Slate)}, nil)
		w, _ := natural(cs)
		p.put(s, cs, sh.width-sh.right-w, 44)
	}
	if n > 1 {
		if lines := wrap(s.chars(page.T(s.doc.Header), runStyle, nil), sh.measure()*0.72); len(lines) > 0 {
			p.put(s, lines[0].cs, sh.left, 44)
		}
		p.rule(sh.left, 49, sh.measure(), 0.4, ink(page.Mist))
	}
	y := sh.height - sh.bottom + 22
	p.rule(sh.left, y, sh.measure(), 0.4, ink(page.Mist))
	y += 12
	p.put(s, number, sh.width-sh.right-numberW, y)
	foot := s.chars(page.T(strings.Join(s.doc.Footer, "  ·  ")), runStyle, nil)
	for i, l := range wrap(foot, sh.measure()-numberW-24) {
		if i < 3 {
			p.put(s, l.cs, sh.left, y+float64(i)*runStyle.leading)
		}
	}
	return p
}

// status is the status word around its own middle, to be turned onto the
// diagonal; empty when the document has none.
func (s *setter) status() piece {
	var p piece
	word := strings.ToUpper(s.doc.Status)
	probe, _ := natural(s.run(nil, word, look{face: sansBold, size: 100}))
	if probe == 0 {
		return p
	}
	sh := s.sheet
	size := min(62*math.Hypot(sh.width, sh.height)/probe, 132)
	cs := s.run(nil, word, look{face: sansBold, size: size, colour: colour{0xf1, 0xf3, 0xf5}})
	p.put(s, cs, -probe*size/200, sh.height+size*0.35)
	return p
}
