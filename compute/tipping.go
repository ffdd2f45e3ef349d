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
	nothingMissing = "sensitivity %s: no subject of this hypothesis is known to be missing"
	noTipping      = "sensitivity %s: a tipping point is worked out for a single result of means or of counts in two groups"
)

// missing counts the subjects of an entry that are not analysed, by group:
// the flow's randomised less analysed where stated, else the rows that
// dropped.
func missing(e entry, o *record.Outcome) [2]float64 {
	var m [2]float64
	for _, f := range e.res.Flow {
		if i := groupIndex(o, f.Name); i >= 0 && f.Randomised.Stated && f.Analysed.Stated {
			m[i] = math.Max(0, float64(f.Randomised.V-f.Analysed.V))
		}
	}
	if m != [2]float64{} || e.vec == nil {
		return m
	}
	for _, d := range e.vec.Dropped {
		switch i := groupIndex(o, d.Group); {
		case i >= 0:
			m[i] += float64(d.Count)
		case len(o.Groups.V) == 0 || record.MeasureOf(o.Measure.V).Shape != record.TwoGroups:
			m[0] += float64(d.Count)
		}
	}
	return m
}

// tippingPoint asks how different the missing subjects would have to be for
// the verdict to change (methods.md K).
func (r *run) tippingPoint(out *result.Sensitivity, s *record.Sensitivity, t *trial) {
	at := t.bySet[t.deciding]
	o := r.rec.OutcomeNamed(t.h.Outcome.V)
	entries := r.entriesOf(t.h, o, at.set)
	if len(entries) != 1 || entries[0].res.Effect != nil {
		r.note(s.At, "", result.Note{Code: "S104", Message: noTipping, Args: []any{s.Name}})
		return
	}
	m := missing(entries[0], o)
	if m == [2]float64{} {
		r.note(s.At, "", result.Note{Code: "S101", Message: nothingMissing, Args: []any{s.Name}})
		return
	}
	in := r.input(entries[0], at.spec)
	verdict := t.verdictOf(at)
	out.Tipping = &result.Tipping{Missing: m, Verdict: verdict}
	switch at.spec.measure.Word {
	case "mean", "mean-difference", "paired-mean-difference":
		out.Tipping.Shift = tippingShift(at, t.question, in, m)
	case "risk-difference", "risk-ratio", "odds-ratio":
		i, j, ok := r.tippingSplit(at, t, in, m, verdict)
		if ok {
			out.Tipping.Events = [2]result.Opt{result.Some(i), result.Some(j)}
		}
	default:
		out.Tipping = nil
		r.note(s.At, "", result.Note{Code: "S104", Message: noTipping, Args: []any{s.Name}})
	}
}

// tippingShift is the difference d by which the missing of each group would
// have to fall short of those seen, against the claim, for the limit that
// decides to reach its point: gap / (m1/(n1+m1) + m2/(n2+m2)). Negative: they
// would have to be better for an open claim to be established.
func tippingShift(at attempt, q claim.Question, in effect.Input, m [2]float64) result.Opt {
	gap := math.Inf(1)
	for _, test := range at.a.Tests {
		d := test.Null - at.a.High
		if test.Alternative == "greater" || test.Alternative == "two-sided" && at.a.Low > q.Null {
			d = at.a.Low - test.Null
		}
		gap = math.Min(gap, d)
	}
	n := [2]float64{in.First.N, in.Second.N}
	switch at.spec.measure.Shape {
	case record.OneSample:
		n = [2]float64{in.Sample.N, 1}
	case record.Paired:
		n = [2]float64{in.Pairs.N, 1}
	case record.TwoGroups, record.Given:
	}
	share := m[0]/(n[0]+m[0]) + m[1]/(n[1]+m[1])
	if math.IsInf(gap, 0) || share == 0 {
		return result.Opt{}
	}
	return result.Some(gap / share)
}

// tippingSplit finds the split (i, j) of events among the missing at which
// the verdict differs from the present one, nearest to the proportions
// observed: each row of the grid is bisected from its ends.
func (r *run) tippingSplit(at attempt, t *trial, in effect.Input, m [2]float64, verdict result.Verdict) (float64, float64, bool) {
	p1, p2 := in.First.Events/in.First.N, in.Second.Events/in.Second.N
	same := func(i, j float64) bool {
		x := in
		x.First.N, x.First.Events = in.First.N+m[0], in.First.Events+i
		x.Second.N, x.Second.Events = in.Second.N+m[1], in.Second.Events+j
		x.Event, x.Group = nil, nil
		inf, problem := r.analyse(at.spec, x)
		if problem != nil {
			return false
		}
		a := claim.Judge(inf, t.question)
		return a.Verdict(a.P.P, a.Against.P, t.question.Alpha, t.out.Role == "exploratory") == verdict
	}
	best, bi, bj := math.Inf(1), 0.0, 0.0
	consider := func(i, j float64) {
		if j < 0 || j > m[1] || same(i, j) {
			return
		}
		d := square(share(i, m[0])-p1) + square(share(j, m[1])-p2)
		if d < best {
			best, bi, bj = d, i, j
		}
	}
	for _, i := range rows(m[0]) {
		mid := math.Round(p2 * m[1])
		consider(i, mid)
		for _, end := range []float64{0, m[1]} {
			consider(i, bisect(mid, end, func(j float64) bool { return same(i, j) }))
		}
	}
	return bi, bj, !math.IsInf(best, 1)
}

// rows are the rows of the grid that are looked at: all of them up to 400,
// evenly spread beyond.
func rows(m float64) []float64 {
	const most = 400
	var out []float64
	step := math.Max(1, math.Ceil(m/most))
	for i := 0.0; i < m; i += step {
		out = append(out, i)
	}
	return slices.Concat(out, []float64{m})
}

// bisect returns the whole number nearest to from, on the way to end, at
// which keeps no longer holds; end when it holds throughout.
func bisect(from, end float64, keeps func(float64) bool) float64 {
	if !keeps(from) {
		return from
	}
	if keeps(end) {
		return end
	}
	for math.Abs(end-from) > 1 {
		mid := math.Trunc((from + end) / 2)
		if keeps(mid) {
			from = mid
		} else {
			end = mid
		}
	}
	return end
}

func share(i, m float64) float64 {
	if m == 0 {
		return 0
	}
	return i / m
}

func square(x float64) float64 { return x * x }
