package effect

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"steelyard/compute/dist"
	"steelyard/protocol/record"
)

// Laws that the count methods obey whatever the numbers.

// countCase is one method on one set of numbers, with a few nulls inside the
// range.
type countCase struct {
	name            string
	measure, method string
	in              Input
	nulls           []float64
}

// quick are methods whose test costs next to nothing.
var quick = map[string][]string{
	"proportion":             {"exact", "mid-p", "wilson"},
	"risk-difference":        {"score", "farrington-manning", "newcombe"},
	"risk-ratio":             {"score", "farrington-manning", "log-delta"},
	"odds-ratio":             {"score", "exact", "mid-p", "woolf"},
	"paired-risk-difference": {"tango"},
	"rate":                   {"exact", "mid-p", "score"},
	"rate-difference":        {"score"},
	"rate-ratio":             {"score", "exact", "mid-p"},
}

// measuresInOrder avoids the order of maps.
var measuresInOrder = []string{"proportion", "risk-difference", "risk-ratio", "odds-ratio",
	"paired-risk-difference", "rate", "rate-difference", "rate-ratio"}

// randomCount is between 0 and n, often at or near an end.
func randomCount(r *rand.Rand, n int) float64 {
	switch r.IntN(6) {
	case 0:
		return 0
	case 1:
		return float64(n)
	case 2:
		return float64(min(n, r.IntN(4)))
	}
	return float64(r.IntN(n + 1))
}

func randomSize(r *rand.Rand, most int) int {
	return 1 + int(math.Exp(r.Float64()*math.Log(float64(most)))) - 1
}

// randomCase draws numbers for a measure.
func randomCase(r *rand.Rand, measure string, most int) (Input, []float64) {
	n1, n2 := randomSize(r, most), randomSize(r, most)
	x1, x2 := randomCount(r, n1), randomCount(r, n2)
	ratios := []float64{1, math.Exp(r.NormFloat64()), math.Exp(3 * r.NormFloat64()), math.Exp(-3 * r.NormFloat64())}
	differences := []float64{0, 2*r.Float64() - 1, math.Tanh(0.2 * r.NormFloat64()), 1e-4 * r.NormFloat64()}
	e1, e2 := math.Exp(4*r.NormFloat64()), math.Exp(4*r.NormFloat64())
	switch measure {
	case "proportion":
		return one(x1, float64(n1)), []float64{r.Float64(), r.Float64() * r.Float64() * 0.01, 0.5}
	case "risk-difference":
		return two(x1, float64(n1), x2, float64(n2)), differences
	case "risk-ratio", "odds-ratio":
		return two(x1, float64(n1), x2, float64(n2)), ratios
	case "paired-risk-difference":
		b, c := randomCount(r, n1), randomCount(r, n1)
		return paired(float64(r.IntN(n1+1)), b, c, float64(1+r.IntN(n1+1))), differences
	case "rate":
		return onePer(x1, e1), []float64{x1 / e1 * ratios[1], (x1 + 1) / e1 * ratios[2], 1 / e1}
	case "rate-difference":
		return twoExposed(x1, e1, x2, e2), []float64{0, x1/e1 - x2/e2 + r.NormFloat64()*(math.Sqrt(x1+1)/e1+math.Sqrt(x2+1)/e2), 1 / e1, -1 / e2}
	case "rate-ratio":
		return twoExposed(x1, e1, x2, e2), ratios
	}
	panic("no such measure")
}

// eachCase calls f with random numbers for every quick method.
func eachCase(t *testing.T, seed uint64, rounds, most int, f func(t *testing.T, c countCase)) {
	r := rand.New(rand.NewPCG(seed, 1))
	for range rounds {
		for _, measure := range measuresInOrder {
			in, nulls := randomCase(r, measure, most)
			for _, method := range quick[measure] {
				f(t, countCase{fmt.Sprintf("%s %s %+v %+v %+v", measure, method, in.First, in.Second, in.Sample), measure, method, in, nulls})
			}
		}
		if t.Failed() {
			return
		}
	}
}

