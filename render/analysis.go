package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
	"steelyard/render/page"
)

// analyses prints one section a hypothesis.
func (c *composer) analyses() {
	if len(c.res.Hypotheses) == 0 {
		return
	}
	c.heading(1, "The analysis of each hypothesis", "analysis")
	for i := range c.res.Hypotheses {
		c.analysis(&c.res.Hypotheses[i])
	}
	c.sharedBeams()
}

// analysis is all that was computed for one hypothesis.
func (c *composer) analysis(h *result.Hypothesis) {
	v := voiceOf(c.res, h)
	title := h.Name + ": " + v.label() + " – " + claimName(h.Claim)
	if h.Verdict != result.Described {
		title += ": " + string(h.Verdict)
	}
	c.heading(2, title, "hypothesis-"+h.Name)
	text := []page.Inline{page.Strong(capital(string(h.Verdict)))}
	if q := c.qualify(h); q != "" {
		text = append(text, page.Text(" ("+q+")"))
	}
	c.add(page.Paragraph{Text: append(text, page.Text(". "+Sentence(c.res, h, &h.Judged)))})
	if s := v.worstLine(); s != "" {
		c.para(s)
	}
	if name, words := v.reading(&h.Judged); name != "" {
		c.para("Reading: " + name + " – " + words + ".")
	}
	if h.Claim == "describe" && h.Verdict == result.Described {
		c.describeNote(v)
	}
	if h.Excludes != "" && judged(h.Verdict) {
		c.small("Of " + h.Name + " and " + h.Excludes + " at most one can be wrong, unless the truth lies exactly on the limit; this stands in place of an adjustment.")
	}
	c.numbersOf(v)
	c.testTable(v)
	c.add2(c.beamFull(h))
	c.add2(c.curveFigure(h))
	c.smallest(v)
	c.assumptions(h)
	c.notes(h)
	c.bySets(v)
	c.alternatives(v)
	c.sensitivityOf(v)
}

// add2 adds the figures that there are.
func (c *composer) add2(figures ...*page.Figure) {
	for _, f := range figures {
		if f != nil {
			c.add(*f)
		}
	}
}

// describeNote says that a description is not a verdict.
func (c *composer) describeNote(v voice) {
	c.small("The plan asks for a description of this outcome; no claim is judged from it.")
}

// numbersOf are the estimate with what stands behind it.
func (c *composer) numbersOf(v voice) {
	h := v.h
	if !h.Estimate.OK && !h.Low.OK && !h.High.OK && !h.P.OK {
		return
	}
	s := v.shown(&h.Judged)
	var f facts
	f.add("Estimate", s.EstimateUnit())
	if r := s.Range(); r != "" {
		f.add(number.Level(h.Level)+" interval", r+decides(&h.Judged))
	}
	if d := h.Descriptive; d.Low.OK && d.High.OK && d.Level != h.Level {
		ds := v.f.Interval(d.Estimate, d.Low, d.High, v.points()...)
		f.add(number.Level(d.Level)+" interval (descriptive)", ds.Range())
	}
	if h.SE.OK {
		f.add(seLabel(v.o), number.Significant(seShown(v, h.SE.V), 3))
	}
	f.add("Degrees of freedom", emptyDF(h.DF))
	if h.N > 0 {
		f.add("Analysed", number.Count(h.N))
	}
	if h.Events.OK {
		f.add("Events", number.Count(h.Events.V))
	}
	f.add("Method", methodName(h.Method))
	f.add("Set", h.Set)
	if len(h.Studies) > 0 && h.Evidence == "single" {
		f.add("Study", join(h.Studies))
	}
	if h.Claim != "describe" {
		f.add("Error level", strings.TrimPrefix(v.atError(), "at "))
	}
	if h.P.OK {
		f.add("p of the claim", number.P(h.P, h.Alpha))
	}
	if h.PAdjusted.OK {
		f.add("p adjusted in its family", number.P(h.PAdjusted, h.Alpha))
	}
	if h.SValue.OK {
		f.add("Surprise (S-value)", number.SValue(h.SValue)+" bits against the tested null")
	}
	f.to(c, 2)
}

// decides marks an interval that is only shown.
func decides(j *result.Judged) string {
	if !judged(j.Verdict) || j.IntervalDecides {
		return ""
	}
	return " (at the claim's own level; it does not decide)"
}

// seLabel names the standard error's scale.
func seLabel(o *result.Outcome) string {
	if o.Ratio {
		return "Standard error of the logarithm"
	}
	return "Standard error"
}

// seShown is the standard error on the shown scale; of a logarithm as it is.
func seShown(v voice, se float64) float64 {
	if v.o.Ratio {
		return se
	}
	return v.f.Show(se)
}

// emptyDF writes degrees of freedom, "" where they do not apply.
func emptyDF(df result.Opt) string {
	if !df.OK {
		return ""
	}
	return number.DF(df)
}

