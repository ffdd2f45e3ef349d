package render

import (
	"steelyard/compute/result"
	"steelyard/render/number"
)

// beliefs prints stated beliefs and how far the results move them.
func (c *composer) beliefs() {
	if len(c.res.Priors) == 0 {
		return
	}
	c.heading(1, "Stated beliefs and how far the results move them", "beliefs")
	c.para("Beliefs were stated in the plan. They never change a verdict. Each row gives the probability, under that belief, of a benefit that matters, of an effect inside the region, and of a harm that matters.")
	for i := range c.res.Priors {
		p := &c.res.Priors[i]
		o := outcomeOf(c.res, p.Outcome)
		title := p.Label
		if title == "" {
			title = p.Name
		}
		c.heading(2, title+" ("+o.Label+")", "")
		if p.Why != "" {
			c.para("Why: " + fullStop(p.Why))
		}
		t := newTable("", "Belief", "#Mean", "#SD", ">Benefit", ">Inside", ">Harm", ">Exactly null")
		least := p.Before.SD // sets the decimals of the whole table
		for _, b := range append([]result.Belief{p.After}, p.Path...) {
			if b.SD > 0 && !(least > 0 && least <= b.SD) {
				least = b.SD
			}
		}
		beliefRow(t, "before", &p.Before, least)
		for k := range p.Path {
			beliefRow(t, "after "+p.Path[k].Study, &p.Path[k], least)
		}
		if len(p.Path) == 0 {
			beliefRow(t, "after", &p.After, least)
		}
		t.note("Mean and SD on the analysis scale" + scaleText(o) + ".")
		t.to(c)
		c.add2(c.beliefFigure(p, o))
		switch {
		case p.BayesFactor.OK:
			c.para("Bayes factor of the stated null over the rest of this belief: " + number.Significant(p.BayesFactor.V, 3) + ".")
		case p.LnBayesFactor.OK:
			c.para("Natural logarithm of the Bayes factor of the stated null over the rest of this belief: " + number.Significant(p.LnBayesFactor.V, 3) + ".")
		}
	}
	c.beliefRange()
}

// scaleText names a scale other than the effect's own.
func scaleText(o *result.Outcome) string {
	switch o.Scale {
	case "log":
		return " (natural logarithm)"
	case "logit":
		return " (log odds)"
	case "atanh":
		return " (Fisher z)"
	}
	return ""
}

// beliefRow prints one belief.
func beliefRow(t *table, name string, b *result.Belief, least float64) {
	null := ""
	if b.NullShare.OK {
		null = number.Share(b.NullShare.V)
	}
	f := number.Format{Digits: -1}
	t.row(name, f.Value(b.Mean, least/3), f.Value(b.SD, least/3), number.Share(b.Benefit), number.Share(b.Inside), number.Share(b.Harm), null)
}

// shareRange is "4.7 % to 23.4 %", or one share where both read the same.
func shareRange(lo, hi float64) string {
	a, b := number.Share(lo), number.Share(hi)
	if a == b {
		return a
	}
	return a + " to " + b
}

// beliefRange gives lowest and highest over all beliefs of an outcome.
func (c *composer) beliefRange() {
	done := map[string]bool{}
	for i := range c.res.Priors {
		name := c.res.Priors[i].Outcome
		if done[name] {
			continue
		}
		done[name] = true
		n := 0
		lo, hi := [3]float64{1, 1, 1}, [3]float64{}
		for k := range c.res.Priors {
			if c.res.Priors[k].Outcome != name {
				continue
			}
			n++
			a := &c.res.Priors[k].After
			for m, x := range [3]float64{a.Benefit, a.Inside, a.Harm} {
				lo[m], hi[m] = min(lo[m], x), max(hi[m], x)
			}
		}
		if n > 1 {
			c.para("Over the " + number.Int(n) + " beliefs on " + outcomeOf(c.res, name).Label + ", after the results: benefit that matters " + shareRange(lo[0], hi[0]) +
				"; inside the region " + shareRange(lo[1], hi[1]) + "; harm that matters " + shareRange(lo[2], hi[2]) + ".")
		}
	}
}
