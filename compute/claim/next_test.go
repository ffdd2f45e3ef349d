package claim

import (
	"math"
	"testing"

	"steelyard/protocol/record"
)

// power is the chance of a claim with normal estimates of information i, if
// the present gaps hold: the formula of the design, one subject at a time.
func power(gaps []float64, z, have, added float64) float64 {
	miss := 0.0
	for _, e := range gaps {
		miss += math.Erfc((e*(have+added)-z*math.Sqrt(have+added))/math.Sqrt(added)/math.Sqrt2) / 2
	}
	return 1 - miss
}

// The sizes are the smallest whole numbers that reach the power, found here by
// counting up.
func TestNextBruteForce(t *testing.T) {
	for _, c := range []struct {
		claim string
		gaps  []float64
	}{{"superior", []float64{0.2}}, {"noninferior", []float64{0.7}}, {"equivalent", []float64{0.7, 0.3}}, {"minimum-effect", nil}} {
		inf := wald(record.Identity, 0.2, 0.2)
		q := at(c.claim, "higher", record.Identity, 0, 0.5)
		w := Next(inf, q, Assess(inf, q))
		if c.gaps == nil {
			if !w.NoSize || w.NewStudyN80.OK {
				t.Errorf("%s: %+v", c.claim, w)
			}
			continue
		}
		info := 1 / (0.2 * 0.2)
		count := func(have, want float64) float64 {
			for n := 1.0; ; n++ {
				if power(c.gaps, z95, have, n*info/inf.N) >= want {
					return n
				}
			}
		}
		for _, x := range []struct {
			what      string
			got, want float64
		}{{"new 80", w.NewStudyN80.V, count(0, 0.8)}, {"new 90", w.NewStudyN90.V, count(0, 0.9)},
			{"added 80", w.AddedN80.V, count(info, 0.8)}, {"added 90", w.AddedN90.V, count(info, 0.9)}} {
			if x.got != x.want {
				t.Errorf("%s, %s: %g, want %g", c.claim, x.what, x.got, x.want)
			}
		}
	}
}

// Added information only helps once the estimate points toward the claim.
func TestNextIsMonotone(t *testing.T) {
	for _, gaps := range [][]float64{{0.2}, {0.05}, {0.4, 0.1}} {
		for _, have := range []float64{0, 25, 400} {
			last := -1.0
			for added := 0.5; added < 1e6; added *= 1.1 {
				p := reached(gaps, z95, have, added)
				if have == 0 && p < last-1e-12 {
					t.Errorf("%v with %g: power falls at %g", gaps, have, added)
				}
				last = p
			}
			if last < 0.999 {
				t.Errorf("%v with %g: %g at most", gaps, have, last)
			}
		}
	}
}

// What no size settles is said, and what is excluded is given anyway.
func TestNextWithoutSize(t *testing.T) {
	inf := wald(record.Log, math.Log(0.9), 0.2)
	q := at("superior", "higher", record.Log, 1, 1.25)
	w := Next(inf, q, Assess(inf, q))
	if !w.NoSize || w.NewStudyN80.OK || !w.ExcludedLow.OK || !w.ExcludedHigh.OK {
		t.Errorf("%+v", w)
	}
	inf.V.OK = false
	if w = Next(inf, q, Assess(inf, q)); w.NoSize || w.AddedN90.OK || !w.ExcludedLow.OK {
		t.Errorf("without an error: %+v", w)
	}
}
