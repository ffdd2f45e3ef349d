package claim

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// z95 is the upper 5 % point of the normal distribution (R 4.2.2: qnorm(0.95)).
const z95 = 1.6448536269514722

// wald is an estimate with its error on a scale.
func wald(s record.Scale, y, se float64) *effect.Inference {
	low, high := rangeOf(s)
	return &effect.Inference{Method: effect.Wald{Scale: s, Y: y, SE: se, DF: math.Inf(1), Low: low, High: high},
		Estimate: effect.From(s, y), Y: result.Some(y), V: result.Some(se * se), N: 100}
}

func rangeOf(s record.Scale) (low, high float64) {
	switch s {
	case record.Log:
		return 0, math.Inf(1)
	case record.Logit:
		return 0, 1
	case record.Atanh:
		return -1, 1
	}
	return math.Inf(-1), math.Inf(1)
}

// at makes a question with the region null ± s, or null/s to null·s.
func at(claim, better string, s record.Scale, null, margin float64) Question {
	low, high := rangeOf(s)
	q := Question{Claim: claim, Better: better, Alpha: 0.05, Null: null, Low: null - margin, High: null + margin, HasRegion: true,
		Scale: s, RangeLow: low, RangeHigh: high, Level: 0.9}
	if claim == "differs" {
		q.Alpha = 0.1
	}
	if q.Ratio() {
		q.Low, q.High = null/margin, null*margin
	}
	return q
}

// expected reads the table of claims from an interval alone, as a reader of
// the record would: every limit is strict.
func expected(q Question, low, high float64) result.Verdict {
	better, harm := low, high // the limit that must pass a point for "better than"
	good, bad := q.High, q.Low
	over, under := func(x, c float64) bool { return x > c }, func(x, c float64) bool { return x < c }
	if q.Better == "lower" {
		better, harm, good, bad, over, under = high, low, q.Low, q.High, under, over
	}
	pick := func(yes, no bool) result.Verdict {
		switch {
		case yes:
			return result.Established
		case no:
			return result.Contradicted
		}
		return result.Open
	}
	switch q.Claim {
	case "differs":
		return pick(low > q.Null || high < q.Null, false)
	case "superior":
		return pick(over(better, q.Null), under(harm, q.Null))
	case "minimum-effect":
		return pick(over(better, good), under(harm, good))
	case "noninferior":
		return pick(over(better, bad), under(harm, bad))
	case "equivalent":
		return pick(low > q.Low && high < q.High, low > q.High || high < q.Low)
	case "benefit-too-small":
		return pick(under(harm, good), over(better, good))
	case "below":
		return pick(high < q.Limit, low > q.Limit)
	case "above":
		return pick(low > q.Limit, high < q.Limit)
	}
	return result.Described
}

var scales = []struct {
	scale  record.Scale
	null   float64
	margin float64
}{{record.Identity, 2, 0.7}, {record.Log, 1, 1.25}, {record.Log, 4, 0.9}, {record.Logit, 0.8, 0.06}, {record.Atanh, 0.3, 0.2}}

var words = []string{"differs", "superior", "minimum-effect", "noninferior", "equivalent", "benefit-too-small", "below", "above", "describe"}

// Verdict and reading follow from the interval alone, for every claim,
// direction and scale.
func TestVerdictsFollowTheInterval(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 1))
	seen := map[string]int{}
	for _, s := range scales {
		for _, word := range words {
			for _, better := range []string{"higher", "lower", "neither"} {
				for range 60 {
					q := at(word, better, s.scale, s.null, s.margin)
					q.Limit = q.Low
					y := effect.To(s.scale, s.null) + 0.8*rng.NormFloat64()
					se := 0.3 * math.Exp(rng.NormFloat64())
					inf := wald(s.scale, y, se)
					a := Assess(inf, q)
					low, high := effect.From(s.scale, y-z95*se), effect.From(s.scale, y+z95*se)
					got, want := a.Verdict(a.P.P, a.Against.P, q.Alpha, false), expected(q, low, high)
					if got != want {
						t.Errorf("%s %s %s: %g to %g is %s, want %s", s.scale, word, better, low, high, got, want)
					}
					if math.Abs(a.Low-low) > 1e-9 || math.Abs(a.High-high) > 1e-9*math.Max(1, high) || math.Abs(a.Level-0.9) > 1e-12 {
						t.Errorf("%s %s: interval %g to %g at %g, want %g to %g", s.scale, word, a.Low, a.High, a.Level, low, high)
					}
					above, below := 0, 0
					for _, c := range []float64{q.Low, q.Null, q.High} {
						if low > c {
							above++
						}
						if high < c {
							below++
						}
					}
					if a.Reading.Above != above || a.Reading.Below != below {
						t.Errorf("%s %s: reading %+v, want %d and %d", s.scale, word, a.Reading, above, below)
					}
					if len(a.Notes) > 0 && a.Notes[0].Code == "S204" {
						t.Errorf("test and interval disagree: %+v", a.Notes)
					}
					seen[word+string(got)]++
				}
			}
		}
	}
	for _, word := range words[1:8] {
		for _, v := range []result.Verdict{result.Established, result.Contradicted, result.Open} {
			if seen[word+string(v)] == 0 {
				t.Errorf("%s was never %s", word, v)
			}
		}
	}
}

