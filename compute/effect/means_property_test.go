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

// TestPermutationBruteForce goes through all relabellings of the shifted
// data, with ties among the values.
func TestPermutationBruteForce(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for range 30 {
		n1, n2 := 1+r.IntN(5), 1+r.IntN(5)
		if n1+n2 < 3 {
			continue
		}
		x, y := make([]float64, n1), make([]float64, n2)
		for i := range x {
			x[i] = float64(r.IntN(8))
		}
		for i := range y {
			y[i] = float64(r.IntN(8))
		}
		in := Input{First: Group{Values: x}, Second: Group{Values: y}}
		inf, bad := Analyse("mean-difference", "permutation", in)
		if bad != nil {
			continue // all values alike
		}
		for _, c := range []float64{-2, -0.5, 0, 1, 1.25, 3} {
			up, down, m := relabelled(x, y, c)
			at := inf.Method.Test(c)
			within(t, fmt.Sprintf("p-up at %v of %v %v", c, x, y), at.Up.P, up/m, 1e-15)
			within(t, fmt.Sprintf("p-down at %v of %v %v", c, x, y), at.Down.P, down/m, 1e-15)
		}
	}
}

// relabelled counts the relabellings of x - c and y whose difference of means
// is at least, and at most, the observed one.
func relabelled(x, y []float64, c float64) (up, down, all float64) {
	z := slices.Clone(y)
	observed := 0.0
	for _, v := range x {
		z = append(z, v-c)
		observed += (v - c) / float64(len(x))
	}
	total := 0.0
	for _, v := range z {
		total += v
	}
	for _, v := range y {
		observed -= v / float64(len(y))
	}
	for set := range 1 << len(z) {
		count, sum := 0, 0.0
		for i, v := range z {
			if set>>i&1 == 1 {
				count++
				sum += v
			}
		}
		if count != len(x) {
			continue
		}
		d := sum/float64(len(x)) - (total-sum)/float64(len(y))
		all++
		if d >= observed-1e-9 {
			up++
		}
		if d <= observed+1e-9 {
			down++
		}
	}
	return up, down, all
}

// TestRandomPermutations: beyond the exact size the drawn selections give
// nearly the t test's p for normal data, the same bits for the same seed, and
// a note.
func TestRandomPermutations(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	in := Input{First: Group{Values: draws(r, 40, 1, 1)}, Second: Group{Values: draws(r, 30, 0.6, 1)}, Seed: 5, A: 0.025}
	for _, c := range []struct {
		measure, plain string
		in             Input
	}{
		{"mean-difference", "pooled-variance", in},
		{"mean-difference", "pooled-variance", Input{First: in.Second, Second: in.First, Seed: 5, A: 0.025}},
		{"mean", "t", Input{Sample: in.First, Seed: 5, A: 0.025}},
	} {
		inf, plain := analysed(t, c.measure, "permutation", c.in), analysed(t, c.measure, c.plain, c.in)
		hasNote(t, inf, "S205", true)
		for _, q := range []float64{0.4, 0.7} {
			p := plain.Method.Test(q).Up.P
			within(t, c.measure, inf.Method.Test(q).Up.P, p, 0.005+5*math.Sqrt(p/1e5))
		}
		again := analysed(t, c.measure, "permutation", c.in)
		if inf.Method.Test(0.3) != again.Method.Test(0.3) {
			t.Errorf("%s: the same seed gives other selections", c.measure)
		}
		other := c.in
		other.Seed = 6
		if inf.Method.(*Permutation).nulls[50000] == analysed(t, c.measure, "permutation", other).Method.(*Permutation).nulls[50000] {
			t.Errorf("%s: another seed gives the same selections", c.measure)
		}
	}
}

