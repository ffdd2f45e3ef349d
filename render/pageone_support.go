package render

import (
	"strings"

	"steelyard/compute/result"
)

// supported says what the results support and what they do not. Where
// several claims share the page they are named and not worded again.
func (c *composer) supported(primary []*result.Hypothesis, dense bool) (yes, no list) {
	var asClaimed, suggested []string
	for _, h := range primary {
		v := voiceOf(c.res, h)
		v.brief = true
		j := &h.Judged
		var not []string
		switch j.Verdict {
		case result.Established, result.Suggested:
			switch {
			case dense && j.Verdict == result.Suggested:
				suggested = append(suggested, h.Name)
			case dense:
				asClaimed = append(asClaimed, h.Name)
			default:
				yes.named(h.Name, v.verdict(j)+".")
			}
		case result.Contradicted:
			yes.named(h.Name, "the opposite: "+v.opposite(j)+".")
			not = append(not, "its claim")
		case result.Open, result.Pending, result.Masked:
			if dense {
				not = append(not, "its claim ("+string(j.Verdict)+")")
			} else {
				no.named(h.Name, v.verdict(j)+".")
			}
		case result.Described:
			not = append(not, "a claim, as it is only described")
		}
		if s := notShown(j.Reading, v.o.Better); s != "" && v.read(j) {
			not = append(not, s)
		}
		no.named(h.Name, fullStop(strings.Join(not, "; ")))
	}
	if len(asClaimed) > 0 {
		yes.add("As claimed above: " + join(asClaimed) + ".")
	}
	if len(suggested) > 0 {
		yes.add("Suggested only, exploratory: " + join(suggested) + ".")
	}
	for _, f := range c.res.Families {
		if f.Verdict == result.Established {
			yes.named("Family "+f.Name, familyLine(&f))
		} else {
			no.named("Family "+f.Name, familyLine(&f))
		}
	}
	return yes, no
}

// anyJudged reports whether a claim has been decided or left open by results.
func (c *composer) anyJudged(hs []*result.Hypothesis) bool {
	for _, h := range hs {
		if judged(h.Verdict) || h.Verdict == result.Described {
			return true
		}
	}
	return false
}

// supports prints the two lists under their headings.
func (c *composer) supports(primary []*result.Hypothesis) {
	yes, no := c.supported(primary, false)
	if len(yes.items) > 0 {
		c.heading(2, "What the results support", "")
		yes.to(c)
	}
	if len(no.items) > 0 {
		title := "What they do not support"
		if len(yes.items) == 0 {
			title = "What the results do not support"
			if !c.anyJudged(primary) {
				title = "Not judged yet"
			}
		}
		c.heading(2, title, "")
		no.to(c)
	}
}
