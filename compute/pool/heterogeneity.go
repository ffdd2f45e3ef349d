package pool

import (
	"math"

	"steelyard/compute/dist"
)

// Heterogeneity is how far the studies differ beyond their sampling error.
// Q's test never chooses the model.
type Heterogeneity struct {
	Q, DF             float64
	P                 dist.Tail
	H2                float64
	I2, I2Low, I2High float64 // fractions; I2 of the model's own tau2
	Tau2Low, Tau2High float64 // Q-profile limits (Viechtbauer 2007, from memory)
}

// HeterogeneityOf computes it for k >= 2 studies at the variance between
// studies that the model estimated, with limits at one-sided error a.
func HeterogeneityOf(studies []Study, tau2, a float64) Heterogeneity {
	k := float64(len(studies))
	_, _, q := moments(studies, 0)
	unit, sw, cross := weightSums(studies)
	typical := unit * (k - 1) * sw / cross
	share := func(t float64) float64 {
		if math.IsInf(t, 1) {
			return 1
		}
		return t / (t + typical)
	}
	h := Heterogeneity{Q: q, DF: k - 1, P: dist.ChiSquareUpper(q, k-1), H2: q / (k - 1), I2: share(tau2)}
	h.Tau2Low = qRoot(studies, dist.ChiSquareQuantile(a, k-1))
	h.Tau2High = qRoot(studies, dist.ChiSquareLowerQuantile(a, k-1))
	h.I2Low, h.I2High = share(h.Tau2Low), share(h.Tau2High)
	return h
}

// HeterogeneityAbout is Q with its test about a mean that was estimated
// otherwise, such as from fourfold tables, with inverse-variance weights.
func HeterogeneityAbout(studies []Study, mu float64) Heterogeneity {
	h := Heterogeneity{DF: float64(len(studies) - 1)}
	for _, s := range studies {
		h.Q += (s.Y - mu) * (s.Y - mu) / s.V
	}
	h.P, h.H2 = dist.ChiSquareUpper(h.Q, h.DF), h.Q/h.DF
	return h
}

// weightSums are, at no variance between studies, the sum of w and the sum of
// w times all other w, w being unit/v with the least variance as unit, so that
// products stay in range; the others are added up, never taken off the sum, so
// that one heavy study does not hide them.
func weightSums(studies []Study) (unit, sw, cross float64) {
	unit = studies[0].V
	for _, s := range studies {
		unit = math.Min(unit, s.V)
	}
	after := make([]float64, len(studies)+1)
	for i := len(studies) - 1; i >= 0; i-- {
		after[i] = after[i+1] + unit/studies[i].V
	}
	for i, s := range studies {
		w := unit / s.V
		cross += w * (sw + after[i+1])
		sw += w
	}
	return unit, sw, cross
}

// LeaveOneOut refits the model without each study in turn; O(k^2), each fit
// started from the full one.
func LeaveOneOut(studies []Study, o Options) []Pooled {
	if len(studies) < 2 {
		return nil
	}
	full := Fit(studies, o)
	rest := make([]Study, len(studies)-1)
	out := make([]Pooled, len(studies))
	for i := range studies {
		copy(rest, studies[:i])
		copy(rest[i:], studies[i+1:])
		out[i] = refit(rest, o, full.Tau2)
	}
	return out
}

// Cumulative fits the first 1, 2, … k studies, in the order given.
func Cumulative(studies []Study, o Options) []Pooled {
	out := make([]Pooled, len(studies))
	near := math.NaN()
	for i := range studies {
		out[i] = refit(studies[:i+1], o, near)
		near = out[i].Tau2
	}
	return out
}

// Regression is a small-study check: a weighted straight line and the test of
// one of its coefficients.
type Regression struct {
	Coefficient, SE, T, DF float64
	P                      dist.Tail // two-sided: the smaller tail, to be doubled
}

// Egger regresses y/√v on 1/√v and tests the intercept with k-2 degrees of
// freedom (Egger et al. 1997, from memory). It needs k >= 3.
func Egger(studies []Study) (Regression, bool) {
	x := make([]float64, len(studies))
	y := make([]float64, len(studies))
	w := make([]float64, len(studies))
	for i, s := range studies {
		x[i], y[i], w[i] = 1/math.Sqrt(s.V), s.Y/math.Sqrt(s.V), 1
	}
	r, ok := line(x, y, w, true)
	return r, ok
}

// Peters regresses y on 1/N with weights s(N-s)/N, where N are all subjects
// and s all events of a study, and tests the slope with k-2 degrees of
// freedom (Peters et al. 2006, from memory).
func Peters(studies []Study, total, events []float64) (Regression, bool) {
	x := make([]float64, len(studies))
	y := make([]float64, len(studies))
	w := make([]float64, len(studies))
	for i, s := range studies {
		x[i], y[i], w[i] = 1/total[i], s.Y, events[i]*(total[i]-events[i])/total[i]
	}
	return line(x, y, w, false)
}

// line fits a weighted line and tests its intercept or its slope.
func line(x, y, w []float64, intercept bool) (Regression, bool) {
	k := float64(len(x))
	var sw, mx, my float64
	for i := range x {
		sw += w[i]
		mx += w[i] * x[i]
		my += w[i] * y[i]
	}
	if k < 3 || !(sw > 0) {
		return Regression{}, false
	}
	mx, my = mx/sw, my/sw
	var sxx, sxy float64
	for i := range x {
		sxx += w[i] * (x[i] - mx) * (x[i] - mx)
		sxy += w[i] * (x[i] - mx) * (y[i] - my)
	}
	if !(sxx > 0) {
		return Regression{}, false
	}
	slope := sxy / sxx
	var rss float64
	for i := range x {
		e := y[i] - my - slope*(x[i]-mx)
		rss += w[i] * e * e
	}
	s2 := rss / (k - 2)
	r := Regression{Coefficient: slope, SE: math.Sqrt(s2 / sxx), DF: k - 2}
	if intercept {
		r.Coefficient, r.SE = my-slope*mx, math.Sqrt(s2*(1/sw+mx*mx/sxx))
	}
	if !(r.SE > 0) {
		return Regression{}, false
	}
	r.T = r.Coefficient / r.SE
	r.P = dist.TUpper(math.Abs(r.T), r.DF)
	return r, true
}
