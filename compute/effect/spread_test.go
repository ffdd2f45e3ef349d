package effect

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Values computed for the project by a second implementation (methods.md M),
// and by R 4.2.2 (2026-12-01) where the comment gives the call.
func TestSpreadValues(t *testing.T) {
	paired := analysed(t, "paired-sd-ratio", "", Input{Pairs: Pairs{N: 20, FirstSD: 1.4, SecondSD: 1, R: 0.6, HasParts: true}})
	low, high := paired.Method.Limits(0.025)
	within(t, "paired low", low, 0.9512394, 6e-8)
	within(t, "paired high", high, 2.0604697, 6e-8)

	share := analysed(t, "conforming-share", "normal", Input{Sample: Group{N: 15, Mean: 2, SD: 1}, Spec: [2]float64{math.Inf(-1), 4.5}})
	within(t, "share p-up", share.Method.Test(0.95).Up.P, 0.0607939, 1e-6)

	// R: 9*2.5^2/qchisq(c(.975,.025), 9)
	sd := analysed(t, "sd", "", Input{Sample: Group{N: 10, SD: 2.5}})
	low, high = sd.Method.Limits(0.025)
	within(t, "sd low", low*low, 2.95698294777149, 1e-12)
	within(t, "sd high", high*high, 20.83032836574470, 1e-12)
	// R: pchisq(9*2.5^2/4, 9, lower=FALSE)
	within(t, "sd p", sd.Method.Test(2).Up.P, 0.120119286443579, 1e-12)
}

// NIST/SEMATECH e-Handbook 1.3.5.9, F test of two ceramic batches.
func TestCeramicSpreads(t *testing.T) {
	row := published(t, "sdratio-ceramic")
	inf := analysed(t, "sd-ratio", "f", Input{First: Group{N: 240, SD: 65.54909}, Second: Group{N: 240, SD: 61.85425}})
	row.check(t, "F", inf.Method.Test(1).Value)
}

// Interval and test are one thing: at its own limit a p equals a.
func TestSpreadLimitsInvertTests(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 6 {
		n := 6 + rng.IntN(30)
		x, y := normals(rng, n), normals(rng, n)
		for i := range y {
			y[i] += 0.5 * x[i]
		}
		in := Input{Sample: groupOfValues(x), First: groupOfValues(x), Second: groupOfValues(y), Spec: [2]float64{-1.5, 2}}
		in.Pairs = Pairs{N: float64(n), First: x, Second: y, R: pearson(x, y), FirstSD: in.First.SD, SecondSD: in.Second.SD, HasParts: true}
		d := groupOfValues(differences(in.Pairs))
		in.Pairs.Mean, in.Pairs.SD = d.Mean, d.SD
		in.Sample.R = in.Pairs.R
		for measure, methods := range spread {
			for method := range methods {
				if method == "permutation" || method == "any" {
					continue
				}
				inf := analysed(t, measure, method, in)
				if inf.Word != method {
					continue // perfectly related ranks
				}
				for _, a := range []float64{0.025, 0.2} {
					low, high := inf.Method.Limits(a)
					within(t, measure+" "+method+" low", inf.Method.Test(low).Up.P, a, 1e-7)
					if !math.IsInf(high, 1) && high < 1-1e-12 || measure[0] == 's' || measure[0] == 'p' {
						within(t, measure+" "+method+" high", inf.Method.Test(high).Down.P, a, 1e-7)
					}
				}
			}
		}
	}
}

func normals(rng *rand.Rand, n int) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = rng.NormFloat64()
	}
	return x
}

func groupOfValues(x []float64) Group {
	s := sampleOfValues(x, 1)
	return Group{N: s.n, Mean: s.mean, SD: s.sd, Values: x}
}

