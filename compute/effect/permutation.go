package effect

import (
	"math"
	"math/bits"
	"slices"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
	"steelyard/compute/result"
)

// The sizes up to which every selection is looked at, and how many are drawn
// beyond (methods.md B1, B2).
const (
	exactSelections  = 2_000_000
	randomSelections = 99_999
	signFlipsExact   = 20
	permutationMost  = 10_000
)

// The formats of this file.
const (
	drawnSelections = "%d random selections stand for all: the Monte Carlo error of p near %.4g is %.2g"
	tooFewSelection = "there are only %v selections, so no limit exists at error %v"
)

// Permutation is a permutation test of a shift. Every selection has the one
// null at which it and the observed one are equally extreme; a p-value is a
// count of those nulls, and a limit one of them.
type Permutation struct {
	nulls    []float64 // sorted, less centre
	same     float64   // the observed selection, and random ones equal to it: they count at every null
	centre   float64
	tol      float64 // nulls closer than this are ties
	estimate float64
}

// selections is M, the observed one included.
func (p *Permutation) selections() float64 { return float64(len(p.nulls)) + p.same }

// Test implements Method by two binary searches.
func (p *Permutation) Test(c float64) Test {
	x := c - p.centre
	if math.IsNaN(x) {
		x = 0
	}
	m := p.selections()
	atMost := float64(firstAbove(p.nulls, x+p.tol))
	atLeast := float64(len(p.nulls) - firstAbove(p.nulls, math.Nextafter(x-p.tol, math.Inf(-1))))
	return Test{Up: counted(p.same+atMost, m), Down: counted(p.same+atLeast, m),
		Value: ratio(p.estimate-c, 1), Kind: "permutation", Step: true}
}

// firstAbove is how many of the sorted values are at most x.
func firstAbove(sorted []float64, x float64) int {
	lo, hi := 0, len(sorted)
	for lo < hi {
		mid := int(uint(lo+hi) >> 1)
		if sorted[mid] <= x {
			lo = mid + 1
		} else {
			hi = mid
		}
	}
	return lo
}

// counted is the tail k/m with its complement, both exact.
func counted(k, m float64) dist.Tail {
	return dist.Tail{P: k / m, Q: (m - k) / m, LnP: math.Log(k / m), LnQ: math.Log((m - k) / m)}
}

// Limits implements Method: with k the selections that may count at error a,
// the k-th smallest and k-th largest null.
func (p *Permutation) Limits(a float64) (low, high float64) {
	low, high = math.Inf(-1), math.Inf(1)
	// Counts compare as Test.Below does.
	k := math.Floor(a*(1+1e-12)*p.selections()) - p.same
	if !(k >= 0) {
		return low, high
	}
	n := len(p.nulls)
	if k >= float64(n) {
		return high, low // every null is excluded from either side
	}
	i := int(k)
	return p.nulls[i] + p.centre, p.nulls[n-1-i] + p.centre
}

// newPermutation sorts the nulls. NaN marks selections equal to the observed.
func newPermutation(nulls []float64, centre, spread, largest, estimate float64) *Permutation {
	p := &Permutation{same: 1, centre: centre, estimate: estimate}
	keep := nulls[:0]
	for _, d := range nulls {
		if math.IsNaN(d) {
			p.same++
			continue
		}
		keep = append(keep, d)
	}
	slices.Sort(keep)
	p.nulls = keep
	// 1e-12 of the range, and never finer than the rounding of the values
	// themselves.
	p.tol = max(1e-12*spread, 4*0x1p-52*largest)
	return p
}

