package compute

import (
	"math"
	"slices"

	"steelyard/compute/claim"
	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
	"strings"
)

// The messages of this file.
const (
	severalResults = "%d results are given and `evidence` does not say how they count together"
	bareP          = "a p-value alone gives no estimate and no interval; it can only join a combination"
	nullOnly       = "the method %s tests the null only and cannot decide a claim at another value"
)

// trial is one hypothesis on its way to a verdict.
type trial struct {
	h        *record.Hypothesis
	out      *result.Hypothesis
	question claim.Question
	bySet    []attempt
	deciding int // index into bySet of the set with the largest p; -1: none
	// p decides, against contradicts: after sets and families.
	p, against dist.Tail
	adjusted   bool
	level      float64 // the level of its own p in the family; 0: its own
}

// attempt is one analysis of a hypothesis: in one set, or an alternative.
type attempt struct {
	set     string
	because string
	inf     *effect.Inference
	a       claim.Assessment
	worst   *claim.Assessment // combinations: at the least favourable values
	problem *result.Note
	empty   bool // no results
	studies []string
	spec    spec
	planned bool     // a planned analysis: its pools and combinations are recorded
	pool    *poolRun // pooled evidence
}

// hypothesis tries one claim in every set it names.
func (r *run) hypothesis(h *record.Hypothesis) {
	o := r.rec.OutcomeNamed(h.Outcome.V)
	q := r.question(h, o)
	t := &trial{h: h, question: q, deciding: -1, out: r.hypothesisHead(h, o, q)}
	sets := []string{""}
	if len(r.rec.Plan.Sets) > 0 {
		sets = record.Texts(h.Sets)
	}
	for _, set := range sets {
		at := attempt{set: set, spec: r.specOf(h, o, q.Error()), planned: true}
		r.gather(&at, h, q, r.entriesOf(h, o, set, false))
		t.bySet = append(t.bySet, at)
		if at.problem != nil {
			r.problem(h, at)
		} else if at.inf != nil {
			for _, n := range slices.Concat(at.inf.Notes, at.a.Notes) {
				r.note(h.At, h.Name, n)
			}
		}
	}
	t.decide()
	r.tried = append(r.tried, t)
}

func (r *run) question(h *record.Hypothesis, o *record.Outcome) claim.Question {
	m := record.MeasureOf(o.Measure.V)
	null, low, high, has, oneSided := pointsOf(h, o)
	alpha, _ := h.ErrorLevel(&r.rec.Plan)
	better := o.Better.V
	if better == "" {
		better = "neither"
	}
	return claim.Question{Claim: h.Claim.V, Better: better, Alpha: alpha, Null: null, Low: low, High: high, HasRegion: has, OneSided: oneSided,
		Limit: h.Limit.V, Scale: m.Scale, RangeLow: m.Low, RangeHigh: m.High, Level: r.level}
}

// pointsOf are the points of a claim: the outcome's, with the margin in the
// place of the one that the claim is tested against, or of both where the
// claim reads both. oneSided says that the other side was never stated.
func pointsOf(h *record.Hypothesis, o *record.Outcome) (null, low, high float64, has, oneSided bool) {
	null, low, high, has = h.Points(o)
	_, outerLow, outerHigh, outer := o.Points()
	better := h.Claim.V == "minimum-effect" || h.Claim.V == "benefit-too-small"
	if !h.Margin.Stated || h.Claim.V != "noninferior" && !better {
		return null, low, high, has, false
	}
	if !outer {
		return null, low, high, has, !h.Margin.V.IsPair
	}
	if testsLow(h, o) {
		high = outerHigh
	} else {
		low = outerLow
	}
	return null, low, high, has, false
}

// testsLow reports whether the point that a one-sided margin moves is the
// lower one.
func testsLow(h *record.Hypothesis, o *record.Outcome) bool {
	return (h.Claim.V == "noninferior") == (o.Better.V != "lower")
}

func (r *run) hypothesisHead(h *record.Hypothesis, o *record.Outcome, q claim.Question) *result.Hypothesis {
	role := h.Role.V
	if role == "" {
		role = "primary"
	}
	out := &result.Hypothesis{Name: h.Name, Outcome: o.Name, Claim: h.Claim.V, Role: role, Statement: h.Statement.V,
		Alpha: q.Alpha, TwoSided: q.Claim == "differs", MarginWhy: h.MarginWhy.V, Evidence: "none",
		Limit: result.Opt{V: h.Limit.V, OK: h.Limit.Stated}}
	if q.HasRegion {
		out.MarginLow, out.MarginHigh = result.Some(q.Low), result.Some(q.High)
	}
	if q.OneSided && testsLow(h, o) {
		out.MarginHigh = result.Opt{}
	} else if q.OneSided {
		out.MarginLow = result.Opt{}
	}
	return out
}

