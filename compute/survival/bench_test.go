package survival

import (
	"math"
	"math/rand/v2"
	"os/exec"
	"testing"
)

// million is a million subjects in two groups with hazards 0.8 to 1.
func million() Input {
	const n = 1000000
	rng := rand.New(rand.NewPCG(1, 9))
	in := Input{Time: make([]float64, n), Event: make([]float64, n), Group: make([]uint8, n), Horizon: 1}
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
	return in
}

func BenchmarkKaplanMeier1e6(b *testing.B) {
	in := million()
	for b.Loop() {
		Curve(in, 0, 0.025)
		Curve(in, 1, 0.025)
	}
}

func BenchmarkRestrictedMean1e6(b *testing.B) {
	in := million()
	for b.Loop() {
		if _, bad := RestrictedMeanDifference(in); bad != nil {
			b.Fatal(bad)
		}
	}
}

// BenchmarkBaseR prints the times of R on the same input, where it is there.
func BenchmarkBaseR(b *testing.B) {
	program, err := exec.LookPath("Rscript")
	if err != nil {
		b.Skip("R is not installed")
	}
	for b.Loop() {
		out, err := exec.Command(program, "../../testdata/bench/survival.R").CombinedOutput()
		if err != nil {
			b.Skipf("%v\n%s", err, out)
		}
		b.Logf("\n%s", out)
	}
}
