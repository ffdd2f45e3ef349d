package read

import (
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// number is one key of a summary with its value.
type number struct {
	key string
	v   record.Number
}

func groupNumbers(g *record.Group) []number {
	return []number{{"n", g.N}, {"mean", g.Mean}, {"sd", g.SD}, {"log_mean", g.LogMean}, {"log_sd", g.LogSD},
		{"events", g.Events}, {"exposure", g.Exposure}, {"r", g.R}}
}

// complete checks that the keys of a summary are those of one alternative. It
// reports whether they are.
func (c *checker) complete(at diag.Span, what string, numbers []number, m *record.Measure) bool {
	stated := map[string]bool{}
	for _, n := range numbers {
		if !absent(n.v) {
			stated[n.key] = true
		}
	}
	best, missing := closest(m.Summary, stated)
	if len(missing) > 0 {
		c.add(diag.Error("R404", at, "%s lacks %s", what, words(missing)).
			WithHelp("%s takes %s", m.Word, strings.ReplaceAll(strings.Join(m.Summary, "; or "), " ", ", ")))
		return false
	}
	good := true
	for _, n := range numbers {
		if !stated[n.key] {
			continue
		}
		if !contains(best, n.key) {
			c.add(diag.Error("R405", n.v.Span, "%q is no number of %s", n.key, m.Word).
				WithHelp("%s takes %s", m.Word, strings.ReplaceAll(strings.Join(m.Summary, "; or "), " ", ", ")))
			good = false
		}
		good = good && n.v.Stated
	}
	return good
}

// twoGroups checks that both groups of the outcome are there, once each.
func (c *checker) twoGroups(r *record.Result, o *record.Outcome, m *record.Measure) {
	for _, g := range r.Groups {
		if g.Name == "" {
			return // the whole was at fault
		}
		if named(o) && !record.Lists(o.Groups, g.Name) {
			d := diag.Error("R406", g.At, "%s is no group of the outcome %q", quoteShort(g.Name), o.Name)
			if near := nearest(g.Name, record.Texts(o.Groups)); near != "" {
				d = d.WithHelp("did you mean groups.%s?", near)
			} else {
				d = d.WithHelp("its groups are %s", words(record.Texts(o.Groups)))
			}
			c.add(d)
			continue
		}
		c.group(g, m, "groups."+g.Name)
	}
	if !named(o) || len(r.Groups) >= 2 || c.damaged {
		return
	}
	for _, s := range o.Groups.V {
		if s.Stated && r.Groups[0].Name != s.V && record.Lists(o.Groups, r.Groups[0].Name) {
			c.add(diag.Error("R406", r.Groups[0].At, "the group %q has no numbers", s.V).
				WithHelp("write groups.%s = { … } beside groups.%s", s.V, r.Groups[0].Name))
		}
	}
}

// group checks one group or sample.
func (c *checker) group(g *record.Group, m *record.Measure, what string) {
	if c.refused[g.At] || !c.complete(g.At, what, groupNumbers(g), m) {
		return
	}
	if g.Events.Stated && g.N.Stated && g.Events.V > g.N.V {
		c.add(diag.Error("R407", g.Events.Span, "%s has %s events among %s", what, num(g.Events.V), num(g.N.V)).
			WithHelp("events are subjects with the event, and cannot exceed n"))
	}
	c.lonely(g.N, g.SD, what)
	c.lonely(g.N, g.LogSD, what)
}

// lonely refuses a spread of a single value.
func (c *checker) lonely(n, sd record.Number, what string) {
	if n.Stated && sd.Stated && n.V == 1 && sd.V > 0 {
		c.add(diag.Error("R407", sd.Span, "%s has one value, and one value has no standard deviation", what))
	}
}

func (c *checker) pairs(p *record.Pairs, m *record.Measure) {
	numbers := []number{{"n", p.N}, {"mean", p.Mean}, {"sd", p.SD}, {"first_mean", p.FirstMean}, {"second_mean", p.SecondMean},
		{"first_sd", p.FirstSD}, {"second_sd", p.SecondSD}, {"r", p.R},
		{"both", p.Both}, {"first_only", p.FirstOnly}, {"second_only", p.SecondOnly}, {"neither", p.Neither}}
	if c.refused[p.At] || !c.complete(p.At, "pairs", numbers, m) {
		return
	}
	c.lonely(p.N, p.SD, "pairs")
	if p.Both.Stated && p.Both.V+p.FirstOnly.V+p.SecondOnly.V+p.Neither.V == 0 {
		c.add(diag.Error("R407", p.At, "the four counts are all 0: there are no pairs"))
	}
}

// effect checks an effect that was estimated elsewhere.
func (c *checker) effect(e *record.Effect, m *record.Measure) {
	if c.refused[e.At] {
		return
	}
	interval := !absent(e.Low) || !absent(e.High) || !absent(e.Level)
	const help = "write effect = { estimate, se }, or effect = { estimate, low, high, level }"
	switch {
	case !absent(e.SE) && interval:
		c.add(diag.Error("R405", e.At, "effect gives both a standard error and an interval").WithHelp(help))
	case absent(e.SE) && !interval:
		c.add(diag.Error("R404", e.At, "effect lacks its error").WithHelp(help))
	case interval && (absent(e.Low) || absent(e.High) || absent(e.Level)):
		var missing []string
		for _, n := range []number{{"low", e.Low}, {"high", e.High}, {"level", e.Level}} {
			if absent(n.v) {
				missing = append(missing, n.key)
			}
		}
		c.add(diag.Error("R404", e.At, "effect lacks %s", words(missing)).WithHelp(help))
	}
	inside := true
	for _, n := range []number{{"estimate", e.Estimate}, {"low", e.Low}, {"high", e.High}} {
		if n.v.Stated && !inRange(m, n.v.V) {
			c.add(diag.Error("R407", n.v.Span, "a %s is %s; %s is %s", m.Word, rangeOf(m), n.key, num(n.v.V)))
			inside = false
		}
	}
	if !inside {
		return
	}
	switch {
	case e.Low.Stated && e.High.Stated && e.Low.V >= e.High.V:
		c.add(diag.Error("R407", e.Low.Span, "low, %s, does not lie below high, %s", num(e.Low.V), num(e.High.V)))
	case e.Estimate.Stated && (e.Low.Stated && e.Estimate.V < e.Low.V || e.High.Stated && e.Estimate.V > e.High.V):
		c.add(diag.Error("R407", e.Estimate.Span, "the estimate, %s, lies outside its interval", num(e.Estimate.V)))
	}
}

// pvalue refuses p-values that no test can give.
func (c *checker) pvalue(p *record.PValue) {
	if p.Sides.Stated && p.Sides.V == 1 && p.Direction.Stated && p.Direction.V == "unknown" {
		c.add(diag.Error("S113", p.Direction.Span, "a test with one side has tested one: its direction is missing").
			WithHelp(`write direction = "above" or "below", the side that was tested`))
	}
	if !p.Value.Stated || !p.Relation.Stated && !p.Relation.Span.IsZero() {
		return
	}
	switch {
	case p.Value.V == 0 && p.Relation.V == "=":
		c.add(diag.Error("S109", p.Value.Span, "no test gives p = 0: it was rounded").
			WithHelp(`write the bound that is known: value = 0.001, relation = "<"`))
	case p.Value.V == 0 && p.Relation.V == "<":
		c.add(diag.Error("R407", p.Value.Span, "no p-value lies below 0"))
	case p.Value.V == 1 && p.Relation.V == ">":
		c.add(diag.Error("R407", p.Value.Span, "no p-value lies above 1"))
	}
}
