// Package dist holds distribution functions with tails that stay exact in
// the far tail, and their quantiles. It knows no record and no test.
//
// Every probability comes as a Tail: the probability, its complement and both
// logarithms, each computed on its own side, never as one minus the other.
// Tails hold 1e-11 relative down to 1e-300, and their logarithms beyond.
//
// A quantile XQuantile(p) is always the upper one: the x with P(X > x) = p.
// Arguments may be 0 or infinite, probabilities 0 or 1: the result is the
// mathematical limit. NaN, a probability outside [0, 1] or a parameter outside
// its range (degrees of freedom, shapes and means that are negative) is a
// fault of the calling code, which must check first, and panics.
//
// One use: dist.TUpper(2.3, 14).P is the one-sided p-value of t = 2.3.
package dist

import "math"

// Tail is a probability with its complement and both natural logarithms.
// P or Q may underflow to 0; LnP and LnQ then still hold.
type Tail struct{ P, Q, LnP, LnQ float64 }

// Complement exchanges the two sides.
func (t Tail) Complement() Tail { return Tail{P: t.Q, Q: t.P, LnP: t.LnQ, LnQ: t.LnP} }

// Normal is z with P(Z > z) = t.P for a standard normal Z, found from the
// smaller side, so that neither a tiny P nor a tiny Q loses digits.
func (t Tail) Normal() float64 {
	if t.P <= t.Q {
		return quantilePLn(t.P, t.LnP)
	}
	return -quantilePLn(t.Q, t.LnQ)
}

// lnTiny is where a logarithm takes over from the probability itself.
const lnTiny = -667.0 // about 1e-290

// quantilePLn prefers p unless it is too small to hold all its digits.
func quantilePLn(p, lnp float64) float64 {
	if lnp < lnTiny {
		return NormalQuantileLn(lnp)
	}
	return NormalQuantile(p)
}

// The two certain tails.
var (
	sure       = Tail{P: 1, Q: 0, LnP: 0, LnQ: math.Inf(-1)}
	impossible = Tail{P: 0, Q: 1, LnP: math.Inf(-1), LnQ: 0}
)

// tailLn makes a Tail from ln P when P is known to be the side that is not
// close to 1.
func tailLn(lnp float64) Tail {
	if lnp >= 0 {
		return sure
	}
	t := Tail{P: math.Exp(lnp), Q: -math.Expm1(lnp), LnP: lnp}
	if t.P > 0.5 {
		t.LnQ = math.Log(t.Q)
	} else {
		t.LnQ = math.Log1p(-t.P)
	}
	return t
}

// tailOfLogs is the Tail of two probabilities that add to 1 up to rounding,
// given as logarithms; the smaller one decides both.
func tailOfLogs(lnp, lnq float64) Tail {
	if lnp <= lnq {
		return tailLn(lnp)
	}
	return tailLn(lnq).Complement()
}

// TailOf makes a Tail from a probability in [0, 1] of which only p is known.
func TailOf(p float64) Tail {
	needProbability(p)
	return Tail{P: p, Q: 1 - p, LnP: math.Log(p), LnQ: math.Log1p(-p)}
}

// TailOfLn makes a Tail from the logarithm of a probability.
func TailOfLn(lnp float64) Tail {
	needNumber(lnp)
	if lnp > 0 {
		panic("dist: logarithm of a probability above 0")
	}
	if math.IsInf(lnp, -1) {
		return impossible
	}
	return tailLn(lnp)
}

// double is twice the probability, at most 1.
func (t Tail) double() Tail {
	if t.P >= 0.5 {
		return sure
	}
	return Tail{P: 2 * t.P, Q: 1 - 2*t.P, LnP: t.LnP + math.Ln2, LnQ: math.Log1p(-2 * t.P)}
}

// TwoSided is min(1, 2·min(up, down)), the central two-sided probability.
func TwoSided(up, down Tail) Tail {
	if up.LnP <= down.LnP {
		return up.double()
	}
	return down.double()
}

func needNumber(x float64) {
	if math.IsNaN(x) {
		panic("dist: argument is not a number")
	}
}

func needProbability(p float64) {
	if !(p >= 0 && p <= 1) {
		panic("dist: probability outside [0, 1]")
	}
}

func needPositive(v float64) {
	if !(v > 0) {
		panic("dist: parameter must be positive")
	}
}
