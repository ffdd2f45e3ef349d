package dist

import "math"

// CorrelationUpper is P(R > r) for n pairs (n > 2) from a bivariate normal
// with correlation rho in [-1, 1]; the density is Hotelling's (1953, from
// memory), integrated in z = atanh r. At rho = 0 it is the t test.
func CorrelationUpper(r, rho float64, n float64) Tail {
	needNumber(r)
	if !(rho >= -1 && rho <= 1) {
		panic("dist: correlation outside [-1, 1]")
	}
	if !(n > 2) || math.IsInf(n, 1) {
		panic("dist: number of pairs must be above 2 and finite")
	}
	switch {
	case r < -1:
		return sure
	case r >= 1:
		return impossible
	case math.Abs(rho) == 1:
		if rho > r {
			return sure
		}
		return impossible
	case r == -1:
		return sure
	case rho == 0:
		return TUpper(r*math.Sqrt((n-2)/((1-r)*(1+r))), n-2)
	}
	k := newCorrelation(rho, n)
	z := math.Atanh(r)
	upper := z >= k.zeta
	first := k.side(z, upper)
	var t Tail
	if first > -0.4 {
		t = tailOfLogs(first, k.side(z, !upper))
	} else {
		t = tailLn(first)
	}
	if !upper {
		return t.Complement()
	}
	return t
}

type correlation struct {
	n, rho, zeta, lead float64
	near               bool // use the series around 1 when its argument is
	g1, g2             float64
}

func newCorrelation(rho, n float64) correlation {
	k := correlation{n: n, rho: rho, zeta: math.Atanh(rho)}
	// ln[(n−2)Γ(n−1)/(√(2π)Γ(n−½))] − ½ ln cosh ζ
	k.lead = math.Log(n-2) + lnGammaStep(n-1) - halfLn2Pi - 0.5*lnCosh(k.zeta)
	if n == math.Floor(n) && n < 16 {
		k.near = true
		// Γ(c)Γ(c−1)/Γ(c−½)² and Γ(c)Γ(1−c)/Γ(½)², c = n−½ (reflection).
		k.g1 = math.Exp(-lnGammaStep(n-1) + lnGammaStep(n-1.5))
		k.g2 = -1 // 1/sin(πc)
		if math.Mod(n, 2) != 0 {
			k.g2 = 1
		}
	}
	return k
}

// lnGammaStep is ln Γ(u) − ln Γ(u+½).
func lnGammaStep(u float64) float64 {
	v := u + 0.5
	// (u−½) ln u − u − [u ln(u+½) − u − ½]
	return stirling(u) - stirling(v) - 0.5*math.Log(u) - u*math.Log1p(0.5/u) + 0.5
}

// side is ln P(R > tanh z) or ln P(R <= tanh z).
func (k correlation) side(z float64, upper bool) float64 {
	lo, hi := math.Inf(-1), z
	if upper {
		lo, hi = z, math.Inf(1)
	}
	g := func(v float64) float64 {
		return k.lead - (k.n-1.5)*lnCosh(v-k.zeta) + 0.5*lnCosh(v) + math.Log(k.series(math.Tanh(v)))
	}
	// The density falls from z on at about this rate.
	scale := 1 / (math.Sqrt(k.n) + (k.n-1.5)*math.Tanh(math.Abs(z-k.zeta)))
	if !upper {
		scale = -scale
	}
	if ln, ok := lnHalfLine(g, z, scale); ok {
		return ln
	}
	return lnIntegral(g, lo, hi, k.zeta, 1/math.Sqrt(k.n))
}

// series is ₂F₁(½,½; n−½; (1+ρr)/2). Near 1 and for small n, where the series
// is slow, it is replaced by the two around 1 (Abramowitz and Stegun 15.3.6,
// from memory).
func (k correlation) series(r float64) float64 {
	s := 0.5 * (1 + k.rho*r)
	c := k.n - 0.5
	if !k.near || s < 0.6 {
		return hyper(0.5, 0.5, c, s)
	}
	t := 0.5 * (1 - k.rho*r)
	return k.g1*hyper(0.5, 0.5, 2-c, t) +
		k.g2*math.Pow(t, c-1)*hyper(c-0.5, c-0.5, c, t)
}

// hyper sums the hypergeometric series.
func hyper(a, b, c, x float64) float64 {
	sum, term := 1.0, 1.0
	for j := 0.0; j < 1e5; j++ {
		term *= (a + j) * (b + j) / ((c + j) * (j + 1)) * x
		sum += term
		if math.Abs(term) < 1e-17*math.Abs(sum) && c+j > 0 {
			break
		}
	}
	return sum
}

// lnCosh is ln cosh z.
func lnCosh(z float64) float64 {
	z = math.Abs(z)
	if z < 1 {
		s := math.Sinh(z)
		return 0.5 * math.Log1p(s*s)
	}
	return z + math.Log1p(math.Exp(-2*z)) - math.Ln2
}
