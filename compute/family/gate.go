package family

import (
	"math"
	"sort"
)

// serialGate lets a member pass only at a level at which every member of
// every family before passes too.
func (s *state) serialGate(f Family, states []state) {
	gate := pvalue{ln: math.Inf(-1)}
	for _, i := range f.After {
		for _, q := range states[i].adj {
			gate = larger(gate, q.over(states[i].alpha))
		}
	}
	s.open = gate.below(1)
	for j := range s.adj {
		s.adj[j] = larger(s.adj[j], gate.times(s.alpha)).capped()
	}
	if !s.open {
		s.closeUntested()
	}
}

// gain is a member of the family before: the level, in units of that family's
// own, from which it is established, and the share of the level it then hands
// on.
type gain struct {
	at pvalue
	w  float64
}

// gainsOf lists the gains of a bonferroni family, the easiest first.
func gainsOf(before Family, b state) []gain {
	var gains []gain
	for j, q := range b.adj {
		w := 1 / float64(len(b.adj))
		if before.Weights != nil {
			w = before.Weights[j]
		}
		if q.p < 1 && w > 0 {
			gains = append(gains, gain{q.over(b.alpha), w})
		}
	}
	sort.SliceStable(gains, func(i, j int) bool { return gains[i].at.less(gains[j].at) })
	return gains
}

// openShare is the share of the level handed on by what is established.
func openShare(gains []gain) float64 {
	share := 0.0
	for _, g := range gains {
		if g.at.below(1) {
			share += g.w
		}
	}
	return min(share, 1)
}

// parallelGate runs the family at its level times the share of the level that
// the established members of the one bonferroni family before had. A member's
// adjusted value is the smallest level at which it would be established: the
// share W rises in steps, each time the family before gains a member, so it is
// the least over k of max(the k-th value before, q̃/W after k of them)
// (Dmitrienko, Offen and Westfall 2003, from memory).
func (s *state) parallelGate(gains []gain) {
	s.open = s.work > 0
	for j, q := range s.adj {
		best := pvalue{1, 0}
		sum := 0.0
		for _, g := range gains {
			sum += g.w
			best = smaller(best, larger(g.at.times(s.alpha), q.over(min(sum, 1))))
		}
		s.adj[j] = best.capped()
	}
	if !s.open {
		s.closeUntested()
	}
}

// closeUntested takes the levels back: nothing is tested behind a gate that
// stayed shut.
func (s *state) closeUntested() {
	s.path = nil
	clear(s.tested)
}
