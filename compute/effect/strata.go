package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// Stratum is one fourfold table: events and subjects of two groups, or events
// and exposures for rates.
type Stratum struct{ X1, N1, X2, N2 float64 }

// Stratified is the common effect of several strata.
type Stratified struct {
	Estimate float64 // on the effect's scale; 0 or +Inf when one weight is 0
	// Y and V are the estimate and its variance on the analysis scale; OK is
	// false when they do not exist.
	Y, V float64
	OK   bool
	// NoEstimate says that neither direction has any weight (0/0).
	NoEstimate bool
	Used       int // strata with subjects in both groups
	Empty      int // strata without
	// Z is the test of no association (Cochran 1954, Mantel and Haenszel
	// 1959; from memory), without a continuity correction; 0 when nothing
	// varies.
	Z float64
	// Weights are the shares of the strata in the estimate, in the order given;
	// nil when they do not exist.
	Weights []float64
}

// MantelHaenszel combines strata for "risk-difference" (variance of Sato
// 1989), "risk-ratio" (Greenland and Robins 1985), "odds-ratio" (Robins,
// Breslow and Greenland 1986), "rate-ratio" and "rate-difference"; all
// sources from memory. ok is false for any other measure.
func MantelHaenszel(measure string, strata []Stratum) (out Stratified, ok bool) {
	var full []Stratum
	for _, s := range strata {
		if s.N1 > 0 && s.N2 > 0 {
			full = append(full, s)
		}
	}
	out.Used, out.Empty = len(full), len(strata)-len(full)
	out.Z = association(measure, full)
	out.Weights = shares(measure, strata)
	switch measure {
	case "risk-difference":
		return out.difference(commonRiskDifference(full)), true
	case "rate-difference":
		return out.difference(commonRateDifference(full)), true
	case "risk-ratio":
		return out.ratio(commonRiskRatio(full)), true
	case "odds-ratio":
		return out.ratio(commonOddsRatio(full)), true
	case "rate-ratio":
		return out.ratio(commonRateRatio(full)), true
	}
	return Stratified{}, false
}

// shares are the weights with which the strata's own effects average to the
// common one.
func shares(measure string, strata []Stratum) []float64 {
	w := make([]float64, len(strata))
	sum := 0.0
	for i, s := range strata {
		if !(s.N1 > 0 && s.N2 > 0) {
			continue
		}
		switch n := s.N1 + s.N2; measure {
		case "risk-difference", "rate-difference":
			w[i] = s.N1 * s.N2 / n
		case "odds-ratio":
			w[i] = s.X2 * (s.N1 - s.X1) / n
		default:
			w[i] = s.X2 * s.N1 / n
		}
		sum += w[i]
	}
	if !(sum > 0) {
		return nil
	}
	for i := range w {
		w[i] /= sum
	}
	return w
}

// difference completes a common difference.
func (s Stratified) difference(d, v float64) Stratified {
	s.Estimate, s.NoEstimate = d, s.Used == 0
	if s.Used > 0 && v > 0 {
		s.Y, s.V, s.OK = d, v, true
	}
	return s
}

// ratio completes a common ratio r/q with the variance of its logarithm.
func (s Stratified) ratio(r, q, v float64) Stratified {
	switch {
	case r == 0 && q == 0:
		s.Estimate, s.NoEstimate = 1, true
	case r == 0 || q == 0:
		s.Estimate = r / q
	default:
		s.Estimate = r / q
		s.Y, s.V, s.OK = math.Log(s.Estimate), v, v > 0
	}
	return s
}

// association is the statistic of no association, summed over strata.
func association(measure string, strata []Stratum) float64 {
	var excess, variance float64
	for _, s := range strata {
		x, n := s.X1+s.X2, s.N1+s.N2
		excess += (s.X1*s.N2 - s.X2*s.N1) / n
		switch measure {
		case "rate-ratio", "rate-difference":
			variance += x * (s.N1 / n) * (s.N2 / n)
		default:
			if n > 1 {
				variance += (s.N1 / n) * (s.N2 / n) * x * (n - x) / (n - 1)
			}
		}
	}
	return ratio(excess, math.Sqrt(variance))
}

func commonRiskDifference(strata []Stratum) (d, v float64) {
	var sum, weight, p, q float64
	for _, s := range strata {
		n := s.N1 + s.N2
		sum += (s.X1*s.N2 - s.X2*s.N1) / n
		weight += s.N1 * s.N2 / n
		p += (s.N1*s.N1*s.X2 - s.N2*s.N2*s.X1 + s.N1*s.N2*(s.N2-s.N1)/2) / (n * n)
		q += (s.X1*(s.N2-s.X2) + s.X2*(s.N1-s.X1)) / (2 * n)
	}
	if weight == 0 {
		return 0, 0
	}
	d = sum / weight
	return d, (d*p + q) / (weight * weight)
}

func commonRateDifference(strata []Stratum) (d, v float64) {
	var sum, weight, q float64
	for _, s := range strata {
		n := s.N1 + s.N2
		w := s.N1 * s.N2 / n
		sum += (s.X1*s.N2 - s.X2*s.N1) / n
		weight += w
		q += s.X1*(s.N2/n)*(s.N2/n) + s.X2*(s.N1/n)*(s.N1/n)
	}
	if weight == 0 {
		return 0, 0
	}
	return sum / weight, q / (weight * weight)
}

