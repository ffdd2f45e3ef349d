package render

import (
	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/render/number"
)

// instant writes an offset date-time as it was written, to the minute.
func instant(t record.Instant) string {
	if !t.Stated {
		return ""
	}
	return t.V.Format("2006-01-02 15:04 -07:00")
}

// timeline prints one order of approvals, seals, results, looks, decisions
// and changes.
func (c *composer) timeline() {
	if len(c.res.Timeline) == 0 {
		return
	}
	c.heading(1, "Timeline", "timeline")
	c.add2(c.timelineFigure())
	t := newTable("", "When", "What", "Kind", "Order")
	for _, e := range c.res.Timeline {
		order := e.Order
		if order == "unproven" {
			order = "order cannot be proved"
		}
		t.row(e.At, e.What, e.Kind, order)
	}
	t.to(c)
}

// deviations prints deviations and every change since the seal. It is never
// left out: "None declared" is itself a statement.
func (c *composer) deviations() {
	c.heading(1, "Deviations and changes since the seal", "deviations")
	if len(c.rec.Deviations) == 0 {
		c.para("Deviations: none declared.")
	}
	for i, d := range c.rec.Deviations {
		c.heading(2, "Deviation "+number.Int(i+1)+", "+dateText(d.Date.V), "")
		var f facts
		f.add("What", d.What.V)
		f.add("Why", d.Why.V)
		known := "no"
		if d.ResultsKnown.V {
			known = "yes"
		}
		f.add("Results known", known)
		if len(d.Changes.V) > 0 {
			f.add("Changes", join(strings2(d.Changes)))
		}
		for _, r := range d.Results {
			f.add("Corrected result", r.Study.V+", "+r.Outcome.V)
		}
		if d.Approved != nil {
			f.add("Approved", d.Approved.By.V+", "+dateText(d.Approved.Date.V)+" "+d.Approved.Reference.V)
		}
		f.to(c, 1)
	}
	c.changeTable()
	if c.res.Masked {
		return
	}
	c.sealedVerdicts()
}

// changeTable prints sealed and present values.
func (c *composer) changeTable() {
	s := &c.res.Seal
	switch {
	case s.State == "unsealed":
		c.para("The plan is not sealed, so changes cannot be shown.")
		return
	case s.State == "broken":
		c.para("The chain of seals is broken: " + fullStop(s.Broken))
	case len(s.Changes) == 0 && len(s.EditedResults) == 0:
		c.para("Changes of the sealed plan and of sealed results: none found.")
		return
	}
	t := newTable("Sealed and present values", "Key", "Sealed", "Now", "Standing")
	for _, ch := range s.Changes {
		word := "undeclared"
		switch {
		case ch.Wording:
			word = "wording only"
		case ch.Declared:
			word = "declared"
		}
		t.row(ch.Path, valueOrAbsent(ch.Old), valueOrAbsent(ch.New), word)
	}
	t.to(c)
	var l list
	for _, e := range s.EditedResults {
		name := e.Study + ", " + e.Outcome
		if e.Set != "" {
			name += ", set " + e.Set
		}
		if e.Look != "" {
			name += ", look " + e.Look
		}
		l.named("Sealed result changed later", name+".")
	}
	l.to(c)
}

// valueOrAbsent says when a side has no value.
func valueOrAbsent(s string) string {
	if s == "" {
		return "(absent)"
	}
	return s
}

// sealedVerdicts compares verdicts under the sealed plan and the plan now.
func (c *composer) sealedVerdicts() {
	t := newTable("Verdicts under the sealed plan and now", "Hypothesis", "Sealed plan", "Plan now")
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		for k := range h.Alternatives {
			if a := &h.Alternatives[k]; a.Because == "sealed-plan" {
				t.row(h.Name, verdictWithInterval(voiceOf(c.res, h), a), verdictWithInterval(voiceOf(c.res, h), &h.Judged))
			}
		}
	}
	t.to(c)
}

// verdictWithInterval is a verdict with the numbers it stands beside.
func verdictWithInterval(v voice, j *result.Judged) string {
	s := string(j.Verdict)
	if e := v.evidence(j); e != "" {
		s += " (" + e + ")"
	}
	return s
}
