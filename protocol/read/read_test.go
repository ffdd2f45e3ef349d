package read

import (
	"testing"

	"steelyard/protocol/diag"
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
