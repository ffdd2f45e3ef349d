package text

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/page"
)

var update = flag.Bool("update", false, "write golden files anew")

func printed(t *testing.T, doc *page.Document, opt Options) string {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, doc, opt); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func documents() map[string]*page.Document {
	peelIn, peel := fixture.Peel()
	trialIn, trial := fixture.Trial()
	waitingIn, waiting := fixture.Waiting()
	maskedIn, masked := fixture.Masked()
	return map[string]*page.Document{
		"peel": noMethods(render.Compose(peelIn, peel)), "trial": noMethods(render.Compose(trialIn, trial)),
		"waiting": noMethods(render.Compose(waitingIn, waiting)), "masked": noMethods(render.Compose(maskedIn, masked)), "blocks": everyBlock(),
	}
}

// noMethods takes out the section of methods: its words are those of the
// cards, which their own packages check.
func noMethods(doc *page.Document) *page.Document {
	var out []page.Block
	inside := false
	for _, b := range doc.Blocks {
		if h, ok := b.(page.Heading); ok && h.Level == 1 {
			inside = h.Anchor == "methods"
		}
		if !inside {
			out = append(out, b)
		}
	}
	doc.Blocks = out
	return doc
}

// everyBlock is a document with every block and awkward text.
func everyBlock() *page.Document {
	long := strings.Repeat("long ", 30)
	return &page.Document{Title: "Blocks", Status: "DRAFT", Blocks: []page.Block{
		page.Heading{Level: 0, Text: page.T("A title that is longer than one line of the terminal and therefore has to be wrapped")},
		page.Heading{Level: 1, Text: page.T("Section")},
		page.Paragraph{Text: []page.Inline{page.Text("x"), page.Sup("2"), page.Sub("i"), page.Strong(" strong"), page.Emph(" stressed"), page.Code(" code"), page.Link{Text: " link", Target: "#a"}}},
		page.Paragraph{Text: page.T(long), Style: page.Quote},
		page.Paragraph{Text: page.T(strings.Repeat("x", 200))},
		page.Paragraph{Text: page.T("A tab\there, a bell\ahere, an escape\x1b[31m here, 90\u00a0% and 12\u202f345.")},
		page.List{Ordered: true, Items: [][]page.Inline{page.T("first " + long), page.T("second")}},
		page.Table{Caption: page.T("Numbers"), Columns: []page.Column{{}, {Align: page.Decimal}, {Align: page.Right}, {Align: page.Center}},
			Head: [][]page.Inline{page.T("Name"), page.T("Value"), page.T("n"), page.T("Mark")},
			Rows: []page.Row{{Cells: [][]page.Inline{page.T("a"), page.T("1.5"), page.T("10"), page.T("x")}}, {Cells: [][]page.Inline{page.T("面 wide"), page.T("−12.25"), page.T("7"), page.T("xyz")}}, {Cells: [][]page.Inline{page.T("short row")}}}},
		page.Table{Caption: page.T("Wide"), Columns: make([]page.Column, 6), Head: cells("one", "two", "three", "four", "five", "six"), Rows: []page.Row{{Cells: cells(long, long, long, long, long, long)}}},
		page.Facts{Items: []page.Fact{{Label: "Short", Value: page.T("value")}, {Label: "A label that is far too long for the column of labels", Value: page.T(long)}}},
		page.Figure{Caption: page.T("Drawn"), Alt: "What it shows.", Plain: []string{"----v----", "   |-o-|"}},
		page.Figure{Caption: page.T("Not drawn"), Alt: "What it shows, in words."},
		page.Verdict{Name: "H9", Word: "OPEN", Qualify: "post hoc", Tone: page.Open, Claim: page.T("A claim."), Answer: page.T("An answer."), Reading: page.T("A reading."), Region: page.T("A region."), Figure: &page.Figure{Plain: []string{"---"}}},
		page.Callout{Kind: page.Caution, Blocks: []page.Block{page.Paragraph{Text: page.T(long)}}},
		page.Verbatim{Lines: []string{"steelyard verify x.pdf"}},
		page.Signatures{Rows: []page.Signature{{Role: "Reviewer", Name: "(name)", Meaning: "reviewed"}}, Note: page.T("Sign by hand.")},
		page.PageBreak{},
		page.Heading{Level: 1, Text: page.T("Diagnostics"), Anchor: "diagnostics"},
		page.Table{Columns: make([]page.Column, 2), Head: cells("Kind", "Message"), Rows: []page.Row{{Cells: cells("warning", "a")}, {Cells: cells("warning", "b")}, {Cells: cells("note", "c")}}},
	}}
}

