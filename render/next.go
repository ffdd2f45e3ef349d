package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// next prints what would settle open claims, and the planned sizes.
func (c *composer) next() {
	var l list
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		if h.WhatNext != nil {
			l.named(h.Name, c.nextText(h))
		}
	}
	if len(l.items) == 0 && len(c.res.Sizes) == 0 {
		return
	}
	c.heading(1, "What next", "next")
	l.to(c)
	if len(l.items) > 0 {
		c.small("Sizes assume that the present estimate is the true effect. Adding data to a finished test is a new plan: it must be sealed as looks before the data are seen.")
	}
	c.sizeTable()
}

// nextText says what would settle one claim.
func (c *composer) nextText(h *result.Hypothesis) string {
	w := h.WhatNext
	v := voiceOf(c.res, h)
	var parts []string
	if w.NoSize {
		parts = append(parts, "No size would do if the present estimate held.")
	}
	if s := c.twoSizes(w.NewStudyN80, w.NewStudyN90); s != "" {
		parts = append(parts, "A new study judged alone: "+s+".")
	}
	if s := c.twoSizes(w.AddedN80, w.AddedN90); s != "" {
		parts = append(parts, "Added to the present data: "+s+".")
	}
	s := v.f.Interval(h.Estimate, w.ExcludedLow, w.ExcludedHigh, v.points()...)
	low, high := finite(w.ExcludedLow), finite(w.ExcludedHigh)
	switch {
	case low && high:
		parts = append(parts, "Already excluded: values below "+v.f.WithUnit(s.Low)+" and above "+v.f.WithUnit(s.High)+".")
	case low:
		parts = append(parts, "Already excluded: values below "+v.f.WithUnit(s.Low)+".")
	case high:
		parts = append(parts, "Already excluded: values above "+v.f.WithUnit(s.High)+".")
	}
	return strings.Join(parts, " ")
}

// finite reports whether a limit exists.
func finite(o result.Opt) bool { return o.OK && o.V-o.V == 0 }

// twoSizes is "about 120 participants for power 0.8, 160 for 0.9".
func (c *composer) twoSizes(n80, n90 result.Opt) string {
	var p []string
	if n80.OK {
		p = append(p, "about "+number.Count(n80.V)+" "+c.units()+" for power 0.8")
	}
	if n90.OK {
		p = append(p, "about "+number.Count(n90.V)+" "+c.units()+" for power 0.9")
	}
	return strings.Join(p, ", ")
}

// units are what a setting counts.
func (c *composer) units() string {
	switch c.res.Record.Setting {
	case "clinical", "education":
		return "participants"
	case "safety", "field", "other":
		return "subjects or units"
	}
	return "units"
}

// sizeTable prints the solved questions of size.
func (c *composer) sizeTable() {
	t := newTable("Planned sizes", "Name", "Hypothesis", ">Assumed effect", ">Analysed per group", ">Total", ">To recruit", ">Power", ">Detectable effect")
	for i := range c.res.Sizes {
		s := &c.res.Sizes[i]
		var n []string
		for _, x := range s.N {
			n = append(n, number.Count(x))
		}
		assumed, detectable := plainOpt(s.Assumed), number.SignificantOpt(s.Detectable, 3)
		if h := c.hypothesis(s.Hypothesis); h != nil {
			v := voiceOf(c.res, h)
			if s.Assumed.OK {
				assumed = v.f.PointUnit(s.Assumed.V)
			}
			if s.Detectable.OK {
				detectable = v.f.WithUnit(number.Significant(v.f.Show(s.Detectable.V), 3))
			}
		}
		t.row(s.Name, s.Hypothesis, assumed, strings.Join(n, " + "), number.CountOpt(s.Total), number.CountOpt(s.Recruit), number.ShareOpt(s.Power), detectable)
	}
	t.to(c)
}

// stillNeeded is the line of page one.
func (c *composer) stillNeeded() string {
	var parts []string
	var pending []string
	for _, h := range c.primary() {
		switch {
		case h.Verdict == result.Pending:
			pending = append(pending, h.Name)
		case h.Verdict == result.Masked:
			parts = append(parts, h.Name+": the next planned look")
		case h.WhatNext != nil && h.WhatNext.NoSize:
			parts = append(parts, h.Name+": no further size would do if the present estimate held")
		case h.WhatNext != nil && h.WhatNext.NewStudyN90.OK:
			parts = append(parts, h.Name+": a new study of about "+number.Count(h.WhatNext.NewStudyN90.V)+" "+c.units()+" (power 0.9 if the present estimate held)")
		case h.Reason != nil:
			parts = append(parts, h.Name+": data that support the analysis")
		}
	}
	if len(pending) > 0 {
		word := "results for "
		if len(parts) == 0 {
			word = "Results for "
		}
		parts = append(parts, word+join(pending))
	}
	if n := c.count(result.MissingUse); n > 0 {
		parts = append(parts, plural(n, "missing result", "missing results"))
	}
	if s := c.res.Conclusion.NextSteps; s != "" {
		parts = append(parts, s)
	}
	if len(parts) == 0 {
		if c.res.Record.Stage == result.Complete {
			return "Nothing for the claims as planned."
		}
		return "The record is not marked complete; more results may come."
	}
	return fullStop(strings.Join(parts, "; "))
}

// count counts entries with a use.
func (c *composer) count(u result.Use) int {
	n := 0
	for _, s := range c.res.Studies {
		if s.Use == u {
			n++
		}
	}
	return n
}

// decision is the decision and who takes it.
func (c *composer) decision() string {
	var parts []string
	if s := c.res.Conclusion.Decision; s != "" {
		parts = append(parts, fullStop(s))
	}
	if n := len(c.rec.Decisions); n > 0 {
		d := c.rec.Decisions[n-1]
		parts = append(parts, "Last recorded: "+d.Body.V+", "+instant(d.At)+": "+fullStop(d.What.V))
	}
	var who []string
	for _, a := range c.rec.Head.ApprovalsWanted {
		s := a.Role.V
		if a.Name.V != "" {
			s += " (" + a.Name.V + ")"
		}
		who = append(who, s)
	}
	if len(who) > 0 {
		parts = append(parts, "To be signed by "+join(who)+".")
	}
	if len(parts) == 0 {
		return "None recorded."
	}
	return strings.Join(parts, " ")
}
