package compute

import (
	"math"
	"slices"

	"steelyard/compute/claim"
	"steelyard/compute/dist"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// settle turns every trial into its hypothesis: verdict from adjusted
// p-values, numbers of the deciding set, the other sets and alternatives.
func (r *run) settle() {
	for _, t := range r.tried {
		t.settle(r)
		t.out.Excludes = r.excluded(t)
		r.res.Hypotheses = append(r.res.Hypotheses, *t.out)
	}
}

func (t *trial) settle(r *run) {
	out := t.out
	if bad, blocked := t.blocked(); blocked {
		t.undecided(bad)
	} else {
		at := t.bySet[t.deciding]
		out.Judged = t.numbers(at)
		t.decided(&out.Judged, at, t.p, t.against)
		out.Evidence, out.Studies = t.evidence(at), at.studies
		t.fill(r, at)
	}
	for _, at := range t.bySet {
		if at.set != "" {
			out.BySet = append(out.BySet, t.judged(r, at))
		}
	}
	out.PostHoc = r.postHoc()
	out.Alternatives = append(out.Alternatives, r.alternatives(t)...)
	t.count()
}

// undecided settles a claim that a set keeps from being decided. Numbers of
// another set are shown, but no p: that of the claim is not known.
func (t *trial) undecided(bad attempt) {
	out := t.out
	shown := bad
	if t.deciding >= 0 {
		shown = t.bySet[t.deciding]
	}
	out.Judged = t.numbers(shown)
	out.Judged.Reason, out.Judged.Verdict, out.Judged.IntervalDecides = bad.problem, result.Open, false
	switch {
	case bad.empty:
		out.Judged.Verdict = result.Pending
	case out.Claim == "describe":
		out.Judged.Verdict = result.Described
	}
	out.Judged.P, out.Judged.SValue = result.P{}, result.Opt{}
	out.Judged.SmallestMargin, out.Judged.SmallestLimit, out.Judged.SmallestLow = result.Opt{}, result.Opt{}, result.Opt{}
	out.Evidence, out.Studies = t.evidence(shown), shown.studies
}

// judged is an analysis with its own verdict: the p-values it would give the
// claim take their place in the family, all others being as they are.
func (t *trial) judged(r *run, at attempt) result.Judged {
	j := t.numbers(at)
	if at.done() {
		p, against := at.pair()
		p, against = r.inFamily(t, p, against)
		t.decided(&j, at, p, against)
	}
	return j
}

// decided adds the verdict that adjusted p-values mean for an analysis. The
// interval decides unless the adjustment changed the p-value or the verdict.
func (t *trial) decided(j *result.Judged, at attempt, p, against dist.Tail) {
	exploratory := t.out.Role == "exploratory"
	j.Verdict = at.a.Verdict(p.P, against.P, t.question.Alpha, exploratory)
	if !at.a.Judged || !t.adjusted {
		return
	}
	j.PAdjusted = pOf(p)
	own, ownAgainst := at.pair()
	same := math.Abs(own.LnP-p.LnP) <= 1e-12*math.Abs(own.LnP)
	j.IntervalDecides = j.IntervalDecides && same && j.Verdict == at.a.Verdict(own.P, ownAgainst.P, t.question.Alpha, exploratory)
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
	if at.inf == nil || r.plain {
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
	q := t.question
	if t.level > 0 { // the share of the level that the family left to this claim
		q.Alpha = t.level
	}
	return claim.Next(at.inf, q, at.a)
}

// count says how many of the other methods come to the same verdict.
func (t *trial) count() {
	for _, j := range t.out.Alternatives {
		if len(j.Because) > len(byMethod) && j.Because[:len(byMethod)] == byMethod {
			t.out.MethodsTried++
			if j.Verdict == t.out.Verdict {
				t.out.MethodsAgree++
			}
		}
	}
}

// excluded names the claim on the same outcome that cannot be wrong together
// with this one, unless the truth lies exactly on their common limit: that the
// benefit exceeds a limit, and that it stays below one that is not lower
// (methods.md C and D). Nothing is said of two that one family adjusts.
func (r *run) excluded(t *trial) string {
	other := map[string]string{"minimum-effect": "benefit-too-small", "benefit-too-small": "minimum-effect"}[t.h.Claim.V]
	for _, u := range r.tried {
		if other == "" || u.h.Claim.V != other || u.h.Outcome.V != t.h.Outcome.V {
			continue
		}
		large, small := t.limit(), u.limit() // of minimum-effect, of benefit-too-small
		if other == "minimum-effect" {
			large, small = small, large
		}
		if t.question.Better == "lower" {
			large, small = -large, -small
		}
		f := r.rec.FamilyOf(t.h.Name)
		if large <= small && (f == nil || f.Procedure.V == "all" || f != r.rec.FamilyOf(u.h.Name)) {
			return u.h.Name
		}
	}
	return ""
}

// limit is the end of the region on the side of benefit.
func (t *trial) limit() float64 {
	if t.question.Better == "lower" {
		return t.question.Low
	}
	return t.question.High
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
