package pool

import (
	"math"

	"steelyard/compute/effect"
)

// Peto pools odds ratios from observed minus expected events (Yusuf et al.
// 1985, from memory): the log odds ratio, normal.
func Peto(tables []effect.Stratum) (Pooled, bool) {
	p := Pooled{DF: math.Inf(1), Weights: make([]float64, len(tables))}
	var oe, sv float64
	for i, t := range tables {
		n, s := t.N1+t.N2, t.X1+t.X2
		if n < 2 {
			continue
		}
		v := t.N1 * t.N2 * s * (n - s) / (n * n * (n - 1))
		oe += t.X1 - t.N1*s/n
		sv += v
		p.Weights[i] = v
	}
	if !(sv > 0) {
		return Pooled{}, false
	}
	for i := range p.Weights {
		p.Weights[i] /= sv
	}
	p.Mu, p.SE = oe/sv, math.Sqrt(1/sv)
	return p, true
}
