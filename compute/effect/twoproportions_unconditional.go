package effect

import (
	"math"
	"math/bits"
	"sort"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

// unconditionalLimit is the largest n1·n2 of the unconditional methods.
const unconditionalLimit = 4e6

// gridPoints is the number of values of the nuisance parameter looked at
// before the best of them is refined.
const gridPoints = 1001

// unconditional is the exact test over all tables with these group sizes: the
// tables are ordered by a statistic at the null c, and the p-value is the
// largest probability, over the risk that c leaves open, of a table at least
// as extreme as the observed one. Risk difference and ratio order by the
// score (Chan and Zhang 1999), the odds ratio by Fisher's one-sided p at c
// (Boschloo 1970; both from memory).
type unconditional struct {
	kind contrast
	up   *staircase // towards a larger effect
	down *staircase // the same with the groups exchanged
}

// Test implements Method. It allocates.
func (m unconditional) Test(c float64) Test {
	if t, none := noAnswer(c); none {
		return t
	}
	return Test{Up: m.up.supremum(c), Down: m.down.supremum(m.mirror(c)), Value: m.up.t.x1, Kind: "exact"}
}

// mirror is the null that says the same with the groups exchanged.
func (m unconditional) mirror(c float64) float64 {
	if m.kind == riskDifference {
		return -c
	}
	return 1 / c
}

// Limits implements Method. The search need not tell probabilities below
// 1e-250 from each other.
func (m unconditional) Limits(a float64) (low, high float64) {
	up := func(c float64) Test { return Test{Up: m.up.bounded(c)} }
	down := func(c float64) Test { return Test{Down: m.down.bounded(m.mirror(c))} }
	return m.kind.invertTable(m.up.t, up, false).side(a, -1), m.kind.invertTable(m.up.t, down, false).side(a, +1)
}

// staircase is one side of the test: for each number of events in the first
// group, the tables at least as extreme form an initial run of the second
// group's events.
type staircase struct {
	kind   contrast
	t      table
	n1, n2 int
	// rise[k] is (n-k)/(k+1), by which neighbouring binomial probabilities
	// differ at even odds.
	rise1, rise2 []float64
}

func newStaircase(k contrast, t table) *staircase {
	return &staircase{kind: k, t: t, n1: int(t.n1), n2: int(t.n2), rise1: rises(int(t.n1)), rise2: rises(int(t.n2))}
}

func rises(n int) []float64 {
	r := make([]float64, n)
	for k := range r {
		r[k] = float64(n-k) / float64(k+1)
	}
	return r
}

// extreme is the statistic by which tables are ordered, larger for a larger
// effect.
func (s *staircase) extreme(x1, x2, c float64) float64 {
	t := table{x1, s.t.n1, x2, s.t.n2}
	if s.kind == oddsRatio {
		return -conditionalUpper(t, x1, c).LnP
	}
	return s.kind.score(t, c, 1)
}

// Staircase finds the boundary of a region of tables: last[x1] is the largest
// x2 with in(x1, x2), -1 for none. The region must contain, with a table,
// those with more events in the first group or fewer in the second, which
// Barnard (1947, from memory) demanded and the score and conditional orders
// satisfy. It walks along the boundary, asking for n1 + n2 + 1 tables at most,
// or bisects along the longer group where that takes fewer.
func Staircase(n1, n2 int, in func(x1, x2 float64) bool) (last []int) {
	last = make([]int, n1+1)
	switch walk := n1 + n2; {
	case (n1+1)*bits.Len(uint(n2+1)) < walk:
		b := -1
		for x1 := range last {
			// the first x2 beyond b that is not in the region
			b += sort.Search(n2-b, func(k int) bool { return !in(float64(x1), float64(b+1+k)) })
			last[x1] = b
		}
	case (n2+1)*bits.Len(uint(n1+1)) < walk:
		x1 := 0
		for x2 := range n2 + 1 {
			from := x1
			x1 += sort.Search(n1+1-from, func(k int) bool { return in(float64(from+k), float64(x2)) })
			for i := from; i < x1; i++ {
				last[i] = x2 - 1
			}
		}
		for i := x1; i <= n1; i++ {
			last[i] = n2
		}
	default:
		b := -1
		for x1 := range last {
			for b < n2 && in(float64(x1), float64(b+1)) {
				b++
			}
			last[x1] = b
		}
	}
	return last
}

// supremum is the p-value of the observed table against effects of at most c.
func (s *staircase) supremum(c float64) dist.Tail {
	if outside, t := s.outside(c); outside {
		return t
	}
	g := s.region(c)
	p, at := g.largest(c)
	if p < 1e-250 { // below the range of plain numbers: all in logarithms
		_, at = g.refine(g.logarithmic, c, -1)
	}
	return g.tail(s.risks(c, at))
}

// bounded is supremum with everything below 1e-250 counted as that.
func (s *staircase) bounded(c float64) dist.Tail {
	if outside, t := s.outside(c); outside {
		return t
	}
	p, _ := s.region(c).largest(c)
	p = math.Min(1, math.Max(p, 1e-250))
	return dist.Tail{P: p, Q: 1 - p, LnP: math.Log(p), LnQ: math.Log1p(-p)}
}

// outside answers nulls outside the range of the effect.
func (s *staircase) outside(c float64) (bool, dist.Tail) {
	low, high := s.kind.low(), s.kind.high()
	switch {
	case c < low:
		return true, sureTail.Complement()
	case c > high:
		return true, sureTail
	}
	return false, dist.Tail{}
}

// region finds the tables at least as extreme as the observed one at c. Equal
// statistics count as equal although rounded differently.
func (s *staircase) region(c float64) *region {
	observed := s.extreme(s.t.x1, s.t.x2, c)
	tie := observed
	switch {
	case math.IsInf(observed, 0):
	case s.kind == oddsRatio:
		tie -= 1e-10 // a logarithm: relative to p
	default:
		tie -= 1e-10 * math.Max(1, math.Abs(observed))
	}
	return &region{s: s, f1: make([]float64, s.n1+1), f2: make([]float64, s.n2+1),
		last: Staircase(s.n1, s.n2, func(x1, x2 float64) bool { return s.extreme(x1, x2, c) >= tie })}
}

// largest finds the point of the grid, or beside its best one, where the
// region is most probable.
func (g *region) largest(c float64) (p, u float64) {
	// Single probabilities that cannot matter beside the best sum so far are
	// left out; so the search starts where it expects the best.
	most := 0.0
	value := func(r risks) float64 { return g.plain(r, math.Max(smallest, 1e-25*most)) }
	start := gridPosition(g.s.t.x2 / g.s.t.n2)
	most = value(g.s.risks(c, start))
	return g.refine(func(r risks) float64 {
		p := value(r)
		most = math.Max(most, p)
		return p
	}, c, start)
}

// refine looks at the whole grid, then between the neighbours of its best
// point, and keeps the start where nothing is better.
func (g *region) refine(value func(risks) float64, c, start float64) (most, at float64) {
	most = math.Inf(-1)
	best := 0
	for i := range gridPoints {
		if p := value(g.s.risks(c, float64(i))); p > most {
			most, best = p, i
		}
	}
	lo, hi := math.Max(0, float64(best-1)), math.Min(gridPoints-1, float64(best+1))
	at = float64(best)
	u := numeric.Golden(func(u float64) float64 { return -value(g.s.risks(c, u)) }, lo, hi, 1e-7)
	if p := value(g.s.risks(c, u)); p > most {
		most, at = p, u
	}
	if start >= 0 {
		if p := value(g.s.risks(c, start)); p > most {
			most, at = p, start
		}
	}
	return most, at
}

// gridValue spreads the grid evenly in the angle asin √p, so that it is fine
// where rare events need it.
func gridValue(u float64) (t, rest float64) {
	sin, cos := math.Sincos(u * math.Pi / 2 / (gridPoints - 1))
	if u >= gridPoints-1 {
		cos = 0
	}
	return sin * sin, cos * cos
}

// gridPosition is the inverse of gridValue.
func gridPosition(t float64) float64 {
	return math.Asin(math.Sqrt(t)) * (gridPoints - 1) * 2 / math.Pi
}

// risks are two risks and their complements.
type risks struct{ p1, q1, p2, q2 float64 }

// risks runs through all pairs of risks whose effect is c, as u runs through
// the grid.
func (s *staircase) risks(c, u float64) risks {
	t, rest := gridValue(u)
	switch s.kind {
	case riskDifference:
		if c >= 0 {
			p2, q1 := t*(1-c), rest*(1-c)
			return risks{p2 + c, q1, p2, q1 + c}
		}
		p1, q2 := t*(1+c), rest*(1+c)
		return risks{p1, q2 - c, p1 - c, q2}
	case riskRatio:
		if c <= 1 {
			return risks{c * t, rest + (1-c)*t, t, rest}
		}
		return risks{t, rest, t / c, rest + (1-1/c)*t}
	case oddsRatio:
		if c <= 1 {
			m := rest + c*t
			return risks{c * t / m, rest / m, t, rest}
		}
		d := t/c + rest
		return risks{t, rest, t / c / d, rest / d}
	}
	panic("effect: unknown contrast")
}

// region is a set of tables below a staircase, with room for one binomial
// distribution of each group.
type region struct {
	s      *staircase
	last   []int
	f1, f2 []float64
}

// plain is the probability of the region, O(n1 + n2), leaving out single
// probabilities below cut.
func (g *region) plain(r risks, cut float64) float64 {
	lo1, hi1 := binomialMass(g.f1, g.s.rise1, r.p1, r.q1, cut)
	lo2, hi2 := binomialMass(g.f2, g.s.rise2, r.p2, r.q2, cut)
	sum, below, j := 0.0, 0.0, lo2-1
	for i := lo1; i <= hi1; i++ {
		for b := min(g.last[i], hi2); j < b; {
			j++
			below += g.f2[j]
		}
		sum += g.f1[i] * below
	}
	return sum
}
