package pdf

// leaf is one page: its pieces with the heights of their tops.
type leaf struct {
	pieces []piece
	tops   []float64 // from the top of the sheet
	gaps   []float64 // space above each piece that its bands fill
}

// binder fills pages one after another.
type binder struct {
	sheet sheet
	out   []leaf
	cur   leaf
	y     float64
}

func (b *binder) limit() float64 { return b.sheet.height - b.sheet.bottom }

func (b *binder) turn() {
	b.out = append(b.out, b.cur)
	b.cur, b.y = leaf{}, b.sheet.top
}

func (b *binder) add(p piece) {
	gap := p.before
	if len(b.cur.pieces) == 0 {
		gap = 0
	}
	b.y += gap
	b.cur.pieces = append(b.cur.pieces, p)
	b.cur.tops = append(b.cur.tops, b.y)
	b.cur.gaps = append(b.cur.gaps, gap)
	b.y += p.height
}

// place adds a piece, below the head that belongs above it on a new page.
func (b *binder) place(p piece) {
	if len(b.cur.pieces) == 0 && p.again != nil {
		b.add(*p.again)
		p.before = 0
	}
	b.add(p)
}

// piece places one piece where it fits, divided when no page can hold it.
func (b *binder) piece(p piece) {
	if len(b.cur.pieces) > 0 && b.y+p.before+p.height > b.limit() {
		b.turn()
	}
	most := b.limit() - b.sheet.top - p.repeated()
	for p.height > most {
		var head piece
		if head, p = p.cut(b.limit() - b.y); len(head.items) == 0 {
			p.height = most // only space is too much
			break
		}
		b.place(head)
		b.turn()
	}
	b.place(p)
}

// spread puts pieces on pages. A last page that is nearly empty is saved where
// less space between the blocks after page one does it.
func spread(ps []piece, sh sheet) []leaf {
	out := paginate(ps, sh)
	for _, k := range []float64{0.88, 0.76, 0.64} {
		if len(out) < 3 || out[len(out)-1].foot() > sh.top+0.3*sh.depth() {
			return out
		}
		tight := append([]piece(nil), ps...)
		after := false
		for i := range tight {
			if after = after || tight[i].fresh; after {
				tight[i].before *= k
			}
		}
		if less := paginate(tight, sh); len(less) < len(out) {
			return less
		}
	}
	return out
}

// foot is where the last piece of a page ends.
func (l leaf) foot() float64 {
	n := len(l.pieces)
	if n == 0 {
		return 0
	}
	return l.tops[n-1] + l.pieces[n-1].height
}

// paginate puts pieces on pages. Pieces kept together move to the next page
// as one when they do not fit, unless no page would hold them.
func paginate(ps []piece, sh sheet) []leaf {
	b := &binder{sheet: sh, y: sh.top}
	for i := 0; i < len(ps); {
		j := i
		for j < len(ps)-1 && ps[j].keep && !ps[j+1].fresh {
			j++
		}
		chain := ps[i : j+1]
		if chain[0].fresh && len(b.cur.pieces) > 0 {
			b.turn()
		}
		need := height(chain)
		if len(b.cur.pieces) == 0 {
			need -= chain[0].before
		}
		if b.y+need > b.limit() && len(b.cur.pieces) > 0 && need-chain[0].before <= 0.92*sh.depth() {
			b.turn()
		}
		for _, p := range chain {
			b.piece(p)
		}
		i = j + 1
	}
	if len(b.cur.pieces) > 0 || len(b.out) == 0 {
		b.turn()
	}
	return b.out
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
