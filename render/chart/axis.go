// Package chart draws the figures of a record as vector marks: intervals that
// hang from a beam, p-value functions, curves over time. It knows scales and
// marks, not claims; every text it is given comes from elsewhere, and it
// computes no result.
//
//	ax := chart.NewAxis(false, values...)
//	d := chart.Beam{Axis: ax, Rows: rows}.Draw()
package chart

import (
	"math"

	"steelyard/render/number"
)

// Axis is a scale with its range, in the units that a reader sees.
type Axis struct {
	Log    bool
	Lo, Hi float64 // range; Lo < Hi
	Title  string  // effect and unit
	Short  string  // the same in fewer words, where the title has no room; "" for none
	Unit   string  // never cut from the title; "" for none
	Better string  // which direction is better, "" for neither
}

// NewAxis makes an axis that covers the finite ones of the values, with a
// margin on both sides. On a log axis only positive values count. Without any
// value the range is 0 to 1, or 0.5 to 2 on a log axis.
func NewAxis(log bool, values ...float64) Axis {
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) || log && v <= 0 {
			continue
		}
		lo, hi = min(lo, v), max(hi, v)
	}
	a := Axis{Log: log, Lo: lo, Hi: hi}
	switch {
	case lo > hi && log:
		a.Lo, a.Hi = 0.5, 2
	case lo > hi:
		a.Lo, a.Hi = 0, 1
	case lo == hi && log:
		a.Lo, a.Hi = widenLog(lo/2, hi*2, 0)
	case lo == hi:
		w := math.Abs(lo) / 2
		if w == 0 {
			w = 1
		}
		a.Lo, a.Hi = lo-w, hi+w
	case log:
		a.Lo, a.Hi = widenLog(lo, hi, 0.06)
	default:
		w := (hi/2 - lo/2) * 2 * 0.06
		a.Lo, a.Hi = lo-w, hi+w
	}
	if math.IsInf(a.Lo, 0) || math.IsInf(a.Hi, 0) || !(a.Lo < a.Hi) {
		a.Lo, a.Hi = lo, hi
	}
	if !(a.Lo < a.Hi) { // the values differ by less than a float can widen
		a.Lo, a.Hi = math.Nextafter(lo, math.Inf(-1)), math.Nextafter(hi, math.Inf(1))
		if math.IsInf(a.Hi, 1) {
			a.Hi = hi
		}
		if log && a.Lo <= 0 || math.IsInf(a.Lo, -1) {
			a.Lo = lo
		}
	}
	return a
}

// widenLog widens a range on the log scale by a share of its width.
func widenLog(lo, hi, share float64) (float64, float64) {
	w := (math.Log(hi) - math.Log(lo)) * share
	l, h := math.Exp(math.Log(lo)-w), math.Exp(math.Log(hi)+w)
	if l <= 0 {
		l = math.SmallestNonzeroFloat64
	}
	if math.IsInf(h, 1) {
		h = math.MaxFloat64
	}
	return l, h
}

// Widened extends the range to hold further values, on each side by at most
// times the present width (on a log axis: of its logarithm).
func (a Axis) Widened(times float64, values ...float64) Axis {
	lo, hi := a.Lo, a.Hi
	least, most := lo-(hi-lo)*times, hi+(hi-lo)*times
	if a.Log {
		w := math.Exp((math.Log(hi) - math.Log(lo)) * times)
		least, most = lo/w, hi*w
	}
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) || a.Log && v <= 0 {
			continue
		}
		lo, hi = min(lo, math.Max(v, least)), max(hi, math.Min(v, most))
	}
	if lo > 0 || !a.Log {
		if !math.IsInf(lo, 0) && !math.IsInf(hi, 0) {
			a.Lo, a.Hi = lo, hi
		}
	}
	return a
}

// At is where a value stands between 0 and 1 along the axis; values outside
// the range stand at its ends.
func (a Axis) At(v float64) float64 {
	switch {
	case math.IsNaN(v), v <= a.Lo:
		return 0
	case v >= a.Hi:
		return 1
	}
	p := (v/2 - a.Lo/2) / (a.Hi/2 - a.Lo/2)
	if a.Log {
		lo := math.Log(a.Lo)
		p = (math.Log(v) - lo) / (math.Log(a.Hi) - lo)
	}
	if !(p >= 0) { // an axis without a range
		return 0
	}
	return min(p, 1)
}

// Inside reports whether a value stands on the axis.
func (a Axis) Inside(v float64) bool { return v >= a.Lo && v <= a.Hi }