// infer analyses a case; nil where the numbers do not allow the method.
func (c countCase) infer(t *testing.T) *Inference {
	inf, bad := Analyse(c.measure, c.method, c.in)
	if bad != nil {
		if bad.Code != "S103" || c.method != "log-delta" && c.method != "woolf" {
			t.Errorf("%s: unexpected problem %v", c.name, bad)
		}
		return nil
	}
	return inf
}

func TestCountLimitsInvertTests(t *testing.T) {
	eachCase(t, 11, 150, 5000, func(t *testing.T, c countCase) {
		inf := c.infer(t)
		if inf == nil {
			return
		}
		m := record.MeasureOf(c.measure)
		for _, a := range []float64{1e-6, 0.005, 0.025, 0.2} {
			low, high := inf.Method.Limits(a)
			if !(low <= high) || low < m.Low || high > m.High {
				t.Errorf("%s: limits %v, %v at %v", c.name, low, high, a)
			}
			if !inf.NoEstimate && a < 0.4 && (inf.Estimate < low-1e-9*math.Abs(low) || inf.Estimate > high+1e-9*math.Abs(high)) {
				t.Errorf("%s: estimate %v outside %v, %v", c.name, inf.Estimate, low, high)
			}
			invertsInside(t, c.name, inf.Method, m, a)
		}
	})
}

// invertsInside is invertsTest for limits inside the range; at its ends the
// test must not exclude anything just inside.
func invertsInside(t reporter, what string, method Method, m *record.Measure, a float64) {
	t.Helper()
	low, high := method.Limits(a)
	za := dist.NormalQuantile(a)
	if low > m.Low {
		if z := deviate(method.Test(low).Up); !(math.Abs(z-za) < 1e-6) {
			t.Errorf("%s: at the lower limit %.17g z = %.12g, want %.12g", what, low, z, za)
		}
	}
	if high < m.High {
		if z := deviate(method.Test(high).Down); !(math.Abs(z-za) < 1e-6) {
			t.Errorf("%s: at the upper limit %.17g z = %.12g, want %.12g", what, high, z, za)
		}
	}
}

// TestVerdictAndIntervalAgree: whether a null lies outside the interval and
// whether its p is below a is one question.
func TestCountVerdictAndIntervalAgree(t *testing.T) {
	eachCase(t, 12, 150, 2000, func(t *testing.T, c countCase) {
		inf := c.infer(t)
		if inf == nil {
			return
		}
		for _, a := range []float64{0.005, 0.025, 0.05} {
			low, high := inf.Method.Limits(a)
			for _, null := range c.nulls {
				at := inf.Method.Test(null)
				if math.Abs(null-low) > 1e-8*math.Abs(low) && at.Below(at.Up, a) != (null < low) {
					t.Errorf("%s: p-up %v at %v, lower limit %v, a %v", c.name, at.Up.P, null, low, a)
				}
				if math.Abs(null-high) > 1e-8*math.Abs(high) && at.Below(at.Down, a) != (null > high) {
					t.Errorf("%s: p-down %v at %v, upper limit %v, a %v", c.name, at.Down.P, null, high, a)
				}
			}
		}
	})
}

func TestCountPValuesAreMonotone(t *testing.T) {
	eachCase(t, 13, 200, 100000, func(t *testing.T, c countCase) {
		inf := c.infer(t)
		if inf == nil {
			return
		}
		for _, a := range c.nulls {
			for _, b := range c.nulls {
				if a >= b {
					continue
				}
				p, q := inf.Method.Test(a), inf.Method.Test(b)
				sane(t, c.name, p)
				if p.Up.LnP > q.Up.LnP+1e-9*(1+math.Abs(q.Up.LnP)) || q.Down.LnP > p.Down.LnP+1e-9*(1+math.Abs(p.Down.LnP)) {
					t.Errorf("%s: from %v to %v ln p-up goes %v to %v, ln p-down %v to %v",
						c.name, a, b, p.Up.LnP, q.Up.LnP, p.Down.LnP, q.Down.LnP)
				}
			}
		}
	})
}

