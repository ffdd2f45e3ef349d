package combine

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"strconv"
	"testing"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

type combineRow struct {
	P        []float64
	Times    int
	LnP, LnQ map[string]string
}

func (r combineRow) tails() []dist.Tail {
	var out []dist.Tail
	for range r.Times {
		out = append(out, tails(r.P...)...)
	}
	return out
}

// combineRows are made by testdata/reference/combine_rows.py, by other routes
// than the program's, at 60 and more digits.
func combineRows(t *testing.T) []combineRow {
	t.Helper()
	text, err := os.ReadFile("../../testdata/reference/combine.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Rows []combineRow }
	if err := json.Unmarshal(text, &file); err != nil {
		t.Fatal(err)
	}
	return file.Rows
}

// lnError compares a probability with a logarithm: relative, of the
// probability itself as long as a float holds it.
func lnError(ln, want float64) float64 {
	if want < -690 {
		return math.Abs(ln/want - 1)
	}
	return math.Abs(math.Expm1(ln - want))
}

func TestLnErrorSeesErrors(t *testing.T) {
	if lnError(-2, -2) != 0 || lnError(-2+1e-9, -2) < 0.9e-9 || lnError(-1000*(1+1e-9), -1000) < 0.9e-9 {
		t.Error("lnError misses errors")
	}
	if lnError(math.NaN(), -1) <= 1 {
		t.Error("NaN passes")
	}
}

func TestReferenceRows(t *testing.T) {
	rows := combineRows(t)
	if len(rows) < 10 {
		t.Fatalf("%d rows", len(rows))
	}
	worst := map[string]float64{}
	for _, r := range rows {
		for _, method := range Methods {
			if r.LnP[method] == "" {
				continue
			}
			got := combined(t, method, r.tails()).P
			for side, pair := range map[string][2]float64{
				"P": {got.LnP, number(t, r.LnP[method])}, "Q": {got.LnQ, number(t, r.LnQ[method])},
			} {
				e := lnError(pair[0], pair[1])
				// Near P = 1 harmonic's integral gives P; its complement is
				// then good to 1e-13 absolute, not relative.
				if method == "harmonic" && side == "Q" {
					e = min(e, 1e-11*math.Abs(math.Exp(pair[0])-math.Exp(pair[1]))/1e-13)
				}
				worst[method] = max(worst[method], e)
				if !(e <= 1e-11) {
					t.Errorf("%s of %v ×%d: ln %s = %v, want %v (off by %.2g)", method, r.P, r.Times, side, pair[0], pair[1], e)
				}
			}
		}
	}
	for _, method := range Methods {
		t.Logf("%s: worst %.1e", method, worst[method])
	}
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// The rows pcomb-* of testdata/reference/published.json: Fisher's example and
// a published example of two methods; "recomputed" by SciPy 1.10.
func TestPublished(t *testing.T) {
	text, err := os.ReadFile("../../testdata/reference/published.json")
	if err != nil {
		t.Fatal(err)
	}
	var raw []json.RawMessage
	if err := json.Unmarshal(text, &raw); err != nil {
		t.Fatal(err)
	}
	checked := 0
	for _, m := range raw {
		var key struct{ ID string }
		if json.Unmarshal(m, &key) != nil || key.ID != "pcomb-fisher" && key.ID != "pcomb-doc-4" {
			continue
		}
		var r struct {
			Input                struct{ P []float64 }
			Expected, Recomputed map[string]float64
			PrintedDigits        map[string]int `json:"printed_digits"`
		}
		if err := json.Unmarshal(m, &r); err != nil {
			t.Fatal(err)
		}
		p := tails(r.Input.P...)
		if key.ID == "pcomb-fisher" {
			c := combined(t, "fisher", p)
			near(t, "printed chi-square", c.Statistic, r.Expected["chi2"], 0.005)
			near(t, "printed p", c.P.P, r.Expected["p"], 0.0005)
			near(t, "df", c.DF, r.Expected["df"], 0)
			near(t, "z", combined(t, "stouffer", p).Statistic, r.Recomputed["stouffer_z"], 1e-12)
			near(t, "harmonic mean", 3/combined(t, "harmonic", p).Statistic, r.Recomputed["harmonic_mean"], 1e-14)
			checked += 5
		} else {
			for _, method := range []string{"fisher", "stouffer"} {
				near(t, "printed "+method, combined(t, method, p).P.P, r.Expected[method+"_p"], 1.5e-15)
				checked++
			}
		}
		// logit_p of the row is the t approximation, not this law.
		for _, method := range []string{"stouffer", "tippett", "edgington", "pearson", "cauchy"} {
			if want, ok := r.Recomputed[method+"_p"]; ok {
				near(t, method, combined(t, method, p).P.P/want, 1, 1e-12)
				checked++
			}
		}
	}
	if checked < 15 {
		t.Errorf("only %d values checked", checked)
	}
}

// Wilson (2019), Table 1: thresholds of the harmonic mean at 0.01 for 10, 100,
// 1000 tests from the Landau limit. The exact law comes near the limit as k
// grows: at the printed threshold p must be about 0.01.
func TestHarmonicNearsItsLimit(t *testing.T) {
	for k, c := range map[int]struct{ threshold, tol float64 }{10: {0.0094, 2e-4}, 100: {0.0092, 1.5e-4}, 1000: {0.0090, 1.5e-4}} {
		p := make([]dist.Tail, k)
		for i := range p {
			p[i] = dist.TailOf(c.threshold)
		}
		near(t, fmt.Sprintf("harmonic of %d at the threshold", k), combined(t, "harmonic", p).P.P, 0.01, c.tol)
	}
}

// P + Q = 1 and no NaN, at every corner.
func TestCorners(t *testing.T) {
	tiny := dist.TailOfLn(-2000)
	sets := map[string][]dist.Tail{
		"zero": tails(0, 0.3), "one": tails(1, 0.3), "both": tails(0, 1), "ones": tails(1, 1, 1), "zeros": tails(0, 0),
		"tiny": {tiny, tiny, dist.TailOf(0.4)}, "near one": {tiny.Complement(), dist.TailOf(0.4)},
		"both tiny": {tiny, tiny.Complement()}, "halves": tails(0.5, 0.5), "single": {tiny},
		"many": manyTails(5000, 1), "many small": manyTails(3000, 8), "many large": manyTails(3000, 0.1),
	}
	for name, p := range sets {
		for _, method := range Methods {
			c := combined(t, method, p)
			if math.IsNaN(c.P.P+c.P.Q) || math.IsNaN(c.P.LnP) || math.IsNaN(c.P.LnQ) || math.IsNaN(c.Statistic) {
				t.Errorf("%s of %s: %+v", method, name, c)
			}
			if math.Abs(c.P.P+c.P.Q-1) > 1e-12 || c.P.LnP > 0 || c.P.LnQ > 0 {
				t.Errorf("%s of %s: %+v", method, name, c)
			}
			fine := method == "fisher" || method == "tippett" || method == "harmonic" || method == "edgington"
			if name == "one" && !fine && c.P.P != 1 {
				t.Errorf("%s with a p of 1: %v", method, c.P.P)
			}
			if name == "ones" && c.P.P != 1 || name == "zeros" && c.P.P != 0 {
				t.Errorf("%s of %s: %v", method, name, c.P.P)
			}
			if name == "single" && lnError(c.P.LnP, tiny.LnP) > 1e-11 {
				t.Errorf("%s of one: %v", method, c.P.LnP)
			}
		}
	}
}

// manyTails draws p-values u^power.
func manyTails(k int, power float64) []dist.Tail {
	s := numeric.NewStream("test", 1, "combine", 0)
	out := make([]dist.Tail, k)
	for i := range out {
		out[i] = dist.TailOf(math.Pow(s.Uniform(), power))
	}
	return out
}

// A smaller p never makes the combination larger.
func TestMonotone(t *testing.T) {
	s := numeric.NewStream("test", 2, "combine", 0)
	for range 100 {
		p := manyTails(1+s.IntN(90), 0.3+3*s.Uniform())
		i := s.IntN(len(p))
		for _, method := range Methods {
			before := combined(t, method, p).P
			q := append([]dist.Tail(nil), p...)
			q[i] = dist.TailOf(p[i].P * 0.7)
			after := combined(t, method, q).P
			if after.LnP > before.LnP+1e-12 || after.LnQ < before.LnQ-1e-11 {
				t.Errorf("%s of %d rises: %v to %v", method, len(p), before, after)
			}
		}
	}
}

func TestWeights(t *testing.T) {
	p := tails(0.01, 0.4)
	c, err := Combine("stouffer", p, []float64{3, 1})
	if err != nil {
		t.Fatal(err)
	}
	// by hand: (3·2.3263478740 + 0.2533471031)/√10, quantiles from R qnorm
	near(t, "z", c.Statistic, (3*2.3263478740408411+0.25334710313579978)/math.Sqrt(10), 1e-14)
	if _, err := Combine("fisher", p, []float64{1, 1}); err == nil {
		t.Error("fisher takes weights")
	}
	if _, err := Combine("best", p, nil); err == nil {
		t.Error("an unknown method passes")
	}
	if _, err := Combine("fisher", nil, nil); err == nil {
		t.Error("no p-value passes")
	}
}
