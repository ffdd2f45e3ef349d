package dist

import "math"

// TUpper is P(T > t) with nu degrees of freedom (> 0); +Inf means normal.
func TUpper(t, nu float64) Tail {
	needNumber(t)
	needPositive(nu)
	switch {
	case math.IsInf(nu, 1):
		return NormalUpper(t)
	case t == 0:
		return TailOf(0.5)
	case math.IsInf(t, 1):
		return impossible
	case math.IsInf(t, -1):
		return sure
	case t < 0:
		r, _ := tRight(-t, nu)
		return r.Complement()
	}
	r, _ := tRight(t, nu)
	return r
}

// tRight is P(T > t) for t > 0, and ln(t·density).
func tRight(t, nu float64) (Tail, float64) {
	r := t / math.Sqrt(nu)
	if r > 1e75 { // x = 1/(1+r²) is exact as r^-2 and its powers may underflow
		lnp, lnw := tFar(math.Log(r), nu)
		return tailLn(lnp), lnw
	}
	s := r * r
	x, y := 1/(1+s), s/(1+s)
	if y == 0 {
		return TailOf(0.5), math.Inf(-1)
	}
	a := nu / 2
	w := lnBetaWeight(x, y, a, 0.5)
	if x*(a+2.5) <= a+1 {
		return tailLn(w + math.Log(0.5*betaFraction(x, y, a, 0.5))), w
	}
	c := 0.5 * math.Exp(w) * betaFraction(y, x, 0.5, a)
	p, q := 0.5-c, 0.5+c
	return Tail{P: p, Q: q, LnP: math.Log(p), LnQ: math.Log(q)}, w
}

// tFar is the leading term at ln(t/√ν) = lnr: ln P, and ln(t·density).
func tFar(lnr, nu float64) (lnp, lnw float64) {
	w := lnGammaHalf(nu/2) - nu*lnr
	return w - math.Log(nu), w
}

// lnGammaHalf is −ln B(a, ½).
func lnGammaHalf(a float64) float64 {
	n := a + 0.5
	return stirling(n) - stirling(a) - stirling(0.5) + 0.5*math.Log(a/n*0.5) - halfLn2Pi +
		a*math.Log1p(0.5/a) + 0.5*math.Log1p(a/0.5)
}

// TQuantile is t with P(T > t) = p; at nu = +Inf the normal quantile. +Inf
// when the quantile exceeds the largest float.
func TQuantile(p, nu float64) float64 {
	needProbability(p)
	needPositive(nu)
	switch {
	case math.IsInf(nu, 1):
		return NormalQuantile(p)
	case p == 0:
		return math.Inf(1)
	case p == 1:
		return math.Inf(-1)
	case p == 0.5:
		return 0
	case p > 0.5:
		return -tQuantileRight(1-p, nu)
	}
	return tQuantileRight(p, nu)
}

// tQuantileRight solves for p < ½, t > 0. Toward the middle Newton runs on
// P(0 < T < t), concave in t; in the tail on ln P, concave in ln t.
func tQuantileRight(p, nu float64) float64 {
	z := NormalQuantile(p)
	if p > 0.2 {
		half := 0.5 - p
		t := half * math.Exp(-lnGammaHalf(nu/2)) * math.Sqrt(nu)
		for range 60 {
			r, lnw := tRight(t, nu)
			d := (half - tCentre(r, t, nu)) * math.Exp(-lnw) * t
			t += d
			if math.Abs(d) < 1e-9*t {
				break
			}
		}
		return t
	}
	lnp := math.Log(p)
	far := (lnGammaHalf(nu/2) - math.Log(nu) - lnp) / nu // ln(t/√ν) of the leading term
	if far > 75*math.Ln10 {
		return math.Exp(far + 0.5*math.Log(nu))
	}
	t := z + (z*z*z+z)/(4*nu)
	if lead := math.Exp(far) * math.Sqrt(nu); nu < 3 || lead < t { // the leading term lies right of the root
		t = lead
	}
	for range 60 {
		r, lnw := tRight(t, nu)
		slope := math.Exp(lnw - r.LnP)
		d := (r.LnP - lnp) / slope
		d = max(-3, min(3, d))
		t *= math.Exp(d)
		if math.Abs(d)*max(1, slope) < 1e-7 {
			break
		}
	}
	return t
}

// tCentre is P(0 < T < t), without cancelling when t is small.
func tCentre(r Tail, t, nu float64) float64 {
	s := t / math.Sqrt(nu)
	s *= s
	x, y := 1/(1+s), s/(1+s)
	if y == 0 {
		return 0
	}
	if x*(nu/2+2.5) <= nu/2+1 {
		return 0.5 - r.P
	}
	return 0.5 * BetaLower(y, x, 0.5, nu/2).P
}
