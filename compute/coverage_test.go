package compute

import (
	"flag"
	"fmt"
	"hash/fnv"
	"math"
	"math/rand/v2"
	"os"
	"runtime"
	"strings"
	"sync"
	"testing"

	"steelyard/compute/combine"
	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/pool"
	"steelyard/compute/survival"
)

// replicates of the simulation; the table is written when they are given.
var replicates = flag.Int("replicates", 0, "replicates of BenchmarkCoverage, which then writes ../testdata/coverage.md")

// trialOf draws one data set and asks the method about the truth: whether each
// one-sided test at 0.025 wrongly excludes it.
type trialOf func(rng *rand.Rand) (up, down bool)

// scenario is one line of the table. Costly divides the replicates.
type scenario struct {
	measure, method, what string
	costly                int
	trial                 trialOf
}

const oneSide = 0.025

// at tests the truth; what cannot be computed excludes nothing.
func at(truth float64, run func() (*effect.Inference, *effect.Problem)) (up, down bool) {
	inf, bad := run()
	if bad != nil {
		return false, false
	}
	t := inf.Method.Test(truth)
	return t.Below(t.Up, oneSide), t.Below(t.Down, oneSide)
}

// scenarioTable adds scenarios of one measure for several methods on the same data.
type scenarioTable struct{ rows []scenario }

func (s *scenarioTable) add(measure, what string, costly int, truth float64, draw func(rng *rand.Rand) effect.Input, methods ...string) {
	for _, m := range methods {
		s.rows = append(s.rows, scenario{measure, m, what, costly, func(rng *rand.Rand) (bool, bool) {
			in := draw(rng)
			in.DesignEffect, in.A = 1, oneSide
			in.Seed = rng.Uint64()
			return at(truth, func() (*effect.Inference, *effect.Problem) { return effect.Analyse(measure, m, in) })
		}})
	}
}

func sample(n int, draw func() float64) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = draw()
	}
	return x
}

func normals(rng *rand.Rand, n int, mean, sd float64) []float64 {
	return sample(n, func() float64 { return mean + sd*rng.NormFloat64() })
}

func pairsFrom(x, y []float64) effect.Input {
	p := pairsOfData(x, y)
	return effect.Input{Pairs: p, Sample: effect.Group{N: p.N, R: p.R}}
}

func twoGroups(x, y []float64) effect.Input {
	return effect.Input{First: valueGroup(x), Second: valueGroup(y)}
}

func binomial(rng *rand.Rand, n int, p float64) (x float64) {
	for range n {
		if rng.Float64() < p {
			x++
		}
	}
	return x
}

func poisson(rng *rand.Rand, mu float64) float64 {
	x, s := 0.0, rng.ExpFloat64()
	for s < mu {
		x++
		s += rng.ExpFloat64()
	}
	return x
}

func events(rng *rand.Rand, n1, n2 int, p1, p2 float64) effect.Input {
	return effect.Input{First: effect.Group{N: float64(n1), Events: binomial(rng, n1, p1)}, Second: effect.Group{N: float64(n2), Events: binomial(rng, n2, p2)}}
}

func exposed(rng *rand.Rand, m1, m2 float64) effect.Input {
	return effect.Input{First: effect.Group{Exposure: 10, Events: poisson(rng, m1)}, Second: effect.Group{Exposure: 10, Events: poisson(rng, m2)}}
}

