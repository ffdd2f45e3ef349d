package effect

import (
	"math"
	"slices"

	"steelyard/compute/dist"
	"steelyard/compute/result"
)

// medianShift is the rank-sum test of a shift between two groups with the
// Hodges–Lehmann estimate (Wilcoxon 1945; Hodges & Lehmann 1963; from memory).
func medianShift(word string) analysis {
	return func(in Input) (*Inference, *Problem) {
		if bad := rankInput(in, word); bad != nil {
			return nil, bad
		}
		if len(in.First.Values) == 0 && len(in.Second.Values) == 0 {
			return nil, problem("S104", needsData, word)
		}
		x, y := sorted(in.First.Values), sorted(in.Second.Values)
		for i, v := range [][]float64{x, y} {
			who := [...]string{"the first group", "the second group"}[i]
			if len(v) == 0 {
				return nil, problem("S101", tooFew, who, 0, 1)
			}
			if bad := finiteValues("a value of "+who, v); bad != nil {
				return nil, bad
			}
		}
		return rankSum(word, x, y, in)
	}
}

func rankSum(word string, x, y []float64, in Input) (*Inference, *Problem) {
	m, n := len(x), len(y)
	if m < 2 && n < 2 {
		return nil, problem("S101", tooFewOf, "the groups", float64(m+n), 3)
	}
	if x[0] == y[0] && x[0] == x[m-1] && x[0] == y[n-1] {
		return nil, problem("S102", allTied)
	}
	s := &shift{kind: "rank", total: float64(m) * float64(n)}
	s.tol = rankTolerance * (math.Max(x[m-1], y[n-1]) - math.Min(x[0], y[0]))
	s.count = func(v float64) float64 { return differencesUpTo(x, y, v) }
	s.spread = func(c float64) float64 { return rankSumSpread(x, y, c, s.tol) }
	ties := s.spread(in.Null) < math.Sqrt(s.total/12*float64(m+n+1))*(1-1e-15)
	used, why := word, ""
	var notes []result.Note
	if word == "wilcoxon" {
		used, why = "wilcoxon-normal", "a group is larger than 50"
		switch {
		case ties:
			why = "values are tied"
		case m <= exactRanksMost && n <= exactRanksMost:
			used, why = "wilcoxon-exact", "no ties, at most 50 a side"
		}
	}
	if used == "wilcoxon-exact" {
		if bad := s.exactRankSum(word, x, y, ties); bad != nil {
			return nil, bad
		}
		if ties {
			notes = append(notes, note("S208", tiedExact))
		}
	}
	inf := s.infer(used, float64(m+n))
	if why != "" {
		inf.Notes = append(inf.Notes, note("S206", rankChoice, used, why))
	}
	inf.Notes = append(inf.Notes, notes...)
	inf.addInfinite(in.A)
	inf.Costly = s.exact != nil
	inf.Checks = []result.Check{check("pure-shift", normality(firstGroup, float64(m), x), normality(secondGroup, float64(n), y),
		[]result.Shown{{What: "tied values", Value: tied(append(slices.Clone(x), y...))}})}
	return inf, nil
}

// exactRankSum gives the test its exact distribution: the known one without
// ties, the conditional one with them.
func (s *shift) exactRankSum(word string, x, y []float64, ties bool) *Problem {
	m, n := len(x), len(y)
	switch {
	case ties && m+n > exactTiesMost:
		return problem("S105", tooLargeExact, word, float64(m+n))
	case ties:
		s.exact = func(c float64) (up, down dist.Tail) { return tiedRankSum(x, y, c, s.tol) }
	case m > exactRanksCap || n > exactRanksCap:
		return problem("S105", tooLargeExact, word, float64(m+n))
	default:
		r := dist.NewRankSum(m, n)
		s.below = r.Lower
	}
	return nil
}

// differencesUpTo counts the differences x-y that are at most v; both sorted.
func differencesUpTo(x, y []float64, v float64) float64 {
	count, j := 0, len(y)
	for _, a := range x { // as x grows, fewer y are small enough
		for j > 0 && a-y[len(y)-j] > v {
			j--
		}
		count += j
	}
	return float64(count)
}

// rankSumSpread is the standard deviation of the count of differences above c
// with ties of the values shifted by c; NaN asks for the spread between
// differences, where only ties within a group matter.
func rankSumSpread(x, y []float64, c, tol float64) float64 {
	m, n := float64(len(x)), float64(len(y))
	total := m + n
	var ties float64
	count := func(a, b float64) {
		t := a + b
		ties += t * (t*t - 1)
	}
	if math.IsNaN(c) {
		merged(x, nil, 0, 0, count)
		merged(nil, y, 0, 0, count)
	} else {
		merged(x, y, c, tol, count)
	}
	return math.Sqrt(math.Max(0, m*n/12*(total+1-ties/(total*(total-1)))))
}

// merged visits the distinct values of both sorted columns in order, x moved
// down by c, with how many of each column are equal there.
func merged(x, y []float64, c, tol float64, visit func(a, b float64)) {
	for i, j := 0, 0; i < len(x) || j < len(y); {
		at := math.Inf(1)
		if i < len(x) {
			at = x[i] - c
		}
		if j < len(y) {
			at = math.Min(at, y[j])
		}
		var a, b float64
		a, i = run(x, i, c, at, tol)
		b, j = run(y, j, 0, at, tol)
		visit(a, b)
	}
}

// run counts the sorted values from i on that equal at once they are moved
// down by c, within tol above. A value moved is compared as it was found, so
// that a c which swallows the values cannot stop the count.
func run(x []float64, i int, c, at, tol float64) (float64, int) {
	start := i
	for i < len(x) && x[i]-c <= at+tol {
		i++
	}
	return float64(i - start), i
}

// tiedRankSum is the exact conditional test given the ties of the values
// shifted by c (Streitberg & Röhmel 1986, from memory).
func tiedRankSum(x, y []float64, c, tol float64) (up, down dist.Tail) {
	var doubled []int
	observed, before := 0, 0
	merged(x, y, c, tol, func(a, b float64) {
		t := int(a + b)
		rank := 2*before + t + 1 // twice the midrank
		for range t {
			doubled = append(doubled, rank)
		}
		observed += int(a) * rank
		before += t
	})
	r := dist.NewRankSumTies(doubled, len(x))
	return r.Upper(observed), r.Lower(observed)
}
