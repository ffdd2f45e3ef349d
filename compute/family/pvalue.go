package family

import (
	"math"
	"sort"

	"steelyard/compute/dist"
)

// lnTiny is where the logarithm takes over: below it p has lost digits.
const lnTiny = -667

// pvalue is a nonnegative number with its logarithm. Products and
// comparisons use the number itself while it is exact, so that a tie in the
// record stays a tie, and the logarithm when it is too small.
type pvalue struct{ p, ln float64 }

func pvalueOf(t dist.Tail) pvalue { return pvalue{t.P, t.LnP} }

func (v pvalue) times(k float64) pvalue {
	if k == 0 {
		return pvalue{0, math.Inf(-1)}
	}
	return pvalue{v.p * k, v.ln + math.Log(k)}
}

// over divides; a weight of 0 can never establish anything.
func (v pvalue) over(w float64) pvalue {
	if w <= 0 {
		return pvalue{1, 0}
	}
	return pvalue{v.p / w, v.ln - math.Log(w)}
}

func (v pvalue) capped() pvalue {
	if v.ln >= 0 || v.p >= 1 {
		return pvalue{1, 0}
	}
	return v
}

// less compares strictly.
func (v pvalue) less(w pvalue) bool {
	if v.ln < lnTiny && w.ln < lnTiny {
		return v.ln < w.ln
	}
	return v.p < w.p
}

func (v pvalue) below(a float64) bool { return v.p < a }

func larger(v, w pvalue) pvalue {
	if v.less(w) {
		return w
	}
	return v
}

func smaller(v, w pvalue) pvalue {
	if w.less(v) {
		return w
	}
	return v
}

func (v pvalue) tail() dist.Tail {
	switch {
	case v.p >= 1:
		return dist.TailOf(1)
	case v.ln < lnTiny:
		return dist.TailOfLn(v.ln)
	}
	return dist.TailOf(v.p)
}

// sortedIndex lists positions by rising q, ties in the order given.
func sortedIndex(q []pvalue) []int {
	order := make([]int, len(q))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool { return q[order[a]].less(q[order[b]]) })
	return order
}