// scenarios is long because it is a table.
func scenarios() []scenario {
	var s scenarioTable
	s.add("mean", "normal, n 12", 1, 10, func(r *rand.Rand) effect.Input { return effect.Input{Sample: valueGroup(normals(r, 12, 10, 2))} }, "t")
	s.add("mean", "normal, n 12", 20, 10, func(r *rand.Rand) effect.Input { return effect.Input{Sample: valueGroup(normals(r, 12, 10, 2))} }, "permutation")
	s.add("mean", "exponential, n 30", 1, 1, func(r *rand.Rand) effect.Input { return effect.Input{Sample: valueGroup(sample(30, r.ExpFloat64))} }, "t")
	s.add("mean-difference", "normal, n 8 and 15, sd 1 and 2", 1, 1, func(r *rand.Rand) effect.Input { return twoGroups(normals(r, 8, 1, 1), normals(r, 15, 0, 2)) }, "welch", "pooled-variance")
	s.add("mean-difference", "normal, n 7 and 7", 20, 1, func(r *rand.Rand) effect.Input { return twoGroups(normals(r, 7, 1, 1), normals(r, 7, 0, 1)) }, "permutation")
	s.add("mean-difference", "one covariate, n 15 and 15", 1, 0.5, func(r *rand.Rand) effect.Input {
		in := effect.Input{Covariates: []effect.Covariate{{Name: "x", Values: normals(r, 30, 0, 1)}}}
		for i := range 30 {
			in.Group = append(in.Group, uint8(i%2))
			in.Value = append(in.Value, 0.8*in.Covariates[0].Values[i]+0.5*float64(1-i%2)+r.NormFloat64())
		}
		return in
	}, "linear", "linear-hc3")
	s.add("paired-mean-difference", "normal, n 10", 1, 0.3, func(r *rand.Rand) effect.Input { return pairsFrom(normals(r, 10, 0.3, 1), normals(r, 10, 0, 1)) }, "t")
	s.add("standardized-mean-difference", "normal, n 10 and 14", 2, 0.5, func(r *rand.Rand) effect.Input { return twoGroups(normals(r, 10, 1, 2), normals(r, 14, 0, 2)) }, "noncentral-t")
	s.add("ratio-of-means", "normal, n 10 and 12, cv 0.2 and 0.25", 1, 1.25, func(r *rand.Rand) effect.Input { return twoGroups(normals(r, 10, 10, 2), normals(r, 12, 8, 2)) }, "fieller", "log-delta")
	s.add("geometric-mean-ratio", "lognormal, n 10 and 12, sd 0.5", 1, math.Exp(0.2), func(r *rand.Rand) effect.Input {
		return twoGroups(sample(10, func() float64 { return math.Exp(0.2 + r.NormFloat64()/2) }), sample(12, func() float64 { return math.Exp(r.NormFloat64() / 2) }))
	}, "welch", "pooled-variance")
	rankMethods := []string{"wilcoxon", "wilcoxon-exact", "wilcoxon-normal"}
	s.add("median-shift", "normal, n 12 and 15", 2, 0.7, func(r *rand.Rand) effect.Input { return twoGroups(normals(r, 12, 0.7, 1), normals(r, 15, 0, 1)) }, rankMethods...)
	tiedNormals := func(r *rand.Rand, n int, shift float64) []float64 {
		return sample(n, func() float64 { return math.Round(1.5*r.NormFloat64()) + shift })
	}
	s.add("median-shift", "rounded normal, many ties, n 10 and 12", 20, 1, func(r *rand.Rand) effect.Input { return twoGroups(tiedNormals(r, 10, 1), tiedNormals(r, 12, 0)) }, rankMethods...)
	signed := []string{"signed-rank", "signed-rank-exact", "signed-rank-normal"}
	s.add("paired-median-shift", "normal, n 15", 2, 0.4, func(r *rand.Rand) effect.Input { return pairsFrom(normals(r, 15, 0.4, 1), make([]float64, 15)) }, signed...)
	s.add("paired-median-shift", "rounded normal, ties and zeros, n 20", 2, 1, func(r *rand.Rand) effect.Input { return pairsFrom(tiedNormals(r, 20, 1), make([]float64, 20)) }, signed...)
	s.add("superiority-probability", "normal, n 15 and 20, sd 1 and 2", 1, phi(1/math.Sqrt(5)), func(r *rand.Rand) effect.Input { return twoGroups(normals(r, 15, 1, 1), normals(r, 20, 0, 2)) },
		"brunner-munzel", "delong", "logit", "hanley-mcneil")
	one := func(r *rand.Rand) effect.Input {
		return effect.Input{Sample: effect.Group{N: 40, Events: binomial(r, 40, 0.1)}}
	}
	s.add("proportion", "n 40, 0.1", 1, 0.1, one, "exact", "mid-p", "wilson")
	two := func(r *rand.Rand) effect.Input { return events(r, 40, 35, 0.3, 0.2) }
	few := func(r *rand.Rand) effect.Input { return events(r, 11, 9, 0.3, 0.2) }
	s.add("risk-difference", "n 40 and 35, risks 0.3 and 0.2", 1, 0.1, two, "score", "farrington-manning", "newcombe")
	s.add("risk-ratio", "n 40 and 35, risks 0.3 and 0.2", 1, 1.5, two, "score", "farrington-manning", "log-delta")
	s.add("odds-ratio", "n 40 and 35, risks 0.3 and 0.2", 1, 0.3/0.7/(0.2/0.8), two, "score", "woolf", "exact", "mid-p")
	s.add("risk-difference", "n 11 and 9, risks 0.3 and 0.2", 10, 0.1, few, "unconditional", "score")
	s.add("risk-ratio", "n 11 and 9, risks 0.3 and 0.2", 10, 1.5, few, "unconditional", "score")
	s.add("odds-ratio", "n 11 and 9, risks 0.3 and 0.2", 10, 0.3/0.7/(0.2/0.8), few, "boschloo", "score")
	strata := func(r *rand.Rand) (in effect.Input) {
		in.StrataCount = 4
		for i := range 160 {
			g, k := uint8(i%2), int32(i/40)
			odds := 0.2 * float64(k+1)
			if g == 0 {
				odds *= 1.6
			}
			in.Group, in.Strata, in.Event = append(in.Group, g), append(in.Strata, k), append(in.Event, binomial(r, 1, odds/(1+odds)))
		}
		return in
	}
	s.add("odds-ratio", "4 strata of 40, odds ratio 1.6", 2, 1.6, strata, "mantel-haenszel")
	discordant := func(p1, p2 float64) func(r *rand.Rand) effect.Input {
		return func(r *rand.Rand) effect.Input {
			p := effect.Pairs{N: 50}
			for range 50 {
				switch u := r.Float64(); {
				case u < p1:
					p.FirstOnly++
				case u < p1+p2:
					p.SecondOnly++
				default:
					p.Neither++
				}
			}
			return effect.Input{Pairs: p}
		}
	}
	s.add("paired-risk-difference", "n 50, discordant 0.2 and 0.1", 1, 0.1, discordant(0.2, 0.1), "tango")
	s.add("paired-risk-difference", "n 50, discordant 0.15 and 0.15", 1, 0, discordant(0.15, 0.15), "tango", "exact", "mid-p")
	s.add("rate", "8 events expected", 1, 0.8, func(r *rand.Rand) effect.Input {
		return effect.Input{Sample: effect.Group{Events: poisson(r, 8), Exposure: 10}}
	}, "exact", "mid-p", "score")
	s.add("rate-difference", "12 and 9 events expected", 1, 0.3, func(r *rand.Rand) effect.Input { return exposed(r, 12, 9) }, "score")
	s.add("rate-ratio", "12 and 9 events expected", 1, 12./9, func(r *rand.Rand) effect.Input { return exposed(r, 12, 9) }, "score", "exact", "mid-p")
	related := func(rho float64) func(r *rand.Rand) effect.Input {
		return func(r *rand.Rand) effect.Input {
			x, y := normals(r, 15, 0, 1), normals(r, 15, 0, 1)
			for i := range x {
				y[i] = rho*x[i] + math.Sqrt(1-rho*rho)*y[i]
			}
			return pairsFrom(x, y)
		}
	}
	s.add("correlation", "normal, n 15, 0.5", 1, 0.5, related(0.5), "fisher-z", "exact")
	s.add("rank-correlation", "normal, n 15, 0.5", 1, 6/math.Pi*math.Asin(0.25), related(0.5), "bonett-wright")
	s.add("rank-correlation", "independent, n 15", 20, 0, related(0), "permutation")
	s.add("sd", "normal, n 10", 1, 2, func(r *rand.Rand) effect.Input { return effect.Input{Sample: valueGroup(normals(r, 10, 0, 2))} }, "chi-square")
	s.add("sd", "exponential, n 30", 1, 1, func(r *rand.Rand) effect.Input { return effect.Input{Sample: valueGroup(sample(30, r.ExpFloat64))} }, "chi-square")
	s.add("sd-ratio", "normal, n 10 and 14", 1, 1.5, func(r *rand.Rand) effect.Input { return twoGroups(normals(r, 10, 0, 1.5), normals(r, 14, 0, 1)) }, "f", "log-kurtosis")
	heavy := func(r *rand.Rand, n int) []float64 { // t with 8 degrees of freedom
		return sample(n, func() float64 {
			chi := 0.0
			for range 4 {
				chi += 2 * r.ExpFloat64()
			}
			return r.NormFloat64() / math.Sqrt(chi/8)
		})
	}
	s.add("sd-ratio", "t with 8 degrees of freedom, n 40 and 60", 1, 1, func(r *rand.Rand) effect.Input { return twoGroups(heavy(r, 40), heavy(r, 60)) }, "f", "log-kurtosis")
	s.add("paired-sd-ratio", "normal, n 15, ratio 1/√(0.25+1)", 1, 1/math.Sqrt(1.25), func(r *rand.Rand) effect.Input {
		x, y := normals(r, 15, 0, 1), normals(r, 15, 0, 1)
		for i := range x {
			y[i] += 0.5 * x[i]
		}
		return pairsFrom(x, y)
	}, "pitman-morgan")
	shares := func(n int, spec [2]float64) func(r *rand.Rand) effect.Input {
		return func(r *rand.Rand) effect.Input {
			return effect.Input{Sample: valueGroup(normals(r, n, 0.3, 1)), Spec: spec}
		}
	}
	s.add("conforming-share", "one limit, normal, n 15", 4, phi(1.7), shares(15, [2]float64{math.Inf(-1), 2}), "normal", "any")
	s.add("conforming-share", "two limits, normal, n 10", 10, phi(1.7)-phi(-1.8), shares(10, [2]float64{-1.5, 2}), "normal", "any")
	return append(append(s.rows, survivalScenarios()...), evidenceScenarios()...)
}

