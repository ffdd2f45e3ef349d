// Package belief says how far results move someone who started from a stated
// belief: a normal prior on the analysis scale, with or without a point mass
// at the null, before and after a normal likelihood. It judges nothing: no
// verdict ever depends on it.
//
//	b := belief.Prior{Mean: 0, SD: 0.5}
//	after := b.Update(y, v)
//	above, inside, below := after.Shares(-0.2, 0.2)
package belief

import (
	"math"

	"steelyard/compute/dist"
)

// Prior is a normal belief about the effect on its analysis scale, SD > 0.
// NullShare is the probability that the effect is exactly Null.
type Prior struct {
	Mean, SD  float64
	NullShare float64
	Null      float64
}

// FromLimits makes a prior from a median and central limits at a level, all
// on the analysis scale. The limits need not be symmetric; their width counts.
func FromLimits(median, low, high, level float64) Prior {
	return Prior{Mean: median, SD: (high - low) / (2 * dist.NormalQuantile((1-level)/2))}
}

// Update is the belief after an estimate y with variance v > 0.
func (p Prior) Update(y, v float64) Prior {
	prior, data := 1/(p.SD*p.SD), 1/v
	q := Prior{Mean: (p.Mean*prior + y*data) / (prior + data), SD: math.Sqrt(1 / (prior + data)), Null: p.Null}
	if p.NullShare > 0 {
		ln := p.LnBayesFactor(y, v)
		odds := math.Log(p.NullShare) - math.Log1p(-p.NullShare) + ln
		q.NullShare = 1 / (1 + math.Exp(-odds))
	}
	return q
}

// LnBayesFactor is the logarithm of how much better the null predicted the
// estimate than the normal belief did.
func (p Prior) LnBayesFactor(y, v float64) float64 {
	return lnNormal(y-p.Null, v) - lnNormal(y-p.Mean, v+p.SD*p.SD)
}

func lnNormal(d, v float64) float64 { return -0.5*(d*d/v) - 0.5*math.Log(2*math.Pi*v) }

// Conflict is the distance between estimate and prior in standard deviations
// of their difference; above 2 prior and data disagree.
func (p Prior) Conflict(y, v float64) float64 { return math.Abs(y-p.Mean) / math.Sqrt(v+p.SD*p.SD) }

// Shares are the probabilities that the effect is above high, between the
// limits (the point mass included) and below low; they sum to 1.
func (p Prior) Shares(low, high float64) (above, inside, below float64) {
	rest := 1 - p.NullShare
	up := dist.NormalUpper((high - p.Mean) / p.SD)
	down := dist.NormalUpper((p.Mean - low) / p.SD)
	return rest * up.P, rest*math.Max(0, up.Q-down.P) + p.NullShare, rest * down.P
}

// hillReach is how many standard deviations a density is drawn to each side,
// in hillPoints points.
const (
	hillReach  = 4.0
	hillPoints = 241
)

// Density is the continuous part of the belief at points of the analysis
// scale, up to one factor common to all beliefs; it holds 1 - NullShare.
func (p Prior) Density() (y, height []float64) {
	for k := range hillPoints {
		z := hillReach * (2*float64(k)/(hillPoints-1) - 1)
		y = append(y, p.Mean+z*p.SD)
		height = append(height, (1-p.NullShare)*math.Exp(-z*z/2)/p.SD)
	}
	return y, height
}

// NormalError is the standard error of the normal likelihood that stands for
// a t-based result at one-sided error a: se·t/z.
func NormalError(se, df, a float64) float64 {
	if math.IsInf(df, 1) || !(df > 0) {
		return se
	}
	return se * dist.TQuantile(a, df) / dist.NormalQuantile(a)
}
