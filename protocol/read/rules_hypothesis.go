package read

import (
	"math"
	"slices"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// hypothesis checks [plan.hypothesis.NAME] against its claim and outcome.
func (c *checker) hypothesis(h *record.Hypothesis) {
	o := known(c, h.Outcome, "outcome", c.outcomes)
	claim := record.ClaimOf(h.Claim.V)
	c.twice(h.Studies)
	c.twice(h.Sets)
	c.twice(h.Adjust)
	for _, s := range distinct(h.Sets) {
		known(c, s, "analysis set", c.sets)
	}
	if len(c.sets) > 1 && absent(h.Sets) && claim != nil {
		c.add(diag.Error("R330", h.At, "several analysis sets are declared: `sets` is missing").
			WithHelp("name the sets in which the claim must hold, such as sets = [%q]", c.rec.Plan.Sets[0].Name))
	}
	c.reason(h.MarginWhy, "margin_why")
	if h.MarginWhy.Stated && absent(h.Margin) {
		c.misplaced(h.MarginWhy.Span, "margin_why", "gives the reason for `margin`, which is absent")
	}
	if h.Margin.Stated && absent(h.MarginWhy) && claim != nil && claim.HasMargin {
		c.add(diag.Warning("R307", h.Margin.Span, "`margin` is given without a reason").
			WithHelp("add margin_why = \"…\""))
	}
	if claim == nil || !h.Claim.Stated {
		return
	}
	c.level(h, claim)
	c.claimKeys(h, claim)
	if o == nil {
		return
	}
	c.claimOn(h, claim, o)
	c.method(h, o)
	c.covariates(h, o)
	c.evidence(h, claim, o)
}

// level demands the error level that the claim uses.
func (c *checker) level(h *record.Hypothesis, claim *record.Claim) {
	if !claim.Judged {
		return
	}
	own, plan, key := h.Alpha.OneSided, c.rec.Plan.Alpha.OneSided, "one_sided"
	if claim.TwoSided {
		own, plan, key = h.Alpha.TwoSided, c.rec.Plan.Alpha.TwoSided, "two_sided"
	}
	if absent(own) && absent(plan) {
		if c.damaged {
			return
		}
		example := pick(claim.TwoSided, "0.05", "0.025")
		c.add(diag.Error("R309", h.At, "the claim %q needs an error level, and alpha.%s is not stated", claim.Word, key).
			WithHelp("add alpha = { %s = %s } to [plan] or to this table, with the level you chose", key, example))
		return
	}
	used := own
	if absent(own) {
		return // the plan's level is judged once, in head
	}
	if key == "one_sided" {
		c.highLevel(used)
	}
}

// highLevel warns of a one-sided level above the usual one where that is held
// against a record.
func (c *checker) highLevel(level record.Number) {
	if c.strict() && level.Stated && level.V > 0.025 && absent(c.rec.Plan.AlphaWhy) {
		c.add(diag.Warning("R310", level.Span, "a one-sided level of %s is above 0.025, without a reason, in a %s record", num(level.V), c.rec.Head.Setting.V).
			WithHelp("say why in plan.alpha_why, or use 0.025 (ICH E9)"))
	}
}

// claimKeys checks the keys that belong to some claims only.
func (c *checker) claimKeys(h *record.Hypothesis, claim *record.Claim) {
	if h.Limit.Stated && !claim.NeedsLimit {
		c.misplaced(h.Limit.Span, "limit", "does not apply to the claim "+claim.Word)
	}
	if claim.NeedsLimit && absent(h.Limit) {
		c.add(diag.Error("R312", h.At, "the claim %q needs a value: `limit` is missing", claim.Word).
			WithHelp("write limit = …, the value of the effect that it must stay %s", claim.Word))
	}
	if h.Margin.Stated && !claim.HasMargin {
		c.misplaced(h.Margin.Span, "margin", "does not apply to the claim "+claim.Word)
	}
	if h.MarginBasis != nil && claim.Word != "noninferior" && claim.Word != "equivalent" {
		c.misplaced(h.MarginBasis.At, "margin_basis", "does not apply to the claim "+claim.Word)
	}
	if claim.Word == "noninferior" && c.strict() && absent(h.Margin) {
		c.add(diag.Error("R314", h.At, "a noninferiority claim of a %s record needs a margin of its own", c.rec.Head.Setting.V).
			WithHelp("write margin = … and margin_why = \"…\""))
	}
}

// claimOn checks the claim against the outcome.
func (c *checker) claimOn(h *record.Hypothesis, claim *record.Claim, o *record.Outcome) {
	m := record.MeasureOf(o.Measure.V)
	if m == nil || !o.Measure.Stated {
		return
	}
	directed := o.Better.V == "higher" || o.Better.V == "lower"
	if claim.Directed && !directed && (o.Better.Stated || absent(o.Better)) {
		c.add(diag.Error("S108", h.Claim.Span, "the claim %q has a direction, and the outcome %q does not say which is better", claim.Word, o.Name).
			WithHelp("add better = \"higher\" or better = \"lower\" to [plan.outcome.%s]", o.Name))
	}
	if claim.NeedsSize && absent(h.Margin) && absent(o.Smallest) && !(claim.Word == "noninferior" && c.strict()) {
		c.add(diag.Error("S108", h.Claim.Span, "the claim %q needs a size, and neither `margin` here nor `smallest` of the outcome %q is stated", claim.Word, o.Name).
			WithHelp("add smallest = … and why = \"…\" to [plan.outcome.%s]", o.Name))
	}
	if claim.HasMargin {
		c.region(o, h.Margin, "margin")
		c.basis(h, o, m)
	}
	if claim.NeedsLimit && h.Limit.Stated && !inRange(m, h.Limit.V) {
		c.add(diag.Error("R313", h.Limit.Span, "a %s is %s; the limit is %s", m.Word, rangeOf(m), num(h.Limit.V)))
	}
}

// basis compares the margin with the evidence behind it: the margin must not
// be larger than the part of the comparator's effect that is sure, the
// distance of the nearer limit from the null.
func (c *checker) basis(h *record.Hypothesis, o *record.Outcome, m *record.Measure) {
	b := h.MarginBasis
	if b == nil {
		return
	}
	if absent(h.Margin) && absent(o.Smallest) {
		return
	}
	if !b.Low.Stated || !b.High.Stated || !b.Effect.Stated {
		return
	}
	if b.Low.V > b.Effect.V || b.Effect.V > b.High.V || b.Low.V >= b.High.V {
		c.add(diag.Error("R407", b.At, "the effect of `margin_basis`, %s, must lie between its limits, %s and %s", num(b.Effect.V), num(b.Low.V), num(b.High.V)))
		return
	}
	g := func(v float64) float64 { return v }
	if m.IsRatio() {
		if b.Low.V <= 0 {
			c.add(diag.Error("R407", b.Low.Span, "a ratio is above 0; the lower limit is %s", num(b.Low.V)))
			return
		}
		g = math.Log
	}
	null, low, high, ok := h.Points(o)
	if !ok || m.IsRatio() && (low <= 0 || high <= 0) {
		return
	}
	sure := math.Min(math.Abs(g(b.Low.V)-g(null)), math.Abs(g(b.High.V)-g(null)))
	if b.Low.V <= null && null <= b.High.V {
		sure = 0
	}
	size := math.Max(math.Abs(g(low)-g(null)), math.Abs(g(high)-g(null)))
	switch o.Better.V {
	case "higher":
		size = math.Abs(g(low) - g(null))
	case "lower":
		size = math.Abs(g(high) - g(null))
	}
	if size <= sure*(1+1e-12) {
		return
	}
	at := h.Margin.Span
	if at.IsZero() {
		at = b.At
	}
	switch {
	case sure == 0:
		c.add(diag.Warning("R315", at, "the margin has no basis: the comparator's own effect, %s to %s, does not exclude the null", num(b.Low.V), num(b.High.V)))
	default:
		c.add(diag.Warning("R315", at, "the margin is beyond its basis: the comparator's effect is sure only as far as %s", num(nearer(b, null))).
			WithHelp("a margin within that limit keeps a part of the comparator's effect (ICH E10)"))
	}
}

// nearer is the limit of the basis that is nearer to the null.
func nearer(b *record.MarginBasis, null float64) float64 {
	if math.Abs(b.Low.V-null) < math.Abs(b.High.V-null) {
		return b.Low.V
	}
	return b.High.V
}

func (c *checker) method(h *record.Hypothesis, o *record.Outcome) {
	m := record.MeasureOf(o.Measure.V)
	if !h.Method.Stated || m == nil || !o.Measure.Stated || m.HasMethod(h.Method.V) {
		return
	}
	d := diag.Error("R316", h.Method.Span, "%s is no method of %s", quoteShort(h.Method.V), m.Word)
	if near := nearest(h.Method.V, m.Methods); near != "" {
		d = d.WithHelp("did you mean %q? %s has %s", near, m.Word, words(m.Methods))
	} else {
		d = d.WithHelp("%s has %s", m.Word, words(m.Methods))
	}
	c.add(d)
}

// covariates checks that the measure can be adjusted or stratified.
func (c *checker) covariates(h *record.Hypothesis, o *record.Outcome) {
	m := record.MeasureOf(o.Measure.V)
	if m == nil || !o.Measure.Stated {
		return
	}
	linear := m.HasMethod("linear")
	if h.Adjust.Stated && !linear {
		c.add(diag.Error("S112", h.Adjust.Span, "%s cannot be adjusted for covariates", m.Word).
			WithHelp("mean-difference and geometric-mean-ratio can"))
	}
	if h.Strata.Stated && !linear && !m.HasMethod("mantel-haenszel") && m.Word != "hazard-ratio" {
		c.add(diag.Error("S112", h.Strata.Span, "%s cannot be stratified", m.Word).
			WithHelp("differences and ratios of risks and rates, odds ratios, hazard ratios and linear models can"))
	}
	if h.Method.Stated && (h.Method.V == "linear" || h.Method.V == "linear-hc3") && absent(h.Adjust) && absent(h.Strata) {
		c.add(diag.Error("R316", h.Method.Span, "the method %q needs covariates: `adjust` is missing", h.Method.V))
	}
	if h.Method.Stated && h.Method.V == "mantel-haenszel" && absent(h.Strata) {
		c.add(diag.Error("R316", h.Method.Span, "the method \"mantel-haenszel\" needs `strata`"))
	}
}

// evidence demands a word on several studies.
func (c *checker) evidence(h *record.Hypothesis, claim *record.Claim, o *record.Outcome) {
	studies := len(c.seen[o.Name])
	if h.Studies.Stated {
		studies = 0
		for _, s := range distinct(h.Studies) {
			if c.seen[o.Name][s.V] {
				studies++
			}
		}
	}
	if absent(h.Evidence) && studies > 1 {
		c.add(diag.Error("S111", h.At, "%d studies have results for %q, and `evidence` does not say how they speak", studies, o.Name).
			WithHelp(`write evidence = "pooled" or "combined", or name one study in studies = ["…"]`))
	}
	if !h.Evidence.Stated {
		return
	}
	switch h.Evidence.V {
	case "single":
		if studies > 1 {
			c.add(diag.Error("R341", h.Evidence.Span, "%d studies have results for %q; a claim on a single study must name it", studies, o.Name).
				WithHelp(`add studies = ["…"]`))
		}
	case "pooled":
		if c.rec.PoolingOf(o.Name) == nil && !c.damaged {
			c.add(diag.Error("R341", h.Evidence.Span, "pooled evidence needs the table [plan.pooling.%s]", o.Name).
				WithHelp("it says why the studies are independent, and the model"))
		}
	case "combined":
		if c.rec.CombinationOf(o.Name) == nil && !c.damaged {
			c.add(diag.Error("R341", h.Evidence.Span, "combined evidence needs the table [plan.combination.%s]", o.Name).
				WithHelp("it names the method"))
		}
		if claim.HasMargin || claim.NeedsLimit || !claim.Judged {
			c.add(diag.Error("S113", h.Claim.Span, "p-values can be combined for the claims differs and superior, not for %q", claim.Word))
		}
	}
}

// unprotected warns of several primary claims that no family holds together.
// Two claims that exclude each other count as one.
func (c *checker) unprotected() {
	type pair struct{ outcome string }
	seen := map[pair][]string{}
	var first *record.Hypothesis
	for _, h := range c.rec.Plan.Hypotheses {
		claim := record.ClaimOf(h.Claim.V)
		if claim == nil || !h.Claim.Stated || !claim.Judged || h.Role.V != "primary" || c.member[h.Name] != "" {
			continue
		}
		if other := exclusive(claim.Word); other != "" && h.Outcome.Stated {
			k := pair{h.Outcome.V}
			if slices.Contains(seen[k], other) {
				continue
			}
			seen[k] = append(seen[k], claim.Word)
		}
		if first == nil {
			first = h
			continue
		}
		c.add(diag.Warning("R319", h.At, "%q and %q are both primary and in no family: together they may err more often than each level says", first.Name, h.Name).
			WithHelp("put them in a [plan.family.NAME], or give one the role \"secondary\""))
		return
	}
}

// exclusive is the claim that excludes another one on the same outcome.
func exclusive(claim string) string {
	switch claim {
	case "minimum-effect":
		return "benefit-too-small"
	case "benefit-too-small":
		return "minimum-effect"
	}
	return ""
}
