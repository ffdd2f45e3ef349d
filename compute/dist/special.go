package dist

import (
	"math"

	"steelyard/compute/numeric"
)

const euler = 0.57721566490153286061

// Ei is the exponential integral for t >= 0; -Inf at 0, +Inf from 716.36 on.
func Ei(t float64) float64 {
	needNumber(t)
	switch {
	case t < 0:
		panic("dist: Ei is built for t >= 0")
	case t == 0:
		return math.Inf(-1)
	case t > 720:
		return math.Inf(1)
	case t < 40:
		return euler + math.Log(t) + eiSeries(t)
	}
	if t > 700 { // e^t alone would overflow a little too early
		return math.Exp(t-math.Log(t)) * (EiScaled(t) * t)
	}
	return math.Exp(t) * EiScaled(t)
}

// EiScaled is e^-t·Ei(t), which does not overflow; 0 at +Inf.
func EiScaled(t float64) float64 {
	switch {
	case t < 40:
		return math.Exp(-t) * Ei(t)
	case math.IsInf(t, 1):
		return 0
	}
	sum, term := 1.0, 1.0
	for n := 1.0; n < t && term > 1e-17; n++ {
		term *= n / t
		sum += term
	}
	return sum / t
}

// eiSeries is Σ tⁿ/(n·n!).
func eiSeries(t float64) float64 {
	sum, term := 0.0, 1.0
	for n := 1.0; ; n++ {
		term *= t / n
		sum += term / n
		if term <= 1e-18*sum {
			return sum
		}
	}
}

// BivariateNormal is P(X <= h, Y <= k) of two standard normals with
// correlation rho in [-1, 1] (Plackett 1954, from memory). Accuracy 1e-14
// absolute; for rho >= 0 also relative.
func BivariateNormal(h, k, rho float64) float64 {
	needNumber(h)
	needNumber(k)
	if !(rho >= -1 && rho <= 1) {
		panic("dist: correlation outside [-1, 1]")
	}
	p, q := NormalUpper(h), NormalUpper(k)
	switch {
	case rho == 1:
		return min(p.Q, q.Q)
	case rho == -1:
		return max(0, p.Q-q.P)
	case math.IsInf(h, 0) || math.IsInf(k, 0) || rho == 0:
		return p.Q * q.Q
	}
	f := func(t float64) float64 {
		s, c := math.Sincos(t)
		// h² + k² − 2hk·sin t as a sum of squares
		d, e := h-k, h+k
		return math.Exp(-(d*d*(1+s) + e*e*(1-s)) / (4 * c * c))
	}
	a := math.Asin(math.Abs(rho))
	if rho < 0 {
		g := f
		f = func(t float64) float64 { return g(-t) }
	}
	s := numeric.Integrate(f, []float64{0, a / 2, a}, 1e-14) / (2 * math.Pi)
	if rho < 0 {
		s = -s
	}
	return min(max(p.Q*q.Q+s, 0), 1)
}