// Swapping the groups inverts the ratio; a change of unit leaves it.
func TestSpreadSymmetry(t *testing.T) {
	a := analysed(t, "sd-ratio", "f", Input{First: Group{N: 9, SD: 3}, Second: Group{N: 14, SD: 2}})
	b := analysed(t, "sd-ratio", "f", Input{First: Group{N: 14, SD: 2e6}, Second: Group{N: 9, SD: 3e6}})
	al, ah := a.Method.Limits(0.025)
	bl, bh := b.Method.Limits(0.025)
	within(t, "low", al*bh, 1, 1e-12)
	within(t, "high", ah*bl, 1, 1e-12)
	within(t, "tail", a.Method.Test(1.2).Up.P, b.Method.Test(1/1.2).Down.P, 1e-12)
}

// With one limit far away the two-sided share is the one-sided one, which is
// exact.
func TestFarLimitChangesNothing(t *testing.T) {
	for _, n := range []float64{3, 8, 30, 200} {
		one := analysed(t, "conforming-share", "normal", Input{Sample: Group{N: n, Mean: 1, SD: 2}, Spec: [2]float64{math.Inf(-1), 5}})
		two := analysed(t, "conforming-share", "normal", Input{Sample: Group{N: n, Mean: 1, SD: 2}, Spec: [2]float64{-1e9, 5}})
		for _, c := range []float64{0.5, 0.9, 0.97, 0.9999} {
			within(t, "p-up", two.Method.Test(c).Up.P, one.Method.Test(c).Up.P, 1e-8)
		}
	}
}

// The pivot agrees with simulation: 400 000 draws of mean and spread, seed
// fixed; five standard errors allowed.
func TestShareBetweenLimitsBySimulation(t *testing.T) {
	const draws = 400000
	rng := rand.New(rand.NewPCG(5, 6))
	n, mean, sd, c := 9.0, 0.4, 1.0, 0.8
	inf := analysed(t, "conforming-share", "normal", Input{Sample: Group{N: n, Mean: mean, SD: sd}, Spec: [2]float64{-2, 2.5}})
	hits := 0.0
	for range draws {
		chi := 0.0
		for range int(n) - 1 {
			z := rng.NormFloat64()
			chi += z * z
		}
		sigma := sd / math.Sqrt(chi/(n-1))
		mu := mean - rng.NormFloat64()*sigma/math.Sqrt(n)
		share := phi((2.5-mu)/sigma) - phi((-2-mu)/sigma)
		if share <= c {
			hits++
		}
	}
	p := hits / draws
	within(t, "p-up", inf.Method.Test(c).Up.P, p, 5*math.Sqrt(p*(1-p)/draws))
}

func phi(z float64) float64 { return math.Erfc(-z/math.Sqrt2) / 2 }

// Limits of agreement: Bland & Altman's form with exact limits of their own;
// by simulation of the pivot their coverage is what they say (methods.md B15a).
func TestLimitsOfAgreement(t *testing.T) {
	inf := analysed(t, "agreement", "normal", Input{Pairs: Pairs{N: 20, Mean: 1, SD: 2}, Spec: [2]float64{-5, 5}})
	shows := inf.Checks[len(inf.Checks)-1].Shows
	within(t, "lower", shows[0].Value, 1-1.96*2, 1e-12)
	if !(shows[1].Value < shows[0].Value && shows[0].Value < shows[2].Value) {
		t.Errorf("interval %g to %g does not hold %g", shows[1].Value, shows[2].Value, shows[0].Value)
	}
}

// Tuna data, Hollander & Wolfe 1973, pp. 185-187; Fisher z limits as printed
// by R's manual of cor.test.
func TestTunaCorrelation(t *testing.T) {
	row := published(t, "corr-tuna")
	table := readTable(t, "tuna.csv")
	x, y := table.numbers(t, "hunter_l"), table.numbers(t, "panel_score")
	in := Input{Pairs: Pairs{N: float64(len(x)), First: x, Second: y}, Sample: Group{N: float64(len(x)), R: pearson(x, y)}}
	inf := analysed(t, "correlation", "fisher-z", in)
	low, high := inf.Method.Limits(0.025)
	row.check(t, "pearson", inf.Estimate)
	row.check(t, "pearson_low", low)
	row.check(t, "pearson_high", high)
	rank := analysed(t, "rank-correlation", "permutation", in)
	row.check(t, "spearman", rank.Estimate)
	row.check(t, "spearman_p", 2*rank.Method.Test(0).Up.P)
}

