package protocol

import (
	"strings"
	"testing"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

func TestStartersLoadCleanly(t *testing.T) {
	schema := parsedSchema(t)
	for _, m := range record.Measures {
		for _, claim := range SensibleClaims(m) {
			text, err := Starter(m.Word, claim)
			if !m.Ready {
				if err == nil {
					t.Errorf("%s is not computed, and has a starting record", m.Word)
				}
				continue
			}
			if err != nil {
				t.Errorf("%s, %s: %v", m.Word, claim, err)
				continue
			}
			in := Load("new.toml", text, nil, nil)
			for _, d := range in.Diagnostics {
				t.Errorf("%s, %s: %s", m.Word, claim, diag.Format(d, in.Source))
			}
			if f := validate(schema, plain(in.Record.Tree), ""); f != "" {
				t.Errorf("%s, %s: the schema refuses it: %s", m.Word, claim, f)
			}
			if got := in.Record.Plan.Hypotheses[0].Claim.V; got != claim {
				t.Errorf("%s: the claim is %q, not %q", m.Word, got, claim)
			}
			if got := in.Record.Plan.Outcomes[0].Measure.V; got != m.Word {
				t.Errorf("the measure is %q, not %q", got, m.Word)
			}
			for i, line := range strings.Split(string(text), "\n") {
				if len([]rune(line)) > 150 || line != strings.TrimRight(line, " ") {
					t.Errorf("%s, %s: line %d is long or ends in blanks: %q", m.Word, claim, i+1, line)
				}
			}
		}
	}
}

func TestStarterRefuses(t *testing.T) {
	for _, c := range [][3]string{
		{"mode", "", "no measure"}, {"mean", "better", "no claim"},
	} {
		if _, err := Starter(c[0], c[1]); err == nil || !strings.Contains(err.Error(), c[2]) {
			t.Errorf("%q, %q: %v", c[0], c[1], err)
		}
	}
	if text, err := Starter("", ""); err != nil || !strings.Contains(string(text), `"superior"`) {
		t.Errorf("the default starting record: %v", err)
	}
}
