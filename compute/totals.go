package compute

import (
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// totals counts, for every outcome of a primary hypothesis and group, the
// subjects of its analysed entries in the analysis set that decides its first
// primary hypothesis. A number that some entry does not give does not apply to
// the whole.
func (r *run) totals() {
	for _, o := range r.rec.Plan.Outcomes {
		set, ok := r.primary(o)
		if !ok {
			continue
		}
		var list []result.GroupTotal
		counted := map[string]int{}
		for _, s := range r.res.Studies {
			if s.Outcome != o.Name || s.Set != set || s.Use != result.Analysed || s.BareP != nil {
				continue
			}
			for _, g := range s.Groups {
				i, ok := counted[g.Name]
				if !ok {
					i = len(list)
					counted[g.Name] = i
					list = append(list, firstTotal(o.Name, g, s))
					continue
				}
				add(&list[i], firstTotal(o.Name, g, s))
			}
		}
		r.res.Totals = append(r.res.Totals, list...)
	}
}

// primary finds the analysis set that decides the first primary hypothesis of
// an outcome; ok is false without one.
func (r *run) primary(o *record.Outcome) (set string, ok bool) {
	for _, t := range r.tried {
		if t.h.Outcome.V != o.Name || t.out.Role != "primary" {
			continue
		}
		switch {
		case t.deciding >= 0:
			return t.bySet[t.deciding].set, true
		case len(t.bySet) > 0:
			return t.bySet[0].set, true
		}
		return r.sets()[0], true
	}
	return "", false
}

// firstTotal is the count of one group of one entry. Missing are those
// randomised that are neither analysed nor excluded by the plan; of a data file
// at least its rows without a value.
func firstTotal(outcome string, g result.GroupNumbers, s result.Study) result.GroupTotal {
	t := result.GroupTotal{Outcome: outcome, Group: g.Name, Set: s.Set, Randomised: g.Randomised, Analysed: g.Analysed}
	switch {
	case s.Form == "data":
		t.Analysed, t.Missing = g.N, result.Some(float64(g.Missing))
		if g.Excluded > 0 {
			t.Excluded = result.Some(float64(g.Excluded))
		}
		if lost := g.Randomised.V - g.N.V - float64(g.Excluded); g.Randomised.OK && lost > t.Missing.V {
			t.Missing = result.Some(lost) // some have no row at all
		}
	case !t.Analysed.OK:
		t.Analysed = g.N
		fallthrough
	default:
		if g.Randomised.OK && t.Analysed.OK && g.Randomised.V >= t.Analysed.V {
			t.Missing = result.Some(g.Randomised.V - t.Analysed.V)
		}
	}
	return t
}

func add(t *result.GroupTotal, more result.GroupTotal) {
	for _, c := range []struct{ sum, more *result.Opt }{{&t.Randomised, &more.Randomised}, {&t.Analysed, &more.Analysed}, {&t.Missing, &more.Missing}, {&t.Excluded, &more.Excluded}} {
		c.sum.V += c.more.V
		c.sum.OK = c.sum.OK && c.more.OK
		if !c.sum.OK {
			c.sum.V = 0
		}
	}
}
