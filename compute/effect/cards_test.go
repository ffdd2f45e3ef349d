package effect

import (
	"fmt"
	"regexp"
	"testing"

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
