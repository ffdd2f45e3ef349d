package family

import "math"

// all judges every member at its own level; nothing is adjusted.
func (s *state) all() {
	for j, q := range s.own {
		s.adj[j] = q
		s.test(j, s.work, q.below(s.work))
	}
}

// test notes one comparison of member j with a level.
func (s *state) test(j int, level float64, rejected bool) {
	s.level[j], s.tested[j] = level, true
	s.path = append(s.path, Step{Member: j, Level: level, Rejected: rejected})
}

// bonferroni gives every member a fixed share of the level.
func (s *state) bonferroni(weights []float64) {
	m := float64(len(s.own))
	for j, q := range s.own {
		level := s.work / m
		if weights == nil {
			s.adj[j] = q.times(m).capped()
		} else {
			s.adj[j] = q.over(weights[j]).capped()
			level = s.work * weights[j]
		}
		s.test(j, level, s.adj[j].below(s.work))
	}
}

// hochberg steps up from the largest q: the first that is small enough
// establishes itself and all smaller ones (Hochberg 1988, from memory).
func (s *state) hochberg() {
	m := len(s.own)
	order := sortedIndex(s.own)
	t := pvalue{1, 0}
	found := false
	for k := m - 1; k >= 0; k-- {
		j := order[k]
		left := float64(m - k)
		t = smaller(t, s.own[j].times(left).capped())
		s.adj[j] = t
		if !found {
			found = t.below(s.work)
			s.test(j, s.work/left, found)
		}
	}
}

// hommel adjusts by the closed test with Simes' inequality, in Wright's
// algorithm (Hommel 1988, Wright 1992, both from memory).
func (s *state) hommel() {
	m := len(s.own)
	order := sortedIndex(s.own)
	q := make([]pvalue, m)
	for k, j := range order {
		q[k] = s.own[j]
	}
	adj := append([]pvalue(nil), q...)
	for r := m; r >= 2; r-- {
		c := pvalue{math.Inf(1), math.Inf(1)}
		for k := 1; k <= r; k++ {
			c = smaller(c, q[m-r+k-1].times(float64(r)/float64(k)))
		}
		for k := m - r; k < m; k++ {
			adj[k] = larger(adj[k], c)
		}
		for k := range m - r {
			adj[k] = larger(adj[k], smaller(c, q[k].times(float64(r))))
		}
	}
	// The largest number of members that Simes' test cannot refute together
	// divides the level that each member's own p has to beat.
	stubborn := 1
	for r := m; r >= 1; r-- {
		refuted := false
		for k := 1; k <= r; k++ {
			refuted = refuted || q[m-r+k-1].times(float64(r)/float64(k)).below(s.work)
		}
		if !refuted {
			stubborn = r
			break
		}
	}
	for k, j := range order {
		s.adj[j] = adj[k].capped()
		s.test(j, s.work/float64(stubborn), s.adj[j].below(s.work))
	}
}
