package effect

import (
	"slices"
	"testing"

	"steelyard/protocol"
	"steelyard/protocol/card"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// TestCountCards demands one card for every count measure and for every
// method of each, complete, with an example that reads without errors.
func TestCountCards(t *testing.T) {
	for measure, methods := range counts {
		if n := cardsFor(card.Measure, measure, ""); n != 1 {
			t.Errorf("%d cards explain the measure %s", n, measure)
		}
		for method := range methods {
			if n := cardsFor(card.Method, method, measure); n != 1 {
				t.Errorf("%d cards explain %s of %s", n, method, measure)
			}
			if !record.MeasureOf(measure).HasMethod(method) {
				t.Errorf("%s: the language has no method %s", measure, method)
			}
		}
		for _, method := range record.MeasureOf(measure).Methods {
			if methods[method] == nil {
				t.Errorf("%s: method %s of the language is not here", measure, method)
			}
		}
	}
	for _, c := range countCards {
		if c.Title == "" || c.Meaning == "" || c.Formula == "" || c.Assumptions == "" || c.Source == "" {
			t.Errorf("card %s of %v is not complete", c.Word, c.Of)
		}
		got := protocol.Load("example.toml", []byte(c.Example), nil, exampleFiles())
		for _, d := range got.Diagnostics {
			// R208: the measure is not switched on yet, which is not the card's fault.
			if d.Severity == diag.SeverityError && d.Code != "R208" {
				t.Errorf("card %s of %v: %s", c.Word, c.Of, diag.OneLine(d, got.Source))
			}
		}
	}
}

func cardsFor(kind card.Kind, word, of string) int {
	n := 0
	for _, c := range countCards {
		if c.Kind == kind && c.Word == word && (of == "" || slices.Contains(c.Of, of)) {
			n++
		}
	}
	return n
}
