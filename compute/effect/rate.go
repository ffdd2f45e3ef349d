package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// poissonUpper is P(X >= x) at mean mu with the ends by hand.
func poissonUpper(x, mu float64) dist.Tail {
	switch {
	case x <= 0, math.IsInf(mu, 1):
		return sureTail
	case !(mu > 0):
		return sureTail.Complement()
	}
	return dist.PoissonUpper(x, mu)
}

// poissonLower is P(X <= x) at mean mu.
func poissonLower(x, mu float64) dist.Tail {
	switch {
	case !(mu > 0):
		return sureTail
	case math.IsInf(mu, 1):
		return sureTail.Complement()
	}
	return dist.PoissonLower(x, mu)
}

// poissonRate is the exact method for one rate, x events in exposure e
// (Garwood 1936, from memory); with mid set, mid-p.
type poissonRate struct {
	x, e float64
	mid  bool
}

// Test implements Method.
func (m poissonRate) Test(c float64) Test {
	if t, none := noAnswer(c); none {
		return t
	}
	mu := c * m.e
	up := poissonUpper(m.x, mu)
	if m.mid {
		return midTest(midTail(poissonUpper(m.x+1, mu), up), m.x)
	}
	return Test{Up: up, Down: poissonLower(m.x, mu), Value: m.x, Kind: "exact"}
}

// Limits implements Method by inversion, which for the exact method gives the
// chi-square quantiles of Garwood without their loss for small errors.
func (m poissonRate) Limits(a float64) (low, high float64) {
	test := func(mu float64) Test { return poissonRate{m.x, 1, m.mid}.Test(mu) }
	low, high = Inversion{Test: test, Scale: record.Log, Low: 0, High: math.Inf(1),
		Start: m.x, Step: 1 / math.Sqrt(m.x+0.5), Monotone: true}.Limits(a)
	return low / m.e, high / m.e
}

// poissonScore is the score method for one rate: z = (x - ce)/√(ce).
type poissonScore struct{ x, e float64 }

// Test implements Method.
func (m poissonScore) Test(c float64) Test {
	if c < 0 {
		return normalTest(math.Inf(1))
	}
	if math.IsInf(c, 1) {
		return normalTest(math.Inf(-1))
	}
	return normalTest(ratio(m.x-c*m.e, math.Sqrt(c*m.e)))
}

// Limits implements Method in closed form.
func (m poissonScore) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return 0, math.Inf(1)
	case a >= 1:
		return math.Inf(1), 0
	}
	z := dist.NormalQuantile(a)
	root := func(z float64) float64 { // above x for z > 0
		r := math.Sqrt(m.x + z*z/4)
		if z > 0 {
			return (m.x + z*z/2 + z*r) / m.e
		}
		return over(m.x*m.x, m.x+z*z/2-z*r) / m.e
	}
	return root(-z), root(z)
}

// rateInput checks one sample and divides by the design effect.
func rateInput(in Input) (x, e float64, bad *Problem) {
	if bad = exposureProblem("the sample", in.Sample.Events, in.Sample.Exposure); bad != nil {
		return 0, 0, bad
	}
	return in.Sample.Events / in.DesignEffect, in.Sample.Exposure / in.DesignEffect, nil
}

// rateInference fills what the methods for one rate share.
func rateInference(in Input, word string, x, e float64, m Method) *Inference {
	inf := &Inference{Method: m, Word: word, Estimate: in.Sample.Events / in.Sample.Exposure,
		N: in.Sample.N, Events: result.Some(in.Sample.Events)}
	if x > 0 {
		inf.SE = result.Some(math.Sqrt(x) / e)
		inf.Y, inf.V = result.Some(math.Log(x/e)), result.Some(1/x)
	}
	inf.Checks = append(inf.Checks, shows("constant-rate", "events", in.Sample.Events))
	return inf
}

func poisson(in Input, word string, mid bool) (*Inference, *Problem) {
	x, e, bad := rateInput(in)
	if bad = first(bad, noSystematic(word, in), unstratified(word, in), countsOnly(word, in, x)); bad != nil {
		return nil, bad
	}
	return rateInference(in, word, x, e, poissonRate{x, e, mid}), nil
}

func rateExact(in Input) (*Inference, *Problem) { return poisson(in, "exact", false) }
func rateMidP(in Input) (*Inference, *Problem)  { return poisson(in, "mid-p", true) }

func rateScore(in Input) (*Inference, *Problem) {
	x, e, bad := rateInput(in)
	if bad = first(bad, noSystematic("score", in), unstratified("score", in)); bad != nil {
		return nil, bad
	}
	return rateInference(in, "score", x, e, poissonScore{x, e}), nil
}
