package render

import (
	"math"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// sensitivityOf prints the planned sensitivity analyses of one hypothesis.
func (c *composer) sensitivityOf(v voice) {
	for i := range c.res.Sensitivity {
		s := &c.res.Sensitivity[i]
		if s.Of != v.h.Name {
			continue
		}
		c.heading(3, "Sensitivity analysis "+s.Name+": "+kindText(s.Kind), "")
		if len(s.Judged) == 0 && len(s.Curve) < 2 && s.Tipping == nil {
			c.para(nothingToShow(s.Kind))
			continue
		}
		c.marginSensitivity(v, s)
		if len(s.Judged) > 0 {
			t := v.judgedTable("Verdict under each", "Under")
			agree := 0
			for k := range s.Judged {
				j := &s.Judged[k]
				v.judgedRow(t, becauseText(j.Because), j)
				if j.Verdict == v.h.Verdict {
					agree++
				}
			}
			t.note(number.Int(agree) + " of " + number.Int(len(s.Judged)) + " agree with the verdict. The planned analysis decides.")
			t.to(c)
		}
		c.tipping(v, s)
	}
}

// kindText words a kind of sensitivity analysis.
func kindText(kind string) string {
	switch kind {
	case "margin":
		return "how the verdict changes with the margin"
	case "leave-one-out":
		return "each study left out in turn"
	case "method":
		return "other methods valid for these data"
	case "tipping-point":
		return "what the missing would have to show"
	case "keep-excluded":
		return "the results left out, kept"
	}
	return kind
}

// nothingToShow says why a planned sensitivity analysis is empty.
func nothingToShow(kind string) string {
	switch kind {
	case "leave-one-out":
		return "There are too few studies to leave one out."
	case "tipping-point":
		return "Nothing could be computed: no number missing is known for this hypothesis."
	case "keep-excluded":
		return "No result of this hypothesis was left out, so there is nothing to keep."
	}
	return "Nothing could be computed for this hypothesis; the diagnostics say why."
}

// marginSensitivity says at which margin the verdict steps.
func (c *composer) marginSensitivity(v voice, s *result.Sensitivity) {
	c.add2(c.marginFigure(v, s))
	if s.Smallest.OK {
		c.para("The verdict steps at a margin of " + number.Significant(v.f.Show(s.Smallest.V), 3) + unitTail(v) + ", found after the data; it is not a claim.")
	}
}

// tipping says what those missing would have to show to change the verdict.
func (c *composer) tipping(v voice, s *result.Sensitivity) {
	t := s.Tipping
	if t == nil {
		return
	}
	names := [2]string{"all", ""}
	if v.grouped() {
		names = v.o.Groups
	}
	tab := newTable("What the missing would have to show for the verdict to become "+string(t.Verdict), "Group", ">Missing", "Events among the missing")
	switch {
	case t.Shift.OK:
		way := "up"
		if t.Shift.V < 0 {
			way = "down"
		}
		by := number.Significant(math.Abs(t.Shift.V), 3) + unitTail(v) + " or more"
		text := "The verdict would become " + string(t.Verdict) + " if those missing differed from those seen by " + by + ", in the sense that moves the estimate " + way
		if v.grouped() {
			text += ", in both groups"
		}
		c.para(text + ". Missing: " + missingWords(v, t) + ".")
	case t.Events[0].OK:
		for i, n := range names {
			if n != "" && t.Events[i].OK {
				tab.row(n, number.Count(t.Missing[i]), number.Count(t.Events[i].V))
			}
		}
		tab.note("The split nearest to what was seen; whether it is plausible is for judgement.")
		tab.to(c)
	default:
		c.para("Missing: " + missingWords(v, t) + ". No split of those missing changes the verdict.")
	}
}

// missingWords are the counts of those missing.
func missingWords(v voice, t *result.Tipping) string {
	if v.grouped() {
		return number.Count(t.Missing[0]) + " in " + v.a() + " and " + number.Count(t.Missing[1]) + " in " + v.b()
	}
	return number.Count(t.Missing[0])
}
