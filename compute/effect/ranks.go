package effect

import (
	"math"
	"slices"

	"steelyard/compute/dist"
	"steelyard/compute/result"
)

// ranks are the measures that use the order of values alone, and the
// probability of superiority.
var ranks = map[string]map[string]analysis{
	"median-shift": {
		"wilcoxon":        medianShift("wilcoxon"),
		"wilcoxon-exact":  medianShift("wilcoxon-exact"),
		"wilcoxon-normal": medianShift("wilcoxon-normal"),
	},
	"paired-median-shift": {
		"signed-rank":        pairedShift("signed-rank"),
		"signed-rank-exact":  pairedShift("signed-rank-exact"),
		"signed-rank-normal": pairedShift("signed-rank-normal"),
	},
	"superiority-probability": {
		"brunner-munzel": superiority("brunner-munzel"),
		"delong":         superiority("delong"),
		"logit":          superiority("logit"),
		"hanley-mcneil":  superiority("hanley-mcneil"),
	},
}

// The formats and sizes of the rank methods.
const (
	rankChoice    = "%s was used: %s"
	tiedExact     = "values are tied: the exact distribution given the ties is used"
	tiedPairs     = "differences are tied: the exact distribution is kept by breaking ties against the claim"
	allTied       = "all values are the same: ranks say nothing"
	tooLargeExact = "method %q would be too large an exact computation for %v values"

	exactRanksMost = 50    // a side, for the default choice
	exactTiesMost  = 100   // together, with ties
	exactRanksCap  = 1000  // a side, when asked for
	rankTolerance  = 1e-12 // of the range, for ties with a given shift
)

// shift is a rank test of a shift c between two things that can be compared:
// pairs of values of two groups, or pairs of differences with themselves.
// Its statistic counts comparisons above c.
type shift struct {
	kind   string
	count  func(v float64) float64 // comparisons <= v
	total  float64                 // number of comparisons
	tol    float64
	below  func(k float64) dist.Tail            // exact P(statistic <= k)
	spread func(c float64) float64              // standard deviation under c, for the normal form
	exact  func(c float64) (up, down dist.Tail) // with ties; nil otherwise
}

// above counts the comparisons above c, those equal to it as none and as all.
func (s *shift) above(c float64) (strict, loose float64) {
	return s.total - s.count(c+s.tol), s.total - s.count(math.Nextafter(c-s.tol, math.Inf(-1)))
}

// Test implements Method. In the exact form comparisons equal to c count
// against either side, so that a limit on a point never establishes.
func (s *shift) Test(c float64) Test {
	strict, loose := s.above(c)
	out := Test{Kind: s.kind, Value: (strict + loose) / 2, Step: true}
	switch {
	case math.IsInf(c, 1):
		out.Up, out.Down = sureTail, sureTail.Complement()
	case math.IsInf(c, -1):
		out.Up, out.Down = sureTail.Complement(), sureTail
	case s.exact != nil:
		out.Up, out.Down = s.exact(c)
	case s.below != nil:
		out.Up, out.Down = s.below(s.total-strict), s.below(loose)
	default:
		z := ratio((strict+loose-s.total)/2, s.spread(c))
		out.Up = dist.NormalUpper(z)
		out.Down, out.Value, out.Kind = out.Up.Complement(), z, "z"
	}
	return out
}

// Limits implements Method: order statistics of the comparisons.
func (s *shift) Limits(a float64) (low, high float64) {
	low, high = math.Inf(-1), math.Inf(1)
	if !(a > 0) {
		return low, high
	}
	var k float64 // how many of the smallest comparisons lie below the lower limit
	switch {
	case s.exact != nil:
		return s.searched(a, true), s.searched(a, false)
	case s.below != nil:
		k = s.largest(a)
	default:
		// Between comparisons the spread does not depend on c.
		u := math.Ceil(s.total/2 + dist.NormalQuantile(a)*s.spread(math.NaN()) - 1e-9)
		k = s.total - u
	}
	if k < 0 {
		return low, high
	}
	k = math.Min(k, s.total-1)
	return s.kth(k + 1), s.kth(s.total - k)
}

