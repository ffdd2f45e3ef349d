package pipeline

import (
	"encoding/json"
	"errors"
	"io"
	"slices"
	"testing"
	"testing/fstest"

	"steelyard/protocol"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
	"steelyard/render/page"
	"steelyard/render/text"
)

func TestForms(t *testing.T) {
	for i, word := range Forms {
		f, ok := FormOf(word)
		if !ok || f != Form(i) || f.String() != word || f.Extension() == "" {
			t.Errorf("%s: %v, %v", word, f, ok)
		}
	}
	if _, ok := FormOf("docx"); ok {
		t.Error("docx is no form")
	}
}

const broken = `steelyard = 1
record = { title = "Broken", number = "N-1", setting = "quality", status = "review" }
plan = 3
`

// A record with errors has its JSON, which says who it is and what is wrong,
// and no other view.
func TestRecordWithErrors(t *testing.T) {
	c, err := Real().Compile(Input{Name: "broken.toml", Text: []byte(broken), Files: fstest.MapFS{}})
	if err != nil {
		t.Fatal(err)
	}
	if !c.Failed(false) || c.Page != nil {
		t.Fatalf("not refused: %v", c.Diagnostics)
	}
	for _, form := range []Form{PDF, Text} {
		if out, err := c.View(form, text.Options{}); err == nil || out != nil {
			t.Errorf("%s: %d bytes, %v", form, len(out), err)
		}
	}
	out, err := c.View(JSON, text.Options{})
	if err != nil {
		t.Fatal(err)
	}
	var got struct {
		Record      struct{ Title, Number string }
		Diagnostics []struct {
			File, Severity string
			Line           int
		}
	}
	if err := json.Unmarshal(out, &got); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	if got.Record.Title != "Broken" || got.Record.Number != "N-1" {
		t.Errorf("who it is: %+v", got.Record)
	}
	placed := false
	for _, d := range got.Diagnostics {
		placed = placed || d.File == "broken.toml" && d.Severity == "error" && d.Line == 3
	}
	if !placed {
		t.Errorf("what is wrong: %+v", got.Diagnostics)
	}
}

func TestStrict(t *testing.T) {
	c := &Compiled{}
	c.Diagnostics.Add(diag.Warning("R1", diag.Span{}, "doubtful"), diag.Note("R2", diag.Span{}, "noted"))
	if c.Failed(false) || !c.Failed(true) {
		t.Error("a warning fails exactly when strict")
	}
	c.Diagnostics = c.Diagnostics[1:]
	if c.Failed(true) {
		t.Error("a note fails")
	}
}

func TestFiles(t *testing.T) {
	named := func(s string) record.String { return record.String{V: s, Stated: true} }
	rec := &record.Record{
		Results: []*record.Result{
			{Data: &record.Data{File: named("a.csv")}}, {}, nil,
			{Data: &record.Data{File: named("b.csv")}}, {Data: &record.Data{File: named("a.csv")}},
		},
		Earlier:   []*record.Result{{Data: &record.Data{File: named("c.csv")}}},
		Witnesses: []*record.Witness{{Token: named("t.tsr"), CA: named("ca.pem")}, nil},
	}
	rec.Head.Typeface = named("face.ttf")
	c := &Compiled{Loaded: &protocol.Loaded{Record: rec}}
	want := []string{"a.csv", "b.csv", "c.csv", "face.ttf", "t.tsr", "ca.pem"}
	if got := c.Files(); !slices.Equal(got, want) {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestPanicsBecomeFaults(t *testing.T) {
	r := Real()
	r.PDF = func(io.Writer, *page.Document) error { panic("no page") }
	c := &Compiled{rooms: r, Page: &page.Document{}}
	var fault *Fault
	if out, err := c.View(PDF, text.Options{}); !errors.As(err, &fault) || out != nil {
		t.Errorf("%v, %d bytes", err, len(out))
	}
}
