package pdf

import (
	"bytes"
	"strings"
	"testing"

	"steelyard/render/page"
)

// laid sets a document up to its pages.
func laid(doc *page.Document) []leaf {
	s := newSetter(doc)
	return paginate(s.flow(), s.sheet)
}

// onPages gives the words of each page, from the runes behind its glyphs.
func onPages(doc *page.Document) []string {
	s := newSetter(doc)
	var out []string
	for _, l := range paginate(s.flow(), s.sheet) {
		var b strings.Builder
		for _, p := range l.pieces {
			for _, it := range p.items {
				for i := 0; i+1 < len(it.text); i += 2 {
					b.WriteRune(s.cuts[it.face].used[int(it.text[i])<<8|int(it.text[i+1])])
				}
			}
			b.WriteByte('\n')
		}
		out = append(out, b.String())
	}
	return out
}

func words(n int) string { return strings.TrimSpace(strings.Repeat("word and ", n)) }

func TestHeadingStaysWithText(t *testing.T) {
	for fill := range 60 {
		doc := &page.Document{Paper: "a4"}
		for range fill {
			doc.Blocks = append(doc.Blocks, page.Paragraph{Text: page.T("filler")})
		}
		doc.Blocks = append(doc.Blocks, page.Heading{Level: 1, Text: page.T("Heading")}, page.Heading{Level: 2, Text: page.T("Below")}, page.Paragraph{Text: page.T(words(60))})
		for _, p := range onPages(doc) {
			if i := strings.Index(p, "Heading"); i >= 0 && !strings.Contains(p, "word and word") {
				t.Errorf("after %d lines the heading stands alone", fill)
			}
			lines := strings.Count(p, "word and word")
			if lines == 1 {
				t.Errorf("after %d lines one line of the paragraph stands alone", fill)
			}
		}
	}
}

func TestNothingRunsOffThePage(t *testing.T) {
	docs := map[string]*page.Document{"sample": sample(), "letter": sample(), "long word": paragraph(strings.Repeat("x", 4000)), "wide table": wideTable(), "tall figure": tall(),
		"long facts": {Paper: "a4", Blocks: []page.Block{page.Facts{Columns: 2, Items: []page.Fact{{Label: "Why", Value: page.T(words(1500))}, {Label: words(30), Value: page.T("short")}}}}},
		"long cell": {Paper: "letter", Blocks: []page.Block{page.Paragraph{Text: page.T("before")}, page.Table{Head: [][]page.Inline{page.T("a"), page.T("b")},
			Rows: []page.Row{{Cells: [][]page.Inline{page.T("x"), page.T(words(3000))}}, {Cells: [][]page.Inline{page.T("y"), page.T("z")}}}}}},
		"long title": {Paper: "a4", Blocks: []page.Block{page.Heading{Level: 0, Text: page.T(words(400))}, page.Paragraph{Text: page.T("after")}}},
	}
	docs["letter"].Paper = "letter"
	for name, doc := range docs {
		s := newSetter(doc)
		sh := s.sheet
		all := strings.Join(onPages(doc), "")
		if n := strings.Count(all, "word and "); name == "long cell" && n < 2999 || name == "long facts" && n < 1528 || name == "long title" && n < 399 {
			t.Errorf("%s: %d words are left", name, n)
		}
		for n, l := range paginate(s.flow(), sh) {
			for i, p := range l.pieces {
				if l.tops[i] < sh.top-0.01 || l.tops[i]+p.height > sh.height-sh.bottom+0.5 {
					t.Errorf("%s, page %d: a piece from %.1f to %.1f", name, n+1, l.tops[i], l.tops[i]+p.height)
				}
				for _, it := range p.items {
					if it.kind == textItem && (it.x < sh.left-1 || it.x+it.w > sh.width-sh.right+8) {
						t.Errorf("%s, page %d: text from %.1f to %.1f", name, n+1, it.x, it.x+it.w)
					}
				}
			}
		}
	}
}

func wideTable() *page.Document {
	tab := page.Table{Caption: page.T("Wide")}
	for i := range 14 {
		tab.Head = append(tab.Head, page.T("Column "+itoa(i)))
	}
	for range 70 {
		var r page.Row
		for i := range 14 {
			r.Cells = append(r.Cells, page.T(words(i%4+1)+" 12.5"))
		}
		tab.Rows = append(tab.Rows, r)
	}
	return &page.Document{Paper: "a4", Blocks: []page.Block{tab}}
}

func tall() *page.Document {
	return &page.Document{Paper: "a4", Blocks: []page.Block{page.Figure{Caption: page.T(words(80)), Alt: "tall", Drawing: &page.Drawing{Width: 100, Height: 3000,
		Marks: []page.Mark{page.Line{X2: 100, Y2: 3000, Stroke: page.Stroke{Width: 1}}}}}}}
}

