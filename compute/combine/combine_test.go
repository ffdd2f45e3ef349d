package combine

import (
	"math"
	"math/rand/v2"
	"testing"

	"steelyard/compute/dist"
)

type reporter interface {
	Helper()
	Errorf(string, ...any)
}

func near(t reporter, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.12g, want %.12g", what, got, want)
	}
}

type counter int

func (c *counter) Helper()               {}
func (c *counter) Errorf(string, ...any) { *c++ }

func TestNearFails(t *testing.T) {
	var c counter
	near(&c, "x", 1, 2, 0.5)
	near(&c, "x", math.NaN(), 2, 0.5)
	if c != 2 {
		t.Fatal("near did not fail")
	}
}

func tails(p ...float64) []dist.Tail {
	var out []dist.Tail
	for _, x := range p {
		out = append(out, dist.TailOf(x))
	}
	return out
}

func combined(t *testing.T, method string, p []dist.Tail) Combined {
	t.Helper()
	c, err := Combine(method, p, nil)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// Computed for the project by a second implementation (methods.md M).
func TestFourValues(t *testing.T) {
	for method, want := range map[string]float64{"fisher": 0.0064519, "pearson": 0.0040024, "stouffer": 0.0032490, "tippett": 0.0394040,
		"edgington": 0.0038128, "logit": 0.0041478, "cauchy": 0.0303395, "harmonic": 0.0334650} {
		near(t, method, combined(t, method, tails(0.01, 0.2, 0.3, 0.04)).P.P, want, 6e-8)
	}
}

// Fisher 1932, Statistical Methods for Research Workers, section 21.1: three
// tests with p 0.145, 0.263, 0.087 give chi-square 11.42 with 6 df, p 0.076.
func TestFishersExample(t *testing.T) {
	c := combined(t, "fisher", tails(0.145, 0.263, 0.087))
	near(t, "chi-square", c.Statistic, 11.42, 0.005)
	near(t, "p", c.P.P, 0.076, 0.0005)
}

// One p-value is itself under every method, in both tails.
func TestOneValueIsItself(t *testing.T) {
	for _, p := range []float64{1e-12, 0.003, 0.2, 0.5, 0.77, 0.999} {
		for _, method := range Methods {
			tol := 1e-10
			near(t, method, combined(t, method, tails(p)).P.P/p, 1, tol)
		}
	}
}

// Far tails: as many digits as the method promises, by its own leading term.
func TestFarTails(t *testing.T) {
	p := dist.TailOfLn(-690) // about 1e-300
	two := []dist.Tail{p, p}
	for _, method := range Methods {
		c := combined(t, method, two)
		if !(c.P.LnP < -600) || math.IsNaN(c.P.LnP) {
			t.Errorf("%s: ln p = %v", method, c.P.LnP)
		}
	}
	near(t, "tippett", combined(t, "tippett", two).P.LnP, -690+math.Ln2, 1e-9)
	near(t, "cauchy", combined(t, "cauchy", two).P.LnP, -690, 1e-9)
	near(t, "harmonic", combined(t, "harmonic", two).P.LnP, -690, 1e-9)
	near(t, "edgington", combined(t, "edgington", two).P.LnP, 2*(-690+math.Ln2)-math.Ln2, 1e-9)
	// P(L1 + L2 > x) = (x - 1 + e^-x … )e^-x to leading order: x e^-x.
	x := 2 * 690.0
	near(t, "logit", combined(t, "logit", two).P.LnP, math.Log(x)-x, 2/x)
}

// Both tails are right: turning every p into 1-p turns symmetric methods
// round, and uniform p-values give uniform combined ones.
func TestSymmetry(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 50 {
		var p, q []dist.Tail
		for range 1 + rng.IntN(30) {
			x := dist.TailOf(rng.Float64())
			p, q = append(p, x), append(q, x.Complement())
		}
		for _, method := range []string{"stouffer", "edgington", "logit", "cauchy"} {
			near(t, method, combined(t, method, p).P.P, combined(t, method, q).P.Q, 1e-9)
		}
		near(t, "fisher and pearson", combined(t, "fisher", p).P.P, combined(t, "pearson", q).P.Q, 1e-12)
	}
}

// Under uniform p-values every method is uniform: 20 000 sets of 7, the
// largest gap to the diagonal within 1.95/sqrt(n) (Kolmogorov, 0.1 %).
func TestUniform(t *testing.T) {
	const sets, k = 20000, 7
	if testing.Short() {
		t.Skip("simulation")
	}
	rng := rand.New(rand.NewPCG(3, 4))
	counts := map[string][]int{}
	for range sets {
		p := make([]dist.Tail, k)
		for i := range p {
			p[i] = dist.TailOf(rng.Float64())
		}
		for _, method := range Methods {
			if method == "harmonic" {
				continue // checked at fewer points below: it integrates
			}
			c, _ := Combine(method, p, nil)
			if counts[method] == nil {
				counts[method] = make([]int, 20)
			}
			counts[method][min(19, int(c.P.P*20))]++
		}
	}
	for method, n := range counts {
		sum := 0
		for i, x := range n {
			sum += x
			near(t, method, float64(sum)/sets, float64(i+1)/20, 1.95/math.Sqrt(sets))
		}
	}
}

// P(1/U1 + 1/U2 > x) in closed form: 2/x·… by direct integration over U1.
func TestHarmonicOfTwo(t *testing.T) {
	for _, x := range []float64{2.5, 4, 10, 1000} {
		// P(1/U1+1/U2 <= x) = ∫ over u in (1/(x-1), 1) of 1 - 1/(x-1/u) du.
		// With v = 1/(1 - 1/(x-1/u)) … the closed form of that integral.
		want := 1 - (1 - 2/x - 2*math.Log(x-1)/(x*x))
		near(t, "two reciprocals", paretoSum{k: 2, excess: x - 2}.upper()/want, 1, 1e-12)
	}
}

// The contour and the recursion are two ways to one number.
func TestUniformSumTwoWays(t *testing.T) {
	for _, k := range []int{20, 40, 63} {
		for _, share := range []float64{0.06, 0.2, 0.35, 0.5} {
			x := share * float64(k)
			near(t, "ln P", uniformIntegral(x, float64(k))-math.Log(uniformRecursion(x, k)), 0, 2e-12)
		}
	}
}

func TestReported(t *testing.T) {
	for _, c := range []struct {
		r            Reported
		exact, worst float64
		known        bool
	}{
		{Reported{0.04, 2, "above", "="}, 0.02, 0.02, true},
		{Reported{0.04, 2, "below", "="}, 0.98, 0.98, true},
		{Reported{0.05, 2, "above", ">"}, 0.025, 0.5, false},
		{Reported{0.05, 2, "below", ">"}, 0.975, 0.975, false},
		{Reported{0.05, 2, "unknown", "="}, 0.975, 0.975, false},
		{Reported{0.05, 2, "unknown", "<"}, 1, 1, false},
		{Reported{0.01, 2, "below", "<"}, 0.995, 1, true},
		{Reported{0.05, 1, "above", "<"}, 0.05, 0.05, true},
		{Reported{0.05, 1, "below", "="}, 0.95, 0.95, true},
		{Reported{0.05, 1, "above", ">"}, 0.05, 1, false},
		{Reported{0.05, 1, "below", ">"}, 0.95, 0.95, false},
	} {
		exact, known, worst := c.r.OneSided(true)
		if known != c.known {
			t.Errorf("%+v: known %v", c.r, known)
		}
		if known {
			near(t, "exact", exact.P, c.exact, 1e-15)
		}
		near(t, "worst", worst.P, c.worst, 1e-15)
	}
}

// Each bound is admissible and none is more favourable than the report.
func TestTallyIsBinomial(t *testing.T) { near(t, "tally", Tally(4, 5).P, 6.0/32, 1e-15) }

func benchmark(b *testing.B, method string, k int) {
	rng := rand.New(rand.NewPCG(1, 1))
	p := make([]dist.Tail, k)
	for i := range p {
		p[i] = dist.TailOf(rng.Float64())
	}
	for b.Loop() {
		if _, err := Combine(method, p, nil); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkFisher100000(b *testing.B)   { benchmark(b, "fisher", 1e5) }
func BenchmarkStouffer100000(b *testing.B) { benchmark(b, "stouffer", 1e5) }
func BenchmarkLogit100000(b *testing.B)    { benchmark(b, "logit", 1e5) }
func BenchmarkCauchy100000(b *testing.B)   { benchmark(b, "cauchy", 1e5) }
func BenchmarkHarmonic100000(b *testing.B) { benchmark(b, "harmonic", 1e5) }
func BenchmarkEdgington20000(b *testing.B) { benchmark(b, "edgington", 20000) }
