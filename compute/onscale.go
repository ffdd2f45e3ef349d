package compute

import (
	"math"
	"slices"

	"steelyard/compute/pool"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// The messages of this file.
const noFinite = "it has no finite estimate with an error above zero"

// counts reports whether a measure is made of counts, which can be zero.
func counts(m *record.Measure) bool {
	return slices.Contains([]string{"proportion", "risk-difference", "risk-ratio", "odds-ratio", "rate", "rate-ratio", "rate-difference"}, m.Word)
}

// onScale is one study's estimate and variance on the analysis scale. Counts
// of independent individuals are taken as they are, with the continuity
// correction where a cell is zero, which is then reported (methods.md F).
func (r *run) onScale(s spec, plan *record.Pooling, e entry) (one pooledStudy, amended bool, problem *result.Note) {
	in := r.input(e, s)
	one = pooledStudy{entry: e, name: e.res.Study.V, in: in}
	if counts(s.measure) && in.Given == nil && in.Strata == nil && !r.clusterMeans(e, s) {
		d := in.DesignEffect
		t := cellCounts{in.First.Events / d, in.First.N / d, in.First.Exposure / d, in.Second.Events / d, in.Second.N / d, in.Second.Exposure / d}
		if s.measure.Shape == record.OneSample {
			t = cellCounts{x1: in.Sample.Events / d, n1: in.Sample.N / d, t1: in.Sample.Exposure / d}
		}
		one.total, one.events = (t.n1+t.n2)*d, (t.x1+t.x2)*d
		one.tabled = s.measure.Shape == record.TwoGroups
		one.Study, amended, problem = t.onScale(s.measure.Word, plan.Continuity.V)
	} else {
		inf, bad := r.analyse(s, e, true)
		if bad != nil {
			return one, false, bad
		}
		one.total, one.events = inf.N, inf.Events.V
		one.Study = pool.Study{Y: inf.Y.V, V: inf.V.V}
	}
	if problem == nil && !usable(one.Study) {
		problem = &result.Note{Code: "S102", Message: noFinite}
	}
	return one, amended, problem
}

func usable(s pool.Study) bool {
	return !math.IsNaN(s.Y) && !math.IsInf(s.Y, 0) && s.V > 0 && !math.IsInf(s.V, 0)
}

// cellCounts holds the counts of one study: events, subjects, exposure.
type cellCounts struct{ x1, n1, t1, x2, n2, t2 float64 }

// onScale is the table's estimate and variance, with c added to the cells
// where one of them is zero: of a difference, where the variance would be
// zero. A ratio without or with nothing but events in both groups is S214.
func (t cellCounts) onScale(measure string, c float64) (s pool.Study, amended bool, problem *result.Note) {
	zero := t.x1 == 0 || t.x2 == 0
	full := t.x1 == t.n1 || t.x2 == t.n2
	double := &result.Note{Code: "S214", Message: leftForZero}
	switch measure {
	case "proportion":
		if amended = t.x1 == 0 || t.x1 == t.n1; amended {
			t.x1, t.n1 = t.x1+c, t.n1+2*c
		}
		return pool.Study{Y: math.Log(t.x1 / (t.n1 - t.x1)), V: 1/t.x1 + 1/(t.n1-t.x1)}, amended, nil
	case "rate":
		if amended = t.x1 == 0; amended {
			t.x1 += c
		}
		return pool.Study{Y: math.Log(t.x1 / t.t1), V: 1 / t.x1}, amended, nil
	case "rate-ratio":
		if t.x1+t.x2 == 0 {
			return s, false, double
		}
		if zero {
			t.x1, t.x2 = t.x1+c, t.x2+c
		}
		return pool.Study{Y: math.Log(t.x1 / t.t1 * t.t2 / t.x2), V: 1/t.x1 + 1/t.x2}, zero, nil
	case "rate-difference":
		if amended = t.x1 == 0 && t.x2 == 0; amended {
			t.x1, t.x2 = t.x1+c, t.x2+c
		}
		return pool.Study{Y: t.x1/t.t1 - t.x2/t.t2, V: t.x1/(t.t1*t.t1) + t.x2/(t.t2*t.t2)}, amended, nil
	case "risk-difference":
		if amended = t.riskVariance() == 0; amended {
			t = t.plus(c)
		}
		return pool.Study{Y: t.x1/t.n1 - t.x2/t.n2, V: t.riskVariance()}, amended, nil
	}
	if t.x1+t.x2 == 0 || t.x1+t.x2 == t.n1+t.n2 {
		return s, false, double
	}
	if zero || full {
		t = t.plus(c)
	}
	if measure == "odds-ratio" {
		y1, y2 := t.n1-t.x1, t.n2-t.x2
		return pool.Study{Y: math.Log(t.x1 / y1 * y2 / t.x2), V: 1/t.x1 + 1/y1 + 1/t.x2 + 1/y2}, zero || full, nil
	}
	return pool.Study{Y: math.Log(t.x1 / t.n1 * t.n2 / t.x2), V: (t.n1-t.x1)/(t.n1*t.x1) + (t.n2-t.x2)/(t.n2*t.x2)}, zero || full, nil
}

func (t cellCounts) plus(c float64) cellCounts {
	t.x1, t.x2, t.n1, t.n2 = t.x1+c, t.x2+c, t.n1+2*c, t.n2+2*c
	return t
}

func (t cellCounts) riskVariance() float64 {
	return t.x1*(t.n1-t.x1)/(t.n1*t.n1*t.n1) + t.x2*(t.n2-t.x2)/(t.n2*t.n2*t.n2)
}
