package render

import (
	"steelyard/compute/result"
	"steelyard/render/number"
)

// looks prints boundaries and what was seen at each look.
func (c *composer) looks() {
	if len(c.res.Looks) == 0 {
		return
	}
	c.heading(1, "Looks and boundaries", "looks")
	c.para("Values and boundaries are on the z scale, signed toward the claim; error spent is one-sided.")
	t := newTable("Looks", "Hypothesis", "Look", "Date", ">Information", ">Fraction", "#Error spent", "#Lower", "#Value", "#Upper", "#Sequential p", "Crossed")
	for i := range c.res.Looks {
		l := &c.res.Looks[i]
		value := number.Statistic(l.Value)
		if l.ValueLow.OK || l.ValueHigh.OK {
			value = number.Statistic(l.ValueLow) + " and " + number.Statistic(l.ValueHigh)
		}
		spent := ""
		if l.AlphaSpent.OK {
			spent = number.Short(l.AlphaSpent.V, 3)
		}
		info := ""
		if l.Information.OK {
			info = number.Short(l.Information.V, 4)
		}
		fraction := ""
		if l.Fraction.OK {
			fraction = number.Share(l.Fraction.V)
		}
		t.row(l.Hypothesis, l.Look, dateText(l.Date), info, fraction, spent, number.Statistic(l.Lower), value, number.Statistic(l.Upper), pCell(l.P, 0), crossedText(l.Crossed))
	}
	t.to(c)
	c.lookDetails()
	for _, l := range c.res.Looks {
		if l.Look == "unplanned" {
			c.para("An unplanned look keeps its error only if its timing did not depend on the results.")
			break
		}
	}
}

// crossedText words a crossing.
func crossedText(s string) string {
	switch s {
	case "efficacy":
		return "efficacy boundary"
	case "futility":
		return "futility boundary"
	}
	return "none"
}

// lookDetails prints repeated intervals and conditional power.
func (c *composer) lookDetails() {
	t := newTable("Repeated intervals and conditional power", "Hypothesis", "Look", "Repeated interval", ">Power if assumed effect holds", ">If present estimate holds", ">If null holds")
	for i := range c.res.Looks {
		l := &c.res.Looks[i]
		h := c.hypothesis(l.Hypothesis)
		interval := ""
		if h != nil && (l.RepeatedLow.OK || l.RepeatedHigh.OK) {
			v := voiceOf(c.res, h)
			interval = v.f.Interval(result.Opt{}, l.RepeatedLow, l.RepeatedHigh, v.points()...).Range()
		}
		if interval == "" && !l.ConditionalAssumed.OK && !l.ConditionalEstimate.OK && !l.ConditionalNull.OK {
			continue
		}
		t.row(l.Hypothesis, l.Look, interval, number.ShareOpt(l.ConditionalAssumed), number.ShareOpt(l.ConditionalEstimate), number.ShareOpt(l.ConditionalNull))
	}
	t.to(c)
}

// hypothesis finds a hypothesis of the result.
func (c *composer) hypothesis(name string) *result.Hypothesis {
	for i := range c.res.Hypotheses {
		if c.res.Hypotheses[i].Name == name {
			return &c.res.Hypotheses[i]
		}
	}
	return nil
}