// TestTooFewSelections: with 6 selections no limit exists at 0.025.
func TestTooFewSelections(t *testing.T) {
	inf := analysed(t, "mean-difference", "permutation", Input{First: Group{Values: []float64{1, 2}}, Second: Group{Values: []float64{5, 7}}, A: 0.025})
	low, high := inf.Method.Limits(0.025)
	if !math.IsInf(low, -1) || !math.IsInf(high, 1) {
		t.Errorf("limits %v, %v", low, high)
	}
	hasNote(t, inf, "S205", true)
	near(t, "smallest p", inf.Method.Test(100).Down.P, 1./6, 1e-15)
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

// TestRandomInputs: whatever the numbers, nothing panics and nothing is NaN.
func TestRandomInputs(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 14))
	odd := []float64{0, 1, 2, 3, -1, 0.5, 1e-300, 1e300, 1e9, -1e9, 17, 100, math.Inf(1), math.Inf(-1), math.NaN()}
	pick := func() float64 { return odd[r.IntN(len(odd))] }
	group := func() Group {
		g := Group{N: pick(), Mean: pick(), SD: pick(), LogMean: pick(), LogSD: pick()}
		if r.IntN(3) == 0 {
			g.Values = make([]float64, r.IntN(5))
			for i := range g.Values {
				g.Values[i] = pick()
			}
		}
		return g
	}
	some := func() result.Opt { return result.Opt{V: pick(), OK: r.IntN(2) == 0} }
	computed := 0
	for range 1200 {
		in := Input{First: group(), Second: group(), Sample: group(), DesignEffect: []float64{1, 1, 2.5, pick()}[r.IntN(4)],
			SystematicU: []float64{0, 0, pick()}[r.IntN(3)], A: 0.025}
		in.Pairs = Pairs{N: pick(), Mean: pick(), SD: pick(), FirstSD: pick(), SecondSD: pick(), R: pick(), HasParts: r.IntN(2) == 0}
		if r.IntN(3) == 0 {
			n := r.IntN(9)
			for i := range n {
				in.Value = append(in.Value, pick())
				in.Group = append(in.Group, uint8(r.IntN(2)))
				in.Subject = append(in.Subject, int32(i/2))
				in.Period = append(in.Period, uint8(i%2+1))
				in.Sequence = append(in.Sequence, uint8(i/2%2))
			}
			in.Crossover = r.IntN(2) == 0
		}
		if r.IntN(4) == 0 {
			in.Given = &Given{Estimate: pick(), SE: some(), DF: some(), Low: some(), High: some(), Level: result.Some(0.95)}
		}
		if in.Given != nil {
			for _, m := range record.Measures {
				if inf, bad := Analyse(m.Word, "", in); bad == nil {
					neverNaN(t, "given "+m.Word, inf, odd)
				}
			}
		}
		for measure, methods := range means {
			for method := range methods {
				inf, bad := Analyse(measure, method, in)
				if (inf == nil) == (bad == nil) {
					t.Fatalf("%s %s: inference %v and problem %v", measure, method, inf, bad)
				}
				if bad != nil {
					continue
				}
				computed++
				neverNaN(t, measure+" "+method, inf, odd)
			}
		}
		if t.Failed() {
			t.Fatalf("input %+v", in)
		}
	}
	if computed < 300 {
		t.Errorf("only %d of the random inputs could be computed", computed)
	}
}

// neverNaN looks at every number of an inference and its tests.
func neverNaN(t reporter, what string, inf *Inference, at []float64) {
	t.Helper()
	for _, x := range []float64{inf.Estimate, inf.SE.V, inf.DF.V, inf.Y.V, inf.V.V, inf.N} {
		if math.IsNaN(x) {
			t.Errorf("%s: NaN in %+v", what, inf)
		}
	}
	for _, c := range inf.Checks {
		for _, s := range c.Shows {
			if math.IsNaN(s.Value) || math.IsInf(s.Value, 0) {
				t.Errorf("%s: %s shows %v", what, s.What, s.Value)
			}
		}
	}
	for _, c := range at {
		sane(t, fmt.Sprintf("%s at %g (%+v)", what, c, inf.Method), inf.Method.Test(c))
	}
	for _, a := range []float64{0, 0.025, 0.9, 1} {
		if low, high := inf.Method.Limits(a); math.IsNaN(low) || math.IsNaN(high) {
			t.Errorf("%s: limits %v, %v at %g (%+v)", what, low, high, a, inf.Method)
		}
	}
}
