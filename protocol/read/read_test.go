package read

import (
	"os"
	"slices"
	"strings"
	"testing"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

const smallest = `steelyard = 1

[record]
title   = "Pouch seal strength with the new adhesive"
number  = "QR-2026-014"
setting = "quality"

[plan]
question = "Is the new adhesive as strong as the current one, to within 0.8 N?"
alpha    = { one_sided = 0.05 }

[plan.outcome.peel]
label    = "Seal peel strength"
unit     = "N"
measure  = "mean-difference"
groups   = ["new", "current"]
smallest = 0.8
why      = "Below 0.8 N the difference is lost in the line's own lot-to-lot spread."

[plan.hypothesis.H1]
outcome = "peel"
claim   = "equivalent"

[[result]]
study   = "Line 3, lot 0412"
outcome = "peel"
date    = 2026-04-12
groups.new     = { n = 24, mean = 11.92, sd = 1.31 }
groups.current = { n = 24, mean = 12.10, sd = 1.18 }
`

func TestSmallestRecord(t *testing.T) {
	rec, list := Record(diag.NewSource("a.toml", []byte(smallest)))
	for _, d := range list {
		t.Error(diag.OneLine(d, rec.Source))
	}
	if len(rec.Results) != 1 || len(rec.Results[0].Groups) != 2 || rec.Results[0].Groups[1].Mean.V != 12.1 {
		t.Fatalf("%+v", rec.Results)
	}
}

// TestRichRecord reads a record that uses every table without a fault.
func TestRichRecord(t *testing.T) {
	text, err := os.ReadFile("testdata/toml/rich.toml")
	if err != nil {
		t.Fatal(err)
	}
	rec, list := readWith(diag.NewSource("rich.toml", text), true)
	for _, d := range list {
		t.Error(diag.Format(d, rec.Source))
	}
	checkRead(t, text)
	checkRead(t, []byte(strings.ReplaceAll(string(text), "\n", "\r\n")))
	for _, k := range record.Keys {
		if k.Kind.IsTable() && !strings.HasPrefix(k.Path, "earlier_result.") && !writes(rec.Tree, strings.Split(k.Path, ".")) &&
			k.Path != "result.sample" && k.Path != "result.pairs" && k.Path != "result.effect" {
			t.Errorf("the record does not use %q", k.Path)
		}
	}
	h := rec.Plan.Hypotheses[1]
	null, low, high, _ := h.Points(rec.OutcomeNamed("harm"))
	if null != 1 || low != 1/1.2 || high != 1.2 {
		t.Errorf("the margin of H2: %v %v %v", null, low, high)
	}
	if got := rec.Results[0].Day(); got.String() != "2026-06-01" || !rec.Results[0].Known.Stated {
		t.Errorf("known on %v", got)
	}
	if got := rec.Plan.Question.V; got != "Does rest at noon shorten the stay, and does it do no harm?" {
		t.Errorf("the question is %q", got)
	}
	if l := rec.Results[5].Look; !l.Stated || !l.Unplanned {
		t.Errorf("the look is %+v", l)
	}
	if got := rec.Plan.Sets[1].Keep[1].OneOf.V; len(got) != 3 || got[1].Number != 2 || !got[1].IsNumber || got[2].Text != "true" {
		t.Errorf("one of %+v", got)
	}
	if got := rec.Plan.Rehearsal.Scenarios[0].Effects[0]; got.Name != "stay" || got.Number.V != -0.7 {
		t.Errorf("the effect is %+v", got)
	}
	if got := rec.Plan.Poolings[0].Weights.V + rec.Results[0].Data.Labels[0].Name + rec.Earlier[0].Study.V; got != "inverse-variance1Pilot" {
		t.Errorf("%q", got)
	}
}

// writes reports whether a tree holds a path, through arrays and any name.
func writes(n *record.Node, path []string) bool {
	if n == nil {
		return false
	}
	if n.Kind == record.ArrayNode {
		return slices.ContainsFunc(n.Items, func(i *record.Node) bool { return writes(i, path) })
	}
	if len(path) == 0 {
		return true
	}
	if path[0] == "NAME" {
		return slices.ContainsFunc(n.Entries, func(e record.Entry) bool { return writes(e.Value, path[1:]) })
	}
	return writes(n.Get(path[0]), path[1:])
}

// TestDefaults checks that what is left out has its default and no place.
func TestDefaults(t *testing.T) {
	rec, _ := Record(diag.NewSource("a.toml", []byte(smallest)))
	if v := rec.Plan.Level; v.V != 0.95 || v.Stated || !v.Span.IsZero() {
		t.Errorf("the level is %+v", v)
	}
	if rec.Head.Status.V != "draft" || rec.Head.Paper.V != "a4" || rec.Plan.Outcomes[0].Better.V != "neither" ||
		rec.Plan.Hypotheses[0].Role.V != "primary" || rec.Head.Attach.V[0].V != "record" {
		t.Errorf("%+v", rec.Head)
	}
	if rec.Plan.Looks != nil || rec.Head.Ethics != nil || rec.Conclusion != nil {
		t.Error("a table that was not written is there")
	}
	if at := rec.Plan.Outcomes[0].At; string(rec.Source.Text[at.Start:at.End]) != "[plan.outcome.peel]" {
		t.Errorf("the head of the outcome is at %v", at)
	}
	if at := rec.Results[0].Groups[0].At; string(rec.Source.Text[at.Start:at.End]) != "new" {
		t.Errorf("the head of the group is at %v", at)
	}
}
