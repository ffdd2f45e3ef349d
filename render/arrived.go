package render

import (
	"slices"
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// arrived lists every entry, the numbers behind it, the flow and the files.
func (c *composer) arrived() {
	if len(c.res.Studies) == 0 && len(c.res.Files) == 0 {
		return
	}
	c.heading(1, "What arrived", "arrived")
	c.studyTables()
	if !c.res.Masked {
		c.groupTable()
		c.groupFigures()
		c.flowTable()
		c.survivalFigures()
	} else {
		c.totalsTable()
	}
	c.fileTable()
}

// studyTables print one row an entry, analysed or not, a table an outcome.
func (c *composer) studyTables() {
	done := map[string]bool{}
	for i := range c.res.Studies {
		if name := c.res.Studies[i].Outcome; !done[name] {
			done[name] = true
			c.studyTable(outcomeOf(c.res, name))
		}
	}
	c.small(c.sourcesNote())
}

// studyTable prints the entries of one outcome.
func (c *composer) studyTable(o *result.Outcome) {
	t := newTable(o.Label+": results, each analysed alone"+inUnit(number.Of(o)), "Study", "Set", "Known", "Look", ">n", "#Estimate", "Interval", "#p at the null", "Use")
	var why list
	var methods []string
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if s.Outcome != o.Name {
			continue
		}
		sh := c.studyShown(s, o)
		why.named(s.Study, reasonText(s))
		n := ""
		if s.Analysis.N > 0 {
			n = number.Count(s.Analysis.N)
		}
		p := ""
		switch {
		case s.BareP != nil && s.Use != result.MaskedUse:
			p = bareText(s.BareP)
		case s.P.OK:
			p = number.P(s.P)
		}
		if m := s.Analysis.Method; m != "" && !slices.Contains(methods, m) {
			methods = append(methods, m)
		}
		row := t.row(s.Study, s.Set, dateText(s.Date), s.Look, n, sh.Estimate, withLevel(sh.Bare(), s.Analysis.Level), p, useText(s.Use))
		row.Grey = s.Use != result.Analysed && s.Use != result.MaskedUse
	}
	if len(methods) > 0 {
		t.note(capital(pluralWord(len(methods), "method", "methods")) + ": " + join(methods) + ".")
	}
	t.to(c)
	why.to(c)
}

// reasonText is why an entry is not analysed, "" without one.
func reasonText(s *result.Study) string {
	if s.Why == "" {
		return ""
	}
	return useText(s.Use) + ": " + fullStop(s.Why)
}

// inUnit is ", in UNIT" for captions, "" without a unit.
func inUnit(f number.Format) string {
	switch f.Unit {
	case "":
		return ""
	case "%":
		return ", in percent"
	}
	return ", in " + f.Unit
}

// withLevel adds the level to an interval that is there.
func withLevel(interval string, level float64) string {
	if interval == "" {
		return ""
	}
	return interval + " (" + number.Level(level) + ")"
}

// studyShown is an entry's own estimate as text; empty while masked.
func (c *composer) studyShown(s *result.Study, o *result.Outcome) number.Shown {
	f := number.Of(o)
	if s.Use == result.MaskedUse || s.Analysis.Method == "" {
		return number.Shown{}
	}
	return f.Interval(s.Analysis.Estimate, s.Analysis.Low, s.Analysis.High, outcomePoints(o)...)
}

// outcomePoints are the points of an outcome that exist.
func outcomePoints(o *result.Outcome) []float64 {
	var p []float64
	for _, x := range []result.Opt{o.Low, o.Null, o.High} {
		if x.OK {
			p = append(p, x.V)
		}
	}
	return p
}

// useText is what became of an entry.
func useText(u result.Use) string {
	switch u {
	case result.Analysed:
		return "analysed"
	case result.LeftOut:
		return "left out"
	case result.EarlierUse:
		return "earlier than the plan"
	case result.Superseded:
		return "superseded"
	case result.MaskedUse:
		return "masked"
	case result.MissingUse:
		return "missing"
	case result.NotComputed:
		return "not computable"
	}
	return string(u)
}

// bareText is a p-value that came without an estimate, as it was given.
func bareText(b *result.BareP) string {
	rel := b.Relation
	if rel == "" {
		rel = "="
	}
	s := rel + number.Hard + number.Plain(b.Value)
	if b.Sides == 1 {
		s += ", one-sided"
	}
	if b.Direction != "" {
		s += ", " + b.Direction
	}
	return s + " (as given)"
}

// sourcesNote lists where results are written down.
func (c *composer) sourcesNote() string {
	var s string
	seen := map[string]bool{}
	for _, st := range c.res.Studies {
		if key := st.Study + "\x00" + st.Source; st.Source != "" && !seen[key] {
			seen[key] = true
			s += st.Study + ": " + fullStop(st.Source) + " "
		}
	}
	if s == "" {
		return ""
	}
	return "Sources. " + s[:len(s)-1]
}

