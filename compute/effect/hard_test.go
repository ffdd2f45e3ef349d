package effect

import (
	"fmt"
	"math"
	"testing"

	"steelyard/compute/result"
)

// hardValues are samples that break careless code: few, tied, constant, far
// apart, huge and tiny.
func hardValues() map[string][]float64 {
	many := make([]float64, 300)
	for i := range many {
		many[i] = float64(i % 2)
	}
	return map[string][]float64{
		"none":     nil,
		"one":      {3},
		"two":      {1, 2},
		"twins":    {2, 2},
		"constant": {5, 5, 5, 5, 5},
		"binary":   {0, 1, 1, 0, 1, 0, 0},
		"binary+":  many,
		"ramp":     {1, 2, 3, 4, 5, 6, 7, 8, 9},
		"down":     {9, 8, 7, 6, 5, 4, 3, 2, 1},
		"far":      {1e9, 1e9 + 1, 1e9 + 2, 1e9 + 3, 1e9 + 4},
		"huge":     {1e99, -1e99, 2e99, 3e98},
		"beyond":   {1e308, -1e308, 1.7e308, 3},
		"tiny":     {1e-300, 2e-300, -3e-300, 5e-301},
		"least":    {5e-324, 0, 1e-323, -5e-324},
		"outlier":  {0.1, 0.2, 0.15, 0.12, 1e15},
		"negzero":  {0, math.Copysign(0, -1), 0, 1},
		"nan":      {1, math.NaN(), 2},
		"inf":      {1, math.Inf(1), 2},
	}
}

// hardNulls are values at which every test must have an answer.
var hardNulls = []float64{0, 0.5, 1, -1, 2, 1e-300, 1e300, -1e300, 1e9, 0.999999999999, math.Inf(1), math.Inf(-1)}

// noNaN demands of an inference that nothing in it is NaN, every test has
// tails that belong together, and limits are in order.
func noNaN(t reporter, what string, m *Inference) {
	t.Helper()
	if math.IsNaN(m.Estimate) || m.Method == nil {
		t.Errorf("%s: estimate %v", what, m.Estimate)
		return
	}
	for name, o := range map[string]result.Opt{"se": m.SE, "df": m.DF, "y": m.Y, "v": m.V} {
		if o.OK && (math.IsNaN(o.V) || o.V < 0 && name != "y") {
			t.Errorf("%s: %s is %v", what, name, o.V)
		}
	}
	for _, c := range hardNulls {
		at := m.Method.Test(c)
		if at.Step || at.Kind == "exact" { // tails of steps overlap
			for _, p := range []float64{at.Up.P, at.Down.P} {
				if !(p >= 0 && p <= 1) {
					t.Errorf("%s at %v: p %v", what, c, p)
				}
			}
			continue
		}
		sane(t, fmt.Sprintf("%s at %v", what, c), at)
	}
	levels := []float64{0.025, 0.4, 1e-12, 1e-300}
	if m.Costly {
		levels = levels[2:3] // 0.025 has been asked for already
	}
	for _, a := range levels {
		low, high := m.Method.Limits(a)
		if math.IsNaN(low) || math.IsNaN(high) || low > high {
			t.Errorf("%s: limits at %v are %v, %v", what, a, low, high)
		}
	}
	for _, c := range m.Checks {
		for _, s := range c.Shows {
			if math.IsNaN(s.Value) {
				t.Errorf("%s: %s shows %s = NaN", what, c.Assumption, s.What)
			}
		}
	}
}

// Every method on values answers or refuses: no panic, no NaN, and a refusal
// has a code. Every pair of hard samples is tried in both groups and as pairs.
func TestHardValues(t *testing.T) {
	all := hardValues()
	for name, x := range all {
		for other, y := range all {
			in := Input{First: groupOfHard(x), Second: groupOfHard(y), Sample: groupOfHard(x), Spec: [2]float64{-1, 2}, A: 0.025, DesignEffect: 1}
			if n := min(len(x), len(y)); n > 0 {
				in.Pairs = hardPairs(x[:n], y[:n])
				in.Sample.R, in.Sample.N = in.Pairs.R, in.Pairs.N
			}
			for _, table := range []map[string]map[string]analysis{ranks, spread} {
				for measure, methods := range table {
					if oneSample := measure == "sd" || measure == "conforming-share"; name != other && (oneSample || measure == "agreement" && other != "ramp") {
						continue
					}
					for method := range methods {
						what := fmt.Sprintf("%s %s of %s and %s", method, measure, name, other)
						inf, bad := Analyse(measure, method, in)
						switch {
						case bad != nil && (bad.Code == "" || bad.Message == ""):
							t.Errorf("%s: refused without a reason", what)
						case bad == nil && (name == "nan" || name == "inf") && len(x) == len(y):
							if !isFinite(inf.Estimate) {
								t.Errorf("%s: %v", what, inf.Estimate)
							}
						case bad == nil:
							noNaN(t, what, inf)
						}
					}
				}
			}
		}
	}
}

func groupOfHard(x []float64) Group {
	if len(x) == 0 {
		return Group{}
	}
	return groupOfValues(x)
}

