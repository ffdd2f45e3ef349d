package batch

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"steelyard/cmd/internal/pipeline"
	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
	"steelyard/render/page"
	"steelyard/render/text"
)

// fakes are rooms whose record is a text: "error", "warning" and "panic" do
// what they say, "read FILE" reads a file of the folder.
func fakes() pipeline.Rooms {
	return pipeline.Rooms{
		Load: func(name string, text, seal []byte, files fs.FS) *protocol.Loaded {
			src := diag.NewSource(name, text)
			in := &protocol.Loaded{Source: src, Record: &record.Record{Source: src}}
			switch word, rest, _ := strings.Cut(string(text), " "); word {
			case "error":
				in.Diagnostics.Add(diag.Error("R1", diag.Span{}, "wrong"))
			case "warning":
				in.Diagnostics.Add(diag.Warning("R2", diag.Span{}, "doubtful"))
			case "panic":
				panic("broken")
			case "read":
				b, err := fs.ReadFile(files, rest)
				if err != nil {
					in.Diagnostics.Add(diag.Error("D1", diag.Span{}, "%v", err))
				}
				in.PlanSHA256 = string(b)
			case "seal":
				in.PlanSHA256 = string(seal)
			}
			return in
		},
		Run: func(in *protocol.Loaded, engine string) *result.Result {
			return &result.Result{Engine: engine, Diagnostics: in.Diagnostics, Record: result.Record{PlanSHA256: in.PlanSHA256}}
		},
		Compose: func(in *protocol.Loaded, res *result.Result) *page.Document {
			return &page.Document{Title: in.Source.Name + " " + string(in.Source.Text) + " " + res.Record.PlanSHA256}
		},
		PDF: func(w io.Writer, doc *page.Document) error {
			if strings.Contains(doc.Title, "unprintable") {
				return errors.New("no such glyph")
			}
			_, err := io.WriteString(w, "pdf of "+doc.Title)
			return err
		},
		JSON: func(w io.Writer, in *protocol.Loaded, res *result.Result) error {
			_, err := io.WriteString(w, `{"steelyard": 1}`)
			return err
		},
		Text: func(w io.Writer, doc *page.Document, opt text.Options) error {
			_, err := io.WriteString(w, "text")
			return err
		},
	}
}

func worker(forms ...pipeline.Form) Worker {
	return Worker{Rooms: fakes(), Forms: forms, Now: time.Now,
		OwnPDF: func(b []byte) bool { return strings.HasPrefix(string(b), "pdf of ") }}
}

