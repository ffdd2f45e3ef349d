package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
	"steelyard/protocol/record"
)

// newcombe joins the Wilson limits of two proportions to limits of their
// difference (Newcombe 1998, method 10, from memory). Its p-value at c is the
// error at which a limit touches c.
type newcombe struct{ t table }

// Limits implements Method in closed form.
func (m newcombe) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return -1, 1
	case a >= 1:
		return 1, -1
	}
	d := m.t.x1/m.t.n1 - m.t.x2/m.t.n2
	z := dist.NormalQuantile(a)
	if z < 0 { // errors above one half: the sides change places
		return math.Min(1, d+newcombeReach(m.t.swap(), -z)), math.Max(-1, d-newcombeReach(m.t, -z))
	}
	return math.Max(-1, d-newcombeReach(m.t, z)), math.Min(1, d+newcombeReach(m.t.swap(), z))
}

// newcombeReach is how far the lower limit lies below the difference; with
// the groups exchanged, how far the upper limit lies above it.
func newcombeReach(t table, z float64) float64 {
	return math.Hypot(wilsonReach(t.x1, t.n1, z), wilsonReach(t.y2(), t.n2, z))
}

// wilsonReach is x/n minus its lower Wilson limit, without cancellation.
func wilsonReach(x, n, z float64) float64 {
	if z == 0 || x == 0 {
		return 0
	}
	p, e := x/n, 0.5-x/n
	r := math.Sqrt(x*(n-x)/n + z*z/4)
	if e > 0 {
		return z * p * (1 - p) / (r + z*e)
	}
	return z * (r - z*e) / (n + z*z)
}

// Test implements Method: the root in z of reach(z) = |difference - c|.
func (m newcombe) Test(c float64) Test {
	d := m.t.x1/m.t.n1 - m.t.x2/m.t.n2
	switch {
	case c < d:
		return normalTest(newcombeZ(m.t, d-c))
	case c > d:
		return normalTest(-newcombeZ(m.t.swap(), c-d))
	}
	return normalTest(0)
}

// newcombeZ is z with reach(z) = distance > 0; +Inf beyond the furthest
// reach.
func newcombeZ(t table, distance float64) float64 {
	if math.Hypot(t.x1/t.n1, t.y2()/t.n2) <= distance {
		return math.Inf(1)
	}
	hi := 1.0
	for newcombeReach(t, hi) < distance {
		if hi *= 2; hi > 1e150 {
			return math.Inf(1)
		}
	}
	lo := hi / 2
	if hi == 1 {
		lo = 0
	}
	z, _ := numeric.Root(func(z float64) float64 { return newcombeReach(t, z) - distance }, lo, hi, 1e-14)
	return z
}

func riskDifferenceNewcombe(in Input) (*Inference, *Problem) {
	t, bad := twoProportionsInput(in)
	if bad = first(bad, noSystematic("newcombe", in), unstratified("newcombe", in)); bad != nil {
		return nil, bad
	}
	inf := twoProportionsInference(in, riskDifference, "newcombe", t, newcombe{t})
	approximates(inf, in, riskDifference, t)
	return inf, nil
}

// logWaldOf makes the Wald methods on the log scale: log-delta for the risk
// ratio (Katz et al. 1978, from memory) and woolf for the odds ratio (Woolf
// 1955, from memory). A zero cell leaves them without a variance.
func logWaldOf(k contrast, word string) analysis {
	return func(in Input) (*Inference, *Problem) {
		t, bad := twoProportionsInput(in)
		if bad = first(bad, unstratified(word, in)); bad != nil {
			return nil, bad
		}
		v, ok := k.variance(t)
		if !ok {
			return nil, problem("S103", zeroCell, word, "score")
		}
		est, _ := k.estimate(t)
		w := Wald{Scale: record.Log, Y: math.Log(est), SE: math.Sqrt(v), DF: math.Inf(1), Low: 0, High: math.Inf(1)}
		inf := twoProportionsInference(in, k, word, t, w.WithSystematic(in.SystematicU))
		approximates(inf, in, k, t)
		return inf, nil
	}
}
