package dist

import (
	"math"

	"steelyard/compute/numeric"
)

// drop is how far, in natural logarithms, an integrand is followed below its
// largest value: e^-45 = 3e-20.
const drop = 45

// lnIntegral is ln ∫ exp(g(v)) dv over [lo, hi] for a unimodal log integrand
// g; either end may be infinite. The peak is looked for from guess in steps
// that begin at width; the mass around it is cut into panels that widen
// outward, cut again at the turns (places where g bends sharply), and
// integrated adaptively to 1e-14 of the total.
func lnIntegral(g func(float64) float64, lo, hi, guess, width float64, turns ...float64) float64 {
	m, top := climb(g, lo, hi, guess, width)
	if math.IsInf(top, -1) {
		return math.Inf(-1)
	}
	f := func(v float64) float64 { return math.Exp(g(v) - top) }
	// Breakpoints walk out from the peak by doubling steps on both sides.
	var left, right [48]float64
	nl := walkDown(g, m, lo, -width, top, &left)
	nr := walkDown(g, m, hi, width, top, &right)
	var breaks [128]float64
	n := 0
	for i := nl - 1; i >= 0; i-- {
		breaks[n] = left[i]
		n++
	}
	breaks[n] = m
	n++
	n += copy(breaks[n:], right[:nr])
	first, last := breaks[0], breaks[n-1]
	for _, v := range turns {
		if !(v > first && v < last) || n == len(breaks) {
			continue
		}
		i := n
		for ; breaks[i-1] > v; i-- {
			breaks[i] = breaks[i-1]
		}
		breaks[i] = v
		n++
	}
	s := numeric.Integrate(f, breaks[:n], 1e-14)
	return top + math.Log(s)
}

// lnTrapezoid is ln ∫ exp(g(v)) dv over the whole line by the trapezoidal
// rule. m is near the peak, width about its standard deviation. ok is false
// when the integrand has features much narrower than that; use lnIntegral
// then.
func lnTrapezoid(g func(float64) float64, m, width float64) (ln float64, ok bool) {
	top := g(m)
	if math.IsInf(top, 0) {
		return 0, false
	}
	both := func(first, step float64) float64 {
		return lattice(g, m+first, step, top) + lattice(g, m+first-step, -step, top)
	}
	s, ok := numeric.Trapezoid(both, 1.3*width, 3)
	return top + math.Log(s), ok && s > 0
}

// lattice adds exp(g − top) at first, first+step, … until the terms are small
// and falling.
func lattice(g func(float64) float64, first, step, top float64) float64 {
	s, last := 0.0, math.Inf(-1)
	for k := 0.0; k < 1000; k++ {
		l := g(first+k*step) - top
		e := math.Exp(l)
		s += e
		if l < last && e < 1e-18*(1+s) {
			break
		}
		last = l
	}
	return s
}

// lnHalfLine is ln ∫ exp(g(v)) dv from a to infinity in the direction of
// scale, which is about the length over which exp(g) falls by e. The
// substitution v = a + scale·exp(s − e^−s) makes the integrand die out doubly
// exponentially at both ends, for the trapezoidal rule (Takahasi and Mori
// 1974, from memory). ok is false when it does not settle.
func lnHalfLine(g func(float64) float64, a, scale float64) (ln float64, ok bool) {
	top := g(a)
	if math.IsInf(top, 0) {
		return 0, false
	}
	both := func(first, step float64) float64 {
		const left = -3.9 // exp(left − e^−left) is 5e-24
		start := left + math.Mod(first-left, step)
		return halfLattice(g, a, scale, top, start, step)
	}
	s, ok := numeric.Trapezoid(both, 0.4, 4)
	return top + math.Log(s*math.Abs(scale)), ok && s > 0
}

// halfLattice adds the transformed integrand at first, first+step, …
func halfLattice(g func(float64) float64, a, scale, top, first, step float64) float64 {
	s, last := 0.0, math.Inf(-1)
	for k := 0.0; k < 400; k++ {
		t := first + k*step
		e := math.Exp(-t)
		x := math.Exp(t - e)
		l := g(a+scale*x) - top
		term := math.Exp(l) * x * (1 + e)
		s += term
		if l < last && t > 0 && term < 1e-18*s {
			break
		}
		last = l
	}
	return s
}

// climb finds the peak of a unimodal g well enough to scale by.
func climb(g func(float64) float64, lo, hi, guess, width float64) (m, top float64) {
	m = min(max(guess, lo), hi)
	top = g(m)
	for _, dir := range [2]float64{width, -width} {
		step := dir
		moved := false
		for range 200 {
			v := min(max(m+step, lo), hi)
			if v == m {
				break
			}
			gv := g(v)
			if !(gv > top) {
				break
			}
			m, top, moved = v, gv, true
			step *= 2
		}
		// The peak now lies within one step on either side.
		if moved {
			a, b := max(lo, m-math.Abs(step)), min(hi, m+math.Abs(step))
			v := numeric.Golden(func(v float64) float64 { return -g(v) }, a, b, 0.05*width/max(b-a, width))
			if gv := g(v); gv > top {
				m, top = v, gv
			}
			break
		}
	}
	return m, top
}

// walkDown lists points from m toward end until g has dropped out of sight.
func walkDown(g func(float64) float64, m, end, step, top float64, out *[48]float64) int {
	if m == end {
		return 0
	}
	n := 0
	v := m
	for n < len(out) {
		w := v + step
		if (step > 0 && w >= end) || (step < 0 && w <= end) {
			w = end
		}
		out[n] = w
		n++
		if w == end || g(w) < top-drop {
			break
		}
		v = w
		if n%2 == 0 {
			step *= 2
		}
	}
	return n
}
