package data

import (
	"math"
	"regexp"
	"strconv"
	"testing"
)

func TestParseNumber(t *testing.T) {
	tests := []struct {
		text string
		want float64
		kind numberKind
	}{
		{"0", 0, aNumber}, {"-0", math.Copysign(0, -1), aNumber}, {"12.5", 12.5, aNumber}, {"+1.", 1, aNumber},
		{".5", .5, aNumber}, {"1e3", 1000, aNumber}, {"1E-3", .001, aNumber}, {"0.1", .1, aNumber},
		{"9007199254740993", 9007199254740992, aNumber},
		{"123456789012345678901234567890", 123456789012345678901234567890, aNumber},
		{"2.2250738585072011e-308", 2.2250738585072011e-308, aNumber},
		{"1e-400", 0, aNumber}, {"1.7976931348623157e308", math.MaxFloat64, aNumber},
		{"0000000000000000000000.30", .3, aNumber},
		{"1e309", 0, tooLarge}, {"inf", 0, tooLarge}, {"-Infinity", 0, tooLarge}, {"1e99999999999999999999", 0, tooLarge},
		{"", 0, noNumber}, {".", 0, noNumber}, {"-", 0, noNumber}, {"nan", 0, noNumber}, {"0x10", 0, noNumber},
		{"1_000", 0, noNumber}, {"12,5", 0, noNumber}, {"1 000", 0, noNumber}, {"1e", 0, noNumber}, {"1e+", 0, noNumber},
		{"1.2.3", 0, noNumber}, {"<0.5", 0, noNumber}, {"٣", 0, noNumber},
	}
	for _, tt := range tests {
		got, kind := parseNumber([]byte(tt.text))
		if kind != tt.kind || math.Float64bits(got) != math.Float64bits(tt.want) {
			t.Errorf("%q: %v %d, want %v %d", tt.text, got, kind, tt.want, tt.kind)
		}
	}
}

// FuzzNumber asks strconv for a second opinion on every decimal number.
func FuzzNumber(f *testing.F) {
	for _, s := range []string{"1.5", "-12345678901234567890e-30", ".00000000000000000001", "1e22", "1e23", "8.41e21", "inf", "1e-325"} {
		f.Add(s)
	}
	decimal := regexp.MustCompile(`^[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][+-]?[0-9]+)?$`)
	f.Fuzz(func(t *testing.T, s string) {
		got, kind := parseNumber([]byte(s))
		if (kind == noNumber) != (!decimal.MatchString(s) && wordKind([]byte(s)) != tooLarge) {
			t.Fatalf("%q: kind %d", s, kind)
		}
		if kind != aNumber {
			return
		}
		want, err := strconv.ParseFloat(s, 64)
		if err != nil || math.Float64bits(got) != math.Float64bits(want) {
			t.Fatalf("%q: %v, strconv says %v %v", s, got, want, err)
		}
	})
}