// A table over several pages has its head on each, once in the structure.
func TestHeadRepeats(t *testing.T) {
	doc := &page.Document{Paper: "a4", Blocks: []page.Block{page.Paragraph{Text: page.T("before")}}}
	tab := longTable()
	tab.Rows = append(tab.Rows, tab.Rows...)
	doc.Blocks = append(doc.Blocks, tab)
	pages := onPages(doc)
	if len(pages) < 3 {
		t.Fatal("the table is too short for this test")
	}
	for i, p := range pages {
		if strings.Count(p, "Remark") != 1 {
			t.Errorf("page %d has %d heads", i+1, strings.Count(p, "Remark"))
		}
	}
	b, err := build(doc, options{plain: true})
	if err != nil {
		t.Fatal(err)
	}
	if n := bytes.Count(b, []byte("<</S/TH/")); n != len(tab.Head) {
		t.Errorf("%d head cells in the structure", n)
	}
	if f := tagFaults(b); len(f) > 0 {
		t.Error(f[0])
	}
}

// Decimal signs of a column stand under one another, whatever the signs and
// digits before them.
func TestDecimalsAlign(t *testing.T) {
	tab := page.Table{Columns: []page.Column{{}, {Align: page.Decimal}}}
	values := []string{"1.94", "−10.5", "< 0.001", "1,155", "12", "not given", "3.25 kg"}
	for _, v := range values {
		tab.Rows = append(tab.Rows, page.Row{Cells: [][]page.Inline{page.T("label"), page.T(v)}})
	}
	s := newSetter(&page.Document{})
	at := map[string]float64{}
	for _, p := range s.blocks([]page.Block{tab}, frame{0, 400}, s.root) {
		for _, it := range p.items {
			if it.kind != textItem {
				continue
			}
			x, text := it.x, ""
			sign := -1.0
			for i := 0; i+1 < len(it.text); i += 2 {
				g := int(it.text[i])<<8 | int(it.text[i+1])
				r := s.cuts[it.face].used[g]
				text += string(r)
				if r == '.' {
					sign = x
				}
				x += float64(s.cuts[it.face].face.advance(g)) * it.size / 1000
			}
			if sign < 0 {
				sign = x
			}
			at[text] = sign
		}
	}
	for _, v := range values {
		if d := at[v] - at["1.94"]; v != "not given" && (d > 0.01 || d < -0.01) {
			t.Errorf("the sign of %q stands %.2f beside the others", v, d)
		}
	}
	if at["not given"] == at["1.94"] {
		t.Error("the test finds no difference")
	}
}

// What stands before the first page break is page one, which is one page
// where it can be made so.
func TestPageOneFits(t *testing.T) {
	doc := sample()
	if p := onPages(doc)[0]; !strings.Contains(p, "What this record does not say") || strings.Contains(p, "What arrived") {
		t.Error("page one does not end with its own content")
	}
	long := &page.Document{Paper: "a4"}
	for range 90 {
		long.Blocks = append(long.Blocks, page.Paragraph{Text: page.T("line of its own")})
	}
	long.Blocks = append(long.Blocks, page.PageBreak{}, page.Paragraph{Text: page.T("second part")})
	pages := onPages(long)
	if len(pages) != 4 || strings.TrimSpace(pages[3]) != "second part" {
		t.Errorf("%d pages", len(pages))
	}
}

// Headings that leave a level out, as on page one, leave none out in the tree.
func TestLevelsHaveNoGap(t *testing.T) {
	doc := &page.Document{Paper: "a4", Blocks: []page.Block{page.Heading{Level: 0, Text: page.T("Title")}, page.Heading{Level: 2, Text: page.T("Two")},
		page.Heading{Level: 3, Text: page.T("Three")}, page.Heading{Level: 1, Text: page.T("One")}, page.Heading{Level: 3, Text: page.T("Three")}}}
	b, err := build(doc, options{plain: true})
	if err != nil {
		t.Fatal(err)
	}
	if f := tagFaults(b); len(f) > 0 {
		t.Error(f[0])
	}
}

