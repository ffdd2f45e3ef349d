package compute

import (
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// totals counts, for every outcome of a primary hypothesis and group, the
// subjects of its analysed entries in the first analysis set. A number that
// some entry does not give does not apply to the whole.
func (r *run) totals() {
	set := r.sets()[0]
	for _, o := range r.rec.Plan.Outcomes {
		if !r.primary(o) {
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

func (r *run) primary(o *record.Outcome) bool {
	for _, h := range r.rec.Plan.Hypotheses {
		if h.Outcome.V == o.Name && (h.Role.V == "primary" || h.Role.V == "") {
			return true
		}
	}
	return false
}

// firstTotal is the count of one group of one entry. Missing are those
// randomised and not analysed, for whatever reason, so that the three numbers
// add up; or else the rows of a data file that lack a value.
func firstTotal(outcome string, g result.GroupNumbers, s result.Study) result.GroupTotal {
	t := result.GroupTotal{Outcome: outcome, Group: g.Name, Randomised: g.Randomised, Analysed: g.Analysed}
	if !t.Analysed.OK {
		t.Analysed = g.N
	}
	switch {
	case g.Randomised.OK && t.Analysed.OK && g.Randomised.V >= t.Analysed.V:
		t.Missing = result.Some(g.Randomised.V - t.Analysed.V)
	case s.Form == "data":
		t.Missing = result.Some(float64(g.Missing))
	}
	return t
}

func add(t *result.GroupTotal, more result.GroupTotal) {
	for _, c := range []struct{ sum, more *result.Opt }{{&t.Randomised, &more.Randomised}, {&t.Analysed, &more.Analysed}, {&t.Missing, &more.Missing}} {
		c.sum.V += c.more.V
		c.sum.OK = c.sum.OK && c.more.OK
		if !c.sum.OK {
			c.sum.V = 0
		}
	}
}
