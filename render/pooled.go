package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// pooled prints several studies under both models.
func (c *composer) pooled() {
	if len(c.res.Pooled) == 0 {
		return
	}
	c.heading(1, "Pooled evidence", "pooled")
	done := map[string]bool{}
	for i := range c.res.Pooled {
		p := &c.res.Pooled[i]
		key := p.Outcome + "\x00" + p.Set + "\x00" + strings.Join(p.Studies, "\x00")
		if done[key] {
			continue
		}
		done[key] = true
		var group []*result.Pooled
		for k := range c.res.Pooled {
			q := &c.res.Pooled[k]
			if q.Outcome+"\x00"+q.Set+"\x00"+strings.Join(q.Studies, "\x00") == key {
				group = append(group, q)
			}
		}
		c.pooledGroup(group)
	}
}

// deciding is the model that decides, else the first.
func deciding(group []*result.Pooled) *result.Pooled {
	for _, p := range group {
		if p.Decides {
			return p
		}
	}
	return group[0]
}

// pooledGroup prints one outcome's studies.
func (c *composer) pooledGroup(group []*result.Pooled) {
	d := deciding(group)
	o := outcomeOf(c.res, d.Outcome)
	title := o.Label
	if d.Set != "" {
		title += ", set " + d.Set
	}
	c.heading(2, title, "")
	c.para("Studies: " + join(d.Studies) + ". The plan's model decides" + forHypotheses(d.Hypotheses) + ": " + modelName(d) + ".")
	if d.Model == "random" {
		c.small("Under the random-effects model the claim is about the mean over settings like these, not about each of them.")
	}
	c.add2(c.studiesFigure(group)...)
	c.modelTable(group, o)
	c.heterogeneity(group, o)
	c.weightTable(d, o)
	c.add2(c.cumulativeFigure(d)...)
	c.leaveOneOut(d, o)
	c.smallStudies(d)
	if len(d.LeftForZero) > 0 {
		c.para("Left out of the pooling because no group has an event (or all have): " + join(d.LeftForZero) + ".")
	}
}

// forHypotheses is " H1 and H2", "" for none.
func forHypotheses(names []string) string {
	if len(names) == 0 {
		return ""
	}
	return " " + join(names)
}

// modelName is "random effects (reml), hartung-knapp interval".
func modelName(p *result.Pooled) string {
	s := p.Model + " effect"
	if p.Model == "random" {
		s = "random effects"
		if p.Between != "" {
			s += " (between studies: " + p.Between + ")"
		}
	}
	if p.Interval != "" {
		s += ", " + p.Interval + " interval"
	}
	if p.Weights != "" && p.Weights != "inverse-variance" {
		s += ", " + p.Weights + " weights"
	}
	return s
}

// pooledShown is a pooled estimate as text.
func pooledShown(p *result.Pooled, o *result.Outcome) number.Shown {
	return number.Of(o).Interval(p.Estimate, p.Low, p.High, outcomePoints(o)...)
}

// modelTable shows both models.
func (c *composer) modelTable(group []*result.Pooled, o *result.Outcome) {
	t := newTable("Both models; the plan's decides"+inUnit(number.Of(o)), "Model", ">Studies", "#Estimate", "Interval", "#p at the null", "New setting like these")
	for _, p := range group {
		s := pooledShown(p, o)
		prediction := ""
		if p.PredictionLow.OK || p.PredictionHigh.OK {
			prediction = number.Of(o).Interval(result.Opt{}, p.PredictionLow, p.PredictionHigh, outcomePoints(o)...).Bare()
			if n := ReadingName(p.PredictionReading, o.Better); n != "" {
				prediction += "; " + n
			}
		}
		t.row(modelName(p), number.Int(p.K), s.Estimate, withLevel(s.Bare(), p.Level), pCell(p.P, 0), prediction).Strong = p.Decides
	}
	t.to(c)
}

