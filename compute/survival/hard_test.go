package survival

import (
	"math"
	"math/rand/v2"
	"testing"

	"steelyard/compute/effect"
)

// settled demands that nothing in an inference is NaN and limits are in order.
func settled(t reporter, what string, inf *effect.Inference) {
	t.Helper()
	if math.IsNaN(inf.Estimate) {
		t.Errorf("%s: estimate %v", what, inf.Estimate)
	}
	for _, c := range []float64{0, 1e-300, 0.5, 1, 2, 1e300, math.Inf(1)} {
		at := inf.Method.Test(c)
		for _, p := range []float64{at.Up.P, at.Down.P} {
			if !(p >= 0 && p <= 1) {
				t.Errorf("%s at %v: p %v", what, c, p)
			}
		}
		if math.IsNaN(at.Value) {
			t.Errorf("%s at %v: no statistic", what, c)
		}
	}
	for _, a := range []float64{0.025, 0.4, 1e-12, 1e-300} {
		if low, high := inf.Method.Limits(a); !(low <= high) {
			t.Errorf("%s: %v to %v at %v", what, low, high, a)
		}
	}
}

func TestSettledCanFail(t *testing.T) {
	inf, _ := HazardRatio("wald", small())
	var c counter
	settled(&c, "good", inf)
	if c != 0 {
		t.Error("refuses what is right")
	}
	inf.Estimate = math.NaN()
	settled(&c, "bad", inf)
	inf.Method = effect.Wald{Scale: "log", SE: 1, DF: math.Inf(1), Low: math.NaN(), High: math.NaN()}
	settled(&c, "worse", inf)
	if c < 3 {
		t.Error("accepts NaN")
	}
}

// Separation, ties everywhere, few subjects, no events, one time, strata that
// hold one group: every method answers or refuses with a reason.
func TestHardTimes(t *testing.T) {
	for name, in := range map[string]Input{
		"one each":        {Time: []float64{1, 2}, Event: []float64{1, 1}, Group: []uint8{0, 1}},
		"one time":        {Time: []float64{3, 3, 3, 3}, Event: []float64{1, 1, 1, 1}, Group: []uint8{0, 1, 0, 1}},
		"at zero":         {Time: []float64{0, 0, 0, 5}, Event: []float64{1, 1, 0, 1}, Group: []uint8{0, 1, 0, 1}},
		"no events":       {Time: []float64{1, 2, 3}, Event: []float64{0, 0, 0}, Group: []uint8{0, 1, 1}},
		"first without":   {Time: []float64{5, 6, 7, 1, 2, 3}, Event: []float64{0, 0, 0, 1, 1, 1}, Group: []uint8{0, 0, 0, 1, 1, 1}},
		"second without":  {Time: []float64{1, 2, 3, 5, 6, 7}, Event: []float64{1, 1, 1, 0, 0, 0}, Group: []uint8{0, 0, 0, 1, 1, 1}},
		"separated":       {Time: []float64{1, 2, 3, 10, 11, 12}, Event: []float64{1, 1, 1, 1, 1, 1}, Group: []uint8{0, 0, 0, 1, 1, 1}},
		"never together":  {Time: []float64{1, 2, 3, 4}, Event: []float64{0, 0, 1, 1}, Group: []uint8{0, 0, 1, 1}},
		"one group":       {Time: []float64{1, 2, 3, 4}, Event: []float64{1, 1, 1, 1}, Group: []uint8{1, 1, 1, 1}},
		"empty":           {},
		"strata alone":    {Time: []float64{1, 2, 3, 4}, Event: []float64{1, 1, 1, 1}, Group: []uint8{0, 0, 1, 1}, Strata: []int32{0, 0, 1, 1}},
		"far apart":       {Time: []float64{1e-300, 1, 1e300, 2e300}, Event: []float64{1, 1, 1, 1}, Group: []uint8{0, 1, 0, 1}},
		"all tied, large": tiedTimes(400),
	} {
		for _, method := range []string{"wald", "likelihood-ratio", "score"} {
			inf, problem := HazardRatio(method, in)
			switch {
			case problem == nil:
				settled(t, method+" "+name, inf)
			case problem.Code == "":
				t.Errorf("%s %s: refused without a reason", method, name)
			}
		}
		for _, horizon := range []float64{0, 1, 3, 100} {
			in.Horizon = horizon
			inf, problem := RestrictedMeanDifference(in)
			switch {
			case problem == nil:
				settled(t, "greenwood "+name, inf)
			case problem.Code == "":
				t.Errorf("greenwood %s: refused without a reason", name)
			}
		}
	}
}

func tiedTimes(n int) Input {
	var in Input
	for i := range n {
		in.Time, in.Event, in.Group = append(in.Time, 7), append(in.Event, float64(i%3%2)), append(in.Group, uint8(i%2))
	}
	return in
}

// Separation has a finite limit on one side, and the reason is given.
func TestSeparationIsSaid(t *testing.T) {
	in := Input{Time: []float64{5, 6, 7, 8, 1, 2, 3, 4}, Event: []float64{0, 0, 0, 0, 1, 1, 1, 1}, Group: []uint8{0, 0, 0, 0, 1, 1, 1, 1}}
	inf, problem := HazardRatio("wald", in)
	if problem != nil {
		t.Fatal(problem)
	}
	low, high := inf.Method.Limits(0.025)
	if inf.Estimate != 0 || inf.Word != "likelihood-ratio" || low != 0 || !(high > 0 && high < 1) || len(inf.Notes) == 0 || inf.Notes[0].Code != "S206" {
		t.Errorf("%v by %s, %v to %v, %v", inf.Estimate, inf.Word, low, high, inf.Notes)
	}
	// The limit is where twice the likelihood lost is 1.96²: here each event
	// has 4 of the first group at risk, so the likelihood is a product.
	lost := 0.0
	for at := 4.0; at >= 1; at-- {
		lost += 2 * math.Log((at+4*high)/at)
	}
	near(t, "likelihood lost at the limit", lost, 3.841458820694124, 1e-8)
}

// A million subjects: the right number, in memory.
func TestAMillionSubjects(t *testing.T) {
	if testing.Short() {
		t.Skip("a second")
	}
	rng := rand.New(rand.NewPCG(1, 9))
	const n = 1000000
	in := Input{Time: make([]float64, n), Event: make([]float64, n), Group: make([]uint8, n)}
	for i := range n {
		in.Group[i] = uint8(i % 2)
		rate := 1.0
		if in.Group[i] == 0 {
			rate = 0.8
		}
		event, censored := rng.ExpFloat64()/rate, 2*rng.Float64()
		in.Time[i] = math.Min(event, censored)
		if event <= censored {
			in.Event[i] = 1
		}
	}
	inf, problem := HazardRatio("wald", in)
	if problem != nil {
		t.Fatal(problem)
	}
	// Truth 0.8; the error is near 2/√events.
	near(t, "log ratio", math.Log(inf.Estimate), math.Log(0.8), 5*2/math.Sqrt(inf.Events.V))
	near(t, "se", inf.SE.V, 2/math.Sqrt(inf.Events.V), 1e-4)
}
