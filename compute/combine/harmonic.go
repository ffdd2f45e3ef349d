package combine

import (
	"math"
	"math/cmplx"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

const euler = 0.57721566490153286061

// harmonic refers x = Σ1/p to the sum of k variables with P(V > v) = 1/v,
// the exact law behind the Landau limit of Wilson (2019, from memory).
func harmonic(p []dist.Tail) Combined {
	if zero(p) {
		return Combined{P: dist.TailOf(0), Statistic: math.Inf(1)}
	}
	k := float64(len(p))
	least := leastLn(p)
	if least < -660 { // Σ1/p may overflow; P = k/Σ(1/p) to all digits out here
		lnx := -least + math.Log(sumOf(p, func(t dist.Tail) float64 { return math.Exp(least - t.LnP) }))
		return Combined{P: dist.TailOfLn(math.Log(k) - lnx), Statistic: math.Exp(lnx)}
	}
	// x − k = Σ(1−p)/p, without cancelling.
	excess := sumOf(p, func(t dist.Tail) float64 { return t.Q / t.P })
	x := k + excess
	switch {
	case excess == 0:
		return Combined{P: certain, Statistic: x}
	case k == 1:
		return Combined{P: p[0], Statistic: x}
	}
	h := paretoSum{k: k, excess: excess}
	if h.growth() > 7 {
		return Combined{P: dist.TailOfLn(min(0, h.lower())).Complement(), Statistic: x}
	}
	return Combined{P: dist.TailOf(min(1, max(0, h.upper()))), Statistic: x}
}

// paretoSum is the sum of k variables with P(V > v) = 1/v, v >= 1, compared
// with k + excess.
type paretoSum struct{ k, excess float64 }

// factor is ln|…|·k and the phase of [1 − t·e^−t·Ei(t) + iπt·e^−t]^k: the
// Laplace transform on the two sides of its cut, times e^−t.
func (h paretoSum) factor(t float64) (ln, phase float64) {
	a := t * dist.EiScaled(t)
	b := math.Pi * t * math.Exp(-t)
	return 0.5 * h.k * math.Log1p(max(a*(a-2)+b*b, -1)), h.k * math.Atan2(b, 1-a)
}

// growth is the largest exponent of the integrand of upper: when it is large
// that integral cancels and P is near 1.
func (h paretoSum) growth() float64 {
	top := 0.0
	for t := 1e-3 / (h.k + h.excess); t < 100; t *= 1.25 {
		ln, _ := h.factor(t)
		top = max(top, ln-t*h.excess)
	}
	return top
}

// upper is P(sum >= k + excess) = (1/π)∫ e^(−t·excess) Im[…]^k dt/t along
// the cut, by the trapezoidal rule in ln t.
func (h paretoSum) upper() float64 {
	f := func(v float64) float64 {
		t := math.Exp(v)
		ln, phase := h.factor(t)
		return math.Exp(ln-t*h.excess) * math.Sin(phase)
	}
	mid := -math.Log(h.k + h.excess)
	both := func(first, step float64) float64 {
		return walk(f, mid+first, step) + walk(f, mid+first-step, -step)
	}
	s, _ := numeric.Trapezoid(both, 0.5, 5)
	return s / math.Pi
}

// walk adds f at first, first+step, … until the terms have died out.
func walk(f func(float64) float64, first, step float64) float64 {
	var sum numeric.Acc
	largest := 0.0
	quiet := 0
	for j := 0.0; j < 4000 && quiet < 24; j++ {
		v := f(first + j*step)
		sum.Add(v)
		largest = max(largest, math.Abs(v))
		if math.Abs(v) <= 1e-18*largest {
			quiet++
		} else {
			quiet = 0
		}
	}
	return sum.Value()
}

// lower is ln P(sum <= k + excess) by the inverse transform of E₂(s)^k/s on
// the line through its saddle point on the right of the cut; for large k.
func (h paretoSum) lower() float64 {
	slope := func(lnc float64) float64 {
		c := math.Exp(lnc)
		g := real(scaledE1(complex(c, 0)))
		return h.excess + h.k*(1-(1+c)*g)/(1-c*g) - 1/c
	}
	lnc, ok := numeric.Root(slope, -60, 25, 1e-6)
	if !ok {
		lnc = 25
	}
	c := math.Exp(lnc)
	g := real(scaledE1(complex(c, 0)))
	e2 := 1 - c*g
	d1 := (1 - (1+c)*g) / e2
	d2 := ((1+c)/c - (2+c)*g) / e2
	sigma := 1 / math.Sqrt(max(h.k*(d2-d1*d1), 0)+1/(c*c))
	return lineIntegral(func(s complex128) complex128 {
		return complex(h.excess, 0)*s + complex(h.k, 0)*cmplx.Log(1-s*scaledE1(s)) - cmplx.Log(s)
	}, c, sigma)
}

// scaledE1 is e^s·E₁(s) for Re s > 0: the power series near 0, the continued
// fraction elsewhere (Abramowitz and Stegun 5.1.11 and 5.1.22, from memory).
func scaledE1(s complex128) complex128 {
	if cmplx.Abs(s) < 2 {
		sum, term := complex(0, 0), complex(1, 0)
		for n := 1.0; n < 60; n++ {
			term *= -s / complex(n, 0)
			sum += term / complex(n, 0)
			if cmplx.Abs(term) < 1e-18 {
				break
			}
		}
		return cmplx.Exp(s) * (complex(-euler, 0) - cmplx.Log(s) - sum)
	}
	const tiny = 1e-300
	b := s + 1
	c := complex(1/tiny, 0)
	d := 1 / b
	f := d
	for n := 1.0; n < 500; n++ {
		a := complex(-n*n, 0)
		b += 2
		d = 1 / (a*d + b)
		c = b + a/c
		r := c * d
		f *= r
		if cmplx.Abs(r-1) < 1e-16 {
			break
		}
	}
	return f
}
