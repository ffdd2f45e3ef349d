package numeric

import "math"

// maxHalvings limits how often one panel of Integrate is halved, and
// maxPanels how many are halved in all: an integrand with noise above the
// wanted accuracy would otherwise be halved to the end everywhere.
const (
	maxHalvings = 14
	maxPanels   = 4096
)

// Integrate adds 20-point Gauss–Legendre panels between the breakpoints (in
// increasing order, finite; repeated ones are skipped), each halved until the
// change is below rel of the total, at most 14 times and 4096 panels in all.
// f must be finite inside the panels; it is never called at their ends. Fewer
// than two breakpoints give 0.
func Integrate(f func(float64) float64, breaks []float64, rel float64) float64 {
	var rough Acc
	for i := 1; i < len(breaks); i++ {
		if breaks[i] > breaks[i-1] {
			rough.Add(math.Abs(panel(f, breaks[i-1], breaks[i])))
		}
	}
	// total starts as the rough sum, so that panels far from the mass are
	// not refined; it is then raised when refining finds more.
	w := adaptive{f: f, rel: rel, total: rough.Value()}
	for i := 1; i < len(breaks); i++ {
		if a, b := breaks[i-1], breaks[i]; b > a {
			w.refine(a, b, panel(f, a, b), maxHalvings)
		}
	}
	return w.sum.Value()
}

type adaptive struct {
	f     func(float64) float64
	rel   float64
	total float64
	sum   Acc
	used  int
}

func (w *adaptive) refine(a, b, whole float64, left int) {
	m := a + (b-a)/2
	w.used++
	p, q := panel(w.f, a, m), panel(w.f, m, b)
	if s := math.Abs(p) + math.Abs(q); s > w.total {
		w.total = s
	}
	if math.Abs(p+q-whole) <= w.rel*w.total || left <= 1 || w.used > maxPanels || m <= a || m >= b {
		w.sum.Add(p)
		w.sum.Add(q)
		return
	}
	w.refine(a, m, p, left-1)
	w.refine(m, b, q, left-1)
}

// panel is one 20-point Gauss–Legendre sum over [a, b].
func panel(f func(float64) float64, a, b float64) float64 {
	h := b/2 - a/2
	m := a + h
	s := 0.0
	for i := len(legendre20) - 1; i >= 0; i-- {
		d := h * legendre20[i][0]
		s += legendre20[i][1] * (f(m-d) + f(m+d))
	}
	return s * h
}

// Trapezoid is the trapezoidal rule for a smooth integrand that dies out on
// both sides, where it converges faster than any power of the step. lattice
// adds the integrand at first, first+step, first−step, first+2·step, … until
// the terms no longer matter. Four interleaved lattices of step h tell the
// amplitude of the error's leading wave apart from its phase; once it is below
// 1e-4 of the sum, the four together, with step h/4, are good to about its
// fourth power. Otherwise h is halved, at most halvings times; then ok is
// false and the integral is the best so far.
func Trapezoid(lattice func(first, step float64) float64, h float64, halvings int) (integral float64, ok bool) {
	s := [4]float64{lattice(0, h), lattice(h/4, h), lattice(h/2, h), lattice(3*h/4, h)}
	for try := 0; ; try++ {
		total := s[0] + s[1] + s[2] + s[3]
		wave := math.Hypot(s[0]-s[2], s[1]-s[3])
		if wave <= 1e-4*math.Abs(total) {
			return total * h / 4, true
		}
		if try == halvings {
			return total * h / 4, false
		}
		s = [4]float64{s[0] + s[2], lattice(h/8, h/2), s[1] + s[3], lattice(3*h/8, h/2)}
		h /= 2
	}
}

// Node is one point of a quadrature rule with its weight.
type Node struct{ X, W float64 }

// Legendre20 returns the 20-point Gauss–Legendre rule on [-1, 1], in
// increasing order; the weights add to 2.
func Legendre20() []Node { return mirrored(legendre20[:]) }

// Legendre64 returns the 64-point Gauss–Legendre rule on [-1, 1], in
// increasing order; the weights add to 2.
func Legendre64() []Node { return mirrored(legendre64[:]) }

// Hermite32 returns the 32-point Gauss–Hermite rule for a standard normal
// variable, in increasing order: the weights add to 1 and Σ W·f(X)
// approximates the mean of f(Z).
func Hermite32() []Node { return mirrored(hermite32[:]) }

func mirrored(half [][2]float64) []Node {
	n := len(half)
	out := make([]Node, 2*n)
	for i, xw := range half {
		out[n+i] = Node{xw[0], xw[1]}
		out[n-1-i] = Node{-xw[0], xw[1]}
	}
	return out
}
