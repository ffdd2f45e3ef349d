package combine

import (
	"testing"
	"testing/fstest"

	"steelyard/protocol"
	"steelyard/protocol/card"
)

func TestEveryMethodHasACard(t *testing.T) {
	cards := map[string]card.Card{}
	for _, c := range Cards {
		if _, twice := cards[c.Word]; twice {
			t.Errorf("two cards for %s", c.Word)
		}
		cards[c.Word] = c
		if c.Kind != card.Procedure || c.Title == "" || c.Meaning == "" || c.Formula == "" || c.Assumptions == "" || c.Source == "" {
			t.Errorf("%s: the card has gaps", c.Word)
		}
		in := protocol.Load("example.toml", []byte(c.Example), nil, fstest.MapFS{})
		if in.Diagnostics.HasErrors() {
			t.Errorf("%s: %+v", c.Word, in.Diagnostics)
			continue
		}
		if p := in.Record.Plan.Combinations; len(p) != 1 || p[0].Method.V != c.Word {
			t.Errorf("%s: the example does not use the method", c.Word)
		}
	}
	for _, m := range Methods {
		if _, ok := cards[m]; !ok {
			t.Errorf("no card for %s", m)
		}
	}
}
