package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
	"steelyard/protocol/record"
)

// Inversion makes limits from a test: where and how to look for them.
type Inversion struct {
	Test  func(c float64) Test // both one-sided p-values at any c of the range
	Scale record.Scale         // coordinate of the search
	// Low and High are the ends of the effect's range.
	Low, High float64
	// Start is where the search starts: the estimate, on the effect's scale.
	// At an end of the range any value inside serves.
	Start float64
	// Step is the first step on the coordinate, about one standard error; 0:
	// not known.
	Step float64
	// Monotone says that both p-values are monotone in c, so that the first
	// crossing is the only one.
	Monotone bool
}

// beyond is how many further doublings are looked at for a second crossing
// where a test is not known to be monotone.
const beyond = 6

// maxDoublings bounds the search: 2^80 first steps are further than any
// double that a record can hold.
const maxDoublings = 80

// Limits inverts the test at one-sided error a: low is the point below which
// p-up stays at most a, high the point above which p-down does. A limit that
// does not exist is the end of the range. Where p is not monotone the
// outermost crossing counts.
func (v Inversion) Limits(a float64) (low, high float64) {
	return v.side(a, -1), v.side(a, +1)
}

// side finds one limit; direction is -1 for the lower.
func (v Inversion) side(a, direction float64) float64 {
	end := v.High
	if direction < 0 {
		end = v.Low
	}
	switch {
	case !(a > 0):
		return end
	case a >= 1:
		if direction < 0 { // every value is excluded from this side
			return v.High
		}
		return v.Low
	}
	za := deviate(dist.Tail{P: a, Q: 1 - a, LnP: math.Log(a), LnQ: math.Log1p(-a)})
	origin := onScale(v.Scale, v.Start)
	if math.IsInf(origin, 0) || math.IsNaN(origin) {
		origin = v.inside()
	}
	at := func(u float64) float64 { return v.clip(From(v.Scale, origin+direction*u)) }
	// h is negative where c is compatible and grows outward.
	h := func(u float64) float64 {
		t := v.Test(at(u))
		if direction < 0 {
			return finite(deviate(t.Up) - za)
		}
		return finite(deviate(t.Down) - za)
	}
	inner, outer, found := v.bracket(h, at, end)
	if !found {
		return end
	}
	u, ok := numeric.Root(h, inner, outer, 1e-12)
	if !ok {
		u = outer
	}
	return at(u)
}

// bracket returns distances from the origin between which h changes sign for
// the last time, going outward.
func (v Inversion) bracket(h, at func(float64) float64, end float64) (inner, outer float64, found bool) {
	step := v.Step
	if !(step > 0) || math.IsInf(step, 0) {
		step = math.Max(1e-3*math.Abs(at(0)), 0.25)
		if v.Scale != record.Identity {
			step = 0.25
		}
	}
	prev, prevH := 0.0, h(0)
	if prevH >= 0 {
		// The start itself is excluded: the limit lies on the other side of it.
		for range maxDoublings {
			u := prev - step
			hu := h(u)
			if hu < 0 {
				return u, prev, true
			}
			if at(u) == at(prev) {
				break
			}
			prev, step = u, 2*step
		}
		return 0, 0, false
	}
	further := -1 // doublings looked at since the last crossing; -1: none yet
	for range maxDoublings {
		u := prev + step
		hu := h(u)
		if prevH < 0 && hu >= 0 {
			inner, outer, found, further = prev, u, true, 0
			if v.Monotone {
				return inner, outer, true
			}
		} else if found && hu >= 0 {
			if further++; further >= beyond {
				return inner, outer, true
			}
		} else if found {
			further = 0
		}
		if at(u) == end {
			if hu < 0 {
				return 0, 0, false // compatible up to the very end
			}
			return inner, outer, found
		}
		prev, prevH, step = u, hu, 2*step
	}
	return inner, outer, found && prevH >= 0
}

// inside is a coordinate inside the range, for estimates at its end.
func (v Inversion) inside() float64 {
	lo, hi := onScale(v.Scale, v.Low), onScale(v.Scale, v.High)
	switch {
	case math.IsInf(lo, -1) && math.IsInf(hi, 1):
		return 0
	case math.IsInf(lo, -1):
		return hi - 1
	case math.IsInf(hi, 1):
		return lo + 1
	}
	return (lo + hi) / 2
}

func (v Inversion) clip(c float64) float64 { return math.Min(math.Max(c, v.Low), v.High) }

// finite keeps infinities out of the root search.
func finite(x float64) float64 { return math.Max(-1e150, math.Min(x, 1e150)) }

// deviate is z with P(Z > z) = p, from whichever side of the pair is small,
// and from its logarithm where it underflows.
func deviate(t dist.Tail) float64 {
	switch {
	case t.P > 0.5:
		return -deviate(t.Complement())
	case t.P >= 1e-290:
		return dist.NormalQuantile(t.P)
	case math.IsInf(t.LnP, -1):
		return math.Inf(1)
	default:
		return dist.NormalQuantileLn(t.LnP)
	}
}
