package pool

import (
	"fmt"
	"math"
	"testing"
)

// Few studies, equal ones, variances and estimates of any size: every model
// gives numbers, and limits in order.
func TestHardStudies(t *testing.T) {
	for name, studies := range map[string][]Study{
		"one":             {{1, 0.5}},
		"two equal":       {{1, 0.5}, {1, 0.5}},
		"equal estimates": {{2, 0.1}, {2, 0.4}, {2, 7}},
		"far apart":       {{-1e9, 1e-9}, {1e9, 1e-9}, {0, 1}},
		"tiny variances":  {{1, 1e-300}, {1.1, 1e-300}, {0.9, 2e-300}},
		"huge variances":  {{1, 1e200}, {-1, 1e250}, {3, 1e180}},
		"mixed":           {{1, 1e-20}, {5, 1e20}, {2, 1}},
		"huge estimates":  {{1e100, 1}, {2e100, 4}, {1.5e100, 2}},
	} {
		for _, b := range []Between{REML, PauleMandel, DerSimonianLaird, SidikJonkman} {
			for _, o := range []Options{{}, {Random: true, Between: b, Interval: Normal}, {Random: true, Between: b, Interval: HartungKnapp}, {Random: true, Between: b, Interval: HartungKnapp, Guard: true}} {
				what := fmt.Sprint(name, " ", o)
				f := Fit(studies, o)
				low, high := f.Limits(0.025)
				if math.IsNaN(f.Mu) || math.IsNaN(f.SE) || !(f.Tau2 >= 0) || !(low <= high) {
					t.Errorf("%s: %+v, %v to %v", what, f, low, high)
				}
				sum := 0.0
				for _, w := range f.Weights {
					sum += w
				}
				if !(math.Abs(sum-1) < 1e-9) {
					t.Errorf("%s: weights add to %v", what, sum)
				}
				if len(studies) > 1 {
					h := HeterogeneityOf(studies, f.Tau2, 0.025)
					for _, v := range []float64{h.Q, h.P.P, h.H2, h.I2, h.I2Low, h.I2High, h.Tau2Low, h.Tau2High} {
						if math.IsNaN(v) || v < 0 {
							t.Errorf("%s: %+v", what, h)
							break
						}
					}
					LeaveOneOut(studies, o)
					Cumulative(studies, o)
					Egger(studies)
				}
			}
		}
	}
}
