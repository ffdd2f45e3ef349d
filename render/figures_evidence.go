package render

import (
	"math"
	"strings"
	"time"

	"steelyard/compute/result"
	"steelyard/render/chart"
	"steelyard/render/number"
	"steelyard/render/page"
)

// outcomeGround is a beam with the points of an outcome.
func (c *composer) outcomeGround(o *result.Outcome) chart.Beam {
	f := number.Of(o)
	return chart.Beam{Axis: c.axis(o), Band: band(f, o.Low, o.High), Null: point(f, o.Null), Names: 172, Right: 170, Height: 16}
}

// shownRow is an interval with its text on the right.
func shownRow(f number.Format, name string, s number.Shown, est, low, high result.Opt) chart.Row {
	r := chart.Row{Name: name, Est: point(f, est), Low: point(f, low), High: point(f, high), Right: s.Estimate}
	if g := s.Bare(); g != "" {
		r.Right += " (" + g + ")"
	}
	return r
}

// studiesFigure shows every study and the pooled results under one beam.
// Points are drawn to size by weight.
func (c *composer) studiesFigure(group []*result.Pooled) []*page.Figure {
	d := deciding(group)
	o := outcomeOf(c.res, d.Outcome)
	f := number.Of(o)
	b := c.outcomeGround(o)
	most := 0.0
	for _, s := range d.Share {
		most = math.Max(most, s)
	}
	for i, name := range d.Studies {
		s := c.studyEntry(name, d.Outcome, d.Set)
		if s == nil {
			continue
		}
		r := shownRow(f, name, c.studyShown(s, o), s.Analysis.Estimate, s.Analysis.Low, s.Analysis.High)
		if i < len(d.Share) && most > 0 {
			r.Weight = d.Share[i] / most
		}
		b.Rows = append(b.Rows, r)
	}
	b.Rows = append(b.Rows, c.greyStudies(d, o, f)...)
	for i, p := range group {
		r := shownRow(f, p.Model+" model", pooledShown(p, o), p.Estimate, p.Low, p.High)
		r.Strong, r.Separate = p.Decides, i == 0
		r.Wider, r.WiderHigh = point(f, p.PredictionLow), point(f, p.PredictionHigh)
		b.Rows = append(b.Rows, r)
	}
	if len(b.Rows) == 0 {
		return nil
	}
	s := pooledShown(d, o)
	tail := " The model that decides gives " + s.EstimateUnit() + ", " + number.Level(d.Level) + " interval " + s.Range() + "."
	return parted("Study by study", "Discs are sized by weight; the heavy bar is the model that decides, dashed its interval for a new setting like these. Arrows go on beyond the axis.",
		"Estimates and intervals, study by study: ", tail, b)
}

// mostRows is how many rows one figure holds; more go on in further ones, so
// that none is larger than a page or has to be made too small to read.
const mostRows = 26

// parted draws a beam in as many figures as its rows need, of about equal
// length and under the same axis.
func parted(title, words, altHead, altTail string, b chart.Beam) []*page.Figure {
	parts := (len(b.Rows) + mostRows - 1) / mostRows
	size := (len(b.Rows) + parts - 1) / parts
	var out []*page.Figure
	for i := range parts {
		p := b
		p.Rows = b.Rows[i*size : min(len(b.Rows), (i+1)*size)]
		caption, alt := title+". "+words, altHead+rowsText(p.Rows)+"."+altTail
		if parts > 1 {
			which := number.Int(i+1) + " of " + number.Int(parts)
			alt = "Part " + which + ". " + alt
			if caption = title + ", part " + which + "."; i == 0 {
				caption += " " + words
			}
		}
		out = append(out, figure(caption, alt, p.Draw(), p.Plain(plainColumns)))
	}
	return out
}

// mostSaid is how many rows of a figure its alternative text reads out; of more
// it says the first and the last few, and a table has them all.
const mostSaid = 12

// rowsText reads the rows of a figure out.
func rowsText(rows []chart.Row) string {
	var parts []string
	for i, r := range rows {
		if len(rows) > mostSaid && i >= mostSaid/2 && i < len(rows)-mostSaid/2 {
			if i == mostSaid/2 {
				parts = append(parts, number.Int(len(rows)-mostSaid)+" more")
			}
			continue
		}
		parts = append(parts, r.Name+" "+r.Right)
	}
	return strings.Join(parts, "; ")
}