func phi(z float64) float64 { return math.Erfc(-z/math.Sqrt2) / 2 }

func survivalScenarios() (rows []scenario) {
	draw := func(r *rand.Rand) survival.Input {
		in := survival.Input{Horizon: 0.7}
		for i := range 100 {
			g := uint8(i % 2)
			rate := 1.0
			if g == 0 {
				rate = 0.7
			}
			event, censored := r.ExpFloat64()/rate, 0.7+r.Float64()
			seen := 0.0
			if event <= censored {
				seen = 1
			}
			in.Group, in.Time, in.Event = append(in.Group, g), append(in.Time, math.Min(event, censored)), append(in.Event, seen)
		}
		return in
	}
	for _, m := range []string{"wald", "likelihood-ratio", "score"} {
		rows = append(rows, scenario{"hazard-ratio", m, "exponential, 50 a group, ratio 0.7", 2, func(r *rand.Rand) (bool, bool) {
			return at(0.7, func() (*effect.Inference, *effect.Problem) { return survival.HazardRatio(m, draw(r)) })
		}})
	}
	mean := func(rate float64) float64 { return -math.Expm1(-rate*0.7) / rate }
	return append(rows, scenario{"restricted-mean-difference", "greenwood", "exponential, 50 a group, horizon 0.7", 2, func(r *rand.Rand) (bool, bool) {
		return at(mean(0.7)-mean(1), func() (*effect.Inference, *effect.Problem) { return survival.RestrictedMeanDifference(draw(r)) })
	}})
}

