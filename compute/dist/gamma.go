package dist

import "math"

// lnGammaWeight is ln[x^a e^-x / Γ(a+1)], x, a > 0 (Loader 2000, from
// memory).
func lnGammaWeight(x, a float64) float64 {
	e := (x - a) / a
	var body float64
	if e > 0.5 || e < -0.5 {
		body = a*math.Log(x/a) - (x - a)
	} else {
		body = a * logDeviance(e)
	}
	return body - 0.5*math.Log(a) - halfLn2Pi - stirling(a)
}

// gammaTail is the regularised lower incomplete gamma function P(a, x) for
// a, x > 0 finite, and ln[x^a e^-x / Γ(a)], the density of ln X. The power
// series left of a, Legendre's continued fraction right of it; both take
// about √a steps.
func gammaTail(x, a float64) (Tail, float64) {
	w := lnGammaWeight(x, a)
	lnw := w + math.Log(a)
	if x <= a+1 {
		return tailLn(w + math.Log(gammaSeries(x, a))), lnw
	}
	return tailLn(lnw + math.Log(gammaFraction(x, a))).Complement(), lnw
}

// gammaSeries is 1 + x/(a+1) + x²/((a+1)(a+2)) + …
func gammaSeries(x, a float64) float64 {
	sum, term := 1.0, 1.0
	for k := a + 1; term > 1e-17*sum; k++ {
		term *= x / k
		sum += term
		if math.IsInf(sum, 1) {
			break
		}
	}
	return sum
}

// gammaFraction is Γ(a, x)/(x^a e^-x), modified Lentz.
func gammaFraction(x, a float64) float64 {
	const tiny = 1e-300
	b := x + 1 - a
	c := 1 / tiny
	d := 1 / b
	f := d
	for k := 1.0; k < 1e6; k++ {
		an := k * (a - k)
		b += 2
		d = an*d + b
		if d == 0 {
			d = tiny
		}
		c = b + an/c
		if c == 0 {
			c = tiny
		}
		d = 1 / d
		r := c * d
		f *= r
		if math.Abs(r-1) < 4e-16 {
			break
		}
	}
	return f
}

// gammaLower is P(a, x) at any x, for 0 < a < Inf.
func gammaLower(x, a float64) Tail {
	switch {
	case x <= 0:
		return impossible
	case math.IsInf(x, 1):
		return sure
	}
	t, _ := gammaTail(x, a)
	return t
}

// ChiSquareUpper is P(X > x) with nu degrees of freedom, 0 < nu < Inf.
func ChiSquareUpper(x, nu float64) Tail {
	needNumber(x)
	needShape(nu)
	return gammaLower(x/2, nu/2).Complement()
}

// ChiSquareQuantile is x with P(X > x) = p.
func ChiSquareQuantile(p, nu float64) float64 {
	needProbability(p)
	needShape(nu)
	switch {
	case p == 0:
		return math.Inf(1)
	case p == 1:
		return 0
	case p > 0.5:
		return 2 * gammaQuantileLower(math.Log1p(-p), nu/2)
	}
	return 2 * gammaQuantileUpper(math.Log(p), nu/2)
}

// ChiSquareLowerQuantile is x with P(X < x) = q, for a q that may be tiny.
func ChiSquareLowerQuantile(q, nu float64) float64 {
	needProbability(q)
	needShape(nu)
	switch {
	case q == 0:
		return 0
	case q == 1:
		return math.Inf(1)
	case q > 0.5:
		return 2 * gammaQuantileUpper(math.Log1p(-q), nu/2)
	}
	return 2 * gammaQuantileLower(math.Log(q), nu/2)
}

// gammaQuantileLower solves ln P(a, x) = lnp by Newton in u = ln x, where
// ln P is concave and rising.
func gammaQuantileLower(lnp, a float64) float64 {
	floor := (lnp + stirling(a) + 0.5*math.Log(a) + halfLn2Pi + a*math.Log(a) - a) / a
	u := floor // from P <= x^a/Γ(a+1)
	if h := wilsonHilferty(NormalQuantileLn(lnp), a); h > 0 {
		u = max(u, math.Log(h))
	}
	if u < -700 {
		return math.Exp(floor)
	}
	x := math.Exp(u)
	for range 200 {
		t, w := gammaTail(x, a)
		slope := math.Exp(w - t.LnP)
		d := max(-1.5, min(1.5, (lnp-t.LnP)/slope))
		x *= math.Exp(d)
		if x < 1e-304 {
			return math.Exp(floor)
		}
		if math.Abs(d)*max(1, slope) < 1e-7 {
			break
		}
	}
	return x
}

// gammaQuantileUpper solves ln Q(a, x) = lnq, concave and falling in ln x.
func gammaQuantileUpper(lnq, a float64) float64 {
	x := max(wilsonHilferty(-NormalQuantileLn(lnq), a), 0.5*a)
	if a < 1 {
		x = max(-lnq, 1e-3)
	}
	for range 200 {
		t, w := gammaTail(x, a)
		slope := math.Exp(w - t.LnQ)
		d := max(-1.5, min(1.5, (t.LnQ-lnq)/slope))
		x *= math.Exp(d)
		if x < 1e-304 {
			return 0
		}
		if math.Abs(d)*max(1, slope) < 1e-7 {
			break
		}
	}
	return x
}

// wilsonHilferty starts the search: z is the upper normal quantile of the
// lower tail, that is minus the deviate (Wilson and Hilferty 1931, from
// memory).
func wilsonHilferty(z, a float64) float64 {
	c := 1 - 1/(9*a) - z/(3*math.Sqrt(a))
	return a * c * c * c
}

func needShape(nu float64) {
	if !(nu > 0) || math.IsInf(nu, 1) {
		panic("dist: degrees of freedom must be positive and finite")
	}
}

// PoissonLower is P(X <= x) at mean mu >= 0; x is rounded down.
func PoissonLower(x, mu float64) Tail {
	needPoisson(x, mu)
	x = math.Floor(x)
	switch {
	case x < 0:
		return impossible
	case mu == 0 || math.IsInf(x, 1):
		return sure
	}
	return gammaLower(mu, x+1).Complement()
}

// PoissonUpper is P(X >= x) at mean mu; x is rounded up.
func PoissonUpper(x, mu float64) Tail {
	needPoisson(x, mu)
	x = math.Ceil(x)
	switch {
	case x <= 0:
		return sure
	case mu == 0 || math.IsInf(x, 1):
		return impossible
	}
	return gammaLower(mu, x)
}

// PoissonLnPMF is ln P(X = x); -Inf where X cannot be x.
func PoissonLnPMF(x, mu float64) float64 {
	needPoisson(x, mu)
	switch {
	case x < 0 || x != math.Floor(x) || math.IsInf(x, 1) || math.IsInf(mu, 1):
		return math.Inf(-1)
	case x == 0:
		return -mu
	case mu == 0:
		return math.Inf(-1)
	}
	return lnGammaWeight(mu, x)
}

func needPoisson(x, mu float64) {
	needNumber(x)
	if !(mu >= 0) {
		panic("dist: mean must not be negative")
	}
}
