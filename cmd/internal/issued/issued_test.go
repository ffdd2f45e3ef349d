package issued

import (
	"bytes"
	"compress/zlib"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"github.com/google/go-cmp/cmp"

	"steelyard/cmd/internal/pipeline"
	"steelyard/protocol"
	"steelyard/render/pdf"
	"steelyard/render/text"
)

const trial = `steelyard = 1
record = { title = "One", setting = "quality", attach = ["record", "data"] }
plan.question = "Do they differ?"
plan.alpha = { two_sided = 0.05 }
plan.outcome.peel = { label = "Peel", measure = "mean-difference", groups = ["new", "old"] }
plan.hypothesis.H1 = { outcome = "peel", claim = "differs" }
[[result]]
study = "S1"
outcome = "peel"
date = 2025-12-12
data = { file = "peel.csv", value = "peel", group = "arm" }
`

const peel = "arm,peel\nnew,9.1\nnew,9.2\nnew,9.4\nold,8.1\nold,8.6\nold,8.7\n"

// document is the PDF of a record whose folder holds the data.
func document(t testing.TB, record string) []byte {
	t.Helper()
	c, err := pipeline.Real().Compile(pipeline.Input{Name: "trial.toml", Text: []byte(record), Files: fstest.MapFS{"peel.csv": {Data: []byte(peel)}}})
	if err != nil || c.Diagnostics.HasErrors() {
		t.Fatal(err, c.Diagnostics)
	}
	out, err := c.View(pipeline.PDF, text.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func verified(t *testing.T, file []byte, opt Options) *Verified {
	t.Helper()
	if opt.Rooms.Load == nil {
		opt.Rooms = pipeline.Real()
	}
	v, err := Verify(file, opt)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func TestOpen(t *testing.T) {
	d, err := Open(document(t, trial))
	if err != nil {
		t.Fatal(err)
	}
	if d.Name != "trial.toml" || string(d.Record) != trial || d.Seal != nil || d.Engine == "" || string(d.Data["peel.csv"]) != peel || !d.Ours || !d.Intact {
		t.Errorf("%q, engine %q, data %q, ours %v, intact %v", d.Name, d.Engine, d.Data, d.Ours, d.Intact)
	}
	// The numbers inside know nothing of the document that carries them.
	if !bytes.Contains(d.JSON, []byte(`"source_sha256"`)) || bytes.Contains(d.JSON, []byte(`"pdf`)) {
		t.Error("not the numbers of a result")
	}
}

// A file whose list of attachments is lost is sorted out by contents.
func TestTakeByContents(t *testing.T) {
	whole, err := Open(document(t, trial))
	if err != nil {
		t.Fatal(err)
	}
	var lost []pdf.Attachment
	for _, b := range [][]byte{whole.Data["peel.csv"], whole.JSON, []byte("steelyard seals 1\n"), whole.Record, []byte("anything")} {
		lost = append(lost, pdf.Attachment{Bytes: b})
	}
	d := &Document{Data: map[string][]byte{}, Pages: whole.Pages}
	d.take(lost)
	if d.Name != "trial.toml" || !bytes.Equal(d.Record, whole.Record) || !bytes.Equal(d.JSON, whole.JSON) || d.Seal == nil || string(d.Data["peel.csv"]) != peel || len(d.Data) != 1 {
		t.Errorf("%q, %d bytes of record, %d of numbers, data %q", d.Name, len(d.Record), len(d.JSON), d.Data)
	}
	// Names that lead elsewhere lose their folders.
	d = &Document{Data: map[string][]byte{}}
	d.take([]pdf.Attachment{{Name: `..\..\up/x.toml`, Relation: "Source", Bytes: []byte("x")}})
	if d.Name != "x.toml" {
		t.Errorf("name %q", d.Name)
	}
}

func TestVerifyFindings(t *testing.T) {
	file := document(t, trial)
	if v := verified(t, file, Options{}); v.Finding != Reproduced || len(v.Differences) > 0 {
		t.Errorf("%v %v", v.Finding, v.Differences)
	}
	bare := document(t, strings.Replace(trial, `["record", "data"]`, `["record"]`, 1))
	v := verified(t, bare, Options{})
	if v.Finding != NotCheckable || !strings.Contains(v.Reason, "peel.csv") || v.Help == "" {
		t.Errorf("%v %q", v.Finding, v.Reason)
	}
	if v := verified(t, bare, Options{Folder: fstest.MapFS{"peel.csv": {Data: []byte(peel)}}}); v.Finding != Reproduced || len(v.Outside) != 1 {
		t.Errorf("%v %v", v.Finding, v.Outside)
	}
	other := strings.Replace(peel, "9.4", "9.7", 1)
	if v := verified(t, bare, Options{Folder: fstest.MapFS{"peel.csv": {Data: []byte(other)}}}); v.Finding != Differs || v.Differences[0].Class != File {
		t.Errorf("%v %v", v.Finding, v.Differences)
	}
	// Data inside come before those of a folder.
	if v := verified(t, file, Options{Folder: fstest.MapFS{"peel.csv": {Data: []byte(other)}}}); v.Finding != Reproduced || len(v.Outside) != 0 {
		t.Errorf("%v %v", v.Finding, v.Outside)
	}
	none := document(t, strings.Replace(trial, `["record", "data"]`, `[]`, 1))
	if v := verified(t, none, Options{}); v.Finding != NotCheckable || !strings.Contains(v.Reason, "no record") {
		t.Errorf("%v %q", v.Finding, v.Reason)
	}
	for _, bad := range [][]byte{[]byte("%PDF-1.7\n"), []byte("hello"), nil} {
		if _, err := Verify(bad, Options{Rooms: pipeline.Real()}); err == nil {
			t.Errorf("%q: no error", bad)
		}
	}
}

// A record that takes too long is given up.
func TestVerifyLimit(t *testing.T) {
	file := document(t, trial)
	rooms := pipeline.Real()
	gate := make(chan bool)
	defer close(gate)
	rooms.Load = func(name string, text, seal []byte, files fs.FS) *protocol.Loaded {
		<-gate
		return protocol.Load(name, text, seal, files)
	}
	v := verified(t, file, Options{Rooms: rooms, Limit: time.Millisecond})
	if v.Finding != NotCheckable || !strings.Contains(v.Reason, "longer than 1ms") {
		t.Errorf("%v %q", v.Finding, v.Reason)
	}
}

// A fault of the program on what a file carries is an error, no panic.
func TestVerifyContains(t *testing.T) {
	rooms := pipeline.Real()
	rooms.Load = func(string, []byte, []byte, fs.FS) *protocol.Loaded { panic("broken") }
	_, err := Verify(document(t, trial), Options{Rooms: rooms})
	var fault *pipeline.Fault
	if !errors.As(err, &fault) {
		t.Errorf("%v", err)
	}
}

func TestCarried(t *testing.T) {
	c := carried{map[string][]byte{"sub/a.csv": []byte("a"), "../up.csv": []byte("up")}, fstest.MapFS{"b.csv": {Data: []byte("b")}, "sub/a.csv": {Data: []byte("not this")}}}
	for name, want := range map[string]string{"sub/a.csv": "a", "b.csv": "b"} {
		got, err := fs.ReadFile(c, name)
		if err != nil || string(got) != want {
			t.Errorf("%s: %q, %v", name, got, err)
		}
	}
	for _, name := range []string{"../up.csv", "none.csv"} {
		if _, err := c.Open(name); err == nil {
			t.Errorf("%s opens", name)
		}
	}
	if _, err := (carried{}).Open("b.csv"); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("%v", err)
	}
}

func TestCompareResults(t *testing.T) {
	const old = `{"steelyard":1,"engine":"1","hypotheses":[{"name":"H1","p":0.04,"low":-1.5,"high":null,"verdict":"open","curve":[[1,0.5],[2,0.25]]},{"name":"H2","verdict":"open"}],"diagnostics":[1]}`
	for _, tt := range []struct {
		change, to string
		want       []Difference
	}{
		{`"engine":"1"`, `"engine":"2"`, nil},
		{`0.04`, `4e-2`, nil},
		{`0.04`, `0.0400000000001`, nil},
		{`[1]`, `[2]`, nil},
		{`0.04`, `0.0400001`, []Difference{{Number, "", "H1 p", "0.04", "0.0400001"}}},
		{`0.04`, `0.04000001`, []Difference{{Number, "", "H1 p", "0.04", "0.04000001"}}},
		{`null`, `3`, []Difference{{Number, "", "H1 high", "no limit", "3"}}},
		{`"low":-1.5,`, ``, []Difference{{Number, "", "H1 low", "-1.5", ""}}},
		{`,{"name":"H2","verdict":"open"}`, ``, []Difference{{Verdict, "", "H2", "open", ""}}},
		{`"p":0.04,"low":-1.5,"high":null,"verdict":"open"`, `"p":0.03,"low":-1.5,"high":null,"verdict":"established"`,
			[]Difference{{Verdict, "", "H1 verdict", "open", "established"}, {Number, "", "H1 p", "0.04", "0.03"}}},
		{`[2,0.25]`, `[2,0.26]`, []Difference{{Number, "", "H1 curve", "[[1, 0.5], [2, 0.25]]", "[[1, 0.5], [2, 0.26]]"}}},
	} {
		if !strings.Contains(old, tt.change) {
			t.Fatalf("nothing to change: %s", tt.change)
		}
		got, err := compareResults([]byte(old), []byte(strings.Replace(old, tt.change, tt.to, 1)))
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(tt.want, got); diff != "" {
			t.Errorf("%s to %s:\n%s", tt.change, tt.to, diff)
		}
	}
	if _, err := compareResults([]byte("["), []byte("{}")); err == nil {
		t.Error("anything is a result")
	}
}

func TestComparePages(t *testing.T) {
	page := func(s ...string) (out []pdf.Shown) {
		for _, x := range s {
			out = append(out, pdf.Shown{Text: x})
		}
		return out
	}
	for _, tt := range []struct {
		was, now []pdf.Shown
		want     []Difference
	}{
		{page("a b\nc"), page("ab c"), nil},
		{page("the mean is 4.1 N here"), page("the mean is 4.2 N here"), []Difference{{Number, "page 1", "after “the mean is”", "4.1", "4.2"}}},
		{page("one two"), page("one three"), []Difference{{Words, "page 1", "after “one”", "two", "three"}}},
		{page("x", "a 1 b 2 c"), page("x", "a b 3 c"), []Difference{{Number, "page 2", "after “a”", "1", ""}, {Number, "page 2", "after “a 1 b”", "2", "3"}}},
		{page("x", "y"), page("x"), []Difference{{Words, "pages", "number of pages", "2", "1"}, {Words, "page 2", "at its beginning", "y", ""}}},
	} {
		if diff := cmp.Diff(tt.want, comparePages(tt.was, tt.now)); diff != "" {
			t.Errorf("%v, %v:\n%s", tt.was, tt.now, diff)
		}
	}
	// Any length is compared in bounded time.
	long := func(first string) []pdf.Shown { return page(first + strings.Repeat(" word 1", 200000)) }
	if got := comparePages(long("a"), page(strings.Repeat("other 2 ", 200000))); len(got) != 1 {
		t.Errorf("%d differences", len(got))
	}
	if sameDrawing(page("a"), page("a", "b")) || sameDrawing(page("a"), []pdf.Shown{{Drawing: [32]byte{1}}}) || !sameDrawing(page("a"), page("b")) {
		t.Error("drawings")
	}
}

func TestCompareNumbers(t *testing.T) {
	was := []pdf.Shown{{Text: "Engine 0.1.0: 4.1 and\n4.1, −3"}}
	now := []pdf.Shown{{Text: "4.1 then −3; 4.2"}, {Text: "made by 0.2.0"}}
	want := []Difference{
		{Number, "pages", "the number 4.1", "printed twice", "printed once"},
		{Number, "pages", "the number 4.2", "not printed", "printed once"},
	}
	want[0].Old = "printed 2 times"
	if diff := cmp.Diff(want, compareNumbers(was, now, "0.1.0", "0.2.0")); diff != "" {
		t.Error(diff)
	}
}

// Whatever is done to a document, verifying ends without a panic, and never
// calls a document reproduced whose bytes are not those that were written.
func TestVerifyDamaged(t *testing.T) {
	file := document(t, trial)
	step := len(file)/20 + 1
	for i := 0; i < len(file); i += step {
		bad := bytes.Clone(file)
		bad[i] ^= 0x21
		for _, b := range [][]byte{bad, file[:i], append(bytes.Clone(file[:i]), file[min(len(file), i+9):]...)} {
			v, err := Verify(b, Options{Rooms: pipeline.Real()})
			if err == nil && v.Finding == Reproduced {
				t.Errorf("byte %d: reproduced", i)
			}
		}
	}
}

// Files made to be expensive, or to speak for the program, come to an end.
func TestVerifyHostile(t *testing.T) {
	embedded := func(filter string, texts ...[]byte) []byte {
		b := []byte("%PDF-1.7\n<steelyard:writtenBy>Steelyard</steelyard:writtenBy>\n")
		for i, text := range texts {
			b = fmt.Appendf(b, "%d 0 obj<</Type/EmbeddedFile%s>>stream\n%s\nendstream endobj\n", i+1, filter, text)
		}
		return b
	}
	packed := func(text string, times int) []byte {
		var b bytes.Buffer
		z, _ := zlib.NewWriterLevel(&b, zlib.BestSpeed)
		for range times {
			io.WriteString(z, text)
		}
		z.Close()
		return b.Bytes()
	}
	many := make([][]byte, 30000)
	for i := range many {
		many[i] = []byte(`{"steelyard":1,"engine":"x","files":[{"path":"a","sha256":""}]}`)
	}
	for name, tt := range map[string]struct {
		file []byte
		want string // the finding, or a part of the error
	}{
		"a stream that unpacks to more than is taken": {embedded("/Filter/FlateDecode", packed(strings.Repeat("\x00", 1<<20), 120)), "too large when unpacked"},
		"a record of twenty megabytes":                {embedded("/Filter/FlateDecode", append([]byte{}, packed("steelyard = 1\n"+strings.Repeat("#", 1<<20)+"\n", 20)...)), "larger than 16 MiB"},
		"a record nested deep":                        {embedded("", []byte("steelyard = 1\nx = "+strings.Repeat("[", 1<<19))), "different"},
		"numbers nested deep":                         {embedded("", []byte("steelyard = 1\n"), []byte(`{"steelyard":1,"engine":"1","x":`+strings.Repeat("[", 1<<19))), "different"},
		"many files inside":                           {embedded("", many...), "not-checkable"},
		"signs that steer a terminal":                 {embedded("", []byte("steelyard = 1\n\x1b[31mred = 1\n")), "different"},
	} {
		v, err := Verify(tt.file, Options{Rooms: pipeline.Real(), Limit: time.Minute})
		got := ""
		if err != nil {
			got = err.Error()
		} else {
			got = v.Finding.String()
		}
		if !strings.Contains(got, tt.want) {
			t.Errorf("%s: %s", name, got)
		}
	}
}

func FuzzOpen(f *testing.F) {
	f.Add([]byte("%PDF-1.7\n1 0 obj<</Type/EmbeddedFile>>stream\nsteelyard = 1\nendstream endobj\n"))
	f.Add([]byte("%PDF-1.7\n1 0 obj<</Type/EmbeddedFile>>stream\n{ \"steelyard\": 1, \"engine\": \"1\" }\nendstream endobj\n"))
	f.Fuzz(func(t *testing.T, file []byte) {
		d, err := Open(file)
		if err != nil {
			return
		}
		Compare(d, d)
	})
}

// ExampleVerify verifies a file from the disk.
func ExampleVerify() {
	file, err := os.ReadFile("none.pdf")
	if err != nil {
		fmt.Println("no such file")
		return
	}
	v, err := Verify(file, Options{Rooms: pipeline.Real()})
	fmt.Println(v, err)
	// Output: no such file
}
