package compute

import (
	"math"
	"slices"

	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/compute/survival"
	"steelyard/protocol/record"
)

// The messages of this file.
const (
	needsAlone     = "%s needs independent individuals; with clusters give a result of the analysis that respects them, as an effect"
	noRoomForU     = "the method %s has no place for systematic_u"
	noRelation     = "one of the two readings does not vary, so that nothing can be related to it"
	tooFar         = "the readings lie so far apart that their spread is no number"
	sharesCompared = "the method %s needs independent individuals; the shares of clusters are compared by welch"
)

// madeKey names an inference: what it depends on.
type madeKey struct {
	inputKey
	method string
	stated bool
	a, u   float64
}

// made is a method's answer.
type made struct {
	inf     *effect.Inference
	problem *result.Note
}

// analyse asks the measure's method about an entry, once. pooling says that
// the systematic error enters later, once for all studies.
func (r *run) analyse(s spec, e entry, pooling bool) (*effect.Inference, *result.Note) {
	in := r.input(e, s)
	if pooling {
		in.SystematicU = 0
	}
	k := madeKey{inputKey: s.key(e), method: s.method, stated: s.stated, u: in.SystematicU}
	switch s.measure.Word {
	case "mean", "mean-difference", "paired-mean-difference", "ratio-of-means":
		k.a = s.a // their notes speak of it
	}
	m, ok := r.made[k]
	if !ok {
		m.inf, m.problem = r.method(s, in, r.clusterMeans(e, s))
		if m.problem == nil && m.inf.Costly {
			m.inf.Method = &remembered{Method: m.inf.Method, limits: map[float64][2]float64{}, tests: map[float64]effect.Test{}}
		}
		r.made[k] = m
	}
	return m.inf, m.problem
}

// remembered is a costly method that is asked everything once.
type remembered struct {
	effect.Method
	limits map[float64][2]float64
	tests  map[float64]effect.Test
}

func (m *remembered) Test(c float64) effect.Test {
	t, ok := m.tests[c]
	if !ok {
		t = m.Method.Test(c)
		m.tests[c] = t
	}
	return t
}

func (m *remembered) Limits(a float64) (low, high float64) {
	l, ok := m.limits[a]
	if !ok {
		l[0], l[1] = m.Method.Limits(a)
		m.limits[a] = l
	}
	return l[0], l[1]
}

// method dispatches an analysis to its package.
func (r *run) method(s spec, in effect.Input, clustered bool) (*effect.Inference, *result.Note) {
	if in.Given == nil && in.Time != nil {
		return timeToEvent(s, in)
	}
	if clustered && in.Given == nil && s.measure.Word == "risk-difference" {
		return clusterShares(s, in)
	}
	if p := in.Pairs; s.measure.Shape == record.OneSample && p.First != nil {
		switch {
		case p.FirstSD == 0 || p.SecondSD == 0:
			return nil, &result.Note{Code: "S102", Message: noRelation}
		case math.IsNaN(p.R) || math.IsInf(p.FirstSD, 0) || math.IsInf(p.SecondSD, 0):
			return nil, &result.Note{Code: "S103", Message: tooFar}
		}
	}
	word := s.method
	if in.Given != nil && !s.stated {
		word = ""
	}
	return effect.Analyse(s.measure.Word, word, in)
}

// timeToEvent analyses times. Clusters have no place there; a systematic
// error has one only where the statistic is an estimate over its error.
func timeToEvent(s spec, in effect.Input) (*effect.Inference, *result.Note) {
	if in.DesignEffect != 1 {
		return nil, &result.Note{Code: "S104", Message: needsAlone, Args: []any{s.measure.Word}}
	}
	inf, problem := (*effect.Inference)(nil), (*result.Note)(nil)
	switch s.measure.Word {
	case "hazard-ratio":
		inf, problem = survival.HazardRatio(s.method, timesOf(in))
	case "restricted-mean-difference":
		inf, problem = survival.RestrictedMeanDifference(timesOf(in))
	}
	if problem != nil || in.SystematicU == 0 {
		return inf, problem
	}
	w, ok := inf.Method.(effect.Wald)
	if !ok {
		return nil, &result.Note{Code: "S104", Message: noRoomForU, Args: []any{inf.Word}}
	}
	w = w.WithSystematic(in.SystematicU)
	inf.Method, inf.SE, inf.V = w, result.Some(w.SE), result.Some(w.SE*w.SE)
	return inf, nil
}

// clusterShares compares the shares of clusters as values (methods.md 0).
func clusterShares(s spec, in effect.Input) (*effect.Inference, *result.Note) {
	inf, problem := effect.Analyse("mean-difference", "welch", in)
	if problem != nil {
		return nil, problem
	}
	if w, ok := inf.Method.(effect.Wald); ok {
		w.Low, w.High = s.measure.Low, s.measure.High
		inf.Method = w
	}
	inf.Events = result.Some(in.First.Events + in.Second.Events)
	if s.stated {
		inf.Notes = append(inf.Notes, result.Note{Code: "S206", Message: sharesCompared, Args: []any{s.method}})
	}
	return inf, nil
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
