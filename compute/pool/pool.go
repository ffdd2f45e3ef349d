// Package pool puts several independent studies of one effect together: the
// common and the random effects model, heterogeneity, prediction, each study
// left out in turn, and the evidence as it grew. It takes estimates and
// variances on the analysis scale and knows no record, claim or measure.
//
//	f := pool.Fit(studies, pool.Options{Random: true, Between: pool.REML, Interval: pool.HartungKnapp, Guard: true})
//	low := f.Mu - dist.TQuantile(0.025, f.DF)*f.SE
package pool

import (
	"math"

	"steelyard/compute/dist"
)

// Study is one study's estimate and its sampling variance, V > 0.
type Study struct{ Y, V float64 }

// Between names an estimator of the variance between studies.
type Between string

// The estimators.
const (
	REML             Between = "reml"
	PauleMandel      Between = "paule-mandel"
	DerSimonianLaird Between = "dersimonian-laird"
	SidikJonkman     Between = "sidik-jonkman"
)

// Interval names how the error of a random-effects mean is computed.
type Interval string

// The intervals.
const (
	HartungKnapp Interval = "hartung-knapp"
	Normal       Interval = "normal"
)

// Options choose a model. The zero value is the common-effect model.
type Options struct {
	Random   bool
	Between  Between
	Interval Interval
	Guard    bool // never narrower than the normal random-effects interval
}

// Pooled is a fitted model.
type Pooled struct {
	Mu, SE  float64   // SE as the interval and the tests use it
	DF      float64   // +Inf: normal
	Tau2    float64   // 0 under the common-effect model
	Weights []float64 // shares, summing to 1; nil from LeaveOneOut and Cumulative

	// Hartung–Knapp: Ratio is q; Floored says that the guard raised it to 1,
	// and Unfloored is the standard error it replaced.
	Ratio, Unfloored float64
	Floored          bool
}

// Fit pools k >= 1 studies.
func Fit(studies []Study, o Options) Pooled {
	p := refit(studies, o, math.NaN())
	_, sw, _ := moments(studies, p.Tau2)
	p.Weights = make([]float64, len(studies))
	for i, s := range studies {
		p.Weights[i] = 1 / (s.V + p.Tau2) / sw
	}
	return p
}

// refit is Fit without the weights, started from a known variance between
// studies, for fits of nearly the same studies.
func refit(studies []Study, o Options, near float64) Pooled {
	if !o.Random {
		return o.at(studies, 0)
	}
	return o.at(studies, o.Between.tau2(studies, near))
}

// at computes the mean and its error for a given variance between studies.
func (o Options) at(studies []Study, tau2 float64) Pooled {
	mu, sw, q := moments(studies, tau2)
	p := Pooled{Mu: mu, SE: math.Sqrt(1 / sw), DF: math.Inf(1), Tau2: tau2}
	k := len(studies)
	if !o.Random || o.Interval != HartungKnapp || k < 2 {
		return p
	}
	p.DF = float64(k - 1)
	p.Ratio = q / p.DF
	p.Unfloored = math.Sqrt(p.Ratio / sw)
	if o.Guard && p.Ratio < 1 {
		p.Floored = true
		return p
	}
	p.SE = p.Unfloored
	return p
}

// moments returns the weighted mean, the sum of weights and Q at a variance
// between studies.
func moments(studies []Study, tau2 float64) (mu, sw, q float64) {
	first, d, sw := centre(studies, tau2)
	for i := range studies {
		e := studies[i].Y - first - d
		q += e * e / (studies[i].V + tau2)
	}
	return first + d, sw, q
}

// centre returns the weighted mean, as the effect of the first study and the
// distance from it, and the sum of weights.
func centre(studies []Study, tau2 float64) (first, d, sw float64) {
	first = studies[0].Y
	var swy float64
	for i := range studies {
		w := 1 / (studies[i].V + tau2)
		sw += w
		swy += w * (studies[i].Y - first)
	}
	return first, swy / sw, sw
}

// Limits is the interval at one-sided error a.
func (p Pooled) Limits(a float64) (low, high float64) {
	half := dist.TQuantile(a, p.DF) * p.SE
	return p.Mu - half, p.Mu + half
}

// Prediction is the interval for the effect in a new setting like these
// (Higgins, Thompson & Spiegelhalter 2009, from memory): t with k-2 degrees
// of freedom. It needs k >= 3.
func (p Pooled) Prediction(k int, a float64) (low, high float64, ok bool) {
	if k < 3 {
		return 0, 0, false
	}
	half := dist.TQuantile(a, float64(k-2)) * math.Sqrt(p.Tau2+p.SE*p.SE)
	return p.Mu - half, p.Mu + half, true
}
