package effect

import "testing"

// The inputs of testdata/bench/counts.R, which times base R on them.

func benchLimits(b *testing.B, measure, method string, in Input) {
	m := analysed(b, measure, method, in).Method
	for b.Loop() {
		m.Limits(0.025)
	}
}

func benchTest(b *testing.B, measure, method string, in Input, null float64) {
	m := analysed(b, measure, method, in).Method
	for b.Loop() {
		m.Test(null)
	}
}

func BenchmarkProportionExactLimits(b *testing.B) {
	benchLimits(b, "proportion", "exact", one(300000, 1000000))
}

func BenchmarkProportionMidPLimits(b *testing.B) {
	benchLimits(b, "proportion", "mid-p", one(300000, 1000000))
}

func BenchmarkRiskDifferenceScoreTest(b *testing.B) {
	benchTest(b, "risk-difference", "score", two(7, 12, 1, 12), 0.1)
}

func BenchmarkRiskDifferenceScoreLimits(b *testing.B) {
	benchLimits(b, "risk-difference", "score", two(300000, 1000000, 299000, 1000000))
}

func BenchmarkRiskRatioScoreLimits(b *testing.B) {
	benchLimits(b, "risk-ratio", "score", two(300000, 1000000, 299000, 1000000))
}

func BenchmarkOddsRatioScoreLimits(b *testing.B) {
	benchLimits(b, "odds-ratio", "score", two(300000, 1000000, 299000, 1000000))
}

func BenchmarkOddsRatioExactTest(b *testing.B) {
	benchTest(b, "odds-ratio", "exact", two(300000, 1000000, 299000, 1000000), 1)
}

func BenchmarkOddsRatioExactLimits(b *testing.B) {
	benchLimits(b, "odds-ratio", "exact", two(300000, 1000000, 299000, 1000000))
}

func BenchmarkOddsRatioMidPLimits(b *testing.B) {
	benchLimits(b, "odds-ratio", "mid-p", two(300000, 1000000, 299000, 1000000))
}

func BenchmarkOddsRatioExactLimitsSmall(b *testing.B) {
	benchLimits(b, "odds-ratio", "exact", two(7, 12, 1, 12))
}

func BenchmarkNewcombeTest(b *testing.B) {
	benchTest(b, "risk-difference", "newcombe", two(7, 12, 1, 12), 0.1)
}

func BenchmarkUnconditionalTest(b *testing.B) {
	benchTest(b, "risk-difference", "unconditional", two(56, 70, 48, 80), 0)
}

func BenchmarkUnconditionalLimits(b *testing.B) {
	benchLimits(b, "risk-difference", "unconditional", two(56, 70, 48, 80))
}

func BenchmarkUnconditionalTestLargest(b *testing.B) {
	benchTest(b, "risk-difference", "unconditional", two(560, 2000, 480, 2000), 0.01)
}

func BenchmarkUnconditionalLimitsLargest(b *testing.B) {
	benchLimits(b, "risk-difference", "unconditional", two(560, 2000, 480, 2000))
}

func BenchmarkBoschlooTest(b *testing.B) {
	benchTest(b, "odds-ratio", "boschloo", two(56, 70, 48, 80), 1)
}

func BenchmarkBoschlooLimits(b *testing.B) {
	benchLimits(b, "odds-ratio", "boschloo", two(56, 70, 48, 80))
}

func BenchmarkBoschlooTestLargest(b *testing.B) {
	benchTest(b, "odds-ratio", "boschloo", two(560, 2000, 480, 2000), 1)
}

func BenchmarkTangoLimits(b *testing.B) {
	benchLimits(b, "paired-risk-difference", "tango", paired(794, 150, 86, 570))
}

func BenchmarkRateExactLimits(b *testing.B) {
	benchLimits(b, "rate", "exact", onePer(1000000, 12345))
}

func BenchmarkRateRatioExactLimits(b *testing.B) {
	benchLimits(b, "rate-ratio", "exact", twoExposed(300000, 1000, 299000, 1000))
}

func BenchmarkMantelHaenszel(b *testing.B) {
	strata := make([]Stratum, 1000)
	for i := range strata {
		strata[i] = Stratum{float64(i % 7), 20, float64(i % 5), 25}
	}
	for b.Loop() {
		MantelHaenszel("odds-ratio", strata)
	}
}

func BenchmarkUnconditionalLimitsUnbalanced(b *testing.B) {
	benchLimits(b, "risk-difference", "unconditional", two(30000, 400000, 4, 10))
}

func BenchmarkBoschlooLimitsLargest(b *testing.B) {
	benchLimits(b, "odds-ratio", "boschloo", two(560, 2000, 480, 2000))
}
