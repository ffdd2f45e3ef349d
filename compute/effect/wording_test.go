package effect

import (
	"fmt"
	"testing"
)

// The sentences of refusals, as they are printed.
func TestRefusalsReadWell(t *testing.T) {
	flat, one := Group{N: 5, Mean: 3}, Group{N: 1, Mean: 3}
	values := func(x ...float64) Group { return Group{N: float64(len(x)), Values: x} }
	for _, c := range []struct {
		measure, method string
		in              Input
		want            string
	}{
		{"mean-difference", "welch", Input{First: flat, Second: flat}, "S102 neither group varies: no error can be computed"},
		{"mean-difference", "pooled-variance", Input{First: flat, Second: one}, "S102 neither group varies: no error can be computed"},
		{"mean-difference", "permutation", Input{First: values(1, 1), Second: values(1)}, "S102 neither group varies: no error can be computed"},
		{"mean-difference", "pooled-variance", Input{First: one, Second: one}, "S101 both groups together have too few observations: 2, at least 3 are needed"},
		{"mean-difference", "permutation", Input{First: values(1), Second: values(2)}, "S101 both groups together have too few observations: 2, at least 3 are needed"},
		{"median-shift", "", Input{First: values(1), Second: values(2)}, "S101 the groups have too few observations: 2, at least 3 are needed"},
		{"median-shift", "", Input{First: values(1, 2, 3)}, "S101 the second group has too few observations: 0, at least 1 are needed"},
		{"median-shift", "", Input{Second: values(1, 2, 3)}, "S101 the first group has too few observations: 0, at least 1 are needed"},
		{"median-shift", "", Input{First: flat, Second: flat}, `S104 method "wilcoxon" needs individual values`},
		{"paired-median-shift", "", Input{Pairs: Pairs{First: []float64{1}, Second: []float64{2}}}, "S101 the pairs have too few observations: 1, at least 2 are needed"},
	} {
		_, bad := Analyse(c.measure, c.method, c.in)
		if bad == nil {
			t.Errorf("%s %s: not refused, want %s", c.measure, c.method, c.want)
			continue
		}
		if got := bad.Code + " " + fmt.Sprintf(bad.Message, bad.Args...); got != c.want {
			t.Errorf("%s %s:\n got %s\nwant %s", c.measure, c.method, got, c.want)
		}
	}
}

// With 3 values against 3 the smallest one-sided p of the rank sum is 1/20,
// with 4 differences that of the signed ranks 1/16: below them no limit
// exists, and each side says so.
func TestRankLimitsThatDoNotExist(t *testing.T) {
	shift := Input{First: Group{Values: []float64{1, 2.5, 4.1}}, Second: Group{Values: []float64{0.3, 2, 3}}}
	pairs := Input{Pairs: Pairs{First: []float64{1, 2.5, 4.1, 7}, Second: []float64{0, 0, 0, 0}}}
	for _, c := range []struct {
		measure string
		in      Input
		a       float64
		want    int
	}{
		{"median-shift", shift, 0.04, 2},
		{"median-shift", shift, 0.06, 0},
		{"median-shift", shift, 0, 0},
		{"paired-median-shift", pairs, 0.05, 2},
		{"paired-median-shift", pairs, 0.07, 0},
	} {
		c.in.A = c.a
		inf := analysed(t, c.measure, "", c.in)
		got := 0
		for _, n := range inf.Notes {
			if n.Code == "S201" {
				got++
			}
		}
		if got != c.want {
			t.Errorf("%s at %g: %d notes S201, want %d", c.measure, c.a, got, c.want)
		}
	}
}