// mirrored exchanges the groups and returns the null that says the same.
func mirrored(c countCase) (Input, func(float64) float64) {
	in := c.in
	in.First, in.Second = in.Second, in.First
	in.Pairs.FirstOnly, in.Pairs.SecondOnly = in.Pairs.SecondOnly, in.Pairs.FirstOnly
	if m := record.MeasureOf(c.measure); m.IsRatio() {
		return in, func(x float64) float64 { return 1 / x }
	}
	return in, func(x float64) float64 { return -x }
}

func TestExchangingGroupsMirrors(t *testing.T) {
	eachCase(t, 14, 150, 100000, func(t *testing.T, c countCase) {
		if m := record.MeasureOf(c.measure); m.Shape == record.OneSample {
			return
		}
		in, null := mirrored(c)
		compareMirror(t, c, in, null)
	})
}

// exchanged counts non-events in place of events.
func exchanged(c countCase) (Input, func(float64) float64, bool) {
	in := c.in
	in.First.Events, in.Second.Events = in.First.N-in.First.Events, in.Second.N-in.Second.Events
	in.Sample.Events = in.Sample.N - in.Sample.Events
	switch c.measure {
	case "proportion":
		return in, func(x float64) float64 { return 1 - x }, true
	case "risk-difference":
		return in, func(x float64) float64 { return -x }, true
	case "odds-ratio":
		return in, func(x float64) float64 { return 1 / x }, true
	}
	return in, nil, false
}

func TestExchangingEventsMirrors(t *testing.T) {
	eachCase(t, 15, 150, 100000, func(t *testing.T, c countCase) {
		if in, null, ok := exchanged(c); ok {
			compareMirror(t, c, in, null)
		}
	})
}

// compareMirror demands the same tails with their sides exchanged.
func compareMirror(t *testing.T, c countCase, in Input, null func(float64) float64) {
	t.Helper()
	a := c.infer(t)
	c.in = in
	b := c.infer(t)
	if a == nil || b == nil {
		if a != b {
			t.Errorf("%s: one side is refused", c.name)
		}
		return
	}
	for _, x := range c.nulls {
		p, q := a.Method.Test(x), b.Method.Test(null(x))
		// 1e-9 of z: nulls such as 1 - x and 1/x are rounded themselves.
		for _, pair := range [][2]dist.Tail{{p.Up, q.Down}, {p.Down, q.Up}} {
			z, w := deviate(pair[0]), deviate(pair[1])
			within(t, c.name+fmt.Sprintf(" at %v", x), z, w, 1e-8*(1+math.Abs(z)))
		}
	}
}

func TestScoreTestsAgreeAtNoEffect(t *testing.T) {
	r := rand.New(rand.NewPCG(16, 1))
	for range 2000 {
		in, _ := randomCase(r, "risk-difference", 1000000)
		for _, method := range []string{"score", "farrington-manning"} {
			want := analysed(t, "risk-difference", method, in).Method.Test(0).Value
			near(t, fmt.Sprintf("ratio %+v %+v", in.First, in.Second), analysed(t, "risk-ratio", method, in).Method.Test(1).Value, want, 1e-11)
			if method == "score" {
				near(t, fmt.Sprintf("odds %+v %+v", in.First, in.Second), analysed(t, "odds-ratio", method, in).Method.Test(1).Value, want, 1e-11)
			}
		}
		if t.Failed() {
			return
		}
	}
}

// TestRateRatioScoreIsUnconditional: Wilson's score on the share of events
// equals the score test on both Poisson counts.
func TestRateRatioScoreIsUnconditional(t *testing.T) {
	r := rand.New(rand.NewPCG(17, 1))
	for range 500 {
		in, nulls := randomCase(r, "rate-ratio", 10000)
		x1, e1, x2, e2 := in.First.Events, in.First.Exposure, in.Second.Events, in.Second.Exposure
		for _, c := range nulls {
			low := (x1 + x2) / (c*e1 + e2)
			want := ratio(x1/e1-c*x2/e2, math.Sqrt(c*low/e1+c*c*low/e2))
			within(t, "z", analysed(t, "rate-ratio", "score", in).Method.Test(c).Value, want, 1e-9*(1+math.Abs(want)))
		}
	}
}

