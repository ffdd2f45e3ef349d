package effect

import (
	"fmt"
	"math/rand/v2"
	"testing"

	"steelyard/compute/result"
)

// sink keeps results alive.
var sink Test

// meansKernels are the kernels that rehearsals call.
func meansKernels() map[string]Method {
	x, y := []float64{4.1, 5.3, 6.2, 5.9, 7.0}, []float64{3.0, 4.4, 2.7, 4.9, 3.8}
	p, _ := Analyse("mean-difference", "permutation", Input{First: Group{Values: x}, Second: Group{Values: y}})
	return map[string]Method{
		"t":               OneSampleT(20, 1, 2),
		"welch":           Welch(0.4, 0.1, 19, 0.2, 24),
		"pooled-variance": PooledVariance(0.4, 20, 1.2, 25, 1.3),
		"fieller":         Fieller{M1: 5, C1: 0.1, Nu1: 19, M2: 4, C2: 0.2, Nu2: 24},
		"noncentral-t":    NoncentralT{T: 1.7, DF: 43, Root: 3.3},
		"permutation":     p.Method,
	}
}

// TestKernelsDoNotAllocate: a test at any null is free of allocations.
func TestKernelsDoNotAllocate(t *testing.T) {
	for name, m := range meansKernels() {
		if n := testing.AllocsPerRun(100, func() { sink = m.Test(0.3) }); n != 0 {
			t.Errorf("%s: %v allocations", name, n)
		}
	}
}

func BenchmarkMeansTest(b *testing.B) {
	for _, name := range []string{"t", "welch", "pooled-variance", "fieller", "noncentral-t", "permutation"} {
		m := meansKernels()[name]
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for i := 0; b.Loop(); i++ {
				sink = m.Test(float64(i%7) * 0.1)
			}
		})
	}
}

func BenchmarkMeansLimits(b *testing.B) {
	for _, name := range []string{"welch", "fieller", "noncentral-t", "permutation"} {
		m := meansKernels()[name]
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				m.Limits(0.025)
			}
		})
	}
}

// Inputs like those of testdata/bench/means.R, which times base R on them.

func BenchmarkWelchData(b *testing.B) {
	r := rand.New(rand.NewPCG(1, 1))
	in := Input{First: Group{Values: draws(r, 1_000_000, 1, 1)}, Second: Group{Values: draws(r, 1_000_000, 0, 2)}}
	for b.Loop() {
		if _, bad := Analyse("mean-difference", "welch", in); bad != nil {
			b.Fatal(bad)
		}
	}
}

func linearInput(rows, covariates int) Input {
	r := rand.New(rand.NewPCG(2, 2))
	in := Input{Value: draws(r, rows, 10, 2), Group: make([]uint8, rows)}
	for i := range in.Group {
		in.Group[i] = uint8(r.IntN(2))
	}
	for j := range covariates {
		in.Covariates = append(in.Covariates, Covariate{Name: fmt.Sprint("x", j), Values: draws(r, rows, 0, 1)})
	}
	return in
}

// 200 000 rows and 21 columns with intercept and group.
func BenchmarkLinear(b *testing.B) {
	in := linearInput(200_000, 19)
	for _, method := range []string{"linear", "linear-hc3"} {
		b.Run(method, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, bad := Analyse("mean-difference", method, in); bad != nil {
					b.Fatal(bad)
				}
			}
		})
	}
}

func BenchmarkPermutation(b *testing.B) {
	r := rand.New(rand.NewPCG(3, 3))
	for _, size := range []struct {
		name   string
		n1, n2 int
	}{{"exact-11-11", 11, 11}, {"random-50-50", 50, 50}, {"random-500-500", 500, 500}} {
		in := Input{First: Group{Values: draws(r, size.n1, 1, 1)}, Second: Group{Values: draws(r, size.n2, 0, 1)}, Seed: 1}
		b.Run(size.name, func(b *testing.B) {
			for b.Loop() {
				if _, bad := Analyse("mean-difference", "permutation", in); bad != nil {
					b.Fatal(bad)
				}
			}
		})
	}
	in := Input{Sample: Group{Values: draws(r, 20, 1, 1)}}
	b.Run("signs-20", func(b *testing.B) {
		for b.Loop() {
			if _, bad := Analyse("mean", "permutation", in); bad != nil {
				b.Fatal(bad)
			}
		}
	})
}

func BenchmarkGiven(b *testing.B) {
	in := Input{Given: &Given{Estimate: 0.74, Low: result.Some(0.6), High: result.Some(0.92), Level: result.Some(0.95)}}
	b.ReportAllocs()
	for b.Loop() {
		if _, bad := Analyse("hazard-ratio", "", in); bad != nil {
			b.Fatal(bad)
		}
	}
}