// testTable prints every test of a point.
func (c *composer) testTable(v voice) {
	h := v.h
	t := newTable("Tests", "Tested", "Against", "Statistic", "#Value", "#df", "#p")
	for i := range h.Tests {
		x := &h.Tests[i]
		against := "an effect on either side"
		tested := v.t.short + " equal to " + v.f.PointUnit(x.Null)
		switch x.Alternative {
		case "greater":
			tested = v.t.short + " at or below " + v.f.PointUnit(x.Null)
			against = "above"
		case "less":
			tested = v.t.short + " at or above " + v.f.PointUnit(x.Null)
			against = "below"
		}
		t.row(tested, against, statisticName(x.Statistic), number.Statistic(x.Value), number.DF(x.DF), number.P(x.P, h.Alpha))
	}
	if h.Claim == "equivalent" && len(h.Tests) > 1 {
		t.note("The claim's p-value is the larger of the two.")
	}
	t.to(c)
}

// statisticName is a statistic's usual sign.
func statisticName(s string) string {
	switch s {
	case "chi2":
		return "χ²"
	case "f":
		return "F"
	}
	return s
}

// smallest says at which margin the claim would be established.
func (c *composer) smallest(v voice) {
	h := v.h
	if !h.SmallestLimit.OK && !h.SmallestMargin.OK {
		return
	}
	what := "margin beyond "
	switch h.Claim {
	case "equivalent":
		what = "region wider than "
	case "minimum-effect":
		what = "smallest effect nearer the null than "
	case "benefit-too-small":
		what = "smallest effect beyond "
	case "below":
		what = "limit above "
	case "above":
		what = "limit below "
	}
	where := v.shown(&h.Judged).At(h.SmallestLimit.V) + unitTail(v)
	switch {
	case h.Claim == "equivalent" && h.SmallestLow.OK && h.SmallestLimit.OK:
		where = v.shown(&h.Judged).At(h.SmallestLow.V) + " to " + where
	case h.Claim == "equivalent" && h.SmallestMargin.OK || !h.SmallestLimit.OK:
		where = v.marginWords(h.SmallestMargin.V)
	}
	c.para("The claim would be established for any " + what + where + ". This value was found after the data; it is not a claim.")
}

// marginWords is a distance from the null, or a factor.
func (v voice) marginWords(m float64) string {
	if v.o.Ratio {
		return "a factor of " + number.Significant(m, 3)
	}
	return number.Significant(v.f.Show(m), 3) + unitTail(v) + " on either side"
}

func unitTail(v voice) string {
	if v.f.Unit == "" {
		return ""
	}
	return number.Hard + v.f.Unit
}

// notes prints what the computation had to say.
func (c *composer) notes(h *result.Hypothesis) {
	var l list
	for _, n := range h.Notes {
		l.named(n.Code, fullStop(noteText(n)))
	}
	l.to(c)
}

// judgedTable starts the table in which judgements stand together.
func (v voice) judgedTable(caption, first string) *table {
	if u := inUnit(v.f); u != "" {
		caption = strings.TrimPrefix(caption+u, ", ")
	}
	return newTable(capital(caption), first, "Method", "#Estimate", "Interval", "#p", "Verdict")
}

// judgedRow prints one judgement.
func (v voice) judgedRow(t *table, name string, j *result.Judged) *page.Row {
	s := v.shown(j)
	word := string(j.Verdict)
	if j.Reason != nil {
		word += ": " + noteText(*j.Reason)
	}
	if n, _ := v.reading(j); n != "" {
		word += "; " + n
	}
	return t.row(name, methodName(j.Method), s.Estimate, withLevel(s.Bare(), j.Level), pCell(j.P, v.h.Alpha), word)
}

// pCell is a p-value in a table, "" where there is none.
func pCell(p result.P, alpha float64) string {
	if !p.OK {
		return ""
	}
	return number.P(p, alpha)
}

// bySets prints the claim in every set that it names.
func (c *composer) bySets(v voice) {
	if len(v.h.BySet) < 2 {
		return
	}
	t := v.judgedTable("In each analysis set; the largest p decides", "Set")
	for i := range v.h.BySet {
		j := &v.h.BySet[i]
		v.judgedRow(t, j.Set, j).Strong = j.Set == v.h.Set
	}
	t.to(c)
}

// alternatives prints the verdict as it would stand otherwise.
func (c *composer) alternatives(v voice) {
	t := v.judgedTable("The verdict as it would stand otherwise", "Under")
	for i := range v.h.Alternatives {
		j := &v.h.Alternatives[i]
		v.judgedRow(t, becauseText(j.Because), j)
	}
	if len(t.Rows) > 0 {
		v.judgedRow(t, "the analysis that decides", &v.h.Judged).Strong = true
	}
	if h := v.h; h.MethodsTried > 0 {
		t.note(number.Int(h.MethodsAgree) + " of " + plural(h.MethodsTried, "other method gives", "other methods give") + " the same verdict. The planned method decides.")
	}
	t.to(c)
}

// becauseText words the reason of an alternative.
func becauseText(because string) string {
	kind, name, _ := strings.Cut(because, ":")
	switch kind {
	case "sealed-plan":
		return "the plan as sealed"
	case "left-out-kept":
		return "the results left out, kept"
	case "worst-case":
		return "least favourable values"
	case "sensitivity":
		return "sensitivity analysis " + name
	case "method":
		return "another method"
	case "leave-one-out":
		return "without " + name
	}
	return strings.ReplaceAll(because, "-", " ")
}
