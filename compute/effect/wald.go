package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/protocol/record"
)

// Wald is the method of every statistic of the form (g(estimate) - g(c))/se
// with a normal or t distribution. It is a kernel: a value, no allocation.
type Wald struct {
	Scale     record.Scale
	Y, SE     float64 // estimate and its standard error on the scale
	DF        float64 // +Inf: normal
	Low, High float64 // ends of the effect's range
}

// Test implements Method: p-up is the upper tail at (y - g(c))/se, p-down its
// complement. 0/0 counts as 0; c/0 is infinite.
func (w Wald) Test(c float64) Test {
	t := ratio(w.Y-onScale(w.Scale, c), w.SE)
	up := tUpper(t, w.DF)
	out := Test{Up: up, Down: up.Complement(), Value: t, DF: w.DF, Kind: "t"}
	if math.IsInf(w.DF, 1) {
		out.DF, out.Kind = 0, "z"
	}
	return out
}

// Limits implements Method in closed form.
func (w Wald) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return w.Low, w.High
	case a >= 1:
		return w.High, w.Low
	}
	half := tQuantile(a, w.DF) * w.SE
	return w.clip(From(w.Scale, w.Y-half)), w.clip(From(w.Scale, w.Y+half))
}

func (w Wald) clip(c float64) float64 {
	if math.IsNaN(c) {
		return w.Low
	}
	return math.Min(math.Max(c, w.Low), w.High)
}

// WithSystematic adds a standard uncertainty u, on the scale, that averaging
// does not reduce: se'^2 = se^2 + u^2 and df' = df se'^4/se^4 (u with
// infinite degrees of freedom; JCGM 100:2008, G.4.1).
func (w Wald) WithSystematic(u float64) Wald {
	if u == 0 {
		return w
	}
	se := math.Hypot(w.SE, u)
	r := se / w.SE
	w.DF *= r * r * r * r
	if math.IsNaN(w.DF) || w.SE == 0 {
		w.DF = math.Inf(1)
	}
	w.SE = se
	return w
}

// ratio is x/y with 0/0 = 0, so that no NaN leaves a statistic. The
// difference of two equal infinities counts as 0.
func ratio(x, y float64) float64 {
	if math.IsNaN(x) || x == 0 {
		return 0
	}
	if y == 0 {
		return math.Inf(sign(x))
	}
	if q := x / y; !math.IsNaN(q) {
		return q
	}
	return 0
}

func sign(x float64) int {
	if x < 0 {
		return -1
	}
	return 1
}

// tUpper is the t tail; beyond 1e20 degrees of freedom it is the normal one,
// whose difference no double holds in the reach of any test.
func tUpper(t, df float64) dist.Tail {
	if df > 1e20 {
		df = math.Inf(1)
	}
	return dist.TUpper(t, df)
}

// tQuantile is its inverse.
func tQuantile(p, df float64) float64 {
	if df > 1e20 {
		df = math.Inf(1)
	}
	return dist.TQuantile(p, df)
}
