package render

import (
	"strconv"

	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/render/number"
)

// plan prints the plan as it binds.
func (c *composer) plan() {
	p := &c.rec.Plan
	title := "The plan as sealed"
	if c.res.Seal.Entries == 0 {
		title = "The plan (not sealed)"
	}
	changed := c.res.Seal.Entries > 0 && c.changedPlan()
	if changed {
		title = "The plan, changed since it was sealed"
	}
	c.heading(1, title, "plan")
	if changed {
		c.small("This is the plan as it stands now. What was sealed differently is listed under Deviations and changes.")
	}
	var f facts
	f.add("Question", p.Question.V)
	f.add("Population", p.Population.V)
	f.add("Comparison", p.Comparison.V)
	f.add("Design", p.Design.V)
	f.add("Background", p.Background.V)
	f.add("Missing data", p.Missing.V)
	f.add("Error levels", alphaText(p.Alpha))
	f.add("Why these levels", p.AlphaWhy.V)
	if p.Level.V > 0 {
		f.add("Descriptive intervals", number.Level(p.Level.V))
	}
	f.to(c, 1)
	c.planOutcomes()
	c.planHypotheses()
	c.planRest()
}

// changedPlan reports whether the plan now differs from the sealed one.
func (c *composer) changedPlan() bool {
	for _, ch := range c.res.Seal.Changes {
		if !ch.Wording {
			return true
		}
	}
	return false
}

// alphaText writes stated error levels.
func alphaText(a record.Alpha) string {
	switch {
	case a.OneSided.Stated && a.TwoSided.Stated:
		return "one-sided " + number.Error(a.OneSided.V) + "; two-sided " + number.Error(a.TwoSided.V)
	case a.OneSided.Stated:
		return "one-sided " + number.Error(a.OneSided.V)
	case a.TwoSided.Stated:
		return "two-sided " + number.Error(a.TwoSided.V)
	}
	return ""
}

// planOutcomes describes every outcome on its own scale.
func (c *composer) planOutcomes() {
	for i := range c.res.Outcomes {
		o := &c.res.Outcomes[i]
		f := number.Of(o)
		c.heading(2, "Outcome "+o.Name+": "+o.Label, "outcome-"+o.Name)
		var l facts
		l.add("Effect", effectName(o))
		l.add("Unit", f.Unit)
		l.add("Better", betterText(o))
		if o.Null.OK {
			l.add("Null", f.PointUnit(o.Null.V))
		}
		if r := regionWords(f, o.Low, o.High); r != "" {
			l.add("Too small to matter", r)
			l.add("Why this size", o.Why)
		} else {
			l.add("Too small to matter", "no smallest effect was stated")
		}
		if rec := c.outcomeRecord(o.Name); rec != nil {
			c.outcomeDetails(&l, rec, f)
		}
		l.to(c, 1)
	}
}

// betterText says which direction is a benefit.
func betterText(o *result.Outcome) string {
	if d := direction(o); d != "" {
		return d
	}
	return "neither direction"
}

// outcomeDetails adds what only some outcomes state.
func (c *composer) outcomeDetails(l *facts, o *record.Outcome, f number.Format) {
	l.add("When", o.Timepoint.V)
	l.add("Instrument", o.Instrument.V)
	if len(o.Spec.V) == 2 {
		l.add("Limits for single values", limitsText(o.Spec.V[0].V, o.Spec.V[1].V, o.Unit.V))
	}
	if o.Horizon.Stated {
		l.add("Horizon", number.Plain(o.Horizon.V))
	}
	if o.Cluster != nil {
		l.add("Clusters", "intra-cluster correlation "+number.Plain(o.Cluster.ICC.V)+", size "+number.Plain(o.Cluster.Size.V)+" (an assumption)")
	}
	if o.SystematicU.Stated {
		l.add("Common standard uncertainty", number.Plain(o.SystematicU.V)+", added after averaging (GUM type B)")
	}
	if o.Design.Stated {
		l.add("Design", o.Design.V)
	}
	l.add("Estimand", o.Estimand.V)
	l.add("Notes", o.Notes.V)
}

// limitsText is "2 to 5 N"; infinite ends in words.
func limitsText(low, high float64, unit string) string {
	f := number.Format{Unit: unit, Digits: -1}
	return f.Interval(result.Opt{}, result.Some(low), result.Some(high)).Range()
}

// planHypotheses lists the claims.
func (c *composer) planHypotheses() {
	t := newTable("Hypotheses", "Name", "Outcome", "Claim", "Role", "#Error", "Margin or limit", "Evidence", "Method")
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		v := voiceOf(c.res, h)
		sides := ", one-sided"
		if h.TwoSided {
			sides = ", two-sided"
		}
		alpha := ""
		if h.Claim != "describe" {
			alpha = number.Error(h.Alpha) + sides
		}
		t.row(h.Name, v.label(), h.Claim, h.Role, alpha, v.marginCell(), h.Evidence, methodName(h.Method))
	}
	t.to(c)
	var l list
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		l.named(h.Name, h.Statement)
		if h.MarginWhy != "" {
			l.named(h.Name+", why this margin", h.MarginWhy)
		}
		if rec := c.hypothesisRecord(h.Name); rec != nil && rec.MarginBasis != nil {
			l.named(h.Name+", basis of the margin", c.basisText(h, rec.MarginBasis))
		}
	}
	l.to(c)
}

