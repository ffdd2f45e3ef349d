package effect

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// binomialByHand is C(n, k) p^k q^(n-k) by a product.
func binomialByHand(n, k int, p float64) float64 {
	f := 1.0
	for i := range k {
		f *= float64(n-i) / float64(i+1)
	}
	return f * math.Pow(p, float64(k)) * math.Pow(1-p, float64(n-k))
}

// tail by hand of the first group's events given the margins.
func fisherByHand(n1, n2, x1, x2 int, psi float64) float64 {
	s := x1 + x2
	var above, all float64
	for x := max(0, s-n2); x <= min(n1, s); x++ {
		w := binomialByHand(n1, x, 0.5) * binomialByHand(n2, s-x, 0.5) * math.Pow(psi, float64(x))
		all += w
		if x >= x1 {
			above += w
		}
	}
	return above / all
}

// firstRisk is p1 given p2 at the effect c.
func firstRisk(k contrast, p2, c float64) float64 {
	switch k {
	case riskDifference:
		return p2 + c
	case riskRatio:
		return c * p2
	}
	return c * p2 / (1 - p2 + c*p2)
}

// supremumByHand enumerates every table and 4001 values of the second risk:
// no staircase, no recursion, no refinement.
func supremumByHand(k contrast, n1, n2, x1, x2 int, c float64) float64 {
	order := func(a, b int) float64 {
		if k == oddsRatio {
			return 1 - fisherByHand(n1, n2, a, b, c)
		}
		return k.score(table{float64(a), float64(n1), float64(b), float64(n2)}, c, 1)
	}
	seen := order(x1, x2)
	seen -= 1e-9 * math.Max(1, math.Abs(seen))
	var region [][2]int
	for a := 0; a <= n1; a++ {
		for b := 0; b <= n2; b++ {
			if order(a, b) >= seen {
				region = append(region, [2]int{a, b})
			}
		}
	}
	best := 0.0
	f1, f2 := make([]float64, n1+1), make([]float64, n2+1)
	const steps = 4000
	for i := 0; i <= steps; i++ {
		low, high := 0.0, 1.0
		switch k {
		case riskDifference:
			low, high = math.Max(0, -c), math.Min(1, 1-c)
		case riskRatio:
			high = math.Min(1, 1/c)
		}
		p2 := low + (high-low)*float64(i)/steps
		p1 := math.Min(1, math.Max(0, firstRisk(k, p2, c)))
		for a := range f1 {
			f1[a] = binomialByHand(n1, a, p1)
		}
		for b := range f2 {
			f2[b] = binomialByHand(n2, b, p2)
		}
		sum := 0.0
		for _, r := range region {
			sum += f1[r[0]] * f2[r[1]]
		}
		best = math.Max(best, sum)
	}
	return best
}

func TestUnconditionalAgainstEnumeration(t *testing.T) {
	r := rand.New(rand.NewPCG(31, 1))
	for range 60 {
		n1, n2 := 1+r.IntN(9), 1+r.IntN(9)
		x1, x2 := r.IntN(n1+1), r.IntN(n2+1)
		in := two(float64(x1), float64(n1), float64(x2), float64(n2))
		names := map[contrast][2]string{riskDifference: {"risk-difference", "unconditional"},
			riskRatio: {"risk-ratio", "unconditional"}, oddsRatio: {"odds-ratio", "boschloo"}}
		for _, k := range []contrast{riskDifference, riskRatio, oddsRatio} {
			words := names[k]
			c := math.Exp(r.NormFloat64())
			if k == riskDifference {
				c = 1.6*r.Float64() - 0.8
			}
			if r.IntN(3) == 0 {
				c = k.null()
			}
			at := analysed(t, words[0], words[1], in).Method.Test(c)
			want := supremumByHand(k, n1, n2, x1, x2, c)
			what := fmt.Sprintf("%s %d/%d %d/%d at %v", words[0], x1, n1, x2, n2, c)
			sane(t, what, at)
			// The grid by hand may miss the peak, never exceed it.
			if got := at.Up.P; got < want*(1-1e-9) || got > want*(1+2e-5)+1e-15 {
				t.Errorf("%s: p-up %.12g, by enumeration %.12g", what, got, want)
			}
		}
	}
}

