// Package claim reads an inference against a null and a region: the p-value
// that decides a claim, the p-value that would contradict it, the interval
// that goes with both, the reading, and the smallest margin at which the
// claim would hold. It knows no record and no measure.
//
//	a := claim.Assess(inf, claim.Question{Claim: "noninferior", Better: "higher", Alpha: 0.025, Null: 0, Low: -0.1, High: 0.1, HasRegion: true})
//	verdict := a.Verdict(a.P.P, a.Against.P, 0.025, false)
package claim

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// Question is a claim with its points, all on the effect's own scale.
type Question struct {
	Claim     string // a word of record.Claims
	Better    string // higher, lower, neither
	Alpha     float64
	Null      float64
	Low, High float64 // the region in force, low < null < high
	HasRegion bool
	// OneSided says that only the side the claim is tested against was stated:
	// the reading then knows the null alone.
	OneSided  bool
	Limit     float64 // below, above
	Scale     record.Scale
	RangeLow  float64 // ends of the effect's range
	RangeHigh float64
	Level     float64 // describe only
}

// Error is the one-sided error of the interval and of the reading: half the
// level for differs, the level itself otherwise.
func (q Question) Error() float64 {
	switch q.Claim {
	case "differs":
		return q.Alpha / 2
	case "describe":
		return (1 - q.Level) / 2
	}
	return q.Alpha
}

// Assessment is a claim's numbers before multiplicity.
type Assessment struct {
	P             dist.Tail // decides the claim
	Against       dist.Tail // below alpha: contradicted
	CanContradict bool
	Step          bool // P moves in steps: p = alpha establishes
	AgainstStep   bool
	Judged        bool // false for describe

	Tests          []result.Test
	Reading        result.Reading
	Level          float64
	Low, High      float64
	SmallestMargin result.Opt // in the grammar of a margin: distance, or factor of a ratio
	SmallestLimit  result.Opt // the same as a value of the effect; of a region, its upper end
	SmallestLow    result.Opt // equivalent: the lower end of the smallest region
	Notes          []result.Note
}

// side is a one-sided test of a point.
type side struct {
	point   float64
	greater bool // alternative: effect > point
}

// sides are the tests of a claim: all of For must hold; any of Against
// contradicts.
type sides struct{ For, Against []side }

// sidesOf lays a claim out as one-sided tests (methods.md C). differs and
// describe have none of their own.
func sidesOf(q Question) sides {
	up := q.Better != "lower"
	better, harm := q.High, q.Low
	if !up {
		better, harm = q.Low, q.High
	}
	at := func(point float64, greater bool) []side { return []side{{point, greater}} }
	switch q.Claim {
	case "superior":
		return sides{at(q.Null, up), at(q.Null, !up)}
	case "minimum-effect":
		return sides{at(better, up), at(better, !up)}
	case "noninferior":
		return sides{at(harm, up), at(harm, !up)}
	case "benefit-too-small":
		return sides{at(better, !up), at(better, up)}
	case "equivalent":
		return sides{[]side{{q.Low, true}, {q.High, false}}, []side{{q.High, true}, {q.Low, false}}}
	case "below":
		return sides{at(q.Limit, false), at(q.Limit, true)}
	case "above":
		return sides{at(q.Limit, true), at(q.Limit, false)}
	case "differs", "describe":
		return sides{}
	}
	panic("claim: unknown claim " + q.Claim)
}

// AtNullOnly reports whether the claim asks about the null and nothing else.
func (q Question) AtNullOnly() bool {
	switch q.Claim {
	case "differs", "superior", "describe":
		return true
	case "below", "above":
		return q.Limit == q.Null
	}
	return false
}

// tester asks a method for its test at a point once: some tests are costly.
type tester struct {
	method effect.Method
	points [4]float64
	tests  [4]effect.Test
	n      int
}

