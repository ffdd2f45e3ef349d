package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
	"steelyard/render/page"
)

// arrivalFacts are the numbers per group, the looks, the seal and what is not
// in the analysis.
func (c *composer) arrivalFacts(primary []*result.Hypothesis, dense bool) {
	var f facts
	if dense && len(c.res.Totals) > 0 {
		f.add("Numbers", c.denseNumbers())
	} else {
		f.add("Numbers", c.numbers(primary))
	}
	if !dense {
		f.add("Looks", c.looksTaken())
		f.add("Seal", c.sealText())
		f.add("Changes", c.changeCounts())
		f.add("Not analysed", c.notAnalysed())
		f.to(c, 1)
		c.supports(primary)
		f = facts{}
	} else {
		f.add("Seal, looks", strings.TrimSpace(c.sealText()+" "+c.changeCounts()+" "+prefixed("Looks: ", c.looksTaken())))
		f.add("Not analysed", c.notAnalysed())
		yes, no := c.supported(primary, true)
		f.add("Supported", yes.line())
		f.add("Not supported", no.line())
	}
	f.add("Still needed", c.stillNeeded())
	f.add("Decision", c.decision())
	f.to(c, 1)
}

// prefixed puts a prefix before a text that is there.
func prefixed(prefix, s string) string {
	if s == "" {
		return ""
	}
	return prefix + s
}

// numbers are planned, randomised, analysed and missing per group.
func (c *composer) numbers(primary []*result.Hypothesis) string {
	if len(c.res.Totals) > 0 {
		var parts []string
		many := false
		for _, t := range c.res.Totals {
			many = many || t.Outcome != c.res.Totals[0].Outcome
		}
		for _, t := range c.res.Totals {
			name := t.Group
			if name == "" {
				name = "all"
			}
			if many {
				name = outcomeOf(c.res, t.Outcome).Label + ", " + name
			}
			name = strings.TrimSpace(name + " " + inSet(t.Set))
			if counts := totalParts(t); len(counts) > 0 {
				parts = append(parts, name+": "+strings.Join(counts, ", "))
			}
		}
		if len(parts) == 0 {
			return ""
		}
		return strings.Join(parts, "; ") + "."
	}
	if len(primary) == 0 || c.res.Masked {
		return ""
	}
	var parts []string
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if s.Outcome != primary[0].Outcome || s.Use != result.Analysed || primary[0].Set != "" && s.Set != "" && s.Set != primary[0].Set {
			continue
		}
		for _, g := range s.Groups {
			if t := groupParts(&g); len(t) > 0 {
				name := g.Name
				if name == "" || len(primary[0].Studies) > 1 {
					name = strings.TrimSuffix(s.Study+", "+g.Name, ", ")
				}
				parts = append(parts, name+": "+strings.Join(t, ", "))
			}
		}
	}
	planned := c.plannedSizes(primary)
	switch {
	case len(parts) > 4:
		return strings.TrimSpace(planned + " Arrived: listed by study and group under What arrived.")
	case len(parts) == 0:
		return planned
	}
	return strings.TrimSpace(planned + " " + strings.Join(parts, "; ") + ".")
}

// plannedSizes are the planned numbers of the primary claims.
func (c *composer) plannedSizes(primary []*result.Hypothesis) string {
	var out []string
	for i := range c.res.Sizes {
		s := &c.res.Sizes[i]
		for _, h := range primary {
			if h.Name != s.Hypothesis || len(s.N) == 0 {
				continue
			}
			var n []string
			for _, x := range s.N {
				n = append(n, number.Count(x))
			}
			out = append(out, h.Name+" "+strings.Join(n, " + "))
		}
	}
	if len(out) == 0 {
		return ""
	}
	return "Planned for analysis: " + strings.Join(out, "; ") + "."
}

