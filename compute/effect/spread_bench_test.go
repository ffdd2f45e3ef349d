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

// A share far outside its limits, whose whole inference is dear.
func BenchmarkShareFarOutside(b *testing.B) {
	for b.Loop() {
		inf, _ := Analyse("conforming-share", "normal", Input{Sample: Group{N: 20, Mean: 50, SD: 0.5}, Spec: [2]float64{-1, 1}})
		inf.Method.Limits(0.005)
	}
}
