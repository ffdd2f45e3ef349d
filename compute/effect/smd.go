package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/result"
)

// NoncentralT is the kernel of the standardized mean difference: with
// n~ = n1 n2/(n1+n2), t = d sqrt(n~) has a noncentral t distribution with
// noncentrality c sqrt(n~) where c is the true standardized difference.
type NoncentralT struct {
	T    float64 // d sqrt(n~): the pooled t statistic
	DF   float64 // n1 + n2 - 2
	Root float64 // sqrt(n~)
}

// Test implements Method. The statistic is the same at every c; its
// distribution is what moves.
func (m NoncentralT) Test(c float64) Test {
	var up dist.Tail
	switch delta := c * m.Root; {
	case math.IsInf(delta, 1):
		up = sureTail
	case math.IsInf(delta, -1):
		up = sureTail.Complement()
	case delta == 0 || math.IsNaN(delta):
		up = tUpper(m.T, m.DF)
	default:
		up = m.upper(delta)
	}
	return Test{Up: up, Down: up.Complement(), Value: m.T, DF: m.DF, Kind: "t"}
}

// farExponent is the exponent of a tail beyond which only its size is given.
const farExponent = 20_000

// upper is P(T > t) at noncentrality delta. With Z normal and U the root of
// chi-square over nu it is P(Z > tU - delta), whose integrand has the leading
// exponent (tu-delta)^2/2 + nu((u^2-1)/2 - ln u) at its mode u. Where that is
// beyond 20 000 (a p below 1e-8000) it stands for -ln p, right to about a
// part in a thousand, in place of an integral that would take seconds.
func (m NoncentralT) upper(delta float64) dist.Tail {
	t, nu := m.T, m.DF
	scale := t*t + nu
	if math.IsInf(scale, 1) {
		return dist.NoncentralTUpper(t, nu, delta)
	}
	half := t * delta / 2
	root := math.Sqrt(half*half + nu*scale)
	u := (half + root) / scale
	if half < 0 {
		u = nu / (root - half)
	}
	z := t*u - delta
	e := z*z/2 + nu*((u-1)*(u+1)/2-math.Log(u))
	if !(e > farExponent) || math.IsInf(e, 1) {
		return dist.NoncentralTUpper(t, nu, delta)
	}
	small := dist.Tail{P: 0, Q: 1, LnP: -e, LnQ: 0}
	if t > delta {
		return small
	}
	return small.Complement()
}

// sureTail is the tail of an event that must happen.
var sureTail = dist.Tail{P: 1, Q: 0, LnP: 0, LnQ: math.Inf(-1)}

// Limits implements Method: the noncentralities at which each tail is a.
func (m NoncentralT) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return math.Inf(-1), math.Inf(1)
	case a >= 1:
		return math.Inf(1), math.Inf(-1)
	}
	return dist.NoncentralTDelta(a, m.T, m.DF) / m.Root, -dist.NoncentralTDelta(a, -m.T, m.DF) / m.Root
}

// HedgesJ is the factor that makes the standardized difference unbiased,
// exactly: Gamma(nu/2)/(sqrt(nu/2) Gamma((nu-1)/2)) (Hedges 1981).
func HedgesJ(nu float64) float64 {
	return math.Sqrt(1-1/nu) * math.Exp(halfStep((nu-1)/2))
}

// halfStep is ln Gamma(x+1/2) - ln Gamma(x) - ln(x)/2: by its asymptotic
// series from x = 25 on (next term below 1e-16), where the two logarithms
// would cancel.
func halfStep(x float64) float64 {
	if x < 25 {
		a, _ := math.Lgamma(x + 0.5)
		b, _ := math.Lgamma(x)
		return a - b - math.Log(x)/2
	}
	r := 1 / (x * x)
	return (-1./8 + r*(1./192+r*(-1./640+r*(17./14336-r*31./18432)))) / x
}

// varianceShare is 1 - (nu-2)/(nu J^2), written so that nothing cancels.
func varianceShare(nu float64) float64 {
	return -math.Expm1(math.Log1p(-1/(nu-1)) - 2*halfStep((nu-1)/2))
}

func standardized(in Input) (*Inference, *Problem) {
	if in.SystematicU > 0 {
		return nil, problem("S104", notWithU, "noncentral-t")
	}
	s1, s2 := sampleOf(in.First, in.DesignEffect), sampleOf(in.Second, in.DesignEffect)
	w, notes, bad := twoMeansWald("pooled-variance", s1, s2)
	if bad != nil {
		return nil, bad
	}
	if w.DF < 3 {
		return nil, problem("S101", tooFewOf, "both groups together", s1.n+s2.n, 5)
	}
	root := math.Sqrt(s1.eff * s2.eff / (s1.eff + s2.eff))
	m := NoncentralT{T: ratio(w.Y, w.SE), DF: w.DF, Root: root}
	j := HedgesJ(m.DF)
	g := j * m.T / root
	// Unbiased for the variance of g (Hedges 1981).
	v := 1/(root*root) + g*g*varianceShare(m.DF)
	inf := &Inference{
		Method: m, Word: "noncentral-t", Estimate: g, SE: result.Some(math.Sqrt(v)), DF: result.Some(m.DF),
		Y: result.Some(g), V: result.Some(v), N: s1.n + s2.n, Notes: notes,
	}
	inf.Checks = twoMeansChecks("pooled-variance", s1, s2)
	return inf, nil
}
