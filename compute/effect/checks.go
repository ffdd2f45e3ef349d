package effect

import (
	"math"
	"slices"

	"steelyard/compute/numeric"
	"steelyard/compute/result"
)

// The words under which checks name the groups; the door puts the record's
// own names in their place.
const (
	firstGroup  = "first"
	secondGroup = "second"
)

// normality is what the values of a group show of normal means: their number,
// skewness m3/m2^1.5, excess kurtosis m4/m2^2 - 3 and how many lie far out.
// Without values only the number is shown.
func normality(group string, n float64, values []float64) []result.Shown {
	shown := []result.Shown{{What: "n", Group: group, Value: n}}
	if len(values) < 3 {
		return shown
	}
	m := numeric.MomentsOf(values)
	return append(shown, shape(group, m, values)...)
}

// shape is the part of normality that needs values, with their moments.
func shape(group string, m numeric.Moments, values []float64) []result.Shown {
	var shown []result.Shown
	add := func(what string, v float64) {
		if !math.IsNaN(v) && !math.IsInf(v, 0) {
			shown = append(shown, result.Shown{What: what, Group: group, Value: v})
		}
	}
	if m.M2 > 0 {
		add("skewness", math.Sqrt(m.N)*m.M3/math.Pow(m.M2, 1.5))
		add("excess kurtosis", m.N*m.M4/(m.M2*m.M2)-3)
	}
	add("outlying values", float64(outlying(values)))
	return shown
}

// outlying counts the values further than three times the distance between
// the quartiles outside them (Tukey 1977, Exploratory Data Analysis: "far
// out"; from memory). Quartiles are the medians of the lower and upper half.
func outlying(values []float64) int {
	n := len(values)
	if n < 4 {
		return 0
	}
	s := slices.Clone(values)
	half := n / 2
	q1 := middle(s, 0, half)
	q3 := middle(s, n-half, half)
	far := 3 * (q3 - q1)
	count := 0
	for _, x := range values {
		if x < q1-far || x > q3+far {
			count++
		}
	}
	return count
}

// middle is the median of the order statistics from+1 … from+n.
func middle(s []float64, from, n int) float64 {
	hi := numeric.KthSmallest(s, from+n/2+1)
	if n%2 == 1 {
		return hi
	}
	return hi/2 + numeric.KthSmallest(s, from+n/2)/2
}

// spreadRatio is what two groups show of equal variances; nothing where one
// does not vary.
func spreadRatio(s1, s2 float64) []result.Shown {
	if r := s1 / s2; r > 0 && !math.IsInf(r, 0) && !math.IsNaN(r) {
		return []result.Shown{{What: "spread ratio", Value: r}}
	}
	return nil
}

// check makes a check from what its parts show.
func check(assumption string, parts ...[]result.Shown) result.Check {
	return result.Check{Assumption: assumption, Shows: slices.Concat(parts...)}
}
