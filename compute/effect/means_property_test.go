package effect

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"steelyard/compute/dist"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// draws is invented data: n normal values.
func draws(r *rand.Rand, n int, mean, sd float64) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = mean + sd*r.NormFloat64()
	}
	return x
}

// meansCase is one method on random data, for the laws below.
type meansCase struct {
	measure, method string
	in              Input
}

// meansCases makes data for every method of means, all values positive.
func meansCases(r *rand.Rand) []meansCase {
	n1, n2 := 4+r.IntN(12), 4+r.IntN(12)
	x, y := draws(r, n1, 20, 1+r.Float64()), draws(r, n2, 20+r.NormFloat64(), 1+r.Float64())
	groups := Input{First: Group{Values: x}, Second: Group{Values: y}, Seed: 7}
	rows := Input{Value: slices.Concat(x, y), Group: slices.Concat(make([]uint8, n1), slices.Repeat([]uint8{1}, n2)),
		Covariates: []Covariate{{Name: "age", Values: draws(r, n1+n2, 50, 10)}}}
	pairs := Input{Pairs: Pairs{First: x[:4], Second: y[:4]}}
	cross := Input{Crossover: true}
	for i := range 9 {
		cross.Subject = append(cross.Subject, int32(i), int32(i))
		cross.Value = append(cross.Value, draws(r, 2, 20, 1)...)
		cross.Period = append(cross.Period, 1, 2)
		cross.Sequence = append(cross.Sequence, uint8(i%2), uint8(i%2))
	}
	var out []meansCase
	for measure, methods := range means {
		for method := range methods {
			in := groups
			switch {
			case measure == "mean":
				in = Input{Sample: Group{Values: x}}
			case measure == "paired-mean-difference":
				in = pairs
			case method == "permutation": // few enough for every selection
				in = Input{First: Group{Values: x[:4]}, Second: Group{Values: y[:4]}}
			case method == "linear" || method == "linear-hc3":
				in = rows
			}
			out = append(out, meansCase{measure, method, in})
			if measure != "standardized-mean-difference" && measure != "ratio-of-means" && (method == "welch" || method == "pooled-variance") {
				out = append(out, meansCase{measure, method, cross})
			}
		}
	}
	return out
}

// TestIntervalIsTest: every limit is where its own test crosses, at random
// levels, and verdicts by test and by limit agree around it.
func TestIntervalIsTest(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 6 {
		for _, c := range meansCases(r) {
			inf := analysed(t, c.measure, c.method, c.in)
			for range 4 {
				a := math.Exp(-8 * r.Float64())
				invertsTest(t, c.measure+" "+c.method, inf.Method, min(a, 0.49), 1e-8)
			}
		}
	}
}

// TestSwappingGroups turns every effect round: p-values and limits change
// sides, differences their sign and ratios their inverse.
func TestSwappingGroups(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for _, c := range meansCases(r) {
		m := record.MeasureOf(c.measure)
		if c.measure == "mean" {
			continue
		}
		back := c.in
		back.First, back.Second = c.in.Second, c.in.First
		back.Pairs.First, back.Pairs.Second = c.in.Pairs.Second, c.in.Pairs.First
		back.Group, back.Sequence = flipped(c.in.Group), flipped(c.in.Sequence)
		there, again := analysed(t, c.measure, c.method, c.in), analysed(t, c.measure, c.method, back)
		turn := func(x float64) float64 { return -x }
		at := []float64{-0.7, 0, 1.1}
		if m.IsRatio() {
			turn = func(x float64) float64 { return 1 / x }
			at = []float64{0.8, 1, 1.2}
		}
		what := c.measure + " " + c.method
		within(t, what+" estimate", again.Estimate, turn(there.Estimate), 1e-12)
		for _, x := range at {
			within(t, what+" p", again.Method.Test(turn(x)).Down.P, there.Method.Test(x).Up.P, 1e-11)
		}
		l1, h1 := there.Method.Limits(0.03)
		l2, h2 := again.Method.Limits(0.03)
		within(t, what+" low", l2, turn(h1), 1e-9)
		within(t, what+" high", h2, turn(l1), 1e-9)
	}
}

func flipped(g []uint8) []uint8 {
	out := slices.Clone(g)
	for i := range out {
		out[i] = 1 - out[i]
	}
	return out
}

