package effect

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// TestPermutationBruteForce goes through all relabellings of the shifted
// data, with ties among the values.
func TestPermutationBruteForce(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for range 30 {
		n1, n2 := 1+r.IntN(5), 1+r.IntN(5)
		if n1+n2 < 3 {
			continue
		}
		x, y := make([]float64, n1), make([]float64, n2)
		for i := range x {
			x[i] = float64(r.IntN(8))
		}
		for i := range y {
			y[i] = float64(r.IntN(8))
		}
		in := Input{First: Group{Values: x}, Second: Group{Values: y}}
		inf, bad := Analyse("mean-difference", "permutation", in)
		if bad != nil {
			continue // all values alike
		}
		for _, c := range []float64{-2, -0.5, 0, 1, 1.25, 3} {
			up, down, m := relabelled(x, y, c)
			at := inf.Method.Test(c)
			within(t, fmt.Sprintf("p-up at %v of %v %v", c, x, y), at.Up.P, up/m, 1e-15)
			within(t, fmt.Sprintf("p-down at %v of %v %v", c, x, y), at.Down.P, down/m, 1e-15)
		}
	}
}

// relabelled counts the relabellings of x - c and y whose difference of means
// is at least, and at most, the observed one.
func relabelled(x, y []float64, c float64) (up, down, all float64) {
	z := slices.Clone(y)
	observed := 0.0
	for _, v := range x {
		z = append(z, v-c)
		observed += (v - c) / float64(len(x))
	}
	total := 0.0
	for _, v := range z {
		total += v
	}
	for _, v := range y {
		observed -= v / float64(len(y))
	}
	for set := range 1 << len(z) {
		count, sum := 0, 0.0
		for i, v := range z {
			if set>>i&1 == 1 {
				count++
				sum += v
			}
		}
		if count != len(x) {
			continue
		}
		d := sum/float64(len(x)) - (total-sum)/float64(len(y))
		all++
		if d >= observed-1e-9 {
			up++
		}
		if d <= observed+1e-9 {
			down++
		}
	}
	return up, down, all
}

// TestRandomPermutations: beyond the exact size the drawn selections give
// nearly the t test's p for normal data, the same bits for the same seed, and
// a note.
func TestRandomPermutations(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	in := Input{First: Group{Values: draws(r, 40, 1, 1)}, Second: Group{Values: draws(r, 30, 0.6, 1)}, Seed: 5, A: 0.025}
	for _, c := range []struct {
		measure, plain string
		in             Input
	}{
		{"mean-difference", "pooled-variance", in},
		{"mean-difference", "pooled-variance", Input{First: in.Second, Second: in.First, Seed: 5, A: 0.025}},
		{"mean", "t", Input{Sample: in.First, Seed: 5, A: 0.025}},
	} {
		inf, plain := analysed(t, c.measure, "permutation", c.in), analysed(t, c.measure, c.plain, c.in)
		hasNote(t, inf, "S205", true)
		for _, q := range []float64{0.4, 0.7} {
			p := plain.Method.Test(q).Up.P
			within(t, c.measure, inf.Method.Test(q).Up.P, p, 0.005+5*math.Sqrt(p/1e5))
		}
		again := analysed(t, c.measure, "permutation", c.in)
		if inf.Method.Test(0.3) != again.Method.Test(0.3) {
			t.Errorf("%s: the same seed gives other selections", c.measure)
		}
		other := c.in
		other.Seed = 6
		if inf.Method.(*Permutation).nulls[50000] == analysed(t, c.measure, "permutation", other).Method.(*Permutation).nulls[50000] {
			t.Errorf("%s: another seed gives the same selections", c.measure)
		}
	}
}

// TestTooFewSelections: with 6 selections no limit exists at 0.025.
func TestTooFewSelections(t *testing.T) {
	inf := analysed(t, "mean-difference", "permutation", Input{First: Group{Values: []float64{1, 2}}, Second: Group{Values: []float64{5, 7}}, A: 0.025})
	low, high := inf.Method.Limits(0.025)
	if !math.IsInf(low, -1) || !math.IsInf(high, 1) {
		t.Errorf("limits %v, %v", low, high)
	}
	hasNote(t, inf, "S205", true)
	near(t, "smallest p", inf.Method.Test(100).Down.P, 1./6, 1e-15)
}

// TestDrawnSelections: on data small enough for every selection, the drawn
// ones give the same p-values within five Monte Carlo errors, whichever group
// is smaller.
func TestDrawnSelections(t *testing.T) {
	x, y := []float64{4.1, 5.3, 6.2, 5.9}, []float64{3.0, 4.4, 2.7, 4.9, 3.8, 5.1}
	agree := func(what string, exact, drawn *Permutation) {
		if m := drawn.selections(); m != randomSelections+1 {
			t.Errorf("%s: %v selections", what, m)
		}
		for c := -1.0; c < 8; c += 0.37 {
			e, d := exact.Test(c), drawn.Test(c)
			sane(t, what, d)
			within(t, what+" p-up", d.Up.P, e.Up.P, 5*math.Sqrt(e.Up.P*e.Up.Q/1e5)+1e-5)
			within(t, what+" p-down", d.Down.P, e.Down.P, 5*math.Sqrt(e.Down.P*e.Down.Q/1e5)+1e-5)
		}
	}
	perm := func(nulls []float64, centre float64) *Permutation { return newPermutation(nulls, centre, 5, 7, 0) }
	agree("first smaller", perm(exchangeNulls(x, y, 4), 0), perm(randomExchangeNulls(x, y, 4, 3), 0))
	agree("second smaller", perm(exchangeNulls(y, x, 4), 0), perm(randomExchangeNulls(y, x, 4, 3), 0))
	agree("signs", perm(subsetMeans(y, 3), 3), perm(randomSubsetMeans(y, 3, 3), 3))
}
