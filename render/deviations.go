package render

import (
	"steelyard/compute/result"
	"steelyard/render/number"
)

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
	c.amendments()
	if c.res.Masked {
		return
	}
	c.sealedVerdicts()
	c.removed()
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
	case len(s.Changes) == 0 && len(s.EditedResults) == 0 && len(s.Vanished) == 0 && len(c.res.Removed) == 0:
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
		l.named(editText(&e), fullStop(name))
	}
	for _, day := range s.Vanished {
		l.named("Sealed deviation changed or gone", "dated "+fullStop(day))
	}
	l.to(c)
}

// editText says what became of a sealed result.
func editText(e *result.ResultName) string {
	text := "Sealed result changed later"
	if e.Removed {
		text = "Sealed result removed"
	}
	if e.File != "" {
		text = "Data file of a sealed result changed later, " + e.File
	}
	if e.Seal > 0 {
		text += ", known to seal " + number.Int(e.Seal)
	}
	if e.Declared {
		return text + " (declared)"
	}
	return text + " (undeclared)"
}

// amendments prints what each later seal changed in the plan.
func (c *composer) amendments() {
	t := newTable("What later seals changed in the plan", "Seal", "At", "Key", "Before", "From then on")
	for _, a := range c.res.Seal.Amendments {
		for _, ch := range a.Changes {
			path := ch.Path
			if ch.Wording {
				path += " (wording only)"
			}
			t.row(number.Int(a.Number), a.At, path, valueOrAbsent(ch.Old), valueOrAbsent(ch.New))
		}
	}
	t.to(c)
}

// removed prints the claims of the sealed plan that the plan now lacks, and
// why the sealed plan could not be computed where it could not.
func (c *composer) removed() {
	var l list
	for i := range c.res.Removed {
		h := &c.res.Removed[i]
		text := Sentence(c.res, h, &h.Judged)
		if h.Statement != "" {
			text = "“" + h.Statement + "” " + text
		}
		l.named(h.Name+", sealed and no longer in the plan", text)
	}
	for _, why := range c.res.Seal.Unreadable {
		l.named("The sealed plan could not be computed", fullStop(why))
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