// The p-values are the tails of the normal law at the claim's points.
func TestTailsOfClaims(t *testing.T) {
	tail := func(z float64) float64 { return math.Erfc(z/math.Sqrt2) / 2 }
	y, se := 0.4, 0.25
	inf := wald(record.Identity, y, se)
	for _, c := range []struct {
		claim, better string
		p, against    float64
	}{
		{"differs", "neither", 2 * tail(y/se), 1},
		{"superior", "higher", tail(y / se), tail(-y / se)},
		{"superior", "lower", tail(-y / se), tail(y / se)},
		{"minimum-effect", "higher", tail((y - 0.5) / se), tail((0.5 - y) / se)},
		{"minimum-effect", "lower", tail((-0.5 - y) / se), tail((y + 0.5) / se)},
		{"noninferior", "higher", tail((y + 0.5) / se), tail(-(y + 0.5) / se)},
		{"noninferior", "lower", tail((0.5 - y) / se), tail((y - 0.5) / se)},
		{"equivalent", "neither", tail((0.5 - y) / se), tail((y - 0.5) / se)},
		{"benefit-too-small", "higher", tail((0.5 - y) / se), tail((y - 0.5) / se)},
		{"below", "neither", tail((0.9 - y) / se), tail((y - 0.9) / se)},
		{"above", "neither", tail((y - 0.9) / se), tail((0.9 - y) / se)},
	} {
		q := at(c.claim, c.better, record.Identity, 0, 0.5)
		q.Limit = 0.9
		a := Assess(inf, q)
		against := a.Against.P
		if !a.CanContradict {
			against = 1
		}
		if math.Abs(a.P.P-c.p) > 1e-14 || math.Abs(against-c.against) > 1e-14 {
			t.Errorf("%s %s: p %g against %g, want %g and %g", c.claim, c.better, a.P.P, against, c.p, c.against)
		}
	}
}

// Exactly ten readings can be reached, and all are, over a grid of intervals.
func TestTenReadings(t *testing.T) {
	seen := map[[2]int]bool{}
	for y := -3.0; y <= 3; y += 0.05 {
		for se := 0.05; se < 2; se *= 1.3 {
			r := Read(wald(record.Identity, y, se), at("superior", "higher", record.Identity, 0, 1))
			seen[[2]int{r.Above, r.Below}] = true
		}
	}
	var got []string
	for k := range seen {
		got = append(got, fmt.Sprint(k))
	}
	slices.Sort(got)
	want := []string{"[0 0]", "[0 1]", "[0 2]", "[0 3]", "[1 0]", "[1 1]", "[1 2]", "[2 0]", "[2 1]", "[3 0]"}
	if !slices.Equal(got, want) {
		t.Errorf("readings %v", got)
	}
	q := at("superior", "higher", record.Identity, 0, 1)
	q.OneSided = true
	if r := Read(wald(record.Identity, 5, 0.1), q); r.HasRegion || r.Above != 1 {
		t.Errorf("a region of one side is read as two: %+v", r)
	}
}

// fixed is a method with the answers it is given.
type fixed struct {
	up, down  float64
	step      bool
	low, high float64
}

func (f fixed) Test(float64) effect.Test {
	tail := func(p float64) dist.Tail { return dist.Tail{P: p, Q: 1 - p, LnP: math.Log(p), LnQ: math.Log1p(-p)} }
	return effect.Test{Up: tail(f.up), Down: tail(f.down), Kind: "exact", Step: f.step}
}
func (f fixed) Limits(float64) (float64, float64) { return f.low, f.high }

