package read

import (
	"slices"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// outcomeName checks a table that is named after an outcome.
func (c *checker) outcomeName(name string, at diag.Span, table string) *record.Outcome {
	if o := c.outcomes[name]; o != nil || c.damaged || name == "" {
		return o
	}
	d := diag.Error("R301", at, "[plan.%s.%s] is named after no outcome of the plan", table, name)
	if near := c.near(name, sortedNames(c.outcomes)); near != "" {
		d = d.WithHelp("did you mean [plan.%s.%s]?", table, near)
	}
	c.add(d)
	return nil
}

// evidenceRules checks pooling and combination.
func (c *checker) evidenceRules() {
	for _, p := range c.rec.Plan.Poolings {
		c.reason(p.Independent, "independent")
		if p.Model.Stated && p.Model.V == "common" && p.Interval.Stated && p.Interval.V == "hartung-knapp" {
			c.misplaced(p.Interval.Span, "interval", "= \"hartung-knapp\" goes with the random model")
		}
		o := c.outcomeName(p.Name, p.At, "pooling")
		if o == nil || !o.Measure.Stated || !p.Weights.Stated {
			continue
		}
		allowed := []string{"risk-difference", "risk-ratio", "odds-ratio", "rate-difference", "rate-ratio"}
		switch {
		case p.Weights.V == "peto" && o.Measure.V != "odds-ratio":
			c.add(diag.Error("S104", p.Weights.Span, "the weights \"peto\" are those of odds ratios, not of %s", o.Measure.V))
		case p.Weights.V == "mantel-haenszel" && !slices.Contains(allowed, o.Measure.V):
			c.add(diag.Error("S104", p.Weights.Span, "the weights \"mantel-haenszel\" are those of counts, not of %s", o.Measure.V).
				WithHelp("they exist for %s", words(allowed)))
		}
	}
	for _, m := range c.rec.Plan.Combinations {
		c.outcomeName(m.Name, m.At, "combination")
		if m.Weights.Stated && m.Weights.V == "sqrt-n" && m.Method.Stated && m.Method.V != "stouffer" {
			c.add(diag.Error("S104", m.Weights.Span, "the weights \"sqrt-n\" go with the method stouffer, not with %s", m.Method.V))
		}
	}
}

// planningRules checks sizes, rehearsal, priors and sensitivity.
func (c *checker) planningRules() {
	for _, s := range c.rec.Plan.Sizes {
		c.size(s)
	}
	if r := c.rec.Plan.Rehearsal; r != nil {
		for _, s := range r.Scenarios {
			for _, e := range s.Effects {
				c.scenarioEffect(e)
			}
		}
	}
	for _, p := range c.rec.Plan.Priors {
		c.prior(p)
	}
	for _, s := range c.rec.Plan.Sensitivity {
		c.sensitivity(s)
	}
}

func (c *checker) scenarioEffect(e record.NamedNumber) {
	o := known(c, record.String{V: e.Name, Span: e.At, Stated: true}, "outcome", c.outcomes)
	if o == nil || !o.Measure.Stated || !e.Number.Stated {
		return
	}
	if m := record.MeasureOf(o.Measure.V); m != nil && !inRange(m, e.Number.V) {
		c.add(diag.Error("R204", e.Number.Span, "a %s is %s; the effect is %s", m.Word, rangeOf(m), num(e.Number.V)))
	}
}

// size checks what belongs together; whether numbers contradict each other is
// told where they are computed.
func (c *checker) size(s *record.Size) {
	h := known(c, s.Hypothesis, "hypothesis", c.hypotheses)
	if h == nil || !h.Outcome.Stated {
		return
	}
	o := c.outcomes[h.Outcome.V]
	if o == nil || !o.Measure.Stated {
		return
	}
	m := record.MeasureOf(o.Measure.V)
	if s.Accept.Stated && (m.Word != "proportion" || h.Claim.Stated && h.Claim.V != "below") {
		c.misplaced(s.Accept.Span, "accept", "goes with the claim below on a proportion")
	}
	if s.Allocation.Stated && m.Shape != record.TwoGroups && m.Shape != record.Given {
		c.misplaced(s.Allocation.Span, "allocation", "does not apply: "+m.Word+" has no two groups")
	}
	if s.PairR.Stated && m.Shape != record.Paired {
		c.misplaced(s.PairR.Span, "pair_r", "does not apply: "+m.Word+" is not of pairs")
	}
	if len(s.SD.V) == 2 && m.Shape == record.OneSample {
		c.misplaced(s.SD.Span, "sd", "has two values, and "+m.Word+" is of one sample")
	}
	if s.Assumed.Stated && !inRange(m, s.Assumed.V) {
		c.add(diag.Error("R204", s.Assumed.Span, "a %s is %s; the assumed effect is %s", m.Word, rangeOf(m), num(s.Assumed.V)))
	}
}

// prior takes one of two forms.
func (c *checker) prior(p *record.Prior) {
	if c.refused[p.At] {
		return
	}
	known(c, p.Outcome, "outcome", c.outcomes)
	c.reason(p.Why, "why")
	moments := !absent(p.Mean) || !absent(p.SD)
	quantiles := !absent(p.Median) || !absent(p.Low) || !absent(p.High) || !absent(p.Level)
	const help = "write mean and sd on the analysis scale, or median, low, high and level on the effect's own"
	switch {
	case moments && quantiles:
		c.add(diag.Error("R337", p.At, "the prior %q is given in two forms", p.Name).WithHelp(help))
	case !moments && !quantiles:
		c.add(diag.Error("R337", p.At, "the prior %q gives no numbers", p.Name).WithHelp(help))
	case moments && (absent(p.Mean) || absent(p.SD)):
		c.add(diag.Error("R337", p.At, "the prior %q needs both `mean` and `sd`", p.Name))
	case quantiles && (absent(p.Median) || absent(p.Low) || absent(p.High) || absent(p.Level)):
		c.add(diag.Error("R337", p.At, "the prior %q needs `median`, `low`, `high` and `level`", p.Name))
	case quantiles && p.Median.Stated && p.Low.Stated && p.High.Stated && !(p.Low.V < p.Median.V && p.Median.V < p.High.V):
		c.add(diag.Error("R337", p.At, "the median of the prior %q, %s, must lie between %s and %s", p.Name, num(p.Median.V), num(p.Low.V), num(p.High.V)))
	}
}

func (c *checker) sensitivity(s *record.Sensitivity) {
	h := known(c, s.Of, "hypothesis", c.hypotheses)
	if !s.Kind.Stated {
		return
	}
	is := s.Kind.V == "method"
	switch {
	case is && absent(s.Method):
		c.add(diag.Error("R338", s.At, "kind = \"method\" needs the other method: `method` is missing"))
	case !is && s.Method.Stated:
		c.misplaced(s.Method.Span, "method", "goes with kind = \"method\"")
	case is && h != nil && h.Outcome.Stated && s.Method.Stated:
		o := c.outcomes[h.Outcome.V]
		if o == nil || !o.Measure.Stated {
			return
		}
		if m := record.MeasureOf(o.Measure.V); m != nil && !m.HasMethod(s.Method.V) {
			c.add(diag.Error("R316", s.Method.Span, "%s is no method of %s", quoteShort(s.Method.V), m.Word).WithHelp("%s has %s", m.Word, words(m.Methods)))
		}
	}
}