func TestRatesDoNotDependOnUnits(t *testing.T) {
	const k = 1000.0
	eachCase(t, 18, 60, 10000, func(t *testing.T, c countCase) {
		scale := 1.0
		switch c.measure {
		case "rate", "rate-difference":
			scale = 1 / k
		case "rate-ratio":
		default:
			return
		}
		a := c.infer(t)
		c.in.First.Exposure *= k
		c.in.Second.Exposure *= k
		c.in.Sample.Exposure *= k
		b := c.infer(t)
		near(t, c.name+" estimate", b.Estimate, scale*a.Estimate, 1e-12)
		l1, h1 := a.Method.Limits(0.025)
		l2, h2 := b.Method.Limits(0.025)
		width := math.Min(h2-l2, math.MaxFloat64)
		within(t, c.name+" low", l2, scale*l1, 1e-9*width)
		within(t, c.name+" high", h2, scale*h1, 1e-9*width)
		for _, null := range c.nulls {
			p, q := a.Method.Test(null), b.Method.Test(scale*null)
			within(t, c.name, deviate(q.Up), deviate(p.Up), 1e-8*(1+math.Abs(deviate(p.Up))))
		}
	})
}

// TestCountsNeverNaN throws tables up to a million at every quick method, and
// asks for nulls at and beyond the ends of the range and for extreme errors.
func TestCountsNeverNaN(t *testing.T) {
	eachCase(t, 19, 250, 1000000, func(t *testing.T, c countCase) {
		inf := c.infer(t)
		if inf == nil {
			return
		}
		m := record.MeasureOf(c.measure)
		checkNumbers(t, c.name, inf)
		nulls := append([]float64{m.Low, m.High, math.NaN(), math.Inf(1), math.Inf(-1), -1, 0, 1, 1e-300, 1e300, -2, 2}, c.nulls...)
		for _, null := range nulls {
			sane(t, fmt.Sprintf("%s at %v", c.name, null), inf.Method.Test(null))
		}
		for _, a := range []float64{0, 1e-300, 0.025, 0.5, 0.7, 1} {
			if low, high := inf.Method.Limits(a); math.IsNaN(low) || math.IsNaN(high) {
				t.Errorf("%s: limits %v, %v at %v", c.name, low, high, a)
			}
		}
	})
}

// checkNumbers demands that an inference holds no NaN and says so where a
// number does not exist.
func checkNumbers(t reporter, what string, inf *Inference) {
	t.Helper()
	for _, x := range []float64{inf.Estimate, inf.SE.V, inf.Y.V, inf.V.V, inf.N} {
		if math.IsNaN(x) {
			t.Errorf("%s: NaN in %+v", what, inf)
		}
	}
	if inf.V.OK && !(inf.V.V > 0 && !math.IsInf(inf.V.V, 0)) || inf.Y.OK && math.IsInf(inf.Y.V, 0) || inf.Y.OK != inf.V.OK {
		t.Errorf("%s: y %v, v %v", what, inf.Y, inf.V)
	}
	for _, c := range inf.Checks {
		for _, s := range c.Shows {
			if math.IsNaN(s.Value) || math.IsInf(s.Value, 0) {
				t.Errorf("%s: check %v", what, c)
			}
		}
	}
}

func TestClosedFormTestsDoNotAllocate(t *testing.T) {
	cases := map[string]Input{
		"risk-difference": two(7, 12, 1, 12), "risk-ratio": two(7, 12, 1, 12), "odds-ratio": two(7, 12, 1, 12),
		"proportion": one(7, 12), "paired-risk-difference": paired(20, 10, 3, 17), "rate": onePer(7, 12),
		"rate-ratio": twoExposed(7, 12, 1, 12), "rate-difference": twoExposed(7, 12, 1, 12),
	}
	for measure, in := range cases {
		for _, method := range quick[measure] {
			m := analysed(t, measure, method, in).Method
			if n := testing.AllocsPerRun(20, func() { m.Test(0.3) }); n != 0 {
				t.Errorf("%s %s: %v allocations a test", measure, method, n)
			}
		}
	}
}
