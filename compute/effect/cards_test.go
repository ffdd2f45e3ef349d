package effect

import (
	"fmt"
	"regexp"
	"slices"
	"testing"
	"testing/fstest"

	"steelyard/protocol"
	"steelyard/protocol/card"
	"steelyard/protocol/record"
)

// TestCardsAreUnique: no word is explained twice for the same measure, and
// codes have their form.
func TestCardsAreUnique(t *testing.T) {
	code := regexp.MustCompile(`^S[12]\d\d$`)
	seen := map[string]bool{}
	for _, c := range Cards {
		of := c.Of
		if c.Kind != card.Method {
			of = []string{""}
		}
		for _, m := range of {
			key := fmt.Sprint(c.Kind, " ", c.Word, " ", m)
			if seen[key] {
				t.Errorf("%s of %q is explained twice", c.Word, m)
			}
			seen[key] = true
		}
		if (c.Kind == card.Diagnostic) != code.MatchString(c.Word) {
			t.Errorf("%q has kind %d", c.Word, c.Kind)
		}
		if c.Kind == card.Measure && record.MeasureOf(c.Word) == nil {
			t.Errorf("%q is no measure", c.Word)
		}
	}
}

// TestTablesDoNotOverlap: a method of a measure is computed in one file.
func TestTablesDoNotOverlap(t *testing.T) {
	seen := map[string]bool{}
	for _, table := range tables() {
		for measure, methods := range table {
			m := record.MeasureOf(measure)
			if m == nil {
				t.Errorf("%q is no measure", measure)
				continue
			}
			for word := range methods {
				if seen[measure+" "+word] {
					t.Errorf("%s of %s is computed twice", word, measure)
				}
				seen[measure+" "+word] = true
				if !m.HasMethod(word) {
					t.Errorf("the language has no method %q of %s", word, measure)
				}
			}
		}
	}
}

// exampleFiles are the data files that the examples name.
func exampleFiles() fstest.MapFS {
	files := fstest.MapFS{}
	for name, text := range ExampleFiles() {
		files[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return files
}

// TestEveryMethodHere: each measure and method that this package computes has
// one card, whose example names it. The door's tests compute the examples.
func TestEveryMethodHere(t *testing.T) {
	explained := func(kind card.Kind, word, of string) (found []card.Card) {
		for _, c := range Cards {
			if c.Kind == kind && c.Word == word && (of == "" || slices.Contains(c.Of, of)) {
				found = append(found, c)
			}
		}
		return found
	}
	for _, table := range tables() {
		for measure, methods := range table {
			if n := len(explained(card.Measure, measure, "")); n != 1 {
				t.Errorf("%d cards explain the measure %s", n, measure)
			}
			for method := range methods {
				if n := len(explained(card.Method, method, measure)); n != 1 {
					t.Errorf("%d cards explain %s of %s", n, method, measure)
				}
			}
		}
	}
	for _, c := range Cards {
		if c.Kind != card.Measure && c.Kind != card.Method {
			continue
		}
		in := protocol.Load("example.toml", []byte(c.Example), nil, exampleFiles())
		if in.Diagnostics.HasErrors() || len(in.Record.Plan.Outcomes) == 0 {
			t.Errorf("%s of %v: %+v", c.Word, c.Of, in.Diagnostics)
			continue
		}
		o, h := in.Record.Plan.Outcomes[0], in.Record.Plan.Hypotheses[0]
		switch {
		case c.Kind == card.Measure && o.Measure.V != c.Word:
			t.Errorf("the example of %s measures %s", c.Word, o.Measure.V)
		case c.Kind == card.Method && !slices.Contains(c.Of, o.Measure.V):
			t.Errorf("the example of %s measures %s", c.Word, o.Measure.V)
		case c.Kind == card.Method && h.Method.V != c.Word && o.Distribution.V != c.Word:
			t.Errorf("the example of %s has method %q", c.Word, h.Method.V)
		}
	}
}
