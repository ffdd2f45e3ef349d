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
			r.note(s.At, "", result.Note{Code: "S104", Message: nothingToVary, Args: []any{s.Name, s.Of.V}})
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
		out.Curve = r.marginCurve(t, at)
		out.Smallest = at.a.SmallestMargin
		if len(out.Curve) == 0 {
			r.note(s.At, "", result.Note{Code: "S108", Message: notVaried, Args: []any{s.Name, "the claim has no margin to vary"}})
		}
	case "method":
		alt := attempt{set: at.set, because: "sensitivity:" + s.Name, spec: at.spec}
		alt.spec.method, alt.spec.stated = s.Method.V, true
		if s.Method.V != "linear" && s.Method.V != "linear-hc3" {
			alt.spec.adjust = nil
		}
		if s.Method.V != "linear" && s.Method.V != "linear-hc3" && s.Method.V != "mantel-haenszel" {
			alt.spec.strata = ""
		}
		o := r.rec.OutcomeNamed(t.h.Outcome.V)
		r.gather(&alt, t.h, t.question, r.entriesOf(t.h, o, at.set, false))
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
	j := t.judged(r, alt)
	out.Judged = append(out.Judged, j)
	h.Alternatives = append(h.Alternatives, j)
}

// marginPoints is the length of a margin curve.
const marginPoints = 61

// marginCurve decides the claim at margins from near the null to twice the
// larger of the stated margin and the smallest that would do. Margin is the
// limit that is tested, as a value of the effect; for equivalent the upper one.
func (r *run) marginCurve(t *trial, at attempt) []result.MarginVerdict {
	q, inf := t.question, at.inf
	if !q.HasRegion || inf.NullOnly {
		return nil
	}
	switch q.Claim {
	case "minimum-effect", "noninferior", "equivalent", "benefit-too-small":
	default:
		return nil
	}
	w := wideningOf(q)
	var out []result.MarginVerdict
	for i := 1; i <= marginPoints; i++ {
		v, shown, ok := w.by(w.most(at.a.Low, at.a.High) * float64(i) / marginPoints)
		if !ok {
			break
		}
		a := claim.Judge(inf, v)
		p, against := r.inFamily(t, a.P, a.Against)
		out = append(out, result.MarginVerdict{Margin: shown, P: result.P{P: a.P.P, Ln: a.P.LnP, OK: true},
			Verdict: a.Verdict(p.P, against.P, q.Alpha, t.out.Role == "exploratory")})
	}
	return out
}

// widening scales the region of a question about its null: as the smallest
// margin is found, on the effect's own scale where the margin is a distance
// there, otherwise on the analysis scale.
type widening struct {
	q         claim.Question
	scale     record.Scale
	null      float64
	down, up  float64
	low, high bool // which ends the claim is tested against
}

func wideningOf(q claim.Question) widening {
	w := widening{q: q, scale: q.Scale, low: true, high: true}
	if q.Symmetric() && !q.Ratio() {
		w.scale = record.Identity
	}
	g := func(x float64) float64 { return effect.To(w.scale, x) }
	w.null = g(q.Null)
	w.down, w.up = w.null-g(q.Low), g(q.High)-w.null
	if q.Claim != "equivalent" {
		w.low = (q.Claim == "noninferior") == (q.Better != "lower")
		w.high = !w.low
	}
	return w
}

// by is the question at k times its region, with the limit that is shown;
// false where a limit that is tested leaves the effect's range.
func (w widening) by(k float64) (claim.Question, float64, bool) {
	v := w.q
	v.Low, v.High = effect.From(w.scale, w.null-k*w.down), effect.From(w.scale, w.null+k*w.up)
	if w.low && v.Low <= v.RangeLow || w.high && v.High >= v.RangeHigh {
		return v, 0, false
	}
	v.Low, v.High = math.Max(v.Low, v.RangeLow), math.Min(v.High, v.RangeHigh)
	if w.high {
		return v, v.High, true
	}
	return v, v.Low, true
}

// most is how often the region goes into the curve: twice, or far enough to
// pass the interval by half.
func (w widening) most(low, high float64) float64 {
	most := 2.0
	see := func(limit, side float64) {
		if d := math.Abs(effect.To(w.scale, limit)-w.null) / side; !math.IsInf(d, 0) && !math.IsNaN(d) {
			most = math.Max(most, 1.5*d)
		}
	}
	if w.low {
		see(low, w.down)
		if !w.high {
			see(high, w.down)
		}
	}
	if w.high {
		see(high, w.up)
		if !w.low {
			see(low, w.up)
		}
	}
	return math.Min(most, 20)
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
					out.Judged = append(out.Judged, result.Judged{Because: "leave-one-out:" + l.Study, Set: p.Set, Verdict: v.Verdict, Reading: v.Reading,
						Analysis: result.Analysis{Measure: p.Measure, Method: p.Method, Estimate: result.Some(l.Estimate), Low: result.Some(l.Low), High: result.Some(l.High), Level: p.Level}})
				}
			}
		}
		return
	}
	r.note(s.At, "", result.Note{Code: "S104", Message: notVaried, Args: []any{s.Name, "only pooled evidence has studies to leave out"}})
}

// keepExcluded decides the claim with each left-out result restored, and with
// all of them.
func (r *run) keepExcluded(out *result.Sensitivity, s *record.Sensitivity, t *trial, h *result.Hypothesis) {
	o := r.rec.OutcomeNamed(t.h.Outcome.V)
	if !r.leftOut(t.h, o) {
		r.note(s.At, "", result.Note{Code: "S104", Message: notVaried, Args: []any{s.Name, "no result of this hypothesis is left out"}})
		return
	}
	set := t.bySet[t.deciding].set
	all := r.entriesOf(t.h, o, set, true)
	for i, e := range all {
		if !e.res.LeaveOut.Stated {
			continue
		}
		var found []entry
		for j, f := range all {
			if i == j || !f.res.LeaveOut.Stated {
				found = append(found, f)
			}
		}
		if len(found) < len(all) { // else it is the one case that follows
			out.Judged = append(out.Judged, t.judged(r, r.again(t, set, "left-out-kept:"+e.res.Study.V, found)))
		}
	}
	r.alternative(out, h, t, r.again(t, set, "sensitivity:"+s.Name, all))
}
