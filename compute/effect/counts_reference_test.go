package effect

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// Values of other programs for the count measures: testdata/reference/counts.json,
// made by counts_rows.R (base R) and counts_rows.py (SciPy, statsmodels,
// mpmath with 40 digits).

func two(x1, n1, x2, n2 float64) Input {
	return Input{First: Group{Events: x1, N: n1}, Second: Group{Events: x2, N: n2}}
}

func twoExposed(x1, e1, x2, e2 float64) Input {
	return Input{First: Group{Events: x1, Exposure: e1}, Second: Group{Events: x2, Exposure: e2}}
}

func one(x, n float64) Input { return Input{Sample: Group{Events: x, N: n}} }

func onePer(x, e float64) Input { return Input{Sample: Group{Events: x, Exposure: e}} }

func paired(both, first, second, neither float64) Input {
	return Input{Pairs: Pairs{Both: both, FirstOnly: first, SecondOnly: second, Neither: neither}}
}

// givenNumbers is the input of a row.
type givenNumbers map[string]float64

func (n givenNumbers) two() Input        { return two(n["x1"], n["n1"], n["x2"], n["n2"]) }
func (n givenNumbers) twoExposed() Input { return twoExposed(n["x1"], n["e1"], n["x2"], n["e2"]) }

// countChecks compares one row; the key is the start of its id.
var countChecks = map[string]func(t *testing.T, r valueRow, in givenNumbers){
	"proportion-":      checkProportionRow,
	"odds-":            checkOddsRow,
	"pooled-z-":        checkPooledRow,
	"mcnemar-":         checkMcNemarRow,
	"rate-ratio-":      checkRateRatioRow,
	"rate-difference-": checkRateDifferenceRow,
	"rate-":            checkRateRow,
	"strata-":          checkStrataRow,
	"score-z-":         checkScoreRow,
	"score-limits-":    checkScoreLimitsRow,
	"tango-":           checkTangoRow,
	"boschloo-":        checkBoschlooRow,
	"barnard-":         checkBarnardRow,
	"newcombe-":        checkNewcombeRow,
}

func TestCountsAgainstPrograms(t *testing.T) {
	for _, r := range values(t, "counts.json") {
		t.Run(r.ID, func(t *testing.T) {
			key := ""
			for k := range countChecks {
				if strings.HasPrefix(r.ID, k) && len(k) > len(key) {
					key = k
				}
			}
			if key == "" {
				t.Fatalf("no check for row %q", r.ID)
			}
			var in givenNumbers
			r.input(t, &in)
			countChecks[key](t, r, in)
		})
	}
}

func checkLimits(t *testing.T, r valueRow, m Method, prefix, suffix string, a float64) {
	t.Helper()
	low, high := m.Limits(a)
	r.check(t, prefix+"low"+suffix, low)
	r.check(t, prefix+"high"+suffix, high)
}

func checkProportionRow(t *testing.T, r valueRow, in givenNumbers) {
	e := analysed(t, "proportion", "exact", one(in["x"], in["n"]))
	w := analysed(t, "proportion", "wilson", one(in["x"], in["n"]))
	for _, level := range []float64{0.9, 0.95, 0.99} {
		checkLimits(t, r, e.Method, "exact_", fmt.Sprintf("_%g", level), (1-level)/2)
		checkLimits(t, r, w.Method, "wilson_", fmt.Sprintf("_%g", level), (1-level)/2)
	}
	at := e.Method.Test(in["null"])
	r.check(t, "p_up", at.Up.P)
	r.check(t, "p_down", at.Down.P)
}

func checkOddsRow(t *testing.T, r valueRow, in givenNumbers) {
	e := analysed(t, "odds-ratio", "exact", in.two())
	for _, psi := range []float64{0.5, 1, 2.5} {
		at := e.Method.Test(psi)
		r.check(t, fmt.Sprintf("p_up_%g", psi), at.Up.P)
		r.check(t, fmt.Sprintf("p_down_%g", psi), at.Down.P)
	}
	for _, word := range []string{"exact", "mid-p"} {
		low, high := analysed(t, "odds-ratio", word, in.two()).Method.Limits(0.025)
		r.check(t, word+"_low", low)
		if _, finite := r.Expected[word+"_high"]; finite {
			r.check(t, word+"_high", high)
		} else if !math.IsInf(high, 1) {
			t.Errorf("%s: upper limit %v, want +Inf", word, high)
		}
	}
	if _, finite := r.Expected["estimate"]; finite {
		r.check(t, "estimate", e.Estimate)
	}
}

