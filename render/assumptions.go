package render

import (
	"slices"
	"strings"

	"steelyard/compute/result"
	"steelyard/render/chart"
	"steelyard/render/number"
	"steelyard/render/page"
)

// assumptions prints what the data show of each assumption, first at a
// glance, then as numbers.
func (c *composer) assumptions(h *result.Hypothesis) {
	c.add2(c.gauges(h))
	groups := groupsShown(h.Assumptions)
	heads := []string{"Assumption", "What the data show"}
	for _, g := range groups {
		if g == "" {
			g = "Value"
		}
		heads = append(heads, "#"+g)
	}
	t := newTable("Assumptions looked at", heads...)
	for _, a := range h.Assumptions {
		name := assumptionName(a.Assumption)
		rows := 0
		done := map[string]bool{"n": true}
		for _, s := range a.Shows {
			if done[s.What] {
				continue
			}
			done[s.What] = true
			cells := []string{name, shownName(s.What)}
			for _, g := range groups {
				cells = append(cells, shownFor(a.Shows, s.What, g))
			}
			t.row(cells...)
			name, rows = "", rows+1
		}
		if rows == 0 {
			t.row(name, "cannot be looked at from these numbers")
		}
	}
	t.note("Shown for judgement; the method was chosen by the plan and not by these numbers.")
	t.to(c)
}

// assumptionName is an assumption in words.
func assumptionName(word string) string {
	switch word {
	case "normal-means":
		return "means close to normal"
	case "normal-values":
		return "normal values"
	case "normal-residuals":
		return "normal residuals"
	case "normal-approximation":
		return "counts large enough for the normal approximation"
	case "bivariate-normal":
		return "both readings jointly normal"
	case "equal-variances":
		return "equal spread in both groups"
	case "pure-shift":
		return "groups that differ by a shift alone"
	case "same-shape":
		return "same shape in both groups"
	case "symmetric-differences":
		return "differences symmetric about their middle"
	case "no-carry-over":
		return "nothing carried over from the first period"
	case "monotone-relation":
		return "monotone relation"
	case "proportional-hazards":
		return "hazards proportional over time"
	case "log-rank":
		return "log-rank test, beside the model"
	case "restricted-means":
		return "restricted mean of each group"
	case "limits-of-agreement":
		return "limits of agreement"
	case "common-effect":
		return "one effect in all strata"
	}
	return strings.ReplaceAll(word, "-", " ")
}

// shownName is what a number says.
func shownName(what string) string {
	switch what {
	case "skewness":
		return "skewness (symmetric: 0)"
	case "excess kurtosis":
		return "excess kurtosis (normal tails: 0)"
	case "outlying values":
		return "values far outside the middle half"
	case "spread ratio":
		return "ratio of standard deviations (equal: 1)"
	case "chi-square with 1 degree of freedom":
		return "change of the ratio with time, χ² on 1 df"
	case "smallest expected count":
		return "smallest expected count (wanted: 5 or more)"
	}
	return what
}

// gauges shows spread and shape at a glance; nil where the data show neither.
func (c *composer) gauges(h *result.Hypothesis) *page.Figure {
	var d chart.Gauges
	var said []string
	groups := outcomeOf(c.res, h.Outcome).Groups
	for _, a := range h.Assumptions {
		for _, s := range a.Shows {
			g := chart.Gauge{V: s.Value, Text: number.Statistic(result.Some(s.Value))}
			switch s.What {
			case "skewness":
				g.Name, g.Reach, g.Below, g.Above = "Skewness", 2, "tail to the left", "tail to the right"
			case "excess kurtosis":
				g.Name, g.Reach, g.Below, g.Above = "Excess kurtosis", 4, "short tails", "long tails"
			case "spread ratio":
				if !(s.Value > 0) {
					continue
				}
				g.Name, g.Centre, g.Reach, g.Log = "Ratio of SDs", 1, 4, true
				if groups[0] != "" {
					g.Below, g.Above = groups[1]+" spreads more", groups[0]+" spreads more"
				}
			default:
				continue
			}
			if s.Group != "" {
				g.Name += ", " + s.Group
			}
			if len(d.Rows) < 8 && !slices.ContainsFunc(d.Rows, func(r chart.Gauge) bool { return r.Name == g.Name }) {
				d.Rows = append(d.Rows, g)
				said = append(said, g.Name+" "+g.Text)
			}
		}
	}
	if len(d.Rows) == 0 {
		return nil
	}
	alt := "Spread and shape of the values against what the method assumes: " + strings.Join(said, "; ") + "."
	return figure(h.Name+": spread and shape at a glance. The notch is where the assumption holds exactly; arrows go on beyond the line.", alt, d.Draw(), nil)
}

// groupsShown lists the groups of which something is shown, in order.
func groupsShown(checks []result.Check) []string {
	var out []string
	for _, a := range checks {
		for _, s := range a.Shows {
			if s.What != "n" && !slices.Contains(out, s.Group) {
				out = append(out, s.Group)
			}
		}
	}
	return out
}

// shownFor is one number about one group, "" where there is none.
func shownFor(shows []result.Shown, what, group string) string {
	for _, s := range shows {
		if s.What == what && s.Group == group {
			if s.What == "p" || strings.HasSuffix(s.What, " p") {
				return number.P(result.P{P: s.Value, OK: true})
			}
			if what == "skewness" || what == "excess kurtosis" || what == "spread ratio" {
				return number.Statistic(result.Some(s.Value))
			}
			return number.Short(s.Value, 3)
		}
	}
	return ""
}
