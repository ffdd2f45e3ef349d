package effect

import "testing"

func BenchmarkConformingBoth(b *testing.B) {
	inf, _ := Analyse("conforming-share", "normal", Input{Sample: Group{N: 30, Mean: 0.2, SD: 1}, Spec: [2]float64{-3, 3.2}})
	for b.Loop() {
		inf.Method.Test(0.95)
	}
}

func BenchmarkExactCorrelation(b *testing.B) {
	inf, _ := Analyse("correlation", "exact", Input{Sample: Group{N: 30, R: 0.4}})
	for b.Loop() {
		inf.Method.Test(0.2)
	}
}

func BenchmarkExactCorrelationLimits(b *testing.B) {
	inf, _ := Analyse("correlation", "exact", Input{Sample: Group{N: 30, R: 0.4}})
	for b.Loop() {
		inf.Method.Limits(0.025)
	}
}