// largest is the largest k with P(statistic <= k) <= a; -1: none.
func (s *shift) largest(a float64) float64 {
	lo, hi := -1.0, s.total
	for hi-lo > 1 {
		mid := math.Floor((lo + hi) / 2)
		if s.below(mid).P <= a*(1+1e-12) {
			lo = mid
		} else {
			hi = mid
		}
	}
	return lo
}

// searched finds a limit by bisection over the ordered comparisons: the test
// between two of them does not change.
func (s *shift) searched(a float64, lower bool) float64 {
	between := func(j float64) float64 { // a point between the j-th and the next
		switch {
		case j < 1:
			d := s.kth(1)
			return d - math.Max(1, math.Abs(d))
		case j >= s.total:
			d := s.kth(s.total)
			return d + math.Max(1, math.Abs(d))
		}
		return (s.kth(j) + s.kth(j+1)) / 2
	}
	excluded := func(j float64) bool {
		t := s.Test(between(j))
		if lower {
			return t.Below(t.Up, a)
		}
		return t.Below(t.Down, a)
	}
	lo, hi := 0.0, s.total // excluded at lo (lower), at hi (upper)
	if lower && !excluded(lo) {
		return math.Inf(-1)
	}
	if !lower && !excluded(hi) {
		return math.Inf(1)
	}
	for hi-lo > 1 {
		mid := math.Floor((lo + hi) / 2)
		if excluded(mid) == lower {
			lo = mid
		} else {
			hi = mid
		}
	}
	return s.kth(math.Max(hi, 1))
}

// kth is the k-th smallest comparison (from 1), by bisection over the ordered
// bit patterns of float64: at most 64 counts.
func (s *shift) kth(k float64) float64 {
	lo, hi := orderedBits(-math.MaxFloat64), orderedBits(math.MaxFloat64)
	for lo < hi {
		mid := lo + (hi-lo)/2
		if s.count(fromOrderedBits(mid)) >= k {
			hi = mid
		} else {
			lo = mid + 1
		}
	}
	return fromOrderedBits(lo)
}

// median of the comparisons.
func (s *shift) median() float64 {
	m := math.Floor((s.total + 1) / 2)
	d := s.kth(m)
	if math.Mod(s.total, 2) == 0 {
		d = d/2 + s.kth(m+1)/2
	}
	return d
}

// orderedBits maps a float to an integer with the same order.
func orderedBits(x float64) uint64 {
	b := math.Float64bits(x)
	if b>>63 == 1 {
		return ^b
	}
	return b | 1<<63
}

func fromOrderedBits(u uint64) float64 {
	if u>>63 == 1 {
		return math.Float64frombits(u &^ (1 << 63))
	}
	return math.Float64frombits(^u)
}

// infer builds the inference of a rank test of a shift. The error for pooling
// is that of the 95 % interval (methods.md 0).
func (s *shift) infer(word string, n float64) *Inference {
	inf := &Inference{Method: s, Word: word, Estimate: s.median(), N: n}
	low, high := s.Limits(0.025)
	if se := (high - low) / (2 * dist.NormalQuantile(0.025)); !math.IsInf(se, 0) && se > 0 {
		inf.SE = result.Some(se)
		inf.Y, inf.V = result.Some(inf.Estimate), result.Some(se*se)
	}
	return inf
}

// rankInput refuses what no rank method can use.
func rankInput(in Input, method string) *Problem {
	switch {
	case in.SystematicU > 0:
		return problem("S104", notWithU, method)
	case in.DesignEffect != 1:
		return problem("S104", notClustered, method)
	}
	return nil
}

func sorted(x []float64) []float64 {
	s := slices.Clone(x)
	slices.Sort(s)
	return s
}

// hasTies reports whether sorted values repeat.
func hasTies(s []float64) bool {
	for i := 1; i < len(s); i++ {
		if s[i] == s[i-1] {
			return true
		}
	}
	return false
}

// finiteValues refuses values that cannot be compared.
func finiteValues(who string, x []float64) *Problem {
	for _, v := range x {
		if !isFinite(v) || math.Abs(v) > largestNumber {
			return problem("S103", outsideRange, who, v)
		}
	}
	return nil
}
