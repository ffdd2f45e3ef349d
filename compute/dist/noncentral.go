package dist

import (
	"math"

	"steelyard/compute/numeric"
)

// NoncentralTUpper is P(T > t) with nu degrees of freedom (> 0, +Inf means
// normal) and noncentrality delta: the mean of Φ(delta − t·u) over the
// distribution of u = √(χ²/nu), integrated in ln u (the double integral is in
// any textbook; this arrangement is our own). Relative accuracy 1e-12 of both
// sides, of the logarithms at any size.
func NoncentralTUpper(t, nu, delta float64) Tail {
	needNumber(t)
	needNumber(delta)
	needPositive(nu)
	switch {
	case math.IsInf(t, 0) && math.IsInf(delta, 0) && t*delta > 0:
		return TailOf(0.5)
	case math.IsInf(t, 1) || math.IsInf(delta, -1):
		return impossible
	case math.IsInf(t, -1) || math.IsInf(delta, 1):
		return sure
	case math.IsInf(nu, 1):
		return NormalUpper(t - delta)
	case delta == 0:
		return TUpper(t, nu)
	case t == 0:
		return NormalUpper(-delta)
	case math.Abs(delta) > 1e8*math.Sqrt(1+nu) && t*delta > 0:
		// The normal variable no longer counts beside delta: T > t when
		// u < delta/t (delta > 0), or u > delta/t.
		q := delta / t
		tail := ChiSquareUpper(nu*q*q, nu)
		if delta > 0 {
			return tail.Complement()
		}
		return tail
	}
	k := nctKernel{t: t, nu: nu, delta: delta}
	k.lead = 0.5*math.Log(nu/math.Pi) - stirling(nu/2)
	upper := t >= delta
	first := k.side(upper)
	if first > -0.4 { // the smaller side is the other one
		tail := tailOfLogs(first, k.side(!upper))
		if !upper {
			return tail.Complement()
		}
		return tail
	}
	if upper {
		return tailLn(first)
	}
	return tailLn(first).Complement()
}

type nctKernel struct{ t, nu, delta, lead float64 }

// side is ln P(T > t) or ln P(T <= t).
func (k nctKernel) side(upper bool) float64 {
	t, delta := k.t, k.delta
	if upper {
		t, delta = -t, -delta
	}
	// ln of Φ(t·u − delta) times the density of ln u.
	g := func(v float64) float64 {
		h := math.Expm1(2 * v)
		var body float64
		if h > -0.4 && h < 0.4 {
			body = logDeviance(h)
		} else {
			body = 2*v - h
		}
		if math.IsInf(h, 1) {
			return math.Inf(-1)
		}
		return k.lead + 0.5*k.nu*body + lnNormalLower(t*math.Exp(v)-delta)
	}
	// The peak: where the derivative, falling in u, changes sign.
	v := k.peak(t, delta)
	if top := g(v); top < -1e13 {
		return top // the rest is below the rounding of the logarithm
	}
	u := math.Exp(v)
	curve := 2 * k.nu * u * u
	if z := t*u - delta; z < 30 {
		lam := hazard(-z)
		tu := t * u
		curve += tu * tu * lam * (lam + z)
		if t > 0 {
			curve -= tu * lam
		} else {
			curve += math.Abs(tu) * lam
		}
	}
	width := 1 / math.Sqrt(max(curve, 0.5*k.nu*u*u, 1e-4))
	// Φ turns at u = delta/t over a length of 1/|delta| in ln u. Where that is
	// inside the mass and much sharper than the rest, panels are laid there.
	if q := delta / t; q > 0 && 1/math.Abs(delta) < width {
		turn := math.Log(q)
		if g(turn) > g(v)-drop {
			if 1/math.Abs(delta) < width/4 {
				return lnIntegral(g, math.Inf(-1), math.Inf(1), v, 2*width, turnsOf(t, delta)...)
			}
			width = 1 / math.Abs(delta)
		}
	}
	if ln, ok := lnTrapezoid(g, v, width); ok {
		return ln
	}
	return lnIntegral(g, math.Inf(-1), math.Inf(1), v, 2*width, turnsOf(t, delta)...)
}

// turnsOf are the places in ln u where t·u − delta is 0, ±1, ±3, ±8.
func turnsOf(t, delta float64) []float64 {
	var out [7]float64
	n := 0
	for _, k := range [...]float64{-8, -3, -1, 0, 1, 3, 8} {
		if u := (delta + k) / t; u > 0 {
			out[n] = math.Log(u)
			n++
		}
	}
	return out[:n:n]
}

