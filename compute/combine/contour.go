package combine

import (
	"math"
	"math/cmplx"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

// logit: the sum of ln((1-p)/p) against the exact distribution of a sum of k
// logistic variables (statistic of Mudholkar & George 1979, from memory; their
// t approximation is not used).
func logit(p []dist.Tail) Combined {
	var x float64
	for _, t := range p {
		x += t.LnQ - t.LnP
	}
	if x < 0 {
		return Combined{P: logisticSum(len(p), -x).Complement(), Statistic: x}
	}
	return Combined{P: logisticSum(len(p), x), Statistic: x}
}

// logisticSum is P(sum of k logistics > x) for x >= 0, by the trapezoidal rule
// along the steepest vertical line in the plane of the moment generating
// function (pi s/sin pi s)^k.
func logisticSum(k int, x float64) dist.Tail {
	n := float64(k)
	// delta = 1 - c, where c solves k (1/c - pi cot pi c) - x - 1/c = 0.
	f := func(lnd float64) float64 {
		d := math.Exp(lnd)
		c := 1 - d
		return n*(1/c+math.Pi/math.Tan(math.Pi*d)) - x - 1/c
	}
	lo, hi := math.Log(math.Min(0.1, n/(n+x+1)/10)), math.Log(1-1e-9)
	lnd, ok := numeric.Root(f, lo, hi, 1e-14)
	if !ok {
		lnd = math.Log(0.5)
	}
	d := math.Exp(lnd)
	c := 1 - d
	sin := math.Sin(math.Pi * d)
	sigma := 1 / math.Sqrt(n*(math.Pi*math.Pi/(sin*sin)-1/(c*c))+1/(c*c))
	h := sigma / 6
	g := func(y float64) complex128 {
		s := complex(c, y)
		q := cmplx.Sin(complex(math.Pi*d, -math.Pi*y))
		return -s*complex(x, 0) + complex(n, 0)*cmplx.Log(complex(math.Pi, 0)*s/q) - cmplx.Log(s)
	}
	top := real(g(0))
	sum := 0.5
	for i := 1; i < 1_000_000; i++ {
		y := h * float64(i)
		if math.Pi*y > 600 {
			break
		}
		e := g(y)
		size := math.Exp(real(e) - top)
		sum += size * math.Cos(imag(e))
		if size < 1e-18 {
			break
		}
	}
	return tailOfLn(top + math.Log(sum*h/math.Pi))
}

// manyUniforms is how many uniforms are enough for the contour: its integrand
// falls off like |y|^-k.
const manyUniforms = 100

// lnUniformSumContour is ln P(U1 + … + Uk <= x) for 0 < x <= k/2 and many
// uniforms, along the steepest vertical line of e^(sx) ((1-e^-s)/s)^k / s.
func lnUniformSumContour(k int, x float64) float64 {
	n := float64(k)
	slope := func(lnc float64) float64 {
		c := math.Exp(lnc)
		return n*(1/math.Expm1(math.Min(c, 709))-1/c) + x - 1/c
	}
	lnc, ok := numeric.Root(slope, math.Log(1e-8), math.Log((n+1)/x+1), 1e-14)
	if !ok {
		lnc = 0
	}
	c := math.Exp(lnc)
	half := 2 * math.Sinh(math.Min(c, 1400)/2)
	h := 1 / math.Sqrt(n*(1/(c*c)-1/(half*half))+1/(c*c)) / 6
	g := func(y float64) complex128 {
		s := complex(c, y)
		return s*complex(x, 0) + complex(n, 0)*cmplx.Log((1-cmplx.Exp(-s))/s) - cmplx.Log(s)
	}
	top := real(g(0))
	sum := 0.5
	for i := 1; i < 1_000_000; i++ {
		e := g(h * float64(i))
		size := math.Exp(real(e) - top)
		sum += size * math.Cos(imag(e))
		if size < 1e-18 {
			break
		}
	}
	return top + math.Log(sum*h/math.Pi)
}

// harmonic: the sum of 1/p against the exact law of a sum of k reciprocals of
// uniforms, the law behind the Landau limit (Wilson 2019, from memory).
func harmonic(p []dist.Tail) Combined {
	n := float64(len(p))
	least := 0.0
	for _, t := range p {
		least = math.Min(least, t.LnP)
	}
	var x float64 // in units of exp(-least)
	for _, t := range p {
		x += math.Exp(least - t.LnP)
	}
	lnx := math.Log(x) - least
	if lnx > math.Log(n)+45 { // the next term is below 1e-17 of this one
		return Combined{P: dist.TailOfLn(math.Log(n) - lnx), Statistic: math.Exp(math.Min(lnx, 709))}
	}
	x = math.Exp(lnx)
	if x <= n*(1+1e-15) {
		return Combined{P: certain, Statistic: x}
	}
	up := reciprocalSum(n, x)
	return Combined{P: dist.TailOf(math.Min(1, math.Max(0, up))), Statistic: x}
}

// reciprocalSum is P(sum of k reciprocals of uniforms > x) as the integral
// (1/pi) of exp(-tx) Im[(e^t - t Ei(t) + i pi t)^k] dt/t.
func reciprocalSum(n, x float64) float64 {
	f := func(t float64) float64 {
		if t == 0 {
			return n * math.Pi
		}
		re := math.Exp(t) - t*dist.Ei(t)
		if t > 30 { // e^t (1 - t e^-t Ei(t)), the bracket without cancelling
			re = -math.Exp(t) * tailOfEi(t)
		}
		ln := math.Log(math.Hypot(re, math.Pi*t))
		angle := n * math.Atan2(math.Pi*t, re)
		return math.Exp(n*ln-t*x) * math.Sin(angle) / t
	}
	total, a, b := 0.0, 0.0, 5/x
	for range 200 {
		// The angle turns quickly for large k: break at its half turns.
		parts := math.Ceil(n*(angleAt(b)-angleAt(a))/math.Pi) + 1
		parts = math.Min(parts, 4000)
		breaks := make([]float64, int(parts)+1)
		for i := range breaks {
			breaks[i] = a + (b-a)*float64(i)/parts
		}
		piece := numeric.Integrate(f, breaks, 1e-13)
		total += piece
		if math.Abs(piece) < 1e-17*math.Abs(total) || b > 600 {
			break
		}
		a, b = b, 2*b
	}
	return total / math.Pi
}

func angleAt(t float64) float64 {
	if t == 0 {
		return 0
	}
	if t > 30 {
		return math.Pi
	}
	return math.Atan2(math.Pi*t, math.Exp(t)-t*dist.Ei(t))
}

// tailOfEi is t e^-t Ei(t) - 1 for large t: 1/t + 2/t^2 + ….
func tailOfEi(t float64) float64 {
	sum, term := 0.0, 1.0
	for n := 1.0; n < t; n++ {
		term *= n / t
		sum += term
		if term < 1e-17*sum {
			break
		}
	}
	return sum
}
