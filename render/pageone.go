package render

import (
	"path"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/render/number"
	"steelyard/render/page"
)

// pageOne decides: all that a reader with one minute needs, on one page.
func (c *composer) pageOne() {
	c.add(page.Heading{Level: 0, Text: page.T(c.res.Record.Title), Anchor: "top"})
	primary := c.primary()
	rows, dense := len(primary) > 1, len(primary) > 2 // the more claims, the less is said twice
	c.identityFacts(dense)
	if q := c.rec.Plan.Question.V; q != "" {
		c.add(page.Paragraph{Text: page.T(q), Style: page.Lead})
	}
	c.small(c.kindOfComparison(dense))
	for _, h := range primary {
		c.add(c.verdictBlock(h, dense, len(primary) > 3))
	}
	c.small(c.otherClaims(len(primary)))
	c.small(c.noFamily())
	c.arrivalFacts(primary, rows)
	c.pageOneCaution(rows)
	c.small(c.howToVerify())
}

// identityFacts are status, number, version, digest, date.
func (c *composer) identityFacts(dense bool) {
	r := &c.res.Record
	var f facts
	f.add("Record", identity(r))
	f.add("Status", statusText(r))
	date := dateText(r.Date)
	if date == "" {
		date = "undated"
	}
	f.add("Date", date)
	if !dense {
		f.add("Setting", r.Setting)
	}
	f.code("Record SHA-256", short(r.SourceSHA256))
	if !dense {
		f.code("Plan SHA-256", short(r.PlanSHA256))
	}
	f.to(c, 2)
}

// statusText is document control and stage: "draft; interim: more results may come".
func statusText(r *result.Record) string {
	var parts []string
	if r.Status != "" {
		parts = append(parts, r.Status)
	}
	switch r.Stage {
	case result.PlanOnly:
		parts = append(parts, "plan only")
	case result.Interim:
		parts = append(parts, "interim, more may come")
	case result.Complete:
		parts = append(parts, "complete")
	}
	return strings.Join(parts, "; ")
}

// kindOfComparison says what is compared with what, and which way is better.
// Where several claims share the page their axes say the latter.
func (c *composer) kindOfComparison(dense bool) string {
	var out []string
	if s := c.rec.Plan.Comparison.V; s != "" {
		out = append(out, fullStop(s))
		if dense {
			return out[0]
		}
	}
	seen := map[string]bool{}
	for _, h := range c.primary() {
		if seen[h.Outcome] {
			continue
		}
		seen[h.Outcome] = true
		o := outcomeOf(c.res, h.Outcome)
		s := o.Label + ": " + effectName(o)
		if d := direction(o); d != "" {
			s += "; " + d
		}
		out = append(out, s+".")
	}
	return strings.Join(out, " ")
}

// fullStop ends a sentence of the user's.
func fullStop(s string) string {
	s = strings.TrimSpace(s)
	if s == "" || strings.ContainsAny(s[len(s)-1:], ".!?…:") {
		return s
	}
	return s + "."
}

// primary are the primary hypotheses; all where none is.
func (c *composer) primary() []*result.Hypothesis {
	var p, all []*result.Hypothesis
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		all = append(all, h)
		if h.Role == "primary" || h.Role == "" {
			p = append(p, h)
		}
	}
	if len(p) == 0 {
		return all
	}
	return p
}

// setOf says in which analysis set a hypothesis was decided.
func setOf(h *result.Hypothesis) string {
	if len(h.BySet) > 1 {
		return "Analysis set " + h.Set + ", the one of " + number.Int(len(h.BySet)) + " that decides."
	}
	return "Analysis set " + h.Set + "."
}

// verdictBlock is the page-one block of one hypothesis.
// Where several share the page they stand closer: the reading joins the
// qualifiers, and the figure leaves out numbers that the text gives. Where
// more than three do, the figure stands beside the text.
func (c *composer) verdictBlock(h *result.Hypothesis, dense, crowded bool) page.Verdict {
	v := voiceOf(c.res, h)
	j := &h.Judged
	b := page.Verdict{Name: h.Name, Word: VerdictWord(j.Verdict), Tone: tone(j.Verdict), Qualify: c.qualify(h)}
	v.brief = dense
	b.Claim = page.T(v.claimed())
	b.Answer = v.answer(j)
	if j.Set != "" && j.Estimate.OK {
		b.Answer = append(b.Answer, page.Text(" "+setOf(h)))
	}
	if name, words := v.reading(j); name != "" {
		if dense {
			if b.Qualify != "" {
				b.Qualify += "; "
			}
			b.Qualify += "reading: " + name
		} else {
			b.Reading = []page.Inline{page.Text("Reading: "), page.Strong(name), page.Text(" – " + words + ".")}
		}
	}
	if s := v.worstLine(); s != "" {
		b.Reading = append(b.Reading, page.Text(strings.TrimSpace(s)))
	}
	if s := v.regionText(dense); s != "" {
		b.Region = page.T(s)
	}
	if h.Evidence != "combined" {
		b.Figure = c.beam(h, dense, crowded)
	}
	return b
}

// tone maps a verdict to how it stands.
func tone(v result.Verdict) page.Tone {
	switch v {
	case result.Established:
		return page.Established
	case result.Suggested:
		return page.Suggested
	case result.Contradicted:
		return page.Contradicted
	case result.Open:
		return page.Open
	case result.Pending, result.Described, result.Masked:
		return page.Neutral
	}
	return page.Neutral
}