func (m *tester) test(c float64) effect.Test {
	for i := range m.n {
		if m.points[i] == c {
			return m.tests[i]
		}
	}
	t := m.method.Test(c)
	if m.n < len(m.points) {
		m.points[m.n], m.tests[m.n] = c, t
		m.n++
	}
	return t
}

// Judge computes the claim's tests alone: what a verdict needs.
func Judge(inf *effect.Inference, q Question) Assessment {
	return judge(&tester{method: inf.Method}, q)
}

func judge(m *tester, q Question) Assessment {
	a := Assessment{Judged: q.Claim != "describe"}
	switch q.Claim {
	case "describe":
	case "differs":
		a.differs(m.test(q.Null), q)
	default:
		a.oneSided(m, q)
	}
	return a
}

// Read is the reading alone.
func Read(inf *effect.Inference, q Question) result.Reading {
	return reading(&tester{method: inf.Method}, q, inf.NullOnly)
}

// Assess computes the claim's tests, interval, reading and smallest margin.
func Assess(inf *effect.Inference, q Question) Assessment {
	m := &tester{method: inf.Method}
	a := judge(m, q)
	e := q.Error()
	a.Level = 1 - 2*e
	a.Low, a.High = inf.Method.Limits(e)
	a.Reading = reading(m, q, inf.NullOnly)
	if !inf.NullOnly { // a borrowed interval has no margin of the test's
		a.smallest(q)
	}
	if !inf.NoInterval {
		a.agree(m, q)
	}
	if n, ok := contradictionError(inf, q); ok {
		a.Notes = append(a.Notes, n)
	}
	return a
}

func (a *Assessment) differs(t effect.Test, q Question) {
	a.P, a.Step = TwoSided(t), t.Step
	a.Tests = []result.Test{row(t, side{q.Null, t.Up.LnP <= t.Down.LnP}, a.P)}
	a.Tests[0].Alternative = "two-sided"
}

// OfTails assesses a claim about the null from two one-sided p-values alone,
// upward and downward, where there is neither estimate nor interval.
func OfTails(q Question, up, down dist.Tail) Assessment {
	a := Assessment{Judged: true}
	alternative := "two-sided"
	switch {
	case q.Claim == "differs":
		a.P = dist.TwoSided(up, down)
	case q.Better == "lower":
		a.P, a.Against, a.CanContradict, alternative = down, up, true, "less"
	default:
		a.P, a.Against, a.CanContradict, alternative = up, down, true, "greater"
	}
	a.Tests = []result.Test{{Null: q.Null, Alternative: alternative, Statistic: "combination", P: result.P{P: a.P.P, Ln: a.P.LnP, OK: true}}}
	return a
}

// TwoSided is the doubled smaller tail of a test, capped at 1.
func TwoSided(t effect.Test) dist.Tail { return dist.TwoSided(t.Up, t.Down) }

func (a *Assessment) oneSided(m *tester, q Question) {
	s := sidesOf(q)
	for i, one := range s.For {
		t := m.test(one.point)
		p := one.of(t)
		a.Tests = append(a.Tests, row(t, one, p))
		if i == 0 || p.LnP > a.P.LnP {
			a.P, a.Step = p, t.Step
		}
	}
	a.CanContradict = true
	for i, one := range s.Against {
		t := m.test(one.point)
		if p := one.of(t); i == 0 || p.LnP < a.Against.LnP {
			a.Against, a.AgainstStep = p, t.Step
		}
	}
}

// Contradicted is how far the interval would have to move toward the claim for
// it not to be contradicted, as a number below zero; what it takes at least
// where either side contradicts.
func Contradicted(q Question, low, high float64) float64 {
	gap := math.Inf(-1)
	for _, s := range sidesOf(q).Against {
		d := high - s.point
		if s.greater {
			d = s.point - low
		}
		if d < 0 {
			gap = math.Max(gap, d)
		}
	}
	return gap
}

func (s side) of(t effect.Test) dist.Tail {
	if s.greater {
		return t.Up
	}
	return t.Down
}

