package jsonout

import (
	"strconv"

	"steelyard/compute/result"
)

func pooledObject(p *result.Pooled) *object {
	o := &object{}
	o.str("outcome", p.Outcome)
	o.text("set", p.Set)
	o.list("studies", words(p.Studies))
	o.str("model", p.Model)
	o.text("between", p.Between)
	o.text("interval", p.Interval)
	o.text("weighting", p.Weights)
	o.flag("decides", p.Decides)
	o.integer("k", p.K)
	analysis(o, &p.Analysis)
	o.p("p", p.P)
	o.opt("q", p.Q)
	o.opt("q_df", p.QDF)
	o.p("q_p", p.QP)
	o.opt("i2", p.I2)
	o.opt("i2_low", p.I2Low)
	o.opt("i2_high", p.I2High)
	o.opt("h2", p.H2)
	o.opt("tau2", p.Tau2)
	o.opt("tau2_low", p.Tau2Low)
	o.opt("tau2_high", p.Tau2High)
	o.opt("prediction_low", p.PredictionLow)
	o.opt("prediction_high", p.PredictionHigh)
	o.list("weights", floats(p.Share))
	o.some("left_for_zero", words(p.LeftForZero))
	o.some("leave_one_out", each(p.LeaveOneOut, func(l *result.LeftOne) *object {
		x := &object{}
		x.str("study", l.Study)
		x.number("estimate", l.Estimate)
		x.number("low", l.Low)
		x.number("high", l.High)
		v := &object{}
		for _, n := range l.Verdicts {
			v.str(n.Hypothesis, string(n.Verdict))
		}
		x.put("verdicts", v)
		return x
	}))
	o.some("cumulative", each(p.Cumulative, func(s *result.Step) *object {
		x := &object{}
		x.text("date", date(s.Date))
		x.str("study", s.Study)
		x.number("estimate", s.Estimate)
		x.number("low", s.Low)
		x.number("high", s.High)
		return x
	}))
	if s := p.SmallStudy; s != nil {
		x := &object{}
		x.str("kind", s.Kind)
		x.number("coefficient", s.Coefficient)
		x.number("se", s.SE)
		x.number("df", s.DF)
		x.number("t", s.T)
		x.p("p", s.P)
		o.put("small_study", x)
	}
	return o
}

func floats(v []float64) []any {
	out := make([]any, 0, len(v))
	for _, x := range v {
		out = append(out, finite(x))
	}
	return out
}

func combinedObject(c *result.Combined) *object {
	o := &object{}
	o.str("hypothesis", c.Hypothesis)
	o.text("set", c.Set)
	o.str("method", c.Method)
	o.integer("k", c.K)
	o.opt("statistic", c.Statistic)
	o.opt("df", c.DF)
	o.p("p", c.P)
	o.text("toward", c.Toward)
	o.str("case", c.Case)
	o.some("studies", words(c.Studies))
	if t := c.Tally; t != nil {
		x := &object{}
		x.integer("toward", t.Toward)
		x.integer("with_direction", t.With)
		x.p("p", t.P)
		o.put("tally", x)
	}
	return o
}

func familyObject(f *result.Family) *object {
	o := &object{}
	o.str("name", f.Name)
	o.str("procedure", f.Procedure)
	o.text("verdict", string(f.Verdict))
	o.number("alpha", f.Alpha)
	o.some("after", words(f.After))
	o.list("members", each(f.Members, func(m *result.Member) *object {
		x := &object{}
		x.str("hypothesis", m.Hypothesis)
		x.p("p", m.P)
		x.p("p_adjusted", m.PAdjusted)
		x.opt("alpha_local", m.AlphaLocal)
		x.flag("rejected", m.Rejected)
		return x
	}))
	o.some("path", each(f.Path, func(s *result.PathStep) *object {
		x := &object{}
		x.str("hypothesis", s.Hypothesis)
		x.number("level", s.Level)
		x.number("p", s.P)
		x.flag("rejected", s.Rejected)
		return x
	}))
	return o
}

func lookObject(l *result.Look) *object {
	o := &object{}
	o.str("hypothesis", l.Hypothesis)
	if n, err := strconv.Atoi(l.Look); err == nil {
		o.integer("look", n)
	} else {
		o.str("look", l.Look)
	}
	o.text("date", date(l.Date))
	o.opt("fraction", l.Fraction)
	o.opt("information", l.Information)
	o.opt("alpha_spent", l.AlphaSpent)
	o.opt("upper", l.Upper)
	o.opt("lower", l.Lower)
	o.opt("value", l.Value)
	o.opt("value_low", l.ValueLow)
	o.opt("value_high", l.ValueHigh)
	o.p("p", l.P)
	if l.Crossed == "" {
		o.str("crossed", "none")
	} else {
		o.str("crossed", l.Crossed)
	}
	o.opt("repeated_low", l.RepeatedLow)
	o.opt("repeated_high", l.RepeatedHigh)
	if l.ConditionalAssumed.OK || l.ConditionalEstimate.OK || l.ConditionalNull.OK {
		x := &object{}
		x.opt("assumed", l.ConditionalAssumed)
		x.opt("estimate", l.ConditionalEstimate)
		x.opt("null", l.ConditionalNull)
		o.put("conditional_power", x)
	}
	return o
}

func sizeObject(s *result.Size) *object {
	o := &object{}
	o.str("name", s.Name)
	o.str("hypothesis", s.Hypothesis)
	o.list("n", floats(s.N))
	o.opt("total", s.Total)
	o.opt("recruit", s.Recruit)
	o.opt("power", s.Power)
	o.opt("detectable", s.Detectable)
	o.opt("assumed", s.Assumed)
	return o
}

func priorObject(p *result.Prior) *object {
	o := &object{}
	o.str("name", p.Name)
	o.str("outcome", p.Outcome)
	o.text("label", p.Label)
	o.put("before", beliefObject(&p.Before))
	o.put("after", beliefObject(&p.After))
	o.opt("bayes_factor", p.BayesFactor)
	if !p.BayesFactor.OK {
		o.opt("ln_bayes_factor", p.LnBayesFactor)
	}
	o.list("path", each(p.Path, beliefObject))
	return o
}

func beliefObject(b *result.Belief) *object {
	o := &object{}
	o.text("study", b.Study)
	o.number("mean", b.Mean)
	o.number("sd", b.SD)
	o.number("benefit", b.Benefit)
	o.number("inside", b.Inside)
	o.number("harm", b.Harm)
	o.opt("null_share", b.NullShare)
	return o
}
