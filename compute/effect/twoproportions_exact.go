package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

// oddsExact is the conditional test of an odds ratio: the first group's
// events given all margins (Fisher 1935, Cornfield 1956, both from memory).
// With mid set, half the probability of the observed table counts.
type oddsExact struct {
	t   table
	mid bool
}

// support is the range of the first group's events given the margins.
func (t table) support() (low, high float64) {
	return math.Max(0, t.s()-t.n2), math.Min(t.n1, t.s())
}

// conditionalUpper is P(X >= x) at the odds ratio psi, given the margins.
func conditionalUpper(t table, x, psi float64) dist.Tail {
	low, high := t.support()
	switch {
	case x <= low:
		return sureTail
	case x > high, !(psi > 0):
		return sureTail.Complement()
	case math.IsInf(psi, 1):
		return sureTail
	}
	return dist.Hypergeometric{N1: t.n1, N2: t.n2, S: t.s(), Psi: psi}.Upper(x)
}

// conditionalLower is P(X <= x), by exchanging the groups.
func conditionalLower(t table, x, psi float64) dist.Tail {
	return conditionalUpper(t.swap(), t.s()-x, 1/psi)
}

// Test implements Method.
func (m oddsExact) Test(c float64) Test {
	if t, none := noAnswer(c); none {
		return t
	}
	up := conditionalUpper(m.t, m.t.x1, c)
	if m.mid {
		return midTest(midTail(conditionalUpper(m.t, m.t.x1+1, c), up), m.t.x1)
	}
	return Test{Up: up, Down: conditionalLower(m.t, m.t.x1, c), Value: m.t.x1, Kind: "exact"}
}

// Limits implements Method. Each side is searched with its own tail only.
func (m oddsExact) Limits(a float64) (low, high float64) {
	if m.mid {
		return oddsRatio.invertTable(m.t, m.Test, true).Limits(a)
	}
	up := func(c float64) Test { return Test{Up: conditionalUpper(m.t, m.t.x1, c)} }
	down := func(c float64) Test { return Test{Down: conditionalLower(m.t, m.t.x1, c)} }
	return oddsRatio.invertTable(m.t, up, true).side(a, -1), oddsRatio.invertTable(m.t, down, true).side(a, +1)
}

// conditionalEstimate is the odds ratio of maximum conditional likelihood,
// where the mean of X is the observed number; 0 or +Inf at the ends of the
// support, and not defined where the support is one point.
func conditionalEstimate(t table) (psi float64, defined bool) {
	low, high := t.support()
	switch {
	case low == high:
		return 1, false
	case t.x1 == low:
		return 0, true
	case t.x1 == high:
		return math.Inf(1), true
	}
	start, _ := oddsRatio.estimate(t)
	v, _ := oddsRatio.variance(table{t.x1 + 0.5, t.n1 + 1, t.x2 + 0.5, t.n2 + 1})
	h := func(u float64) float64 {
		return dist.Hypergeometric{N1: t.n1, N2: t.n2, S: t.s(), Psi: math.Exp(u)}.Mean() - t.x1
	}
	at := math.Log(start)
	step := math.Sqrt(v) / 8
	for range 60 { // the two estimates differ by little
		if h(at-step) <= 0 && h(at+step) >= 0 {
			break
		}
		step *= 2
	}
	d, ok := numeric.Root(func(d float64) float64 { return h(at + d) }, -step, step, 1e-13)
	if !ok {
		return start, true
	}
	return math.Exp(at + d), true
}

// conditional makes the inference of both conditional methods.
func conditional(in Input, word string, mid bool) (*Inference, *Problem) {
	t, bad := twoProportionsInput(in)
	if bad = first(bad, noSystematic(word, in), unstratified(word, in),
		countsOnly(word, in, t.x1, t.n1, t.x2, t.n2)); bad != nil {
		return nil, bad
	}
	inf := twoProportionsInference(in, oddsRatio, word, t, oddsExact{t, mid})
	est, defined := conditionalEstimate(t)
	inf.Estimate, inf.NoEstimate = est, !defined
	return inf, nil
}

func oddsRatioExact(in Input) (*Inference, *Problem) { return conditional(in, "exact", false) }
func oddsRatioMidP(in Input) (*Inference, *Problem)  { return conditional(in, "mid-p", true) }
