package wording

import (
	"testing"

	"steelyard/protocol/record"
)

// Every class has its card, its code, patterns, cases in the corpus, and
// claims that exist.
func TestClasses(t *testing.T) {
	if len(Cards) != len(Classes) {
		t.Fatalf("%d cards, %d classes", len(Cards), len(Classes))
	}
	seen := map[string]int{}
	for _, name := range []string{"testdata/corpus.txt", "testdata/heldout.txt"} {
		for _, m := range readCorpus(t, name) {
			for _, w := range m.wants {
				seen[w.class]++
			}
		}
	}
	for i, c := range Classes {
		k := Cards[i]
		if k.Word != c.Code() || k.Title == "" || k.Meaning == "" || k.Source == "" || k.Repair == "" {
			t.Errorf("%s: card %q", c, k.Word)
		}
		if seen[string(c)] < 5 {
			t.Errorf("%s: %d cases", c, seen[string(c)])
		}
		for _, claim := range c.SupportedBy() {
			if record.ClaimOf(claim) == nil {
				t.Errorf("%s: no claim %q", c, claim)
			}
		}
	}
	for _, p := range patterns {
		if len(p.items) == 0 {
			t.Errorf("%s: an empty pattern", p.class)
		}
	}
}
