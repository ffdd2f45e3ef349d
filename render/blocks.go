package render

import (
	"strings"

	"steelyard/render/page"
)

// add appends blocks.
func (c *composer) add(b ...page.Block) { c.blocks = append(c.blocks, b...) }

// heading opens a section.
func (c *composer) heading(level int, text, anchor string) {
	c.add(page.Heading{Level: level, Text: page.T(text), Anchor: anchor})
}

// para adds running text; nothing for "".
func (c *composer) para(text string) {
	if text != "" {
		c.add(page.Paragraph{Text: page.T(text)})
	}
}

// small adds a note; nothing for "".
func (c *composer) small(text string) {
	if text != "" {
		c.add(page.Paragraph{Text: page.T(text), Style: page.Small})
	}
}

// facts gathers labels with values, leaving out empty ones.
type facts struct{ items []page.Fact }

func (f *facts) add(label, value string) {
	if value != "" {
		f.items = append(f.items, page.Fact{Label: label, Value: page.T(value)})
	}
}

func (f *facts) code(label, value string) {
	if value != "" {
		f.items = append(f.items, page.Fact{Label: label, Value: []page.Inline{page.Code(value)}})
	}
}

func (f *facts) to(c *composer, columns int) {
	if len(f.items) > 0 {
		c.add(page.Facts{Items: f.items, Columns: columns})
	}
}

// table gathers rows.
type table struct{ page.Table }

// newTable starts a table; heads with a leading "#" align on the decimal
// sign, with ">" to the right.
func newTable(caption string, heads ...string) *table {
	t := &table{}
	if caption != "" {
		t.Caption = page.T(caption)
	}
	for _, h := range heads {
		col := page.Column{}
		if h != "" {
			switch h[0] {
			case '#':
				col.Align, h = page.Decimal, h[1:]
			case '>':
				col.Align, h = page.Right, h[1:]
			}
		}
		t.Columns = append(t.Columns, col)
		t.Head = append(t.Head, page.T(h))
	}
	return t
}

// row adds a row of plain cells.
func (t *table) row(cells ...string) *page.Row {
	r := page.Row{}
	for _, s := range cells {
		r.Cells = append(r.Cells, page.T(s))
	}
	t.Rows = append(t.Rows, r)
	return &t.Rows[len(t.Rows)-1]
}

// note adds a note under the table.
func (t *table) note(text string) {
	if text == "" {
		return
	}
	if len(t.Notes) > 0 {
		t.Notes = append(t.Notes, page.Text(" "))
	}
	t.Notes = append(t.Notes, page.Text(text))
}

// dropEmpty removes columns in which no row says anything.
func (t *table) dropEmpty() {
	keep := make([]bool, len(t.Head))
	for _, r := range t.Rows {
		for i, cell := range r.Cells {
			if s := page.Plain(cell); i < len(keep) && s != "" && s != "–" {
				keep[i] = true
			}
		}
	}
	cut := func(cells [][]page.Inline) [][]page.Inline {
		var out [][]page.Inline
		for i, cell := range cells {
			if i < len(keep) && keep[i] {
				out = append(out, cell)
			}
		}
		return out
	}
	var cols []page.Column
	for i, col := range t.Columns {
		if keep[i] {
			cols = append(cols, col)
		}
	}
	t.Columns, t.Head = cols, cut(t.Head)
	for i := range t.Rows {
		t.Rows[i].Cells = cut(t.Rows[i].Cells)
	}
}

// to adds the table, unless it has no rows.
func (t *table) to(c *composer) {
	if len(t.Rows) == 0 {
		return
	}
	t.dropEmpty()
	if len(t.Columns) > 0 {
		c.add(t.Table)
	}
}

// list gathers items.
type list struct{ items [][]page.Inline }

func (l *list) add(text string) {
	if text != "" {
		l.items = append(l.items, page.T(text))
	}
}

func (l *list) named(name, text string) {
	if text != "" {
		l.items = append(l.items, []page.Inline{page.Strong(name), page.Text(": " + text)})
	}
}

// line joins the items into one line of text.
func (l *list) line() string {
	var parts []string
	for _, it := range l.items {
		parts = append(parts, page.Plain(it))
	}
	return strings.Join(parts, " ")
}

func (l *list) to(c *composer) {
	if len(l.items) > 0 {
		c.add(page.List{Items: l.items})
	}
}
