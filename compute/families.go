package compute

import (
	"math"
	"slices"

	"steelyard/compute/dist"
	"steelyard/compute/family"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// families turns the deciding p-values of the trials into adjusted ones. A
// claim over several sets has the largest p of its sets, for and against.
func (r *run) families() {
	for _, t := range r.tried {
		t.own()
	}
	plans := r.rec.Plan.Families
	if len(plans) == 0 {
		return
	}
	input := make([]family.Family, len(plans))
	for i, f := range plans {
		input[i] = r.familyOf(f)
	}
	r.plans = input
	results, faults := family.Adjust(input)
	for _, f := range faults {
		r.note(plans[f.Family].At, plans[f.Family].Name, result.Note{Code: "S115", Message: "%s", Args: []any{f.Rule.String()}})
	}
	for i, f := range plans {
		if results[i].Members != nil {
			r.adjusted(f, input[i], results[i])
		} else {
			r.undecided(f)
		}
	}
}

// familyOf turns a family of the plan into numbers. A member that is not
// judged, or has no result yet, enters with p = 1.
func (r *run) familyOf(f *record.Family) family.Family {
	out := family.Family{Procedure: family.Procedure(f.Procedure.V), RequireAny: f.Require.V == "any"}
	members := record.Texts(f.Members)
	for _, name := range members {
		t := r.trial(name)
		alpha := t.question.Alpha
		if !(alpha > 0 && alpha < 1) {
			alpha = 1 - r.level
		}
		out.Members = append(out.Members, family.Member{P: t.p, Against: t.against, Alpha: alpha})
	}
	if f.Order.Stated {
		for _, name := range record.Texts(f.Order) {
			out.Order = append(out.Order, slices.Index(members, name))
		}
	}
	if f.Weights.Stated {
		out.Weights = record.Floats(f.Weights)
	}
	for _, row := range f.Transfer {
		out.Transfer = append(out.Transfer, record.Floats(row))
	}
	for _, name := range record.Texts(f.After) {
		out.After = append(out.After, slices.IndexFunc(r.rec.Plan.Families, func(g *record.Family) bool { return g.Name == name }))
	}
	return out
}

// trial finds a hypothesis on its way; the record has been checked, so it is
// there.
func (r *run) trial(name string) *trial {
	i := slices.IndexFunc(r.tried, func(t *trial) bool { return t.h.Name == name })
	return r.tried[i]
}

// adjusted hands the adjusted p-values to the trials and writes the family.
func (r *run) adjusted(f *record.Family, in family.Family, res family.Result) {
	out := result.Family{Name: f.Name, Procedure: f.Procedure.V, Alpha: res.Alpha, Verdict: result.Open, After: record.Texts(f.After)}
	if res.Established {
		out.Verdict = result.Established
	}
	names := record.Texts(f.Members)
	pending := true
	for i, m := range res.Members {
		t := r.trial(names[i])
		if bad, blocked := t.blocked(); !blocked || bad.problem != nil {
			pending = false
		}
		own := in.Members[i].P
		if f.Procedure.V != "all" || len(f.After.V) > 0 {
			t.adjusted = true
			t.p, t.against = m.P, m.Against
			if m.Tested {
				t.level = m.Level
			}
		}
		one := result.Member{Hypothesis: names[i], P: pOf(own), PAdjusted: pOf(m.P), Rejected: m.Established}
		if m.Tested {
			one.AlphaLocal = result.Some(m.Level)
		}
		out.Members = append(out.Members, one)
	}
	if pending {
		out.Verdict = result.Pending
	}
	for _, s := range res.Path {
		out.Path = append(out.Path, result.PathStep{Hypothesis: names[s.Member], Level: s.Level, P: s.P.P, Rejected: s.Rejected})
	}
	r.res.Families = append(r.res.Families, out)
}

// inFamily adjusts other p-values of a trial as its family adjusted its own:
// all other members stay as they are. Without a family, or in one whose
// members stand alone, nothing changes.
func (r *run) inFamily(t *trial, p, against dist.Tail) (dist.Tail, dist.Tail) {
	f := r.rec.FamilyOf(t.h.Name)
	if !t.adjusted || f == nil {
		return p, against
	}
	k := slices.Index(r.rec.Plan.Families, f)
	i := slices.Index(record.Texts(f.Members), t.h.Name)
	changed := slices.Clone(r.plans)
	changed[k].Members = slices.Clone(changed[k].Members)
	changed[k].Members[i].P, changed[k].Members[i].Against = p, against
	results, _ := family.Adjust(changed)
	if results[k].Members == nil {
		return certain, certain
	}
	m := results[k].Members[i]
	return m.P, m.Against
}

// undecided leaves every member of a family with a fault open.
func (r *run) undecided(f *record.Family) {
	for _, name := range record.Texts(f.Members) {
		t := r.trial(name)
		t.adjusted, t.p, t.against = true, certain, certain
	}
}

func pOf(t dist.Tail) result.P { return result.P{P: t.P, Ln: t.LnP, OK: true} }

// own sets a trial's p-values to its own, before any family.
func (t *trial) own() {
	t.p, t.against = certain, certain
	if _, blocked := t.blocked(); blocked || t.deciding < 0 || !t.bySet[t.deciding].a.Judged {
		return
	}
	first := true
	for _, at := range t.bySet {
		p, against := at.pair()
		if first {
			t.p, t.against, first = p, against, false
		}
		t.p, t.against = larger(t.p, p), larger(t.against, against)
	}
}

// pair are the p-values for and against of one analysis. Of a combination's
// two lines the less favourable counts, so that both must agree.
func (at attempt) pair() (p, against dist.Tail) {
	p, against = at.a.P, at.a.Against
	if !at.a.CanContradict {
		against = certain
	}
	if at.worst != nil {
		p, against = larger(p, at.worst.P), larger(against, at.worst.Against)
	}
	return p, against
}

func larger(a, b dist.Tail) dist.Tail {
	if b.LnP >= a.LnP {
		return b
	}
	return a
}

var certain = dist.Tail{P: 1, LnQ: math.Inf(-1)}
