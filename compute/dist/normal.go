package dist

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

const (
	halfLn2Pi = 0.91893853320467274178
	sqrtHalf  = 0.70710678118654752440
)

// NormalUpper is P(Z > z). Accuracy 1e-12 relative, also of LnP at any z.
func NormalUpper(z float64) Tail {
	needNumber(z)
	if z < 0 {
		return normalRight(-z).Complement()
	}
	return normalRight(z)
}

// normalRight is P(Z > z) for z >= 0.
func normalRight(z float64) Tail {
	p := 0.5 * math.Erfc(z*sqrtHalf)
	t := Tail{P: p, Q: 0.5 * math.Erfc(-z*sqrtHalf), LnQ: math.Log1p(-p)}
	if z > 36 {
		t.LnP = lnNormalFar(z)
		if z < 40 {
			t.P = math.Exp(t.LnP)
		}
	} else {
		t.LnP = math.Log(p)
	}
	return t
}

// lnNormalFar is ln P(Z > z) by Laplace's continued fraction, for z > 5.
func lnNormalFar(z float64) float64 {
	if math.IsInf(z, 1) {
		return math.Inf(-1)
	}
	f := z
	if z < 1e8 {
		for k := max(4, math.Ceil(600/(z*z))); k >= 1; k-- {
			f = z + k/f
		}
	}
	return -0.5*z*z - halfLn2Pi - math.Log(f)
}

// NormalQuantile is z with P(Z > z) = p; +Inf at 0, -Inf at 1.
func NormalQuantile(p float64) float64 {
	needProbability(p)
	switch {
	case p == 0:
		return math.Inf(1)
	case p == 1:
		return math.Inf(-1)
	case p < 1e-300:
		return NormalQuantileLn(math.Log(p))
	case p == 0.5:
		return 0
	}
	return -mathext.NormalQuantile(p)
}

// NormalQuantileLn is z with ln P(Z > z) = lnp (lnp <= 0), for probabilities
// too small for a float and for probabilities just below 1.
func NormalQuantileLn(lnp float64) float64 {
	needNumber(lnp)
	switch {
	case lnp > 0:
		panic("dist: logarithm of a probability above 0")
	case math.IsInf(lnp, -1):
		return math.Inf(1)
	case lnp > -math.Ln2:
		if q := -math.Expm1(lnp); q > 0 {
			return -NormalQuantile(q)
		}
		return math.Inf(-1)
	case lnp > -600:
		return NormalQuantile(math.Exp(lnp))
	}
	if lnp < -1e100 {
		return math.Sqrt2 * math.Sqrt(-lnp)
	}
	z := math.Sqrt(-2 * (lnp + halfLn2Pi + 0.5*math.Log(-2*lnp)))
	for range 8 {
		f := lnNormalFar(z) - lnp
		// d lnP/dz = -1/(Mills ratio), about -(z + 1/z) out here.
		d := f / (z + 1/z)
		z += d
		if math.Abs(d) < 1e-15*z {
			break
		}
	}
	return z
}
