package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// twoRates are events and exposures of two groups.
type twoRates struct{ x1, e1, x2, e2 float64 }

func (t twoRates) swap() twoRates { return twoRates{t.x2, t.e2, t.x1, t.e1} }

// rateDifference is the score test of a difference of two rates, with the
// rates of maximum likelihood under the null.
type rateDifference struct{ t twoRates }

// rateDifferenceZ is positive when the difference lies above c.
func rateDifferenceZ(t twoRates, c float64) float64 {
	switch {
	case c < 0:
		return -rateDifferenceZ(t.swap(), -c)
	case math.IsInf(c, 1):
		return math.Inf(-1)
	case !(c >= 0):
		return 0
	}
	a := t.e1 + t.e2
	b := a*c - t.x1 - t.x2
	r := math.Sqrt(b*b + 4*a*t.x2*c)
	low := (r - b) / (2 * a)
	if b > 0 {
		low = 2 * t.x2 * c / (b + r)
	}
	return ratio(t.x1/t.e1-t.x2/t.e2-c, math.Sqrt((low+c)/t.e1+low/t.e2))
}

// Test implements Method.
func (m rateDifference) Test(c float64) Test { return normalTest(rateDifferenceZ(m.t, c)) }

// Limits implements Method.
func (m rateDifference) Limits(a float64) (low, high float64) {
	t := m.t
	step := math.Sqrt((t.x1+0.5)/(t.e1*t.e1) + (t.x2+0.5)/(t.e2*t.e2))
	return Inversion{Test: m.Test, Scale: record.Identity, Low: math.Inf(-1), High: math.Inf(1),
		Start: t.x1/t.e1 - t.x2/t.e2, Step: step, Monotone: true}.Limits(a)
}

// rateRatio is a method for the ratio of two rates. Given all n events, those
// of the first group are binomial with probability π = c·e1/(c·e1 + e2): a
// method for π is one for the ratio c.
type rateRatio struct {
	t    twoRates
	kind uint8
}

const (
	ratioScore uint8 = iota // Wilson on π, the same as the unconditional score
	ratioExact              // Clopper and Pearson on π
	ratioMidP
)

// share is π and 1 - π at the ratio c.
func (m rateRatio) share(c float64) (p, q float64) {
	if c > 1 {
		d := m.t.e1 + m.t.e2/c
		return m.t.e1 / d, m.t.e2 / c / d
	}
	c = math.Max(c, 0)
	d := c*m.t.e1 + m.t.e2
	return c * m.t.e1 / d, m.t.e2 / d
}

// Test implements Method.
func (m rateRatio) Test(c float64) Test {
	if t, none := noAnswer(c); none {
		return t
	}
	p, q := m.share(c)
	x, n := m.t.x1, m.t.x1+m.t.x2
	switch m.kind {
	case ratioScore:
		return normalTest(ratio(q*m.t.x1-p*m.t.x2, math.Sqrt(n*p*q)))
	case ratioExact:
		return Test{Up: binomialUpper(x, n, p, q), Down: binomialLower(x, n, p, q), Value: x, Kind: "exact"}
	case ratioMidP:
		return midTest(midTail(binomialUpper(x+1, n, p, q), binomialUpper(x, n, p, q)), x)
	}
	panic("effect: unknown method of the rate ratio")
}

// Limits implements Method: limits of the odds π/(1 - π) times e2/e1.
func (m rateRatio) Limits(a float64) (low, high float64) {
	inf := math.Inf(1)
	x1, x2, n := m.t.x1, m.t.x2, m.t.x1+m.t.x2
	scale := m.t.e2 / m.t.e1
	switch {
	case n == 0 || !(a > 0):
		return 0, inf
	case a >= 1:
		return inf, 0
	}
	switch m.kind {
	case ratioScore:
		z := dist.NormalQuantile(a)
		return over(wilsonLow(x1, n, z), wilsonHigh(x2, n, z)) * scale,
			wilsonHigh(x1, n, z) / wilsonLow(x2, n, z) * scale
	case ratioExact:
		p, q := binomialExactLow(x1, n, a)
		u, v := binomialExactLow(x2, n, a)
		return p / q * scale, v / u * scale
	case ratioMidP:
		unit := rateRatio{twoRates{x1, 1, x2, 1}, m.kind}
		low, high = Inversion{Test: unit.Test, Scale: record.Log, Low: 0, High: inf, Start: x1 / x2,
			Step: math.Sqrt(1/(x1+0.5) + 1/(x2+0.5)), Monotone: true}.Limits(a)
		return low * scale, high * scale
	}
	panic("effect: unknown method of the rate ratio")
}

