package dist

import (
	"math"
	"testing"

	"steelyard/compute/numeric"
)

// Whatever admissible arguments come, no result is NaN and tails hold
// together. Arguments are drawn over the whole range of exponents, with the
// ends of their ranges among them; the seed is fixed.
func TestNoArgumentGivesNaN(t *testing.T) {
	s := numeric.NewStream("test", 1, "edges", 0)
	inf := math.Inf(1)
	wide := func() float64 { // positive, 1e-300 … 1e300 and the ends
		switch s.IntN(8) {
		case 0:
			return 5e-324
		case 1:
			return math.MaxFloat64
		case 2:
			return 1
		}
		return math.Exp((s.Uniform() - 0.5) * 1380)
	}
	usual := func() float64 { return math.Exp(s.Normal() * 3) }
	shape := func() float64 { return min(max(usual(), 1e-3), 1e7) }
	signed := func(v float64) float64 {
		if s.IntN(2) == 0 {
			return -v
		}
		return v
	}
	any := func() float64 {
		switch s.IntN(6) {
		case 0:
			return signed(inf)
		case 1:
			return 0
		case 2:
			return signed(wide())
		}
		return signed(usual())
	}
	p := func() float64 {
		switch s.IntN(6) {
		case 0:
			return 0
		case 1:
			return 1
		case 2:
			return 5e-324
		case 3:
			return math.Exp(-690 * s.Uniform())
		case 4:
			return 1 - 0x1p-53
		}
		return s.Uniform()
	}
	count := func() float64 { return math.Floor(math.Exp(s.Uniform() * 13)) }
	for range 2000 {
		x, nu, nu2 := any(), shape(), shape()
		prob := p()
		for name, got := range map[string]Tail{
			"normal":     NormalUpper(x),
			"t":          TUpper(x, nu),
			"F":          FUpper(x, nu, nu2),
			"chi-square": ChiSquareUpper(x, nu),
			"beta":       BetaLower(prob, 1-prob, nu, nu2),
			"binomial":   BinomialUpper(x, count(), prob, 1-prob),
			"poisson":    PoissonLower(x, min(wide(), 1e7)),
		} {
			if fault := checkTail(got); fault != "" {
				t.Errorf("%s at x %v, %v, %v, p %v: %s", name, x, nu, nu2, prob, fault)
			}
		}
		if s.IntN(10) == 0 {
			delta := any()
			if fault := checkTail(NoncentralTUpper(x, nu, delta)); fault != "" {
				t.Errorf("noncentral t at %v, %v, %v: %s", x, nu, delta, fault)
			}
			rho := 2*prob - 1
			if fault := checkTail(CorrelationUpper(math.Tanh(x), rho, 3+count())); fault != "" {
				t.Errorf("correlation at %v, %v: %s", math.Tanh(x), rho, fault)
			}
			n1, n2 := count(), count()
			h := Hypergeometric{n1, n2, math.Floor(s.Uniform() * (n1 + n2)), wide()}
			lo := max(0, h.S-n2)
			at := lo + math.Floor(s.Uniform()*(min(n1, h.S)-lo+1))
			if fault := checkTail(h.Upper(at)); fault != "" {
				t.Errorf("hypergeometric %+v at %v: %s", h, at, fault)
			}
			if m := h.Mean(); !(m >= lo && m <= min(n1, h.S)) || h.LnPoint(at) > 0 || math.IsNaN(h.LnPoint(at)) {
				t.Errorf("hypergeometric %+v: mean %v, ln point %v", h, m, h.LnPoint(at))
			}
		}
		u, v := BetaQuantile(prob, nu, nu2)
		for name, got := range map[string]float64{
			"normal": NormalQuantile(prob), "t": TQuantile(prob, nu), "F": FQuantile(prob, nu, nu2),
			"chi-square": ChiSquareQuantile(prob, nu), "lower chi-square": ChiSquareLowerQuantile(prob, nu),
			"ln": NormalQuantileLn(-wide()), "beta x": u, "beta y": v, "ei": Ei(math.Abs(x)),
			"two normals": BivariateNormal(x, any(), 2*prob-1),
		} {
			if math.IsNaN(got) {
				t.Errorf("%s at p %v, x %v, %v, %v: NaN", name, prob, x, nu, nu2)
			}
		}
	}
}
