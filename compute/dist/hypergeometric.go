package dist

import "math"

// Hypergeometric is Fisher's noncentral hypergeometric distribution of x, the
// first group's events, given n1, n2, s = all events and the odds ratio psi:
// weight C(n1,x)·C(n2,s−x)·psi^x on max(0, s−n2) … min(n1, s). N1, N2 and S
// are whole numbers, 0 <= S <= N1+N2; psi >= 0, where 0 and +Inf put all mass
// on an end of the support. Anything else panics.
type Hypergeometric struct{ N1, N2, S, Psi float64 }

// Upper is P(X >= x); x is rounded up. About √n terms are added.
func (h Hypergeometric) Upper(x float64) Tail {
	needNumber(x)
	x = math.Ceil(x)
	lo, hi := h.support()
	switch {
	case x <= lo:
		return sure
	case x > hi:
		return impossible
	}
	above, below := h.split(x)
	return tailOfRatio(above, below)
}

// Lower is P(X <= x); x is rounded down.
func (h Hypergeometric) Lower(x float64) Tail {
	needNumber(x)
	return h.Upper(math.Floor(x) + 1).Complement()
}

// Point is P(X = x), 0 outside the support.
func (h Hypergeometric) Point(x float64) float64 { return math.Exp(h.LnPoint(x)) }

// LnPoint is ln P(X = x), -Inf outside the support.
func (h Hypergeometric) LnPoint(x float64) float64 {
	needNumber(x)
	lo, hi := h.support()
	if x < lo || x > hi || x != math.Floor(x) {
		return math.Inf(-1)
	}
	m := h.mode()
	up, down := h.sums(m, math.Inf(-1))
	return min(h.lnWeight(x, m)-math.Log(up+down), 0)
}

// Mean is E(X).
func (h Hypergeometric) Mean() float64 {
	m, _ := h.moments()
	return m
}

// Variance is the variance of X.
func (h Hypergeometric) Variance() float64 {
	_, v := h.moments()
	return v
}

func (h Hypergeometric) moments() (mean, variance float64) {
	lo, hi := h.support()
	m := h.mode()
	var s0, s1, s2 float64
	w := 1.0
	for x := m; ; x++ {
		d := x - m
		s0 += w
		s1 += w * d
		s2 += w * d * d
		if x >= hi || w*d*d < 1e-19*s2 && w < 1e-19*s0 {
			break
		}
		w *= h.ratio(x)
	}
	w = 1.0
	for x := m; x > lo; {
		w /= h.ratio(x - 1)
		x--
		d := x - m
		s0 += w
		s1 += w * d
		s2 += w * d * d
		if w*d*d < 1e-19*s2 && w < 1e-19*s0 {
			break
		}
	}
	e := s1 / s0
	return m + e, max(s2/s0-e*e, 0)
}

func (h Hypergeometric) support() (lo, hi float64) {
	ok := h.N1 >= 0 && h.N2 >= 0 && h.S >= 0 && h.S <= h.N1+h.N2 && h.Psi >= 0 &&
		!math.IsInf(h.N1+h.N2, 1)
	if !ok {
		panic("dist: hypergeometric parameters outside their range")
	}
	lo, hi = max(0, h.S-h.N2), min(h.N1, h.S)
	if h.Psi == 0 {
		return lo, lo
	}
	if math.IsInf(h.Psi, 1) {
		return hi, hi
	}
	return lo, hi
}

// ratio is weight(x+1)/weight(x).
func (h Hypergeometric) ratio(x float64) float64 {
	return (h.N1 - x) * (h.S - x) / ((x + 1) * (h.N2 - h.S + x + 1)) * h.Psi
}

