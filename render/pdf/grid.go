package pdf

import (
	"math"
	"sort"

	"steelyard/render/page"
)

// grid is a table being measured.
type grid struct {
	cols []page.Column
	x    []float64
	w    []float64
	dec  []float64 // widest left part of decimal columns
	rest []float64 // widest right part
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
		if math.IsInf(depth, 1) {
			if n == 0 { // the widest words have no room to spare
				for i := range w {
					w[i] = word[i] * room / least
				}
			}
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
// room together; infinite when they have none at any.
func lines(whole, least []float64, room float64) float64 {
	need := func(depth float64) float64 {
		sum := 0.0
		for i := range whole {
			sum += max(least[i], whole[i]/depth)
		}
		return sum
	}
	lo, hi := 1.0, 1e6
	if need(hi) > room {
		return math.Inf(1)
	}
	for range 40 {
		if m := math.Sqrt(lo * hi); need(m) > room {
			lo = m
		} else {
			hi = m
		}
	}
	return hi
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
