package effect

import (
	"encoding/json"
	"math"
	"testing"
)

// TestSpreadReference holds every method of spread, relation and shares inside
// limits against R. A limit of spec written as 1e999 in the rows is infinite.
func TestSpreadReference(t *testing.T) {
	seen := map[string]bool{}
	for _, row := range values(t, "spread.json") {
		o := spreadRow(t, row)
		in := Input{Sample: Group{N: o.N, Mean: o.Mean, SD: o.SD}, First: groupOfValues(o.First), Second: groupOfValues(o.Second)}
		if len(o.First) > 0 && len(o.First) == len(o.Second) {
			in.Pairs = Pairs{N: float64(len(o.First)), First: o.First, Second: o.Second, R: pearson(o.First, o.Second),
				FirstSD: in.First.SD, SecondSD: in.Second.SD, HasParts: true}
			in.Sample.N, in.Sample.R = in.Pairs.N, in.Pairs.R
		}
		if len(o.Spec) == 2 {
			in.Spec = [2]float64{o.Spec[0], o.Spec[1]}
		}
		inf := analysed(t, o.Measure, o.Method, in)
		if inf.Word != o.Method {
			t.Errorf("%s: %s was used", row.ID, inf.Word)
		}
		o.check(t, row, inf)
		seen[o.Measure+" "+o.Method] = true
	}
	for measure, methods := range spread {
		for method := range methods {
			if !seen[measure+" "+method] && measure+" "+method != "conforming-share any" { // the rows of agreement go through it
				t.Errorf("no row for %s of %s", method, measure)
			}
		}
	}
}

// spreadRow reads a row whose spec may hold -1e999.
func spreadRow(t *testing.T, row valueRow) ofRow {
	t.Helper()
	var raw map[string]json.RawMessage
	row.input(t, &raw)
	open := string(raw["spec"]) == "[-1e999, 4.5]"
	if open {
		raw["spec"] = json.RawMessage("[0, 4.5]")
	}
	text, err := json.Marshal(raw)
	if err != nil {
		t.Fatal(err)
	}
	var o ofRow
	if err := json.Unmarshal(text, &o); err != nil {
		t.Fatalf("%s: %v", row.ID, err)
	}
	if open {
		o.Spec[0] = math.Inf(-1)
	}
	return o
}