// qualify is what must stand beside the verdict word.
func (c *composer) qualify(h *result.Hypothesis) string {
	var q []string
	if h.PostHoc && judged(h.Verdict) {
		q = append(q, "post hoc")
	}
	if h.Role == "exploratory" {
		q = append(q, "exploratory, unadjusted")
	}
	if judged(h.Verdict) {
		q = append(q, c.changedSince(h)...)
	}
	if h.Evidence == "pooled" && judged(h.Verdict) {
		q = append(q, "pooled over "+plural(len(h.Studies), "study", "studies"))
	}
	return strings.Join(q, "; ")
}

// answer is the estimate with the interval that decides, or why there is none.
func (v voice) answer(j *result.Judged) []page.Inline {
	switch j.Verdict {
	case result.Pending:
		return page.T("No result has arrived yet.")
	case result.Masked:
		return page.T("The results are masked until a planned look.")
	}
	if j.Reason != nil {
		return page.T("Not decided: " + fullStop(noteText(*j.Reason)))
	}
	s := v.shown(j)
	var parts []string
	if s.Estimate != "" {
		parts = append(parts, capital(v.t.short)+" "+s.EstimateUnit())
	}
	if r := s.Range(); r != "" {
		level := number.Level(j.Level) + " interval"
		shown := judged(j.Verdict) && !j.IntervalDecides
		switch {
		case j.Verdict == result.Open && shown:
			parts = append(parts, "still compatible: "+r+" ("+level+", which does not decide)")
		case j.Verdict == result.Open:
			parts = append(parts, "still compatible: "+r+" ("+level+")")
		case shown:
			parts = append(parts, level+" "+r+" (it does not decide)")
		default:
			parts = append(parts, level+" "+r)
		}
	}
	if p := decidingP(j); p.OK && judged(j.Verdict) && !v.brief {
		text := pName(j) + number.PEquals(p, v.h.Alpha)
		if len(parts) == 0 && j.PAdjusted.OK {
			text = capital(text)
		}
		parts = append(parts, text)
	}
	if len(parts) == 0 {
		return page.T("No estimate and no interval.")
	}
	in := page.T(strings.Join(parts, "; ") + ".")
	if a := v.aside(j); a != "" && (!v.brief || s.LowEqual+s.HighEqual != "") {
		in = append(in, page.Text(" "+a))
	}
	return in
}

// decidingP is the adjusted p where there is one.
func decidingP(j *result.Judged) result.P {
	if j.PAdjusted.OK {
		return j.PAdjusted
	}
	return j.P
}

// pName stands before the p of decidingP.
func pName(j *result.Judged) string {
	if j.PAdjusted.OK {
		return "adjusted "
	}
	return ""
}

// regionText is the margin or region and why it is that size.
func (v voice) regionText(dense bool) string {
	why := v.h.MarginWhy
	if why == "" {
		why = v.o.Why
	}
	var s string
	switch v.h.Claim {
	case "noninferior":
		if m := v.harm(); m.OK {
			s = "Margin " + v.f.PointUnit(m.V)
		}
	case "below", "above":
		if v.h.Limit.OK && !(dense && why == "") { // the claim names it
			s = "Limit " + v.f.PointUnit(v.h.Limit.V)
		}
		if s == "" && v.region() == "" {
			return ""
		}
	}
	if r := v.region(); r != "" {
		if s != "" {
			s += "; too small to matter: " + r
		} else {
			s = "Too small to matter: " + r
		}
	}
	if s == "" {
		if _, words := v.reading(&v.h.Judged); words != "" || v.h.Claim == "describe" {
			return "" // the reading says it, or nothing is judged
		}
		return "No smallest effect that matters was stated."
	}
	if why != "" {
		return s + ". Why this size: " + fullStop(why)
	}
	return s + "."
}

// otherClaims lists the verdicts that page one does not show in full.
func (c *composer) otherClaims(shown int) string {
	if shown == len(c.res.Hypotheses) {
		return ""
	}
	var parts []string
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		if h.Role == "primary" || h.Role == "" {
			continue
		}
		parts = append(parts, h.Name+" ("+h.Role+", "+h.Claim+") "+string(h.Verdict))
	}
	return "Also in this record: " + strings.Join(parts, "; ") + "."
}

// noFamily is the warning that several primary claims share no error level.
func (c *composer) noFamily() string {
	for _, d := range c.res.Diagnostics {
		if d.Code == severalPrimary {
			return "Warning: " + fullStop(d.Message)
		}
	}
	return ""
}

// severalPrimary is the code of the one diagnostic that page one prints.
const severalPrimary = "R319"

// howToVerify says how this file is checked.
func (c *composer) howToVerify() string {
	if c.res.Masked || !c.attaches("record") {
		return "To check this file: steelyard compile with the record of the digest above prints the same document. The record is not attached to this file."
	}
	name := strings.TrimSuffix(path.Base(c.in.Source.Name), ".toml")
	if name == "" || name == "-" || name == "." {
		name = "NAME"
	}
	return "To check this file: steelyard verify " + name + ".pdf takes the record out of it, compiles it again and compares. Engine " + c.res.Engine + "."
}

// bodyOf finds the label of an outcome in the record, nil when it has none.
func (c *composer) outcomeRecord(name string) *record.Outcome {
	for _, o := range c.rec.Plan.Outcomes {
		if o.Name == name {
			return o
		}
	}
	return nil
}
