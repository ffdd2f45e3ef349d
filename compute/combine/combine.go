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
	"steelyard/compute/numeric"
)

// Methods lists the methods by their words in the record.
var Methods = []string{"fisher", "stouffer", "tippett", "pearson", "edgington", "logit", "cauchy", "harmonic"}

// Combined is a combined one-sided p-value with the statistic it comes from:
// −2Σln p (fisher), −2Σln(1−p) (pearson), the weighted z (stouffer), the
// smallest p (tippett), Σp (edgington), Σln((1−p)/p) (logit), the mean
// cotangent (cauchy), Σ1/p (harmonic). It may be infinite.
type Combined struct {
	P         dist.Tail
	Statistic float64
	DF        float64 // of fisher and pearson; 0: none
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

// sumOf adds f over the p-values, compensated. Infinite terms stay infinite.
func sumOf(p []dist.Tail, f func(dist.Tail) float64) float64 {
	var s numeric.Acc
	for _, t := range p {
		v := f(t)
		if math.IsInf(v, 0) {
			return v
		}
		s.Add(v)
	}
	return s.Value()
}

// zero says whether some p is 0.
func zero(p []dist.Tail) bool {
	for _, t := range p {
		if math.IsInf(t.LnP, -1) {
			return true
		}
	}
	return false
}

// fisher refers −2Σln p to chi-square with 2k degrees of freedom (Fisher
// 1932, from memory).
func fisher(p []dist.Tail) Combined {
	x := -2 * sumOf(p, func(t dist.Tail) float64 { return t.LnP })
	df := 2 * float64(len(p))
	return Combined{P: dist.ChiSquareUpper(x, df), Statistic: x, DF: df}
}

// pearson refers −2Σln(1−p) to the lower tail of the same law (Pearson 1933,
// from memory).
func pearson(p []dist.Tail) Combined {
	k := float64(len(p))
	x := -2 * sumOf(p, func(t dist.Tail) float64 { return t.LnQ })
	if x < 1e-250 { // −Σln(1−p) is Σp; only the leading term of the tail counts
		return Combined{P: lnPowerTail(lnSum(p), k), Statistic: x, DF: 2 * k}
	}
	return Combined{P: dist.ChiSquareUpper(x, 2*k).Complement(), Statistic: x, DF: 2 * k}
}

// lnSum is ln Σp, also where the sum is too small for a float.
func lnSum(p []dist.Tail) float64 {
	top := math.Inf(-1)
	for _, t := range p {
		top = max(top, t.LnP)
	}
	if math.IsInf(top, -1) {
		return top
	}
	return top + math.Log(sumOf(p, func(t dist.Tail) float64 { return math.Exp(t.LnP - top) }))
}

// lnPowerTail is the Tail of x^k/k!.
func lnPowerTail(lnx, k float64) dist.Tail {
	if math.IsInf(lnx, -1) {
		return dist.TailOf(0)
	}
	lg, _ := math.Lgamma(k + 1)
	return dist.TailOfLn(min(0, k*lnx-lg))
}

// stouffer adds weighted normal deviates (Stouffer et al. 1949, from memory).
func stouffer(p []dist.Tail, weights []float64) Combined {
	if zero(p) {
		return Combined{P: dist.TailOf(0), Statistic: math.Inf(1)}
	}
	var sum, square numeric.Acc
	for i, t := range p {
		w := 1.0
		if weights != nil {
			w = weights[i]
		}
		sum.Add(w * t.Normal())
		square.Add(w * w)
	}
	z := sum.Value() / math.Sqrt(square.Value())
	return Combined{P: dist.NormalUpper(z), Statistic: z}
}

// tippett looks at the smallest p alone (Tippett 1931, from memory).
func tippett(p []dist.Tail) Combined {
	least := p[0]
	for _, t := range p {
		if t.LnP < least.LnP || t.LnP == least.LnP && t.LnQ > least.LnQ {
			least = t
		}
	}
	k := float64(len(p))
	lnq := k * least.LnQ
	out := dist.Tail{P: -math.Expm1(lnq), Q: math.Exp(lnq), LnQ: lnq}
	if out.P > 1e-290 {
		out.LnP = math.Log(out.P)
	} else {
		out.LnP = math.Log(k) + least.LnP
	}
	if out.Q < 0.5 {
		out.LnP = math.Log1p(-out.Q)
	}
	return Combined{P: out, Statistic: least.P}
}

// leastLn is the logarithm of the smallest p-value.
func leastLn(p []dist.Tail) float64 {
	least := 0.0
	for _, t := range p {
		least = min(least, t.LnP)
	}
	return least
}

// cauchy averages cotangents (Liu and Xie 2020, from memory).
func cauchy(p []dist.Tail) Combined {
	if zero(p) {
		return Combined{P: dist.TailOf(0), Statistic: math.Inf(1)}
	}
	k := float64(len(p))
	least := leastLn(p)
	if least < -660 { // 1/p may overflow: only the largest terms count
		s := sumOf(p, func(t dist.Tail) float64 { return math.Exp(least - t.LnP) })
		lnp := least + math.Log(k) - math.Log(s)
		return Combined{P: dist.TailOfLn(lnp), Statistic: math.Exp(-lnp) / math.Pi}
	}
	t := sumOf(p, func(t dist.Tail) float64 {
		if t.P > 0.5 {
			return -1 / math.Tan(math.Pi*t.Q)
		}
		return 1 / math.Tan(math.Pi*t.P)
	}) / k
	switch {
	case t > 0:
		return Combined{P: dist.TailOf(math.Atan(1/t) / math.Pi), Statistic: t}
	case t < 0:
		return Combined{P: dist.TailOf(math.Atan(-1/t) / math.Pi).Complement(), Statistic: t}
	}
	return Combined{P: dist.TailOf(0.5)}
}