// groupTable prints the numbers of each group as the entry gave them.
func (c *composer) groupTable() {
	t := newTable("The numbers by group", "Study", "Outcome", "Set", "Group", ">n", "#Mean", "#SD", "#Median", ">Events", ">Exposure", "#r", ">Missing", ">Excluded by the plan")
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if s.Use == result.MaskedUse {
			continue
		}
		o := outcomeOf(c.res, s.Outcome)
		for _, g := range s.Groups {
			row := t.row(s.Study, o.Label, s.Set, g.Name, number.CountOpt(g.N), spreadText(o, g.Mean, g.SD), spreadText(o, g.SD, g.SD),
				spreadText(o, g.Median, g.SD), number.CountOpt(g.Events), plainOpt(g.Exposure), number.SignificantOpt(g.R, 3), some(g.Missing), some(g.Excluded))
			row.Grey = s.Use != result.Analysed
		}
	}
	t.to(c)
}

// spreadText writes a value of the outcome's unit to the decimals of a spread.
func spreadText(o *result.Outcome, v, sd result.Opt) string {
	if !v.OK {
		return number.Absent
	}
	f := number.Format{Digits: o.Digits}
	if !sd.OK || sd.V <= 0 {
		return number.Significant(v.V, 4)
	}
	return f.Stated(v.V, sd.V/10, sd.V)
}

// some writes a count; "" for none, so that a column without any is left out.
func some(n int) string {
	if n == 0 {
		return ""
	}
	return number.Int(n)
}

// plainOpt writes a stated number.
func plainOpt(o result.Opt) string {
	if !o.OK {
		return number.Absent
	}
	return number.Plain(o.V)
}

// flowTable prints how many were assessed, randomised, received, lost,
// analysed.
func (c *composer) flowTable() {
	t := newTable("Flow", "Study", "Group", ">Assessed", ">Randomised", ">Received", ">Lost", ">Analysed")
	seen := map[string]bool{}
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		for _, g := range s.Groups {
			if !g.Assessed.OK && !g.Randomised.OK && !g.Received.OK && !g.Lost.OK && !g.Analysed.OK {
				continue
			}
			cells := []string{s.Study, g.Name, number.CountOpt(g.Assessed), number.CountOpt(g.Randomised), number.CountOpt(g.Received),
				number.CountOpt(g.Lost), number.CountOpt(g.Analysed)}
			if key := strings.Join(cells, "\x00"); !seen[key] { // one entry serves several sets
				seen[key] = true
				t.row(cells...)
			}
		}
	}
	t.to(c)
}

// totalsTable prints what may be shown while results are masked.
func (c *composer) totalsTable() {
	c.small("Some results are masked: of these only totals over all groups are shown.")
	t := newTable("Totals of masked results", "Study", "Outcome", ">n", "#SD, labels ignored", ">Events", ">Exposure", ">Missing", ">Excluded by the plan")
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if s.Use != result.MaskedUse {
			continue
		}
		o := outcomeOf(c.res, s.Outcome)
		for _, g := range s.Groups {
			if g.Name != "" {
				continue
			}
			t.row(s.Study, o.Label, number.CountOpt(g.N), spreadText(o, g.SD, g.SD), number.CountOpt(g.Events), plainOpt(g.Exposure), some(g.Missing), some(g.Excluded))
		}
	}
	t.to(c)
}

// fileTable prints data files with digests and dropped rows by reason.
func (c *composer) fileTable() {
	t := newTable("Data files", "File", "Result", "Set", ">Rows", ">Used", "Dropped")
	t.Columns[0].Share, t.Columns[1].Share = 0.19, 0.27
	for _, f := range c.res.Files {
		t.row(f.Path, resultName(c.res, &f), f.Set, number.Int(f.Rows), number.Int(f.Used), droppedText(f.Dropped))
	}
	t.to(c)
	var fs facts
	seen := map[string]bool{}
	for _, f := range c.res.Files {
		if f.SHA256 != "" && !seen[f.Path] {
			seen[f.Path] = true
			fs.code("SHA-256 of "+f.Path, f.SHA256)
		}
	}
	fs.to(c, 1)
}

// resultName names the entry that a file serves.
func resultName(res *result.Result, f *result.File) string {
	if f.Outcome == "" {
		return f.Study
	}
	return strings.Trim(f.Study+", "+outcomeOf(res, f.Outcome).Label, ", ")
}

// droppedText counts rows by reason, each reason with its groups.
func droppedText(d []result.Dropped) string {
	if len(d) == 0 {
		return "none"
	}
	type reason struct{ reason, why string }
	var order []reason
	counts := map[reason][]string{}
	for _, x := range d {
		k := reason{x.Reason, x.Why}
		if counts[k] == nil {
			order = append(order, k)
		}
		n := number.Int(x.Count)
		if x.Group != "" {
			n += " in " + x.Group
		}
		counts[k] = append(counts[k], n)
	}
	var parts []string
	for _, k := range order {
		s := k.reason + ": " + strings.Join(counts[k], ", ")
		if k.why != "" {
			s += " (" + strings.TrimSuffix(k.why, ".") + ")"
		}
		parts = append(parts, s)
	}
	return strings.Join(parts, "; ")
}
