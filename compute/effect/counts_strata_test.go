package effect

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

var stratifiedMeasures = []string{"risk-difference", "risk-ratio", "odds-ratio", "rate-ratio", "rate-difference"}

// TestOneStratumIsTheTable: with one stratum every common ratio is the sample
// ratio and its variance the ordinary one; the difference of rates too.
func TestOneStratumIsTheTable(t *testing.T) {
	s := Stratum{12, 42, 6, 39}
	for _, tc := range []struct {
		measure     string
		estimate, v float64
	}{
		{"risk-ratio", 12.0 / 42 / (6.0 / 39), 1.0/12 - 1.0/42 + 1.0/6 - 1.0/39},
		{"odds-ratio", 12.0 * 33 / (6 * 30), 1.0/12 + 1.0/30 + 1.0/6 + 1.0/33},
		{"rate-ratio", 12.0 / 42 / (6.0 / 39), 1.0/12 + 1.0/6},
		{"rate-difference", 12.0/42 - 6.0/39, 12.0/(42*42) + 6.0/(39*39)},
	} {
		got, ok := MantelHaenszel(tc.measure, []Stratum{s})
		if !ok || !got.OK {
			t.Fatalf("%s: %+v", tc.measure, got)
		}
		near(t, tc.measure, got.Estimate, tc.estimate, 1e-13)
		near(t, tc.measure+" variance", got.V, tc.v, 1e-13)
	}
	// The variance of Sato for the risk difference is another estimator; it
	// approaches p1q1/n1 + p2q2/n2.
	big := Stratum{120000, 420000, 60000, 390000}
	got, _ := MantelHaenszel("risk-difference", []Stratum{big})
	v, _ := riskDifference.variance(table{big.X1, big.N1, big.X2, big.N2})
	near(t, "risk-difference variance", got.V, v, 0.02)
	if _, ok := MantelHaenszel("mean", nil); ok {
		t.Error("a stratified mean was accepted")
	}
}

// TestAssociationOfOneStratum: without strata the test of no association is
// the score test at no effect, which has the factor N/(N-1) too.
func TestAssociationOfOneStratum(t *testing.T) {
	r := rand.New(rand.NewPCG(41, 1))
	for range 200 {
		in, _ := randomCase(r, "risk-difference", 10000)
		s := Stratum{in.First.Events, in.First.N, in.Second.Events, in.Second.N}
		got, _ := MantelHaenszel("risk-difference", []Stratum{s})
		want := analysed(t, "risk-difference", "score", in).Method.Test(0).Value
		within(t, fmt.Sprintf("%+v", s), got.Z, want, 1e-9*(1+math.Abs(want)))
	}
}

// TestStrataDoNotDependOnOrder, and a stratum without one group changes
// nothing but the count.
func TestStrataDoNotDependOnOrder(t *testing.T) {
	r := rand.New(rand.NewPCG(42, 1))
	for _, measure := range stratifiedMeasures {
		var strata []Stratum
		for range 20 {
			n1, n2 := 1+r.IntN(40), 1+r.IntN(40)
			strata = append(strata, Stratum{float64(r.IntN(n1 + 1)), float64(n1), float64(r.IntN(n2 + 1)), float64(n2)})
		}
		a, _ := MantelHaenszel(measure, strata)
		r.Shuffle(len(strata), func(i, j int) { strata[i], strata[j] = strata[j], strata[i] })
		b, _ := MantelHaenszel(measure, append(strata, Stratum{3, 7, 0, 0}))
		near(t, measure, b.Y, a.Y, 1e-12)
		near(t, measure+" variance", b.V, a.V, 1e-12)
		if a.Empty != 0 || b.Empty != 1 || b.Used != a.Used {
			t.Errorf("%s: %d empty, %d used", measure, b.Empty, b.Used)
		}
		// Exchanging the groups turns the sign on the analysis scale.
		swapped := make([]Stratum, len(strata))
		for i, s := range strata {
			swapped[i] = Stratum{s.X2, s.N2, s.X1, s.N1}
		}
		c, _ := MantelHaenszel(measure, swapped)
		near(t, measure+" swapped", c.Y, -a.Y, 1e-12)
		near(t, measure+" swapped variance", c.V, a.V, 1e-10)
		near(t, measure+" swapped association", c.Z, -a.Z, 1e-12)
	}
}

