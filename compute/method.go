package compute

import (
	"math"
	"slices"

	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/compute/survival"
)

// method dispatches an analysis to its package.
func (r *run) method(s spec, in effect.Input) (*effect.Inference, *result.Note) {
	if in.Given == nil && in.Time != nil {
		t := timesOf(in)
		switch s.measure.Word {
		case "hazard-ratio":
			return survival.HazardRatio(s.method, t)
		case "restricted-mean-difference":
			return survival.RestrictedMeanDifference(t)
		}
	}
	word := s.method
	if in.Given != nil && !s.stated {
		word = ""
	}
	return effect.Analyse(s.measure.Word, word, in)
}

// timesOf is what the survival methods read.
func timesOf(in effect.Input) survival.Input {
	return survival.Input{Time: in.Time, Event: in.Event, Group: in.Group, Strata: in.Strata, Horizon: in.Horizon}
}

// curvesOf are the Kaplan–Meier curves of an entry with times, thinned to at
// most curveSteps steps a group for the figure.
func (r *run) curvesOf(in effect.Input, groups [2]string) []result.SurvivalCurve {
	const curveSteps, counted = 300, 6
	var out []result.SurvivalCurve
	longest := 0.0
	for _, t := range in.Time {
		longest = math.Max(longest, t)
	}
	for g := range uint8(2) {
		points, _ := survival.Curve(timesOf(in), g, (1-r.level)/2)
		c := result.SurvivalCurve{Group: groups[g]}
		for i, p := range points {
			if every := len(points)/curveSteps + 1; i%every == 0 || i == len(points)-1 {
				c.Time, c.Share = append(c.Time, p.Time), append(c.Share, p.Share)
				c.Low, c.High = append(c.Low, p.Low), append(c.High, p.High)
			}
		}
		for i := range counted {
			at := longest * float64(i) / (counted - 1)
			c.RiskTimes, c.RiskCounts = append(c.RiskTimes, at), append(c.RiskCounts, atRisk(in, g, at))
		}
		c.Censored = censored(in, g, curveSteps)
		out = append(out, c)
	}
	return out
}

// atRisk counts a group's subjects still followed just before a time.
func atRisk(in effect.Input, group uint8, at float64) float64 {
	n := 0.0
	for i, t := range in.Time {
		if in.Group[i] == group && t >= at {
			n++
		}
	}
	return n
}

// censored are a group's times of censoring, in order, at most so many.
func censored(in effect.Input, group uint8, most int) []float64 {
	var all []float64
	for i, t := range in.Time {
		if in.Group[i] == group && in.Event[i] == 0 {
			all = append(all, t)
		}
	}
	slices.Sort(all)
	if len(all) <= most {
		return all
	}
	var out []float64
	for i := range most {
		out = append(out, all[i*len(all)/most])
	}
	return out
}
