package read

import (
	"math"
	"slices"
	"sort"
	"strconv"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

func sortStrings(s []string) { sort.Strings(s) }

// outcome checks [plan.outcome.NAME] against its measure.
func (c *checker) outcome(o *record.Outcome) {
	known(c, o.Estimand, "estimand", c.estimands)
	if o.Why.Stated && absent(o.Smallest) {
		c.misplaced(o.Why.Span, "why", "gives the reason for `smallest`, which is absent")
	}
	c.reason(o.Why, "why")
	if o.Smallest.Stated && absent(o.Why) {
		c.add(diag.Error("R307", o.Smallest.Span, "`smallest` is given without a reason").
			WithHelp("add why = \"…\": why a smaller effect would not matter"))
	}
	m := record.MeasureOf(o.Measure.V)
	if !o.Measure.Stated || m == nil {
		return
	}
	c.groups(o, m)
	c.reference(o, m)
	c.spec(o, m)
	c.horizon(o, m)
	c.display(o, m)
	if o.Design.Stated && o.Design.V == "crossover" && m.Word != "mean-difference" && m.Word != "geometric-mean-ratio" {
		c.add(diag.Error("R304", o.Design.Span, "a crossover is analysed for mean-difference and geometric-mean-ratio only, not for %s", m.Word))
	}
	c.region(o, o.Smallest, "smallest")
}

// groups checks the names of the two groups.
func (c *checker) groups(o *record.Outcome, m *record.Measure) {
	switch {
	case m.Shape == record.OneSample && o.Groups.Stated:
		c.misplaced(o.Groups.Span, "groups", "does not apply: "+m.Word+" is of one sample")
		return
	case absent(o.Groups) && (m.Shape == record.TwoGroups || m.Shape == record.Paired):
		c.add(diag.Error("R303", o.At, "%s compares two: `groups` is missing", m.Word).
			WithHelp(`write groups = ["first", "second"]: the effect is the first %s the second`, pick(m.IsRatio(), "over", "minus")))
		return
	}
	for _, g := range o.Groups.V {
		if g.Stated && !namePattern.MatchString(g.V) {
			c.add(diag.Error("R206", g.Span, "%s is no name", quoteShort(g.V)).
				WithHelp("a name begins with a letter a to z and goes on with letters, digits, _ and -"))
		}
	}
	c.twice(o.Groups)
}

// named reports that the outcome has its two groups, without fault: only then
// is a group's name held against them.
func named(o *record.Outcome) bool { return o.Groups.Stated && len(distinct(o.Groups)) == 2 }

// openEnds reports whether the ends of the measure's range are no values of it.
func openEnds(m *record.Measure) bool { return m.Scale != record.Identity }

// inRange reports whether a value can be one of the measure's effect.
func inRange(m *record.Measure, v float64) bool {
	if openEnds(m) {
		return v > m.Low && v < m.High
	}
	return v >= m.Low && v <= m.High
}

// rangeOf says where values of the measure lie.
func rangeOf(m *record.Measure) string {
	return record.Range{Low: m.Low, High: m.High, LowOpen: openEnds(m), HighOpen: openEnds(m)}.String()
}

func (c *checker) reference(o *record.Outcome, m *record.Measure) {
	switch m.Null {
	case record.NullReference:
		if absent(o.Reference) {
			d := diag.Error("R303", o.At, "%s is compared with a value: `reference` is missing", m.Word)
			c.add(d.WithHelp("write reference = …, the value of the effect that means nothing has changed"))
			return
		}
	case record.NullReferenceOrZero:
	case record.NullZero, record.NullOne, record.NullHalf:
		if o.Reference.Stated {
			c.misplaced(o.Reference.Span, "reference", "does not apply: the null of "+m.Word+" is fixed")
			return
		}
	}
	if o.Reference.Stated && !inRange(m, o.Reference.V) {
		c.add(diag.Error("R317", o.Reference.Span, "a %s is %s; the reference is %s", m.Word, rangeOf(m), num(o.Reference.V)))
	}
}

// hasSpec reports whether the measure judges individual values.
func hasSpec(m *record.Measure) bool { return m.Word == "conforming-share" || m.Word == "agreement" }

func (c *checker) spec(o *record.Outcome, m *record.Measure) {
	if !hasSpec(m) {
		if o.Spec.Stated {
			c.misplaced(o.Spec.Span, "spec", "does not apply to "+m.Word)
		}
		if o.Distribution.Stated {
			c.misplaced(o.Distribution.Span, "distribution", "does not apply to "+m.Word)
		}
		return
	}
	if absent(o.Spec) {
		c.add(diag.Error("R303", o.At, "%s counts values inside limits: `spec` is missing", m.Word).
			WithHelp("write spec = [low, high]; -inf or inf leaves a side open"))
		return
	}
	if len(o.Spec.V) != 2 || !o.Spec.V[0].Stated || !o.Spec.V[1].Stated {
		return
	}
	low, high := o.Spec.V[0].V, o.Spec.V[1].V
	if low >= high || math.IsInf(low, -1) && math.IsInf(high, 1) {
		c.add(diag.Error("R318", o.Spec.Span, "the limits of `spec` go from %s to %s and leave no value out or none in", num(low), num(high)).
			WithHelp("write spec = [low, high] with low below high and at least one of them finite"))
	}
}

func (c *checker) horizon(o *record.Outcome, m *record.Measure) {
	is := m.Word == "restricted-mean-difference"
	if is && absent(o.Horizon) {
		c.add(diag.Error("R303", o.At, "%s averages up to a time: `horizon` is missing", m.Word).WithHelp("write horizon = …, in the unit of time of the data"))
	}
	if !is && o.Horizon.Stated {
		c.misplaced(o.Horizon.Span, "horizon", "does not apply to "+m.Word)
	}
}

// shares are the measures whose values can be printed in percent.
var shares = []string{"proportion", "risk-difference", "paired-risk-difference", "superiority-probability", "agreement", "conforming-share"}

func (c *checker) display(o *record.Outcome, m *record.Measure) {
	if o.As.Stated && !slices.Contains(shares, m.Word) {
		c.misplaced(o.As.Span, "as", "does not apply: "+m.Word+" is no share")
	}
	if o.Per.Stated && m.Word != "rate" && m.Word != "rate-difference" {
		c.misplaced(o.Per.Span, "per", "does not apply: "+m.Word+" is no rate")
	}
}

// region checks `smallest` or `margin` against the null and the measure.
func (c *checker) region(o *record.Outcome, b record.Bounds, key string) {
	m := record.MeasureOf(o.Measure.V)
	if !b.Stated || m == nil || !o.Measure.Stated {
		return
	}
	if !b.V.IsPair {
		switch {
		case m.IsRatio() && b.V.Distance <= 1:
			d := diag.Error("R306", b.Span, "%q of a ratio is a factor above 1, not %s", key, num(b.V.Distance))
			if b.V.Distance > 0 && b.V.Distance < 1 {
				d = d.WithHelp("the factor %s means the limits %s and %s; limits on one side only are written as a pair",
					strconv.FormatFloat(1/b.V.Distance, 'g', 4, 64), num(b.V.Distance), strconv.FormatFloat(1/b.V.Distance, 'g', 4, 64))
			}
			c.add(d)
			return
		case !m.IsRatio() && b.V.Distance <= 0:
			c.add(diag.Error("R306", b.Span, "%q is a distance from the null and must be above 0, not %s", key, num(b.V.Distance)).
				WithHelp("the direction of benefit is said by `better`; unequal limits are written as a pair, [low, high]"))
			return
		}
	}
	null, ok := o.Null()
	if !ok || o.Reference.Stated && !inRange(m, null) {
		return
	}
	low, high := record.Limits(o, null, b.V)
	if b.V.IsPair && !(low < null && null < high) {
		c.add(diag.Error("R306", b.Span, "%q must have the null, %s, between its limits; they are %s and %s", key, num(null), num(low), num(high)).
			WithHelp("a pair is two values of the effect, low first: the region too small to matter"))
		return
	}
	if !inRange(m, low) || !inRange(m, high) {
		c.add(diag.Error("R306", b.Span, "%q reaches from %s to %s; a %s is %s", key, num(low), num(high), m.Word, rangeOf(m)).
			WithHelp("values in a record stay raw: five percentage points are 0.05"))
	}
}
