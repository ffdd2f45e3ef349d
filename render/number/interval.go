package number

import (
	"math"
	"strconv"
	"strings"

	"steelyard/compute/result"
)

// Shown is an estimate with its limits, all to the same decimals. A text is
// "" where the number does not apply; a limit that does not exist is said in
// words ("no upper limit").
type Shown struct {
	Estimate, Low, High string
	Decimals            int
	// LowEqual and HighEqual name a point that the limit falls on, written as
	// stated; "" where it falls on none.
	LowEqual, HighEqual string

	power     int // values are written × 10^power; 0 for plain decimals
	low, high float64
	hasLow    bool
	hasHigh   bool
	f         Format
}

// equalShare is the accuracy to which limits are computed, as a share of the
// interval's width: what is nearer to a point than this is on it.
const equalShare = 1e-9

// Interval writes an estimate and its limits. points are the values that a
// limit must not be rounded onto or across: null, margins, a limit; the ends
// of the effect's range are always among them.
func (f Format) Interval(est, low, high result.Opt, points ...float64) Shown {
	s := Shown{hasLow: low.OK && !math.IsNaN(low.V), hasHigh: high.OK && !math.IsNaN(high.V), f: f}
	s.low, s.high = low.V, high.V
	spread := f.spread(est, low, high)
	s.power = f.power(est, low, high)
	scale := math.Pow(10, -float64(s.power))
	d := decimals(f.Show(spread) * scale)
	if s.power == 0 {
		d = max(d, f.Digits)
	}
	if f.Ratio {
		d = max(d, 2)
	}
	for _, c := range points {
		d = f.apart(d, scale, s.hasLow, low.V, c, spread)
		d = f.apart(d, scale, s.hasHigh, high.V, c, spread)
	}
	most := d + endDecimals
	if f.Ratio {
		most += 2 // small ratios are read in their first digit
	}
	for _, c := range f.Ends {
		d = max(d, min(most, f.apart(d, scale, s.hasLow, low.V, c, spread)))
		d = max(d, min(most, f.apart(d, scale, s.hasHigh, high.V, c, spread)))
	}
	s.Decimals = d
	if est.OK {
		s.Estimate = s.estimate(est.V)
	}
	if s.hasLow {
		s.Low, s.LowEqual = s.At(low.V), f.onPoint(low.V, points, spread)
	}
	if s.hasHigh {
		s.High, s.HighEqual = s.At(high.V), f.onPoint(high.V, points, spread)
	}
	return s
}

// endDecimals is how many decimals more than its spread asks for an interval
// may have to keep a limit off the end of the range, before it is printed as
// lying beyond the last printable value.
const endDecimals = 1

// besideEnd writes a shown value that would be rounded onto the end of the
// range, where it does not lie, as lying beyond the last value before it.
func (s Shown) besideEnd(v float64) (string, bool) {
	if s.power != 0 || math.IsInf(v, 0) || math.IsNaN(v) {
		return "", false
	}
	step := math.Pow(10, -float64(s.Decimals))
	for _, end := range s.f.Ends {
		e := s.f.Show(end)
		if v == e || printed(v, s.Decimals) != printed(e, s.Decimals) || math.Abs(v-e) <= 1e-12*math.Max(1, math.Abs(e)) {
			continue
		}
		if v > e {
			return "<" + Hard + fixed(e+step, s.Decimals), true
		}
		return ">" + Hard + fixed(e-step, s.Decimals), true
	}
	return "", false
}

// power is the power of ten that keeps very small and very large values
// readable: that of the largest finite one; 0 between 1e-5 and 1e12.
func (f Format) power(os ...result.Opt) int {
	most := 0.0
	for _, o := range os {
		if v := math.Abs(f.Show(o.V)); o.OK && v > most && !math.IsInf(v, 0) {
			most = v
		}
	}
	if most == 0 || most >= 1e-5 && most < 1e12 {
		return 0
	}
	return max(-300, min(300, int(math.Floor(math.Log10(most)))))
}

// estimate words an estimate at the end of its range.
func (s Shown) estimate(v float64) string {
	switch {
	case math.IsInf(v, 1):
		return "infinite"
	case math.IsInf(v, -1):
		return Minus + "infinite"
	}
	return s.At(v)
}

