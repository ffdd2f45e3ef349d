package dist

import "math"

// BetaLower is I_x(a, b) with y = 1-x given separately, so that x near 1
// keeps its digits in y. a, b > 0. Accuracy 1e-12 relative at a, b up to 1e6,
// 1e-11 up to 1e8.
func BetaLower(x, y, a, b float64) Tail {
	needNumber(x)
	needNumber(y)
	needPositive(a)
	needPositive(b)
	switch {
	case x <= 0:
		return impossible
	case y <= 0:
		return sure
	}
	t, _ := betaTail(x, y, a, b)
	return t
}

// betaTail also gives ln[x^a y^b / B(a, b)], the density on the logit scale.
func betaTail(x, y, a, b float64) (Tail, float64) {
	w := lnBetaWeight(x, y, a, b)
	if x*(a+b+2) <= a+1 {
		return tailLn(w + math.Log(betaFraction(x, y, a, b))), w
	}
	return tailLn(w + math.Log(betaFraction(y, x, b, a))).Complement(), w
}

// BetaQuantile is x, and y = 1-x, with I_x(a, b) = p: the lower quantile.
// Both are accurate, however close one is to 0. For a tiny upper tail q use
// y, x = BetaQuantile(q, b, a).
func BetaQuantile(p, a, b float64) (x, y float64) {
	needProbability(p)
	needPositive(a)
	needPositive(b)
	switch {
	case p == 0:
		return 0, 1
	case p == 1:
		return 1, 0
	case p > 0.5:
		y, x = betaQuantileLn(math.Log1p(-p), b, a)
		return x, y
	}
	return betaQuantileLn(math.Log(p), a, b)
}

// betaQuantileLn finds the root of ln I = lnp in u = ln(x/y). ln I is concave
// in u, so that Newton's steps land left of the root and then rise to it.
func betaQuantileLn(lnp, a, b float64) (x, y float64) {
	lnB := stirling(a) + stirling(b) - stirling(a+b) - 0.5*math.Log(a/(a+b)*b) + halfLn2Pi -
		a*math.Log1p(b/a) - b*math.Log1p(a/b)
	z := -NormalQuantileLn(lnp)
	u := math.Log(a) - math.Log(b) + z*math.Sqrt(1/a+1/b)
	// From x^a y^b <= e^(au): the root is not left of this.
	u = max(u, (lnp+math.Log(a)+lnB)/a)
	if u < -700 { // x is so small that I = x^a/(aB) to all digits
		return math.Exp((lnp + math.Log(a) + lnB) / a), 1
	}
	x, y = logistic(min(u, 700))
	for range 100 {
		t, w := betaTail(x, y, a, b)
		slope := math.Exp(w - t.LnP)
		d := (lnp - t.LnP) / slope
		if math.IsNaN(d) || slope == 0 {
			break
		}
		d = max(-20, min(20, d))
		// u + d on the logit scale, without rounding u itself.
		s := 1 + x*math.Expm1(d)
		x, y = x*math.Exp(d)/s, y/s
		if x < 1e-304 {
			return math.Exp((lnp + math.Log(a) + lnB) / a), 1
		}
		if y < 1e-307 || math.Abs(d)*max(slope, 1) < 1e-7 {
			break
		}
	}
	if x < y { // let the rounding of many steps fall on the larger one
		return x, 1 - x
	}
	return 1 - y, y
}

// logistic returns x = 1/(1+e^-u) and 1-x.
func logistic(u float64) (x, y float64) {
	if u < 0 {
		e := math.Exp(u)
		return e / (1 + e), 1 / (1 + e)
	}
	e := math.Exp(-u)
	return 1 / (1 + e), e / (1 + e)
}

// FUpper is P(F > f) with d1 and d2 degrees of freedom (> 0, +Inf allowed).
func FUpper(f, d1, d2 float64) Tail {
	needNumber(f)
	needPositive(d1)
	needPositive(d2)
	switch {
	case f <= 0:
		return sure
	case math.IsInf(f, 1):
		return impossible
	case math.IsInf(d2, 1) && math.IsInf(d1, 1):
		if f < 1 {
			return sure
		}
		return impossible
	case math.IsInf(d2, 1):
		return ChiSquareUpper(d1*f, d1)
	case math.IsInf(d1, 1):
		return ChiSquareUpper(d2/f, d2).Complement()
	}
	r := d1 / d2 * f
	if r == 0 {
		return sure
	}
	if math.IsInf(r, 1) {
		return impossible
	}
	return BetaLower(1/(1+r), r/(1+r), d2/2, d1/2)
}

// FQuantile is f with P(F > f) = p. The lower quantile, P(F < f) = q with a
// tiny q, is 1/FQuantile(q, d2, d1).
func FQuantile(p, d1, d2 float64) float64 {
	needProbability(p)
	needPositive(d1)
	needPositive(d2)
	switch {
	case p == 0:
		return math.Inf(1)
	case p == 1:
		return 0
	case math.IsInf(d1, 1) && math.IsInf(d2, 1):
		return 1
	case math.IsInf(d2, 1):
		return ChiSquareQuantile(p, d1) / d1
	case math.IsInf(d1, 1):
		return d2 / ChiSquareLowerQuantile(p, d2)
	}
	x, y := BetaQuantile(p, d2/2, d1/2)
	return y / x * (d2 / d1)
}

// BinomialLower is P(X <= k) for n trials at probability p, q = 1-p given
// separately. k is rounded down; n >= 0 is a whole number.
func BinomialLower(k, n, p, q float64) Tail {
	needBinomial(k, n, p, q)
	k = math.Floor(k)
	switch {
	case k < 0:
		return impossible
	case k >= n:
		return sure
	}
	return BetaLower(q, p, n-k, k+1)
}

// BinomialUpper is P(X >= k); k is rounded up.
func BinomialUpper(k, n, p, q float64) Tail {
	needBinomial(k, n, p, q)
	k = math.Ceil(k)
	switch {
	case k <= 0:
		return sure
	case k > n:
		return impossible
	}
	return BetaLower(p, q, k, n-k+1)
}

// BinomialLnPMF is ln P(X = k) (Loader 2000, from memory); -Inf where X
// cannot be k.
func BinomialLnPMF(k, n, p, q float64) float64 {
	needBinomial(k, n, p, q)
	switch {
	case k < 0 || k > n || k != math.Floor(k):
		return math.Inf(-1)
	case p == 0 || q == 0:
		if (p == 0 && k == 0) || (q == 0 && k == n) {
			return 0
		}
		return math.Inf(-1)
	case k == 0:
		return n * lnOfPair(q, p)
	case k == n:
		return n * lnOfPair(p, q)
	}
	return lnBetaWeight(p, q, k, n-k) + math.Log(n/(k*(n-k)))
}

// lnOfPair is ln p from the pair (p, 1-p).
func lnOfPair(p, q float64) float64 {
	if q < 0.5 {
		return math.Log1p(-q)
	}
	return math.Log(p)
}

func needBinomial(k, n, p, q float64) {
	needNumber(k)
	needProbability(p)
	needProbability(q)
	if !(n >= 0) || math.IsInf(n, 1) {
		panic("dist: number of trials must be finite and not negative")
	}
}
