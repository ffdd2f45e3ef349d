package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/chart"
	"steelyard/render/number"
)

// mostGroups is how many groups a figure shows; the table has more.
const mostGroups = 10

// groupFigures draws the groups of every outcome whose entries give means or
// events, one figure an outcome.
func (c *composer) groupFigures() {
	for i := range c.res.Outcomes {
		o := &c.res.Outcomes[i]
		if d, what := c.groupRows(o); len(d.Rows) > 1 && len(d.Rows) <= mostGroups && what != "" {
			var said []string
			for _, r := range d.Rows {
				said = append(said, r.Name+" "+r.Text)
			}
			if set := c.drawnSet(o); set != "" {
				what += ", analysis set " + set + ","
			}
			alt := o.Label + ", " + what + " by group: " + strings.Join(said, "; ") + "."
			c.add2(figure(o.Label+": "+what+" by group.", alt, d.Draw(), nil))
		}
	}
}

// drawnSet is the analysis set whose groups are drawn: the one that decides
// the first hypothesis on the outcome; "" without sets.
func (c *composer) drawnSet(o *result.Outcome) string {
	for i := range c.res.Hypotheses {
		if h := &c.res.Hypotheses[i]; h.Outcome == o.Name && h.Set != "" {
			return h.Set
		}
	}
	return ""
}

// groupRows gathers the groups of an outcome; the deciding set only, where
// entries come in several.
func (c *composer) groupRows(o *result.Outcome) (d chart.Groups, what string) {
	set := c.drawnSet(o)
	var values []float64
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if s.Outcome != o.Name || s.Use == result.MaskedUse || s.Set != "" && set != "" && s.Set != set {
			continue
		}
		if len(s.Survival) > 0 {
			continue // shares would pass over when observation ended; the curves show them
		}
		for _, g := range s.Groups {
			r := chart.Group{Name: s.Study, Grey: s.Use != result.Analysed}
			if g.Name != "" {
				r.Name += ", " + g.Name
			}
			switch {
			case g.Mean.OK:
				what = "means with one standard deviation to each side"
				r.Mean, r.SD, r.Text = chart.Point{V: g.Mean.V, OK: true}, g.SD.V, spreadText(o, g.Mean, g.SD)
				if g.SD.OK {
					r.Text += " (SD " + spreadText(o, g.SD, g.SD) + ")"
				}
				values = append(values, g.Mean.V-g.SD.V, g.Mean.V+g.SD.V)
			case g.Events.OK && g.N.OK && g.N.V > 0:
				what = "share with an event"
				r.Share, r.Text = chart.Point{V: g.Events.V / g.N.V, OK: true}, number.Count(g.Events.V)+" of "+number.Count(g.N.V)
			default:
				continue
			}
			d.Rows = append(d.Rows, r)
		}
	}
	if len(values) > 0 {
		d.Axis = chart.NewAxis(false, values...)
		d.Axis.Title, d.Axis.Unit = o.Label, o.Unit
		if o.Unit != "" {
			d.Axis.Title += ", " + o.Unit
		}
	} else {
		top := 0.0
		for _, r := range d.Rows {
			top = max(top, r.Share.V)
		}
		d.Axis = chart.NewAxis(false, 0, max(top, 0.01))
		d.Axis.Lo, d.Axis.Title = 0, "Share with an event"
	}
	return d, what
}
