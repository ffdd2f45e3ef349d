// Package combine puts p-values of independent studies together that came
// without estimates: eight exact methods, the one-sided reading of what was
// reported with its least favourable value, and the tally of directions. What
// it can establish is an effect in at least one study, never an average. It
// knows no record and no estimate.
//
//	c, err := combine.Combine("fisher", tails, nil)
package combine

import (
	"fmt"
	"math"

	"steelyard/compute/dist"
)

// Methods lists the methods by their words in the record.
var Methods = []string{"fisher", "stouffer", "tippett", "pearson", "edgington", "logit", "cauchy", "harmonic"}

// Combined is a combined one-sided p-value with the statistic it comes from.
type Combined struct {
	P         dist.Tail
	Statistic float64
	DF        float64 // 0: none
}

// Combine puts k >= 1 independent one-sided p-values together. Weights serve
// stouffer only and may be nil. An unknown method, or weights that the method
// does not take, is an error.
func Combine(method string, p []dist.Tail, weights []float64) (Combined, error) {
	if len(p) == 0 {
		return Combined{}, fmt.Errorf("no p-value to combine")
	}
	if weights != nil && method != "stouffer" {
		return Combined{}, fmt.Errorf("method %q takes no weights", method)
	}
	if method != "fisher" && method != "tippett" && method != "harmonic" && method != "edgington" && anyCertain(p) {
		return Combined{P: certain, Statistic: endOf(method)}, nil
	}
	switch method {
	case "fisher":
		return fisher(p), nil
	case "pearson":
		return pearson(p), nil
	case "stouffer":
		return stouffer(p, weights), nil
	case "tippett":
		return tippett(p), nil
	case "edgington":
		return edgington(p), nil
	case "logit":
		return logit(p), nil
	case "cauchy":
		return cauchy(p), nil
	case "harmonic":
		return harmonic(p), nil
	}
	return Combined{}, fmt.Errorf("there is no method %q", method)
}

var certain = dist.Tail{P: 1, LnQ: math.Inf(-1)}

func anyCertain(p []dist.Tail) bool {
	for _, t := range p {
		if t.Q == 0 && math.IsInf(t.LnQ, -1) {
			return true
		}
	}
	return false
}

// endOf is the statistic at a p-value of 1.
func endOf(method string) float64 {
	if method == "pearson" {
		return math.Inf(1)
	}
	return math.Inf(-1)
}

// fisher: -2 sum ln p is chi-square with 2k degrees of freedom (Fisher 1932,
// from memory).
func fisher(p []dist.Tail) Combined {
	var s float64
	for _, t := range p {
		s -= 2 * t.LnP
	}
	df := float64(2 * len(p))
	return Combined{P: dist.ChiSquareUpper(s, df), Statistic: s, DF: df}
}

// pearson: -2 sum ln(1-p), lower tail (Pearson 1933, from memory).
func pearson(p []dist.Tail) Combined {
	var s float64
	for _, t := range p {
		s -= 2 * t.LnQ
	}
	df := float64(2 * len(p))
	return Combined{P: dist.ChiSquareUpper(s, df).Complement(), Statistic: s, DF: df}
}

// stouffer: weighted normal deviates (Stouffer et al. 1949, from memory).
func stouffer(p []dist.Tail, weights []float64) Combined {
	var s, ss float64
	for i, t := range p {
		w := 1.0
		if weights != nil {
			w = weights[i]
		}
		s += w * t.Normal()
		ss += w * w
	}
	z := s / math.Sqrt(ss)
	return Combined{P: dist.NormalUpper(z), Statistic: z}
}

// tippett: the smallest p (Tippett 1931, from memory).
func tippett(p []dist.Tail) Combined {
	least := p[0]
	for _, t := range p {
		if t.LnP < least.LnP {
			least = t
		}
	}
	k := float64(len(p))
	lnq := k * least.LnQ // ln of the chance that all k are larger
	q := math.Exp(lnq)
	out := dist.Tail{P: -math.Expm1(lnq), Q: q, LnQ: lnq}
	out.LnP = math.Log(out.P)
	if least.LnP < -600 {
		out.LnP = math.Log(k) + least.LnP
	}
	return Combined{P: out, Statistic: least.P}
}

// edgington: the sum of the p-values against the distribution of a sum of
// uniform ones (Edgington 1972, from memory).
func edgington(p []dist.Tail) Combined {
	var s, c float64
	for _, t := range p {
		s += t.P
		c += t.Q
	}
	k := len(p)
	if s <= c {
		ln := lnUniformSum(k, s)
		return Combined{P: tailOfLn(ln), Statistic: s}
	}
	return Combined{P: tailOfLn(lnUniformSum(k, c)).Complement(), Statistic: s}
}

func tailOfLn(ln float64) dist.Tail {
	if math.IsInf(ln, -1) {
		return certain.Complement()
	}
	return dist.TailOfLn(math.Min(0, ln))
}

// lnUniformSum is ln P(U1 + … + Uk <= s) by the recursion whose terms are all
// positive: F_n(x) = [x F_{n-1}(x) + (n-x) F_{n-1}(x-1)]/n; many
// terms go by the contour.
func lnUniformSum(k int, s float64) float64 {
	switch {
	case s <= 0:
		return math.Inf(-1)
	case s <= 1:
		g, _ := math.Lgamma(float64(k) + 1)
		return float64(k)*math.Log(s) - g
	}
	if k > manyUniforms {
		return lnUniformSumContour(k, s)
	}
	f := make([]float64, int(math.Floor(s))+2)
	for j := 0; s-float64(j) >= 0; j++ {
		f[j] = 1
	}
	for n := 1; n <= k; n++ {
		m := float64(n)
		for j := 0; j < len(f)-1; j++ {
			x := s - float64(j)
			switch {
			case x <= 0:
				f[j] = 0
			case x >= m:
				f[j] = 1
			default:
				f[j] = (x*f[j] + (m-x)*f[j+1]) / m
			}
		}
	}
	return math.Log(f[0])
}

// cauchy: the mean of cot(pi p) is itself Cauchy (Liu & Xie 2020, from memory).
func cauchy(p []dist.Tail) Combined {
	var t float64
	least := 0.0
	for _, x := range p {
		least = math.Min(least, x.LnP)
		switch {
		case x.P > 0.5:
			t -= cot(x.Q)
		case x.P > 1e-290:
			t += cot(x.P)
		}
	}
	k := float64(len(p))
	t /= k
	if least < -660 { // beyond 1e-287 the sum is that of the smallest alone
		var sum float64
		for _, x := range p {
			sum += math.Exp(least - x.LnP)
		}
		ln := least + math.Log(k) - math.Log(sum)
		return Combined{P: dist.TailOfLn(ln), Statistic: math.Exp(math.Min(709, -ln)) / math.Pi}
	}
	var up, down float64
	if t > 0 {
		up = math.Atan(1/t) / math.Pi
		down = 0.5 + math.Atan(t)/math.Pi
	} else {
		up = 0.5 - math.Atan(t)/math.Pi
		down = 0.5
		if t < 0 {
			down = math.Atan(-1/t) / math.Pi
		}
	}
	return Combined{P: dist.Tail{P: up, Q: down, LnP: math.Log(up), LnQ: math.Log(down)}, Statistic: t}
}

func cot(x float64) float64 { return 1 / math.Tan(math.Pi*x) }
