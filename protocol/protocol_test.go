package protocol

import "testing"

const smallest = `steelyard = 1
[record]
title   = "Pouch seal strength with the new adhesive (invented)"
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

func TestLoad(t *testing.T) {
	in := Load("a.toml", []byte(smallest), nil, nil)
	if len(in.Diagnostics) > 0 {
		t.Fatal(in.Diagnostics)
	}
	if got := in.Record.Results[0].Groups[0].N.V; got != 24 {
		t.Errorf("n = %v", got)
	}
}