// heterogeneity prints how far the studies differ.
func (c *composer) heterogeneity(group []*result.Pooled, o *result.Outcome) {
	for _, p := range spreadModel(group) {
		var f facts
		f.add("Q", number.Statistic(p.Q)+" on "+number.DF(p.QDF)+" df, "+number.PEquals(p.QP))
		f.add("I²", withLimits(number.ShareOpt(p.I2), p.I2Low, p.I2High, number.Share))
		if p.H2.OK {
			f.add("H²", number.Statistic(p.H2))
		}
		if p.Tau2.OK {
			f.add("τ² between studies", withLimits(number.Significant(p.Tau2.V, 3), p.Tau2Low, p.Tau2High, func(v float64) string { return number.Significant(v, 3) }))
		}
		c.heading(3, "How far the studies differ ("+modelName(p)+")", "")
		f.to(c, 2)
	}
}

// spreadModel is the model that says how far studies differ: the random one
// where there is one; none where Q was not computed.
func spreadModel(group []*result.Pooled) []*result.Pooled {
	var found []*result.Pooled
	for _, p := range group {
		if p.Q.OK && (len(found) == 0 || p.Model == "random") {
			found = []*result.Pooled{p}
		}
	}
	return found
}

// withLimits is "34.0 % (0.0 % to 71.2 %)".
func withLimits(s string, low, high result.Opt, write func(float64) string) string {
	if s == number.Absent {
		return ""
	}
	if !low.OK || !high.OK {
		return s
	}
	return s + " (" + write(low.V) + " to " + write(high.V) + ")"
}

// weightTable prints each study with its share.
func (c *composer) weightTable(p *result.Pooled, o *result.Outcome) {
	if len(p.Share) != len(p.Studies) {
		return
	}
	t := newTable("Studies and their weights under the model that decides"+inUnit(number.Of(o)), "Study", "#Estimate", "Interval", ">Weight")
	for i, name := range p.Studies {
		est, interval := "", ""
		if s := c.studyEntry(name, p.Outcome, p.Set); s != nil {
			sh := c.studyShown(s, o)
			est, interval = sh.Estimate, withLevel(sh.Bare(), s.Analysis.Level)
		}
		t.row(name, est, interval, number.Share(p.Share[i]))
	}
	t.to(c)
}

// studyEntry finds the analysed entry of a study.
func (c *composer) studyEntry(study, outcome, set string) *result.Study {
	var found *result.Study
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if s.Study != study || s.Outcome != outcome || s.Analysis.Method == "" {
			continue
		}
		if s.Set == set {
			return s
		}
		if found == nil && (s.Use == result.Analysed || s.Use == result.EarlierUse) {
			found = s
		}
	}
	return found
}

// leaveOneOut prints the pooled result without each study.
func (c *composer) leaveOneOut(p *result.Pooled, o *result.Outcome) {
	t := newTable("Each study left out in turn"+inUnit(number.Of(o)), "Without", "#Estimate", "Interval", "Verdicts")
	f := number.Of(o)
	for _, l := range p.LeaveOneOut {
		s := f.Interval(result.Some(l.Estimate), result.Some(l.Low), result.Some(l.High), outcomePoints(o)...)
		var v []string
		for _, x := range l.Verdicts {
			text := x.Hypothesis + " " + string(x.Verdict)
			if n := ReadingName(x.Reading, o.Better); n != "" {
				text += " (" + n + ")"
			}
			v = append(v, text)
		}
		t.row(l.Study, s.Estimate, s.Bare(), strings.Join(v, "; "))
	}
	t.to(c)
}

// smallStudies prints the small-study check.
func (c *composer) smallStudies(p *result.Pooled) {
	s := p.SmallStudy
	if s == nil {
		return
	}
	what := "intercept"
	if s.Kind == "peters" {
		what = "slope"
	}
	c.para("Small-study check (" + s.Kind + " regression): " + what + " " + number.Significant(s.Coefficient, 3) + ", standard error " +
		number.Significant(s.SE, 3) + ", t " + number.Statistic(result.Some(s.T)) + " on " + number.DF(result.Some(s.DF)) + " df, " + number.PEquals(s.P) +
		". Reported, never used to correct the pooled result.")
}
