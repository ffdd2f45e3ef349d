package effect

import (
	"math/rand/v2"
	"os/exec"
	"testing"
)

func BenchmarkSignedRankExact49(b *testing.B) {
	rng := rand.New(rand.NewPCG(2, 1))
	d := normals(rng, 49)
	in := Input{Pairs: Pairs{N: 49, First: d, Second: make([]float64, 49)}}
	for b.Loop() {
		inf := analysed(b, "paired-median-shift", "signed-rank-exact", in)
		inf.Method.Limits(0.025)
		inf.Method.Test(0)
	}
}

func BenchmarkWilcoxonNormal2000(b *testing.B) {
	rng := rand.New(rand.NewPCG(2, 2))
	in := twoValues(normals(rng, 2000), normals(rng, 2000))
	for b.Loop() {
		inf := analysed(b, "median-shift", "wilcoxon-normal", in)
		inf.Method.Limits(0.025)
		inf.Method.Test(0)
	}
}

func BenchmarkSpearmanExact9(b *testing.B) {
	x, y := []float64{1, 2, 3, 4, 5, 6, 7, 8, 9}, []float64{2, 1, 4, 3, 9, 6, 5, 8, 7}
	in := Input{Pairs: Pairs{N: 9, First: x, Second: y}, Sample: Group{N: 9}}
	for b.Loop() {
		analysed(b, "rank-correlation", "permutation", in)
	}
}

func BenchmarkCorrelation1e6(b *testing.B) { benchRelation(b, "correlation", "fisher-z") }

func BenchmarkRankCorrelation1e6(b *testing.B) {
	benchRelation(b, "rank-correlation", "bonett-wright")
}

func benchRelation(b *testing.B, measure, method string) {
	rng := rand.New(rand.NewPCG(2, 3))
	x, y := normals(rng, 1e6), normals(rng, 1e6)
	for i := range y {
		y[i] += x[i]
	}
	for b.Loop() {
		in := Input{Pairs: Pairs{N: 1e6, First: x, Second: y}, Sample: Group{N: 1e6, R: pearson(x, y)}}
		inf := analysed(b, measure, method, in)
		inf.Method.Limits(0.025)
		inf.Method.Test(0)
	}
}

func BenchmarkBrunnerMunzel1e5(b *testing.B) {
	rng := rand.New(rand.NewPCG(2, 4))
	in := twoValues(normals(rng, 1e5), normals(rng, 1e5))
	for b.Loop() {
		analysed(b, "superiority-probability", "brunner-munzel", in)
	}
}

// BenchmarkBaseR prints the times of R on input like that of these benchmarks,
// where it is installed.
func BenchmarkBaseR(b *testing.B) {
	program, err := exec.LookPath("Rscript")
	if err != nil {
		b.Skip("R is not installed")
	}
	for b.Loop() {
		out, err := exec.Command(program, "../../testdata/bench/ranks.R").CombinedOutput()
		if err != nil {
			b.Skipf("%v\n%s", err, out)
		}
		b.Logf("\n%s", out)
	}
}
