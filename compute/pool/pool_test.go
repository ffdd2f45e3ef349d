package pool

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"steelyard/compute/effect"
)

const dir = "../../testdata/reference"

type reporter interface {
	Helper()
	Errorf(string, ...any)
}

// near compares at a relative tolerance.
func near(t reporter, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Max(1, math.Abs(want))) {
		t.Errorf("%s = %.12g, want %.12g", what, got, want)
	}
}

type counter int

func (c *counter) Helper()               {}
func (c *counter) Errorf(string, ...any) { *c++ }

func TestNearFails(t *testing.T) {
	var c counter
	near(&c, "x", 1, 1.1, 1e-3)
	near(&c, "x", math.NaN(), 1, 1e-3)
	near(&c, "x", 1, 1, 1e-12)
	if c != 2 {
		t.Fatalf("near reported %d faults, want 2", c)
	}
}

func recomputed(t *testing.T, id string) map[string]float64 {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(dir, "published.json"))
	if err != nil {
		t.Fatal(err)
	}
	var rows []struct {
		ID         string             `json:"id"`
		Recomputed map[string]float64 `json:"recomputed"`
	}
	if err := json.Unmarshal(text, &rows); err != nil {
		// Other rows hold lists; read this one alone.
		var raw []map[string]json.RawMessage
		if err := json.Unmarshal(text, &raw); err != nil {
			t.Fatal(err)
		}
		for _, r := range raw {
			var name string
			_ = json.Unmarshal(r["id"], &name)
			if name != id {
				continue
			}
			out := map[string]float64{}
			if err := json.Unmarshal(r["recomputed"], &out); err != nil {
				t.Fatal(err)
			}
			return out
		}
		t.Fatalf("no row %q", id)
	}
	for _, r := range rows {
		if r.ID == id {
			return r.Recomputed
		}
	}
	t.Fatalf("no row %q", id)
	return nil
}

