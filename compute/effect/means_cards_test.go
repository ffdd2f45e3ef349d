package effect

import (
	"bytes"
	"slices"
	"testing"

	"steelyard/protocol"
	"steelyard/protocol/card"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// TestMeansCards: every method of means has one card, whose example is a
// record without errors that names the method.
func TestMeansCards(t *testing.T) {
	files := exampleFiles()
	for _, c := range meansCards {
		if c.Kind != card.Method && c.Kind != card.Measure || c.Title == "" || c.Meaning == "" || c.Formula == "" || c.Assumptions == "" || c.Source == "" {
			t.Errorf("card %q is incomplete", c.Word)
		}
		for _, m := range c.Of {
			if measure := record.MeasureOf(m); measure == nil || !measure.HasMethod(c.Word) {
				t.Errorf("card %q is of %q, which has no such method", c.Word, m)
			}
		}
		in := protocol.Load("example.toml", []byte(c.Example), nil, files)
		if in.Diagnostics.HasErrors() {
			var b bytes.Buffer
			_ = in.Diagnostics.Write(&b, diag.NewSource("example.toml", []byte(c.Example)))
			t.Errorf("example of %q:\n%s", c.Word, &b)
			continue
		}
		word := in.Record.Plan.Outcomes[0].Measure.V
		if c.Kind == card.Method {
			word = in.Record.Plan.Hypotheses[0].Method.V
		}
		if word != c.Word {
			t.Errorf("example of %q does not name it", c.Word)
		}
	}
	for measure, methods := range means {
		if !slices.ContainsFunc(meansCards, func(c card.Card) bool { return c.Kind == card.Measure && c.Word == measure }) {
			t.Errorf("measure %q has no card", measure)
		}
		for method := range methods {
			n := 0
			for _, c := range meansCards {
				if c.Word == method && slices.Contains(c.Of, measure) {
					n++
				}
			}
			if n != 1 {
				t.Errorf("%s %s has %d cards", measure, method, n)
			}
		}
	}
	for _, c := range effectCards {
		if c.Kind != card.Diagnostic || c.Title == "" || c.Meaning == "" || c.Source == "" {
			t.Errorf("card %s is incomplete", c.Word)
		}
	}
}
