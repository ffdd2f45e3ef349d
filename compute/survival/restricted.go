package survival

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// Point is one step of a Kaplan–Meier curve (Kaplan & Meier 1958, from
// memory): the share still without event from Time on, with Greenwood limits
// on the scale ln(-ln S), and the number at risk just before.
type Point struct {
	Time, Share, Low, High float64
	AtRisk, Events         float64
}

// Curve is the Kaplan–Meier curve of one group (0 first, 1 second), one point
// an event time, limits at one-sided error a, and the largest follow-up time.
func Curve(in Input, group uint8, a float64) (points []Point, last float64) {
	one := Input{}
	for i, g := range in.Group {
		if g == group {
			one.Time = append(one.Time, in.Time[i])
			one.Event = append(one.Event, in.Event[i])
			one.Group = append(one.Group, 0)
			last = math.Max(last, in.Time[i])
		}
	}
	z := dist.NormalQuantile(a)
	share, sum := 1.0, 0.0
	for _, s := range steps(one.ordered()) {
		share *= (s.n1 - s.d1) / s.n1
		if s.n1 > s.d1 {
			sum += s.d1 / (s.n1 * (s.n1 - s.d1))
		}
		p := Point{Time: s.time, Share: share, Low: share, High: share, AtRisk: s.n1, Events: s.d1}
		if share > 0 && share < 1 {
			width := z * math.Sqrt(sum) / math.Log(share)
			p.Low, p.High = math.Pow(share, math.Exp(-width)), math.Pow(share, math.Exp(width))
		}
		points = append(points, p)
	}
	return points, last
}

// restrictedMean is the area under the curve up to tau, with its variance
// (Greenwood; a term is 0 where all at risk have the event).
func restrictedMean(points []Point, tau float64) (mean, variance float64) {
	var upto []Point
	for _, p := range points {
		if p.Time <= tau {
			upto = append(upto, p)
		}
	}
	end, after := tau, 0.0
	for j := len(upto) - 1; j >= 0; j-- {
		p := upto[j]
		after += p.Share * (end - p.Time)
		end = p.Time
		if p.AtRisk > p.Events {
			variance += after * after * p.Events / (p.AtRisk * (p.AtRisk - p.Events))
		}
	}
	return end + after, variance
}

// RestrictedMeanDifference is the difference of mean times without event up
// to the horizon, first minus second, normal.
func RestrictedMeanDifference(in Input) (*effect.Inference, *effect.Problem) {
	if !bothGroups(in.Group) {
		return nil, problem("S101", emptyGroup)
	}
	var mean, variance, n [2]float64
	for _, g := range in.Group {
		n[g]++
	}
	for g := range mean {
		points, last := Curve(in, uint8(g), 0.025)
		done := len(points) > 0 && points[len(points)-1].Share == 0
		if in.Horizon > last && !done {
			return nil, problem("S106", beyondFollowUp, in.Horizon, last)
		}
		mean[g], variance[g] = restrictedMean(points, in.Horizon)
	}
	v := variance[0] + variance[1]
	if !(v > 0) {
		return nil, problem("S102", noSpread)
	}
	d := mean[0] - mean[1]
	w := effect.Wald{Scale: record.Identity, Y: d, SE: math.Sqrt(v), DF: math.Inf(1), Low: math.Inf(-1), High: math.Inf(1)}
	inf := &effect.Inference{Method: w, Word: "greenwood", Estimate: d, SE: result.Some(w.SE), Y: result.Some(d), V: result.Some(v), N: n[0] + n[1],
		Checks: []result.Check{{Assumption: "restricted-means", Shows: []result.Shown{
			{What: "mean time without event", Group: "first", Value: mean[0]}, {What: "mean time without event", Group: "second", Value: mean[1]}}}}}
	var events float64
	for i := range in.Event {
		events += in.Event[i]
	}
	inf.Events = result.Some(events)
	if least := math.Min(n[0], n[1]); least < 30 {
		inf.Notes = append(inf.Notes, note("S202", fewSubjects, least))
	}
	return inf, nil
}
