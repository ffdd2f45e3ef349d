package pipeline

import (
	"errors"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"testing"
	"testing/fstest"

	"steelyard/render/text"
)

// seeds are the records of the project, which begin every fuzzing.
func seeds(f *testing.F) (list [][]byte) {
	f.Helper()
	for _, pattern := range []string{"../../../examples/*.toml", "../../../testdata/records/*.toml"} {
		names, err := filepath.Glob(pattern)
		if err != nil || len(names) == 0 {
			f.Fatalf("%s: %d records, %v", pattern, len(names), err)
		}
		for _, name := range names {
			src, err := os.ReadFile(name)
			if err != nil {
				f.Fatal(err)
			}
			list = append(list, src)
		}
	}
	return append(list, []byte(smallest))
}

// whole demands of any record: no panic, every place inside the text, and
// either errors or all three views.
func whole(t *testing.T, src []byte) {
	files := fstest.MapFS{"d.csv": {Data: []byte("g,v\na,1\na,2\nb,3\nb,5\n")}}
	c, err := Real().Compile(Input{Name: "fuzz.toml", Text: src, Files: files})
	if err != nil {
		var fault *Fault
		if errors.As(err, &fault) {
			t.Fatalf("%v\n%s", err, fault.Stack)
		}
		t.Fatal(err)
	}
	for _, d := range c.Diagnostics {
		if d.Span.Start < 0 || d.Span.End > len(src) || d.Span.Start > d.Span.End {
			t.Errorf("place %v outside the text of %d bytes: %s", d.Span, len(src), d.Message)
		}
	}
	if c.Diagnostics.HasErrors() {
		return
	}
	for form := range Forms {
		if _, err := c.View(Form(form), text.Options{Width: 80}); err != nil {
			t.Error(err)
		}
	}
}

// FuzzCompile takes any text all the way.
func FuzzCompile(f *testing.F) {
	f.Add([]byte(broken))
	f.Add([]byte("steelyard = 1"))
	for _, src := range seeds(f) {
		f.Add(src)
	}
	f.Fuzz(whole)
}

var numberInRecord = regexp.MustCompile(`[ \[]-?\d+(\.\d+)?[ ,\]\n]`)

// FuzzNumbers puts any number in the place of one of a whole record.
func FuzzNumbers(f *testing.F) {
	records := seeds(f)
	for i := range records {
		for place := range 5 {
			for _, v := range []float64{0, 1e300, -1} {
				f.Add(uint(i), uint(place), v)
			}
		}
	}
	f.Fuzz(func(t *testing.T, i, place uint, v float64) {
		src := records[i%uint(len(records))]
		at := numberInRecord.FindAllIndex(src, -1)
		if len(at) == 0 {
			t.Skip()
		}
		m := at[place%uint(len(at))]
		changed := append([]byte{}, src[:m[0]+1]...)
		changed = strconv.AppendFloat(changed, v, 'g', -1, 64)
		changed = append(changed, src[m[1]-1:]...)
		whole(t, changed)
	})
}

const smallest = `steelyard = 1
[record]
title = "T"
setting = "quality"
[plan]
question = "Q?"
alpha = { one_sided = 0.05 }
[plan.outcome.x]
label = "X"
unit = "N"
measure = "mean-difference"
better = "higher"
groups = ["a", "b"]
smallest = 0.8
why = "Below that nobody can tell the difference."
[plan.hypothesis.H1]
outcome = "x"
claim = "equivalent"
[plan.hypothesis.H2]
outcome = "y"
claim = "superior"
[plan.outcome.y]
label = "Y"
measure = "mean-difference"
better = "higher"
groups = ["a", "b"]
[[result]]
study = "S"
outcome = "x"
date = 2026-04-12
groups.a = { n = 24, mean = 11.92, sd = 1.31 }
groups.b = { n = 24, mean = 12.10, sd = 1.18 }
[[result]]
study = "S"
outcome = "y"
date = 2026-04-13
data = { file = "d.csv", value = "v", group = "g" }
`
