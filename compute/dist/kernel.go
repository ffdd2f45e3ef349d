package dist

import "math"

// stirling is S(u) = ln Γ(u) − (u−½) ln u + u − ½ ln 2π, u > 0.
func stirling(u float64) float64 {
	if u < 10 {
		lg, _ := math.Lgamma(u)
		return lg - (u-0.5)*math.Log(u) + u - halfLn2Pi
	}
	if u > 1e17 {
		return 0
	}
	r := 1 / u
	s := r * r
	return r * (1.0/12 - s*(1.0/360-s*(1.0/1260-s*(1.0/1680-s*(1.0/1188-s*(691.0/360360-s*(1.0/156)))))))
}

// logDeviance is D(e) = ln(1+e) − e, e >= -1.
func logDeviance(e float64) float64 {
	if e < -0.4 || e > 0.4 {
		return math.Log1p(e) - e
	}
	r := e / (2 + e)
	s := r * r
	// 2r³(1/3 + r²/5 + …) − e·r; 12 terms reach 1e-17 at |e| = 0.4.
	sum := 1.0 / 29
	for k := 27.0; k >= 3; k -= 2 {
		sum = sum*s + 1/k
	}
	return 2*r*s*sum - e*r
}

// diffProducts is a·b − c·d with one rounding error at the end (Kahan, as in
// Jeannerod, Louvet and Muller 2013, from memory).
func diffProducts(a, b, c, d float64) float64 {
	w := c * d
	e := math.FMA(c, d, -w)
	f := math.FMA(a, b, -w)
	return f - e
}

// lnBetaWeight is ln[x^a y^b / B(a, b)], accurate also when a and b are large
// and the parts would cancel (Loader 2000, from memory). x, y > 0.
func lnBetaWeight(x, y, a, b float64) float64 {
	n := a + b
	d := diffProducts(x, b, y, a)
	e, g := d/a, -d/b
	// a·D(e) + b·D(g); where either is far from 0 the linear parts, which
	// cancel exactly, are left out and the logarithms taken directly.
	var body float64
	if math.Abs(e) > 0.5 || math.Abs(g) > 0.5 {
		body = a*logRatio(x, n, a, e) + b*logRatio(y, n, b, g)
	} else {
		body = a*logDeviance(e) + b*logDeviance(g)
	}
	return body + 0.5*math.Log(a/n*b) - halfLn2Pi + stirling(n) - stirling(a) - stirling(b)
}

// logRatio is ln(xn/a) = ln(1+e), by the form that keeps more digits.
func logRatio(x, n, a, e float64) float64 {
	if math.Abs(e) <= 0.5 {
		return math.Log1p(e)
	}
	return math.Log(x * (n / a))
}

// betaFraction is I_x(a,b) / [x^a y^b / B(a,b)] by the continued fraction of
// DiDonato and Morris (1992, from memory), modified Lentz; for
// x <= (a+1)/(a+b+2). About √max(a,b) steps.
func betaFraction(x, y, a, b float64) float64 {
	const tiny = 1e-300
	lead := diffProducts(a, y, b, x) + 1
	two := 1 + y // 2 − x
	f := a * lead / (a + 1)
	if f == 0 {
		f = tiny
	}
	c, d := f, 0.0
	for m := 1.0; m < 1e6; m++ {
		den := a + 2*m - 1
		t := m * (b - m) * x / den
		an := (a + m - 1) / den * (a + b + m - 1) * t * x
		bn := m + t + (a+m)*(lead+m*two)/(den+2)
		d = bn + an*d
		if d == 0 {
			d = tiny
		}
		c = bn + an/c
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
	return 1 / f
}