func cells(s ...string) [][]page.Inline {
	var out [][]page.Inline
	for _, x := range s {
		out = append(out, page.T(x))
	}
	return out
}

func TestGolden(t *testing.T) {
	for name, doc := range documents() {
		for _, full := range []bool{false, true} {
			got := printed(t, doc, Options{Full: full})
			file := name + ".txt"
			if full {
				file = name + ".full.txt"
			}
			path := filepath.Join("testdata", file)
			if *update {
				if err := os.MkdirAll("testdata", 0o755); err != nil {
					t.Fatal(err)
				}
				if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
					t.Fatal(err)
				}
				continue
			}
			want, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			if d := cmp.Diff(strings.Split(string(want), "\n"), strings.Split(got, "\n")); d != "" {
				t.Errorf("%s (-old +new):\n%s", file, d)
			}
		}
	}
}

// misset names a line that a terminal would show badly: too wide, with
// trailing blanks, with controls.
func misset(s string, columns int, color bool) string {
	for _, l := range strings.Split(s, "\n") {
		bare := l
		if color {
			for _, code := range []string{"\x1b[0m", "\x1b[1m", "\x1b[1;36m", "\x1b[1;35m", "\x1b[1;33m"} {
				bare = strings.ReplaceAll(bare, code, "")
			}
		}
		switch {
		case width(bare) > columns:
			return "too wide: " + l
		case strings.HasSuffix(bare, " "):
			return "blanks at the end: " + l
		case strings.ContainsAny(bare, "\x1b\t\a\r\u00a0\u202f"):
			return "controls: " + l
		}
	}
	return ""
}

func TestFitsTheTerminal(t *testing.T) {
	for name, doc := range documents() {
		for _, w := range []int{0, 20, 40, 57, 80, 200} {
			for _, color := range []bool{false, true} {
				columns := 80
				if w > 0 {
					columns = max(40, min(w, 80))
				}
				got := printed(t, doc, Options{Width: w, Color: color, Full: true})
				if m := misset(got, columns, color); m != "" {
					t.Errorf("%s at %d: %s", name, w, m)
				}
			}
		}
	}
}

// The check finds what it looks for.
func TestMissetFinds(t *testing.T) {
	for _, s := range []string{strings.Repeat("x", 81), "x ", "x\ty", "\x1b[31mred"} {
		if misset(s, 80, true) == "" {
			t.Errorf("%q passes", s)
		}
	}
}

func TestCompact(t *testing.T) {
	doc := documents()["trial"]
	short, full := printed(t, doc, Options{}), printed(t, doc, Options{Full: true})
	if len(short)*3 > len(full) {
		t.Errorf("the short form has %d bytes of %d", len(short), len(full))
	}
	for _, want := range []string{"H1  OPEN", "H3  ESTABLISHED", "H4: ", "H6: ", "Diagnostics: 2 warnings, 1 note."} {
		if !strings.Contains(short, want) {
			t.Errorf("the short form lacks %q", want)
		}
	}
	if strings.Contains(short, "What arrived") {
		t.Error("the short form goes beyond page one")
	}
}

func TestColor(t *testing.T) {
	doc := documents()["peel"]
	if s := printed(t, doc, Options{}); strings.Contains(s, "\x1b") {
		t.Error("emphasis without being asked")
	}
	if s := printed(t, doc, Options{Color: true}); !strings.Contains(s, "\x1b[1;36mESTABLISHED\x1b[0m") {
		t.Error("no emphasis when asked")
	}
}

func TestWrap(t *testing.T) {
	for _, c := range []struct {
		s    string
		n    int
		want []string
	}{
		{"one two three", 7, []string{"one two", "three"}},
		{"one\u00a0two three", 7, []string{"one two", "three"}},
		{"a\u00a0b c", 3, []string{"a b", "c"}},
		{"abcdefgh", 3, []string{"abc", "def", "gh"}},
		{"面面面", 4, []string{"面面", "面"}},
		{"", 5, []string{""}},
		{"x", 0, []string{"x"}},
	} {
		if d := cmp.Diff(c.want, wrap(c.s, c.n)); d != "" {
			t.Errorf("%q at %d: %s", c.s, c.n, d)
		}
	}
}
