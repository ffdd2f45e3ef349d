package effect

import (
	"fmt"
	"strings"
	"testing"
)

// ofRow is one call as the rows of ranks.json and spread.json describe it.
type ofRow struct {
	Measure, Method  string
	First, Second    []float64
	Nulls            []float64
	N, Mean, SD, R   float64
	N1, N2, SD1, SD2 float64
	Spec             []float64
}

// numbers names every number that a row may expect: tails and statistics at
// the nulls, estimate, se, df, and limits by level.
func (o ofRow) check(t reporter, row valueRow, inf *Inference) {
	t.Helper()
	for name := range row.Expected {
		var i int
		var level float64
		switch {
		case name == "estimate":
			row.check(t, name, inf.Estimate)
		case name == "se":
			row.check(t, name, inf.SE.V)
		case name == "df":
			row.check(t, name, inf.DF.V)
		case scan(name, "up%d", &i):
			row.check(t, name, inf.Method.Test(o.Nulls[i-1]).Up.P)
		case scan(name, "lnup%d", &i):
			row.check(t, name, inf.Method.Test(o.Nulls[i-1]).Up.LnP)
		case scan(name, "down%d", &i):
			row.check(t, name, inf.Method.Test(o.Nulls[i-1]).Down.P)
		case scan(name, "lndown%d", &i):
			row.check(t, name, inf.Method.Test(o.Nulls[i-1]).Down.LnP)
		case scan(name, "statistic%d", &i):
			row.check(t, name, inf.Method.Test(o.Nulls[i-1]).Value)
		case scanLevel(name, "low_%g", &level):
			low, _ := inf.Method.Limits((1 - level) / 2)
			row.check(t, name, low)
		case scanLevel(name, "high_%g", &level):
			_, high := inf.Method.Limits((1 - level) / 2)
			row.check(t, name, high)
		case strings.HasPrefix(name, "shown_"):
			row.check(t, name, shownNamed(inf, strings.TrimPrefix(name, "shown_")))
		default:
			t.Errorf("%s: nothing is called %q", row.ID, name)
		}
	}
}

func scan(s, format string, i *int) bool {
	n, err := fmt.Sscanf(s, format, i)
	return n == 1 && err == nil && fmt.Sprintf(format, *i) == s
}

func scanLevel(s, format string, x *float64) bool {
	n, err := fmt.Sscanf(s, format, x)
	return n == 1 && err == nil
}

// shownNamed is the k-th number shown under the last check: "3" is the third.
func shownNamed(inf *Inference, k string) float64 {
	var i int
	if !scan(k, "%d", &i) || len(inf.Checks) == 0 {
		return 0
	}
	return inf.Checks[len(inf.Checks)-1].Shows[i-1].Value
}

// TestRankReference holds every rank method against R and SciPy.
func TestRankReference(t *testing.T) {
	seen := map[string]bool{}
	for _, row := range values(t, "ranks.json") {
		var o ofRow
		row.input(t, &o)
		in := twoValues(o.First, o.Second)
		if o.Measure == "paired-median-shift" {
			in = Input{Pairs: Pairs{N: float64(len(o.First)), First: o.First, Second: o.Second}}
		}
		inf := analysed(t, o.Measure, o.Method, in)
		if inf.Word != o.Method {
			t.Errorf("%s: %s was used", row.ID, inf.Word)
		}
		o.check(t, row, inf)
		seen[o.Method] = true
	}
	for measure, methods := range ranks {
		for method := range methods {
			if !seen[method] && method != "wilcoxon" && method != "signed-rank" { // those choose between the others
				t.Errorf("no row for %s of %s", method, measure)
			}
		}
	}
}

func TestRowChecksCanFail(t *testing.T) {
	wald := analysed(t, "mean", "t", Input{Sample: Group{N: 9, Mean: 1, SD: 3}})
	o := ofRow{Nulls: []float64{1}}
	for name, right := range map[string]float64{"estimate": 1, "up1": 0.5, "down1": 0.5, "statistic1": 0, "se": 1, "df": 8, "low_0.95": -1.306004135, "high_0.95": 3.306004135} {
		good := valueRow{Expected: map[string]float64{name: right}, Digits: map[string]int{"all": 8}}
		bad := valueRow{Expected: map[string]float64{name: right + 0.001}, Digits: map[string]int{"all": 8}}
		var c complaints
		if o.check(&c, good, wald); len(c) > 0 {
			t.Errorf("%s: %v", name, c)
		}
		if o.check(&c, bad, wald); len(c) == 0 {
			t.Errorf("%s: a wrong number passes", name)
		}
	}
	var c complaints
	if o.check(&c, valueRow{Expected: map[string]float64{"colour": 1}}, wald); len(c) == 0 {
		t.Error("an unknown name passes")
	}
}