func columns(t *testing.T, name string) [][]float64 {
	t.Helper()
	f, err := os.Open(filepath.Join(dir, "data", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out [][]float64
	for _, row := range rows[1:] {
		var x []float64
		for _, cell := range row[1:] {
			v, err := strconv.ParseFloat(cell, 64)
			if err != nil {
				t.Fatal(err)
			}
			x = append(x, v)
		}
		out = append(out, x)
	}
	return out
}

// logRiskRatios and logOddsRatios build studies from x1, n1, x2, n2.
func logRiskRatios(rows [][]float64) []Study {
	var out []Study
	for _, r := range rows {
		out = append(out, Study{math.Log(r[0] / r[1] / (r[2] / r[3])), 1/r[0] - 1/r[1] + 1/r[2] - 1/r[3]})
	}
	return out
}

func logOddsRatios(rows [][]float64) []Study {
	var out []Study
	for _, r := range rows {
		a, b, c, d := r[0], r[1]-r[0], r[2], r[3]-r[2]
		out = append(out, Study{math.Log(a * d / (b * c)), 1/a + 1/b + 1/c + 1/d})
	}
	return out
}

// The rows of published.json carry, beside the printed values, those of an
// independent computation for every estimator (SciPy 1.10 and R 4.2.2).
func TestPublishedMetaAnalyses(t *testing.T) {
	kacker := func() []Study {
		var out []Study
		for _, r := range columns(t, "key_comparison.csv") {
			out = append(out, Study{r[0], r[1]})
		}
		return out
	}
	correlations := func() []Study {
		var out []Study
		for _, r := range columns(t, "six_studies_correlation.csv") {
			out = append(out, Study{math.Atanh(r[0]), 1 / (r[1] - 3)})
		}
		return out
	}
	for _, c := range []struct {
		id      string
		studies []Study
	}{
		{"meta-bcg", bcg(t)},
		{"meta-aspirin", logOddsRatios(columns(t, "aspirin.csv"))},
		{"meta-six-binary", logOddsRatios(columns(t, "six_studies_binary.csv"))},
		{"meta-six-correlation", correlations()},
		{"meta-kacker", kacker()},
	} {
		t.Run(c.id, func(t *testing.T) {
			want := recomputed(t, c.id)
			common := Fit(c.studies, Options{})
			near(t, "common", common.Mu, want["common"], 1e-10)
			near(t, "common se", common.SE, want["common_se"], 1e-10)
			for suffix, between := range map[string]Between{"_dl": DerSimonianLaird, "_pm": PauleMandel, "_reml": REML, "_sj": SidikJonkman} {
				checkEstimator(t, c.studies, between, suffix, want)
			}
			h := HeterogeneityOf(c.studies, Fit(c.studies, Options{Random: true, Between: DerSimonianLaird}).Tau2, 0.025)
			near(t, "Q", h.Q, want["Q"], 1e-10)
			near(t, "p of Q", h.P.P, want["p_Q"], 1e-10)
			near(t, "I2", 100*h.I2, want["I2_percent"], 1e-9)
			near(t, "Q-profile low", h.Tau2Low, want["qprofile_low"], 1e-8)
			near(t, "Q-profile high", h.Tau2High, want["qprofile_high"], 1e-8)
		})
	}
}

func bcg(t *testing.T) []Study {
	rows := columns(t, "bcg.csv")
	return logRiskRatios(rows)
}

func checkEstimator(t *testing.T, studies []Study, between Between, suffix string, want map[string]float64) {
	t.Helper()
	normal := Fit(studies, Options{Random: true, Between: between, Interval: Normal})
	near(t, "tau2"+suffix, normal.Tau2, want["tau2"+suffix], 1e-8)
	near(t, "mu"+suffix, normal.Mu, want["mu"+suffix], 1e-8)
	near(t, "se"+suffix, normal.SE, want["se"+suffix], 1e-8)
	low, high := normal.Limits(0.025)
	near(t, "low"+suffix, low, want["low"+suffix], 1e-8)
	near(t, "high"+suffix, high, want["high"+suffix], 1e-8)
	low, high, _ = normal.Prediction(len(studies), 0.025)
	near(t, "pi_low"+suffix, low, want["pi_low"+suffix], 1e-8)
	near(t, "pi_high"+suffix, high, want["pi_high"+suffix], 1e-8)
	hk := Fit(studies, Options{Random: true, Between: between, Interval: HartungKnapp})
	near(t, "hk_se"+suffix, hk.SE, want["hk_se"+suffix], 1e-8)
	low, high = hk.Limits(0.025)
	near(t, "hk_low"+suffix, low, want["hk_low"+suffix], 1e-8)
	near(t, "hk_high"+suffix, high, want["hk_high"+suffix], 1e-8)
}

// Values computed for the project by a second implementation (methods.md M).
func TestSixEstimates(t *testing.T) {
	y := []float64{.1, .5, .3, -.2, .8, .45}
	v := []float64{.04, .02, .05, .03, .06, .01}
	var s []Study
	for i := range y {
		s = append(s, Study{y[i], v[i]})
	}
	for between, want := range map[Between]float64{REML: 0.0760437, PauleMandel: 0.0805174, DerSimonianLaird: 0.0662284, SidikJonkman: 0.0857909} {
		near(t, string(between), Fit(s, Options{Random: true, Between: between}).Tau2, want, 6e-8)
	}
	p := Fit(s, Options{Random: true, Between: REML, Interval: HartungKnapp})
	low, high := p.Limits(0.025)
	plow, phigh, ok := p.Prediction(6, 0.025)
	for _, c := range []struct {
		what      string
		got, want float64
	}{{"mu", p.Mu, 0.3191896}, {"q", p.Ratio, 1.0394893}, {"low", low, -0.0330358}, {"high", high, 0.6714150},
		{"prediction low", plow, -0.5357508}, {"prediction high", phigh, 1.1741301}} {
		near(t, c.what, c.got, c.want, 6e-8)
	}
	h := HeterogeneityOf(s, p.Tau2, 0.025)
	near(t, "Q-profile low", h.Tau2Low, 0.0103319, 6e-8)
	near(t, "Q-profile high", h.Tau2High, 0.6795097, 6e-8)
	if !ok {
		t.Error("no prediction interval for six studies")
	}
}

// The maximum of the restricted likelihood, sought by golden section on a
// fine grid of starts, agrees with the root of the score.
func TestREMLIsTheMaximum(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 200 {
		s := random(rng, 2+rng.IntN(12))
		got := Fit(s, Options{Random: true, Between: REML}).Tau2
		best := likelihood(s, got)
		for i := range 400 {
			at := meanV(s) * math.Pow(10, -6+9*float64(i)/399)
			if l := likelihood(s, at); l > best+1e-9*math.Abs(best) {
				t.Fatalf("tau2 = %g has likelihood %.12g; %g has %.12g", got, best, at, l)
			}
		}
		if l := likelihood(s, 0); l > best+1e-9*math.Abs(best) {
			t.Fatalf("0 is better than %g", got)
		}
	}
}

func random(rng *rand.Rand, k int) []Study {
	s := make([]Study, k)
	for i := range s {
		v := math.Exp(rng.NormFloat64()) / 20
		s[i] = Study{rng.NormFloat64()*math.Sqrt(v) + 0.3*rng.NormFloat64(), v}
	}
	return s
}

// Laws: shifting moves only the mean, scaling scales, leaving one out equals
// fitting the rest, the guard never narrows below the normal interval.
func TestLaws(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for range 100 {
		s := random(rng, 3+rng.IntN(10))
		for _, between := range []Between{REML, PauleMandel, DerSimonianLaird, SidikJonkman} {
			o := Options{Random: true, Between: between, Interval: HartungKnapp, Guard: true}
			p := Fit(s, o)
			var moved, scaled []Study
			for _, x := range s {
				moved = append(moved, Study{x.Y + 7, x.V})
				scaled = append(scaled, Study{x.Y * 3, x.V * 9})
			}
			near(t, "moved", Fit(moved, o).Mu-7, p.Mu, 1e-8)
			near(t, "scaled", Fit(scaled, o).Mu, 3*p.Mu, 1e-7)
			near(t, "scaled tau2", Fit(scaled, o).Tau2, 9*p.Tau2, 1e-7)
			n := Fit(s, Options{Random: true, Between: between, Interval: Normal})
			if p.SE < n.SE*(1-1e-12) {
				t.Fatalf("guard left %g below %g", p.SE, n.SE)
			}
			for i, l := range LeaveOneOut(s, o) {
				rest := append(append([]Study{}, s[:i]...), s[i+1:]...)
				near(t, "left out", l.Mu, Fit(rest, o).Mu, 1e-7)
			}
		}
	}
}

func TestEggerIsALine(t *testing.T) {
	// R 4.2.2, 2026-12-01: summary(lm(y/sqrt(v) ~ I(1/sqrt(v)))) on the values
	// of TestSixEstimates, intercept row.
	y := []float64{.1, .5, .3, -.2, .8, .45}
	v := []float64{.04, .02, .05, .03, .06, .01}
	var s []Study
	for i := range y {
		s = append(s, Study{y[i], v[i]})
	}
	r, ok := Egger(s)
	if !ok {
		t.Fatal("no line")
	}
	near(t, "intercept", r.Coefficient, -1.122163454178667, 1e-9)
	near(t, "se", r.SE, 2.635033491276481, 1e-9)
	near(t, "p", 2*r.P.P, 0.692122654491528, 1e-9)
	if _, ok := Egger(s[:2]); ok {
		t.Error("two studies gave a line")
	}
}

func BenchmarkFitREML1000(b *testing.B) {
	s := random(rand.New(rand.NewPCG(5, 6)), 1000)
	for b.Loop() {
		Fit(s, Options{Random: true, Between: REML, Interval: HartungKnapp})
	}
}

func BenchmarkLeaveOneOut1000(b *testing.B) {
	s := random(rand.New(rand.NewPCG(5, 6)), 1000)
	for b.Loop() {
		LeaveOneOut(s, Options{Random: true, Between: REML, Interval: HartungKnapp})
	}
}

// Peto's odds ratios of the published sets (SciPy 1.10 recomputation in
// testdata/reference/published.json).
func TestPeto(t *testing.T) {
	for _, c := range []struct{ id, file string }{{"meta-bcg", "bcg.csv"}, {"meta-aspirin", "aspirin.csv"}, {"meta-six-binary", "six_studies_binary.csv"}} {
		var tables []effect.Stratum
		for _, r := range columns(t, c.file) {
			tables = append(tables, effect.Stratum{X1: r[0], N1: r[1], X2: r[2], N2: r[3]})
		}
		p, ok := Peto(tables)
		if !ok {
			t.Fatal("no pooled ratio")
		}
		near(t, c.id, math.Exp(p.Mu), recomputed(t, c.id)["peto_or"], 1e-12)
	}
}
