// Package number turns floats into text for a reader: the only place where
// that happens. It chooses decimals by rule and never prints NaN. It knows no
// claim and no sentence.
//
//	f := number.Of(outcome)
//	s := f.Interval(est, low, high, margin)
//	s.Estimate, s.Low, s.High // "−0.18", "−0.784", "0.424"
package number

import (
	"math"
	"strconv"
	"strings"

	"steelyard/compute/result"
)

// The blanks inside numbers: between groups of three digits, and between a
// number and its unit. Neither lets a line break.
const (
	Thin = "\u202f"
	Hard = "\u00a0"
	// Minus is the true minus sign.
	Minus = "\u2212"
	// Absent stands in a cell for a number that does not apply.
	Absent = "–"
)

// Format is how the values of one outcome are shown.
type Format struct {
	Factor float64 // shown = value × Factor; 0 counts as 1
	Digits int     // at least so many decimals; -1: by rule alone
	Ratio  bool    // arms of an interval differ in length
	Unit   string  // printed after a value, "" for none
	Ends   []float64
}

// Of is the format of an outcome: percent, rates per some exposure, the unit,
// the decimals stated.
func Of(o *result.Outcome) Format {
	f := Format{Factor: 1, Digits: o.Digits, Ratio: o.Ratio}
	switch o.Measure {
	case "proportion", "conforming-share", "agreement", "superiority-probability":
		f.Ends = []float64{0, 1}
		if o.Percent {
			f.Factor, f.Unit = 100, "%"
		}
		f.Digits = -1
	case "risk-difference", "paired-risk-difference":
		if o.Percent {
			f.Factor, f.Unit = 100, "percentage points"
		}
		f.Digits = -1
	case "rate", "rate-difference":
		if o.Measure == "rate" {
			f.Ends = []float64{0}
		}
		f.Unit = o.Unit
		if o.Per > 0 && !math.IsInf(o.Per, 0) {
			f.Factor, f.Unit = o.Per, perUnit(o.Unit, o.Per)
		}
	case "standardized-mean-difference", "correlation", "rank-correlation":
		f.Digits = -1
	case "sd":
		f.Ends, f.Unit = []float64{0}, o.Unit
	default:
		if o.Ratio {
			f.Ends, f.Digits = []float64{0}, -1
		} else {
			f.Unit = o.Unit
		}
	}
	return f
}

// perUnit writes an exposure into a unit: "falls per bed-day" and 1000 become
// "falls per 1000 bed-day".
func perUnit(unit string, per float64) string {
	if per == 1 { // of one unit: nothing to add
		return unit
	}
	n := Plain(per)
	if strings.HasPrefix(unit, "per ") {
		return "per " + n + " " + strings.TrimPrefix(unit, "per ")
	}
	if i := strings.Index(unit, " per "); i >= 0 {
		return unit[:i] + " per " + n + " " + unit[i+5:]
	}
	if unit == "" {
		return "per " + n
	}
	return "per " + n + " " + unit
}

// Show is a value on the shown scale.
func (f Format) Show(v float64) float64 {
	if f.Factor == 0 {
		return v
	}
	return v * f.Factor
}

// WithUnit appends the unit.
func (f Format) WithUnit(s string) string {
	if f.Unit == "" || s == "" {
		return s
	}
	return s + Hard + f.Unit
}

// Point writes a stated value, such as a margin, with the digits it was
// stated with, and no unit.
func (f Format) Point(v float64) string { return Plain(f.Show(v)) }

// PointUnit is Point with the unit.
func (f Format) PointUnit(v float64) string {
	if math.IsInf(v, 0) || math.IsNaN(v) {
		return f.Point(v)
	}
	return f.WithUnit(f.Point(v))
}

// Value writes one computed value by the decimals that a spread of size
// `about` calls for, with no unit.
func (f Format) Value(v, about float64) string {
	return fixed(f.Show(v), max(f.Digits, decimals(math.Abs(f.Show(about)))))
}

// Stated is Value for a number of which a record gives the digits: never with
// more decimals than it or its companion was given with.
func (f Format) Stated(v, about, companion float64) string {
	d := max(f.Digits, decimals(math.Abs(f.Show(about))))
	given := max(pointDecimals(Plain(f.Show(v))), pointDecimals(Plain(f.Show(companion))))
	return fixed(f.Show(v), max(f.Digits, min(d, given)))
}

// Plain writes a number as it was stated: shortest, at most 9 significant
// digits, else 4; grouped, with a true minus sign. Infinities are words.
func Plain(v float64) string {
	switch {
	case math.IsNaN(v):
		return "not computed"
	case math.IsInf(v, 1):
		return "without upper limit"
	case math.IsInf(v, -1):
		return "without lower limit"
	case v == 0:
		return "0"
	}
	r, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'g', 12, 64), 64)
	short := strconv.FormatFloat(r, 'e', -1, 64)
	if significant(short) > 9 {
		r, _ = strconv.ParseFloat(strconv.FormatFloat(v, 'g', 4, 64), 64)
	}
	if a := math.Abs(r); a >= 1e15 || a < 1e-7 {
		return scientific(r, -1)
	}
	return dress(strconv.FormatFloat(r, 'f', -1, 64))
}

// significant counts the digits of a mantissa in 'e' form.
func significant(e string) int {
	n := 0
	for _, c := range e {
		if c == 'e' {
			break
		}
		if c >= '0' && c <= '9' {
			n++
		}
	}
	return n
}

// fixed writes a finite value with d decimals; values too large or too small
// for that in scientific form. Infinities are words.
func fixed(v float64, d int) string {
	switch {
	case math.IsNaN(v):
		return "not computed"
	case math.IsInf(v, 1):
		return "no upper limit"
	case math.IsInf(v, -1):
		return "no lower limit"
	}
	d = max(0, d)
	if math.Abs(v) >= 1e15 || d > maxDecimals {
		return scientific(v, 2)
	}
	return dress(strconv.FormatFloat(v, 'f', d, 64))
}

// maxDecimals is where decimal fractions stop being readable.
const maxDecimals = 12

// scientific writes m × 10^e with d decimals of m; -1: as many as needed.
func scientific(v float64, d int) string {
	if v == 0 {
		return "0"
	}
	s := strconv.FormatFloat(v, 'e', d, 64)
	m, e, _ := strings.Cut(s, "e")
	n, _ := strconv.Atoi(e)
	return dress(m) + Hard + "×" + Hard + "10^" + dress(strconv.Itoa(n))
}

// dress turns the machine's form into the reader's: true minus, no negative
// zero, groups of three in integer parts of five digits and more.
func dress(s string) string {
	neg := strings.HasPrefix(s, "-")
	s = strings.TrimPrefix(s, "-")
	if neg && strings.Trim(s, "0.") == "" {
		neg = false
	}
	whole, frac, dot := strings.Cut(s, ".")
	if len(whole) > 4 {
		var b strings.Builder
		for i, c := range whole {
			if i > 0 && (len(whole)-i)%3 == 0 {
				b.WriteString(Thin)
			}
			b.WriteRune(c)
		}
		whole = b.String()
	}
	if dot {
		whole += "." + frac
	}
	if neg {
		return Minus + whole
	}
	return whole
}

// decimals is how many decimals show a spread to two or three significant
// digits; 0 where the spread is unknown.
func decimals(spread float64) int {
	if !(spread > 0) || math.IsInf(spread, 0) {
		return 0
	}
	return max(0, 1-int(math.Floor(math.Log10(spread))))
}
