package effect

import (
	"fmt"
	"math"
	"testing"
)

// Far tails whose logarithm is known in closed form.

func lnChoose(n, k float64) float64 {
	a, _ := math.Lgamma(n + 1)
	b, _ := math.Lgamma(k + 1)
	c, _ := math.Lgamma(n - k + 1)
	return a - b - c
}

func TestCountFarTails(t *testing.T) {
	zTail := func(z float64) float64 { // ln of the normal tail, leading terms (Mills; error of order 1/z^8)
		return -z*z/2 - math.Log(z*math.Sqrt(2*math.Pi)) + math.Log1p(-1/(z*z)+3/(z*z*z*z)-15/math.Pow(z, 6))
	}
	for _, tc := range []struct {
		measure, method string
		in              Input
		null            float64
		up              bool
		ln              float64
	}{
		{"proportion", "exact", one(0, 1e6), 0.5, false, -1e6 * math.Ln2},
		{"proportion", "exact", one(1e6, 1e6), 0.01, true, 1e6 * math.Log(0.01)},
		{"proportion", "mid-p", one(0, 5000), 0.5, false, -5001 * math.Ln2},
		{"proportion", "wilson", one(9e5, 1e6), 0.5, true, zTail(800)},
		{"rate", "exact", onePer(0, 10), 100, false, -1000},
		{"rate", "mid-p", onePer(0, 10), 100, false, -1000 - math.Ln2},
		{"rate", "score", onePer(1000, 1), 4000, false, zTail(3000 / math.Sqrt(4000))},
		{"rate-ratio", "exact", twoExposed(2000, 1, 0, 1), 1, true, -2000 * math.Ln2},
		{"rate-ratio", "mid-p", twoExposed(2000, 1, 0, 1), 1, true, -2001 * math.Ln2},
		{"odds-ratio", "exact", two(1000, 1000, 0, 1000), 1, true, -lnChoose(2000, 1000)},
		{"odds-ratio", "mid-p", two(1000, 1000, 0, 1000), 1, true, -lnChoose(2000, 1000) - math.Ln2},
		{"paired-risk-difference", "exact", paired(0, 3000, 0, 0), 0, true, -3000 * math.Ln2},
		{"paired-risk-difference", "tango", paired(0, 3000, 0, 0), 0, true, zTail(math.Sqrt(3000))},
		// At no effect the score of all against none is √(N - 1).
		{"risk-difference", "score", two(1000, 1000, 0, 1000), 0, true, zTail(math.Sqrt(1999))},
		{"risk-ratio", "score", two(1000, 1000, 0, 1000), 1, true, zTail(math.Sqrt(1999))},
		{"odds-ratio", "score", two(1000, 1000, 0, 1000), 1, true, zTail(math.Sqrt(1999))},
	} {
		at := analysed(t, tc.measure, tc.method, tc.in).Method.Test(tc.null)
		what := fmt.Sprintf("%s %s at %v", tc.measure, tc.method, tc.null)
		sane(t, what, at)
		got := at.Down.LnP
		if tc.up {
			got = at.Up.LnP
		}
		near(t, what, got, tc.ln, 1e-11)
	}
}

// TestBoschlooIsNotAboveFisher: ordering by the conditional p, the
// unconditional one cannot exceed it.
func TestBoschlooIsNotAboveFisher(t *testing.T) {
	for x1 := range 9 {
		for x2 := range 12 {
			in := two(float64(x1), 8, float64(x2), 11)
			b, f := analysed(t, "odds-ratio", "boschloo", in).Method, analysed(t, "odds-ratio", "exact", in).Method
			for _, c := range []float64{0.4, 1, 3} {
				p, q := b.Test(c), f.Test(c)
				if p.Up.P > q.Up.P*(1+1e-9) || p.Down.P > q.Down.P*(1+1e-9) {
					t.Errorf("%d/8 %d/11 at %v: %v, %v against %v, %v", x1, x2, c, p.Up.P, p.Down.P, q.Up.P, q.Down.P)
				}
			}
		}
	}
}
