package effect

import (
	"math"
	"slices"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// The formats of this file's notes.
const (
	perfectlyRelated = "the readings are perfectly related: no error can be computed"
	perfectRanks     = "the ranks are perfectly related: the null can be tested by permutation, but there is no interval"
	monteCarlo       = "the p-value rests on %d random shuffles; its Monte Carlo standard error is at most %.2g"
)

// related reads the one sample of a correlation: n pairs and Pearson's r.
func related(in Input, method string) (n, r float64, bad *Problem) {
	n, r = in.Sample.N, in.Sample.R
	switch {
	case in.SystematicU > 0:
		return n, r, problem("S104", notWithU, method)
	case in.DesignEffect != 1:
		return n, r, problem("S104", notClustered, method)
	case !(math.Abs(r) <= 1):
		return n, r, problem("S103", outsideRange, "the correlation", r)
	case !(n >= 4) || math.IsInf(n, 0):
		return n, r, problem("S101", tooFew, "the sample", n, 4)
	}
	return n, r, nil
}

// fisherZ is the Wald method on atanh with error se (Fisher 1921, from memory).
func fisherZ(word string, n, r, se float64) *Inference {
	w := Wald{Scale: record.Atanh, Y: math.Atanh(r), SE: se, DF: math.Inf(1), Low: -1, High: 1}
	return fromWald(word, w, n)
}

func correlationFisher(in Input) (*Inference, *Problem) {
	n, r, bad := related(in, "fisher-z")
	if bad != nil {
		return nil, bad
	}
	if math.Abs(r) == 1 {
		return nil, problem("S102", perfectlyRelated)
	}
	inf := fisherZ("fisher-z", n, r, 1/math.Sqrt(n-3))
	inf.Checks = []result.Check{check("bivariate-normal", pairShape(in.Pairs))}
	return inf, nil
}

// ExactCorrelation is the kernel of the exact test of a correlation of two
// normal readings (Hotelling 1953, from memory).
type ExactCorrelation struct{ N, R float64 }

// Test implements Method.
func (m ExactCorrelation) Test(c float64) Test {
	switch {
	case c >= 1:
		return Test{Up: sureTail, Down: sureTail.Complement(), Value: m.R, Kind: "exact"}
	case c <= -1:
		return Test{Up: sureTail.Complement(), Down: sureTail, Value: m.R, Kind: "exact"}
	}
	up := dist.CorrelationUpper(m.R, c, m.N)
	return Test{Up: up, Down: up.Complement(), Value: m.R, Kind: "exact"}
}

// Limits implements Method by inversion.
func (m ExactCorrelation) Limits(a float64) (low, high float64) {
	return Inversion{Test: m.Test, Scale: record.Atanh, Low: -1, High: 1, Start: m.R, Step: 1 / math.Sqrt(m.N), Monotone: true}.Limits(a)
}

func correlationExact(in Input) (*Inference, *Problem) {
	n, r, bad := related(in, "exact")
	if bad != nil {
		return nil, bad
	}
	if math.Abs(r) == 1 {
		return nil, problem("S102", perfectlyRelated)
	}
	inf := fisherZ("exact", n, r, 1/math.Sqrt(n-3))
	inf.Method = ExactCorrelation{n, r}
	inf.Checks = []result.Check{check("bivariate-normal", pairShape(in.Pairs))}
	return inf, nil
}

// ranked reads a rank correlation: from data Pearson's r of the midranks.
func ranked(in Input, method string) (n, r float64, bad *Problem) {
	if in.Pairs.First != nil {
		n = float64(len(in.Pairs.First))
		if n >= 4 {
			a, b := midranks(in.Pairs.First), midranks(in.Pairs.Second)
			r = pearson(a, b)
			if math.IsNaN(r) {
				return n, r, problem("S102", noVariation, "one of the readings")
			}
		}
		in.Sample.N, in.Sample.R = n, r
	}
	return related(in, method)
}

// bonettWright is the error of atanh of a rank correlation (Bonett & Wright
// 2000).
func bonettWright(n, r float64) float64 { return math.Sqrt((1 + r*r/2) / (n - 3)) }

func rankCorrelationBonettWright(in Input) (*Inference, *Problem) {
	n, r, bad := ranked(in, "bonett-wright")
	if bad != nil {
		return nil, bad
	}
	if math.Abs(r) == 1 {
		if in.Pairs.First == nil {
			return nil, problem("S102", perfectlyRelated)
		}
		return perfectlyRanked(in, n, r)
	}
	inf := fisherZ("bonett-wright", n, r, bonettWright(n, r))
	inf.Checks = []result.Check{check("monotone-relation", tiesShown(in.Pairs))}
	return inf, nil
}

// shuffled tests the null of no relation by permutation, with the interval of
// another method.
type shuffled struct {
	up, down dist.Tail
	r        float64
	interval Method // nil: no interval
}

// Test implements Method at the null; elsewhere it is the interval's.
func (m shuffled) Test(c float64) Test {
	if c == 0 {
		return Test{Up: m.up, Down: m.down, Value: m.r, Kind: "permutation", Step: true}
	}
	if m.interval != nil {
		return m.interval.Test(c)
	}
	return Test{Up: sureTail, Down: sureTail, Value: m.r, Kind: "permutation", Step: true}
}

// Limits implements Method.
func (m shuffled) Limits(a float64) (low, high float64) {
	if m.interval == nil {
		return -1, 1
	}
	return m.interval.Limits(a)
}

// exactShuffles is the largest number of pairs whose n! orders are all tried;
// beyond, shuffles random ones are drawn.
const (
	exactShuffles = 9
	shuffles      = 99999
)

func rankCorrelationPermutation(in Input) (*Inference, *Problem) {
	if in.Pairs.First == nil {
		return nil, problem("S104", needsData, "permutation")
	}
	if n := len(in.Pairs.First); n > permutationMost {
		return nil, problem("S105", tooLarge, "permutation", permutationMost, n)
	}
	n, r, bad := ranked(in, "permutation")
	if bad != nil {
		return nil, bad
	}
	return permuted(in, n, r)
}

// permuted is the permutation test of a rank correlation of n pairs.
func permuted(in Input, n, r float64) (*Inference, *Problem) {
	if in.Null != 0 {
		return nil, problem("S104", "the permutation test of a rank correlation is for the null 0 only, not %g", in.Null)
	}
	m := shuffled{r: r}
	var inf *Inference
	if math.Abs(r) < 1 {
		inf = fisherZ("permutation", n, r, bonettWright(n, r))
		m.interval = inf.Method
	} else {
		inf = &Inference{Word: "permutation", Estimate: r, N: n, NoInterval: true, Notes: []result.Note{note("S206", perfectRanks)}}
	}
	ge, le, total := permuteRanks(midranks(in.Pairs.First), midranks(in.Pairs.Second), in.Seed)
	m.up, m.down = dist.TailOf(ge/total), dist.TailOf(le/total)
	if n > exactShuffles {
		inf.Notes = append(inf.Notes, note("S205", monteCarlo, shuffles, 0.5/math.Sqrt(shuffles)))
	}
	inf.Method, inf.NullOnly = m, true
	inf.Checks = []result.Check{check("exchangeable-pairs", tiesShown(in.Pairs))}
	return inf, nil
}

// perfectlyRanked stands in for a method that has no error at |r| = 1. Beyond
// the size of the permutation test nothing does.
func perfectlyRanked(in Input, n, r float64) (*Inference, *Problem) {
	if n > permutationMost {
		return nil, problem("S102", perfectlyRelated)
	}
	return permuted(in, n, r)
}

// permuteRanks counts the orders of b whose product sum with a is at least,
// and at most, the observed one: all orders up to nine pairs, otherwise
// random ones and the observed.
func permuteRanks(a, b []float64, seed uint64) (ge, le, total float64) {
	sum := func(b []float64) (s float64) {
		for i, x := range a {
			s += x * b[i]
		}
		return s
	}
	observed := sum(b) // doubled ranks would be integers: sums are exact
	count := func() {
		s := sum(b)
		if s >= observed {
			ge++
		}
		if s <= observed {
			le++
		}
		total++
	}
	b = slices.Clone(b)
	if len(b) <= exactShuffles {
		eachOrder(b, len(b), count)
		return ge, le, total
	}
	count()
	stream := numeric.NewStream("permutation", seed, "", 0)
	for range shuffles {
		numeric.Shuffle(stream, b)
		count()
	}
	return ge, le, total
}

// eachOrder visits every order of x (Heap 1963, from memory).
func eachOrder(x []float64, k int, visit func()) {
	if k <= 1 {
		visit()
		return
	}
	for i := range k {
		eachOrder(x, k-1, visit)
		if i == k-1 {
			break
		}
		if k%2 == 0 {
			x[i], x[k-1] = x[k-1], x[i]
		} else {
			x[0], x[k-1] = x[k-1], x[0]
		}
	}
}

// midranks are ranks from 1, ties at their mean.
func midranks(x []float64) []float64 {
	type placed struct {
		value float64
		at    int
	}
	order := make([]placed, len(x))
	for i, v := range x {
		order[i] = placed{v, i}
	}
	slices.SortFunc(order, func(a, b placed) int {
		switch {
		case a.value < b.value:
			return -1
		case a.value > b.value:
			return 1
		}
		return 0
	})
	r := make([]float64, len(x))
	for i := 0; i < len(order); {
		j := i
		for j < len(order) && order[j].value == order[i].value {
			j++
		}
		if j == i { // not a number
			j++
		}
		for k := i; k < j; k++ {
			r[order[k].at] = float64(i+j+1) / 2
		}
		i = j
	}
	return r
}

// pearson is the correlation of two columns; NaN where one does not vary.
func pearson(x, y []float64) float64 {
	mx, my := numeric.MomentsOf(x), numeric.MomentsOf(y)
	z := make([]float64, len(x))
	for i := range x {
		z[i] = (x[i] - mx.Mean) * (y[i] - my.Mean)
	}
	r := numeric.Sum(z) / math.Sqrt(mx.M2*my.M2)
	if math.Abs(r) > 1-1e-14 && math.Abs(r) < 1+1e-12 {
		return math.Copysign(1, r)
	}
	return r
}

// tiesShown counts the readings that share their value with another.
func tiesShown(p Pairs) []result.Shown {
	if p.First == nil {
		return nil
	}
	return []result.Shown{{What: "tied values", Group: firstGroup, Value: tied(p.First)}, {What: "tied values", Group: secondGroup, Value: tied(p.Second)}}
}

func tied(x []float64) float64 {
	s := slices.Clone(x)
	slices.Sort(s)
	n := 0.0
	for i := range s {
		if i > 0 && s[i] == s[i-1] || i < len(s)-1 && s[i] == s[i+1] {
			n++
		}
	}
	return n
}