// spread is the half-width that sets the decimals: of the shorter arm for
// ratios, of the arm that exists where one limit does not.
func (f Format) spread(est, low, high result.Opt) float64 {
	fin := func(o result.Opt) bool { return o.OK && !math.IsInf(o.V, 0) && !math.IsNaN(o.V) }
	var arms []float64
	if fin(est) && fin(low) {
		arms = append(arms, est.V-low.V)
	}
	if fin(est) && fin(high) {
		arms = append(arms, high.V-est.V)
	}
	switch {
	case fin(low) && fin(high) && !f.Ratio:
		return math.Abs(high.V/2 - low.V/2)
	case len(arms) > 0:
		w := math.Inf(1)
		for _, a := range arms {
			if a > 0 {
				w = min(w, a)
			}
		}
		if !math.IsInf(w, 1) {
			return w
		}
	}
	if fin(low) && fin(high) && high.V > low.V {
		return high.V/2 - low.V/2
	}
	for _, o := range []result.Opt{est, low, high} {
		if fin(o) && o.V != 0 {
			return math.Abs(o.V) / 10
		}
	}
	return 0
}

// apart raises the decimals until the limit, as printed, stands on the same
// side of the point, as printed, as it does in full.
func (f Format) apart(d int, scale float64, ok bool, limit, point, spread float64) int {
	if !ok || math.IsInf(limit, 0) || math.IsInf(point, 0) || math.IsNaN(point) || near(limit, point, spread) {
		return d
	}
	p := f.Show(point) * scale
	if scale == 1 {
		p = printed(p, pointDecimals(f.Point(point)))
	} else { // without the dust of the product
		p, _ = strconv.ParseFloat(strconv.FormatFloat(p, 'g', 12, 64), 64)
	}
	for ; d < maxDecimals; d++ {
		v := printed(f.Show(limit)*scale, d)
		if v != p && (v < p) == (limit < point) {
			break
		}
	}
	return d
}

// near reports whether the limit is the point, to the accuracy of limits.
func near(limit, point, spread float64) bool {
	return limit == point || math.Abs(limit-point) <= equalShare*2*math.Abs(spread)
}

// onPoint is the point that a limit falls on, as stated.
func (f Format) onPoint(limit float64, points []float64, spread float64) string {
	for _, c := range points {
		if !math.IsInf(c, 0) && near(limit, c, spread) {
			return f.Point(c)
		}
	}
	return ""
}

// printed is the value that d decimals show.
func printed(v float64, d int) float64 {
	r, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'f', d, 64), 64)
	return r
}

// pointDecimals counts the decimals of a written point.
func pointDecimals(s string) int {
	if _, frac, ok := strings.Cut(s, "."); ok && !strings.Contains(s, "^") {
		return len(frac)
	}
	if strings.Contains(s, "^") {
		return 17
	}
	return 0
}

// Range is "LOW to HIGH UNIT", or its wording where a limit does not exist;
// "" where there is no interval.
func (s Shown) Range() string {
	openLow := s.hasLow && math.IsInf(s.low, -1)
	openHigh := s.hasHigh && math.IsInf(s.high, 1)
	switch {
	case !s.hasLow && !s.hasHigh:
		return ""
	case openLow && openHigh:
		return "no limit on either side"
	case openHigh || !s.hasHigh:
		if s.hasHigh {
			return s.f.WithUnit(s.Low) + " or more, no upper limit"
		}
		return s.f.WithUnit(s.Low) + " or more"
	case openLow || !s.hasLow:
		if s.hasLow {
			return s.f.WithUnit(s.High) + " or less, no lower limit"
		}
		return s.f.WithUnit(s.High) + " or less"
	}
	return s.Low + " to " + s.f.WithUnit(s.High)
}

// Bare is Range without the unit, for columns whose head or caption has it.
func (s Shown) Bare() string {
	s.f.Unit = ""
	return s.Range()
}

// EstimateUnit is the estimate with its unit.
func (s Shown) EstimateUnit() string {
	if s.Estimate == "" {
		return ""
	}
	return s.f.WithUnit(s.Estimate)
}

// At writes another value to the same decimals, without unit.
func (s Shown) At(v float64) string {
	v = s.f.Show(v)
	if text, ok := s.besideEnd(v); ok {
		return text
	}
	if s.power == 0 || v == 0 || math.IsInf(v, 0) || math.IsNaN(v) {
		return fixed(v, s.Decimals)
	}
	return fixed(v*math.Pow(10, -float64(s.power)), s.Decimals) + Hard + "×" + Hard + "10^" + dress(strconv.Itoa(s.power))
}
