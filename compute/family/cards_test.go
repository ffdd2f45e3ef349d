package family

import (
	"testing"
	"testing/fstest"

	"steelyard/protocol"
	"steelyard/protocol/card"
)

func TestEveryProcedureHasACard(t *testing.T) {
	cards := map[string]card.Card{}
	for _, c := range Cards {
		if _, twice := cards[c.Word]; twice {
			t.Errorf("two cards for %s", c.Word)
		}
		cards[c.Word] = c
		if c.Title == "" || c.Meaning == "" || c.Formula == "" || c.Assumptions == "" || c.Source == "" {
			t.Errorf("%s: the card has gaps", c.Word)
		}
		if (c.Kind == card.Diagnostic) == (c.Repair == "") {
			t.Errorf("%s: a repair belongs to diagnostics", c.Word)
		}
	}
	for _, p := range Procedures() {
		if cards[string(p)].Kind != card.Procedure {
			t.Errorf("no card for %s", p)
		}
	}
	if _, ok := cards[Code]; !ok {
		t.Errorf("no card for %s", Code)
	}
}

func TestExamplesAreRecords(t *testing.T) {
	for _, c := range Cards {
		if c.Example == "" {
			continue
		}
		in := protocol.Load("example.toml", []byte(c.Example), nil, fstest.MapFS{})
		if in.Diagnostics.HasErrors() {
			t.Errorf("%s: %+v", c.Word, in.Diagnostics)
			continue
		}
		if f := in.Record.Plan.Families; len(f) != 1 || f[0].Procedure.V != c.Word {
			t.Errorf("%s: the example is not read as a record with that procedure", c.Word)
		}
	}
}
