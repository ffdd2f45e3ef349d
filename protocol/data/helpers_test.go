package data

import (
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

func str(s string) record.String { return record.String{V: s, Stated: true} }

func strs(list ...string) record.Strings {
	v := record.Strings{Stated: true}
	for _, s := range list {
		v.V = append(v.V, str(s))
	}
	return v
}

func num(x float64) record.Number { return record.Number{V: x, Stated: true} }

// recordOf is a record with one outcome of the measure and one result whose
// data are in lot.csv.
func recordOf(measure string, d *record.Data) *record.Record {
	rec := &record.Record{Source: diag.NewSource("lot.toml", nil)}
	o := &record.Outcome{Named: record.Named{Name: "peel"}, Measure: str(measure)}
	if m := record.MeasureOf(measure); m.Shape != record.OneSample {
		o.Groups = strs("new", "current")
	}
	rec.Plan.Outcomes = []*record.Outcome{o}
	if !d.File.Stated {
		d.File = record.String{V: "lot.csv", Span: diag.Span{Start: 100, End: 107}, Stated: true}
	}
	rec.Results = []*record.Result{{Study: str("S1"), Outcome: str("peel"), Data: d}}
	return rec
}
