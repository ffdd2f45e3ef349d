package combine

import (
	"math"
	"math/cmplx"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

// lineIntegral is ln of (1/π)∫₀^∞ Re exp(g(c+iy)) dy by the trapezoidal rule
// on the line through the saddle point c, where exp(g) is real and falls
// away like a normal density with deviation sigma; step sigma/6.
func lineIntegral(g func(s complex128) complex128, c, sigma float64) float64 {
	h := sigma / 6
	top := real(g(complex(c, 0)))
	var sum numeric.Acc
	sum.Add(0.5)
	for j := 1.0; j < 1e5; j++ {
		l := g(complex(c, j*h))
		size := math.Exp(real(l) - top)
		sum.Add(size * math.Cos(imag(l)))
		if size < 1e-18 {
			break
		}
	}
	return top + math.Log(sum.Value()*h/math.Pi)
}

// logit refers Σln((1−p)/p) to the sum of k logistic variables, by its
// Laplace transform (πs/sin πs)^k. The use of the logit is Mudholkar and
// George's (1979, from memory); their t approximation is not used.
func logit(p []dist.Tail) Combined {
	if zero(p) {
		return Combined{P: dist.TailOf(0), Statistic: math.Inf(1)}
	}
	x := sumOf(p, func(t dist.Tail) float64 { return t.LnQ - t.LnP })
	t := dist.TailOfLn(min(0, logisticTail(math.Abs(x), float64(len(p)))))
	if x < 0 {
		return Combined{P: t.Complement(), Statistic: x}
	}
	return Combined{P: t, Statistic: x}
}

// logisticTail is ln P(sum of k logistics > x), x >= 0.
func logisticTail(x, k float64) float64 {
	// The saddle c in (0, 1) solves k(1/c − π cot πc) − x − 1/c = 0. It is
	// looked for on the logit scale so that 1 − c keeps its digits.
	pair := func(u float64) (c, e float64) {
		if u < 0 {
			w := math.Exp(u)
			return w / (1 + w), 1 / (1 + w)
		}
		w := math.Exp(-u)
		return 1 / (1 + w), w / (1 + w)
	}
	slope := func(u float64) float64 {
		c, e := pair(u)
		var cot float64 // of πc
		if c < 0.5 {
			cot = 1 / math.Tan(math.Pi*c)
		} else {
			cot = -1 / math.Tan(math.Pi*e)
		}
		return (k-1)/c - k*math.Pi*cot - x
	}
	u, ok := numeric.Root(slope, -700, 700, 1e-8)
	if !ok {
		u = 0
	}
	c, e := pair(u)
	sin := math.Sin(math.Pi * min(c, e))
	sigma := 1 / math.Sqrt(k*(math.Pi*math.Pi/(sin*sin)-1/(c*c))+1/(c*c))
	g := func(s complex128) complex128 {
		// sin πs = sin π(1−s); 1−s keeps its digits through e.
		near := s
		if c > 0.5 {
			near = complex(e, -imag(s))
		}
		ratio := complex(math.Pi, 0) * s / cmplx.Sin(complex(math.Pi, 0)*near)
		return complex(-x, 0)*s + complex(k, 0)*cmplx.Log(ratio) - cmplx.Log(s)
	}
	return lineIntegral(g, c, sigma)
}

// edgington refers Σp to the sum of k uniform variables (Edgington 1972, from
// memory), from whichever end is nearer.
func edgington(p []dist.Tail) Combined {
	k := float64(len(p))
	low := sumOf(p, func(t dist.Tail) float64 { return t.P })
	if 2*low <= k {
		return Combined{P: uniformLower(p, low), Statistic: low}
	}
	flipped := make([]dist.Tail, len(p))
	for i, t := range p {
		flipped[i] = t.Complement()
	}
	high := sumOf(flipped, func(t dist.Tail) float64 { return t.P })
	return Combined{P: uniformLower(flipped, high).Complement(), Statistic: low}
}

// recursionLimit is where the recursion gives way to the integral.
const recursionLimit = 64

// uniformLower is P(sum of k uniforms <= x) for x = Σp <= k/2.
func uniformLower(p []dist.Tail, x float64) dist.Tail {
	k := len(p)
	if x <= 1 {
		return lnPowerTail(lnSum(p), float64(k))
	}
	if k < recursionLimit {
		return dist.TailOf(min(1, uniformRecursion(x, k)))
	}
	return dist.TailOfLn(min(0, uniformIntegral(x, float64(k))))
}

// uniformRecursion is F_k(x): F_n(y) = [y·F_{n−1}(y) + (n−y)·F_{n−1}(y−1)]/n,
// all terms positive. k below recursionLimit.
func uniformRecursion(x float64, k int) float64 {
	var f [recursionLimit]float64 // F_n(x − j)
	terms := min(int(x)+1, len(f))
	for j := range terms {
		f[j] = 1
	}
	for n := 1; n <= k; n++ {
		m := float64(n)
		for j := range terms {
			y := x - float64(j)
			switch {
			case y >= m:
				f[j] = 1
			case y <= 0:
				f[j] = 0
			default:
				below := 0.0
				if j+1 < terms {
					below = f[j+1]
				}
				f[j] = (y*f[j] + (m-y)*below) / m
			}
		}
	}
	return f[0]
}

// uniformIntegral is ln P(sum of k uniforms <= x), x <= k/2, by the inverse
// Laplace transform of ((1−e^−s)/s)^k/s along the line through its saddle
// point; its cost does not depend on k.
func uniformIntegral(x, k float64) float64 {
	d := k/2 - x // distance below the middle, >= 0
	slope := func(lnc float64) float64 {
		c := math.Exp(lnc)
		return k*(0.5/math.Tanh(c/2)-1/c) - d - 1/c
	}
	lnc, ok := numeric.Root(slope, -40, 60, 1e-8)
	if !ok {
		lnc = 0
	}
	c := math.Exp(lnc)
	sinh := math.Sinh(min(c/2, 300))
	sigma := 1 / math.Sqrt(k*(1/(c*c)-0.25/(sinh*sinh))+1/(c*c))
	g := func(s complex128) complex128 {
		// ln[sinh(s/2)/(s/2)] = s/2 + ln[(1−e^−s)/s]
		var q complex128
		if cmplx.Abs(s) < 0.5 {
			q = lnSinhc(s / 2)
		} else {
			q = s/2 + cmplx.Log((1-cmplx.Exp(-s))/s)
		}
		return complex(-d, 0)*s + complex(k, 0)*q - cmplx.Log(s)
	}
	return lineIntegral(g, c, sigma)
}

// lnSinhc is ln(sinh z/z) for small z.
func lnSinhc(z complex128) complex128 {
	w := z * z
	// sinh z/z − 1 = w/6·(1 + w/20·(1 + w/42·(1 + …)))
	s := complex(1, 0)
	for n := 9.0; n >= 1; n-- {
		s = 1 + w/complex((2*n+2)*(2*n+3), 0)*s
	}
	return log1p(w / 6 * s)
}

// log1p is ln(1+z) for |z| < 1/2.
func log1p(z complex128) complex128 {
	re := 0.5 * math.Log1p(real(z)*(2+real(z))+imag(z)*imag(z))
	return complex(re, math.Atan2(imag(z), 1+real(z)))
}
