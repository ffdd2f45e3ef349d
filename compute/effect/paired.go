package effect

import "math"

// differencesOf reduces paired readings to their differences, first minus
// second: from the values, from the parts with their correlation, or as
// given.
func differencesOf(p Pairs, design float64) (sample, *Problem) {
	if p.First != nil && p.Second != nil {
		d := make([]float64, min(len(p.First), len(p.Second)))
		for i := range d {
			d[i] = p.First[i] - p.Second[i]
		}
		return sampleOfValues(d, design), nil
	}
	s := summary(p.N, p.Mean, p.SD, design)
	if p.HasParts {
		if !(p.R >= -1 && p.R <= 1) {
			return s, problem("S103", outsideRange, "the pairs' r", p.R)
		}
		if !(p.FirstSD >= 0) {
			return s, problem("S103", outsideRange, "the pairs' first sd", p.FirstSD)
		}
		if !(p.SecondSD >= 0) {
			return s, problem("S103", outsideRange, "the pairs' second sd", p.SecondSD)
		}
		// s1^2 + s2^2 - 2 r s1 s2 without cancellation where r is near 1.
		d := p.FirstSD - p.SecondSD
		sd := math.Sqrt(math.Max(0, d*d+2*(1-p.R)*p.FirstSD*p.SecondSD))
		s = summary(p.N, p.FirstMean-p.SecondMean, sd, design)
	}
	return s, nil
}

func pairedT(in Input) (*Inference, *Problem) {
	s, bad := differencesOf(in.Pairs, in.DesignEffect)
	if bad != nil {
		return nil, bad
	}
	return oneSampleT("the pairs' difference", s, in)
}
