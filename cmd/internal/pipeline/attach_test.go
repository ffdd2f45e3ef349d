package pipeline

import (
	"io/fs"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/google/go-cmp/cmp"

	"steelyard/compute"
	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/render/text"
)

// carrying is a record that asks for its data inside; two of its files would
// have one name there.
const carrying = `steelyard = 1
record = { title = "T", setting = "quality", attach = ["record", "data"] }
plan.question = "Q?"
plan.alpha = { two_sided = 0.05 }
plan.outcome.x = { label = "X", measure = "mean-difference", groups = ["a", "b"] }
plan.outcome.y = { label = "Y", measure = "mean-difference", groups = ["a", "b"] }
plan.hypothesis.H1 = { outcome = "x", claim = "differs" }
[[result]]
study = "S"
outcome = "x"
date = 2026-04-12
data = { file = "d/e.csv", value = "v", group = "g" }
[[result]]
study = "S"
outcome = "y"
date = 2026-04-13
data = { file = "d_e.csv", value = "v", group = "g" }
`

const rows = "g,v\na,1\na,2\nb,3\nb,5\n"

func folder() fstest.MapFS {
	return fstest.MapFS{"d/e.csv": {Data: []byte(rows)}, "d_e.csv": {Data: []byte(rows + "b,6\n")}}
}

type attachment struct{ Name, Media, Relation, Modified, Description string }

func compiled(t *testing.T, r Rooms, in Input) *Compiled {
	t.Helper()
	c, err := r.Compile(in)
	if err != nil || c.Page == nil {
		t.Fatal(err, c.Diagnostics)
	}
	return c
}

func TestWhatIsAttached(t *testing.T) {
	in := Input{Name: "t.toml", Text: []byte(carrying), Seal: []byte{}, Files: folder()}
	c := compiled(t, Real(), in)
	var got []attachment
	for _, a := range c.Page.Attachments {
		got = append(got, attachment{a.Name, a.Media, a.Relation, a.Modified, a.Description})
	}
	want := []attachment{
		{"t.toml", "application/toml", "Source", "2026-04-13", "the record this document was made from"},
		{"t.seal", "text/plain", "Supplement", "2026-04-13", "the seals of the record"},
		{"t.json", "application/json", "Alternative", "2026-04-13", "the numbers of this document, in full"},
		{"d_e.csv", "text/csv", "Data", "2026-04-13", "data file d/e.csv"},
		{"d_e-2.csv", "text/csv", "Data", "2026-04-13", "data file d_e.csv"},
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
	numbers, err := c.View(JSON, text.Options{})
	if err != nil || string(numbers) != string(c.Page.Attachments[2].Bytes) {
		t.Error("the numbers inside are not those of --to json")
	}
	if string(c.Page.Attachments[4].Bytes) != rows+"b,6\n" {
		t.Error("the wrong data")
	}
	again := compiled(t, Real(), in)
	one, _ := c.View(PDF, text.Options{})
	two, _ := again.View(PDF, text.Options{})
	if string(one) != string(two) || len(one) == 0 {
		t.Error("two documents of one record")
	}
}

func TestNothingAttached(t *testing.T) {
	masked := Real()
	masked.Run = func(in *protocol.Loaded, engine string) *result.Result {
		res := compute.Run(in, engine)
		res.Masked = true
		return res
	}
	for _, tt := range []struct {
		rooms  Rooms
		attach string
		want   int
	}{
		{masked, `["record", "data"]`, 0},
		{Real(), `[]`, 0},
		{Real(), `["record"]`, 3},
		{Real(), `["data"]`, 2},
	} {
		in := Input{Name: "t.toml", Text: []byte(strings.Replace(carrying, `["record", "data"]`, tt.attach, 1)), Seal: []byte{}, Files: folder()}
		if got := len(compiled(t, tt.rooms, in).Page.Attachments); got != tt.want {
			t.Errorf("%s: %d files are attached, want %d", tt.attach, got, tt.want)
		}
	}
}

// moving is a folder whose files change from one reading to the next.
type moving struct{ reads map[string]int }

func (m moving) Open(name string) (fs.File, error) {
	m.reads[name]++
	return fstest.MapFS{name: {Data: []byte(rows + strings.Repeat("b,6\n", m.reads[name]))}}.Open(name)
}

func TestDataThatChangeMeanwhile(t *testing.T) {
	_, err := Real().Compile(Input{Name: "t.toml", Text: []byte(carrying), Files: moving{map[string]int{}}})
	if err == nil || !strings.Contains(err.Error(), "d/e.csv: changed while it was read") {
		t.Errorf("%v", err)
	}
}
