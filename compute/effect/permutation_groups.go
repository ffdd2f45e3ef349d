package effect

import (
	"math"
	"runtime"
	"sync"

	"steelyard/compute/numeric"
	"steelyard/compute/result"
)

// meanDifferencePermutation is the permutation test of a shift between two
// groups (Pitman 1937). A selection that moves j >= 1 values out of the first
// group and j in has the null (sum out - sum in)/j.
func meanDifferencePermutation(in Input) (*Inference, *Problem) {
	if in.Crossover || len(in.Covariates) > 0 || in.Strata != nil {
		return nil, problem("S112", noAdjustment, "permutation")
	}
	x, y := in.First.Values, in.Second.Values
	switch {
	case len(x) == 0 && len(y) == 0:
		return nil, problem("S104", needsData, "permutation")
	case len(x) == 0:
		return nil, problem("S101", tooFew, "the first group", 0, 1)
	case len(y) == 0:
		return nil, problem("S101", tooFew, "the second group", 0, 1)
	}
	if bad := permutable(in, len(x)+len(y)); bad != nil {
		return nil, bad
	}
	s1, s2 := sampleOfValues(x, 1), sampleOfValues(y, 1)
	if bad := s1.bad("the first group"); bad != nil {
		return nil, bad
	}
	if bad := s2.bad("the second group"); bad != nil {
		return nil, bad
	}
	low, high := min(s1.moments.Min, s2.moments.Min), max(s1.moments.Max, s2.moments.Max)
	switch {
	case len(x)+len(y) < 3:
		return nil, problem("S101", tooFewOf, "both groups together", len(x)+len(y), 3)
	case low == high:
		return nil, problem("S102", neitherVaries)
	}
	exact := choose(len(x)+len(y), min(len(x), len(y))) <= exactSelections
	var nulls []float64
	if exact {
		nulls = exchangeNulls(x, y, s1.mean)
	} else {
		nulls = randomExchangeNulls(x, y, s1.mean, in.Seed)
	}
	largest := max(math.Abs(low), math.Abs(high))
	p := newPermutation(nulls, 0, high-low, largest, s1.mean-s2.mean)
	w := Wald{}
	if s1.n > 1 && s2.n > 1 {
		w = Welch(p.estimate, s1.c(), s1.nu(), s2.c(), s2.nu())
	}
	inf := permutationInference(p, w, s1.n+s2.n, exact, in.A)
	inf.Checks = []result.Check{check("pure-shift", s1.shows(firstGroup), s2.shows(secondGroup), spreadRatio(s1.sd, s2.sd))}
	return inf, nil
}

// choose is the binomial coefficient, +Inf where it is beyond a double.
func choose(n, k int) float64 {
	c := 1.0
	for i := 1; i <= k; i++ {
		c = c * float64(n-k+i) / float64(i)
		if c > 1e15 {
			return math.Inf(1)
		}
	}
	return math.Round(c)
}

// exchangeNulls goes through every selection but the observed one: all pairs
// of j values of x and j of y. Sums are of values less centre.
func exchangeNulls(x, y []float64, centre float64) []float64 {
	most := min(len(x), len(y))
	out, in := subsetSums(x, centre, most), subsetSums(y, centre, most)
	total := 0
	for j := 1; j <= most; j++ {
		total += len(out[j]) * len(in[j])
	}
	nulls := make([]float64, 0, total)
	for j := 1; j <= most; j++ {
		for _, o := range out[j] {
			for _, i := range in[j] {
				nulls = append(nulls, (o-i)/float64(j))
			}
		}
	}
	return nulls
}

// subsetSums lists the sums of all subsets of up to most values, by size.
func subsetSums(x []float64, centre float64, most int) [][]float64 {
	sums := make([][]float64, most+1)
	sums[0] = []float64{0}
	for k, v := range x {
		for j := min(k+1, most); j >= 1; j-- {
			for _, s := range sums[j-1] {
				sums[j] = append(sums[j], s+(v-centre))
			}
		}
	}
	return sums
}

// randomExchangeNulls draws selections: as many of all values as the smaller
// group holds (Floyd's algorithm, as in Bentley 1987; from memory) become
// that group. NaN: nothing moved.
func randomExchangeNulls(x, y []float64, centre float64, seed uint64) []float64 {
	// The smaller group is drawn; it stands first.
	turn := 1.0
	if len(y) < len(x) {
		x, y, turn = y, x, -1
	}
	all := make([]float64, 0, len(x)+len(y))
	for _, v := range x {
		all = append(all, v-centre)
	}
	for _, v := range y {
		all = append(all, v-centre)
	}
	size := len(x)
	nulls := make([]float64, randomSelections)
	inShares(len(nulls), func(from, to int) {
		chosen := make([]uint64, len(all)) // all bits or none
		var stream numeric.Stream
		for r := from; r < to; r++ {
			stream.Reset("permutation", seed, "", uint64(r))
			clear(chosen)
			for j := len(all) - size; j < len(all); j++ {
				t := stream.IntN(j + 1)
				if chosen[t] != 0 {
					t = j
				}
				chosen[t] = ^uint64(0)
			}
			leaving, stayed := 0.0, 0
			for i, v := range all[:size] {
				leaving += masked(v, ^chosen[i])
				stayed += int(chosen[i] & 1)
			}
			entering := 0.0
			for i, v := range all[size:] {
				entering += masked(v, chosen[size+i])
			}
			nulls[r] = turn * (leaving - entering) / float64(size-stayed) // 0/0 is NaN on purpose
		}
	})
	return nulls
}

// masked is v where all bits are set and 0 where none is, without a branch.
func masked(v float64, bits uint64) float64 {
	return math.Float64frombits(math.Float64bits(v) & bits)
}

// inShares cuts 0 … n-1 into a share per processor. Each selection has a
// stream and a place of its own, so the number of shares changes nothing.
func inShares(n int, share func(from, to int)) {
	k := runtime.GOMAXPROCS(0)
	var group sync.WaitGroup
	for i := range k {
		group.Go(func() { share(n*i/k, n*(i+1)/k) })
	}
	group.Wait()
}