// mode is where the weight is largest, the smallest such x.
func (h Hypergeometric) mode() float64 {
	lo, hi := h.support()
	if lo == hi {
		return lo
	}
	// Root of (n1−x)(s−x)ψ = (x+1)(n2−s+x+1), divided by max(1, ψ).
	k := max(1, h.Psi)
	p, q := h.Psi/k, 1/k
	gap := h.N2 - h.S
	a := p - q
	b := p*(h.N1+h.S) + q*(gap+2)
	c := p*h.N1*h.S - q*(gap+1)
	x := math.Ceil(2 * c / (b + math.Sqrt(max(b*b-4*a*c, 0))))
	x = min(max(x, lo), hi)
	for x < hi && h.ratio(x) > 1 {
		x++
	}
	for x > lo && h.ratio(x-1) <= 1 {
		x--
	}
	return x
}

// sums adds the weights, that of the mode m being 1, at and above cut and
// below it, as far as they matter to the whole.
func (h Hypergeometric) sums(m, cut float64) (above, below float64) {
	lo, hi := h.support()
	w, s := 1.0, 0.0
	for x := m; ; x++ {
		s += w
		if x >= cut {
			above += w
		} else {
			below += w
		}
		if x >= hi || w < 1e-19*s {
			break
		}
		w *= h.ratio(x)
	}
	w = 1.0
	for x := m; x > lo; {
		w /= h.ratio(x - 1)
		x--
		s += w
		if x >= cut {
			above += w
		} else {
			below += w
		}
		if w < 1e-19*s {
			break
		}
	}
	return above, below
}

// split is ln Σ_{j>=x} and ln Σ_{j<x} of the weights on a common scale, for x
// inside the support.
func (h Hypergeometric) split(x float64) (above, below float64) {
	m := h.mode()
	up, down := h.sums(m, x)
	lo, hi := h.support()
	if x > m { // the upper tail, again from its own largest term
		w, s := 1.0, 0.0
		for j := x; ; j++ {
			s += w
			if j >= hi || w < 1e-19*s {
				break
			}
			w *= h.ratio(j)
		}
		return h.lnWeight(x, m) + math.Log(s), math.Log(down)
	}
	w, s := 1.0, 0.0
	for j := x - 1; ; j-- {
		s += w
		if j <= lo || w < 1e-19*s {
			break
		}
		w /= h.ratio(j - 1)
	}
	return math.Log(up), h.lnWeight(x-1, m) + math.Log(s)
}

// lnWeight is ln[weight(x)/weight(m)].
func (h Hypergeometric) lnWeight(x, m float64) float64 {
	// With p1, p2 of odds ratio ψ the weight is proportional to the product
	// of two binomial probabilities; o1 puts the mean near m. Few steps, and
	// odds too extreme for probabilities, go by the ratios.
	o1 := (m + 0.5) / (h.N1 - m + 0.5)
	o2 := o1 / h.Psi
	if math.Abs(x-m) <= 64 || o2 < 1e-100 || o2 > 1e100 {
		return h.lnRatios(x, m)
	}
	p1, q1 := o1/(1+o1), 1/(1+o1)
	p2, q2 := o2/(1+o2), 1/(1+o2)
	return BinomialLnPMF(x, h.N1, p1, q1) - BinomialLnPMF(m, h.N1, p1, q1) +
		BinomialLnPMF(h.S-x, h.N2, p2, q2) - BinomialLnPMF(h.S-m, h.N2, p2, q2)
}

// lnRatios is lnWeight as a product of ratios, one a step.
func (h Hypergeometric) lnRatios(x, m float64) float64 {
	w := 0.0
	p := 1.0
	for j := min(x, m); j < max(x, m); j++ {
		r := h.ratio(j)
		if r < 1e-50 || r > 1e50 {
			w += math.Log(r)
			continue
		}
		p *= r
		if p < 1e-250 || p > 1e250 {
			w += math.Log(p)
			p = 1
		}
	}
	w += math.Log(p)
	if x < m {
		return -w
	}
	return w
}

// tailOfRatio is the Tail of e^a/(e^a + e^b).
func tailOfRatio(a, b float64) Tail {
	d := a - b
	switch {
	case d > 0:
		return tailOfRatio(b, a).Complement()
	case math.IsInf(d, -1):
		return impossible
	}
	e := math.Exp(d)
	l := math.Log1p(e)
	return Tail{P: e / (1 + e), Q: 1 / (1 + e), LnP: d - l, LnQ: -l}
}