// The last line of a paragraph is not one short word where it can be helped,
// and a heading's lines are of like length.
func TestSettle(t *testing.T) {
	s := newSetter(&page.Document{})
	cs := s.chars(page.T("aaaa bbbb cccc dddd eeee f"), textStyle{family{mono, mono, mono}, 10, 12, colour{}}, nil)
	if got := texts(wrap(cs, 24.5*6.01)); strings.Join(got, "|") != "aaaa bbbb cccc dddd eeee |f" {
		t.Fatal(got)
	}
	if got := texts(settle(cs, 24.5*6.01, false)); strings.Join(got, "|") != "aaaa bbbb cccc dddd |eeee f" {
		t.Error(got)
	}
	if got := texts(settle(cs, 24.5*6.01, true)); strings.Join(got, "|") != "aaaa bbbb cccc |dddd eeee f" {
		t.Error(got)
	}
}

// Blocks with nothing in them, and documents without blocks, are set too.
func TestEmpty(t *testing.T) {
	docs := []*page.Document{{}, {Paper: "letter", Status: "draft", Blocks: []page.Block{
		page.Heading{Level: 1}, page.Paragraph{}, page.List{}, page.List{Items: [][]page.Inline{nil, {}}}, page.Table{}, page.Table{Rows: []page.Row{{}}},
		page.Table{Columns: []page.Column{{}, {}}, Head: [][]page.Inline{nil, nil}}, page.Facts{}, page.Facts{Items: []page.Fact{{}}}, page.Figure{},
		page.Figure{Drawing: &page.Drawing{}}, page.Verdict{}, page.Callout{}, page.Callout{Kind: page.Warning, Blocks: []page.Block{page.Paragraph{}}},
		page.Verbatim{}, page.Verbatim{Lines: []string{""}}, page.Signatures{}, page.Signatures{Rows: []page.Signature{{}}}, page.PageBreak{},
		page.Figure{Alt: "x", Drawing: &page.Drawing{Width: 10, Height: 10, Marks: []page.Mark{page.Polyline{}, page.Polygon{}, page.Label{Text: ""}, page.Disc{}}}},
	}}}
	for _, doc := range docs {
		b, err := build(doc, options{plain: true})
		if err != nil {
			t.Error(err)
			continue
		}
		if f := tagFaults(b); len(f) > 0 && !strings.Contains(f[0], "figure") {
			t.Error(f[0])
		}
	}
	if err := Write(&bytes.Buffer{}, &page.Document{Blocks: []page.Block{page.Paragraph{Text: []page.Inline{page.Link{Text: "x", Target: "#nowhere"}}}}}); err == nil {
		t.Error("a link to nowhere is set")
	}
	if err := Write(&bytes.Buffer{}, &page.Document{Created: "yesterday"}); err == nil {
		t.Error("a date that is none is taken")
	}
}

func FuzzText(f *testing.F) {
	for _, s := range []string{"plain", "x̄ ± 3", "\x00", "\xff", "שלום", "a\u200b\u00adb", "((\\", "漢字", strings.Repeat("long", 300)} {
		f.Add(s, uint8(0))
	}
	f.Fuzz(func(t *testing.T, s string, where uint8) {
		if len(s) > 1<<12 {
			t.Skip()
		}
		doc := &page.Document{Title: s, Paper: "a4"}
		in := page.T(s)
		switch where % 6 {
		case 0:
			doc.Blocks = []page.Block{page.Paragraph{Text: in}}
		case 1:
			doc.Blocks = []page.Block{page.Heading{Level: 1, Text: in}}
		case 2:
			doc.Blocks = []page.Block{page.Table{Columns: []page.Column{{Align: page.Decimal}}, Rows: []page.Row{{Cells: [][]page.Inline{in}}}}}
		case 3:
			doc.Blocks = []page.Block{page.Verbatim{Lines: []string{s}}}
		case 4:
			doc.Blocks = []page.Block{page.Facts{Items: []page.Fact{{Label: s, Value: []page.Inline{page.Code(s), page.Sup(s), page.Link{Text: s, Target: "https://example.org/" + s}}}}}}
		case 5:
			doc.Header, doc.Footer, doc.Status = s, []string{s}, s
		}
		b, err := build(doc, options{plain: true})
		if err != nil {
			return
		}
		if f := tagFaults(b); len(f) > 0 {
			t.Error(f[0])
		}
		if _, err := Read(b); err != nil {
			t.Error(err)
		}
	})
}

// A face of any bytes is opened or refused, and what is opened can be cut.
func FuzzFace(f *testing.F) {
	good := faceBytes(mono)
	f.Add(good[:2000], "A")
	f.Add([]byte("\x00\x01\x00\x00\x00\x01"), "x")
	f.Fuzz(func(t *testing.T, data []byte, text string) {
		face, err := openFace(data)
		if err != nil {
			return
		}
		c := newCut(face, "x")
		for _, r := range text {
			if g := face.gid(r); g != 0 {
				c.use(g, r)
				face.advance(g)
				face.extent(g)
			}
		}
		c.sfnt()
		c.widths()
	})
}
