package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// binomialTails are P(X >= x) and P(X <= x) of n trials at probability c with
// the ends of the range by hand.
func binomialUpper(x, n, c, d float64) dist.Tail {
	switch {
	case x <= 0:
		return sureTail
	case x > n, !(c > 0):
		return sureTail.Complement()
	case !(d > 0):
		return sureTail
	}
	return dist.BinomialUpper(x, n, c, d)
}

func binomialLower(x, n, c, d float64) dist.Tail { return binomialUpper(n-x, n, d, c) }

// binomialExact is Clopper and Pearson's method (1934, from memory): the
// binomial tails themselves.
type binomialExact struct{ x, n float64 }

// Test implements Method.
func (m binomialExact) Test(c float64) Test {
	if t, none := noAnswer(c); none {
		return t
	}
	return Test{Up: binomialUpper(m.x, m.n, c, 1-c), Down: binomialLower(m.x, m.n, c, 1-c), Value: m.x, Kind: "exact"}
}

// Limits implements Method: quantiles of the beta distribution.
func (m binomialExact) Limits(a float64) (low, high float64) {
	low, _ = binomialExactLow(m.x, m.n, a)
	_, high = binomialExactLow(m.n-m.x, m.n, a)
	return low, high
}

// binomialExactLow is the lower limit of Clopper and Pearson, and one minus
// it, at one-sided error a.
func binomialExactLow(x, n, a float64) (p, q float64) {
	switch {
	case x <= 0 || !(a > 0):
		return 0, 1
	case a >= 1:
		return 1, 0
	}
	return dist.BetaQuantile(a, x, n-x+1)
}

// binomialMidP counts half the probability of the observed number.
type binomialMidP struct{ x, n float64 }

// Test implements Method.
func (m binomialMidP) Test(c float64) Test {
	if t, none := noAnswer(c); none {
		return t
	}
	d := 1 - c
	return midTest(midTail(binomialUpper(m.x+1, m.n, c, d), binomialUpper(m.x, m.n, c, d)), m.x)
}

// Limits implements Method.
func (m binomialMidP) Limits(a float64) (low, high float64) {
	return Inversion{Test: m.Test, Scale: record.Logit, Low: 0, High: 1, Start: m.x / m.n,
		Step: logitStep(m.x, m.n), Monotone: true}.Limits(a)
}

// logitStep is about one standard error of a proportion on the logit scale,
// also without events.
func logitStep(x, n float64) float64 {
	return math.Sqrt(1/(x+0.5) + 1/(n-x+0.5))
}

// wilson is the score method for one proportion (Wilson 1927, from memory).
type wilson struct{ x, n float64 }

// Test implements Method.
func (m wilson) Test(c float64) Test {
	switch {
	case c < 0:
		return normalTest(math.Inf(1))
	case c > 1:
		return normalTest(math.Inf(-1))
	}
	return normalTest(ratio(m.x/m.n-c, math.Sqrt(c*(1-c)/m.n)))
}

// Limits implements Method in closed form.
func (m wilson) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return 0, 1
	case a >= 1:
		return 1, 0
	}
	z := dist.NormalQuantile(a)
	return wilsonLow(m.x, m.n, z), wilsonHigh(m.x, m.n, z)
}

// wilsonLow is the root below x/n (z > 0) of the score equation, free of
// cancellation for few events.
func wilsonLow(x, n, z float64) float64 {
	switch {
	case z < 0: // errors above one half: the root above x/n
		return wilsonHigh(x, n, -z)
	case x <= 0:
		return 0
	}
	r := z * math.Sqrt(x*(n-x)/n+z*z/4)
	return x * x / n / (x + z*z/2 + r)
}

// wilsonHigh is the root above x/n.
func wilsonHigh(x, n, z float64) float64 {
	if z < 0 {
		return wilsonLow(x, n, -z)
	}
	if x >= n {
		return 1
	}
	r := z * math.Sqrt(x*(n-x)/n+z*z/4)
	return (x + z*z/2 + r) / (n + z*z)
}

// proportionInput checks one sample; events and n are divided by the design
// effect.
func proportionInput(in Input) (x, n float64, bad *Problem) {
	if bad = countProblem("the sample", in.Sample.Events, in.Sample.N); bad != nil {
		return 0, 0, bad
	}
	x, n = in.Sample.Events/in.DesignEffect, in.Sample.N/in.DesignEffect
	return x, n, nil
}

// proportionInference fills what all three methods share.
func proportionInference(in Input, word string, x, n float64, m Method) *Inference {
	p := x / n
	inf := &Inference{Method: m, Word: word, Estimate: in.Sample.Events / in.Sample.N,
		N: in.Sample.N, Events: result.Some(in.Sample.Events)}
	if x > 0 && x < n {
		inf.SE = result.Some(math.Sqrt(p * (1 - p) / n))
		inf.Y = result.Some(math.Log(x / (n - x)))
		inf.V = result.Some(1/x + 1/(n-x))
	}
	inf.Checks = append(inf.Checks, independent(in))
	return inf
}

func proportionExact(in Input) (*Inference, *Problem) {
	x, n, bad := proportionInput(in)
	if bad = first(bad, noSystematic("exact", in), unstratified("exact", in), countsOnly("exact", in, x, n)); bad != nil {
		return nil, bad
	}
	return proportionInference(in, "exact", x, n, binomialExact{x, n}), nil
}

func proportionMidP(in Input) (*Inference, *Problem) {
	x, n, bad := proportionInput(in)
	if bad = first(bad, noSystematic("mid-p", in), unstratified("mid-p", in), countsOnly("mid-p", in, x, n)); bad != nil {
		return nil, bad
	}
	return proportionInference(in, "mid-p", x, n, binomialMidP{x, n}), nil
}

func proportionWilson(in Input) (*Inference, *Problem) {
	x, n, bad := proportionInput(in)
	if bad = first(bad, noSystematic("wilson", in), unstratified("wilson", in)); bad != nil {
		return nil, bad
	}
	inf := proportionInference(in, "wilson", x, n, wilson{x, n})
	inf.Checks = append(inf.Checks, shows("normal-approximation", "smallest count", math.Min(x, n-x)))
	return inf, nil
}