func checkPooledRow(t *testing.T, r valueRow, in givenNumbers) {
	for measure, null := range map[string]float64{"risk-difference": 0, "risk-ratio": 1} {
		m := analysed(t, measure, "farrington-manning", in.two()).Method
		r.check(t, "z_abs", math.Abs(m.Test(null).Value))
	}
}

func checkMcNemarRow(t *testing.T, r valueRow, in givenNumbers) {
	pairs := paired(in["both"], in["first"], in["second"], in["neither"])
	r.check(t, "z_abs", math.Abs(analysed(t, "paired-risk-difference", "tango", pairs).Method.Test(0).Value))
	at := analysed(t, "paired-risk-difference", "exact", pairs).Method.Test(0)
	r.check(t, "p_up", at.Up.P)
	r.check(t, "p_down", at.Down.P)
}

func checkRateRow(t *testing.T, r valueRow, in givenNumbers) {
	e := analysed(t, "rate", "exact", onePer(in["x"], in["exposure"])).Method
	checkLimits(t, r, e, "", "", 0.025)
	at := e.Test(in["null"])
	r.check(t, "p_up", at.Up.P)
	r.check(t, "p_down", at.Down.P)
	r.check(t, "mid_up", analysed(t, "rate", "mid-p", onePer(in["x"], in["exposure"])).Method.Test(in["null"]).Up.P)
}

func checkRateRatioRow(t *testing.T, r valueRow, in givenNumbers) {
	e := analysed(t, "rate-ratio", "exact", in.twoExposed())
	r.check(t, "estimate", e.Estimate)
	checkLimits(t, r, e.Method, "exact_", "", 0.025)
	r.check(t, "p_up_0.8", e.Method.Test(0.8).Up.P)
	r.check(t, "p_down_3", e.Method.Test(3).Down.P)
	checkLimits(t, r, analysed(t, "rate-ratio", "score", in.twoExposed()).Method, "score_", "", 0.025)
}

func checkRateDifferenceRow(t *testing.T, r valueRow, in givenNumbers) {
	m := analysed(t, "rate-difference", "score", in.twoExposed()).Method
	for _, d := range []float64{-0.05, -0.001, 0, 0.002, 0.1} {
		r.check(t, fmt.Sprintf("z_%g", d), m.Test(d).Value)
	}
	checkLimits(t, r, m, "", "", 0.025)
}

func checkStrataRow(t *testing.T, r valueRow, in givenNumbers) {
	var strata []Stratum
	for i := range int(in["k"]) {
		get := func(name string) float64 { return in[fmt.Sprintf("%s_%d", name, i+1)] }
		strata = append(strata, Stratum{get("x1"), get("n1"), get("x2"), get("n2")})
	}
	inf := analysed(t, "odds-ratio", "mantel-haenszel", rowsOf(strata))
	r.check(t, "odds_ratio", inf.Estimate)
	checkLimits(t, r, inf.Method, "", "", 0.025)
	s, _ := MantelHaenszel("odds-ratio", strata)
	r.check(t, "chi2", s.Z*s.Z)
}

// rowsOf spreads strata over rows of a data file.
func rowsOf(strata []Stratum) Input {
	in := Input{StrataCount: len(strata)}
	for k, s := range strata {
		for g, v := range [][2]float64{{s.X1, s.N1}, {s.X2, s.N2}} {
			for i := range int(v[1]) {
				event := 0.0
				if float64(i) < v[0] {
					event = 1
				}
				in.Event = append(in.Event, event)
				in.Group = append(in.Group, uint8(g))
				in.Strata = append(in.Strata, int32(k))
			}
		}
	}
	return in
}

var contrastWords = map[string]string{"rd": "risk-difference", "rr": "risk-ratio", "or": "odds-ratio"}

func checkScoreRow(t *testing.T, r valueRow, in givenNumbers) {
	for name := range r.Expected {
		var c float64
		kind, null, _ := strings.Cut(name, "_z_")
		if _, err := fmt.Sscan(null, &c); err != nil {
			t.Fatal(err)
		}
		r.check(t, name, analysed(t, contrastWords[kind], "score", in.two()).Method.Test(c).Value)
		z, ok := ScoreZ(contrastWords[kind], in["x1"], in["n1"], in["x2"], in["n2"], c)
		if !ok {
			t.Fatalf("ScoreZ knows no %s", kind)
		}
		r.check(t, name, z)
	}
}

func checkScoreLimitsRow(t *testing.T, r valueRow, in givenNumbers) {
	for kind, measure := range contrastWords {
		checkLimits(t, r, analysed(t, measure, "score", in.two()).Method, kind+"_", "", 0.025)
	}
}

func checkTangoRow(t *testing.T, r valueRow, in givenNumbers) {
	b, c, n := in["b"], in["c"], in["n"]
	m := analysed(t, "paired-risk-difference", "tango", paired(0, b, c, n-b-c)).Method
	for _, d := range []float64{-0.1, 0, 0.05, 0.3} {
		r.check(t, fmt.Sprintf("z_%g", d), m.Test(d).Value)
	}
	checkLimits(t, r, m, "", "", 0.025)
}

func checkBoschlooRow(t *testing.T, r valueRow, in givenNumbers) {
	at := analysed(t, "odds-ratio", "boschloo", in.two()).Method.Test(1)
	r.check(t, "boschloo_greater", at.Up.P)
	r.check(t, "boschloo_less", at.Down.P)
}

func checkBarnardRow(t *testing.T, r valueRow, in givenNumbers) {
	for measure, null := range map[string]float64{"risk-difference": 0, "risk-ratio": 1} {
		at := analysed(t, measure, "unconditional", in.two()).Method.Test(null)
		r.check(t, "greater", at.Up.P)
		r.check(t, "less", at.Down.P)
	}
}

func checkNewcombeRow(t *testing.T, r valueRow, in givenNumbers) {
	checkLimits(t, r, analysed(t, "risk-difference", "newcombe", in.two()).Method, "", "", 0.025)
}

// Check values of the method paper, computed there by a second implementation.
// Two of its limits are off by one or two units of the last printed place
// (farrington-manning high, 0.75383176…; mid-p low, 1.56346891…: 40-digit and
// R values in counts.json agree with this program), hence the tolerance.
func TestCountsCheckValues(t *testing.T) {
	seven := two(7, 12, 1, 12)
	for _, tc := range []struct {
		measure, method string
		in              Input
		low, high       float64
	}{
		{"risk-difference", "score", seven, 0.1245579, 0.7576995},
		{"risk-difference", "farrington-manning", seven, 0.1333467, 0.7538317},
		{"risk-difference", "newcombe", seven, 0.1221144, 0.7336628},
		{"risk-ratio", "score", seven, 1.4064796, 42.0477777},
		{"odds-ratio", "score", seven, 1.7187363, 122.1076795},
		{"odds-ratio", "exact", seven, 1.2329224, 755.1865178},
		{"odds-ratio", "mid-p", seven, 1.5634690, 377.6205153},
		{"paired-risk-difference", "tango", paired(20, 10, 3, 17), -0.0014977, 0.2854749},
		{"rate-ratio", "exact", twoExposed(12, 100, 5, 90), 0.7083413, 7.8263830},
		{"rate-ratio", "score", twoExposed(12, 100, 5, 90), 0.7938591, 5.8771137},
		{"rate-difference", "score", twoExposed(12, 100, 5, 90), -0.0238807, 0.1609037},
	} {
		low, high := analysed(t, tc.measure, tc.method, tc.in).Method.Limits(0.025)
		within(t, tc.measure+" "+tc.method+" low", low, tc.low, 1.2e-7)
		within(t, tc.measure+" "+tc.method+" high", high, tc.high, 1.2e-7)
	}
	exact := analysed(t, "odds-ratio", "exact", seven)
	within(t, "conditional estimate", exact.Estimate, 13.5569997, 0.5001e-7)
	within(t, "one-sided Fisher", exact.Method.Test(1).Up.P, 0.0135953695, 0.5001e-10)
	within(t, "Boschloo", analysed(t, "odds-ratio", "boschloo", seven).Method.Test(1).Up.P, 0.0051393407, 0.5001e-10)
	within(t, "Tango z", analysed(t, "paired-risk-difference", "tango", paired(20, 10, 3, 17)).Method.Test(0).Value, 1.9414507, 0.5001e-7)
	three := []Stratum{{12, 42, 6, 39}, {5, 19, 3, 18}, {9, 34, 10, 32}}
	or, _ := MantelHaenszel("odds-ratio", three)
	rr, _ := MantelHaenszel("risk-ratio", three)
	rd, _ := MantelHaenszel("risk-difference", three)
	within(t, "stratified RR", rr.Estimate, 1.282631, 0.5001e-6)
	within(t, "stratified OR", or.Estimate, 1.387766, 0.5001e-6)
	within(t, "stratified RD", rd.Estimate, 0.0602973, 0.5001e-7)
	within(t, "stratified RD se", math.Sqrt(rd.V), 0.0631631, 0.5001e-7)
}
