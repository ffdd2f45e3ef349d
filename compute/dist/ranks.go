package dist

import "math"

// RankSum is the exact null distribution of the Mann–Whitney U of m and n
// values without ties: P(U <= u) for u = 0..mn as a table of cumulative
// probabilities and, from the other end, upper tails. Build it with
// NewRankSum.
type RankSum struct {
	M, N int
	half halfTable
}

// NewRankSum builds the table, m, n >= 0, by building the Gaussian binomial
// coefficients one factor (1−q^{n+i})/(1−q^i) at a time on the rising half
// only, where every step adds positive numbers: about m²n/4 operations for
// m <= n. Memory mn/2 numbers.
func NewRankSum(m, n int) *RankSum {
	if m < 0 || n < 0 {
		panic("dist: group sizes must not be negative")
	}
	return &RankSum{M: m, N: n, half: newHalfTable(gaussian(min(m, n), max(m, n)), m*n)}
}

// gaussian returns P(U = u) for u = 0 … mn/2.
func gaussian(m, n int) []float64 {
	f := make([]float64, m*n/2+1)
	old := make([]float64, m*n/2+1)
	f[0] = 1
	for i := 1; i <= m; i++ {
		f, old = old, f
		span, last := i*n, (i-1)*n // largest U before and after
		// The former table is symmetric: reach past its middle.
		for u := last/2 + 1; u <= span/2; u++ {
			if u <= last {
				old[u] = old[last-u]
			} else {
				old[u] = 0
			}
		}
		c := float64(i) / float64(n+i)
		for u := 0; u <= span/2; u++ {
			f[u] = old[u] * c
		}
		for u := n + i; u <= span/2; u++ {
			f[u] = (old[u] - old[u-n-i]) * c
		}
		for u := i; u <= span/2; u++ {
			f[u] += f[u-i]
		}
	}
	return f
}

// Upper is P(U >= u); u is rounded up.
func (r *RankSum) Upper(u float64) Tail {
	needNumber(u)
	return r.half.lower(float64(r.half.top) - math.Ceil(u))
}

// Lower is P(U <= u); u is rounded down.
func (r *RankSum) Lower(u float64) Tail {
	needNumber(u)
	return r.half.lower(math.Floor(u))
}

// halfTable holds cumulative probabilities of a symmetric distribution on
// 0 … top, for the lower half only.
type halfTable struct {
	cum []float64
	top int
}

// newHalfTable turns point probabilities for 0 … top/2 into cumulative ones.
func newHalfTable(p []float64, top int) halfTable {
	s := 0.0
	for i, v := range p {
		s += v
		p[i] = s
	}
	return halfTable{cum: p, top: top}
}

func (h *halfTable) lower(u float64) Tail {
	switch {
	case u < 0:
		return impossible
	case u >= float64(h.top):
		return sure
	}
	k := int(u)
	if 2*k <= h.top-1 { // P(U <= u) is the smaller side
		return tailSmall(h.cum[k])
	}
	return tailSmall(h.cum[h.top-k-1]).Complement()
}

func tailSmall(p float64) Tail {
	p = min(p, 1)
	return Tail{P: p, Q: 1 - p, LnP: math.Log(p), LnQ: math.Log1p(-p)}
}

// RankSumTies is the exact conditional distribution of the rank sum of the
// first group over doubled midranks (integers >= 0), m of them in the first
// group: P(S >= s), P(S <= s). Build it with NewRankSumTies.
type RankSumTies struct{ scoreTable }