func folder(t *testing.T, files map[string]string) string {
	t.Helper()
	dir := t.TempDir()
	t.Chdir(dir)
	for name, text := range files {
		os.MkdirAll(filepath.Dir(name), 0o777)
		if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

func read(name string) string {
	b, err := os.ReadFile(name)
	if err != nil {
		return "?" + err.Error()
	}
	return string(b)
}

func TestDo(t *testing.T) {
	for _, tt := range []struct {
		name, record string
		strict       bool
		exit         int
		pdf          string // "" none
	}{
		{"clean", "clean", false, ExitDone, "pdf of a.toml clean "},
		{"error", "error", false, ExitRecord, ""},
		{"warning", "warning", false, ExitDone, "pdf of a.toml warning "},
		{"strict warning", "warning", true, ExitRecord, ""},
		{"panic", "panic", false, ExitWorld, ""},
		{"unprintable", "unprintable", false, ExitWorld, ""},
		{"data", "read data.csv", false, ExitDone, "pdf of a.toml read data.csv 1,2"},
		{"data outside", "read ../outside.csv", false, ExitRecord, ""},
		{"data through a link", "read link.csv", false, ExitRecord, ""},
		{"seal", "seal", false, ExitDone, "pdf of a.toml seal chain"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			folder(t, map[string]string{"r/a.toml": tt.record, "r/data.csv": "1,2", "outside.csv": "secret", "r/a.seal": "chain"})
			if err := os.Symlink(filepath.Join("..", "outside.csv"), filepath.Join("r", "link.csv")); err != nil {
				t.Logf("no symbolic links here: %v", err)
			}
			w := worker(pipeline.PDF, pipeline.JSON)
			w.Strict = tt.strict
			rep := w.Do(FoundIn("r", filepath.Join("r", "a.toml")))
			if got := rep.Exit(tt.strict); got != tt.exit {
				t.Errorf("exit %d, want %d (%v)", got, tt.exit, rep.Err)
			}
			pdf := filepath.Join("r", "a.pdf")
			if tt.pdf == "" {
				if _, err := os.Stat(pdf); err == nil || len(rep.Wrote) > 0 {
					t.Errorf("wrote %q", rep.Wrote)
				}
				return
			}
			if got := read(pdf); got != tt.pdf {
				t.Errorf("wrote %q, want %q", got, tt.pdf)
			}
			if !slices.Equal(rep.Wrote, []string{pdf, filepath.Join("r", "a.json")}) {
				t.Errorf("wrote %q", rep.Wrote)
			}
		})
	}
}

func TestOldOutputsStay(t *testing.T) {
	for _, record := range []string{"error", "panic", "unprintable"} {
		folder(t, map[string]string{"a.toml": record, "a.pdf": "pdf of before", "a.json": `{"steelyard": 0}`})
		worker(pipeline.JSON, pipeline.PDF).Do(FoundIn(".", "a.toml"))
		if read("a.pdf") != "pdf of before" || read("a.json") != `{"steelyard": 0}` {
			t.Errorf("%s: outputs are %q, %q", record, read("a.pdf"), read("a.json"))
		}
	}
}

func TestFaultOfTheProgramSaysSo(t *testing.T) {
	folder(t, map[string]string{"a.toml": "panic"})
	rep := worker(pipeline.PDF).Do(FoundIn(".", "a.toml"))
	var fault *pipeline.Fault
	if !errors.As(rep.Err, &fault) || fault.What != "broken" || len(fault.Stack) == 0 {
		t.Errorf("error %v", rep.Err)
	}
	if want := "a.toml: a fault of this program, not of the record: broken"; rep.Err.Error() != want {
		t.Errorf("message %q", rep.Err)
	}
}

func TestRecordThatIsTooLarge(t *testing.T) {
	folder(t, map[string]string{"a.toml": strings.Repeat("#", maxRecord+1)})
	rep := worker(pipeline.PDF).Do(FoundIn(".", "a.toml"))
	if rep.Err == nil || rep.Exit(false) != ExitWorld || !strings.Contains(rep.Err.Error(), "larger than 16 MiB") {
		t.Errorf("error %v", rep.Err)
	}
}

func TestPrintWritesNothing(t *testing.T) {
	folder(t, map[string]string{"a.toml": "error", "b.toml": "clean"})
	for _, form := range []pipeline.Form{pipeline.JSON, pipeline.Text} {
		w := worker()
		w.Print = &form
		bad, good := w.Do(FoundIn(".", "a.toml")), w.Do(FoundIn(".", "b.toml"))
		if (bad.Printed != nil) != (form == pipeline.JSON) || bad.Exit(false) != ExitRecord {
			t.Errorf("%s of a record with errors: %q", form, bad.Printed)
		}
		if good.Printed == nil || good.Exit(false) != ExitDone {
			t.Errorf("%s: %q", form, good.Printed)
		}
	}
	w := worker()
	form := pipeline.JSON
	w.Print, w.Stdin = &form, strings.NewReader("read b.toml")
	if rep := w.Do(Found{Path: Stdin}); rep.Err != nil || rep.Compiled.Loaded.PlanSHA256 != "clean" {
		t.Errorf("standard input: %v", rep.Err)
	}
	entries, _ := os.ReadDir(".")
	if len(entries) != 2 {
		t.Errorf("the folder holds %d files", len(entries))
	}
}

func TestClash(t *testing.T) {
	w := worker(pipeline.PDF)
	list := []Found{FoundIn("a", "a/x.toml"), FoundIn("b", "b/x.toml")}
	if err := w.Clash(list); err != nil {
		t.Errorf("beside their records: %v", err)
	}
	w.Out = "out"
	if err := w.Clash(list); err == nil {
		t.Error("no clash in one folder")
	}
	if err := w.Clash([]Found{FoundIn("", "a/x.toml"), FoundIn("", "b/x.toml")}); err != nil {
		t.Errorf("in folders of their own: %v", err)
	}
}
