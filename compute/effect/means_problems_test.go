package effect

import (
	"math"
	"slices"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// TestProblems: what cannot be computed says why.
func TestProblems(t *testing.T) {
	ok, none := Group{N: 5, Mean: 3, SD: 1, LogMean: 1, LogSD: 0.2}, Group{}
	one, flat := Group{N: 1, Mean: 3, LogMean: 1}, Group{N: 5, Mean: 3, LogMean: 1}
	negative := Group{N: 5, Mean: -3, SD: 1}
	columns := func(x ...float64) Input {
		return Input{Value: []float64{1, 2, 4, 3, 7, 5}, Group: []uint8{0, 0, 0, 1, 1, 1}, Covariates: []Covariate{{Name: "dose", Values: x}}}
	}
	constantResidual := columns(1, 2, 3, 5, 6, 8)
	constantResidual.Value = []float64{2, 4, 6, 20, 22, 26}
	single := Input{Value: []float64{9, 2, 4, 3, 7, 5}, Group: []uint8{0, 1, 1, 1, 1, 1}}
	for _, c := range []struct {
		code, measure, method string
		in                    Input
	}{
		{"S104", "no-such-measure", "", Input{}},
		{"S104", "mean", "welch", Input{Sample: ok}},
		{"S104", "hazard-ratio", "", Input{}},
		{"S101", "mean", "t", Input{Sample: one}},
		{"S101", "mean", "t", Input{Sample: none}},
		{"S102", "mean", "t", Input{Sample: flat}},
		{"S101", "mean", "t", Input{Sample: ok, DesignEffect: 6}},
		{"S103", "mean", "t", Input{Sample: ok, DesignEffect: -1}},
		{"S103", "mean", "t", Input{Sample: ok, SystematicU: math.NaN()}},
		{"S103", "mean", "t", Input{Sample: Group{N: math.NaN(), Mean: 1, SD: 1}}},
		{"S103", "mean", "t", Input{Sample: Group{N: 5, Mean: math.Inf(1), SD: 1}}},
		{"S103", "mean", "t", Input{Sample: Group{N: 5, Mean: 1, SD: -1}}},
		{"S103", "mean", "t", Input{Sample: Group{Values: []float64{1, 2, math.NaN()}}}},
		{"S104", "mean", "permutation", Input{Sample: ok}},
		{"S102", "mean", "permutation", Input{Sample: Group{Values: []float64{2, 2, 2}}}},
		{"S101", "mean", "permutation", Input{Sample: Group{Values: []float64{2}}}},
		{"S104", "mean", "permutation", Input{Sample: Group{Values: []float64{2, 3}}, SystematicU: 1}},
		{"S104", "mean", "permutation", Input{Sample: Group{Values: []float64{2, 3}}, DesignEffect: 2}},
		{"S105", "mean", "permutation", Input{Sample: Group{Values: make([]float64, 10_001)}}},
		{"S101", "mean-difference", "welch", Input{First: ok, Second: one}},
		{"S101", "mean-difference", "welch", Input{First: one, Second: ok}},
		{"S102", "mean-difference", "welch", Input{First: flat, Second: flat}},
		{"S102", "mean-difference", "pooled-variance", Input{First: flat, Second: one}},
		{"S101", "mean-difference", "pooled-variance", Input{First: one, Second: one}},
		{"S101", "mean-difference", "pooled-variance", Input{First: none, Second: ok}},
		{"S112", "mean-difference", "welch", Input{First: ok, Second: ok, Strata: []int32{1}}},
		{"S112", "mean-difference", "permutation", Input{First: ok, Second: ok, Crossover: true}},
		{"S104", "mean-difference", "permutation", Input{First: ok, Second: ok}},
		{"S102", "mean-difference", "permutation", Input{First: Group{Values: []float64{1, 1}}, Second: Group{Values: []float64{1}}}},
		{"S101", "mean-difference", "permutation", Input{First: Group{Values: []float64{1}}, Second: Group{Values: []float64{2}}}},
		{"S105", "mean-difference", "permutation", Input{First: Group{Values: make([]float64, 9000)}, Second: Group{Values: make([]float64, 1001)}}},
		{"S102", "paired-mean-difference", "t", Input{Pairs: Pairs{N: 9, FirstSD: 2, SecondSD: 2, R: 1, HasParts: true}}},
		{"S103", "paired-mean-difference", "t", Input{Pairs: Pairs{N: 9, FirstSD: 2, SecondSD: 2, R: 1.1, HasParts: true}}},
		{"S101", "standardized-mean-difference", "", Input{First: Group{N: 2, Mean: 1, SD: 1}, Second: Group{N: 2, SD: 1}}},
		{"S104", "standardized-mean-difference", "", Input{First: ok, Second: ok, SystematicU: 1}},
		{"S103", "ratio-of-means", "fieller", Input{First: negative, Second: ok}},
		{"S103", "ratio-of-means", "log-delta", Input{First: ok, Second: negative}},
		{"S104", "ratio-of-means", "fieller", Input{First: ok, Second: ok, SystematicU: 0.1}},
		{"S103", "geometric-mean-ratio", "welch", Input{First: Group{Values: []float64{1, 2, 0}}, Second: Group{Values: []float64{1, 2}}}},
		{"S103", "geometric-mean-ratio", "linear", Input{Value: []float64{1, 0, 2}, Group: []uint8{0, 1, 1}}},
		{"S107", "mean-difference", "linear", columns(1, 1, 1, 1, 1, 1)},
		{"S107", "mean-difference", "linear", columns(1, 1, 1, 2, 2, 2)},
		{"S102", "mean-difference", "linear", constantResidual},
		{"S101", "mean-difference", "linear-hc3", single},
		{"S104", "mean-difference", "linear", Input{First: ok, Second: ok}},
		{"S104", "mean-difference", "linear", columns(1, 2)},
		{"S101", "mean-difference", "linear", Input{Value: []float64{1, 2}, Group: []uint8{0, 1}}},
		{"S101", "mean-difference", "linear", Input{Value: []float64{1, 2, 3}, Group: []uint8{1, 1, 1}}},
		{"S104", "mean-difference", "welch", Input{First: ok, Second: ok, Crossover: true}},
		{"S101", "mean-difference", "welch", Input{Crossover: true, Value: []float64{1, 2}, Subject: []int32{0, 0}, Period: []uint8{1, 2}, Sequence: []uint8{0, 0}}},
		{"S113", "estimate", "", Input{}},
		{"S113", "estimate", "", Input{Given: &Given{Estimate: 1}}},
		{"S113", "estimate", "", Input{Given: &Given{Estimate: 1, Low: result.Some(0), High: result.Some(2)}}},
		{"S104", "estimate", "t", Input{Given: &Given{Estimate: 1, SE: result.Some(1)}}},
		{"S104", "mean-difference", "score", Input{Given: &Given{Estimate: 1, SE: result.Some(1)}}},
		{"S102", "estimate", "", Input{Given: &Given{Estimate: 1, SE: result.Some(0)}}},
		{"S103", "ratio-estimate", "", Input{Given: &Given{Estimate: 0, SE: result.Some(1)}}},
		{"S103", "proportion", "", Input{Given: &Given{Estimate: 1, SE: result.Some(1)}}},
		{"S103", "ratio-estimate", "", Input{Given: &Given{Estimate: 2, Low: result.Some(0), High: result.Some(5), Level: result.Some(0.95)}}},
		{"S103", "estimate", "", Input{Given: &Given{Estimate: 2, Low: result.Some(3), High: result.Some(5), Level: result.Some(0.95)}}},
		{"S103", "estimate", "", Input{Given: &Given{Estimate: 2, SE: result.Some(1), DF: result.Some(0)}}},
	} {
		refused(t, c.code, c.measure, c.method, c.in)
	}
}

// TestCollinearNames: the problem names the column.
func TestCollinearNames(t *testing.T) {
	in := Input{Value: []float64{1, 2, 4, 3, 7, 5, 8, 2}, Group: []uint8{0, 0, 0, 0, 1, 1, 1, 1}, Covariates: []Covariate{
		{Name: "dose", Values: []float64{1, 2, 3, 4, 5, 6, 7, 9}},
		{Name: "twice", Values: []float64{2.5, 4.5, 6.5, 8.5, 10.5, 12.5, 14.5, 18.5}},
	}}
	_, bad := Analyse("mean-difference", "linear", in)
	if bad == nil || bad.Code != "S107" || !slices.Contains(bad.Args, any("twice")) {
		t.Errorf("problem %+v", bad)
	}
	// A covariate in very small units is no reason.
	tiny := []float64{3e-13, 1e-13, 4e-13, 1e-13, 5e-13, 9e-13, 2e-13, 6e-13}
	in.Covariates = []Covariate{{Name: "tiny", Values: tiny}}
	small := analysed(t, "mean-difference", "linear", in)
	large := make([]float64, len(tiny))
	for i, v := range tiny {
		large[i] = v * 1e20
	}
	in.Covariates = []Covariate{{Name: "large", Values: large}}
	near(t, "estimate", analysed(t, "mean-difference", "linear", in).Estimate, small.Estimate, 1e-12)
}

// TestStrataOnce: strata that are also handed over as a covariate enter once.
func TestStrataOnce(t *testing.T) {
	in := Input{Value: []float64{1, 2, 4, 3, 7, 5, 8, 2}, Group: []uint8{0, 1, 0, 1, 0, 1, 0, 1}, Strata: []int32{0, 0, 0, 1, 1, 1, 2, 2}, StrataCount: 3}
	alone := analysed(t, "mean-difference", "linear", in)
	in.Covariates = []Covariate{{Name: "site", Levels: []string{"a", "b", "c"}, Code: in.Strata}}
	both := analysed(t, "mean-difference", "linear", in)
	in.Strata = nil
	covariate := analysed(t, "mean-difference", "linear", in)
	if alone.Estimate != both.Estimate || alone.SE != covariate.SE || alone.DF.V != 4 {
		t.Errorf("%v, %v, %v", alone, both, covariate)
	}
}

// TestLinearAlone: without covariates the linear model is the pooled t test,
// and with HC3 the variance is sum e^2/(1-1/n)^2/n^2 of each group.
func TestLinearAlone(t *testing.T) {
	x, y := []float64{4.1, 5.3, 6.2, 5.9, 7.7}, []float64{3, 4.4, 2.7, 4.9}
	in := Input{Value: slices.Concat(x, y), Group: []uint8{0, 0, 0, 0, 0, 1, 1, 1, 1}}
	pooled := analysed(t, "mean-difference", "pooled-variance", Input{First: Group{Values: x}, Second: Group{Values: y}})
	linear := analysed(t, "mean-difference", "linear", in)
	near(t, "estimate", linear.Estimate, pooled.Estimate, 1e-14)
	near(t, "se", linear.SE.V, pooled.SE.V, 1e-14)
	if linear.DF != pooled.DF {
		t.Errorf("df %v, %v", linear.DF, pooled.DF)
	}
	v := 0.0
	for _, g := range [][]float64{x, y} {
		m := sampleOfValues(g, 1)
		v += m.moments.M2 / ((1 - 1/m.n) * (1 - 1/m.n)) / (m.n * m.n)
	}
	near(t, "HC3 se", analysed(t, "mean-difference", "linear-hc3", in).SE.V, math.Sqrt(v), 1e-13)
}

// TestLinearBlocks: rows beyond one block give what one large block gives,
// by the means of the groups adjusted for a covariate in closed form.
func TestLinearBlocks(t *testing.T) {
	const n = 2*blockRows + 137
	var in Input
	age := make([]float64, n)
	var sums [2]struct{ n, x, y float64 }
	for i := range n {
		g := uint8(i % 2)
		age[i] = float64((i*7919)%101) - 40
		v := 3 + 0.5*float64(1-g) + 0.25*age[i] + math.Sin(float64(i))
		in.Value = append(in.Value, v)
		in.Group = append(in.Group, g)
		sums[g].n++
		sums[g].x += age[i]
		sums[g].y += v
	}
	var sxx, sxy float64
	for i := range n {
		s := sums[in.Group[i]]
		dx, dy := age[i]-s.x/s.n, in.Value[i]-s.y/s.n
		sxx += dx * dx
		sxy += dx * dy
	}
	slope := sxy / sxx
	want := sums[0].y/sums[0].n - sums[1].y/sums[1].n - slope*(sums[0].x/sums[0].n-sums[1].x/sums[1].n)
	in.Covariates = []Covariate{{Name: "age", Values: age}}
	near(t, "estimate", analysed(t, "mean-difference", "linear", in).Estimate, want, 1e-12)
}

// TestNotes: one group without spread, and what S203 does to the test.
func TestNotes(t *testing.T) {
	flat, ok := Group{N: 4, Mean: 2}, Group{N: 6, Mean: 3, SD: 1.5}
	inf := analysed(t, "mean-difference", "welch", Input{First: flat, Second: ok})
	hasNote(t, inf, "S203", true)
	if inf.DF.V != 5 {
		t.Errorf("df %v, want 5", inf.DF.V)
	}
	hasNote(t, analysed(t, "mean-difference", "welch", Input{First: ok, Second: ok}), "S203", false)
	// n = 2 in both groups, and 1 against 2 with one variance.
	two := Group{N: 2, Mean: 3, SD: 1}
	if inf := analysed(t, "mean-difference", "welch", Input{First: two, Second: two}); inf.DF.V != 2 {
		t.Errorf("df %v, want 2", inf.DF.V)
	}
	if inf := analysed(t, "mean-difference", "pooled-variance", Input{First: Group{N: 1, Mean: 5}, Second: two}); inf.DF.V != 1 {
		t.Errorf("df %v, want 1", inf.DF.V)
	}
}

// TestGivenNotes: asymmetric intervals and methods that a given effect cannot
// use are told.
func TestGivenNotes(t *testing.T) {
	interval := func(e, low, high float64) Input {
		return Input{Given: &Given{Estimate: e, Low: result.Some(low), High: result.Some(high), Level: result.Some(0.95)}}
	}
	hasNote(t, analysed(t, "estimate", "", interval(1, 0, 2)), "S207", false)
	hasNote(t, analysed(t, "estimate", "", interval(1.04, 0, 2)), "S207", false)
	hasNote(t, analysed(t, "estimate", "", interval(1.06, 0, 2)), "S207", true)
	hasNote(t, analysed(t, "ratio-estimate", "", interval(1, 0.5, 2)), "S207", false)
	hasNote(t, analysed(t, "ratio-estimate", "", interval(1.25, 0.5, 2)), "S207", true)

	se := Input{Given: &Given{Estimate: 1, SE: result.Some(0.5)}}
	hasNote(t, analysed(t, "mean-difference", "", se), "S206", false)
	hasNote(t, analysed(t, "mean-difference", "permutation", se), "S206", true)
	se.Given.DF = result.Some(7)
	if inf := analysed(t, "estimate", "normal", se); inf.Word != "normal" || inf.DF.OK {
		t.Errorf("asked for normal: %+v", inf)
	}
	if inf := analysed(t, "estimate", "", se); inf.Word != "t" || inf.DF.V != 7 {
		t.Errorf("with df: %+v", inf)
	}
	// A systematic part on the effect's own scale is carried to the logit.
	share := analysed(t, "proportion", "", Input{Given: &Given{Estimate: 0.2, SE: result.Some(0.03)}, SystematicU: 0.04})
	near(t, "se", share.SE.V, 0.05, 1e-14)
	near(t, "v", share.V.V, 0.05*0.05/(0.16*0.16), 1e-13)
}

// TestMissingPeriods: subjects without both periods drop and are counted.
func TestMissingPeriods(t *testing.T) {
	in := Input{Crossover: true,
		Subject:  []int32{0, 0, 1, 1, 2, 2, 3, 3, 4, 5, 5, 6, 6},
		Period:   []uint8{1, 2, 2, 1, 1, 2, 1, 2, 1, 1, 1, 1, 2},
		Sequence: []uint8{0, 0, 0, 0, 1, 1, 1, 1, 0, 1, 1, 0, 1},
		Value:    []float64{5, 3, 4, 7, 2, 6, 3, 5.5, 9, 1, 2, 3, 4}}
	inf := analysed(t, "mean-difference", "", in)
	if inf.N != 4 {
		t.Errorf("N = %v, want 4", inf.N)
	}
	near(t, "estimate", inf.Estimate, ((2.+3)/2-(-4.-2.5)/2)/2, 1e-15)
	dropped := -1.0
	for _, c := range inf.Checks {
		for _, s := range c.Shows {
			if s.What == "subjects without both periods" {
				dropped = s.Value
			}
		}
	}
	if dropped != 3 {
		t.Errorf("%v subjects dropped, want 3", dropped)
	}
}

// TestChecks: the shape numbers of a small sample, worked by hand.
func TestChecks(t *testing.T) {
	// 0 0 0 0 10: mean 2, m2 = 16, m3 = 96, m4 = 832.
	got := map[string]float64{}
	for _, s := range normality("first", 5, []float64{0, 0, 0, 0, 10}) {
		got[s.What] = s.Value
	}
	near(t, "n", got["n"], 5, 0)
	near(t, "skewness", got["skewness"], 1.5, 1e-14)
	near(t, "excess kurtosis", got["excess kurtosis"], 832./256-3, 1e-14)
	near(t, "outlying values of 1, 2, 3, 4, 5, 6, 7, 30, -20", float64(outlying([]float64{1, 2, 3, 4, 5, 6, 7, 30, -20})), 2, 0)
	near(t, "outlying values of 1 … 8", float64(outlying([]float64{8, 1, 7, 2, 6, 3, 5, 4})), 0, 0)
	if r := spreadRatio(3, 2); len(r) != 1 || r[0].Value != 1.5 {
		t.Errorf("spread ratio %v", r)
	}
	if r := spreadRatio(3, 0); r != nil {
		t.Errorf("spread ratio %v of a constant group", r)
	}
}

// TestEveryMethodIsInTheLanguage: the table names measures and methods that
// records can name, and every method of a measure of means.
func TestEveryMethodIsInTheLanguage(t *testing.T) {
	for measure, methods := range means {
		m := record.MeasureOf(measure)
		if m == nil {
			t.Errorf("no measure %q", measure)
			continue
		}
		for _, word := range m.Methods {
			if methods[word] == nil {
				t.Errorf("%s lacks %q", measure, word)
			}
		}
		if len(methods) != len(m.Methods) {
			t.Errorf("%s has %d methods, the language %d", measure, len(methods), len(m.Methods))
		}
	}
}

// TestInversion inverts tests with known limits: from an estimate at the end
// of the range, without a step, with a bounded range, and with two crossings.
func TestInversion(t *testing.T) {
	wald := Wald{Scale: record.Log, Y: math.Log(3), SE: 0.4, DF: 7, Low: 0, High: math.Inf(1)}
	wantLow, wantHigh := wald.Limits(0.025)
	for _, start := range []float64{3, 1e-8, 1e8, 0, math.Inf(1)} {
		for _, step := range []float64{0, 1e-6, 0.4, 50} {
			low, high := Inversion{Test: wald.Test, Scale: record.Log, Low: 0, High: math.Inf(1), Start: start, Step: step}.Limits(0.025)
			near(t, "low", low, wantLow, 1e-11)
			near(t, "high", high, wantHigh, 1e-11)
		}
	}
	// A range that ends before the crossing: the limit is its end.
	low, high := Inversion{Test: wald.Test, Scale: record.Log, Low: 2, High: 4, Start: 3, Step: 0.4}.Limits(0.025)
	if low != 2 || high != 4 {
		t.Errorf("limits %v, %v of a range from 2 to 4", low, high)
	}
	// p-down falls below a at 2, rises again between 4 and 5, and falls for
	// good at 7: the outermost crossing counts.
	hump := func(c float64) Test {
		z := c
		if c > 3 && c < 6 {
			z = 3 - 3*math.Sin((c-3)*math.Pi/3)
		}
		n := Wald{Scale: record.Identity, SE: 1, DF: math.Inf(1), Low: math.Inf(-1), High: math.Inf(1)}.Test(z)
		return n
	}
	_, high = Inversion{Test: hump, Scale: record.Identity, Low: math.Inf(-1), High: math.Inf(1), Start: 0, Step: 0.15}.Limits(0.0228)
	if !(high > 5 && high < 6) {
		t.Errorf("outermost crossing at %v", high)
	}
}
