package compute

import (
	"slices"
	"strconv"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// choice adds one analysis choice: where it comes from follows from the seal's
// declared changes and from whether the record states it.
func (r *run) choice(what, value string, stated bool, why, path string) {
	from := "default"
	switch {
	case r.deviates(path):
		from = "deviation"
	case stated:
		from = "plan"
	}
	r.res.Choices = append(r.res.Choices, result.Choice{What: what, Value: value, From: from, Why: why})
}

// choices lists every analysis choice and where it came from.
func (r *run) choices() {
	p := r.rec.Plan
	if p.Alpha.OneSided.Stated {
		r.choice("one-sided error level", number(p.Alpha.OneSided.V), true, p.AlphaWhy.V, "plan.alpha.one_sided")
	}
	if p.Alpha.TwoSided.Stated {
		r.choice("two-sided error level", number(p.Alpha.TwoSided.V), true, p.AlphaWhy.V, "plan.alpha.two_sided")
	}
	r.choice("level of descriptive intervals", number(r.level), p.Level.Stated, "", "plan.level")
	if r.drawsRandom() {
		r.choice("seed of random draws", strconv.FormatUint(r.seed, 10), p.Seed.Stated, "", "plan.seed")
	}
	for _, o := range r.res.Outcomes {
		r.outcomeChoices(o)
	}
	for i, t := range r.tried {
		r.hypothesisChoices(r.res.Hypotheses[i], t)
	}
	for _, f := range p.Families {
		r.choice("family "+f.Name+": procedure", f.Procedure.V+" of "+strings.Join(record.Texts(f.Members), ", "), true, "", "plan.family."+f.Name)
	}
	for _, q := range p.Poolings {
		r.poolingChoices(q)
	}
	for _, c := range p.Combinations {
		at := "plan.combination." + c.Name + "."
		r.choice(c.Name+": combination of p-values", c.Method.V, true, "", at+"method")
		r.choice(c.Name+": weights of p-values", orDefault(c.Weights, "equal"), c.Weights.Stated, "", at+"weights")
	}
	for _, f := range p.Data.Exclude {
		r.choice("rows excluded", "by "+f.Column.V, true, f.Why.V, "plan.data.exclude")
	}
}

func (r *run) outcomeChoices(o result.Outcome) {
	rec := r.rec.OutcomeNamed(o.Name)
	at := "plan.outcome." + o.Name + "."
	r.choice(o.Name+": measure", o.Measure, true, "", at+"measure")
	if o.Low.OK {
		r.choice(o.Name+": region too small to matter", number(o.Low.V)+" to "+number(o.High.V), true, o.Why, at+"smallest")
	}
	r.choice(o.Name+": better", o.Better, rec.Better.Stated, "", at+"better")
	if rec.Cluster != nil {
		r.choice(o.Name+": clusters", "icc "+number(rec.Cluster.ICC.V)+", size "+number(rec.Cluster.Size.V), true, "", at+"cluster")
	}
	if rec.SystematicU.Stated {
		r.choice(o.Name+": error common to all results", number(rec.SystematicU.V), true, "", at+"systematic_u")
	}
	if rec.Horizon.Stated {
		r.choice(o.Name+": horizon", number(rec.Horizon.V), true, "", at+"horizon")
	}
	if rec.Design.V == "crossover" {
		r.choice(o.Name+": design", "crossover", rec.Design.Stated, "", at+"design")
	}
}

func (r *run) hypothesisChoices(h result.Hypothesis, t *trial) {
	at := "plan.hypothesis." + h.Name + "."
	r.choice(h.Name+": claim", h.Claim, true, "", at+"claim")
	if h.Alpha > 0 {
		r.choice(h.Name+": error level", number(h.Alpha), true, "", at+"alpha")
	}
	if t.h.Margin.Stated {
		r.choice(h.Name+": margin", marginText(h), true, h.MarginWhy, at+"margin")
	}
	if h.Limit.OK {
		r.choice(h.Name+": limit", number(h.Limit.V), true, "", at+"limit")
	}
	if h.Judged.Method != "" {
		r.choice(h.Name+": method", h.Judged.Method, t.h.Method.Stated, "", at+"method")
	}
	r.choice(h.Name+": evidence", h.Evidence, t.h.Evidence.Stated, "", at+"evidence")
	for _, c := range []struct {
		what string
		list record.Strings
	}{{"studies", t.h.Studies}, {"sets", t.h.Sets}, {"adjust", t.h.Adjust}} {
		if c.list.Stated {
			r.choice(h.Name+": "+c.what, strings.Join(record.Texts(c.list), ", "), true, "", at+c.what)
		}
	}
	if t.h.Strata.Stated {
		r.choice(h.Name+": strata", t.h.Strata.V, true, "", at+"strata")
	}
}

func (r *run) poolingChoices(p *record.Pooling) {
	at := "plan.pooling." + p.Name + "."
	o := (&poolRun{plan: p}).options(p.Model.V == "random")
	r.choice(p.Name+": model of the pool", p.Model.V, true, p.Independent.V, at+"model")
	r.choice(p.Name+": weights", orDefault(p.Weights, inverseVariance), p.Weights.Stated, "", at+"weights")
	if o.Random {
		r.choice(p.Name+": variance between studies", string(o.Between), p.Between.Stated, "", at+"between")
		r.choice(p.Name+": interval of the pool", string(o.Interval), p.Interval.Stated, "", at+"interval")
		guard := "kept"
		if !o.Guard {
			guard = "none"
		}
		r.choice(p.Name+": floor of the interval", guard, p.Guard.Stated, "", at+"guard")
	}
	r.choice(p.Name+": added to zero cells", number(p.Continuity.V), p.Continuity.Stated, "", at+"continuity")
	if p.IncludeEarlier.V {
		r.choice(p.Name+": earlier results", "included", true, "", at+"include_earlier")
	}
}

func orDefault(s record.String, word string) string {
	if s.V == "" {
		return word
	}
	return s.V
}

// marginText is a margin as its points.
func marginText(h result.Hypothesis) string {
	var ends []string
	for _, o := range []result.Opt{h.MarginLow, h.MarginHigh} {
		if o.OK {
			ends = append(ends, number(o.V))
		}
	}
	return strings.Join(ends, " to ")
}

// deviates reports whether a declared deviation changed the key at a path, or
// the table that holds it.
func (r *run) deviates(path string) bool {
	return slices.ContainsFunc(r.res.Seal.Changes, func(c result.Change) bool {
		return c.Declared && (c.Path == path || strings.HasPrefix(path, c.Path+".") || strings.HasPrefix(c.Path, path+"."))
	})
}

// drawsRandom reports whether any analysis used the seed.
func (r *run) drawsRandom() bool {
	drawn := func(j result.Judged) bool { return j.Method == "permutation" }
	return slices.ContainsFunc(r.res.Hypotheses, func(h result.Hypothesis) bool {
		return drawn(h.Judged) || slices.ContainsFunc(h.BySet, drawn) || slices.ContainsFunc(h.Alternatives, drawn)
	})
}

// number is a value as a user would type it, to six digits.
func number(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }
