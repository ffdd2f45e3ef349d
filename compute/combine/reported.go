package combine

import (
	"math"

	"steelyard/compute/dist"
)

// Reported is a p-value as a study reports it.
type Reported struct {
	P         float64
	Sides     int    // 1 or 2
	Direction string // above, below, unknown; with one side, the alternative tested
	Relation  string // "=", "<", ">"
}

// OneSided reads a reported p-value toward an effect above (up) or below the
// null. exact is its one-sided value where direction and value are known, a
// bound "<" taken at the bound; known says so. worst is the least favourable
// value that the report admits.
func (r Reported) OneSided(up bool) (exact dist.Tail, known bool, worst dist.Tail) {
	toward := r.Direction == "above" == up
	unknown := r.Direction != "above" && r.Direction != "below"
	known = !unknown && r.Relation != ">"
	half, whole := tail(r.P/2, 1-r.P/2), tail(r.P, 1-r.P)
	if r.Sides == 1 {
		return r.oneTested(toward, unknown, known, whole)
	}
	switch {
	case unknown && r.Relation == "<":
		return certain, false, certain
	case unknown:
		return half.Complement(), false, half.Complement()
	case r.Relation == ">" && toward:
		return half, false, tail(0.5, 0.5)
	case r.Relation == ">":
		return half.Complement(), false, half.Complement()
	case toward:
		return half, known, half
	case r.Relation == "<": // beyond 1 - P/2, how far is not said
		return half.Complement(), known, certain
	}
	return half.Complement(), known, half.Complement()
}

// oneTested reads a p-value of a one-sided test.
func (r Reported) oneTested(toward, unknown, known bool, whole dist.Tail) (dist.Tail, bool, dist.Tail) {
	switch {
	case unknown && r.Relation == "=":
		if r.P >= 0.5 {
			return whole, false, whole
		}
		return whole.Complement(), false, whole.Complement()
	case unknown:
		return certain, false, certain
	case toward && r.Relation == ">":
		return whole, false, certain
	case toward:
		return whole, known, whole
	case r.Relation == "<":
		return whole.Complement(), known, certain
	}
	return whole.Complement(), known, whole.Complement()
}

func tail(p, q float64) dist.Tail {
	return dist.Tail{P: p, Q: q, LnP: math.Log(p), LnQ: math.Log(q)}
}

// Missing is the least favourable value of a result that cannot be had.
func Missing() dist.Tail { return certain }

// Tally is how likely t or more of k directions toward the claim would be if
// both were equally likely: descriptive.
func Tally(t, k int) dist.Tail {
	return dist.BinomialUpper(float64(t), float64(k), 0.5, 0.5)
}
