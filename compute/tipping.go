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
		if d.Planned {
			continue // excluded, not missing
		}
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
	entries := r.entriesOf(t.h, o, at.set, false)
	simple := len(entries) == 1 && entries[0].res.Effect == nil && entries[0].res.P == nil && at.pool == nil && o.Cluster == nil && o.Design.V != "crossover"
	word := at.spec.measure.Word
	means := slices.Contains([]string{"mean", "mean-difference", "paired-mean-difference"}, word)
	counts := slices.Contains([]string{"risk-difference", "risk-ratio", "odds-ratio"}, word) && at.spec.strata == ""
	if !simple || !means && !counts {
		r.note(s.At, "", result.Note{Code: "S104", Message: noTipping, Args: []any{s.Name}})
		return
	}
	m := missing(entries[0], o)
	if m == [2]float64{} {
		r.note(s.At, "", result.Note{Code: "S104", Message: nothingMissing, Args: []any{s.Name}})
		return
	}
	in := r.input(entries[0], at.spec)
	now := t.judged(r, at).Verdict
	out.Tipping = &result.Tipping{Missing: m, Verdict: tipped(now, t.out.Role == "exploratory")}
	if means {
		out.Tipping.Shift = tippingShift(at, t.question, in, m, now)
		return
	}
	g := r.splits(at, t, in, m)
	if i, j, ok := g.nearest(now); ok {
		out.Tipping.Events = [2]result.Opt{result.Some(i), result.Some(j)}
		out.Tipping.Verdict = g.verdict(i, j)
	}
}

// tipped is the verdict on the other side of the limit that decides.
func tipped(now result.Verdict, exploratory bool) result.Verdict {
	switch {
	case now != result.Open:
		return result.Open
	case exploratory:
		return result.Suggested
	}
	return result.Established
}

// tippingShift is the difference d by which the missing of each group would
// have to fall short of those seen, against the claim, for the limit that
// decides to reach its point: gap / (m1/(n1+m1) + m2/(n2+m2)). Negative: they
// would have to be better, for an open claim to be established or for a
// contradicted one to be open.
func tippingShift(at attempt, q claim.Question, in effect.Input, m [2]float64, now result.Verdict) result.Opt {
	gap := math.Inf(1)
	for _, test := range at.a.Tests {
		d := test.Null - at.a.High
		if test.Alternative == "greater" || test.Alternative == "two-sided" && in.Null < at.inf.Estimate {
			d = at.a.Low - test.Null
		}
		gap = math.Min(gap, d)
	}
	if now == result.Contradicted {
		gap = claim.Contradicted(q, at.a.Low, at.a.High)
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
	if math.IsInf(gap, 0) || math.IsNaN(gap) || share == 0 {
		return result.Opt{}
	}
	return result.Some(gap / share)
}

// grid is the verdict at every split of events among the missing.
type grid struct {
	m, seen [2]float64
	verdict func(i, j float64) result.Verdict
}

// splits makes the grid of a result of counts: i events among the first
// group's missing, j among the second's.
func (r *run) splits(at attempt, t *trial, in effect.Input, m [2]float64) grid {
	known := map[[2]float64]result.Verdict{}
	return grid{m: m, seen: [2]float64{in.First.Events / in.First.N, in.Second.Events / in.Second.N},
		verdict: func(i, j float64) result.Verdict {
			if v, ok := known[[2]float64{i, j}]; ok {
				return v
			}
			x := in
			x.First.N, x.First.Events = in.First.N+m[0], in.First.Events+i
			x.Second.N, x.Second.Events = in.Second.N+m[1], in.Second.Events+j
			x.Event, x.Group = nil, nil
			v := result.Open // what cannot be computed stays open
			if inf, problem := r.method(at.spec, x, false); problem == nil {
				a := claim.Judge(inf, t.question)
				p, against := r.inFamily(t, a.P, a.Against)
				v = a.Verdict(p.P, against.P, t.question.Alpha, t.out.Role == "exploratory")
			}
			known[[2]float64{i, j}] = v
			return v
		}}
}

// nearest finds the split whose verdict differs from the present one and whose
// shares lie nearest to those observed. Each row is bisected from the share
// observed to both ends; a small grid is gone through.
func (g grid) nearest(now result.Verdict) (i, j float64, ok bool) {
	best := math.Inf(1)
	consider := func(x, y float64) {
		if g.verdict(x, y) == now {
			return
		}
		if d := g.distance(x, y); d < best {
			best, i, j = d, x, y
		}
	}
	for _, x := range rows(g.m[0]) {
		if (g.m[0]+1)*(g.m[1]+1) <= wholeGrid {
			for y := 0.0; y <= g.m[1]; y++ {
				consider(x, y)
			}
			continue
		}
		mid := math.Round(g.seen[1] * g.m[1])
		for _, end := range []float64{0, g.m[1]} {
			consider(x, bisect(mid, end, func(y float64) bool { return g.verdict(x, y) == now }))
		}
	}
	return i, j, !math.IsInf(best, 1)
}

// wholeGrid is the largest grid that is gone through split by split.
const wholeGrid = 400

func (g grid) distance(i, j float64) float64 {
	return square(share(i, g.m[0])-g.seen[0]) + square(share(j, g.m[1])-g.seen[1])
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
