package claim

import (
	"math"
	"sort"

	"steelyard/compute/effect"
	"steelyard/compute/result"
)

// curveLevels are the intervals whose limits are always points of the curve.
var curveLevels = [...]float64{0.5, 0.8, 0.95, 0.99}

// curveError is the one-sided error at the ends of the curve.
const curveError = 0.0005

// Curve is the p-value function: two-sided p at n points equally spaced on
// the analysis scale between the limits at one-sided 0.0005, plus the points
// of the question and the limits of the usual levels. A side without a limit
// is cut where the other side ends, mirrored about the estimate.
func Curve(inf *effect.Inference, q Question, n int) []result.CurvePoint {
	if inf.NullOnly {
		return nil
	}
	g := func(x float64) float64 { return effect.To(q.Scale, x) }
	levels := curveLevels[:]
	var glo, ghi float64
	if inf.Costly {
		levels = curveLevels[2:3]
		glo, ghi = reach(inf, g)
	} else {
		lo, hi := inf.Method.Limits(curveError)
		glo, ghi = g(lo), g(hi)
	}
	points := []float64{q.Null}
	if q.HasRegion {
		points = append(points, q.Low, q.High)
	}
	if q.Claim == "below" || q.Claim == "above" {
		points = append(points, q.Limit)
	}
	mid := g(inf.Estimate)
	if math.IsInf(mid, 0) || math.IsNaN(mid) {
		mid = g(q.Null)
	}
	switch {
	case math.IsInf(glo, 0) && math.IsInf(ghi, 0):
		return nil
	case math.IsInf(glo, 0):
		glo = math.Min(mid, minOf(points, g)) - math.Abs(ghi-mid)
	case math.IsInf(ghi, 0):
		ghi = math.Max(mid, maxOf(points, g)) + math.Abs(mid-glo)
	}
	if !(ghi > glo) {
		return nil
	}
	at := make([]float64, 0, n+16)
	for i := range n {
		at = append(at, effect.From(q.Scale, glo+(ghi-glo)*float64(i)/float64(n-1)))
	}
	at = append(at, points...)
	for _, level := range levels {
		l, h := inf.Method.Limits((1 - level) / 2)
		at = append(at, l, h)
	}
	return evaluate(inf, q, at)
}

// reach guesses the ends of the curve from the 95 % limits, in normal
// proportion, where finding them would cost as much as the curve itself.
func reach(inf *effect.Inference, g func(float64) float64) (lo, hi float64) {
	const wider = 3.2905267314918945 / 1.959963984540054 // normal points of 0.0005 and 0.025
	l, h := inf.Method.Limits((1 - curveLevels[2]) / 2)
	mid := g(inf.Estimate)
	if math.IsInf(mid, 0) || math.IsNaN(mid) {
		return g(l), g(h)
	}
	return mid - wider*(mid-g(l)), mid + wider*(g(h)-mid)
}

func evaluate(inf *effect.Inference, q Question, at []float64) []result.CurvePoint {
	sort.Float64s(at)
	out := make([]result.CurvePoint, 0, len(at))
	for i, c := range at {
		if y := effect.To(q.Scale, c); math.IsInf(y, 0) || math.IsNaN(y) || i > 0 && c == at[i-1] {
			continue
		}
		if p := TwoSided(inf.Method.Test(c)).P; !math.IsNaN(p) {
			out = append(out, result.CurvePoint{Value: c, P: p})
		}
	}
	return out
}

func minOf(points []float64, g func(float64) float64) float64 {
	m := math.Inf(1)
	for _, p := range points {
		if y := g(p); !math.IsInf(y, 0) {
			m = math.Min(m, y)
		}
	}
	return m
}

func maxOf(points []float64, g func(float64) float64) float64 {
	m := math.Inf(-1)
	for _, p := range points {
		if y := g(p); !math.IsInf(y, 0) {
			m = math.Max(m, y)
		}
	}
	return m
}