// TestStaircaseHolds checks on random designs what the walk assumes: with a
// table, the region holds those with one event more in the first group or one
// fewer in the second (Barnard's condition of convexity).
func TestStaircaseHolds(t *testing.T) {
	r := rand.New(rand.NewPCG(32, 1))
	for range 120 {
		n1, n2 := 1+r.IntN(30), 1+r.IntN(30)
		for _, k := range []contrast{riskDifference, riskRatio, oddsRatio} {
			c := math.Exp(1.5 * r.NormFloat64())
			if k == riskDifference {
				c = 2*r.Float64() - 1
			}
			s := newStaircase(k, table{n1: float64(n1), n2: float64(n2)})
			for a := range n1 + 1 {
				for b := range n2 + 1 {
					here := s.extreme(float64(a), float64(b), c)
					slack := 1e-10 * math.Max(1, math.Abs(here))
					if a < n1 && s.extreme(float64(a+1), float64(b), c) < here-slack {
						t.Errorf("%v n %d %d c %v: (%d, %d) is more extreme than one event more in the first group", k, n1, n2, c, a, b)
					}
					if b > 0 && s.extreme(float64(a), float64(b-1), c) < here-slack {
						t.Errorf("%v n %d %d c %v: (%d, %d) is more extreme than one event fewer in the second group", k, n1, n2, c, a, b)
					}
				}
			}
		}
		if t.Failed() {
			return
		}
	}
}

// TestStaircaseWalk compares the boundary with looking at every table, and sees
// that it asks for few, also where one group is much the smaller.
func TestStaircaseWalk(t *testing.T) {
	for _, tc := range []struct {
		n1, n2, most int
		slope, shift float64
	}{
		{40, 25, 67, 1.7, -3}, {40, 25, 67, 0.2, 9}, {40, 25, 67, 5, -400}, {40, 25, 67, 0, 100},
		{4000, 3, 60, 0.001, -0.5}, {4000, 3, 60, 0, 2}, {4000, 3, 60, 1, -5000}, {3, 4000, 60, 900, 20}, {3, 4000, 60, 0, -1},
		{1, 1, 4, 1, -1}, {0, 5, 7, 1, 2}, {5, 0, 7, 1, -2},
	} {
		asked := 0
		in := func(x1, x2 float64) bool { asked++; return x2 <= tc.slope*x1+tc.shift }
		last := Staircase(tc.n1, tc.n2, in)
		if asked > tc.most {
			t.Errorf("%+v: asked for %d tables", tc, asked)
		}
		for x1, b := range last {
			for x2 := range tc.n2 + 1 {
				if in(float64(x1), float64(x2)) != (x2 <= b) {
					t.Fatalf("%+v: last at x1 = %d is %d", tc, x1, b)
				}
			}
		}
	}
}

// TestUnconditionalFarTail: all events in one group and none in the other are
// the only table as extreme, with probability (pq)^n at a common risk p, at
// most 4^-n.
func TestUnconditionalFarTail(t *testing.T) {
	for _, n := range []float64{5, 50, 600, 1500} {
		for measure, words := range map[string]string{"risk-difference": "unconditional", "risk-ratio": "unconditional", "odds-ratio": "boschloo"} {
			null := 1.0
			if measure == "risk-difference" {
				null = 0
			}
			at := analysed(t, measure, words, two(n, n, 0, n)).Method.Test(null)
			near(t, fmt.Sprintf("%s n %v", measure, n), at.Up.LnP, -n*math.Log(4), 1e-11)
			sane(t, measure, at)
			near(t, "p-down", at.Down.P, 1, 1e-12)
		}
	}
}

func TestUnconditionalLaws(t *testing.T) {
	r := rand.New(rand.NewPCG(33, 1))
	for range 8 {
		in, _ := randomCase(r, "risk-difference", 40)
		for _, m := range [][2]string{{"risk-difference", "unconditional"}, {"risk-ratio", "unconditional"}, {"odds-ratio", "boschloo"}} {
			measure, word := m[0], m[1]
			c := countCase{name: fmt.Sprintf("%s %+v %+v", measure, in.First, in.Second), measure: measure, method: word, in: in,
				nulls: []float64{1, math.Exp(r.NormFloat64())}}
			if measure == "risk-difference" {
				c.nulls = []float64{0, math.Tanh(r.NormFloat64())}
			}
			other, null := mirrored(c)
			compareMirror(t, c, other, null)
			m := analysed(t, measure, word, in).Method
			for _, a := range []float64{0.025, 0.1} {
				low, high := m.Limits(a)
				// The p-value may jump at a limit: it must change sides there.
				nudge := func(x, by float64) float64 {
					if measure == "risk-difference" {
						return math.Tanh(math.Atanh(x) + by)
					}
					return x * math.Exp(by)
				}
				if low > -1 && low > 0 || measure == "risk-difference" && low > -1 {
					if out, in := m.Test(nudge(low, -1e-6)).Up.P, m.Test(nudge(low, 1e-6)).Up.P; out > a || in <= a {
						t.Errorf("%s: lower limit %v: p-up %v outside, %v inside (a %v)", c.name, low, out, in, a)
					}
				}
				if high < 1 || measure != "risk-difference" && !math.IsInf(high, 1) {
					if out, in := m.Test(nudge(high, 1e-6)).Down.P, m.Test(nudge(high, -1e-6)).Down.P; out > a || in <= a {
						t.Errorf("%s: upper limit %v: p-down %v outside, %v inside (a %v)", c.name, high, out, in, a)
					}
				}
			}
		}
	}
}
