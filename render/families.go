package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// combined prints combinations of p-values.
func (c *composer) combined() {
	if len(c.res.Combined) == 0 {
		return
	}
	c.heading(1, "Combined p-values", "combined")
	c.para("A combination of p-values can show an effect in at least one study. It says nothing of an average effect or of its size.")
	t := newTable("", "Hypothesis", "Set", "Method", "Case", ">Studies", "#Statistic", "#df", "#p", "Toward")
	for _, x := range c.res.Combined {
		kind := "as reported"
		if x.Case == "worst-case" {
			kind = "least favourable values for what is not fully known"
		}
		t.row(x.Hypothesis, x.Set, x.Method, kind, number.Int(x.K), number.Statistic(x.Statistic), number.DF(x.DF), number.P(x.P), x.Toward)
	}
	t.to(c)
	for _, x := range c.res.Combined {
		if len(x.Studies) > 0 && x.Case != "worst-case" {
			c.small(x.Hypothesis + ": " + studyList(x.Studies) + ".")
		}
		if x.Tally != nil && x.Case != "worst-case" {
			c.add2(c.tallyFigure(x.Hypothesis, x.Tally))
			c.para(x.Hypothesis + ": " + number.Int(x.Tally.Toward) + " of " + plural(x.Tally.With, "result with a direction points", "results with a direction point") +
				" toward the claim (" + number.PEquals(x.Tally.P) + " if both directions were equally frequent; descriptive).")
		}
	}
}

// familyLine is a family's verdict in one sentence.
func familyLine(f *result.Family) string {
	var names []string
	for _, m := range f.Members {
		names = append(names, m.Hypothesis)
	}
	return join(names) + " together (" + f.Procedure + "): " + string(f.Verdict) + "."
}

// families prints every family with the path of its procedure.
func (c *composer) families() {
	if len(c.res.Families) == 0 {
		return
	}
	c.heading(1, "Families of claims", "families")
	for i := range c.res.Families {
		f := &c.res.Families[i]
		c.heading(2, f.Name+": "+string(f.Verdict), "")
		c.para(procedureText(f))
		t := newTable("", "Hypothesis", "#p", "#Adjusted p", "#Local level", "Result")
		for _, m := range f.Members {
			word := "not shown in this family"
			if m.Rejected {
				word = "shown"
			}
			local := ""
			if m.AlphaLocal.OK {
				local = number.Short(m.AlphaLocal.V, 3)
			}
			t.row(m.Hypothesis, number.P(m.P, f.Alpha), number.P(m.PAdjusted, f.Alpha), local, word)
		}
		t.note("Intervals shown elsewhere stay at each claim's own level.")
		t.to(c)
		if len(f.Path) > 0 {
			p := newTable("The path of the procedure", ">Step", "Hypothesis", "#p", "#Level", "Result")
			for k, s := range f.Path {
				word := "stops here"
				if s.Rejected {
					word = "shown, its level passes on"
				}
				p.row(number.Int(k+1), s.Hypothesis, number.P(result.P{P: s.P, OK: true}, s.Level), number.Short(s.Level, 3), word)
			}
			p.to(c)
		}
	}
}

// procedureText says what a procedure does.
func procedureText(f *result.Family) string {
	s := "Procedure " + f.Procedure
	switch f.Procedure {
	case "all":
		s += ": the family is established when every member is, each at its own level; a member's own verdict stands"
	case "bonferroni":
		s += ": the error level is shared out among the members"
	case "holm":
		s += ": the smallest p first; the level of a member shown passes to those left"
	case "hochberg", "hommel":
		s += ": steps up from the largest p; needs members that are independent or positively dependent"
	case "fixed-sequence":
		s += ": in the planned order at the full level, until one is not shown"
	case "fallback":
		s += ": in the planned order, each with its own level and those passed on"
	case "graph":
		s += ": levels pass along the planned graph"
	}
	if f.Alpha > 0 {
		s += ". Error level of the family: " + number.Error(f.Alpha)
	}
	if len(f.After) > 0 {
		s += ". Tested after " + strings.Join(f.After, ", ")
	}
	return s + "."
}
