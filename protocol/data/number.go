package data

import (
	"math"
	"strconv"
)

// numberKind is what a cell turned out to be.
type numberKind uint8

const (
	aNumber  numberKind = iota
	noNumber            // not a decimal number
	tooLarge            // infinite, or beyond the range of float64
)

// parseNumber reads a decimal number: a sign, digits with at most one point,
// an exponent. The value is the float64 nearest to the text, as strconv gives
// it. Infinities, hexadecimal digits and underscores are no numbers here.
func parseNumber(b []byte) (float64, numberKind) {
	i, negative := 0, false
	if len(b) > 0 && (b[0] == '+' || b[0] == '-') {
		negative = b[0] == '-'
		i++
	}
	var mantissa uint64
	digits, kept, exponent, point := 0, 0, 0, false
	for ; i < len(b); i++ {
		c := b[i]
		if c == '.' && !point {
			point = true
			continue
		}
		if c < '0' || c > '9' {
			break
		}
		digits++
		if mantissa > 0 || c != '0' {
			kept++
		}
		if kept <= 19 {
			mantissa = 10*mantissa + uint64(c-'0')
		}
		if point {
			exponent--
		}
	}
	if digits == 0 {
		return 0, wordKind(b)
	}
	if i < len(b) {
		power, ok := parseExponent(b[i:])
		if !ok {
			return 0, noNumber
		}
		exponent += power
	}
	// Both the mantissa and the power of ten are exact in float64, so one
	// rounding is left (Clinger 1990, from memory).
	if kept <= 19 && mantissa < 1<<53 && exponent >= -22 && exponent <= 22 {
		v := float64(mantissa)
		if exponent < 0 {
			v /= powers[-exponent]
		} else {
			v *= powers[exponent]
		}
		if negative {
			v = -v
		}
		return v, aNumber
	}
	v, err := strconv.ParseFloat(string(b), 64)
	if math.IsInf(v, 0) {
		return 0, tooLarge
	}
	if err != nil {
		return 0, noNumber
	}
	return v, aNumber
}

// parseExponent reads e, an optional sign and digits.
func parseExponent(b []byte) (int, bool) {
	if b[0] != 'e' && b[0] != 'E' {
		return 0, false
	}
	b = b[1:]
	negative := false
	if len(b) > 0 && (b[0] == '+' || b[0] == '-') {
		negative = b[0] == '-'
		b = b[1:]
	}
	n := 0
	for _, c := range b {
		if c < '0' || c > '9' {
			return 0, false
		}
		n = min(10*n+int(c-'0'), 1<<20)
	}
	if negative {
		n = -n
	}
	return n, len(b) > 0
}

// wordKind tells an infinity spelt out from other text.
func wordKind(b []byte) numberKind {
	if v, err := strconv.ParseFloat(string(b), 64); err == nil && math.IsInf(v, 0) {
		return tooLarge
	}
	return noNumber
}

var powers = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}