// signFlips is the permutation test of a mean or of paired differences: the
// null of a set of values whose signs are turned about it is their mean.
func signFlips(who string, s sample, in Input) (*Inference, *Problem) {
	if bad := permutable(in, len(s.values)); bad != nil {
		return nil, bad
	}
	n := len(s.values)
	switch {
	case n < 2:
		return nil, problem("S101", tooFew, who, n, 2)
	case s.sd == 0:
		return nil, problem("S102", noVariation, who)
	}
	if bad := s.bad(who); bad != nil {
		return nil, bad
	}
	centre := s.values[0]
	var nulls []float64
	exact := n <= signFlipsExact
	if exact {
		nulls = subsetMeans(s.values, centre)
	} else {
		nulls = randomSubsetMeans(s.values, centre, in.Seed)
	}
	largest := max(math.Abs(s.moments.Min), math.Abs(s.moments.Max))
	p := newPermutation(nulls, centre, s.moments.Max-s.moments.Min, largest, s.mean)
	inf := permutationInference(p, OneSampleT(s.n, s.mean, s.sd), s.n, exact, in.A)
	inf.Checks = []result.Check{check("symmetric-differences", s.shows(""))}
	return inf, nil
}

// subsetMeans are the means of every subset but the empty one, less centre.
func subsetMeans(x []float64, centre float64) []float64 {
	sums := make([]float64, 1<<len(x))
	for set := 1; set < len(sums); set++ {
		low := bits.TrailingZeros(uint(set))
		sums[set] = sums[set&(set-1)] + (x[low] - centre)
	}
	for set := 1; set < len(sums); set++ {
		sums[set] /= float64(bits.OnesCount(uint(set)))
	}
	return sums[1:]
}

// randomSubsetMeans draws subsets; the empty one, NaN, equals the observed.
func randomSubsetMeans(x []float64, centre float64, seed uint64) []float64 {
	centred := make([]float64, len(x))
	for i, v := range x {
		centred[i] = v - centre
	}
	out := make([]float64, randomSelections)
	inShares(len(out), func(from, to int) {
		var stream numeric.Stream
		for r := from; r < to; r++ {
			stream.Reset("permutation", seed, "", uint64(r))
			sum, count := 0.0, 0
			for i := 0; i < len(centred); i += 64 {
				part := centred[i:min(i+64, len(centred))]
				word := stream.Uint64() & (^uint64(0) >> (64 - len(part)))
				count += bits.OnesCount64(word)
				for _, v := range part {
					sum += masked(v, -(word & 1))
					word >>= 1
				}
			}
			out[r] = sum / float64(count) // 0/0 is NaN on purpose
		}
	})
	return out
}

func meanPermutation(in Input) (*Inference, *Problem) {
	return signFlips("the sample", sampleOf(in.Sample, 1), in)
}

func pairedPermutation(in Input) (*Inference, *Problem) {
	s, bad := differencesOf(in.Pairs, 1)
	if bad != nil {
		return nil, bad
	}
	return signFlips("the pairs' difference", s, in)
}

// permutable refuses what a permutation has no place for.
func permutable(in Input, n int) *Problem {
	switch {
	case n == 0:
		return problem("S104", needsData, "permutation")
	case in.SystematicU > 0:
		return problem("S104", notWithU, "permutation")
	case in.DesignEffect != 1:
		return problem("S104", notClustered, "permutation")
	case n > permutationMost:
		return problem("S105", tooLarge, "permutation", permutationMost, n)
	}
	return nil
}

// permutationInference adds the standard error of the matching t test, which
// serves pooling and priors but not the test, and the notes on resolution.
func permutationInference(p *Permutation, w Wald, n float64, exact bool, a float64) *Inference {
	inf := &Inference{Method: p, Word: "permutation", Estimate: p.estimate, N: n, Y: result.Some(p.estimate)}
	if w.SE > 0 {
		inf.SE, inf.V = result.Some(w.SE), result.Some(w.SE*w.SE)
	}
	m := p.selections()
	if !exact {
		near := a
		if !(near > 0) {
			near = 0.05
		}
		inf.Notes = append(inf.Notes, note("S205", drawnSelections, randomSelections, near, math.Sqrt(near*(1-near)/m)))
	}
	if a > 0 && p.same > a*(1+1e-12)*m {
		inf.Notes = append(inf.Notes, note("S205", tooFewSelection, m, a))
	}
	return inf
}