func commonRiskRatio(strata []Stratum) (r, q, v float64) {
	var sum float64
	for _, s := range strata {
		n := s.N1 + s.N2
		r += s.X1 * s.N2 / n
		q += s.X2 * s.N1 / n
		sum += (s.N1*s.N2*(s.X1+s.X2) - s.X1*s.X2*n) / (n * n)
	}
	return r, q, sum / (r * q)
}

func commonRateRatio(strata []Stratum) (r, q, v float64) {
	var sum float64
	for _, s := range strata {
		n := s.N1 + s.N2
		r += s.X1 * s.N2 / n
		q += s.X2 * s.N1 / n
		sum += (s.X1 + s.X2) * (s.N1 / n) * (s.N2 / n)
	}
	return r, q, sum / (r * q)
}

func commonOddsRatio(strata []Stratum) (r, q, v float64) {
	var pr, mixed, qs float64
	for _, s := range strata {
		n := s.N1 + s.N2
		ri, si := s.X1*(s.N2-s.X2)/n, s.X2*(s.N1-s.X1)/n
		pi, qi := (s.X1+s.N2-s.X2)/n, (s.X2+s.N1-s.X1)/n
		r += ri
		q += si
		pr += pi * ri
		mixed += pi*si + qi*ri
		qs += qi * si
	}
	return r, q, pr/(2*r*r) + mixed/(2*r*q) + qs/(2*q*q)
}

// strataOf counts the rows of every stratum. Rates read the exposure of each row; everything else counts rows.
func strataOf(measure string, in Input) ([]Stratum, *Problem) {
	rates := measure == "rate-ratio" || measure == "rate-difference"
	rows := len(in.Strata)
	if rows == 0 {
		return nil, problem("S112", needsStrata)
	}
	if len(in.Event) != rows || len(in.Group) != rows || rates && len(in.Exposure) != rows {
		return nil, problem("S104", needsData, "mantel-haenszel")
	}
	out := make([]Stratum, in.StrataCount)
	for i, k := range in.Strata {
		if k < 0 || int(k) >= len(out) {
			return nil, problem("S103", outsideRange, "stratum", k)
		}
		e, n := in.Event[i], 1.0
		if rates {
			n = in.Exposure[i]
		}
		if !(e >= 0) || math.IsInf(e, 0) || !rates && e > 1 {
			return nil, problem("S103", outsideRange, "event", e)
		}
		if !(n >= 0) || math.IsInf(n, 0) {
			return nil, problem("S103", outsideRange, "exposure", n)
		}
		s := &out[k]
		if in.Group[i] == 0 {
			s.X1, s.N1 = s.X1+e, s.N1+n
		} else {
			s.X2, s.N2 = s.X2+e, s.N2+n
		}
	}
	return out, nil
}

// mantelHaenszelOf makes the stratified analysis of a measure, read from the
// rows of a data file. The test of no association stands among the checks.
func mantelHaenszelOf(measure string) analysis {
	return func(in Input) (*Inference, *Problem) {
		strata, bad := strataOf(measure, in)
		if bad != nil {
			return nil, bad
		}
		var events, n float64
		for i, t := range strata {
			events += t.X1 + t.X2
			n += t.N1 + t.N2
			d := in.DesignEffect
			strata[i] = Stratum{t.X1 / d, t.N1 / d, t.X2 / d, t.N2 / d}
		}
		s, _ := MantelHaenszel(measure, strata)
		if s.Used == 0 {
			return nil, problem("S101", tooFewOf, "the strata with both groups", 0, 1)
		}
		if !s.OK && !record.MeasureOf(measure).IsRatio() {
			return nil, problem("S102", noVariation, "the outcome within the strata")
		}
		inf := stratifiedInference(measure, in, s)
		inf.Events = result.Some(events)
		if measure != "rate-ratio" && measure != "rate-difference" {
			inf.N = n
		}
		return inf, nil
	}
}

func stratifiedInference(measure string, in Input, s Stratified) *Inference {
	m := record.MeasureOf(measure)
	inf := &Inference{Word: "mantel-haenszel", Estimate: s.Estimate, NoEstimate: s.NoEstimate}
	if s.OK {
		w := Wald{Scale: m.Scale, Y: s.Y, SE: math.Sqrt(s.V), DF: math.Inf(1), Low: m.Low, High: m.High}
		inf.Method = w.WithSystematic(in.SystematicU)
		inf.Y, inf.V, inf.SE = result.Some(s.Y), result.Some(s.V), result.Some(math.Sqrt(s.V))
	} else {
		inf.Method = unbounded{m.Low, m.High}
		inf.Notes = append(inf.Notes, note("S201", sparseStrata))
	}
	two := dist.NormalUpper(math.Abs(s.Z))
	inf.Checks = append(inf.Checks, result.Check{Assumption: "common-effect", Shows: []result.Shown{
		{What: "strata used", Value: float64(s.Used)},
		{What: "strata without both groups", Value: float64(s.Empty)},
		{What: "association z", Value: s.Z},
		{What: "association p", Value: math.Min(1, 2*two.P)},
	}})
	return inf
}