// evidenceScenarios are pooling (truth 0.2, studies of variance 0.02 to 0.2)
// and combinations under the null.
func evidenceScenarios() (rows []scenario) {
	for _, k := range []int{4, 12} {
		for _, tau := range []float64{0, 0.3} {
			for _, o := range []pool.Options{{}, {Random: true, Between: pool.REML, Interval: pool.Normal}, {Random: true, Between: pool.REML, Interval: pool.HartungKnapp},
				{Random: true, Between: pool.REML, Interval: pool.HartungKnapp, Guard: true}, {Random: true, Between: pool.PauleMandel, Interval: pool.HartungKnapp, Guard: true},
				{Random: true, Between: pool.DerSimonianLaird, Interval: pool.Normal}, {Random: true, Between: pool.SidikJonkman, Interval: pool.HartungKnapp, Guard: true}} {
				name := "common"
				if o.Random {
					name = fmt.Sprintf("random, %s, %s", o.Between, o.Interval)
					if o.Interval == pool.HartungKnapp && !o.Guard {
						name += ", no guard"
					}
				}
				rows = append(rows, scenario{"pooling", name, fmt.Sprintf("%d studies, sd between %g", k, tau), 2, func(r *rand.Rand) (bool, bool) {
					studies := make([]pool.Study, k)
					for i := range studies {
						v := 0.02 * math.Pow(10, r.Float64())
						studies[i] = pool.Study{Y: 0.2 + tau*r.NormFloat64() + math.Sqrt(v)*r.NormFloat64(), V: v}
					}
					low, high := pool.Fit(studies, o).Limits(oneSide)
					return low > 0.2, high < 0.2
				}})
			}
		}
	}
	for _, m := range combine.Methods {
		rows = append(rows, scenario{"combination", m, "5 uniform p-values", 4, func(r *rand.Rand) (bool, bool) {
			var up, down []dist.Tail
			for range 5 {
				t := dist.TailOf(1 - r.Float64())
				up, down = append(up, t), append(down, t.Complement())
			}
			a, errUp := combine.Combine(m, up, nil)
			b, errDown := combine.Combine(m, down, nil)
			return errUp == nil && a.P.P < oneSide, errDown == nil && b.P.P < oneSide
		}})
	}
	return rows
}