func hardPairs(x, y []float64) Pairs {
	p := Pairs{N: float64(len(x)), First: x, Second: y, HasParts: true}
	a, b, d := groupOfValues(x), groupOfValues(y), groupOfValues(differences(p))
	p.Mean, p.SD, p.FirstMean, p.FirstSD, p.SecondMean, p.SecondSD = d.Mean, d.SD, a.Mean, a.SD, b.Mean, b.SD
	if r := pearson(x, y); !math.IsNaN(r) {
		p.R = math.Max(-1, math.Min(1, r))
	}
	return p
}

// The same for summaries.
func TestHardSummaries(t *testing.T) {
	numbers := []float64{0, 1, 2, 3, 4, 1e6, 1e9, 0.5, -1, math.NaN(), math.Inf(1)}
	spreads := []float64{0, 1, 1e-300, 1e150, 1e308, -1, math.NaN(), 1e-9}
	relations := []float64{0, 1, -1, 0.5, 1 - 1e-16, -1 + 1e-15, 1e-300, math.NaN(), 2}
	try := func(what, measure, method string, in Input) {
		t.Helper()
		in.DesignEffect, in.A = 1, 0.025
		inf, bad := Analyse(measure, method, in)
		if bad == nil {
			noNaN(t, what, inf)
		} else if bad.Code == "" {
			t.Errorf("%s: refused without a reason", what)
		}
	}
	for _, n := range numbers {
		for _, s := range spreads {
			what := fmt.Sprintf("n %v sd %v", n, s)
			try(what, "sd", "chi-square", Input{Sample: Group{N: n, SD: s}})
			for _, s2 := range spreads {
				try(fmt.Sprint(what, " sd2 ", s2), "sd-ratio", "f", Input{First: Group{N: n, SD: s}, Second: Group{N: 5, SD: s2}})
				try(fmt.Sprint(what, " sd2 ", s2), "sd-ratio", "f", Input{First: Group{N: 5, SD: s}, Second: Group{N: n, SD: s2}})
			}
			for _, r := range relations {
				try(fmt.Sprint(what, " r ", r), "paired-sd-ratio", "pitman-morgan", Input{Pairs: Pairs{N: n, FirstSD: s, SecondSD: 2, R: r, HasParts: true}})
			}
			if n != 2 && n != 1e6 && n != 0 || s == 1e150 || s == 1e-9 {
				continue // like their neighbours, and each takes its time
			}
			for _, mean := range []float64{0, 1e9, math.NaN()} {
				for _, spec := range [][2]float64{{-1, 2}, {math.Inf(-1), 2}, {0, 1e-9}} {
					try(fmt.Sprint(what, " mean ", mean, spec), "conforming-share", "normal", Input{Sample: Group{N: n, Mean: mean, SD: s}, Spec: spec})
				}
			}
		}
		for _, r := range relations {
			what := fmt.Sprintf("n %v r %v", n, r)
			try(what, "correlation", "fisher-z", Input{Sample: Group{N: n, R: r}})
			try(what, "correlation", "exact", Input{Sample: Group{N: n, R: r}})
			try(what, "rank-correlation", "bonett-wright", Input{Sample: Group{N: n, R: r}})
		}
	}
}

func TestNoNaNCanFail(t *testing.T) {
	good := analysed(t, "sd", "", Input{Sample: Group{N: 9, SD: 2}})
	for name, spoil := range map[string]func(m *Inference){
		"estimate": func(m *Inference) { m.Estimate = math.NaN() },
		"se":       func(m *Inference) { m.SE = result.Some(math.NaN()) },
		"variance": func(m *Inference) { m.V = result.Some(-1) },
		"limits":   func(m *Inference) { m.Method = wrongLimits{m.Method, math.NaN()} },
		"shown":    func(m *Inference) { m.Checks = []result.Check{{Shows: []result.Shown{{Value: math.NaN()}}}} },
	} {
		m := *good
		spoil(&m)
		var c complaints
		if noNaN(&c, name, &m); len(c) == 0 {
			t.Errorf("a wrong %s passes", name)
		}
	}
	noNaN(t, "good", good)
}

// For two values the chance that the share is at most c is in proportion to a
// small c: digits of 1 - c must not matter.
func TestSmallSharesKeepTheirDigits(t *testing.T) {
	inf := analysed(t, "conforming-share", "normal", Input{Sample: Group{N: 2, SD: 0.001}, Spec: [2]float64{-1, 2}})
	at := inf.Method.Test(1e-40).Up.P / 1e-40
	for _, c := range []float64{1e-9, 1e-15, 1e-100, 1e-140} {
		near(t, fmt.Sprint("p-up over ", c), inf.Method.Test(c).Up.P/c, at, 1e-7)
	}
}

// A shift beyond which the values vanish leaves the count of ties running.
func TestShiftsThatSwallowTheValues(t *testing.T) {
	for _, method := range []string{"wilcoxon-exact", "wilcoxon-normal"} {
		inf := analysed(t, "median-shift", method, twoValues([]float64{1, 2, 2, 5}, []float64{0, 2, 3}))
		for _, c := range []float64{1e17, 1e300, -1e300} {
			at := inf.Method.Test(c)
			if up := c > 0; up != (at.Up.P > 0.9) || up != (at.Down.P < 0.1) {
				t.Errorf("%s at %g: %g, %g", method, c, at.Up.P, at.Down.P)
			}
		}
	}
}