// twoRatesInput checks two groups and divides by the design effect.
func twoRatesInput(in Input) (twoRates, *Problem) {
	bad := first(exposureProblem("the first group", in.First.Events, in.First.Exposure),
		exposureProblem("the second group", in.Second.Events, in.Second.Exposure))
	if bad != nil {
		return twoRates{}, bad
	}
	d := in.DesignEffect
	return twoRates{in.First.Events / d, in.First.Exposure / d, in.Second.Events / d, in.Second.Exposure / d}, nil
}

// twoRatesInference fills what the methods for two rates share.
func twoRatesInference(in Input, word string, m Method) *Inference {
	inf := &Inference{Method: m, Word: word, N: in.First.N + in.Second.N,
		Events: result.Some(in.First.Events + in.Second.Events)}
	inf.Checks = append(inf.Checks, shows("constant-rate", "events", in.First.Events+in.Second.Events))
	return inf
}

func rateDifferenceScore(in Input) (*Inference, *Problem) {
	t, bad := twoRatesInput(in)
	if bad = first(bad, noSystematic("score", in), unstratified("score", in)); bad != nil {
		return nil, bad
	}
	inf := twoRatesInference(in, "score", rateDifference{t})
	inf.Estimate = t.x1/t.e1 - t.x2/t.e2
	if v := t.x1/(t.e1*t.e1) + t.x2/(t.e2*t.e2); v > 0 {
		inf.SE, inf.V, inf.Y = result.Some(math.Sqrt(v)), result.Some(v), result.Some(inf.Estimate)
	}
	return inf, nil
}

// fewEvents is the number of events below which the score method for a ratio
// of rates is noted as doubtful.
const fewEvents = 10

func ratioOfRates(in Input, word string, kind uint8) (*Inference, *Problem) {
	t, bad := twoRatesInput(in)
	if bad = first(bad, noSystematic(word, in), unstratified(word, in)); bad != nil {
		return nil, bad
	}
	if kind != ratioScore {
		if bad = countsOnly(word, in, t.x1, t.x2); bad != nil {
			return nil, bad
		}
	}
	inf := twoRatesInference(in, word, rateRatio{t, kind})
	inf.Estimate = 1
	switch {
	case t.x1 == 0 && t.x2 == 0:
		inf.NoEstimate = true
	default:
		inf.Estimate = t.x1 / t.x2 * (t.e2 / t.e1)
	}
	if t.x1 > 0 && t.x2 > 0 {
		v := 1/t.x1 + 1/t.x2
		inf.SE, inf.V, inf.Y = result.Some(math.Sqrt(v)), result.Some(v), result.Some(math.Log(inf.Estimate))
	}
	if t.x2 == 0 {
		inf.Notes = append(inf.Notes, note("S201", infiniteLimit, "upper"))
	}
	if n := t.x1 + t.x2; kind == ratioScore && n < fewEvents {
		if in.DesignEffect == 1 {
			inf.Notes = append(inf.Notes, note("S202", fewEventsFound, n, "exact"))
		} else {
			inf.Notes = append(inf.Notes, note("S202", fewEventsOnly, n))
		}
	}
	return inf, nil
}

func rateRatioScore(in Input) (*Inference, *Problem) { return ratioOfRates(in, "score", ratioScore) }
func rateRatioExact(in Input) (*Inference, *Problem) { return ratioOfRates(in, "exact", ratioExact) }
func rateRatioMidP(in Input) (*Inference, *Problem)  { return ratioOfRates(in, "mid-p", ratioMidP) }