// denseNumbers are the same in one line: "planned / analysed: new 24 / 23".
func (c *composer) denseNumbers() string {
	heads := []string{"planned", "randomised", "analysed", "missing", "excluded"}
	pick := func(t result.GroupTotal) []result.Opt {
		return []result.Opt{t.Planned, t.Randomised, t.Analysed, t.Missing, t.Excluded}
	}
	var used []int
	many := false
	for k := range heads {
		for _, t := range c.res.Totals {
			if pick(t)[k].OK {
				used = append(used, k)
				break
			}
		}
	}
	for _, t := range c.res.Totals {
		many = many || t.Outcome != c.res.Totals[0].Outcome
	}
	var head []string
	for _, k := range used {
		head = append(head, heads[k])
	}
	s := capital(strings.Join(head, " / ")) + ":"
	last, some := "", false
	for _, t := range c.res.Totals {
		var n []string
		known := false
		for _, k := range used {
			n = append(n, number.CountOpt(pick(t)[k]))
			known = known || pick(t)[k].OK
		}
		if !known {
			continue
		}
		if some {
			s += ";"
		}
		if many && t.Outcome != last {
			s += " " + outcomeOf(c.res, t.Outcome).Label + ","
		}
		last, some = t.Outcome, true
		s += " " + strings.TrimSpace(strings.TrimSpace(t.Group+" "+inSet(t.Set))+" "+strings.Join(n, number.Hard+"/"+number.Hard))
	}
	if !some {
		return ""
	}
	return s + "."
}

// totalParts are the counts of one group, those that are known.
func totalParts(t result.GroupTotal) []string {
	var p []string
	add := func(o result.Opt, word string) {
		if o.OK {
			p = append(p, number.Count(o.V)+number.Hard+word)
		}
	}
	add(t.Planned, "planned")
	add(t.Randomised, "randomised")
	add(t.Analysed, "analysed")
	add(t.Missing, "missing")
	add(t.Excluded, "excluded by the plan")
	return p
}

// inSet names an analysis set after a group; "" without sets.
func inSet(set string) string {
	if set == "" {
		return ""
	}
	return "(" + set + ")"
}

// groupParts are the counts of one group of one entry.
func groupParts(g *result.GroupNumbers) []string {
	var p []string
	add := func(o result.Opt, word string) {
		if o.OK {
			p = append(p, number.Count(o.V)+number.Hard+word)
		}
	}
	add(g.Randomised, "randomised")
	if g.N.OK {
		add(g.N, "analysed")
	} else {
		add(g.Analysed, "analysed")
	}
	if g.Missing > 0 {
		p = append(p, number.Int(g.Missing)+number.Hard+"missing")
	}
	if g.Excluded > 0 {
		p = append(p, number.Int(g.Excluded)+number.Hard+"excluded by the plan")
	}
	return p
}

// looksTaken counts planned and taken looks; "" in a plan without looks.
func (c *composer) looksTaken() string {
	l := c.rec.Plan.Looks
	if l == nil && len(c.res.Looks) == 0 {
		return ""
	}
	var parts []string
	if l != nil {
		if l.Anytime.V {
			parts = append(parts, "valid at every look, planned or not")
		} else if n := len(l.Fractions.V); n > 0 {
			parts = append(parts, number.Int(n)+" planned")
		}
	}
	taken, unplanned := map[string]bool{}, map[string]bool{}
	for _, k := range c.res.Looks {
		key := k.Look + " " + k.Date.String()
		if k.Look == "unplanned" {
			unplanned[key] = true
		} else {
			taken[key] = true
		}
	}
	parts = append(parts, number.Int(len(taken))+" taken")
	if len(unplanned) > 0 {
		parts = append(parts, number.Int(len(unplanned))+" unplanned")
	}
	for _, k := range c.res.Looks {
		if k.Crossed == "efficacy" || k.Crossed == "futility" {
			parts = append(parts, k.Hypothesis+" crossed its "+k.Crossed+" boundary at look "+k.Look)
		}
	}
	if l != nil && l.Masked.Stated && !l.Masked.V {
		parts = append(parts, "masking turned off")
	}
	return strings.Join(parts, "; ") + "."
}

// sealText says how the seal stands to the results.
func (c *composer) sealText() string {
	s := &c.res.Seal
	if s.State == "broken" {
		return "Broken chain: " + fullStop(s.Broken)
	}
	return capital(orderText(s.Order)) + sealWhen(s) + witnessedBy(s)
}

