package effect

import (
	"math"
	"math/rand/v2"
	"slices"
	"sort"
	"testing"
)

var (
	rankX = []float64{4.1, 5.3, 6.2, 5.9, 7.0, 5.0}
	rankY = []float64{3.0, 4.4, 2.7, 4.9, 3.8}
)

func twoValues(x, y []float64) Input { return Input{First: Group{Values: x}, Second: Group{Values: y}} }

// Values computed for the project by a second implementation (methods.md M).
func TestRankValues(t *testing.T) {
	inf := analysed(t, "median-shift", "", twoValues(rankX, rankY))
	low, high := inf.Method.Limits(0.025)
	at := inf.Method.Test(0)
	if inf.Word != "wilcoxon-exact" || at.Value != 28 {
		t.Errorf("%s, U = %g", inf.Word, at.Value)
	}
	within(t, "p", 2*at.Up.P, 0.0173160, 6e-8)
	within(t, "shift", inf.Estimate, 1.9, 1e-12)
	within(t, "low", low, 0.3, 1e-12)
	within(t, "high", high, 3.2, 1e-12)

	bm := analysed(t, "superiority-probability", "", twoValues(rankX, rankY))
	within(t, "theta", bm.Estimate, 0.9333333, 6e-8)
	within(t, "se", bm.SE.V, 0.0781736, 6e-8)
	within(t, "df", bm.DF.V, 8.0398671, 6e-8)
	within(t, "p", 2*bm.Method.Test(0.5).Up.P, 0.00053587, 6e-9)
}

// Hollander & Wolfe 1973, p. 69, as in R's manual of wilcox.test.
func TestPermeability(t *testing.T) {
	row := published(t, "rank-permeability")
	table := readTable(t, "permeability.csv")
	group, value := table.head[0], table.head[1]
	inf := analysed(t, "median-shift", "", twoValues(table.where(t, value, group, "term"), table.where(t, value, group, "early")))
	low, high := inf.Method.Limits(0.025)
	at := inf.Method.Test(0)
	row.check(t, "W", at.Value)
	row.check(t, "p_greater", at.Up.P)
	row.check(t, "shift", inf.Estimate)
	row.check(t, "low", low)
	row.check(t, "high", high)
}

// Hanley & McNeil 1982, Radiology 143:29, Table I: area 0.893.
func TestRatings(t *testing.T) {
	row := published(t, "superiority-ct-ratings")
	table := readTable(t, "ct_ratings.csv")
	var x, y []float64
	for i, rating := range table.numbers(t, table.head[0]) {
		for name, into := range map[string]*[]float64{"abnormal": &x, "normal": &y} {
			for range int(table.numbers(t, name)[i]) {
				*into = append(*into, rating)
			}
		}
	}
	inf := analysed(t, "superiority-probability", "delong", twoValues(x, y))
	row.check(t, "theta", inf.Estimate)
}

// R 4.2.2, 2026-12-01: wilcox.test(d, conf.int = TRUE, exact = TRUE) on the
// sleep differences less one tied value: see rows below.
func TestSignedRankAgainstEnumeration(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for range 30 {
		n := 3 + rng.IntN(9)
		d := make([]float64, n)
		for i := range d {
			d[i] = rng.NormFloat64() + 0.3
		}
		inf := analysed(t, "paired-median-shift", "", Input{Pairs: Pairs{N: float64(n), First: d, Second: make([]float64, n)}})
		at := inf.Method.Test(0)
		ge, le, all := everyFlip(d)
		within(t, "up", at.Up.P, ge/all, 1e-12)
		within(t, "down", at.Down.P, le/all, 1e-12)
		var walsh []float64
		for i := range d {
			for j := i; j < n; j++ {
				walsh = append(walsh, (d[i]+d[j])/2)
			}
		}
		sort.Float64s(walsh)
		within(t, "median", inf.Estimate, (walsh[(len(walsh)-1)/2]+walsh[len(walsh)/2])/2, 1e-12)
	}
}

// everyFlip counts the sign patterns whose rank sum is at least, at most the
// observed one.
func everyFlip(d []float64) (ge, le, all float64) {
	abs := make([]float64, len(d))
	for i := range d {
		abs[i] = math.Abs(d[i])
	}
	r := midranks(abs)
	observed := 0.0
	for i, x := range d {
		if x > 0 {
			observed += r[i]
		}
	}
	for bits := range 1 << len(d) {
		v := 0.0
		for i := range d {
			if bits>>i&1 == 1 {
				v += r[i]
			}
		}
		if v >= observed {
			ge++
		}
		if v <= observed {
			le++
		}
		all++
	}
	return ge, le, all
}

