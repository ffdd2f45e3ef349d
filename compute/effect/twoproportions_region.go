package effect

import (
	"math"

	"steelyard/compute/dist"
)

// smallest is where binomial probabilities are cut off at last: far below what
// a sum of size 1e-250 can notice.
const smallest = 1e-290

// binomialMass fills f with the binomial probabilities at p, from the mode
// outward by their ratios down to cut, and returns the range that is filled.
// Entries outside keep old values.
func binomialMass(f, rise []float64, p, q, cut float64) (lo, hi int) {
	n := len(rise)
	switch {
	case !(p > 0):
		f[0] = 1
		return 0, 0
	case !(q > 0):
		f[n] = 1
		return n, n
	}
	p, q = math.Min(p, 1), math.Min(q, 1)
	mode := min(n, int(float64(n+1)*p))
	top := math.Exp(dist.BinomialLnPMF(float64(mode), float64(n), p, q))
	f[mode] = top
	lo, hi = mode, mode
	for v, odds := top, p/q; hi < n; hi++ {
		if v *= rise[hi] * odds; v < cut {
			break
		}
		f[hi+1] = v
	}
	for v, odds := top, q/p; lo > 0; lo-- {
		if v *= odds / rise[lo-1]; v < cut {
			break
		}
		f[lo-1] = v
	}
	return lo, hi
}

// binomialLnMass fills f with logarithms of all binomial probabilities.
func binomialLnMass(f, rise []float64, p, q float64) {
	n := len(rise)
	if !(p > 0) || !(q > 0) {
		for k := range f {
			f[k] = math.Inf(-1)
		}
		if !(p > 0) {
			f[0] = 0
		} else {
			f[n] = 0
		}
		return
	}
	p, q = math.Min(p, 1), math.Min(q, 1)
	mode := min(n, int(float64(n+1)*p))
	f[mode] = dist.BinomialLnPMF(float64(mode), float64(n), p, q)
	odds := math.Log(p) - math.Log(q)
	for k := mode; k < n; k++ {
		f[k+1] = f[k] + math.Log(rise[k]) + odds
	}
	for k := mode; k > 0; k-- {
		f[k-1] = f[k] - math.Log(rise[k-1]) - odds
	}
}

// logarithmic is ln of the probability of the region.
func (g *region) logarithmic(r risks) float64 {
	binomialLnMass(g.f1, g.s.rise1, r.p1, r.q1)
	binomialLnMass(g.f2, g.s.rise2, r.p2, r.q2)
	sum, below, j := math.Inf(-1), math.Inf(-1), -1
	for i, b := range g.last {
		for ; j < b; j++ {
			below = lnAdd(below, g.f2[j+1])
		}
		sum = lnAdd(sum, g.f1[i]+below)
	}
	return math.Min(sum, 0)
}

// rest is the probability outside the region, as a sum of its own.
func (g *region) rest(r risks) float64 {
	lo1, hi1 := binomialMass(g.f1, g.s.rise1, r.p1, r.q1, smallest)
	lo2, hi2 := binomialMass(g.f2, g.s.rise2, r.p2, r.q2, smallest)
	sum, above, j := 0.0, 0.0, hi2+1
	for i := hi1; i >= lo1; i-- {
		for b := max(g.last[i], lo2-1); j > b+1; {
			j--
			above += g.f2[j]
		}
		sum += g.f1[i] * above
	}
	return sum
}

// tail is the probability of the region with its complement.
func (g *region) tail(r risks) dist.Tail {
	p, q := math.Min(1, g.plain(r, smallest)), math.Min(1, g.rest(r))
	t := dist.Tail{P: p, Q: q, LnP: math.Log(p), LnQ: math.Log(q)}
	if p < 1e-250 {
		t.LnP = g.logarithmic(r)
		t.P, t.Q, t.LnQ = math.Exp(t.LnP), 1, 0
	}
	if q < 1e-250 {
		t.LnP, t.P = 0, 1
	}
	return t
}

// lnAdd is ln(exp a + exp b).
func lnAdd(a, b float64) float64 {
	hi, lo := math.Max(a, b), math.Min(a, b)
	if math.IsInf(hi, -1) {
		return hi
	}
	return hi + math.Log1p(math.Exp(lo-hi))
}

// unconditionalOf makes the unconditional methods.
func unconditionalOf(k contrast, word string) analysis {
	return func(in Input) (*Inference, *Problem) {
		t, bad := twoProportionsInput(in)
		if bad = first(bad, noSystematic(word, in), unstratified(word, in),
			countsOnly(word, in, t.x1, t.n1, t.x2, t.n2)); bad != nil {
			return nil, bad
		}
		if t.n1*t.n2 > unconditionalLimit {
			return nil, problem("S105", tooManyTables, word, float64(unconditionalLimit), t.n1*t.n2)
		}
		m := unconditional{kind: k, up: newStaircase(k, t), down: newStaircase(k, t.swap())}
		inf := twoProportionsInference(in, k, word, t, m)
		inf.Costly = true
		return inf, nil
	}
}
