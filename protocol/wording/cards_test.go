package wording

import (
	"testing"
)

// Every class but decisions has a code with a card, patterns, and cases; every
// code that belongs to no class has a card.
func TestClasses(t *testing.T) {
	cases := map[Class]int{}
	for _, m := range readPhrases(t) {
		for _, w := range m.wants {
			cases[Class(w.class)]++
		}
	}
	with := map[Class]bool{}
	for _, e := range append(entries[:len(entries):len(entries)], moreEntries...) {
		with[e.class] = true
	}
	cards := map[string]bool{}
	for _, k := range Cards {
		if cards[k.Word] || k.Title == "" || k.Meaning == "" || k.Source == "" || k.Repair == "" {
			t.Errorf("%s: a second card, or one with a gap", k.Word)
		}
		cards[k.Word] = true
	}
	for _, c := range Classes {
		if !with[c] {
			t.Errorf("%s: no pattern", c)
		}
		if c != Decision && !cards[c.Code()] {
			t.Errorf("%s: no card for %s", c, c.Code())
		}
	}
	for _, code := range []string{NotChecked, OppositeDirection, OnlySuggested, NoResults, NotJudged} {
		if !cards[code] {
			t.Errorf("%s: no card", code)
		}
	}
	for _, c := range []Class{NoEffect, NotSignificant, Proof, Difference, Superiority, Change, Relevance, Equivalence, Noninferiority, Trend, Causation, Safety, Generality, Misread} {
		if cases[c] < 4 {
			t.Errorf("%s: %d cases", c, cases[c])
		}
	}
}