// Exact permutation agrees with counting every order; Monte Carlo with a
// larger exact run of R: cor.test(method = "spearman", exact = TRUE).
func TestRankPermutation(t *testing.T) {
	x := []float64{1, 2, 3, 4, 5}
	y := []float64{2, 1, 4, 3, 5}
	in := Input{Pairs: Pairs{N: 5, First: x, Second: y}}
	inf := analysed(t, "rank-correlation", "permutation", in)
	within(t, "r", inf.Estimate, 0.8, 1e-12)
	// P(r >= 0.8) for n = 5 is 8/120 (tables of Spearman's coefficient).
	within(t, "p", inf.Method.Test(0).Up.P, 8.0/120, 1e-12)
	same := Input{Pairs: Pairs{N: 5, First: x, Second: x}}
	perfect := analysed(t, "rank-correlation", "", same)
	if low, high := perfect.Method.Limits(0.025); low != -1 || high != 1 || perfect.Word != "permutation" {
		t.Errorf("perfect ranks: %s, %g to %g", perfect.Word, low, high)
	}
}

// Ranks that are perfectly related have a test at the null and no interval:
// the claim is told so, and no other null is excluded by anything.
func TestPerfectRanksHaveNoInterval(t *testing.T) {
	x := []float64{1, 2, 3, 4, 5, 6, 7, 8}
	down := []float64{-2, -4, -6, -8, -10, -12, -14, -16}
	for _, method := range []string{"", "permutation"} {
		for _, c := range []struct {
			y        []float64
			up, down float64
		}{{x, 1.0 / 40320, 1}, {down, 1, 1.0 / 40320}} { // one order in 8! is as extreme
			inf := analysed(t, "rank-correlation", method, Input{Pairs: Pairs{N: 8, First: x, Second: c.y}})
			if low, high := inf.Method.Limits(0.025); !inf.NoInterval || low != -1 || high != 1 {
				t.Errorf("%q: no interval %v, limits %g, %g", method, inf.NoInterval, low, high)
			}
			at := inf.Method.Test(0)
			within(t, "p up", at.Up.P, c.up, 1e-12)
			within(t, "p down", at.Down.P, c.down, 1e-12)
			for _, null := range []float64{-0.9, -0.1, 0.1, 0.9} {
				if at := inf.Method.Test(null); at.Up.P != 1 || at.Down.P != 1 {
					t.Errorf("%q at %g: %g, %g", method, null, at.Up.P, at.Down.P)
				}
			}
		}
	}
	y := []float64{1, 3, 2, 4, 5, 6, 7, 8}
	if analysed(t, "rank-correlation", "permutation", Input{Pairs: Pairs{N: 8, First: x, Second: y}}).NoInterval {
		t.Error("an imperfect relation has no interval")
	}
}

// Beyond ten thousand pairs the permutation test is refused, the default is not.
func TestRankPermutationHasABound(t *testing.T) {
	x, y := make([]float64, 10_001), make([]float64, 10_001)
	for i := range x {
		x[i], y[i] = float64(i), float64(i*7919%10_001)
	}
	in := Input{Pairs: Pairs{N: 10_001, First: x, Second: y}}
	if _, bad := Analyse("rank-correlation", "permutation", in); bad == nil || bad.Code != "S105" {
		t.Errorf("permutation of 10001 pairs: %v", bad)
	}
	if inf := analysed(t, "rank-correlation", "", in); inf.Word != "bonett-wright" {
		t.Errorf("the default is %s", inf.Word)
	}
	in.Pairs.Second = x
	if _, bad := Analyse("rank-correlation", "", in); bad == nil || bad.Code != "S102" {
		t.Errorf("10001 pairs perfectly related: %v", bad)
	}
}
