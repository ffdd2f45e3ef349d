package compute

import (
	"math"
	"slices"

	"steelyard/compute/claim"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// settle turns every trial into its hypothesis: verdict from adjusted
// p-values, numbers of the deciding set, the other sets and alternatives.
func (r *run) settle() {
	for _, t := range r.tried {
		t.settle(r)
		r.res.Hypotheses = append(r.res.Hypotheses, *t.out)
	}
}

func (t *trial) settle(r *run) {
	out := t.out
	if bad, blocked := t.blocked(); blocked {
		out.Judged = t.numbers(bad)
		if t.deciding >= 0 { // another set could be analysed: its numbers are shown
			out.Judged = t.numbers(t.bySet[t.deciding])
			out.Judged.IntervalDecides = false
			out.Judged.Reason = bad.problem
			out.Judged.Verdict = result.Open
			if bad.empty {
				out.Judged.Verdict = result.Pending
			}
		}
		if out.Judged.Verdict == result.Open && !t.bySet[0].a.Judged && out.Claim == "describe" {
			out.Judged.Verdict = result.Described
		}
		out.Judged.P = result.P{}
	} else {
		at := t.bySet[t.deciding]
		out.Judged = t.numbers(at)
		out.Judged.Verdict = at.a.Verdict(t.p.P, t.against.P, out.Alpha, out.Role == "exploratory")
		if t.adjusted {
			out.Judged.PAdjusted = result.P{P: t.p.P, Ln: t.p.LnP, OK: true}
			own, _ := at.pair()
			out.Judged.IntervalDecides = math.Abs(own.LnP-t.p.LnP) <= 1e-12*math.Abs(own.LnP)
		}
		out.Evidence, out.Studies = t.evidence(at), at.studies
		t.fill(r, at)
	}
	for _, at := range t.bySet {
		if at.set != "" {
			j := t.numbers(at)
			if at.done() {
				j.Verdict = t.verdictOf(at)
			}
			out.BySet = append(out.BySet, j)
		}
	}
	out.PostHoc = r.postHoc()
	out.Alternatives = append(out.Alternatives, r.alternatives(t)...)
}

func (t *trial) evidence(at attempt) string {
	switch {
	case len(at.studies) == 0:
		return "none"
	case t.h.Evidence.V != "":
		return t.h.Evidence.V
	}
	return "single"
}

// fill adds what is computed on the deciding analysis alone.
func (t *trial) fill(r *run, at attempt) {
	if at.inf == nil {
		return
	}
	t.out.Curve = claim.Curve(at.inf, t.question, curvePoints(at.inf))
	low, high := at.inf.Method.Limits((1 - r.level) / 2)
	t.out.Descriptive = analysisOf(at.spec, at.inf, r.level, low, high)
	t.out.Assumptions = named(at.inf.Checks, at.spec.outcome)
	t.out.WhatNext = t.next(at)
}

// next works out what would settle a claim that is open.
func (t *trial) next(at attempt) *result.WhatNext {
	if t.out.Verdict != result.Open {
		return nil
	}
	return claim.Next(at.inf, t.question, at.a)
}

// named puts the record's names in the place of "first" and "second".
func named(checks []result.Check, o *record.Outcome) []result.Check {
	names := map[string]string{"first": "first", "second": "second"}
	if len(o.Groups.V) == 2 {
		names["first"], names["second"] = o.Groups.V[0].V, o.Groups.V[1].V
	}
	out := make([]result.Check, len(checks))
	for i, c := range checks {
		out[i] = result.Check{Assumption: c.Assumption, Shows: slices.Clone(c.Shows)}
		for j := range out[i].Shows {
			if name, ok := names[out[i].Shows[j].Group]; ok {
				out[i].Shows[j].Group = name
			}
		}
	}
	return out
}

// postHoc reports whether the verdicts carry the words "post hoc": anything
// but a seal proved to be older than the results.
func (r *run) postHoc() bool {
	return r.res.Seal.Order != "before-results" && len(r.rec.Results) > 0
}