// TestChangingUnits multiplies every value by 1000 and, for differences, adds
// a constant to both groups: differences scale, ratios and standardized
// differences stay, p-values stay.
func TestChangingUnits(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	const k = 1000
	for _, c := range meansCases(r) {
		m := record.MeasureOf(c.measure)
		shift := 500.0
		if m.IsRatio() {
			shift = 0
		}
		change := func(x []float64) []float64 {
			if x == nil {
				return nil
			}
			out := make([]float64, len(x))
			for i := range x {
				out[i] = k*x[i] + shift
			}
			return out
		}
		moved := c.in
		moved.First.Values, moved.Second.Values, moved.Sample.Values = change(c.in.First.Values), change(c.in.Second.Values), change(c.in.Sample.Values)
		moved.Pairs.First, moved.Pairs.Second, moved.Value = change(c.in.Pairs.First), change(c.in.Pairs.Second), change(c.in.Value)
		to := func(x float64) float64 { return k * x }
		switch {
		case m.IsRatio() || c.measure == "standardized-mean-difference":
			to = func(x float64) float64 { return x }
		case c.measure == "mean":
			to = func(x float64) float64 { return k*x + shift }
		}
		what := c.measure + " " + c.method
		before, after := analysed(t, c.measure, c.method, c.in), analysed(t, c.measure, c.method, moved)
		near(t, what+" estimate", after.Estimate, to(before.Estimate), 1e-9)
		for _, x := range []float64{0.9, 1.2} {
			within(t, what+" p", after.Method.Test(to(x)).Up.P, before.Method.Test(x).Up.P, 1e-10)
		}
		l1, h1 := before.Method.Limits(0.03)
		l2, h2 := after.Method.Limits(0.03)
		near(t, what+" low", l2, to(l1), 1e-8)
		near(t, what+" high", h2, to(h1), 1e-8)
	}
}

// TestStandardizedAtZero: at no effect the noncentral test is the pooled t.
func TestStandardizedAtZero(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for range 20 {
		in := Input{First: Group{Values: draws(r, 3+r.IntN(9), 3, 2)}, Second: Group{Values: draws(r, 3+r.IntN(9), 4*r.NormFloat64(), 1)}}
		s := analysed(t, "standardized-mean-difference", "", in).Method.Test(0)
		p := analysed(t, "mean-difference", "pooled-variance", in).Method.Test(0)
		near(t, "p-up", s.Up.P, p.Up.P, 1e-11)
		near(t, "p-down", s.Down.P, p.Down.P, 1e-11)
	}
}

// TestStandardizedFar: where the leading exponent stands for the integral,
// it is what the integral would give to a part in a thousand.
func TestStandardizedFar(t *testing.T) {
	for _, c := range []struct{ t, nu, delta float64 }{
		{1, 3, 250}, {40, 1e6, 245}, {10, 1000, -240}, {30, 1000, -300}, {-5, 50, 220},
	} {
		got := NoncentralT{T: c.t, DF: c.nu, Root: 1}.Test(c.delta).Up
		want := dist.NoncentralTUpper(c.t, c.nu, c.delta)
		near(t, fmt.Sprintf("%+v ln p", c), min(got.LnP, got.LnQ), min(want.LnP, want.LnQ), 1.5e-3)
		if got.P != want.P || got.Q != want.Q {
			t.Errorf("%+v: %v, integral %v", c, got, want)
		}
		if !(min(got.LnP, got.LnQ) < -farExponent) {
			t.Errorf("%+v: is not far", c)
		}
	}
}

// TestStandardizedVariance: over simulated data v is on average the variance
// of g.
func TestStandardizedVariance(t *testing.T) {
	r := rand.New(rand.NewPCG(15, 16))
	const rounds = 40_000
	var sum, squares, v float64
	for range rounds {
		x, y := draws(r, 6, 0.9, 1), draws(r, 9, 0, 1)
		inf := analysed(t, "standardized-mean-difference", "", Input{First: Group{Values: x}, Second: Group{Values: y}})
		sum += inf.Estimate
		squares += inf.Estimate * inf.Estimate
		v += inf.V.V
	}
	mean := sum / rounds
	within(t, "mean of g", mean, 0.9, 0.01)
	near(t, "mean of v", v/rounds, squares/rounds-mean*mean, 0.025)
}

// TestFiellerAtOne: at a ratio of 1 the statistic is Welch's at no difference.
func TestFiellerAtOne(t *testing.T) {
	in := Input{First: Group{N: 9, Mean: 5, SD: 2}, Second: Group{N: 14, Mean: 3, SD: 1.4}}
	f := analysed(t, "ratio-of-means", "fieller", in).Method.Test(1)
	w := analysed(t, "mean-difference", "welch", in).Method.Test(0)
	near(t, "t", f.Value, w.Value, 1e-14)
	near(t, "df", f.DF, w.DF, 1e-14)
	near(t, "p", f.Up.P, w.Up.P, 1e-13)
}

