package read

import (
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// head checks [record] and the levels of the plan.
func (c *checker) head() {
	h := &c.rec.Head
	if s := h.Supersedes; s != nil {
		c.digest(s.SHA256)
	}
	c.file(h.Typeface)
	c.twice(h.Attach)
	c.levelOfPlan()
	c.opinions()
	c.equipment()
}

// levelOfPlan warns once of the plan's one-sided level, where a claim uses it.
func (c *checker) levelOfPlan() {
	for _, x := range c.rec.Plan.Hypotheses {
		claim := record.ClaimOf(x.Claim.V)
		if claim != nil && claim.Judged && !claim.TwoSided && absent(x.Alpha.OneSided) {
			c.highLevel(c.rec.Plan.Alpha.OneSided)
			return
		}
	}
}

// firstResult is the earliest day of a result; zero when there is none.
func (c *checker) firstResult() record.Date {
	first := record.Date{}
	for _, r := range c.rec.Results {
		if d := r.Day(); !d.IsZero() && (first.IsZero() || d.Compare(first) < 0) {
			first = d
		}
	}
	return first
}

// opinions compares the ethics opinion and the registration with the results.
func (c *checker) opinions() {
	first := c.firstResult()
	if first.IsZero() {
		return
	}
	for _, x := range []struct {
		body *record.Body
		what string
	}{{c.rec.Head.Ethics, "the ethics opinion"}, {c.rec.Head.Registry, "the registration"}} {
		if x.body != nil && x.body.Date.Stated && x.body.Date.V.Compare(first) > 0 {
			c.add(diag.Warning("R503", x.body.Date.Span, "%s, %s, is later than the first result, %s", x.what, x.body.Date.V, first))
		}
	}
}

// equipment finds results dated after a calibration has run out.
func (c *checker) equipment() {
	for _, e := range c.rec.Head.Equipment {
		if !e.CalibratedUntil.Stated {
			continue
		}
		for _, r := range c.rec.Results {
			if d := r.Day(); !d.IsZero() && d.Compare(e.CalibratedUntil.V) > 0 {
				c.add(diag.Warning("R504", e.CalibratedUntil.Span, "the calibration of %s ended on %s; a result is dated %s", quoteShort(e.ID.V), e.CalibratedUntil.V, d))
				break
			}
		}
	}
}

// history checks deviations, approvals and witnesses.
func (c *checker) history() {
	for _, d := range c.rec.Deviations {
		c.deviation(d)
	}
	for _, w := range c.rec.Witnesses {
		c.file(w.Token)
		c.file(w.CA)
	}
	latest := record.Date{}
	for _, list := range [][]*record.Result{c.rec.Results, c.rec.Earlier} {
		for _, r := range list {
			if d := r.Day(); d.Compare(latest) > 0 {
				latest = d
			}
		}
	}
	h := &c.rec.Head
	if h.Date.Stated {
		if after := c.rec.LatestDay(); after.Compare(h.Date.V) > 0 {
			c.add(diag.Warning("R508", h.Date.Span, "the record is dated %s, and what it holds reaches to %s", h.Date.V, after))
		}
	}
	if h.Status.V != "effective" || latest.IsZero() || len(c.rec.Approvals) == 0 {
		return
	}
	for _, a := range c.rec.Approvals {
		if !a.At.Stated || record.DateOf(a.At.V).Compare(latest) >= 0 {
			return
		}
	}
	c.add(diag.Warning("R507", h.Status.Span, "the record is effective, and every approval is earlier than its latest result, %s", latest))
}

// deviation checks what a deviation refers to.
func (c *checker) deviation(d *record.Deviation) {
	for _, p := range d.Changes.V {
		if p.Stated {
			c.change(p)
		}
	}
	c.twice(d.Changes)
	for _, ref := range d.Results {
		c.corrected(ref)
	}
	if !d.Date.Stated || !d.ResultsKnown.Stated || d.ResultsKnown.V {
		return
	}
	if first := c.firstResult(); !first.IsZero() && first.Compare(d.Date.V) < 0 {
		c.add(diag.Warning("R510", d.ResultsKnown.Span, "no result was known, says this deviation of %s; a result is dated %s", d.Date.V, first))
	}
}

// change checks the path of a sealed key.
func (c *checker) change(p record.String) {
	switch {
	case p.V == "plan":
		c.add(diag.Error("R502", p.Span, "a deviation cannot change the plan as a whole").
			WithHelp("name each key that changed, such as \"plan.alpha.one_sided\""))
	case !strings.HasPrefix(p.V, "plan."):
		d := diag.Error("R502", p.Span, "%s is no key of the plan", quoteShort(p.V))
		if k, _ := record.KeyAt("plan." + p.V); k != nil {
			d = d.WithHelp("did you mean %q?", "plan."+p.V)
		} else {
			d = d.WithHelp("only the plan is sealed; a corrected result is named under `results`")
		}
		c.add(d)
	default:
		k, name := record.KeyAt(p.V)
		if k == nil {
			c.add(diag.Error("R502", p.Span, "there is no key %s in the language", quoteShort(p.V)).
				WithHelp("write the path as it stands in the record: \"plan.hypothesis.H1.alpha\""))
			return
		}
		if k.Kind == record.KindNamedTables && !name {
			c.add(diag.Error("R502", p.Span, "%s is all tables of a kind; name the one that changed", quoteShort(p.V)).
				WithHelp("write %s.NAME", p.V))
		}
	}
}

// corrected finds the entry that a deviation corrects.
func (c *checker) corrected(ref *record.ResultRef) {
	o := known(c, ref.Outcome, "outcome", c.outcomes)
	if o == nil || !ref.Study.Stated || !ref.Set.Stated && !absent(ref.Set) || c.damaged {
		return
	}
	var studies []string
	for _, r := range c.rec.Results {
		if r.Study.V == ref.Study.V && r.Outcome.V == ref.Outcome.V && r.Set.V == ref.Set.V &&
			r.Look.Number == ref.Look.Number && r.Look.Unplanned == ref.Look.Unplanned {
			return
		}
		studies = append(studies, r.Study.V)
	}
	d := diag.Error("R501", ref.Study.Span, "no entry is of the study %s and the outcome %q", quoteShort(ref.Study.V), ref.Outcome.V)
	if near := c.near(ref.Study.V, studies); near != "" && near != ref.Study.V {
		d = d.WithHelp("did you mean %q?", near)
	} else {
		d = d.WithHelp("name study, outcome, and set and look where the entry has them")
	}
	c.add(d)
}

// Dated checks that the record bears a date. The days of its seals count too.
func Dated(rec *record.Record, seals ...record.Date) diag.List {
	var list diag.List
	h := &rec.Head
	if !absent(h.Date) || !rec.Dated(seals...).IsZero() {
		return nil
	}
	if h.Status.Stated && h.Status.V != "draft" {
		list.Add(diag.Error("R505", h.Status.Span, "a record with the status %q bears a date, and nothing in it is dated", h.Status.V).
			WithHelp("add date = … to [record]; the clock is never asked"))
	} else {
		list.Add(diag.Warning("R506", h.At, "nothing in this record is dated: it is printed as undated").
			WithHelp("add date = … to [record], or seal the plan"))
	}
	return list
}
