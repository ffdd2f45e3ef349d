package read

import (
	"fmt"
	"path"
	"slices"
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// results checks every entry, and the entries against each other.
func (c *checker) results() {
	places := map[string]*record.Result{}
	for _, r := range c.rec.Results {
		c.entry(r, false)
		c.twiceGiven(r, places)
	}
	for _, r := range c.rec.Earlier {
		c.entry(r, true)
	}
	for _, m := range c.rec.Missing {
		known(c, m.Outcome, "outcome", c.outcomes)
	}
	c.studies()
}

// twiceGiven reports an entry whose study, outcome, set and look are given
// before.
func (c *checker) twiceGiven(r *record.Result, places map[string]*record.Result) {
	if !r.Study.Stated || !r.Outcome.Stated || !r.Look.Stated && !r.Look.Span.IsZero() || r.Look.Unplanned {
		return
	}
	key := fmt.Sprintf("%q %q %q %d", r.Study.V, r.Outcome.V, r.Set.V, r.Look.Number)
	first := places[key]
	if first == nil {
		places[key] = r
		return
	}
	line, _ := c.rec.Source.Position(first.At.Start)
	d := diag.Error("R408", r.At, "the study %s has a result for %q already, on line %d", quoteShort(r.Study.V), r.Outcome.V, line)
	if r.Look.Stated {
		d.Message += fmt.Sprintf(", at look %d", r.Look.Number)
		c.add(d)
		return
	}
	c.add(d.WithHelp("different studies have different names; data at a planned look say look = 1; a correction changes the entry and is declared as a deviation"))
}

// studies warns of studies of a claim that no entry knows but nearly.
func (c *checker) studies() {
	names := map[string]bool{}
	for _, list := range [][]*record.Result{c.rec.Results, c.rec.Earlier} {
		for _, r := range list {
			names[r.Study.V] = true
		}
	}
	for _, m := range c.rec.Missing {
		names[m.Study.V] = true
	}
	all := make([]string, 0, len(names))
	for n := range names {
		all = append(all, n)
	}
	sortStrings(all)
	for _, h := range c.rec.Plan.Hypotheses {
		for _, s := range distinct(h.Studies) {
			if names[s.V] || c.damaged {
				continue
			}
			if near := c.near(s.V, all); near != "" {
				c.add(diag.Warning("R420", s.Span, "no entry is of the study %s", quoteShort(s.V)).WithHelp("did you mean %q?", near))
			}
		}
	}
}

// entry checks one result.
func (c *checker) entry(r *record.Result, earlier bool) {
	o := known(c, r.Outcome, "outcome", c.outcomes)
	switch {
	case absent(r.Date) && absent(r.Known):
		c.add(diag.Error("R205", r.At, "the day on which this result became known is missing").
			WithHelp("write date = 2026-04-12, or known = 2026-04-12T09:30:00+02:00 where the order within a day matters"))
	case !absent(r.Date) && !absent(r.Known):
		c.add(diag.Error("R410", r.Known.Span, "`date` and `known` both say when this result became known").WithHelp("keep one of the two"))
	}
	c.look(r)
	forms := r.Forms()
	c.setOf(r, forms, earlier)
	switch len(forms) {
	case 1:
	case 0:
		c.add(diag.Error("R402", r.At, "this entry gives no result").WithHelp("%s", formHelp(o)))
		return
	default:
		c.add(diag.Error("R402", r.At, "this entry gives its result in %d forms: %s", len(forms), words(forms)).
			WithHelp("keep one; another study or set is an entry of its own"))
	}
	if o == nil || !o.Measure.Stated {
		return
	}
	m := record.MeasureOf(o.Measure.V)
	for _, f := range r.Flow {
		c.flowGroup(f, o)
	}
	for _, form := range forms {
		c.form(r, o, m, form)
	}
	if r.P != nil && !earlier && c.rec.CombinationOf(o.Name) == nil && len(forms) == 1 && !c.damaged {
		c.add(diag.Error("S113", r.P.At, "a p-value alone can join a combination and nothing else, and [plan.combination.%s] is absent", o.Name).
			WithHelp("give an `effect` where one is known"))
	}
}

func (c *checker) look(r *record.Result) {
	l := c.rec.Plan.Looks
	if !r.Look.Stated {
		return
	}
	if l == nil {
		if !c.damaged {
			c.add(diag.Error("R412", r.Look.Span, "this entry names a look, and the plan has no [plan.looks]"))
		}
		return
	}
	anytime := l.Anytime.Stated && l.Anytime.V
	if n := len(l.Fractions.V); !r.Look.Unplanned && !anytime && l.Fractions.Stated && r.Look.Number > n {
		c.add(diag.Error("R412", r.Look.Span, "the plan has %s; this is look %d", count(n, "look"), r.Look.Number).
			WithHelp(`a look that was not planned says look = "unplanned"`))
	}
}

// setOf checks the analysis set of an entry. Results from before the plan may
// have none.
func (c *checker) setOf(r *record.Result, forms []string, earlier bool) {
	known(c, r.Set, "analysis set", c.sets)
	if earlier || len(c.sets) == 0 || !absent(r.Set) || len(forms) == 0 || slices.Contains(forms, "data") || c.damaged {
		return
	}
	c.add(diag.Error("R411", r.At, "the plan declares analysis sets, and this summary does not say of which it is").
		WithHelp("write set = …, one of %s", words(sortedNames(c.sets))))
}

func (c *checker) flowGroup(f *record.Flow, o *record.Outcome) {
	if !named(o) || record.Lists(o.Groups, f.Name) || f.Name == "" {
		return
	}
	c.add(diag.Error("R406", f.At, "%s is no group of the outcome %q", quoteShort(f.Name), o.Name).
		WithHelp("its groups are %s", words(record.Texts(o.Groups))))
}

// formHelp says which forms an outcome takes.
func formHelp(o *record.Outcome) string {
	if o == nil {
		return "give one of groups, sample, pairs, effect, p and data"
	}
	m := record.MeasureOf(o.Measure.V)
	if m == nil {
		return "give one of groups, sample, pairs, effect, p and data"
	}
	var out []string
	for _, s := range m.Summary {
		keys := strings.ReplaceAll(s, " ", ", ")
		switch m.Shape {
		case record.TwoGroups:
			name := "NAME"
			if o.Groups.Stated {
				name = o.Groups.V[0].V
			}
			out = append(out, "groups."+name+" = { "+keys+" } and the like for the other group")
		case record.OneSample:
			out = append(out, "sample = { "+keys+" }")
		case record.Paired:
			out = append(out, "pairs = { "+keys+" }")
		case record.Given:
		}
	}
	if m.Effect {
		out = append(out, "effect = { estimate, se }")
	}
	if m.Data != nil {
		out = append(out, "data = { file, … }")
	}
	return m.Word + " takes " + strings.Join(out, "; or ")
}

// form checks that the measure takes the form and that the form is complete.
func (c *checker) form(r *record.Result, o *record.Outcome, m *record.Measure, form string) {
	takes, at := true, r.At
	switch form {
	case "groups":
		takes, at = m.Shape == record.TwoGroups && m.Summary != nil, r.Groups[0].At
	case "sample":
		takes, at = m.Shape == record.OneSample && m.Summary != nil, r.Sample.At
	case "pairs":
		takes, at = m.Shape == record.Paired && m.Summary != nil, r.Pairs.At
	case "effect":
		takes, at = m.Effect, r.Effect.At
	case "p":
		at = r.P.At
	case "data":
		takes, at = m.Data != nil, r.Data.At
	}
	if !takes {
		c.add(diag.Error("R403", at, "%s takes no result in the form %q", m.Word, form).WithHelp("%s", formHelp(o)))
		return
	}
	if form == "groups" && o.Design.V == "crossover" {
		c.add(diag.Error("R403", at, "a crossover is not told by summaries of its groups: every subject is in both").
			WithHelp("give `data` with subject, period and sequence, or an `effect`"))
		return
	}
	switch form {
	case "groups":
		c.twoGroups(r, o, m)
	case "sample":
		c.group(r.Sample, m, "sample")
	case "pairs":
		c.pairs(r.Pairs, m)
	case "effect":
		c.effect(r.Effect, m)
	case "p":
		c.pvalue(r.P)
	case "data":
		c.data(r.Data, o, m)
	}
}

// data checks the names of columns and of the file.
func (c *checker) data(d *record.Data, o *record.Outcome, m *record.Measure) {
	if c.refused[d.At] {
		return
	}
	c.file(d.File)
	c.digest(d.SHA256)
	columns := []struct {
		key  string
		name record.String
	}{
		{"value", d.Value}, {"group", d.Group}, {"pair", d.Pair}, {"subject", d.Subject}, {"period", d.Period},
		{"sequence", d.Sequence}, {"first", d.First}, {"second", d.Second}, {"time", d.Time}, {"event", d.Event},
		{"exposure", d.Exposure}, {"cluster", d.Cluster},
	}
	stated := map[string]bool{}
	for _, k := range columns {
		if !absent(k.name) {
			stated[k.key] = true
		}
	}
	need := m.Data
	if o.Design.V == "crossover" {
		need = []string{"value subject period sequence"}
	}
	best, missing := closest(need, stated)
	if len(missing) > 0 {
		help := "write its columns: " + strings.ReplaceAll(strings.Join(need, "; or "), " ", ", ")
		c.add(diag.Error("R413", d.At, "%s from data needs the %s %s", m.Word, pick(len(missing) == 1, "column", "columns"), words(missing)).WithHelp("%s", help))
		return
	}
	for _, k := range columns {
		if !stated[k.key] || slices.Contains(best, k.key) {
			continue
		}
		if k.key == "cluster" && o.Cluster != nil {
			continue
		}
		if k.key == "cluster" {
			c.misplaced(k.name.Span, "cluster", "needs [plan.outcome."+o.Name+".cluster]")
			continue
		}
		c.misplaced(k.name.Span, k.key, "is no column that "+m.Word+" reads here")
	}
	if len(d.Labels) > 0 && !stated["group"] && !stated["sequence"] {
		c.misplaced(d.Labels[0].At, "labels", "explains the codes of the column `group`, which is absent")
	}
	for _, l := range d.Labels {
		if l.Text.Stated && named(o) && !record.Lists(o.Groups, l.Text.V) {
			c.add(diag.Error("R406", l.Text.Span, "%s is no group of the outcome %q", quoteShort(l.Text.V), o.Name).
				WithHelp("its groups are %s", words(record.Texts(o.Groups))))
		}
	}
}

// closest picks, among alternatives of keys, the one that the stated keys fill
// best, and says what it lacks.
func closest(alternatives []string, stated map[string]bool) (best, missing []string) {
	score := -1 << 30
	for _, a := range alternatives {
		keys := strings.Fields(a)
		var lack []string
		have := 0
		for _, k := range keys {
			if stated[k] {
				have++
			} else {
				lack = append(lack, k)
			}
		}
		if s := 4*have - 3*len(lack) + pickInt(have > 0 && len(lack) == 0, 100, 0); s > score {
			score, best, missing = s, keys, lack
		}
	}
	return best, missing
}

func pickInt(first bool, a, b int) int {
	if first {
		return a
	}
	return b
}

// file refuses a path that would leave the record's folder.
func (c *checker) file(f record.String) {
	if !f.Stated {
		return
	}
	clean := path.Clean(f.V)
	switch {
	case strings.Contains(f.V, "\\"):
		c.add(diag.Error("R414", f.Span, "the path %s holds a backslash", quoteShort(f.V)).WithHelp("write %q", strings.ReplaceAll(f.V, "\\", "/")))
	case path.IsAbs(f.V) || len(f.V) > 1 && f.V[1] == ':':
		c.add(diag.Error("R414", f.Span, "the path %s does not start from the record's folder", quoteShort(f.V)).
			WithHelp("write it relative to the record, such as %q", path.Base(f.V)))
	case clean == ".." || strings.HasPrefix(clean, "../"):
		c.add(diag.Error("R414", f.Span, "the path %s leaves the record's folder", quoteShort(f.V)).WithHelp("keep the files of a record in its folder"))
	}
}

// digest checks the form of a SHA-256 digest.
func (c *checker) digest(d record.String) {
	if d.Stated && (len(d.V) != 64 || !isHex([]byte(d.V))) {
		c.add(diag.Error("R415", d.Span, "a SHA-256 digest has 64 hexadecimal digits; this is %s", quoteShort(d.V)))
	}
}