// basisText is the evidence behind a margin.
func (c *composer) basisText(h *result.Hypothesis, b *record.MarginBasis) string {
	v := voiceOf(c.res, h)
	s := v.f.Interval(result.Some(b.Effect.V), result.Opt{V: b.Low.V, OK: b.Low.Stated}, result.Opt{V: b.High.V, OK: b.High.Stated})
	out := "effect " + s.EstimateUnit()
	if r := s.Range(); r != "" {
		out += " (" + r + ")"
	}
	return out + "; source: " + fullStop(b.Source.V)
}

// hypothesisRecord finds a hypothesis as written.
func (c *composer) hypothesisRecord(name string) *record.Hypothesis {
	for _, h := range c.rec.Plan.Hypotheses {
		if h.Name == name {
			return h
		}
	}
	return nil
}

// marginCell is the point or region that a claim reads.
func (v voice) marginCell() string {
	switch v.h.Claim {
	case "below", "above":
		if v.h.Limit.OK {
			return v.f.PointUnit(v.h.Limit.V)
		}
	case "noninferior":
		if m := v.harm(); m.OK {
			return v.f.PointUnit(m.V)
		}
	case "minimum-effect", "benefit-too-small":
		if m := v.benefit(); m.OK {
			return v.f.PointUnit(m.V)
		}
	case "equivalent":
		return v.region()
	}
	return ""
}

// planRest prints sets, exclusions, looks, pooling, estimands.
func (c *composer) planRest() {
	p := &c.rec.Plan
	var l list
	for _, s := range p.Sets {
		text := s.Label.V
		if text == "" {
			text = s.Name
		}
		for _, k := range s.Keep {
			text += "; keeps rows where " + filterText(k)
		}
		if s.Why.V != "" {
			text += "; why: " + s.Why.V
		}
		l.named("Analysis set "+s.Name, fullStop(text))
	}
	for _, k := range p.Data.Exclude {
		text := filterText(k)
		if k.Why.V != "" {
			text += "; why: " + k.Why.V
		}
		l.named("Planned exclusion", fullStop(text))
	}
	for _, f := range p.Families {
		l.named("Family "+f.Name, f.Procedure.V+" over "+join(strings2(f.Members))+".")
	}
	if p.Looks != nil {
		l.named("Looks", looksPlan(p.Looks))
	}
	for _, q := range p.Poolings {
		l.named("Pooling of "+q.Name, q.Model.V+"-effects model decides. Independent because: "+fullStop(q.Independent.V))
	}
	for _, q := range p.Combinations {
		l.named("Combination of p-values of "+q.Name, q.Method.V+".")
	}
	for _, e := range p.Estimands {
		l.named("Estimand "+e.Name, estimandText(e))
	}
	l.to(c)
}

// filterText is a filter in words.
func filterText(f *record.Filter) string {
	col := f.Column.V
	switch {
	case f.Above.Stated:
		return col + " is above " + number.Plain(f.Above.V)
	case f.AtLeast.Stated:
		return col + " is at least " + number.Plain(f.AtLeast.V)
	case f.Below.Stated:
		return col + " is below " + number.Plain(f.Below.V)
	case f.AtMost.Stated:
		return col + " is at most " + number.Plain(f.AtMost.V)
	case f.Equals.Stated:
		return col + " equals " + f.Equals.Text
	case f.OneOf.Stated:
		var names []string
		for _, s := range f.OneOf.V {
			names = append(names, s.Text)
		}
		return col + " is one of " + join(names)
	case f.Missing.Stated:
		if f.Missing.V {
			return col + " is missing"
		}
		return col + " is present"
	}
	return col
}

// strings2 takes the words out of a list of values.
func strings2(v record.Strings) []string {
	var out []string
	for _, s := range v.V {
		out = append(out, s.V)
	}
	return out
}

// looksPlan is the plan of looks in words.
func looksPlan(l *record.Looks) string {
	if l.Anytime.V {
		return "A confidence sequence valid at every look, planned or not; planned total " + number.Plain(l.Total.V) + " " + l.Information.V + "."
	}
	var fr []string
	for _, f := range l.Fractions.V {
		fr = append(fr, number.Plain(f.V))
	}
	s := "at fractions " + join(fr) + " of " + number.Plain(l.Total.V) + " " + l.Information.V + "; spending " + l.Spending.V
	if l.Parameter.Stated {
		s += " (parameter " + number.Plain(l.Parameter.V) + ")"
	}
	if l.Futility != nil {
		binding := "not binding"
		if l.Futility.Binding.V {
			binding = "binding"
		}
		s += "; futility " + l.Futility.Spending.V + ", " + binding
	}
	return s + "."
}

// estimandText is an estimand with its events.
func estimandText(e *record.Estimand) string {
	s := "population: " + e.Population.V + "; treatment: " + e.Treatment.V + "; variable: " + e.Variable.V + "; summary: " + fullStop(e.Summary.V)
	for i, ev := range e.Intercurrent {
		s += " Event " + strconv.Itoa(i+1) + ": " + ev.Event.V + ", " + ev.Strategy.V
		if ev.Why.V != "" {
			s += " (" + ev.Why.V + ")"
		}
		s += "."
	}
	return s
}