// Tick is one mark of an axis.
type Tick struct {
	V    float64
	Text string
}

// Ticks chooses round values inside the range: at most n, at least one where
// the range holds a round value. Linear axes step by 1, 2 or 5; log axes use
// the ratios that people speak of.
func (a Axis) Ticks(n int) []Tick {
	n = max(2, n)
	var v []float64
	if a.Log {
		v = logTicks(a.Lo, a.Hi, n)
	} else {
		v = linearTicks(a.Lo, a.Hi, n)
	}
	out := make([]Tick, 0, len(v))
	for _, x := range v {
		out = append(out, Tick{x, number.Plain(x)})
	}
	return out
}

// linearTicks are the multiples of a 1-2-5 step inside the range.
func linearTicks(lo, hi float64, n int) []float64 {
	half := hi/2 - lo/2
	if !(half > 0) || math.IsInf(half, 0) {
		return nil
	}
	raw := half / float64(n) * 2
	e := math.Floor(math.Log10(raw))
	for _, m := range []float64{1, 2, 5, 10, 20, 50} {
		step := m * math.Pow(10, e)
		if step == 0 || math.IsInf(step, 0) {
			continue
		}
		first, last := math.Ceil(lo/step), math.Floor(hi/step)
		count := last - first + 1
		if math.IsNaN(count) || count > float64(n) {
			continue
		}
		var out []float64
		for k := first; k <= last; k++ {
			v := roundTo(k, m, e)
			if k == first && len(out) > 0 || v < lo || v > hi {
				continue
			}
			if len(out) > 0 && v <= out[len(out)-1] {
				return out // steps finer than a float
			}
			out = append(out, v)
			if k == k+1 {
				break
			}
		}
		return out
	}
	return nil
}

// roundTo is k·m·10^e without the dust of a product.
func roundTo(k, m, e float64) float64 {
	if e < 0 && e > -300 {
		return k * m / math.Pow(10, -e)
	}
	return k * m * math.Pow(10, e)
}

// ratioSets are the ratios to choose ticks from, coarse to fine, within one
// factor of ten.
var ratioSets = [...][]float64{
	{1},
	{1, 3},
	{1, 2, 5},
	{1, 1.5, 2, 3, 5, 7},
	{1, 1.25, 1.5, 2, 2.5, 3, 4, 5, 6, 7, 8, 9},
	{1, 1.1, 1.2, 1.3, 1.4, 1.5, 1.6, 1.8, 2, 2.2, 2.5, 3, 3.5, 4, 4.5, 5, 5.5, 6, 6.5, 7, 7.5, 8, 8.5, 9, 9.5},
}

// logTicks chooses ratios inside the range; narrow ranges step evenly.
func logTicks(lo, hi float64, n int) []float64 {
	if !(lo > 0) || !(hi > lo) {
		return nil
	}
	from, to := math.Floor(math.Log10(lo)), math.Ceil(math.Log10(hi))
	if math.Log10(hi)-math.Log10(lo) > float64(n) {
		step := math.Ceil((to - from) / float64(n))
		var out []float64
		for e := math.Ceil(from/step) * step; e <= to; e += step {
			if v := math.Pow(10, e); v >= lo && v <= hi && v > 0 && !math.IsInf(v, 0) {
				out = append(out, v)
			}
		}
		return out
	}
	var best []float64
	for _, set := range ratioSets {
		var out []float64
		for e := from; e <= to; e++ {
			for _, m := range set {
				if v := roundTo(1, m, e); v >= lo && v <= hi && v > 0 {
					out = append(out, v)
				}
			}
		}
		if len(out) > n {
			break
		}
		best = out
	}
	if len(best) < 3 {
		if even := linearTicks(lo, hi, n); len(even) > len(best) {
			return even
		}
	}
	return best
}

// textWidth is about how wide a text is at a size: digits of the faces used
// are 0.556 of it.
func textWidth(s string, size float64) float64 {
	n := 0.0
	for _, r := range s {
		switch {
		case r == ' ' || r == '\u00a0' || r == '.' || r == ',' || r == ':' || r == ';' || r == 'i' || r == 'l' || r == '(' || r == ')':
			n += 0.33
		case r == '\u202f' || r == '\u2009':
			n += 0.2
		case r >= 'A' && r <= 'Z' || r == 'm' || r == 'w' || r == 'M' || r == 'W' || r == '→' || r == '←' || r > 0x2e80:
			n += 0.8
		default:
			n += 0.556
		}
	}
	return n * size
}