// gather turns entries into one inference by the stated evidence.
func (r *run) gather(at *attempt, h *record.Hypothesis, q claim.Question, found []entry) {
	for _, e := range found {
		at.studies = append(at.studies, e.res.Study.V)
	}
	switch {
	case len(found) == 0:
		at.empty = true
		return
	case h.Evidence.V == "pooled":
		at.inf, at.problem = r.pooled(at, h, found)
	case h.Evidence.V == "combined":
		r.combined(at, h, q, found)
		return
	case len(found) > 1:
		at.problem = &result.Note{Code: "S111", Message: severalResults, Args: []any{len(found)}}
	case found[0].res.P != nil:
		at.problem = &result.Note{Code: "S113", Message: bareP}
	default:
		at.inf, at.problem = r.analyse(at.spec, found[0], false)
	}
	if at.inf == nil {
		return
	}
	if at.inf.NullOnly && !q.AtNullOnly() {
		at.problem = &result.Note{Code: "S104", Message: nullOnly, Args: []any{at.inf.Word}}
		at.inf = nil
		return
	}
	at.a = claim.Assess(at.inf, q)
}

// problem raises what keeps a hypothesis from being computed. A stated method
// that the measure, the null or the data do not allow is an error: another one
// must be chosen.
func (r *run) problem(h *record.Hypothesis, at attempt) {
	if at.problem.Code != "S104" || !h.Method.Stated {
		r.note(h.At, h.Name, *at.problem)
		return
	}
	d := diag.Error("S104", h.Method.Span, "%s: %s", h.Name, Text(*at.problem)).
		WithHelp("the methods of %s are %s", at.spec.measure.Word, strings.Join(at.spec.measure.Methods, ", "))
	if !slices.Contains(r.notes, d) {
		r.notes = append(r.notes, d)
	}
}

// decide finds the set that decides: the one with the largest p. A set that
// could not be analysed leaves the claim open; a set without results leaves
// it pending.
func (t *trial) decide() {
	for i, at := range t.bySet {
		switch {
		case !at.judged():
			if at.done() && t.deciding < 0 {
				t.deciding = i
			}
		case t.deciding < 0 || at.a.P.LnP > t.bySet[t.deciding].a.P.LnP:
			t.deciding = i
		}
	}
}

func (at attempt) done() bool   { return !at.empty && at.problem == nil }
func (at attempt) judged() bool { return at.done() && at.a.Judged }

// blocked returns the first set that keeps the claim from being decided.
func (t *trial) blocked() (attempt, bool) {
	for _, at := range t.bySet {
		if at.problem != nil {
			return at, true
		}
	}
	for _, at := range t.bySet {
		if at.empty {
			return at, true
		}
	}
	return attempt{}, len(t.bySet) == 0
}

// numbers writes an attempt as a judged analysis without its verdict.
func (t *trial) numbers(at attempt) result.Judged {
	j := result.Judged{Set: at.set, Because: at.because}
	if !at.done() {
		j.Reason = at.problem
		j.Verdict = result.Open
		if at.empty {
			j.Verdict = result.Pending
		}
		return j
	}
	a := at.a
	if at.inf != nil {
		j.Analysis = analysisOf(at.spec, at.inf, a.Level, a.Low, a.High)
		j.Analysis.Notes = append(append([]result.Note{}, at.inf.Notes...), a.Notes...)
		j.IntervalDecides = a.Judged && !at.inf.NullOnly
		j.Reading = a.Reading
	}
	j.Tests = a.Tests
	if a.Judged {
		j.P = result.P{P: a.P.P, Ln: a.P.LnP, OK: true}
		j.SValue = result.Some(claim.SValue(a.P.LnP))
		j.SmallestMargin, j.SmallestLimit, j.SmallestLow = a.SmallestMargin, a.SmallestLimit, a.SmallestLow
	}
	return j
}

// curvePoints is the length of a p-value function; costly methods get few.
func curvePoints(inf *effect.Inference) int {
	if inf.Costly {
		return 25
	}
	return 201
}

// twoSided is a two-sided p of a test.
func twoSided(t effect.Test) result.P {
	p := claim.TwoSided(t)
	if math.IsNaN(p.P) {
		return result.P{}
	}
	return result.P{P: p.P, Ln: p.LnP, OK: true}
}
