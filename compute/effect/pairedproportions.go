package effect

import (
	"math"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// tango is the score test of the difference of two risks in the same pairs
// (Tango 1998, from memory). b and c are the pairs with an event in the first
// only and in the second only, n all pairs.
type tango struct{ b, c, n float64 }

// tangoZ is positive when the difference lies above d.
func tangoZ(b, c, n, d float64) float64 {
	switch {
	case d < 0:
		return -tangoZ(c, b, n, -d)
	case d > 1:
		return math.Inf(-1)
	case !(d >= 0):
		return 0
	}
	// q is the second-only probability of maximum likelihood, the positive
	// root of 2n·q² + B·q + C with C <= 0.
	bb := (2*n-b+c)*d - b - c
	cc := -c * d * (1 - d)
	r := math.Sqrt(bb*bb - 8*n*cc)
	q := (r - bb) / (4 * n)
	if bb > 0 {
		q = -2 * cc / (r + bb)
	}
	return ratio(b-c-n*d, math.Sqrt(n*(2*q+d*(1-d))))
}

// Test implements Method.
func (m tango) Test(d float64) Test { return normalTest(tangoZ(m.b, m.c, m.n, d)) }

// Limits implements Method.
func (m tango) Limits(a float64) (low, high float64) {
	return Inversion{Test: m.Test, Scale: record.Atanh, Low: -1, High: 1, Start: (m.b - m.c) / m.n,
		Step: math.Sqrt(m.b+m.c+1) / m.n, Monotone: true}.Limits(a)
}

// mcnemar is the exact test of equal risks given the discordant pairs, in
// McNemar's setting. It speaks at a difference of 0 only; everywhere else,
// and for the interval, tango stands in.
type mcnemar struct {
	tango
	mid bool
}

// Test implements Method.
func (m mcnemar) Test(d float64) Test {
	if d != 0 {
		return m.tango.Test(d)
	}
	k := m.b + m.c
	up := binomialUpper(m.b, k, 0.5, 0.5)
	if m.mid {
		return midTest(midTail(binomialUpper(m.b+1, k, 0.5, 0.5), up), m.b)
	}
	return Test{Up: up, Down: binomialLower(m.b, k, 0.5, 0.5), Value: m.b, Kind: "exact"}
}

// pairedInput checks the four counts and divides by the design effect.
func pairedInput(in Input) (tango, *Problem) {
	p := in.Pairs
	names := [...]string{"both", "first_only", "second_only", "neither"}
	n := 0.0
	for i, x := range [...]float64{p.Both, p.FirstOnly, p.SecondOnly, p.Neither} {
		if !(x >= 0) || math.IsInf(x, 0) {
			return tango{}, problem("S103", outsideRange, names[i], x)
		}
		n += x
	}
	if !(n >= 1) {
		return tango{}, problem("S101", tooFew, "the sample of pairs", n, 1)
	}
	d := in.DesignEffect
	return tango{p.FirstOnly / d, p.SecondOnly / d, n / d}, nil
}

// pairedInference fills what the three methods share.
func pairedInference(in Input, word string, t tango, m Method) *Inference {
	p := in.Pairs
	n := p.Both + p.FirstOnly + p.SecondOnly + p.Neither
	d := (t.b - t.c) / t.n
	inf := &Inference{Method: m, Word: word, Estimate: d, N: n,
		Events: result.Some(2*p.Both + p.FirstOnly + p.SecondOnly)}
	// [(b+c)/n - d²]/n by parts, so that it is 0 when it should be.
	v := (t.b*(t.n-t.b) + t.c*(t.n-t.c) + 2*t.b*t.c) / (t.n * t.n * t.n)
	if v > 0 {
		inf.SE, inf.V, inf.Y = result.Some(math.Sqrt(v)), result.Some(v), result.Some(d)
	}
	inf.Checks = append(inf.Checks, shows("independent-pairs", "discordant pairs", p.FirstOnly+p.SecondOnly))
	return inf
}

func pairedTango(in Input) (*Inference, *Problem) {
	t, bad := pairedInput(in)
	if bad = first(bad, noSystematic("tango", in), unstratified("tango", in)); bad != nil {
		return nil, bad
	}
	return pairedInference(in, "tango", t, t), nil
}

func pairedConditional(in Input, word string, mid bool) (*Inference, *Problem) {
	t, bad := pairedInput(in)
	if bad = first(bad, noSystematic(word, in), unstratified(word, in), countsOnly(word, in, t.b, t.c)); bad != nil {
		return nil, bad
	}
	inf := pairedInference(in, word, t, mcnemar{t, mid})
	inf.NullOnly = true
	return inf, nil
}

func pairedExact(in Input) (*Inference, *Problem) { return pairedConditional(in, "exact", false) }
func pairedMidP(in Input) (*Inference, *Problem)  { return pairedConditional(in, "mid-p", true) }