// NewRankSumTies builds the distribution of the sum of m of the scores drawn
// without replacement, by dynamic programming over the scores (Streitberg and
// Röhmel 1986, from memory): about m·N·(largest sum) operations. It panics
// when m is not in 0..N or a score is negative.
func NewRankSumTies(doubledMidranks []int, m int) *RankSumTies {
	n := len(doubledMidranks)
	if m < 0 || m > n {
		panic("dist: group size outside the number of ranks")
	}
	total := 0
	for _, r := range doubledMidranks {
		if r < 0 {
			panic("dist: ranks must not be negative")
		}
		total += r
	}
	k := min(m, n-m)
	p := drawSums(doubledMidranks, k)
	if k != m { // the first group's sum is the total less the other's
		q := make([]float64, total+1)
		for s, v := range p {
			q[total-s] = v
		}
		p = q
	}
	return &RankSumTies{newScoreTable(p)}
}

// drawSums returns P(sum = s) of k of the scores. After i scores, row j is the
// distribution of the sum of j of those i: all terms positive, none large.
func drawSums(scores []int, k int) []float64 {
	rows := make([][]float64, k+1)
	rows[0] = []float64{1}
	for i, r := range scores {
		n := float64(i + 1)
		for j := min(k, i+1); j >= 1; j-- {
			in := float64(j) / n
			out := (n - float64(j)) / n
			prev, row := rows[j-1], rows[j]
			if need := len(prev) + r; len(row) < need {
				row = append(row, make([]float64, need-len(row))...)
			}
			for s := range row {
				row[s] *= out
			}
			for s, v := range prev {
				row[s+r] += in * v
			}
			rows[j] = row
		}
	}
	return rows[k]
}

// scoreTable holds the cumulative probabilities from both ends.
type scoreTable struct{ lower, upper []float64 }

func newScoreTable(p []float64) scoreTable {
	n := len(p)
	t := scoreTable{lower: make([]float64, n), upper: make([]float64, n)}
	s := 0.0
	for i := range n {
		s += p[i]
		t.lower[i] = s
	}
	s = 0
	for i := n - 1; i >= 0; i-- {
		s += p[i]
		t.upper[i] = s
	}
	return t
}

// Upper is P(S >= s).
func (t *scoreTable) Upper(s int) Tail {
	switch {
	case s <= 0:
		return sure
	case s >= len(t.upper):
		return impossible
	}
	return tailOfPair(t.upper[s], t.lower[s-1])
}

// Lower is P(S <= s).
func (t *scoreTable) Lower(s int) Tail { return t.Upper(s + 1).Complement() }

// tailOfPair is the Tail of two sums that add to 1 up to rounding.
func tailOfPair(p, q float64) Tail {
	p, q = min(p, 1), min(q, 1)
	if p < q {
		return Tail{P: p, Q: q, LnP: math.Log(p), LnQ: math.Log1p(-p)}
	}
	return Tail{P: p, Q: q, LnP: math.Log1p(-q), LnQ: math.Log(q)}
}

// SignedRank is the exact null distribution of the signed-rank sum V of n
// differences without ties or zeros. Build it with NewSignedRank.
type SignedRank struct {
	N    int
	half halfTable
}

// NewSignedRank builds the table for n >= 0 by the recursion over ranks
// 1 … n, each in the sum or not with probability ½; about n³/6 operations.
func NewSignedRank(n int) *SignedRank {
	if n < 0 {
		panic("dist: number of differences must not be negative")
	}
	top := n * (n + 1) / 2
	f := make([]float64, top/2+1)
	f[0] = 1
	reach := 0
	for i := 1; i <= n; i++ {
		reach = min(reach+i, top/2)
		for v := reach; v >= i; v-- {
			f[v] = 0.5 * (f[v] + f[v-i])
		}
		for v := min(i-1, reach); v >= 0; v-- {
			f[v] *= 0.5
		}
	}
	return &SignedRank{N: n, half: newHalfTable(f, top)}
}

// Upper is P(V >= v); v is rounded up.
func (r *SignedRank) Upper(v float64) Tail {
	needNumber(v)
	return r.half.lower(float64(r.half.top) - math.Ceil(v))
}

// Lower is P(V <= v); v is rounded down.
func (r *SignedRank) Lower(v float64) Tail {
	needNumber(v)
	return r.half.lower(math.Floor(v))
}
