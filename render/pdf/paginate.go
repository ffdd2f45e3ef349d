package pdf

// leaf is one page: its pieces with the heights of their tops.
type leaf struct {
	pieces []piece
	tops   []float64 // from the top of the sheet
	gaps   []float64 // space above each piece that its bands fill
}

// paginate puts pieces on pages. Pieces kept together move to the next page
// as one when they do not fit, unless no page would hold them.
func paginate(ps []piece, sh sheet) []leaf {
	var out []leaf
	cur := leaf{}
	y, limit := sh.top, sh.height-sh.bottom
	turn := func() {
		out = append(out, cur)
		cur, y = leaf{}, sh.top
	}
	add := func(p piece) {
		gap := p.before
		if len(cur.pieces) == 0 {
			gap = 0
		}
		y += gap
		cur.pieces = append(cur.pieces, p)
		cur.tops = append(cur.tops, y)
		cur.gaps = append(cur.gaps, gap)
		y += p.height
	}
	place := func(p piece) {
		if len(cur.pieces) == 0 && p.again != nil {
			add(*p.again)
			p.before = 0
		}
		add(p)
	}
	for i := 0; i < len(ps); {
		j := i
		for j < len(ps)-1 && ps[j].keep && !ps[j+1].fresh {
			j++
		}
		chain := ps[i : j+1]
		if chain[0].fresh && len(cur.pieces) > 0 {
			turn()
		}
		need := height(chain)
		if len(cur.pieces) == 0 {
			need -= chain[0].before
		}
		if y+need > limit && len(cur.pieces) > 0 && need-chain[0].before <= 0.92*(limit-sh.top) {
			turn()
		}
		for _, p := range chain {
			if len(cur.pieces) > 0 && y+p.before+p.height > limit {
				turn()
			}
			for p.height > limit-sh.top-p.repeated() { // taller than any page
				var head piece
				if head, p = p.cut(limit - y); len(head.items) == 0 {
					p.height = limit - sh.top - p.repeated() // only space is too much
					break
				}
				place(head)
				turn()
			}
			place(p)
		}
		i = j + 1
	}
	if len(cur.pieces) > 0 || len(out) == 0 {
		turn()
	}
	return out
}

// repeated is the height of the head that is drawn again above the piece.
func (p piece) repeated() float64 {
	if p.again == nil {
		return 0
	}
	return p.again.height
}

// cut divides a piece that no page can hold between two lines of its text.
// The head is empty when the piece holds no two lines.
func (p piece) cut(room float64) (head, rest piece) {
	room -= p.repeated()
	top := 0.0 // of the first line that goes on the next page
	for _, it := range p.items {
		if t := it.y - it.size; it.kind == textItem && it.y > room-4 && (top == 0 || t < top) {
			top = t
		}
	}
	if top <= 0 {
		return piece{}, p
	}
	head, rest = p, p
	head.items, rest.items = nil, nil
	head.keep, rest.fresh, rest.before = false, false, 0
	for _, it := range p.items {
		if it.kind == textItem && it.y > room-4 || it.kind != textItem && it.y > top {
			it.y -= top - 2
			rest.items = append(rest.items, it)
		} else {
			head.items = append(head.items, it)
		}
	}
	head.height, rest.height = min(top, room), p.height-top+2
	return head, rest
}