// greyStudies are entries of the outcome that are shown and not pooled.
func (c *composer) greyStudies(d *result.Pooled, o *result.Outcome, f number.Format) []chart.Row {
	var rows []chart.Row
	for i := range c.res.Studies {
		s := &c.res.Studies[i]
		if s.Outcome != d.Outcome || s.Analysis.Method == "" || s.Use != result.LeftOut && s.Use != result.EarlierUse {
			continue
		}
		pooled := false
		for _, n := range d.Studies {
			pooled = pooled || n == s.Study
		}
		if pooled {
			continue
		}
		r := shownRow(f, s.Study+" ("+useText(s.Use)+")", c.studyShown(s, o), s.Analysis.Estimate, s.Analysis.Low, s.Analysis.High)
		r.Grey, r.Separate = true, len(rows) == 0
		rows = append(rows, r)
	}
	return rows
}

// cumulativeFigure is the pooled evidence as it grew.
func (c *composer) cumulativeFigure(p *result.Pooled) []*page.Figure {
	if len(p.Cumulative) < 2 {
		return nil
	}
	o := outcomeOf(c.res, p.Outcome)
	f := number.Of(o)
	b := c.outcomeGround(o)
	for _, s := range p.Cumulative {
		est, low, high := result.Some(s.Estimate), result.Some(s.Low), result.Some(s.High)
		name := s.Study
		if d := dateText(s.Date); d != "" {
			name = d + " " + s.Study
		}
		b.Rows = append(b.Rows, shownRow(f, name, f.Interval(est, low, high, outcomePoints(o)...), est, low, high))
	}
	b.Rows[len(b.Rows)-1].Strong = true
	first, last := p.Cumulative[0], p.Cumulative[len(p.Cumulative)-1]
	return parted("Evidence over time", "Pooled over the studies up to each date.",
		"Pooled evidence as studies arrived, from "+first.Study+" alone to all up to "+last.Study+": ", "", b)
}

// tallyFigure counts directions, one disc a result.
func (c *composer) tallyFigure(name string, t *result.Tally) *page.Figure {
	text := number.Int(t.Toward) + " of " + number.Int(t.With) + " toward the claim"
	d := chart.Tally{Toward: t.Toward, With: t.With, TowardText: text, Other: "full: toward the claim; open: away from it"}
	return figure(name+": directions of the results.", text+".", d.Draw(), nil)
}

// beliefFigure is a belief before and after.
func (c *composer) beliefFigure(p *result.Prior, o *result.Outcome) *page.Figure {
	if len(p.DensityBefore) == 0 || len(p.DensityAfter) == 0 {
		return nil
	}
	f := number.Of(o)
	ax := c.axis(o)
	d := chart.Beliefs{Axis: ax, Band: band(f, o.Low, o.High), Null: point(f, o.Null)}
	for i, density := range [][]result.DensityPoint{p.DensityBefore, p.DensityAfter} {
		h := chart.Hill{Name: "before", Dashed: true}
		if i == 1 {
			h = chart.Hill{Name: "after the results"}
		}
		for _, at := range density {
			h.X, h.H = append(h.X, f.Show(at.Value)), append(h.H, at.Height)
		}
		d.Hills = append(d.Hills, h)
	}
	alt := "Belief " + p.Name + " before and after the results: inside the region " + number.Share(p.Before.Inside) + " before, " + number.Share(p.After.Inside) + " after."
	caption := "Belief " + p.Name + ", before (dashed) and after (solid), as densities on the analysis scale."
	if p.Before.NullShare.OK {
		caption += " What it puts exactly on the null is not drawn."
	}
	return figure(caption, alt, d.Draw(), nil)
}

// timelineFigure draws events with a known day, one line a kind.
func (c *composer) timelineFigure() *page.Figure {
	var d chart.Timeline
	seen := map[string]bool{}
	for _, e := range c.res.Timeline {
		at, ok := eventTime(e.At)
		if !ok {
			continue
		}
		d.Events = append(d.Events, chart.Event{At: at, Kind: e.Kind, Unproven: e.Order == "unproven"})
		if !seen[e.Kind] {
			seen[e.Kind] = true
			d.Kinds = append(d.Kinds, e.Kind)
		}
	}
	apart := false
	for _, e := range d.Events {
		apart = apart || !e.At.Equal(d.Events[0].At)
	}
	if !apart {
		return nil // nothing to place along a line
	}
	return figure("Timeline. Open marks: the order within the day cannot be proved.", "Timeline of "+number.Int(len(d.Events))+" events ("+joinKinds(d.Kinds)+"), each in the table below.", d.Draw(), nil)
}

// eventTime reads a date or an instant.
func eventTime(s string) (time.Time, bool) {
	for _, layout := range []string{time.RFC3339Nano, "2006-01-02", "2006-01-02 15:04 -07:00", "2006-01-02 15:04:05 -07:00", "2006-01-02 15:04:05Z07:00", "2006-01-02 15:04 UTC"} {
		if t, err := time.Parse(layout, s); err == nil {
			return t, true
		}
	}
	return time.Time{}, false
}
