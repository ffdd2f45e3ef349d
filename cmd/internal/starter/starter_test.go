package starter

import (
	"io/fs"
	"strings"
	"testing"

	"steelyard/cmd/internal/pipeline"
	"steelyard/protocol/record"
)

// TestEveryStartingRecordIsClean compiles what every measure and claim begins
// with, as it is: no error, no warning, and a page.
func TestEveryStartingRecordIsClean(t *testing.T) {
	rooms := pipeline.Real()
	day := record.Date{Year: 2026, Month: 1, Day: 15}
	n := 0
	for _, m := range Measures() {
		for _, c := range Claims() {
			t.Run(m+" "+c, func(t *testing.T) {
				text, err := Record(m, c, day)
				if err != nil {
					t.Fatal(err)
				}
				out, err := rooms.Compile(pipeline.Input{Name: "new.toml", Text: []byte(text), Files: noFiles{}})
				if err != nil {
					t.Fatal(err)
				}
				if out.Failed(true) || out.Page == nil {
					t.Errorf("faults:\n%v\n%s", out.Diagnostics, text)
				}
				if len(out.Result.Hypotheses) != 1 || out.Result.Hypotheses[0].Verdict == "pending" {
					t.Errorf("the claim was not judged: %+v", out.Result.Hypotheses)
				}
				for i, line := range strings.Split(text, "\n") {
					if strings.Contains(line, "!(") || strings.HasSuffix(line, " ") || strings.Contains(line, "= ,") || strings.Contains(line, "=  ") {
						t.Errorf("line %d: %q", i+1, line)
					}
				}
			})
			n++
		}
	}
	if n == 0 {
		t.Error("this version computes no measure")
	}
}

func TestWordsThatAreRefused(t *testing.T) {
	day := record.Date{Year: 2026, Month: 1, Day: 15}
	if _, err := Record("mean-of-means", "differs", day); err == nil || !strings.Contains(err.Error(), "allowed are mean, ") {
		t.Errorf("error %v", err)
	}
	if _, err := Record("mean", "better", day); err == nil || !strings.Contains(err.Error(), "allowed are differs, ") {
		t.Errorf("error %v", err)
	}
}

type noFiles struct{}

func (noFiles) Open(name string) (fs.File, error) {
	return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrNotExist}
}