// peak solves t·u·λ(t·u − delta) + nu − nu·u² = 0 in v = ln u, λ = φ/Φ. The
// left side is positive below the root and negative above it; the root lies
// above 0 when t > 0 and below 0 when t < 0.
func (k nctKernel) peak(t, delta float64) float64 {
	slope := func(v float64) float64 {
		u := math.Exp(v)
		return t*u*hazard(delta-t*u) + k.nu - k.nu*u*u
	}
	a, step := 0.0, math.Copysign(0.25, t)
	for math.Abs(a) < 300 {
		b := a + step
		if (slope(b) > 0) != (t > 0) {
			v, _ := numeric.Root(slope, min(a, b), max(a, b), 1e-9)
			return v
		}
		a = b
		step *= 2
	}
	return a
}

// hazard is φ(z)/P(Z > z).
func hazard(z float64) float64 {
	if z > 30 {
		z2 := 1 / (z * z)
		return z / (1 - z2*(1-z2*(3-z2*(15-105*z2))))
	}
	return math.Exp(-0.5*z*z-halfLn2Pi) / (0.5 * math.Erfc(z*sqrtHalf))
}

// lnNormalLower is ln Φ(z).
func lnNormalLower(z float64) float64 {
	switch {
	case z < -36:
		return lnNormalFar(-z)
	case z > 0:
		return math.Log1p(-0.5 * math.Erfc(z*sqrtHalf))
	}
	return math.Log(0.5 * math.Erfc(-z*sqrtHalf))
}

// NoncentralTDelta is the noncentrality at which P(T > t) = p. p = 0 gives
// -Inf and p = 1 gives +Inf.
func NoncentralTDelta(p, t, nu float64) float64 {
	needProbability(p)
	needNumber(t)
	needPositive(nu)
	switch {
	case p == 0:
		return math.Inf(-1)
	case p == 1 || math.IsInf(t, 1):
		return math.Inf(1)
	case math.IsInf(t, -1):
		return math.Inf(-1)
	}
	z := NormalQuantile(p)
	if math.IsInf(nu, 1) || t == 0 {
		return t - z
	}
	// P(T > t) is near Φ((delta − t·c)/√(1 + t²/(2 nu))).
	step := math.Sqrt(1 + t*t/(2*nu))
	h := func(delta float64) float64 { return NoncentralTUpper(t, nu, delta).Normal() - z }
	d, _ := numeric.Invert(h, t-z*step, step, math.Inf(-1), math.Inf(1))
	return d
}

// NoncentralChiSquareUpper is P(X > x) with nu degrees of freedom and
// noncentrality lambda, both finite, nu > 0, lambda >= 0: the Poisson mixture
// of central tails, both sides added up from positive terms.
func NoncentralChiSquareUpper(x, nu, lambda float64) Tail {
	needNumber(x)
	needShape(nu)
	if !(lambda >= 0) || math.IsInf(lambda, 1) {
		panic("dist: noncentrality must be finite and not negative")
	}
	switch {
	case x <= 0:
		return sure
	case math.IsInf(x, 1):
		return impossible
	case lambda == 0:
		return ChiSquareUpper(x, nu)
	}
	return tailOfLogs(ncxSum(x, nu, lambda, true), ncxSum(x, nu, lambda, false))
}

// ncxSum is the logarithm of Σ Pois(j; λ/2)·tail of χ² with nu+2j degrees of
// freedom. The terms are unimodal in j; the sum runs outward from the largest.
func ncxSum(x, nu, lambda float64, upper bool) float64 {
	term := func(j float64) float64 {
		t := gammaLower(x/2, nu/2+j)
		if upper {
			return PoissonLnPMF(j, lambda/2) + t.LnQ
		}
		return PoissonLnPMF(j, lambda/2) + t.LnP
	}
	j := math.Floor(lambda / 2)
	top := term(j)
	for _, dir := range [2]float64{1, -1} {
		for step := math.Ceil(math.Sqrt(lambda)/4 + 1); step >= 1; {
			v := term(max(0, j+dir*step))
			if j+dir*step >= 0 && v > top {
				j, top = j+dir*step, v
				continue
			}
			step = math.Floor(step / 2)
		}
	}
	var sum numeric.Acc
	for i := j; ; i++ {
		v := math.Exp(term(i) - top)
		sum.Add(v)
		if v < 1e-18 {
			break
		}
	}
	for i := j - 1; i >= 0; i-- {
		v := math.Exp(term(i) - top)
		sum.Add(v)
		if v < 1e-18 {
			break
		}
	}
	return top + math.Log(sum.Value())
}
