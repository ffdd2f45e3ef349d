package render

import (
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
		return "excluded rows kept"
	}
	return kind
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
	missing := number.Count(t.Missing[0])
	if v.grouped() {
		missing = number.Count(t.Missing[0]) + " in " + v.a() + " and " + number.Count(t.Missing[1]) + " in " + v.b()
	}
	text := "Missing: " + missing + ". "
	switch {
	case t.Shift.OK:
		text += "The verdict would become " + string(t.Verdict) + " if those missing differed from those seen by " + number.Significant(t.Shift.V, 3) + unitTail(v) + " or more."
	case t.Events[0].OK && t.Events[1].OK:
		text += "The split nearest to what was seen at which the verdict would become " + string(t.Verdict) + ": " +
			number.Count(t.Events[0].V) + " events among the first and " + number.Count(t.Events[1].V) + " among the second group's missing."
	default:
		text += "No split of those missing changes the verdict."
	}
	c.para(text)
}
