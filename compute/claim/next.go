package claim

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/result"
)

// powers are the two powers for which the next size is worked out.
var powers = [2]float64{0.8, 0.9}

// Next works out, by normal theory on the analysis scale, how many subjects
// would settle an open claim if the present estimate held: in a new study
// alone, and added to the present ones (methods.md K). It is nil where the
// method gives no error or no count of subjects.
func Next(inf *effect.Inference, q Question, a Assessment) *result.WhatNext {
	w := &result.WhatNext{ExcludedLow: finite(q.Scale, a.Low), ExcludedHigh: finite(q.Scale, a.High)}
	if !inf.Y.OK || !inf.V.OK || !(inf.V.V > 0) || !(inf.N > 0) || math.IsInf(inf.Y.V, 0) || q.Claim == "describe" {
		if !w.ExcludedLow.OK && !w.ExcludedHigh.OK {
			return nil
		}
		return w
	}
	g := gaps(q, inf.Y.V)
	for _, e := range g {
		if e <= 0 {
			w.NoSize = true
			return w
		}
	}
	z := dist.NormalQuantile(q.Error())
	have := 1 / inf.V.V
	perSubject := have / inf.N
	if inf.DF.OK { // as a normal estimate, the present one carries a little less
		r := z / dist.TQuantile(q.Error(), inf.DF.V)
		have *= r * r
	}
	sizes := [2]*[2]result.Opt{{}, {}}
	for i, power := range powers {
		sizes[0][i] = subjects(g, z, power, 0, perSubject)
		sizes[1][i] = subjects(g, z, power, have, perSubject)
	}
	w.NewStudyN80, w.NewStudyN90 = sizes[0][0], sizes[0][1]
	w.AddedN80, w.AddedN90 = sizes[1][0], sizes[1][1]
	return w
}

// gaps are the distances of the estimate from the claim's points, toward the
// claim, on the analysis scale; all must be positive for any size to do.
func gaps(q Question, y float64) []float64 {
	if q.Claim == "differs" {
		return []float64{math.Abs(y - effect.To(q.Scale, q.Null))}
	}
	var out []float64
	for _, s := range sidesOf(q).For {
		d := y - effect.To(q.Scale, s.point)
		if !s.greater {
			d = -d
		}
		out = append(out, d)
	}
	return out
}

// subjects is the smallest whole number whose added information reaches the
// power, beside the information already there.
func subjects(gaps []float64, z, power, have, perSubject float64) result.Opt {
	enough := func(added float64) bool { return reached(gaps, z, have, added) >= power }
	hi := perSubject
	for range 200 {
		if enough(hi) {
			lo := 0.0
			for range 200 {
				mid := (lo + hi) / 2
				if enough(mid) {
					hi = mid
				} else {
					lo = mid
				}
			}
			return result.Some(math.Max(1, math.Ceil(hi/perSubject-1e-9)))
		}
		hi *= 2
	}
	return result.Opt{}
}

// reached is the planned chance that the claim is established once the
// information has grown by added: each gap's own, less what they miss together.
func reached(gaps []float64, z, have, added float64) float64 {
	missed := 0.0
	for _, e := range gaps {
		total := have + added
		missed += dist.NormalUpper((e*total - z*math.Sqrt(total)) / math.Sqrt(added)).P
	}
	return 1 - missed
}