// TestWeightsAverage: the common effect is the weighted mean of the strata's
// own effects.
func TestWeightsAverage(t *testing.T) {
	strata := []Stratum{{12, 42, 6, 39}, {1, 1, 0, 0}, {5, 19, 3, 18}, {9, 34, 10, 32}}
	own := map[string]func(s Stratum) float64{
		"risk-difference": func(s Stratum) float64 { return s.X1/s.N1 - s.X2/s.N2 },
		"rate-difference": func(s Stratum) float64 { return s.X1/s.N1 - s.X2/s.N2 },
		"risk-ratio":      func(s Stratum) float64 { return s.X1 / s.N1 / (s.X2 / s.N2) },
		"rate-ratio":      func(s Stratum) float64 { return s.X1 / s.N1 / (s.X2 / s.N2) },
		"odds-ratio":      func(s Stratum) float64 { return s.X1 * (s.N2 - s.X2) / (s.X2 * (s.N1 - s.X1)) },
	}
	for _, measure := range stratifiedMeasures {
		got, _ := MantelHaenszel(measure, strata)
		mean, sum := 0.0, 0.0
		for i, s := range strata {
			if w := got.Weights[i]; w > 0 {
				mean += w * own[measure](s)
				sum += w
			}
		}
		near(t, measure+" weights", sum, 1, 1e-14)
		near(t, measure, got.Estimate, mean, 1e-12)
		if got.Weights[1] != 0 {
			t.Errorf("%s: an empty stratum has weight %v", measure, got.Weights[1])
		}
	}
}

func TestSparseStrata(t *testing.T) {
	for _, tc := range []struct {
		name       string
		strata     []Stratum
		measure    string
		estimate   float64
		noEstimate bool
	}{
		{"no events in the second groups", []Stratum{{2, 5, 0, 5}, {1, 4, 0, 9}}, "risk-ratio", math.Inf(1), false},
		{"no events in the first groups", []Stratum{{0, 5, 2, 5}, {0, 4, 1, 9}}, "odds-ratio", 0, false},
		{"no events", []Stratum{{0, 5, 0, 5}, {0, 4, 0, 9}}, "risk-ratio", 1, true},
		{"nothing but events", []Stratum{{5, 5, 5, 5}}, "odds-ratio", 1, true},
	} {
		inf := analysed(t, tc.measure, "mantel-haenszel", rowsOf(tc.strata))
		low, high := inf.Method.Limits(0.025)
		if inf.Estimate != tc.estimate || inf.NoEstimate != tc.noEstimate || low != 0 || !math.IsInf(high, 1) || inf.Y.OK {
			t.Errorf("%s: %+v, limits %v, %v", tc.name, inf, low, high)
		}
		hasNote(t, inf, "S201", true)
		sane(t, tc.name, inf.Method.Test(1))
		checkNumbers(t, tc.name, inf)
	}
	refused(t, "S101", "odds-ratio", "mantel-haenszel", rowsOf([]Stratum{{2, 5, 0, 0}}))
	// No events at all leave a difference of risks without an error.
	refused(t, "S102", "risk-difference", "mantel-haenszel", rowsOf([]Stratum{{0, 5, 0, 5}}))
}

// TestStratifiedRates reads exposures row by row.
func TestStratifiedRates(t *testing.T) {
	in := Input{StrataCount: 2,
		Event:    []float64{1, 2, 0, 3, 1, 0, 2, 1},
		Exposure: []float64{2, 3.5, 1, 4, 2, 2.5, 6, 1},
		Group:    []uint8{0, 0, 1, 1, 0, 1, 1, 0},
		Strata:   []int32{0, 1, 0, 1, 1, 0, 1, 0}}
	strata := []Stratum{{2, 3, 0, 3.5}, {3, 5.5, 5, 10}}
	for _, measure := range []string{"rate-ratio", "rate-difference"} {
		want, _ := MantelHaenszel(measure, strata)
		inf := analysed(t, measure, "mantel-haenszel", in)
		near(t, measure, inf.Y.V, want.Y, 1e-13)
		near(t, measure+" variance", inf.V.V, want.V, 1e-13)
		if inf.Events.V != 10 {
			t.Errorf("%s: %v events", measure, inf.Events.V)
		}
	}
	in.Exposure = nil
	refused(t, "S104", "rate-ratio", "mantel-haenszel", in)
	in.Exposure = []float64{2, 3.5, 1, 4, 2, 2.5, 6, math.NaN()}
	refused(t, "S103", "rate-ratio", "mantel-haenszel", in)
}

// TestStratifiedClusters: a design effect leaves the estimate and multiplies
// its variance.
func TestStratifiedClusters(t *testing.T) {
	for _, measure := range []string{"risk-difference", "risk-ratio", "odds-ratio"} {
		in := rowsOf([]Stratum{{12, 42, 6, 39}, {5, 19, 3, 18}})
		a := analysed(t, measure, "mantel-haenszel", in)
		in.DesignEffect = 3
		b := analysed(t, measure, "mantel-haenszel", in)
		near(t, measure, b.Estimate, a.Estimate, 1e-12)
		near(t, measure+" variance", b.V.V, 3*a.V.V, 1e-12)
		if b.N != a.N || b.Events != a.Events {
			t.Errorf("%s: n %v, events %v", measure, b.N, b.Events)
		}
	}
}
