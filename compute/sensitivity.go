package compute

import (
	"math"
	"slices"

	"steelyard/compute/claim"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// The messages of this file.
const (
	nothingToVary = "sensitivity %s: hypothesis %s has no analysis to vary"
	notVaried     = "sensitivity %s: %s"
)

// sensitivities runs every planned sensitivity analysis on the settled
// hypotheses. The planned verdict stands whatever they say.
func (r *run) sensitivities() {
	for _, s := range r.rec.Plan.Sensitivity {
		i := slices.IndexFunc(r.tried, func(t *trial) bool { return t.h.Name == s.Of.V })
		if i < 0 {
			continue
		}
		t := r.tried[i]
		out := result.Sensitivity{Name: s.Name, Of: s.Of.V, Kind: s.Kind.V}
		if t.deciding < 0 || !t.bySet[t.deciding].judged() || t.bySet[t.deciding].inf == nil {
			r.note(s.At, "", result.Note{Code: "S101", Message: nothingToVary, Args: []any{s.Name, s.Of.V}})
		} else {
			r.vary(&out, s, t, &r.res.Hypotheses[i])
		}
		r.res.Sensitivity = append(r.res.Sensitivity, out)
	}
}

func (r *run) vary(out *result.Sensitivity, s *record.Sensitivity, t *trial, h *result.Hypothesis) {
	at := t.bySet[t.deciding]
	switch s.Kind.V {
	case "margin":
		out.Curve = marginCurve(at.inf, t.question, t.out.Role == "exploratory")
		out.Smallest = at.a.SmallestMargin
		if len(out.Curve) == 0 {
			r.note(s.At, "", result.Note{Code: "S108", Message: notVaried, Args: []any{s.Name, "the claim has no margin to vary"}})
		}
	case "method":
		alt := attempt{set: at.set, because: "sensitivity:" + s.Name, spec: at.spec, studies: at.studies}
		alt.spec.method, alt.spec.stated = s.Method.V, true
		alt.spec.adjust, alt.spec.strata = nil, ""
		o := r.rec.OutcomeNamed(t.h.Outcome.V)
		r.gather(&alt, t.h, t.question, r.entriesOf(t.h, o, at.set))
		if alt.problem != nil {
			r.note(s.At, "", *alt.problem)
		}
		r.alternative(out, h, t, alt)
	case "leave-one-out":
		r.leaveOneStudy(out, s, t)
	case "keep-excluded":
		r.keepExcluded(out, s, t, h)
	case "tipping-point":
		r.tippingPoint(out, s, t)
	}
}

// alternative records another decision of a claim, under the sensitivity and
// beside the verdict.
func (r *run) alternative(out *result.Sensitivity, h *result.Hypothesis, t *trial, alt attempt) {
	j := t.judged(alt)
	out.Judged = append(out.Judged, j)
	h.Alternatives = append(h.Alternatives, j)
}

// marginPoints is the length of a margin curve.
const marginPoints = 61

// marginCurve decides the claim at margins from near the null to twice the
// larger of the stated margin and the smallest that would do.
func marginCurve(inf *effect.Inference, q claim.Question, exploratory bool) []result.MarginVerdict {
	if !q.HasRegion || inf.NullOnly {
		return nil
	}
	switch q.Claim {
	case "minimum-effect", "noninferior", "equivalent", "benefit-too-small":
	default:
		return nil
	}
	g := func(x float64) float64 { return effect.To(q.Scale, x) }
	null, low, high := g(q.Null), g(q.Low), g(q.High)
	low0, high0 := inf.Method.Limits(q.Error())
	widest := 2.0
	for _, l := range []float64{g(low0), g(high0)} {
		if d := math.Abs(l - null); !math.IsInf(d, 0) {
			widest = math.Max(widest, 1.5*d/math.Min(null-low, high-null))
		}
	}
	widest = math.Min(widest, 20)
	var out []result.MarginVerdict
	for i := 1; i <= marginPoints; i++ {
		k := widest * float64(i) / marginPoints
		v := q
		v.Low, v.High = effect.From(q.Scale, null-k*(null-low)), effect.From(q.Scale, null+k*(high-null))
		if v.Low <= q.RangeLow || v.High >= q.RangeHigh {
			break
		}
		a := claim.Judge(inf, v)
		shown := v.High
		if q.Claim == "noninferior" == (q.Better != "lower") {
			shown = v.Low
		}
		out = append(out, result.MarginVerdict{Margin: shown, P: result.P{P: a.P.P, Ln: a.P.LnP, OK: true},
			Verdict: a.Verdict(a.P.P, a.Against.P, q.Alpha, exploratory)})
	}
	return out
}

// leaveOneStudy decides the claim without each study in turn.
func (r *run) leaveOneStudy(out *result.Sensitivity, s *record.Sensitivity, t *trial) {
	for _, p := range r.res.Pooled {
		if !p.Decides || !slices.Contains(p.Hypotheses, t.h.Name) {
			continue
		}
		for _, l := range p.LeaveOneOut {
			for _, v := range l.Verdicts {
				if v.Hypothesis == t.h.Name {
					out.Judged = append(out.Judged, result.Judged{Because: "without:" + l.Study, Set: p.Set, Verdict: v.Verdict, Reading: v.Reading,
						Analysis: result.Analysis{Measure: p.Measure, Method: p.Method, Estimate: result.Some(l.Estimate), Low: result.Some(l.Low), High: result.Some(l.High), Level: p.Level}})
				}
			}
		}
		return
	}
	r.note(s.At, "", result.Note{Code: "S104", Message: notVaried, Args: []any{s.Name, "only pooled evidence has studies to leave out"}})
}

// keepExcluded decides the claim with every left-out result restored.
func (r *run) keepExcluded(out *result.Sensitivity, s *record.Sensitivity, t *trial, h *result.Hypothesis) {
	o := r.rec.OutcomeNamed(t.h.Outcome.V)
	if !r.leftOut(t.h, o) {
		r.note(s.At, "", result.Note{Code: "S216", Message: notVaried, Args: []any{s.Name, "no result of this hypothesis is left out"}})
		return
	}
	alt := r.attempt(t.h, o, t.question, t.bySet[t.deciding].set, true)
	alt.because = "sensitivity:" + s.Name
	r.alternative(out, h, t, alt)
}
