package effect

import (
	"fmt"
	"math"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// meansInput is the input of a row of testdata/reference/means.json.
type meansInput struct {
	Measure, Method  string
	First, Second    []float64
	Groups           []float64 // n, mean, sd of both groups
	Value, Covariate []float64
	Group            []uint8
	Site             []string
	Strata           []int32
	Subject          []int32
	Period, Sequence []uint8
	Given            *struct{ Estimate, SE, DF, Low, High, Level *float64 }
	U, Design        float64
	Nulls, Errors    []float64
}

func opt(x *float64) result.Opt {
	if x == nil {
		return result.Opt{}
	}
	return result.Some(*x)
}

// input turns the row into the numbers of a result entry.
func (m meansInput) input() Input {
	in := Input{DesignEffect: m.Design, SystematicU: m.U, Value: m.Value, Group: m.Group, Strata: m.Strata,
		Subject: m.Subject, Period: m.Period, Crossover: m.Period != nil}
	in.Sequence = m.Sequence
	if m.Strata != nil {
		in.StrataCount = 2
	}
	if m.Groups != nil {
		in.First = Group{N: m.Groups[0], Mean: m.Groups[1], SD: m.Groups[2]}
		in.Second = Group{N: m.Groups[3], Mean: m.Groups[4], SD: m.Groups[5]}
	}
	switch shape := record.MeasureOf(m.Measure).Shape; shape {
	case record.OneSample:
		in.Sample.Values = m.First
	case record.Paired:
		in.Pairs = Pairs{First: m.First, Second: m.Second}
	case record.TwoGroups, record.Given:
		if m.First != nil {
			in.First.Values, in.Second.Values = m.First, m.Second
		}
	}
	if m.Covariate != nil {
		in.Covariates = append(in.Covariates, Covariate{Name: "age", Values: m.Covariate})
	}
	if m.Site != nil {
		c := Covariate{Name: "site", Levels: []string{"east", "north", "south", "west"}} // no row is from the south
		code := map[string]int32{}
		for i, l := range c.Levels {
			code[l] = int32(i)
		}
		for _, s := range m.Site {
			c.Code = append(c.Code, code[s])
		}
		in.Covariates = append(in.Covariates, c)
	}
	if g := m.Given; g != nil {
		in.Given = &Given{Estimate: *g.Estimate, SE: opt(g.SE), DF: opt(g.DF), Low: opt(g.Low), High: opt(g.High), Level: opt(g.Level)}
	}
	return in
}

// TestMeansAgainstR compares estimates, both tails at several nulls and
// limits at several errors with base R (testdata/reference/means.json, made
// by means_rows.R).
func TestMeansAgainstR(t *testing.T) {
	for _, row := range values(t, "means.json") {
		t.Run(row.ID, func(t *testing.T) {
			var m meansInput
			row.input(t, &m)
			inf := analysed(t, m.Measure, m.Method, m.input())
			got := map[string]float64{"estimate": inf.Estimate, "se": inf.SE.V, "df": inf.DF.V}
			for i, c := range m.Nulls {
				at := inf.Method.Test(c)
				sane(t, fmt.Sprintf("null %g", c), at)
				got[fmt.Sprintf("lnup%d", i+1)] = at.Up.LnP
				got[fmt.Sprintf("lndown%d", i+1)] = at.Down.LnP
			}
			for i, a := range m.Errors {
				low, high := inf.Method.Limits(a)
				got[fmt.Sprintf("low%d", i+1)], got[fmt.Sprintf("high%d", i+1)] = low, high
				invertsTest(t, "limits", inf.Method, a, 1e-9)
			}
			for name := range row.Expected {
				v, ok := got[name]
				if !ok {
					t.Errorf("nothing was computed for %q", name)
					continue
				}
				row.check(t, name, v)
			}
		})
	}
}

// TestDesignCase is the example of the record's language with values worked
// out for the methods' description (a second implementation of each formula):
// n 24 and 24, means 11.92 and 12.10, sd 1.31 and 1.18, region 0.8.
func TestDesignCase(t *testing.T) {
	in := Input{First: Group{N: 24, Mean: 11.92, SD: 1.31}, Second: Group{N: 24, Mean: 12.10, SD: 1.18}}
	inf := analysed(t, "mean-difference", "", in)
	within(t, "df", inf.DF.V, 45.506534, 5e-7)
	// R 4.2.2: pt(0.62/se, df, lower = FALSE), 15 digits.
	near(t, "p-up at -0.8", inf.Method.Test(-0.8).Up.P, 0.0458621933878137, 1e-13)
	within(t, "p-down at 0.8", inf.Method.Test(0.8).Down.P, 0.0045698506, 5e-11)
	low, high := inf.Method.Limits(0.05)
	within(t, "low", low, -0.7842678, 5e-8)
	within(t, "high", high, 0.4242678, 5e-8)

	inf = analysed(t, "standardized-mean-difference", "", in)
	low, high = inf.Method.Limits(0.05)
	within(t, "SMD low", low, -0.6190703, 5e-8)
	within(t, "SMD high", high, 0.3318695, 5e-8)
	within(t, "d", inf.Estimate/HedgesJ(46), -0.1443817, 5e-8)

	inf = analysed(t, "ratio-of-means", "fieller", in)
	low, high = inf.Method.Limits(0.025)
	within(t, "Fieller low", low, 0.9271186, 5e-8)
	within(t, "Fieller high", high, 1.0462552, 5e-8)

	// First four x and y of the rank example.
	inf = analysed(t, "mean-difference", "permutation", Input{
		First:  Group{Values: []float64{4.1, 5.3, 6.2, 5.9}},
		Second: Group{Values: []float64{3.0, 4.4, 2.7, 4.9, 3.8}},
	})
	within(t, "permutation p-up at 0", inf.Method.Test(0).Up.P, 3.0/126, 1e-15)
	within(t, "permutation p-up at 0.5", inf.Method.Test(0.5).Up.P, 9.0/126, 1e-15)
	low, high = inf.Method.Limits(0.025)
	within(t, "permutation low", low, 0.05, 1e-12)
	within(t, "permutation high", high, 3.2, 1e-12)
}

// twoSided is min(1, 2 min(p-up, p-down)) at c.
func twoSided(m Method, c float64) float64 {
	at := m.Test(c)
	return min(1, 2*min(at.Up.P, at.Down.P))
}

// TestPublishedMeans compares with the literature; each row of published.json
// names its source.
func TestPublishedMeans(t *testing.T) {
	paired := func(id, file, first, second string) {
		row, d := published(t, id), readTable(t, file)
		inf := analysed(t, "paired-mean-difference", "t", Input{Pairs: Pairs{First: d.numbers(t, first), Second: d.numbers(t, second)}})
		low, high := inf.Method.Limits(0.025)
		got := map[string]float64{"estimate": inf.Estimate, "se": inf.SE.V, "t": inf.Method.Test(0).Value, "df": inf.DF.V,
			"p": twoSided(inf.Method, 0), "low": low, "high": high, "sd": inf.SE.V * math.Sqrt(inf.N)}
		for name := range row.Expected {
			row.check(t, name, got[name])
		}
		for _, name := range []string{"estimate", "se", "t", "p", "low", "high"} {
			row.second(t, name, got[name], 1e-8) // the recomputation's t quantile holds eight to ten digits
		}
	}
	paired("mean-sleep-paired", "sleep.csv", "drug2", "drug1")
	paired("mean-shoes-paired", "shoes.csv", "material_a", "material_b")
	paired("mean-virus-paired", "virus_lesions.csv", "prep1", "prep2")

	t.Run("sleep", func(t *testing.T) {
		row, d := published(t, "mean-sleep-welch"), readTable(t, "sleep.csv")
		inf := analysed(t, "mean-difference", "welch", Input{First: Group{Values: d.numbers(t, "drug1")}, Second: Group{Values: d.numbers(t, "drug2")}})
		low, high := inf.Method.Limits(0.025)
		row.check(t, "t", inf.Method.Test(0).Value)
		row.check(t, "df", inf.DF.V)
		row.check(t, "p", twoSided(inf.Method, 0))
		row.check(t, "low", low)
		row.check(t, "high", high)
	})
	t.Run("auto83b", func(t *testing.T) {
		row := published(t, "mean-auto83b")
		in := Input{First: Group{N: 249, Mean: 20.14458, SD: 6.4147}, Second: Group{N: 79, Mean: 30.48101, SD: 6.10771}}
		inf := analysed(t, "mean-difference", "pooled-variance", in)
		row.check(t, "sp", inf.SE.V/math.Sqrt(1./249+1./79))
		row.check(t, "t", inf.Method.Test(0).Value)
		row.check(t, "df", inf.DF.V)
		low, high := inf.Method.Limits(0.025)
		row.check(t, "t_crit", (high-low)/2/inf.SE.V)
		row.second(t, "p", twoSided(inf.Method, 0), 1e-11)
		inf = analysed(t, "mean-difference", "welch", in)
		row.check(t, "welch_t", inf.Method.Test(0).Value)
		row.check(t, "welch_df", inf.DF.V)
	})
	t.Run("tomato", func(t *testing.T) {
		row, d := published(t, "mean-tomato-two-sample"), readTable(t, "tomato.csv")
		in := Input{First: Group{Values: d.where(t, "yield", "fertilizer", "B")}, Second: Group{Values: d.where(t, "yield", "fertilizer", "A")}}
		inf := analysed(t, "mean-difference", "pooled-variance", in)
		row.check(t, "estimate", inf.Estimate)
		row.check(t, "df", inf.DF.V)
		row.check(t, "t", inf.Method.Test(0).Value)
		row.check(t, "p_one_sided", inf.Method.Test(0).Up.P)
		inf = analysed(t, "mean-difference", "permutation", in)
		row.check(t, "p_randomization", inf.Method.Test(0).Up.P)
		row.second(t, "p_randomization", inf.Method.Test(0).Up.P, 1e-15)
	})
	t.Run("particles", func(t *testing.T) {
		row := published(t, "mean-particles")
		var in struct{ Values []float64 }
		row.input(t, &in)
		inf := analysed(t, "mean", "t", Input{Sample: Group{Values: in.Values}})
		row.check(t, "mean", inf.Estimate)
		row.check(t, "sd", inf.SE.V*math.Sqrt(10))
		row.check(t, "t", inf.Method.Test(50).Value)
		low, high := inf.Method.Limits(0.025)
		row.check(t, "t_crit", (high-low)/2/inf.SE.V)
	})
	t.Run("skinfold", func(t *testing.T) {
		row, d := published(t, "gmr-skinfold"), readTable(t, "skinfold.csv")
		in := Input{First: Group{Values: d.where(t, "biceps_mm", "disease", "crohn")}, Second: Group{Values: d.where(t, "biceps_mm", "disease", "coeliac")}}
		raw := analysed(t, "mean-difference", "pooled-variance", in)
		row.check(t, "t_raw", raw.Method.Test(0).Value)
		inf := analysed(t, "geometric-mean-ratio", "pooled-variance", in)
		row.check(t, "t_log", inf.Method.Test(1).Value)
		row.check(t, "ratio", inf.Estimate)
		low, high := inf.Method.Limits(0.025)
		row.check(t, "ratio_low", low)
		row.check(t, "ratio_high", high)
		low, high = analysed(t, "geometric-mean-ratio", "welch", in).Method.Limits(0.025)
		row.second(t, "welch_ratio_low", low, 1e-12)
		row.second(t, "welch_ratio_high", high, 1e-12)
	})
}

// TestPublishedStandardized checks the ingredients that the book prints; its
// J is the approximation 1 - 3/(4 nu - 1), this package's the exact one, and
// its variance is the usual approximation, which is not compared.
func TestPublishedStandardized(t *testing.T) {
	row := published(t, "smd-borenstein-4")
	inf := analysed(t, "standardized-mean-difference", "", Input{First: Group{N: 50, Mean: 103, SD: 5.5}, Second: Group{N: 50, Mean: 100, SD: 4.5}})
	j := HedgesJ(98)
	row.second(t, "J_exact_gamma", j, 1e-13)
	row.check(t, "d", inf.Estimate/j)
	row.check(t, "g", inf.Estimate)
	// The printed variance is J^2 (1/n~ + d^2/(2N)), about 2 % below the
	// unbiased one, which TestStandardizedVariance checks.
	within(t, "variance", inf.V.V, row.Expected["var_g"].(float64), 8e-4)
}

func TestPublishedRatio(t *testing.T) {
	row := published(t, "lrr-borenstein-4")
	in := Input{First: Group{N: 10, Mean: 61.515, SD: 19.475}, Second: Group{N: 10, Mean: 51.015, SD: 19.925}}
	for _, method := range []string{"fieller", "log-delta"} {
		inf := analysed(t, "ratio-of-means", method, in)
		row.check(t, "ratio", inf.Estimate)
		row.check(t, "log_ratio", inf.Y.V)
		row.second(t, "var_separate_sd", inf.V.V, 1e-13)
		row.second(t, "se_separate_sd", inf.SE.V, 1e-13)
	}
}

// TestPublishedCrossover is the bioequivalence example of 24 volunteers.
func TestPublishedCrossover(t *testing.T) {
	row, d := published(t, "tost-chow-liu"), readTable(t, "crossover_auc.csv")
	seq, p1, p2 := d.text(t, "sequence"), d.numbers(t, "period1"), d.numbers(t, "period2")
	var in Input
	in.Crossover = true
	for i := range seq {
		s := uint8(0) // first group: the test product
		if seq[i] == "RT" {
			s = 1
		}
		in.Value = append(in.Value, p1[i], p2[i])
		in.Subject = append(in.Subject, int32(i), int32(i))
		in.Period = append(in.Period, 1, 2)
		in.Sequence = append(in.Sequence, s, s)
	}
	inf := analysed(t, "mean-difference", "", in)
	if inf.Word != "pooled-variance" {
		t.Errorf("a crossover used %q", inf.Word)
	}
	low, high := inf.Method.Limits(0.05)
	limit := 0.2 * 82.559375 // 20 % of the reference mean, recomputed there
	for name, got := range map[string]float64{
		"estimate": inf.Estimate, "se": inf.SE.V, "low90": low, "high90": high,
		"t_lower": inf.Method.Test(-limit).Value, "t_upper": inf.Method.Test(limit).Value,
		"t_crit": (high - low) / 2 / inf.SE.V,
	} {
		row.check(t, name, got)
		row.second(t, name, got, 1e-9)
	}
	low, high = analysed(t, "geometric-mean-ratio", "pooled-variance", in).Method.Limits(0.05)
	row.second(t, "log_low90_percent", 100*low, 1e-12)
	row.second(t, "log_high90_percent", 100*high, 1e-12)
}

// TestPublishedCovariance is the anorexia example: the treatment terms of the
// covariance model, one against the reference at a time with the other as a
// covariate.
func TestPublishedCovariance(t *testing.T) {
	row, d := published(t, "ancova-anorexia"), readTable(t, "anorexia.csv")
	treat, pre, post := d.text(t, "Treat"), d.numbers(t, "Prewt"), d.numbers(t, "Postwt")
	for _, term := range []struct{ level, other, name string }{
		{"Cont", "FT", "treat_cont"}, {"FT", "Cont", "treat_ft"},
	} {
		in := Input{Value: post, Covariates: []Covariate{{Name: "Prewt", Values: pre}, {Name: "other", Levels: []string{"no", "yes"}}}}
		for _, w := range treat {
			g, c := uint8(1), int32(0)
			if w == term.level {
				g = 0
			}
			if w == term.other {
				c = 1
			}
			in.Group = append(in.Group, g)
			in.Covariates[1].Code = append(in.Covariates[1].Code, c)
		}
		inf := analysed(t, "mean-difference", "", in)
		if inf.Word != "linear" {
			t.Errorf("covariates used %q", inf.Word)
		}
		row.check(t, term.name, inf.Estimate)
		row.check(t, "se_"+term.name, inf.SE.V)
		row.second(t, term.name, inf.Estimate, 1e-12)
		row.second(t, "se_"+term.name, inf.SE.V, 1e-12)
	}
}

// lastOf fits with the named column last and returns its coefficient and
// standard error in the column's own unit.
func lastOf(y []float64, columns [][]float64, last int) (b, se, sd float64) {
	cols := []column{{kind: intercept}}
	add := func(x []float64) float64 {
		mean, size := 0.0, 0.0
		for _, v := range x {
			mean += v / float64(len(x))
		}
		for _, v := range x {
			size += (v - mean) * (v - mean) / float64(len(x))
		}
		size = math.Sqrt(size)
		cols = append(cols, column{kind: numbers, values: x, mean: mean, size: size})
		return size
	}
	for i, x := range columns {
		if i != last {
			add(x)
		}
	}
	size := add(columns[last])
	t := leastSquares(y, cols)
	e, _, _ := t.residuals(y, cols)
	rss := 0.0
	for _, r := range e {
		rss += r * r
	}
	sd = math.Sqrt(rss / float64(len(y)-len(cols)))
	k := len(cols) - 1
	return t.z[k] / t.r[k][k] / size, sd / math.Abs(t.r[k][k]) / size, sd
}

// TestCertifiedRegression runs the least-squares kernel on the certified
// regressions of the Statistical Reference Datasets.
func TestCertifiedRegression(t *testing.T) {
	row, d := published(t, "nist-longley"), readTable(t, "nist_longley.csv")
	names := []string{"gnp_deflator", "gnp", "unemployed", "armed_forces", "population", "year"}
	var x [][]float64
	for _, n := range names {
		x = append(x, d.numbers(t, n))
	}
	names[0] = "deflator"
	for i, n := range names {
		b, se, sd := lastOf(d.numbers(t, "employed"), x, i)
		near(t, n, b, row.Expected[n].(float64), 1e-11)
		near(t, "se of "+n, se, row.Expected["se_"+n].(float64), 1e-11)
		near(t, "residual sd", sd, row.Expected["residual_sd"].(float64), 1e-11)
	}

	row = published(t, "nist-wampler1")
	y, powers := make([]float64, 21), make([][]float64, 5)
	for j := range powers {
		powers[j] = make([]float64, 21)
		for i := range 21 {
			powers[j][i] = math.Pow(float64(i), float64(j+1))
		}
	}
	for i := range 21 {
		y[i] = 1
		for j := range powers {
			y[i] += powers[j][i]
		}
	}
	for j := range powers {
		b, _, _ := lastOf(y, powers, j)
		near(t, fmt.Sprintf("Wampler1 b%d", j+1), b, row.Expected[fmt.Sprintf("b%d", j+1)].(float64), 1e-8)
	}
}
