package family

import "math"

// network is a graph of weights and transfers that shrinks as members are
// established.
type network struct {
	w []float64
	g [][]float64
}

// graphOf writes holm, fixed-sequence, fallback and graph as graphs.
func graphOf(f Family) network {
	m := len(f.Members)
	n := network{w: make([]float64, m), g: make([][]float64, m)}
	for i := range n.g {
		n.g[i] = make([]float64, m)
	}
	order := f.Order
	if order == nil {
		for i := range m {
			order = append(order, i)
		}
	}
	switch f.Procedure {
	case Holm:
		copyWeights(n.w, f.Weights)
		for i := range m {
			for j := range m {
				if i != j {
					n.g[i][j] = shareOf(n.w, i, j)
				}
			}
		}
	case FixedSequence:
		n.w[order[0]] = 1
		n.chain(order)
	case Fallback:
		copyWeights(n.w, f.Weights)
		n.chain(order)
	case Graph:
		copyWeights(n.w, f.Weights)
		for i := range m {
			copy(n.g[i], f.Transfer[i])
		}
	case All, Bonferroni, Hochberg, Hommel:
		panic("family: not a graph")
	}
	return n
}

// shareOf is w_j over the sum of the weights other than w_i: Holm's rule, also
// when the weights add to less than 1.
func shareOf(w []float64, i, j int) float64 {
	rest := 0.0
	for k, v := range w {
		if k != i {
			rest += v
		}
	}
	if rest <= 0 {
		return 0
	}
	return w[j] / rest
}

func copyWeights(dst, src []float64) {
	if src != nil {
		copy(dst, src)
		return
	}
	for i := range dst {
		dst[i] = 1 / float64(len(dst))
	}
}

func (n network) chain(order []int) {
	for k := 1; k < len(order); k++ {
		n.g[order[k-1]][order[k]] = 1
	}
}

// drop removes member j and hands its weight on (Bretz, Maurer, Brannath and
// Posch 2009, from memory).
func (n network) drop(j int, left []bool) {
	m := len(n.w)
	left[j] = false
	for l := range m {
		if left[l] {
			n.w[l] += n.w[j] * n.g[j][l]
		}
	}
	next := make([]float64, m)
	for l := range m {
		if !left[l] {
			continue
		}
		for k := range m {
			next[k] = 0
			if !left[k] || k == l {
				continue
			}
			if loop := n.g[l][j] * n.g[j][l]; loop < 1 {
				next[k] = (n.g[l][k] + n.g[l][j]*n.g[j][k]) / (1 - loop)
			}
		}
		copy(n.g[l], next)
	}
	n.w[j] = 0
}

// graph runs the sequentially rejective procedure to its end, so that every
// member has an adjusted value; the path stops at the first step that fails,
// where all members still waiting are compared with what they then hold.
func (s *state) graph(n network) {
	m := len(s.own)
	left := make([]bool, m)
	for j := range left {
		left[j] = true
	}
	t := pvalue{ln: math.Inf(-1)}
	failed := false
	for range m {
		j := -1
		best := pvalue{}
		for l := range m {
			if !left[l] || n.w[l] <= 0 {
				continue
			}
			if r := s.own[l].over(n.w[l]); j < 0 || r.less(best) {
				j, best = l, r
			}
		}
		if j < 0 {
			break
		}
		t = larger(t, best.capped())
		s.adj[j] = t
		if !failed {
			failed = !t.below(s.work)
			if failed {
				s.testRest(n, left)
			} else {
				s.test(j, n.w[j]*s.work, true)
			}
		}
		n.drop(j, left)
	}
	for j := range m {
		if left[j] { // no weight ever reaches it
			s.adj[j] = pvalue{1, 0}
		}
	}
}

func (s *state) testRest(n network, left []bool) {
	for j := range s.own {
		if left[j] && n.w[j] > 0 {
			s.test(j, n.w[j]*s.work, false)
		}
	}
}