// orderText is the order of seal and results in words.
func orderText(order string) string {
	switch order {
	case "before-results":
		return "sealed before results"
	case "same-day":
		return "sealed on the same day as results, order unproven"
	case "after-results":
		return "sealed after results"
	}
	return "unsealed: nothing shows that the plan came before the results"
}

// sealWhen is when the binding seal was made.
func sealWhen(s *result.Seal) string {
	switch {
	case s.Entries == 0:
		return "."
	case s.Entries == 1 || s.FirstAt == s.LastAt:
		return " (" + dayOf(s.LastAt) + ")."
	}
	return " (" + number.Int(s.Entries) + " seals, " + dayOf(s.FirstAt) + " to " + dayOf(s.LastAt) + ")."
}

// dayOf is the day of an instant in UTC; the timeline has the time.
func dayOf(at string) string {
	day, _, _ := strings.Cut(at, "T")
	return day
}

// changeCounts counts changes since the seal.
func (c *composer) changeCounts() string {
	s := &c.res.Seal
	if s.State == "unsealed" {
		return ""
	}
	declared, undeclared, words := 0, 0, 0
	for _, ch := range s.Changes {
		switch {
		case ch.Wording:
			words++
		case ch.Declared:
			declared++
		default:
			undeclared++
		}
	}
	parts := []string{
		plural(undeclared, "undeclared change of the plan", "undeclared changes of the plan"),
		number.Int(declared) + number.Hard + "declared",
	}
	if words > 0 {
		parts = append(parts, number.Int(words)+number.Hard+"of wording only")
	}
	edits, known := plural(len(s.EditedResults), "sealed result changed later", "sealed results changed later"), 0
	for _, e := range s.EditedResults {
		if e.Declared {
			known++
		}
	}
	if known > 0 {
		edits += " (" + number.Int(known) + number.Hard + "declared)"
	}
	parts = append(parts, edits)
	if n := len(c.res.Removed); n > 0 {
		parts = append(parts, plural(n, "sealed hypothesis removed", "sealed hypotheses removed"))
	}
	if n := len(s.Vanished); n > 0 {
		parts = append(parts, plural(n, "sealed deviation changed or gone", "sealed deviations changed or gone"))
	}
	if n := len(c.rec.Deviations); n > 0 {
		text, known := plural(n, "deviation", "deviations"), 0
		for _, d := range c.rec.Deviations {
			if d.ResultsKnown.V {
				known++
			}
		}
		if known > 0 {
			text += " (" + number.Int(known) + number.Hard + "with results known)"
		}
		parts = append(parts, text)
	}
	return strings.Join(parts, "; ") + "."
}

// notAnalysed counts what is shown but not in the analysis.
func (c *composer) notAnalysed() string {
	counts := map[result.Use]int{}
	for _, s := range c.res.Studies {
		counts[s.Use]++
	}
	if len(c.res.Studies) == 0 {
		return ""
	}
	var parts []string
	for _, u := range []struct {
		use  result.Use
		word string
	}{{result.LeftOut, "left out"}, {result.MissingUse, "missing"}, {result.EarlierUse, "earlier than the plan"},
		{result.Superseded, "superseded by a later look"}, {result.MaskedUse, "masked"}, {result.NotComputed, "not computable"}} {
		if n := counts[u.use]; n > 0 {
			parts = append(parts, plural(n, "result ", "results ")+u.word)
		}
	}
	if len(parts) == 0 {
		return "Nothing: no result was left out, missing or earlier."
	}
	return strings.Join(parts, "; ") + "."
}

// pageOneCaution adds the setting's caution.
func (c *composer) pageOneCaution(dense bool) {
	s, _ := caution(c.res.Record.Setting)
	if dense {
		c.add(page.Paragraph{Style: page.Small, Text: []page.Inline{page.Strong("Caution. "), page.Text(s)}})
		return
	}
	if strictSetting(c.res.Record.Setting) {
		c.add(page.Callout{Kind: page.Caution, Title: "Caution", Blocks: []page.Block{page.Paragraph{Text: page.T(s), Style: page.Small}}})
		return
	}
	c.small(s)
}