// simulate counts wrong exclusions. Each scenario has its own stream, so the
// number of processors changes nothing.
func simulate(s scenario, n int) (up, down float64) {
	h := fnv.New64a()
	fmt.Fprint(h, s.measure, "/", s.method, "/", s.what)
	rng := rand.New(rand.NewPCG(20261201, h.Sum64()))
	for range n {
		u, d := s.trial(rng)
		if u {
			up++
		}
		if d {
			down++
		}
	}
	return up, down
}

// BenchmarkCoverage simulates every method at the truth. With -replicates it
// writes the committed table; without, a few replicates show that it runs.
func BenchmarkCoverage(b *testing.B) {
	n := *replicates
	if n == 0 {
		n = 100
	}
	rows := scenarios()
	lines := make([]string, len(rows))
	for b.Loop() {
		var wait sync.WaitGroup
		free := make(chan struct{}, runtime.GOMAXPROCS(0))
		for i, s := range rows {
			wait.Add(1)
			free <- struct{}{}
			go func() {
				defer wait.Done()
				defer func() { <-free }()
				m := max(1, n/s.costly)
				up, down := simulate(s, m)
				r := float64(m)
				covered := 1 - (up+down)/r
				lines[i] = fmt.Sprintf("| %s | %s | %s | %d | %.2f | %.2f | %.2f ± %.2f |", s.measure, s.method, s.what, m, 100*up/r, 100*down/r,
					100*covered, 100*math.Sqrt(covered*(1-covered)/r))
			}()
		}
		wait.Wait()
	}
	if *replicates > 0 {
		text := coverageHead + strings.Join(lines, "\n") + "\n"
		if err := os.WriteFile("../testdata/coverage.md", []byte(text), 0o644); err != nil {
			b.Fatal(err)
		}
	}
}

const coverageHead = `# How often intervals hold the truth

Written by ` + "`go test ./compute -run '^$' -bench Coverage -benchtime 1x -replicates 20000`" + `. Per line: invented data drawn under the scenario,
fixed seeds; how often (%) each one-sided test at 2.5 % excludes the true value, "too high" being a lower limit above it and
"too low" an upper limit below it; and how often the 95 % interval holds it, with its Monte Carlo standard error. Tests and
intervals are the same thing, so a type I error at any point is one of the two. Data that a method refuses exclude nothing.
Exact methods for counts and ranks must stay at or below 2.5 each side; approximate ones may exceed it, which is what the
table is for. Nothing here is a test.

| measure | method | scenario | replicates | too high % | too low % | holds % |
|---|---|---|---|---|---|---|
`

// Every method of every measure has a scenario.
func TestEveryMethodIsSimulated(t *testing.T) {
	have := map[string]bool{}
	for _, s := range scenarios() {
		have[s.measure+" "+s.method] = true
	}
	for _, c := range roomCards() {
		for _, m := range c.Of {
			if c.Example == "" || strings.Contains(m, ".") || sameKernel[m+" "+c.Word] != "" {
				continue
			}
			if !have[m+" "+c.Word] {
				t.Errorf("%s of %s is not simulated", c.Word, m)
			}
		}
	}
}

// sameKernel are methods that are another's under another name.
var sameKernel = map[string]string{
	"paired-mean-difference permutation": "mean permutation",
	"geometric-mean-ratio linear":        "mean-difference linear",
	"geometric-mean-ratio linear-hc3":    "mean-difference linear-hc3",
	"risk-difference mantel-haenszel":    "odds-ratio mantel-haenszel",
	"risk-ratio mantel-haenszel":         "odds-ratio mantel-haenszel",
	"rate-difference mantel-haenszel":    "odds-ratio mantel-haenszel",
	"rate-ratio mantel-haenszel":         "odds-ratio mantel-haenszel",
	"agreement normal":                   "conforming-share normal",
	"agreement any":                      "conforming-share any",
	"estimate normal":                    "the data are the estimate",
	"estimate t":                         "the data are the estimate",
	"ratio-estimate normal":              "the data are the estimate",
	"ratio-estimate t":                   "the data are the estimate",
}
