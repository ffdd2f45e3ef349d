package number

import (
	"math"
	"strconv"
	"strings"

	"steelyard/compute/result"
)

// P writes a p-value: three decimals, "< 0.001", "> 0.999", never "0.000".
// bounds are error levels it must not be rounded onto or across.
func P(p result.P, bounds ...float64) string {
	v := p.P
	switch {
	case !p.OK:
		return Absent
	case math.IsNaN(v) || v < 0 || v > 1:
		return "not computed"
	case v < 0.001:
		return "<" + Hard + "0.001"
	case v > 0.999 && v < 1:
		return ">" + Hard + "0.999"
	}
	d := 3
	for _, b := range bounds {
		for ; d < maxDecimals; d++ {
			r := printed(v, d)
			if v == b || r != b && (r < b) == (v < b) {
				break
			}
		}
	}
	return fixed(v, d)
}

// PEquals is P with its sign: "p = 0.012", "p < 0.001".
func PEquals(p result.P, bounds ...float64) string {
	s := P(p, bounds...)
	switch {
	case !p.OK || s == "not computed":
		return "p not computed"
	case s[0] == '<' || s[0] == '>':
		return "p" + Hard + s
	}
	return "p" + Hard + "=" + Hard + s
}

// Level writes a confidence level or a share stated by the plan: 0.95 is
// "95 %", 0.975 "97.5 %".
func Level(v float64) string {
	r, _ := strconv.ParseFloat(strconv.FormatFloat(v*100, 'g', 6, 64), 64)
	return Plain(r) + Hard + "%"
}

// Error writes an error level as stated.
func Error(v float64) string { return Plain(v) }

// Count writes a number of things; one decimal where it is not whole.
func Count(v float64) string {
	switch {
	case math.IsNaN(v):
		return "not computed"
	case math.IsInf(v, 0):
		return "without bound"
	}
	if r := math.Round(v); math.Abs(v-r) <= 1e-9*math.Max(1, math.Abs(r)) {
		return fixed(r, 0)
	}
	return fixed(v, 1)
}

// Int writes a whole number.
func Int(n int) string { return dress(strconv.Itoa(n)) }

// CountOpt is Count, or the sign for an absent number.
func CountOpt(o result.Opt) string {
	if !o.OK {
		return Absent
	}
	return Count(o.V)
}

// Statistic writes a test statistic to two decimals.
func Statistic(o result.Opt) string {
	switch {
	case !o.OK:
		return Absent
	case math.IsInf(o.V, 1):
		return "infinite"
	case math.IsInf(o.V, -1):
		return Minus + "infinite"
	}
	return fixed(o.V, 2)
}

// DF writes degrees of freedom: whole, or to one decimal.
func DF(o result.Opt) string {
	if !o.OK {
		return Absent
	}
	if math.IsInf(o.V, 0) {
		return "infinite"
	}
	return Count(o.V)
}

// SValue writes −log₂ p to one decimal.
func SValue(o result.Opt) string {
	if !o.OK {
		return Absent
	}
	return fixed(o.V, 1)
}

// Share writes a fraction as a percentage to one decimal; a share that is
// not 0 or 1 is never printed as 0 or 100.
func Share(v float64) string {
	switch {
	case math.IsNaN(v):
		return "not computed"
	case v > 0 && v < 0.001:
		return "<" + Hard + "0.1" + Hard + "%"
	case v < 1 && v > 0.999:
		return ">" + Hard + "99.9" + Hard + "%"
	}
	return fixed(v*100, 1) + Hard + "%"
}

// ShareOpt is Share, or the sign for an absent number.
func ShareOpt(o result.Opt) string {
	if !o.OK {
		return Absent
	}
	return Share(o.V)
}

// Significant writes a number to n significant digits.
func Significant(v float64, n int) string {
	switch {
	case math.IsNaN(v):
		return "not computed"
	case math.IsInf(v, 1):
		return "infinite"
	case math.IsInf(v, -1):
		return Minus + "infinite"
	case v == 0:
		return "0"
	}
	d := n - 1 - int(math.Floor(math.Log10(math.Abs(v))))
	if d > maxDecimals || math.Abs(v) >= 1e15 {
		return scientific(v, n-1)
	}
	if d <= 0 {
		return fixed(v, 0)
	}
	return fixed(v, d)
}

// Short writes a number to at most n significant digits, without the zeros
// that would follow; whole numbers below 1e15 in full.
func Short(v float64, n int) string {
	if math.IsNaN(v) || math.IsInf(v, 0) || v == math.Trunc(v) {
		return Plain(v)
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'g', n, 64), 64)
	if err != nil {
		return Plain(v)
	}
	return Plain(r)
}

// SignificantOpt is Significant, or the sign for an absent number.
func SignificantOpt(o result.Opt, n int) string {
	if !o.OK {
		return Absent
	}
	return Significant(o.V, n)
}

// Verb writes a float argument of a message under its verb ("%g", "%.2f",
// "%.3g"): decimals or significant digits as the verb asks, 4 significant
// digits at most.
func Verb(verb string, v float64) string {
	precision := -1
	if i := strings.IndexByte(verb, '.'); i >= 0 && len(verb) > i+1 {
		if n, err := strconv.Atoi(verb[i+1 : len(verb)-1]); err == nil {
			precision = n
		}
	}
	switch {
	case verb[len(verb)-1] == 'f' && precision >= 0:
		return fixed(v, precision)
	case precision > 0:
		return Significant(v, min(precision, 4))
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'g', 4, 64), 64)
	if err != nil || math.IsNaN(v) {
		return Plain(v)
	}
	return Plain(r)
}
