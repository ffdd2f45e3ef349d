package read

import (
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// familyRules checks the families and how they follow each other.
func (c *checker) familyRules() {
	member := map[string]string{} // hypothesis → family
	for _, f := range c.rec.Plan.Families {
		c.members(f, member)
		c.order(f)
		c.weights(f)
		c.transfer(f)
		c.gate(f)
	}
	c.cycles()
}

func (c *checker) members(f *record.Family, member map[string]string) {
	c.twice(f.Members)
	for _, s := range distinct(f.Members) {
		h := known(c, s, "hypothesis", c.hypotheses)
		if h == nil {
			continue
		}
		if other := member[s.V]; other != "" {
			c.add(diag.Error("R324", s.Span, "%q is already a member of the family %q", s.V, other).
				WithHelp("a hypothesis belongs to one family; families follow each other by `after`"))
			continue
		}
		member[s.V] = f.Name
		if h.Role.Stated && h.Role.V == "exploratory" {
			c.add(diag.Error("R325", s.Span, "%q is exploratory and is never adjusted", s.V).WithHelp("leave it out of the family"))
		}
		if claim := record.ClaimOf(h.Claim.V); h.Claim.Stated && claim != nil && !claim.Judged {
			c.add(diag.Error("R325", s.Span, "%q is only described and has nothing to adjust", s.V).WithHelp("leave it out of the family"))
		}
	}
}

// uses says which extra keys a procedure reads.
func uses(procedure, key string) bool {
	switch procedure {
	case "bonferroni", "holm":
		return key == "weights"
	case "fixed-sequence":
		return key == "order"
	case "fallback":
		return key == "order" || key == "weights"
	case "graph":
		return key == "weights" || key == "transfer"
	}
	return false
}

// order must name every member once.
func (c *checker) order(f *record.Family) {
	if !f.Order.Stated || !f.Procedure.Stated {
		return
	}
	if !uses(f.Procedure.V, "order") {
		c.misplaced(f.Order.Span, "order", "does not apply to the procedure "+f.Procedure.V)
		return
	}
	c.twice(f.Order)
	var missing []string
	ordered, members := setOf(f.Order), setOf(f.Members)
	help := "members: " + words(record.Texts(f.Members))
	for _, s := range distinct(f.Members) {
		if !ordered[s.V] {
			missing = append(missing, s.V)
		}
	}
	for _, s := range distinct(f.Order) {
		if !members[s.V] {
			c.add(diag.Error("R320", s.Span, "%s is no member of this family", quoteShort(s.V)).WithHelp("%s", help))
		}
	}
	if len(missing) > 0 {
		c.add(diag.Error("R320", f.Order.Span, "`order` leaves out %s", words(missing)).WithHelp("name every member once"))
	}
}

func setOf(list record.Strings) map[string]bool {
	m := make(map[string]bool, len(list.V))
	for _, s := range list.V {
		m[s.V] = true
	}
	return m
}

func (c *checker) weights(f *record.Family) {
	if !f.Procedure.Stated {
		return
	}
	if !f.Weights.Stated {
		if absent(f.Weights) && (f.Procedure.V == "fallback" || f.Procedure.V == "graph") {
			c.add(diag.Error("S115", f.At, "the procedure %q needs `weights`", f.Procedure.V).
				WithHelp("write each member's share of the level, in the order of `members`, together 1"))
		}
		return
	}
	if !uses(f.Procedure.V, "weights") {
		c.misplaced(f.Weights.Span, "weights", "does not apply to the procedure "+f.Procedure.V)
		return
	}
	if f.Members.Stated && len(f.Weights.V) != len(f.Members.V) {
		c.add(diag.Error("S115", f.Weights.Span, "%d weights stand for %s", len(f.Weights.V), count(len(f.Members.V), "member")).
			WithHelp("write one for each member, in their order"))
	}
	sum, all := total(f.Weights)
	if all && sum > 1+1e-9 {
		c.add(diag.Error("S115", f.Weights.Span, "the weights sum to %s; together they are at most 1", num(sum)))
	}
	if all && sum == 0 {
		c.add(diag.Error("S115", f.Weights.Span, "the weights are all 0, and no member could be tested"))
	}
}

// total sums numbers; all is false when one was at fault.
func total(v record.Numbers) (sum float64, all bool) {
	all = true
	for _, n := range v.V {
		sum += n.V
		all = all && n.Stated
	}
	return sum, all
}

func (c *checker) transfer(f *record.Family) {
	if !f.Procedure.Stated {
		return
	}
	if len(f.Transfer) == 0 {
		if f.Procedure.V == "graph" && !c.written(f, "transfer") {
			c.add(diag.Error("S115", f.At, "the procedure \"graph\" needs `transfer`").
				WithHelp("write one row for each member: the shares of its level that go to each member once it is established"))
		}
		return
	}
	if !uses(f.Procedure.V, "transfer") {
		c.misplaced(f.Transfer[0].Span, "transfer", "does not apply to the procedure "+f.Procedure.V)
		return
	}
	n := len(f.Members.V)
	if f.Members.Stated && len(f.Transfer) != n {
		c.add(diag.Error("S115", f.Transfer[0].Span, "`transfer` has %s for %s", count(len(f.Transfer), "row"), count(n, "member")))
	}
	for i, row := range f.Transfer {
		if !row.Stated {
			continue
		}
		if f.Members.Stated && len(row.V) != n {
			c.add(diag.Error("S115", row.Span, "this row has %s for %s", count(len(row.V), "share"), count(n, "member")))
			continue
		}
		if i < len(row.V) && row.V[i].Stated && row.V[i].V != 0 {
			c.add(diag.Error("S115", row.V[i].Span, "a member gives nothing to itself: this share must be 0, not %s", num(row.V[i].V)))
		}
		if sum, all := total(row); all && sum > 1+1e-9 {
			c.add(diag.Error("S115", row.Span, "the shares of this row sum to %s; together they are at most 1", num(sum)))
		}
	}
}

// written reports whether a key of a family stands in the file.
func (c *checker) written(f *record.Family, key string) bool {
	return c.rec.Tree.Get("plan").Get("family").Get(f.Name).Get(key) != nil
}

func (c *checker) gate(f *record.Family) {
	c.twice(f.After)
	if f.Require.Stated && absent(f.After) {
		c.misplaced(f.Require.Span, "require", "needs families named in `after`")
		return
	}
	var before []*record.Family
	for _, s := range distinct(f.After) {
		if s.V == f.Name {
			c.add(diag.Error("S115", s.Span, "a family cannot be tested after itself"))
			continue
		}
		if g := known(c, s, "family", c.families); g != nil {
			before = append(before, g)
		}
	}
	if f.Require.Stated && f.Require.V == "any" {
		if len(f.After.V) != 1 || len(before) == 1 && before[0].Procedure.Stated && before[0].Procedure.V != "bonferroni" {
			c.add(diag.Error("S115", f.Require.Span, "require = \"any\" opens a family only behind one single family with the procedure bonferroni").
				WithHelp("elsewhere the error would exceed the level; use require = \"all\""))
		}
	}
}

// cycles finds families that wait for each other.
func (c *checker) cycles() {
	state := map[string]int{} // 1 on the path, 2 done
	var visit func(f *record.Family, path []string)
	visit = func(f *record.Family, path []string) {
		state[f.Name] = 1
		for _, s := range distinct(f.After) {
			g := c.families[s.V]
			if g == nil || g == f {
				continue
			}
			switch state[g.Name] {
			case 0:
				visit(g, append(path, f.Name))
			case 1:
				c.add(diag.Error("S115", s.Span, "families wait for each other in a circle: %s", strings.Join(append(path, f.Name, g.Name), " after ")))
			}
		}
		state[f.Name] = 2
	}
	for _, f := range c.rec.Plan.Families {
		if state[f.Name] == 0 {
			visit(f, nil)
		}
	}
}

// dataRules checks the filters of sets and exclusions.
func (c *checker) dataRules() {
	for _, s := range c.rec.Plan.Sets {
		for _, f := range s.Keep {
			c.filter(f)
		}
	}
	for _, f := range c.rec.Plan.Data.Exclude {
		c.filter(f)
	}
}

// filter demands exactly one condition.
func (c *checker) filter(f *record.Filter) {
	if c.refused[f.At] {
		return
	}
	written := 0
	for _, absent := range []bool{absent(f.Above), absent(f.AtLeast), absent(f.Below), absent(f.AtMost),
		f.Equals.Span.IsZero(), absent(f.OneOf), absent(f.Missing)} {
		if !absent {
			written++
		}
	}
	const help = "above, at_least, below, at_most, equals, one_of or missing"
	switch {
	case written == 0:
		c.add(diag.Error("R331", f.At, "this filter has no condition").WithHelp("add one of %s", help))
	case written > 1:
		c.add(diag.Error("R331", f.At, "this filter has %d conditions, and each filter has one", written).
			WithHelp("write a filter for each: a row must pass them all to be kept"))
	}
}

// looks checks [plan.looks].
func (c *checker) looks() {
	l := c.rec.Plan.Looks
	if l == nil {
		return
	}
	c.twice(l.Hypotheses)
	for _, s := range distinct(l.Hypotheses) {
		known(c, s, "hypothesis", c.hypotheses)
	}
	anytime := l.Anytime.Stated && l.Anytime.V
	if absent(l.Total) {
		c.add(diag.Error("R332", l.At, "looks need the total information: `total` is missing").
			WithHelp("write total = …, in what `information` counts"))
	}
	if anytime {
		for _, k := range []struct {
			at  diag.Span
			key string
		}{{l.Spending.Span, "spending"}, {l.Parameter.Span, "parameter"}} {
			if !k.at.IsZero() {
				c.misplaced(k.at, k.key, "does not apply with anytime = true")
			}
		}
		if l.Futility != nil {
			c.misplaced(l.Futility.At, "futility", "does not apply with anytime = true")
		}
		return
	}
	if absent(l.Fractions) {
		c.add(diag.Error("R332", l.At, "planned looks need `fractions`").WithHelp("write fractions = [0.5, 1], or anytime = true"))
	}
	if absent(l.Spending) {
		c.add(diag.Error("R332", l.At, "planned looks need `spending`").WithHelp("obrien-fleming, pocock, power, gamma or none"))
	}
	c.fractions(l)
	c.parameter(l.Spending, l.Parameter, l.At)
	if l.Futility != nil {
		c.parameter(l.Futility.Spending, l.Futility.Parameter, l.Futility.At)
	}
}

func (c *checker) fractions(l *record.Looks) {
	last := 0.0
	for _, f := range l.Fractions.V {
		if !f.Stated {
			return
		}
		if f.V <= last {
			c.add(diag.Error("R333", f.Span, "fractions rise from look to look: %s does not lie above %s", num(f.V), num(last)))
			return
		}
		last = f.V
	}
	if l.Fractions.Stated && last != 1 {
		c.add(diag.Error("R333", l.Fractions.Span, "the last look is at the whole information, 1, not at %s", num(last)))
	}
}

// parameter checks the parameter of a spending function.
func (c *checker) parameter(spending record.String, p record.Number, at diag.Span) {
	if !spending.Stated {
		return
	}
	needs := spending.V == "power" || spending.V == "gamma"
	switch {
	case needs && absent(p):
		c.add(diag.Error("R332", at, "the spending %q needs `parameter`", spending.V))
	case !needs && p.Stated:
		c.misplaced(p.Span, "parameter", "does not apply to the spending "+spending.V)
	case spending.V == "power" && p.Stated && p.V <= 0:
		c.add(diag.Error("R204", p.Span, "the parameter of power spending must be above 0, not %s", num(p.V)))
	}
}
