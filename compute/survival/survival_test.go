package survival

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"
)

type reporter interface {
	Helper()
	Errorf(string, ...any)
}

// near compares within half a unit of the last printed decimal, or absolutely.
func near(t reporter, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.10g, want %.10g", what, got, want)
	}
}

type counter int

func (c *counter) Helper()               {}
func (c *counter) Errorf(string, ...any) { *c++ }

func TestNearFails(t *testing.T) {
	var c counter
	near(&c, "x", 1, 1.2, 0.1)
	near(&c, "x", math.NaN(), 1, 0.1)
	if c != 2 {
		t.Fatal("near did not fail")
	}
}

// small: the example of methods.md M, computed by a second implementation.
func small() Input {
	return Input{
		Time:  []float64{2, 3, 3, 5, 6, 8, 1, 2, 2, 4, 5, 7},
		Event: []float64{1, 1, 0, 1, 0, 1, 1, 1, 1, 1, 1, 0},
		Group: []uint8{0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 1, 1},
	}
}

func TestSmall(t *testing.T) {
	want := map[string][2]float64{
		"wald":             {0.1070290, 1.8970422},
		"likelihood-ratio": {0.0919967, 1.8475882},
		"score":            {0.1183356, 1.7176259},
	}
	for method, limits := range want {
		inf, problem := HazardRatio(method, small())
		if problem != nil {
			t.Fatal(problem)
		}
		near(t, "beta", math.Log(inf.Estimate), -0.7971796, 6e-8)
		near(t, "se", inf.SE.V, 0.7334194, 6e-8)
		low, high := inf.Method.Limits(0.025)
		near(t, method+" low", low, limits[0], 6e-8)
		near(t, method+" high", high, limits[1], 6e-8)
		// The limits are where the test just fails.
		near(t, "p at low", inf.Method.Test(low).Up.P, 0.025, 1e-9)
		near(t, "p at high", inf.Method.Test(high).Down.P, 0.025, 1e-9)
	}
	z, _ := LogRank(small())
	near(t, "log-rank", z, -1.1243200, 6e-8)
	in := small()
	in.Horizon = 6
	inf, problem := RestrictedMeanDifference(in)
	if problem != nil {
		t.Fatal(problem)
	}
	near(t, "difference", inf.Estimate, 1.2777778, 6e-8)
	// By hand: the variances are 0.418209877 and 0.537037037.
	near(t, "se", inf.SE.V, math.Sqrt(0.955246914), 1e-9)
}

func load(t *testing.T, name, time, event, group, first string) Input {
	t.Helper()
	f, err := os.Open(filepath.Join("../../testdata/reference/data", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	col := map[string]int{}
	for i, h := range rows[0] {
		col[h] = i
	}
	for _, c := range []string{time, event, group} {
		if _, ok := col[c]; !ok {
			t.Fatalf("%s has no column %s: %v", name, c, rows[0])
		}
	}
	var in Input
	for _, r := range rows[1:] {
		x, _ := strconv.ParseFloat(r[col[time]], 64)
		e, _ := strconv.ParseFloat(r[col[event]], 64)
		g := uint8(1)
		if r[col[group]] == first {
			g = 0
		}
		in.Time, in.Event, in.Group = append(in.Time, x), append(in.Event, e), append(in.Group, g)
	}
	return in
}

// Swapping the groups inverts the ratio; the end of the range is reached when
// one group has no events.
func TestLaws(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 60 {
		in := random(rng, 6+rng.IntN(60))
		for _, method := range []string{"wald", "likelihood-ratio", "score"} {
			a, pa := HazardRatio(method, in)
			swapped := in
			swapped.Group = nil
			for _, g := range in.Group {
				swapped.Group = append(swapped.Group, 1-g)
			}
			b, pb := HazardRatio(method, swapped)
			if (pa == nil) != (pb == nil) {
				t.Fatal("swapping the groups changed what can be computed")
			}
			if pa != nil || math.IsInf(a.Estimate, 0) || a.Estimate == 0 {
				continue
			}
			near(t, "ratio", a.Estimate*b.Estimate, 1, 1e-9)
			for _, c := range []float64{0.5, 1, 3} {
				x, y := a.Method.Test(c), b.Method.Test(1/c)
				near(t, "tail", x.Up.P, y.Down.P, 1e-10)
			}
			if lo, hi := a.Method.Limits(0.05); !(lo <= a.Estimate && a.Estimate <= hi) {
				t.Fatalf("%s: %g not in %g to %g", method, a.Estimate, lo, hi)
			}
		}
	}
}

func random(rng *rand.Rand, n int) Input {
	var in Input
	for i := range n {
		in.Time = append(in.Time, math.Ceil(rng.ExpFloat64()*6)/2)
		in.Event = append(in.Event, float64(rng.IntN(4)&1|rng.IntN(2)))
		in.Group = append(in.Group, uint8(i%2))
	}
	return in
}

func TestOneGroupWithoutEvents(t *testing.T) {
	in := Input{Time: []float64{5, 6, 7, 8, 1, 2, 3, 4}, Event: []float64{0, 0, 0, 0, 1, 1, 1, 1}, Group: []uint8{0, 0, 0, 0, 1, 1, 1, 1}}
	inf, problem := HazardRatio("wald", in)
	if problem != nil {
		t.Fatal(problem)
	}
	if inf.Estimate != 0 || inf.Word != "likelihood-ratio" {
		t.Fatalf("estimate %g by %s", inf.Estimate, inf.Word)
	}
	low, high := inf.Method.Limits(0.025)
	if low != 0 || math.IsInf(high, 0) || !(high > 0) {
		t.Fatalf("limits %g, %g", low, high)
	}
	near(t, "p at the limit", inf.Method.Test(high).Down.P, 0.025, 1e-9)
	if _, problem := HazardRatio("wald", Input{Time: []float64{1, 2}, Event: []float64{0, 0}, Group: []uint8{0, 1}}); problem == nil || problem.Code != "S101" {
		t.Fatal("no events gave", problem)
	}
}

// The horizon must lie within the follow-up of both groups.
func TestHorizon(t *testing.T) {
	in := small()
	in.Horizon = 7.5
	if _, problem := RestrictedMeanDifference(in); problem == nil || problem.Code != "S106" {
		t.Fatal(problem)
	}
}

func big(n int) Input {
	rng := rand.New(rand.NewPCG(7, 8))
	var in Input
	for i := range n {
		in.Time = append(in.Time, rng.ExpFloat64())
		in.Event = append(in.Event, float64(rng.IntN(2)))
		in.Group = append(in.Group, uint8(i%2))
	}
	return in
}

func BenchmarkCoxMillion(b *testing.B) {
	in := big(1e6)
	for b.Loop() {
		if _, p := HazardRatio("wald", in); p != nil {
			b.Fatal(p)
		}
	}
}

func BenchmarkLogRankMillion(b *testing.B) {
	in := big(1e6)
	for b.Loop() {
		LogRank(in)
	}
}