func row(t effect.Test, s side, p dist.Tail) result.Test {
	r := result.Test{Null: s.point, Alternative: "less", Statistic: t.Kind, P: result.P{P: p.P, Ln: p.LnP, OK: true}}
	if s.greater {
		r.Alternative = "greater"
	}
	if !math.IsNaN(t.Value) && t.Kind != "exact" {
		r.Value = result.Some(t.Value)
	}
	if t.DF > 0 && !math.IsInf(t.DF, 1) {
		r.DF = result.Some(t.DF)
	}
	return r
}

// reading counts the points that the data exclude from below and from above.
func reading(m *tester, q Question, nullOnly bool) result.Reading {
	e := q.Error()
	r := result.Reading{HasRegion: q.HasRegion && !q.OneSided && !nullOnly, OK: true}
	points := []float64{q.Null}
	if r.HasRegion {
		points = []float64{q.Low, q.Null, q.High}
	}
	for _, c := range points {
		t := m.test(c)
		if t.Below(t.Up, e) {
			r.Above++
		}
		if t.Below(t.Down, e) {
			r.Below++
		}
	}
	return r
}

// agree raises S204 where a verdict's p-value and the interval stand on
// different sides of a point.
func (a *Assessment) agree(m *tester, q Question) {
	e := q.Error()
	both := sidesOf(q)
	if q.Claim == "differs" {
		both.For = []side{{q.Null, true}, {q.Null, false}}
	}
	for i, s := range append(both.For, both.Against...) {
		t := m.test(s.point)
		limit, excluded := a.High, s.point > a.High
		if s.greater {
			limit, excluded = a.Low, s.point < a.Low
		}
		near := math.Abs(s.point-limit) <= 1e-9*math.Max(math.Abs(limit), math.Abs(a.High-a.Low))
		if near && !t.Step {
			continue
		}
		said := i > 0 && len(a.Notes) > 0 && a.Notes[len(a.Notes)-1].Args[0] == any(s.point)
		if t.Below(s.of(t), e) != excluded && !said {
			a.Notes = append(a.Notes, result.Note{Code: "S204", Message: disagree, Args: []any{s.point}})
		}
	}
}

const disagree = "the test and the interval stand on different sides of %.6g; the verdict is the test's"

const mayContradict = "the chance of calling a truly equivalent effect contradicted can reach %.3g here, above the stated %.3g, because the region is narrow for the precision reached"

// contradictionError is S209: equivalence wrongly called contradicted has
// error up to alpha + P(Z > z_alpha + width/se) (methods.md C).
func contradictionError(inf *effect.Inference, q Question) (result.Note, bool) {
	if q.Claim != "equivalent" || !inf.V.OK || !(inf.V.V > 0) {
		return result.Note{}, false
	}
	width := effect.To(q.Scale, q.High) - effect.To(q.Scale, q.Low)
	most := q.Alpha + dist.NormalUpper(dist.NormalQuantile(q.Alpha)+width/math.Sqrt(inf.V.V)).P
	if !(most > 1.1*q.Alpha) {
		return result.Note{}, false
	}
	return result.Note{Code: "S209", Message: mayContradict, Args: []any{most, q.Alpha}}, true
}

// Verdict settles the claim from p-values adjusted for multiplicity: p decides
// it, against contradicts it. Unadjusted values are their own adjustment.
func (a Assessment) Verdict(p, against, alpha float64, exploratory bool) result.Verdict {
	switch {
	case !a.Judged:
		return result.Described
	case under(p, alpha, a.Step):
		if exploratory {
			return result.Suggested
		}
		return result.Established
	case a.CanContradict && under(against, alpha, a.AgainstStep):
		return result.Contradicted
	}
	return result.Open
}

func under(p, alpha float64, step bool) bool {
	return effect.Test{Step: step}.Below(dist.Tail{P: p}, alpha)
}

// SValue is -log2 p from its natural logarithm.
func SValue(lnp float64) float64 { return math.Max(0, -lnp/math.Ln2) }
