package dist

import "testing"

// Sinks keep the compiler from dropping the calls.
var (
	sinkTail  Tail
	sinkFloat float64
)

func BenchmarkTails(b *testing.B) {
	for _, c := range []struct {
		name string
		f    func() Tail
	}{
		{"Normal", func() Tail { return NormalUpper(2.3) }},
		{"NormalFar", func() Tail { return NormalUpper(60) }},
		{"T10", func() Tail { return TUpper(2.3, 10) }},
		{"T1e8", func() Tail { return TUpper(2.3, 1e8) }},
		{"F", func() Tail { return FUpper(3, 4, 30) }},
		{"ChiSquare9", func() Tail { return ChiSquareUpper(20, 9) }},
		{"ChiSquare1e6", func() Tail { return ChiSquareUpper(1.002e6, 1e6) }},
		{"Beta", func() Tail { return BetaLower(0.3, 0.7, 4, 9) }},
		{"Beta1e6", func() Tail { return BetaLower(0.501, 0.499, 1e6, 1e6) }},
		{"Binomial1e6", func() Tail { return BinomialUpper(501000, 1e6, 0.5, 0.5) }},
		{"Poisson", func() Tail { return PoissonUpper(20, 12) }},
		{"NoncentralT", func() Tail { return NoncentralTUpper(2, 20, 1) }},
		{"NoncentralTFar", func() Tail { return NoncentralTUpper(2, 5, 30) }},
		{"NoncentralChiSquare", func() Tail { return NoncentralChiSquareUpper(30, 5, 12) }},
		{"Correlation", func() Tail { return CorrelationUpper(0.5, 0.3, 30) }},
		{"CorrelationSmall", func() Tail { return CorrelationUpper(0.99, 0.98, 5) }},
	} {
		b.Run(c.name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				sinkTail = c.f()
			}
		})
	}
}

func BenchmarkQuantiles(b *testing.B) {
	for _, c := range []struct {
		name string
		f    func() float64
	}{
		{"Normal", func() float64 { return NormalQuantile(0.025) }},
		{"T10", func() float64 { return TQuantile(0.025, 10) }},
		{"F", func() float64 { return FQuantile(0.05, 4, 30) }},
		{"ChiSquare9", func() float64 { return ChiSquareQuantile(0.05, 9) }},
		{"Beta", func() float64 { x, _ := BetaQuantile(0.025, 7, 6); return x }},
		{"Beta1e6", func() float64 { x, _ := BetaQuantile(0.025, 5e5, 5e5); return x }},
		{"NoncentralTDelta", func() float64 { return NoncentralTDelta(0.025, 2, 20) }},
		{"BivariateNormal", func() float64 { return BivariateNormal(1, -0.5, 0.7) }},
		{"Ei", func() float64 { return Ei(3) }},
	} {
		b.Run(c.name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				sinkFloat = c.f()
			}
		})
	}
}

func BenchmarkHypergeometric(b *testing.B) {
	h := Hypergeometric{1e6, 1e6, 1e6, 1.5}
	b.ReportAllocs()
	for b.Loop() {
		sinkTail = h.Upper(551000)
	}
}

func BenchmarkRankSum(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		sinkTail = NewRankSum(50, 50).Upper(1600)
	}
}

func BenchmarkRankSumTies(b *testing.B) {
	scores := make([]int, 60)
	for i := range scores {
		scores[i] = 4*(i/2) + 3
	}
	b.ReportAllocs()
	for b.Loop() {
		sinkTail = NewRankSumTies(scores, 30).Upper(2000)
	}
}

func BenchmarkSignedRank(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		sinkTail = NewSignedRank(50).Upper(900)
	}
}