// TestFiellerWithoutLimit: a denominator that is not clearly positive has no
// upper limit, a numerator no lower one, and the note says so.
func TestFiellerWithoutLimit(t *testing.T) {
	weak := Group{N: 6, Mean: 1, SD: 2}
	firm := Group{N: 6, Mean: 5, SD: 1}
	inf := analysed(t, "ratio-of-means", "fieller", Input{First: firm, Second: weak, A: 0.025})
	low, high := inf.Method.Limits(0.025)
	if !math.IsInf(high, 1) || !(low > 0) {
		t.Errorf("limits %v, %v", low, high)
	}
	hasNote(t, inf, "S201", true)
	if p := inf.Method.Test(math.Inf(1)).Down.P; !(p > 0.025) {
		t.Errorf("an infinite ratio has p %v", p)
	}
	near(t, "p at infinity", inf.Method.Test(math.Inf(1)).Down.P, dist.TUpper(1/(2/math.Sqrt(6)), 5).P, 1e-12)
	inf = analysed(t, "ratio-of-means", "fieller", Input{First: weak, Second: firm, A: 0.025})
	if low, _ := inf.Method.Limits(0.025); low != 0 {
		t.Errorf("lower limit %v, want 0", low)
	}
	hasNote(t, inf, "S201", false)
}

// TestFarEffects: an effect 1e9 standard errors away and p-values far below
// 1e-300 keep their logarithm and their limits.
func TestFarEffects(t *testing.T) {
	for _, c := range []meansCase{
		{"mean-difference", "welch", Input{First: Group{N: 400, Mean: 1e9, SD: 14}, Second: Group{N: 400, Mean: 0, SD: 14}}},
		{"mean-difference", "pooled-variance", Input{First: Group{N: 1e6, Mean: 1e9, SD: 700}, Second: Group{N: 1e6, Mean: 0, SD: 700}}},
		{"mean", "t", Input{Sample: Group{N: 1e6, Mean: 1e9, SD: 1000}}},
		{"geometric-mean-ratio", "welch", Input{First: Group{N: 1e6, LogMean: 300, LogSD: 1e-4}, Second: Group{N: 1e6, LogMean: 0, LogSD: 1e-4}}},
		{"ratio-of-means", "fieller", Input{First: Group{N: 1e6, Mean: 1e9, SD: 1000}, Second: Group{N: 1e6, Mean: 2, SD: 1e-6}}},
		{"standardized-mean-difference", "", Input{First: Group{N: 2000, Mean: 70, SD: 1}, Second: Group{N: 2000, Mean: 0, SD: 1}}},
		{"estimate", "", Input{Given: &Given{Estimate: 1e9, SE: result.Some(1)}}},
	} {
		inf := analysed(t, c.measure, c.method, c.in)
		null := record.MeasureOf(c.measure)
		at := inf.Method.Test(0)
		if null.IsRatio() {
			at = inf.Method.Test(1)
		}
		what := c.measure + " " + c.method
		sane(t, what, at)
		if !(at.Up.LnP < math.Log(1e-300)) || math.IsInf(at.Up.LnP, 0) {
			t.Errorf("%s: ln p-up %v", what, at.Up.LnP)
		}
		low, high := inf.Method.Limits(0.025)
		if !(low < inf.Estimate && inf.Estimate < high) && c.measure != "standardized-mean-difference" {
			t.Errorf("%s: %v outside %v to %v", what, inf.Estimate, low, high)
		}
	}
}

// TestLimitsFarOut: limits at an error of 1e-300 invert their tests too.
func TestLimitsFarOut(t *testing.T) {
	in := Input{First: Group{N: 500, Mean: 100, SD: 3}, Second: Group{N: 700, Mean: 99, SD: 4}}
	for _, c := range []meansCase{{"mean-difference", "welch", in}, {"mean-difference", "pooled-variance", in},
		{"ratio-of-means", "fieller", in}, {"ratio-of-means", "log-delta", in}, {"standardized-mean-difference", "noncentral-t", in}} {
		inf := analysed(t, c.measure, c.method, c.in)
		for _, a := range []float64{1e-300, 1e-50, 1e-5} {
			invertsTest(t, c.measure+" "+c.method, inf.Method, a, 1e-8)
		}
	}
}