// p equal to the level establishes nothing, except where p moves in steps.
func TestStrictAtTheLevel(t *testing.T) {
	for _, step := range []bool{false, true} {
		want := result.Open
		if step {
			want = result.Established
		}
		for _, word := range []string{"superior", "differs"} {
			q := at(word, "higher", record.Identity, 0, 1)
			inf := &effect.Inference{Method: fixed{up: 0.05, down: 0.95, step: step, low: 0.1, high: 1}}
			if word == "differs" {
				q.Alpha = 0.1
			}
			a := Assess(inf, q)
			if got := a.Verdict(a.P.P, a.Against.P, q.Alpha, false); got != want {
				t.Errorf("%s, steps %v: %s", word, step, got)
			}
		}
	}
	q := at("superior", "higher", record.Identity, 0, 1)
	a := Assess(&effect.Inference{Method: fixed{up: 0.95, down: 0.05, step: true, low: -1, high: -0.1}}, q)
	if got := a.Verdict(a.P.P, a.Against.P, q.Alpha, true); got != result.Contradicted {
		t.Errorf("against, in steps: %s", got)
	}
	a = Assess(wald(record.Identity, 5, 1), q)
	if got := a.Verdict(a.P.P, a.Against.P, q.Alpha, true); got != result.Suggested {
		t.Errorf("exploratory: %s", got)
	}
}

// A limit on the other side of a point than the p-value is said, once a point.
func TestDisagreementIsSaid(t *testing.T) {
	for _, word := range []string{"superior", "differs"} {
		q := at(word, "higher", record.Identity, 0, 1)
		a := Assess(&effect.Inference{Method: fixed{up: 0.001, down: 0.999, low: -0.2, high: 1}}, q)
		if len(a.Notes) != 1 || a.Notes[0].Code != "S204" {
			t.Errorf("%s: %+v", word, a.Notes)
		}
		a = Assess(&effect.Inference{Method: fixed{up: 0.001, down: 0.999, low: 0.2, high: 1}}, q)
		if len(a.Notes) != 0 {
			t.Errorf("%s: %+v", word, a.Notes)
		}
	}
}

// The bound printed by S209 is the chance of a contradiction when the truth
// lies on an edge of the region, counted here over a fine grid of estimates.
func TestErrorOfAContradiction(t *testing.T) {
	q := at("equivalent", "neither", record.Identity, 0, 0.3)
	q.Alpha = 0.05
	se := 1.0
	chance, h := 0.0, 1e-3
	for y := -10.0; y < 10; y += h {
		j := Judge(wald(record.Identity, y, se), q)
		if j.Verdict(j.P.P, j.Against.P, q.Alpha, false) == result.Contradicted {
			chance += h * math.Exp(-(y-q.High)*(y-q.High)/2) / math.Sqrt(2*math.Pi)
		}
	}
	a := Assess(wald(record.Identity, 0, se), q)
	if len(a.Notes) != 1 || a.Notes[0].Code != "S209" || math.Abs(a.Notes[0].Args[0].(float64)-chance) > 1e-3 {
		t.Errorf("%+v, the chance is %g", a.Notes, chance)
	}
	if a := Assess(wald(record.Identity, 0, 0.1), q); len(a.Notes) != 0 {
		t.Errorf("said although the bound is %g: %+v", q.Alpha, a.Notes)
	}
}

// The curve is highest at the estimate, reaches the printed levels at their
// limits and holds the points of the question.
func TestCurve(t *testing.T) {
	for _, s := range scales {
		inf := wald(s.scale, effect.To(s.scale, s.null)+0.1, 0.2)
		q := at("equivalent", "neither", s.scale, s.null, s.margin)
		c := Curve(inf, q, 201)
		if len(c) < 201 {
			t.Fatalf("%s: %d points", s.scale, len(c))
		}
		pAt := map[float64]float64{}
		top := 0
		for i, p := range c {
			pAt[p.Value] = p.P
			if p.P > c[top].P {
				top = i
			}
		}
		for i := 1; i < len(c); i++ {
			if i <= top && c[i].P < c[i-1].P-1e-12 || i > top && c[i].P > c[i-1].P+1e-12 {
				t.Errorf("%s: not one hill at %v", s.scale, c[i])
			}
		}
		for _, point := range []float64{q.Low, q.Null, q.High} {
			if _, ok := pAt[point]; !ok {
				t.Errorf("%s: %g is no point of the curve", s.scale, point)
			}
		}
		low, high := inf.Method.Limits((1 - curveLevels[2]) / 2)
		if math.Abs(pAt[low]-0.05) > 1e-9 || math.Abs(pAt[high]-0.05) > 1e-9 {
			t.Errorf("%s: p %g and %g at the 95 %% limits", s.scale, pAt[low], pAt[high])
		}
	}
	if c := Curve(&effect.Inference{Method: fixed{}, NullOnly: true}, at("superior", "higher", record.Identity, 0, 1), 201); c != nil {
		t.Error("a curve of a test that exists at the null alone")
	}
}

func TestSValue(t *testing.T) {
	for _, c := range []struct{ lnp, want float64 }{{math.Log(0.05), 4.321928094887363}, {0, 0}, {-1000, 1000 / math.Ln2}} {
		if got := SValue(c.lnp); math.Abs(got-c.want) > 1e-12*math.Max(1, c.want) {
			t.Errorf("s-value %g, want %g", got, c.want)
		}
	}
}
