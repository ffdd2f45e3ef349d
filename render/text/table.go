package text

import (
	"strings"

	"steelyard/render/page"
)

// table prints a table in columns, wrapping cells where it is too wide; rows
// become labelled blocks where even that does not fit.
func (p *printer) table(t page.Table, indent int) {
	if len(t.Head) == 0 {
		return
	}
	if c := plain(t.Caption); c != "" {
		p.hanging("", c, indent)
	}
	room := p.width - indent
	cells := cellTexts(t)
	widths, ok := fit(cells, room)
	if ok {
		p.columns(t, cells, widths, indent)
	} else {
		p.stacked(t, cells, indent)
	}
	if n := plain(t.Notes); n != "" {
		p.hanging("", n, indent)
	}
}

// cellTexts are the cells as text, the head first.
func cellTexts(t page.Table) [][]string {
	n := len(t.Head)
	for _, r := range t.Rows {
		n = max(n, len(r.Cells))
	}
	row := func(cells [][]page.Inline) []string {
		out := make([]string, n)
		for i, c := range cells {
			out[i] = plain(c)
		}
		return out
	}
	out := [][]string{row(t.Head)}
	for _, r := range t.Rows {
		out = append(out, row(r.Cells))
	}
	return out
}

// between is the blank space between columns.
const between = 2

// fit chooses column widths; false when even the longest words do not fit.
func fit(cells [][]string, room int) ([]int, bool) {
	n := len(cells[0])
	natural, least := make([]int, n), make([]int, n)
	for _, row := range cells {
		for i, c := range row {
			natural[i] = max(natural[i], width(c))
			for _, w := range words(c) {
				least[i] = max(least[i], min(width(w), 24))
			}
		}
	}
	room -= between * (n - 1)
	total, floor := 0, 0
	for i := range natural {
		total += natural[i]
		floor += least[i]
	}
	if total <= room {
		return natural, true
	}
	if floor > room {
		return nil, false
	}
	// Narrow the widest column that can be narrowed, one at a time.
	for total > room {
		k := -1
		for i := range natural {
			if natural[i] > least[i] && (k < 0 || natural[i] > natural[k]) {
				k = i
			}
		}
		natural[k]--
		total--
	}
	for i := range natural {
		if natural[i] < 14 && widest(cells, i) > 3*natural[i] {
			return nil, false // a tower of single words reads worse than a list
		}
		if widest(cells, i) > mostLines*natural[i] {
			return nil, false
		}
	}
	return natural, true
}

// mostLines is how many lines a cell may take before rows become lists.
const mostLines = 5

// widest is the natural width of a column.
func widest(cells [][]string, i int) int {
	n := 0
	for _, row := range cells {
		n = max(n, width(row[i]))
	}
	return n
}

// columns prints the cells side by side.
func (p *printer) columns(t page.Table, cells [][]string, widths []int, indent int) {
	align := func(i int) page.Align {
		if i < len(t.Columns) {
			return t.Columns[i].Align
		}
		return page.Left
	}
	texts := decimalPads(cells, align)
	for r, row := range texts {
		var wrapped [][]string
		height := 0
		for i, c := range row {
			l := wrap(c, widths[i])
			if align(i) == page.Decimal && width(c) <= widths[i] {
				l = []string{clean(c)} // keep the padding that aligns
			}
			wrapped = append(wrapped, l)
			height = max(height, len(l))
		}
		for k := range height {
			var b strings.Builder
			for i := range wrapped {
				s := ""
				if k < len(wrapped[i]) {
					s = wrapped[i][k]
				}
				if i > 0 {
					b.WriteString(strings.Repeat(" ", between))
				}
				switch align(i) {
				case page.Right, page.Decimal:
					b.WriteString(padLeft(s, widths[i]))
				case page.Center:
					b.WriteString(pad(strings.Repeat(" ", (widths[i]-width(s))/2)+s, widths[i]))
				case page.Left:
					b.WriteString(pad(s, widths[i]))
				}
			}
			line := strings.TrimRight(b.String(), " ")
			if r == 0 {
				line = p.bold(line)
			}
			p.line(line, indent)
		}
		if r == 0 {
			total := between * (len(widths) - 1)
			for _, w := range widths {
				total += w
			}
			p.line(strings.Repeat("-", total), indent)
		}
	}
}

// decimalPads pads the cells of decimal columns so that their signs align
// when set to the right.
func decimalPads(cells [][]string, align func(int) page.Align) [][]string {
	out := make([][]string, len(cells))
	for r := range cells {
		out[r] = append([]string(nil), cells[r]...)
	}
	for i := range cells[0] {
		if align(i) != page.Decimal {
			continue
		}
		tail, natural := 0, widest(cells, i)
		for _, row := range cells[1:] {
			tail = max(tail, tailOf(row[i]))
		}
		for r := 1; r < len(out); r++ {
			padded := out[r][i] + strings.Repeat(" ", tail-tailOf(out[r][i]))
			if out[r][i] != "" && width(padded) <= natural {
				out[r][i] = padded
			}
		}
	}
	return out
}

// tailOf is the width of what follows the decimal sign, the sign included.
func tailOf(s string) int {
	if i := strings.IndexByte(s, '.'); i >= 0 {
		return width(s[i:])
	}
	if i := strings.IndexAny(s, "\u00a0 "); i >= 0 {
		return width(s[i:])
	}
	return 0
}

// stacked prints each row as a block of labels and values.
func (p *printer) stacked(t page.Table, cells [][]string, indent int) {
	for r := 1; r < len(cells); r++ {
		if r > 1 && len(cells[0]) > 3 {
			p.out.WriteByte('\n')
		}
		var f page.Facts
		for i, c := range cells[r] {
			if c == "" || c == "–" {
				continue
			}
			f.Items = append(f.Items, page.Fact{Label: cells[0][i], Value: page.T(c)})
		}
		p.facts(f, indent)
	}
}
