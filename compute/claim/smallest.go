package claim

import (
	"math"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// smallest finds the limit that decides the claim and expresses it as a
// margin (methods.md C).
func (a *Assessment) smallest(q Question) {
	up := q.Better != "lower"
	pick := func(lower bool) float64 {
		if lower {
			return a.Low
		}
		return a.High
	}
	null := effect.To(q.Scale, q.Null)
	// beyond reports a limit as a margin, measured from the null toward sign.
	beyond := func(limit float64, sign float64) {
		if math.IsInf(effect.To(q.Scale, limit), 0) {
			return
		}
		a.SmallestLimit = result.Some(limit)
		d := sign * (limit - q.Null)
		if q.Ratio() {
			d = math.Exp(sign * (effect.To(q.Scale, limit) - null))
			a.SmallestMargin = result.Some(math.Max(1, d))
			return
		}
		a.SmallestMargin = result.Some(math.Max(0, d))
	}
	toward := 1.0
	if !up {
		toward = -1
	}
	switch q.Claim {
	case "minimum-effect":
		if limit := pick(up); toward*(effect.To(q.Scale, limit)-null) > 0 {
			beyond(limit, toward)
		}
	case "noninferior":
		beyond(pick(up), -toward)
	case "benefit-too-small":
		beyond(pick(!up), toward)
	case "below":
		a.SmallestLimit = finite(q.Scale, a.High)
	case "above":
		a.SmallestLimit = finite(q.Scale, a.Low)
	case "equivalent":
		a.smallestRegion(q)
	case "differs", "superior", "describe":
	}
}

// smallestRegion widens the region k-fold about the null until it holds the
// interval: on the analysis scale, or on the effect's own where the region is
// a distance from the null there, so that the result is a distance too.
func (a *Assessment) smallestRegion(q Question) {
	s := q.Scale
	if q.Symmetric() && !q.Ratio() {
		s = record.Identity
	}
	g := func(x float64) float64 { return effect.To(s, x) }
	null := g(q.Null)
	k := math.Max((null-g(a.Low))/(null-g(q.Low)), (g(a.High)-null)/(g(q.High)-null))
	if math.IsInf(k, 0) || math.IsNaN(k) {
		return
	}
	k = math.Max(0, k)
	low, high := effect.From(s, null-k*(null-g(q.Low))), effect.From(s, null+k*(g(q.High)-null))
	a.SmallestLow = result.Some(math.Max(low, q.RangeLow))
	a.SmallestLimit = result.Some(math.Min(high, q.RangeHigh))
	switch {
	case !q.Symmetric():
	case q.Ratio():
		a.SmallestMargin = result.Some(high)
	default:
		a.SmallestMargin = result.Some(high - q.Null)
	}
}

// Ratio reports whether a margin is a factor.
func (q Question) Ratio() bool { return q.Scale == record.Log && q.Null == 1 }

// Symmetric reports whether the region is a distance, or for ratios a factor,
// from the null; a pair of limits need not be.
func (q Question) Symmetric() bool {
	down, up := q.Null-q.Low, q.High-q.Null
	if q.Ratio() {
		down, up = -math.Log(q.Low), math.Log(q.High)
	}
	return math.Abs(down-up) <= 1e-9*math.Max(math.Abs(down), math.Abs(up))
}

func finite(s record.Scale, x float64) result.Opt {
	if math.IsInf(effect.To(s, x), 0) {
		return result.Opt{}
	}
	return result.Some(x)
}
