package survival

import (
	"encoding/csv"
	"math"
	"os"
	"sort"
	"testing"
)

// Freireich et al. 1963 (6-MP in leukaemia): printed Efron estimate 1.572
// (0.412), log-rank 16.79 (Collett; Kleinbaum & Klein); further digits by R
// survival 3.5-3, coxph and survdiff (testdata/reference/published.json).
func TestLeukaemia(t *testing.T) {
	in := load(t, "leukaemia_6mp.csv", "weeks", "relapse", "arm", "placebo")
	inf, problem := HazardRatio("", in)
	if problem != nil {
		t.Fatal(problem)
	}
	near(t, "b", math.Log(inf.Estimate), 1.572, 0.0005)
	near(t, "b", math.Log(inf.Estimate), 1.57212514882907, 1e-11)
	near(t, "se", inf.SE.V, 0.412396717709455, 1e-11)
	low, high := inf.Method.Limits(0.025)
	near(t, "low", low, 2.14650821272546, 1e-9)
	near(t, "high", high, 10.809310681586, 1e-8)
	lr, _ := HazardRatio("likelihood-ratio", in)
	z := lr.Method.Test(1).Value
	near(t, "likelihood ratio", z*z, 16.3516908389522, 1e-9)
	lz, _ := LogRank(in)
	near(t, "log-rank", lz*lz, 16.79, 0.005)
	near(t, "log-rank", lz*lz, 16.7929409892165, 1e-9)
}

func TestRestrictedMeansOfLeukaemia(t *testing.T) {
	in := load(t, "leukaemia_6mp.csv", "weeks", "relapse", "arm", "six_mp")
	in.Horizon = 23
	inf, problem := RestrictedMeanDifference(in)
	if problem != nil {
		t.Fatal(problem)
	}
	near(t, "difference", inf.Estimate, 17.909243697479-8.66666666666667, 1e-11)
	near(t, "se", inf.SE.V, math.Hypot(1.55318997824838, 1.37739004126455), 1e-11)
	points, _ := Curve(in, 0, 0.025)
	want := map[float64]float64{6: 0.857, 7: 0.807, 10: 0.753, 13: 0.690, 16: 0.627, 22: 0.538, 23: 0.448}
	for _, p := range points {
		near(t, "S", p.Share, want[p.Time], 0.0005)
	}
	if len(points) != len(want) {
		t.Fatalf("%d event times, want %d", len(points), len(want))
	}
}

// Embury et al. 1977 (aml) as printed in the manual of R survival.
func TestAML(t *testing.T) {
	in := load(t, "aml.csv", "weeks", "relapse", "arm", "nonmaintained")
	inf, _ := HazardRatio("wald", in)
	near(t, "b", math.Log(inf.Estimate), 0.9155, 0.00005)
	near(t, "b", math.Log(inf.Estimate), 0.915532575014718, 1e-11)
	near(t, "se", inf.SE.V, 0.511934275172005, 1e-11)
	z, _ := LogRank(in)
	near(t, "log-rank", z*z, 3.3963886989776, 1e-10)
}

// Veterans' lung cancer trial (Kalbfleisch & Prentice 1980), treatment alone
// and stratified by cell type, R survival 3.5-3.
func TestVeteran(t *testing.T) {
	in := load(t, "veteran.csv", "days", "death", "trt", "2")
	inf, _ := HazardRatio("wald", in)
	near(t, "b", math.Log(inf.Estimate), 0.0177425695187366, 1e-11)
	near(t, "se", inf.SE.V, 0.18066101228769, 1e-11)
	in.Strata = strata(t, "veteran.csv", "celltype")
	inf, _ = HazardRatio("wald", in)
	near(t, "stratified b", math.Log(inf.Estimate), 0.169063909128088, 1e-11)
	near(t, "stratified se", inf.SE.V, 0.198235612565965, 1e-11)
	z, _ := LogRank(in)
	near(t, "stratified log-rank", z*z, 0.701743346844319, 1e-10)
}

func strata(t *testing.T, name, column string) []int32 {
	t.Helper()
	f, err := os.Open("../../testdata/reference/data/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	at := -1
	for i, h := range rows[0] {
		if h == column {
			at = i
		}
	}
	levels := map[string]int32{}
	var names []string
	for _, r := range rows[1:] {
		if _, ok := levels[r[at]]; !ok {
			levels[r[at]] = 0
			names = append(names, r[at])
		}
	}
	sort.Strings(names)
	for i, n := range names {
		levels[n] = int32(i)
	}
	var out []int32
	for _, r := range rows[1:] {
		out = append(out, levels[r[at]])
	}
	return out
}