// The conditional distribution with ties agrees with counting every choice of
// the first group.
func TestTiedRankSumAgainstEnumeration(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for range 20 {
		x, y := make([]float64, 2+rng.IntN(4)), make([]float64, 2+rng.IntN(4))
		for i := range x {
			x[i] = float64(rng.IntN(4) + 1)
		}
		for i := range y {
			y[i] = float64(rng.IntN(4))
		}
		all := append(append([]float64{}, x...), y...)
		if slices.Min(all) == slices.Max(all) {
			continue
		}
		inf := analysed(t, "median-shift", "wilcoxon-exact", twoValues(x, y))
		r := midranks(all)
		observed := 0.0
		for i := range x {
			observed += r[i]
		}
		var ge, total float64
		for bits := range 1 << len(all) {
			s, k := 0.0, 0
			for i := range all {
				if bits>>i&1 == 1 {
					s += r[i]
					k++
				}
			}
			if k == len(x) {
				total++
				if s >= observed-1e-9 {
					ge++
				}
			}
		}
		if hasTies(sorted(all)) {
			within(t, "p", inf.Method.Test(0).Up.P, ge/total, 1e-12)
		}
	}
}

// Test and interval agree, swapping mirrors, and a shift of the data shifts
// the interval, for every rank method.
func TestRankLaws(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	for round := range 20 {
		n1, n2 := 4+rng.IntN(12), 4+rng.IntN(12)
		x, y := normals(rng, n1), normals(rng, n2)
		if round%2 == 1 { // ties
			for i := range x {
				x[i] = math.Round(2 * x[i])
			}
			for i := range y {
				y[i] = math.Round(2 * y[i])
			}
		}
		d := normals(rng, n1)
		for measure, methods := range ranks {
			for method := range methods {
				in, back := twoValues(x, y), twoValues(y, x)
				in.Pairs = Pairs{N: float64(n1), First: d, Second: make([]float64, n1)}
				back.Pairs = Pairs{N: float64(n1), First: make([]float64, n1), Second: d}
				what := measure + " " + method
				a, bad := Analyse(measure, method, in)
				if bad != nil {
					continue
				}
				b := analysed(t, measure, method, back)
				for _, level := range []float64{0.025, 0.1} {
					if low, high := a.Method.Limits(level); measure == "superiority-probability" && (low == 0 || high == 1) {
						continue // clipped to the range
					}
					invertsTest(t, what, a.Method, level, 1e-6)
				}
				mirror := func(c float64) float64 { return -c }
				if measure == "superiority-probability" {
					mirror = func(c float64) float64 { return 1 - c }
				}
				within(t, what+" estimate", a.Estimate, mirror(b.Estimate), 1e-9)
				for _, c := range []float64{0.3, 0.5, 0.7} {
					within(t, what+" tail", a.Method.Test(c).Up.P, b.Method.Test(mirror(c)).Down.P, 1e-9)
				}
			}
		}
	}
}

func TestSeparatedGroups(t *testing.T) {
	inf := analysed(t, "superiority-probability", "", twoValues([]float64{5, 6, 7}, []float64{1, 2, 3}))
	hasNote(t, inf, "S206", true)
	low, high := inf.Method.Limits(0.025)
	if inf.Estimate != 1 || high != 1 || !(low > 0 && low < 1) {
		t.Errorf("%g, %g to %g", inf.Estimate, low, high)
	}
	refused(t, "S102", "median-shift", "", twoValues([]float64{1, 1}, []float64{1, 1}))
	refused(t, "S104", "median-shift", "", Input{First: Group{N: 3, Mean: 1, SD: 1}})
}

// A limit on a point because of ties never establishes.
func TestLimitOnAPoint(t *testing.T) {
	inf := analysed(t, "median-shift", "wilcoxon-exact", twoValues([]float64{1, 2, 3, 4, 5, 6.5}, []float64{0, 0.1, -1, -2, 0.2, -3}))
	low, _ := inf.Method.Limits(0.025)
	at := inf.Method.Test(low)
	if at.Below(at.Up, 0.025) {
		t.Errorf("p = %g at the limit %g itself", at.Up.P, low)
	}
	just := inf.Method.Test(low - 1e-6)
	if !just.Below(just.Up, 0.025) {
		t.Errorf("p = %g just beyond the limit", just.Up.P)
	}
}

func BenchmarkWilcoxonExact50(b *testing.B)  { benchWilcoxon(b, 50) }
func BenchmarkWilcoxonExact200(b *testing.B) { benchWilcoxon(b, 200) }

func benchWilcoxon(b *testing.B, n int) {
	rng := rand.New(rand.NewPCG(1, 1))
	in := twoValues(normals(rng, n), normals(rng, n))
	for b.Loop() {
		inf, bad := Analyse("median-shift", "wilcoxon-exact", in)
		if bad != nil {
			b.Fatal(bad)
		}
		inf.Method.Limits(0.025)
		inf.Method.Test(0)
	}
}

func BenchmarkHodgesLehmann100000(b *testing.B) {
	rng := rand.New(rand.NewPCG(1, 1))
	in := twoValues(normals(rng, 1e5), normals(rng, 1e5))
	for b.Loop() {
		if _, bad := Analyse("median-shift", "", in); bad != nil {
			b.Fatal(bad)
		}
	}
}
