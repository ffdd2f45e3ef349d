package render

import (
	"slices"

	"steelyard/compute/result"
	"steelyard/render/chart"
	"steelyard/render/number"
	"steelyard/render/page"
)

// survivalFigures draws the curves of time-to-event data.
func (c *composer) survivalFigures() {
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if len(s.Survival) == 0 || s.Use == result.MaskedUse || c.drawnBefore(i) {
			continue
		}
		if fig := c.survivalFigure(s, c.sameCurves(i)); fig != nil {
			c.add(*fig)
		}
	}
}

// sameCurves are the outcomes of later entries of the same study with the
// very same curves: one figure serves them all.
func (c *composer) sameCurves(i int) []*result.Outcome {
	var out []*result.Outcome
	for k := i + 1; k < len(c.res.Studies); k++ {
		if s := &c.res.Studies[k]; s.Use != result.MaskedUse && equalCurves(s, &c.res.Studies[i]) {
			out = append(out, outcomeOf(c.res, s.Outcome))
		}
	}
	return out
}

// drawnBefore reports whether an earlier entry's figure shows these curves.
func (c *composer) drawnBefore(i int) bool {
	for k := range i {
		if s := &c.res.Studies[k]; s.Use != result.MaskedUse && equalCurves(s, &c.res.Studies[i]) {
			return true
		}
	}
	return false
}

// equalCurves reports whether two entries have the same curves.
func equalCurves(a, b *result.Study) bool {
	return a.Study == b.Study && a.Set == b.Set && a.Outcome != b.Outcome && len(a.Survival) > 0 &&
		slices.EqualFunc(a.Survival, b.Survival, func(x, y result.SurvivalCurve) bool {
			return x.Group == y.Group && slices.Equal(x.Time, y.Time) && slices.Equal(x.Share, y.Share) && slices.Equal(x.Censored, y.Censored)
		})
}

// survivalFigure is the curve of time-to-event data;
// others are further outcomes read from the same curves.
func (c *composer) survivalFigure(s *result.Study, others []*result.Outcome) *page.Figure {
	labels, unit := []string{}, ""
	for _, o := range append([]*result.Outcome{outcomeOf(c.res, s.Outcome)}, others...) {
		labels = append(labels, o.Label)
		if unit == "" {
			unit = o.Unit
		}
	}
	d := chart.Survival{Unit: unit}
	alt := "Shares without the event over time in " + s.Study + ":"
	for i, g := range s.Survival {
		d.Groups = append(d.Groups, chart.Survive{Name: g.Group, Time: g.Time, Frac: g.Share, Censored: g.Censored, Risk: g.RiskCounts})
		if len(g.RiskTimes) > len(d.RiskTimes) {
			d.RiskTimes = g.RiskTimes
		}
		if n := min(len(g.Time), len(g.Share)); n > 0 {
			if i > 0 {
				alt += ";"
			}
			alt += " " + g.Group + " ends at " + number.Share(g.Share[n-1]) + " after " + number.Significant(g.Time[n-1], 3)
		}
	}
	return figure(s.Study+", "+join(labels)+": share without the event (Kaplan–Meier). Ticks mark where observation ended.", alt+".", d.Draw(), nil)
}
