package effect

import (
	"fmt"
	"math"
	"testing"
)

// encloses demands low <= estimate <= high inside the range of a share.
func encloses(t reporter, what string, low, estimate, high float64) {
	t.Helper()
	if !(0 <= low && low <= estimate && estimate <= high && high <= 1) {
		t.Errorf("%s: %g in %g to %g", what, estimate, low, high)
	}
}

// The limits enclose the estimate however far the values lie from what is
// allowed, where the tails are smaller than any number.
func TestSharesFarOutsideStayInOrder(t *testing.T) {
	down := math.Inf(-1)
	for _, spec := range [][2]float64{{-1, 1}, {0, 1e-6}, {down, 1}, {-1000, 1}} {
		for _, n := range []float64{2, 3, 20} {
			for _, sds := range []float64{-1e6, -100, -8, 0, 8, 100, 1e6} {
				const sd = 0.5
				what := fmt.Sprintf("spec %v n %g, %g sd away", spec, n, sds)
				s := Group{N: n, Mean: sds * sd, SD: sd}
				share := analysed(t, "conforming-share", "normal", Input{Sample: s, Spec: spec})
				pairs := analysed(t, "agreement", "normal", Input{Pairs: Pairs{N: n, Mean: s.Mean, SD: sd}, Spec: spec})
				low, high := share.Method.Limits(0.025)
				encloses(t, what, low, share.Estimate, high)
				if l, h := pairs.Method.Limits(0.025); l != low || h != high || pairs.Estimate != share.Estimate {
					t.Errorf("%s: agreement has %g in %g to %g", what, pairs.Estimate, l, h)
				}
			}
		}
	}
}

func TestEnclosesCanFail(t *testing.T) {
	for _, x := range [][3]float64{{5.55e-17, 0, 5e-324}, {0.2, 0.1, 0.3}, {0.1, 0.4, 0.3}, {-0.1, 0, 0.1}, {0, 1, 1.1}, {math.NaN(), 0, 1}} {
		var c complaints
		if encloses(&c, "spoiled", x[0], x[1], x[2]); len(c) == 0 {
			t.Errorf("%v passes", x)
		}
	}
}

// A mean 8 and 10 standard deviations from the limits, on either side.
// SciPy 1.10: stats.norm.sf(8), stats.norm.sf(10).
func TestSmallSharesOnEitherSide(t *testing.T) {
	const want = 6.22096057427174e-16 - 7.61985302416047e-24
	for _, mean := range []float64{-9, 9} {
		inf := analysed(t, "conforming-share", "normal", Input{Sample: Group{N: 20, Mean: mean, SD: 1}, Spec: [2]float64{-1, 1}})
		near(t, fmt.Sprint("share at mean ", mean), inf.Estimate, want, 1e-12)
	}
}

// The test that is cut short agrees with the whole integral.
func TestShareCutShort(t *testing.T) {
	for _, n := range []float64{2, 20} {
		for _, mean := range []float64{-6, -2, 0, 3, 6} {
			inf := analysed(t, "conforming-share", "normal", Input{Sample: Group{N: n, Mean: mean, SD: 0.5}, Spec: [2]float64{-1, 1}})
			m := inf.Method.(conformingBoth)
			for _, c := range []float64{1e-6, 0.1, 0.5, 0.9} {
				within(t, fmt.Sprintf("p up at n %g mean %g share %g", n, mean, c), m.Test(c).Up.P, math.Min(1, m.up(c)), 1e-9)
				within(t, "p down", m.down(c).Down.P, m.Test(c).Down.P, 0)
			}
		}
	}
}
