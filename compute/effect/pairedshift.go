package effect

import (
	"math"
	"slices"

	"steelyard/compute/dist"
	"steelyard/compute/result"
)

// pairedShift is the signed-rank test of a shift within pairs with the median
// of the Walsh averages (Wilcoxon 1945, Tukey 1949; from memory).
func pairedShift(word string) analysis {
	return func(in Input) (*Inference, *Problem) {
		if bad := rankInput(in, word); bad != nil {
			return nil, bad
		}
		d := differences(in.Pairs)
		if d == nil {
			return nil, problem("S104", needsData, word)
		}
		if bad := finiteValues("a difference", d); bad != nil {
			return nil, bad
		}
		slices.Sort(d)
		if len(d) < 2 {
			return nil, problem("S101", tooFewOf, "the pairs", float64(len(d)), 2)
		}
		if d[0] == d[len(d)-1] {
			return nil, problem("S102", noVariation, "the difference within pairs")
		}
		return signedRank(word, d, in)
	}
}

func signedRank(word string, d []float64, in Input) (*Inference, *Problem) {
	n := float64(len(d))
	s := &shift{kind: "rank", total: n * (n + 1) / 2, tol: rankTolerance * (d[len(d)-1] - d[0])}
	s.count = func(v float64) float64 { return averagesUpTo(d, v) }
	s.spread = func(c float64) float64 { return signedRankSpread(d, c, s.tol) }
	ties := absoluteTies(d, in.Null, s.tol)
	used, why := word, ""
	if word == "signed-rank" {
		used, why = "signed-rank-normal", "there are more than 50 pairs"
		switch {
		case ties:
			why = "differences are tied, or equal to the null"
		case len(d) <= exactRanksMost:
			used, why = "signed-rank-exact", "no ties, at most 50 pairs"
		}
	}
	if used == "signed-rank-exact" {
		if len(d) > exactRanksCap {
			return nil, problem("S105", tooLargeExact, word, n)
		}
		r := dist.NewSignedRank(len(d))
		s.below = r.Lower
	}
	inf := s.infer(used, n)
	if why != "" {
		inf.Notes = append(inf.Notes, note("S206", rankChoice, used, why))
	}
	if ties && used == "signed-rank-exact" {
		inf.Notes = append(inf.Notes, note("S208", tiedPairs))
	}
	inf.addInfinite(in.A)
	inf.Checks = []result.Check{check("symmetric-differences", normality("", n, d), []result.Shown{{What: "tied values", Value: tied(d)}})}
	return inf, nil
}

// averagesUpTo counts the Walsh averages (d_i + d_j)/2, i <= j, at most v;
// d sorted.
func averagesUpTo(d []float64, v float64) float64 {
	count, j := 0, len(d)-1
	for i := range d {
		for j >= 0 && d[i]/2+d[j]/2 > v {
			j--
		}
		if j < i {
			break
		}
		count += j - i + 1
	}
	return float64(count)
}

// absolute are the sorted distances of the differences from c, those within
// tol of it left out.
func absolute(d []float64, c, tol float64) []float64 {
	a := make([]float64, 0, len(d))
	for _, x := range d {
		if v := math.Abs(x - c); v > tol {
			a = append(a, v)
		}
	}
	slices.Sort(a)
	return a
}

// absoluteTies reports ties or zeros among the distances from c.
func absoluteTies(d []float64, c, tol float64) bool {
	a := absolute(d, c, tol)
	if len(a) < len(d) || hasTies(d) {
		return true
	}
	for i := 1; i < len(a); i++ {
		if a[i]-a[i-1] <= tol {
			return true
		}
	}
	return false
}

// signedRankSpread is the standard deviation of the sum of the ranks above c,
// with ties of the distances from it. Differences equal to c keep the lowest
// ranks and have no sign to turn (Pratt 1959, from memory). NaN asks for the
// spread between Walsh averages, where only equal differences are tied.
func signedRankSpread(d []float64, c, tol float64) float64 {
	n := float64(len(d))
	a := d
	if !math.IsNaN(c) {
		a = absolute(d, c, tol)
	} else {
		tol = 0
	}
	var ties float64
	for i := 0; i < len(a); {
		t, next := run(a, i, 0, a[i], tol)
		ties += t * (t*t - 1)
		i = next
	}
	zeros := n - float64(len(a))
	return math.Sqrt(math.Max(0, (n*(n+1)*(2*n+1)-zeros*(zeros+1)*(2*zeros+1))/24-ties/48))
}
