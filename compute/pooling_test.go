package compute

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"steelyard/compute/pool"
	"steelyard/compute/result"
)

// pooling writes the table of a pool.
func pooling(outcome, model, more string) string {
	return fmt.Sprintf("[plan.pooling.%s]\nindependent = \"No subject took part in two of the studies.\"\nmodel = %q\n%s\n", outcome, model, more)
}

// tables writes one result a row of study, x1, n1, x2, n2.
func tables(rows [][]string, outcome string) string {
	var b strings.Builder
	for _, r := range rows {
		b.WriteString(entryOf(r[0], outcome, fmt.Sprintf("groups.new = { events = %s, n = %s }\ngroups.old = { events = %s, n = %s }", r[1], r[2], r[3], r[4])))
	}
	return b.String()
}

const pooled1 = "evidence = \"pooled\"\n"

// model finds one of the two models of the first pool.
func model(t *testing.T, res *result.Result, name string) *result.Pooled {
	t.Helper()
	for i := range res.Pooled {
		if res.Pooled[i].Model == name {
			return &res.Pooled[i]
		}
	}
	t.Fatalf("no %s model", name)
	return nil
}

// Published meta-analyses end to end, from the counts in the record to both
// models: values of published.json (SciPy 1.10 and R 4.2.2).
func TestPublishedPools(t *testing.T) {
	var kacker, correlations strings.Builder
	for _, r := range cells(t, "key_comparison.csv") {
		v := number1(t, r[2])
		kacker.WriteString(entryOf("lab "+r[0], "y", fmt.Sprintf("effect = { estimate = %s, se = %.17g }", r[1], math.Sqrt(v))))
	}
	for _, r := range cells(t, "six_studies_correlation.csv") {
		correlations.WriteString(entryOf(r[0], "y", fmt.Sprintf("sample = { n = %s, r = %s }", r[2], r[1])))
	}
	for _, c := range []struct {
		id, measure, keys, entries string
	}{
		{"meta-bcg", "risk-ratio", two, tables(cells(t, "bcg.csv"), "y")},
		{"meta-aspirin", "odds-ratio", two, tables(cells(t, "aspirin.csv"), "y")},
		{"meta-six-binary", "odds-ratio", two, tables(cells(t, "six_studies_binary.csv"), "y")},
		{"meta-six-correlation", "correlation", "better = \"higher\"\n", correlations.String()},
		{"meta-kacker", "estimate", "better = \"higher\"\nreference = 60\n", kacker.String()},
	} {
		want := published(t, c.id)
		back := func(x float64) float64 { // onto the analysis scale
			switch c.measure {
			case "risk-ratio", "odds-ratio":
				return math.Log(x)
			case "correlation":
				return math.Atanh(x)
			}
			return x
		}
		for suffix, between := range map[string]string{"_dl": "dersimonian-laird", "_pm": "paule-mandel", "_reml": "reml", "_sj": "sidik-jonkman"} {
			for prefix, more := range map[string]string{"": "interval = \"normal\"\n", "hk_": "interval = \"hartung-knapp\"\nguard = false\n"} {
				name := c.id + suffix + " " + prefix
				res := computed(t, head+outcome("y", c.measure, c.keys)+hypothesis("H1", "y", "differs", pooled1)+
					pooling("y", "random", fmt.Sprintf("between = %q\n%s", between, more))+c.entries)
				h, q := hyp(t, res, "H1"), model(t, res, "random")
				if !q.Decides || model(t, res, "common").Decides || h.Evidence != "pooled" {
					t.Fatalf("%s: the planned model does not decide", name)
				}
				near(t, name+" mu", back(h.Estimate.V), wanted(t, want, "mu"+suffix), 1e-8)
				near(t, name+" low", back(h.Low.V), wanted(t, want, prefix+"low"+suffix), 1e-8)
				near(t, name+" high", back(h.High.V), wanted(t, want, prefix+"high"+suffix), 1e-8)
				nearOpt(t, name+" tau2", q.Tau2, wanted(t, want, "tau2"+suffix), 1e-8)
				nearOpt(t, name+" Q", q.Q, wanted(t, want, "Q"), 1e-10)
				nearOpt(t, name+" Q-profile low", q.Tau2Low, wanted(t, want, "qprofile_low"), 1e-8)
				nearOpt(t, name+" Q-profile high", q.Tau2High, wanted(t, want, "qprofile_high"), 1e-8)
				if prefix == "" {
					near(t, name+" prediction low", back(q.PredictionLow.V), wanted(t, want, "pi_low"+suffix), 1e-8)
					near(t, name+" prediction high", back(q.PredictionHigh.V), wanted(t, want, "pi_high"+suffix), 1e-8)
				}
				common := model(t, res, "common")
				near(t, name+" common", back(common.Estimate.V), wanted(t, want, "common"), 1e-9)
				if q.Set != "" || len(q.Studies) != q.K || len(q.Share) != q.K {
					t.Errorf("%s: %d studies, %d weights", name, len(q.Studies), len(q.Share))
				}
			}
		}
	}
}

func number1(t *testing.T, s string) float64 {
	t.Helper()
	var v float64
	if _, err := fmt.Sscan(s, &v); err != nil {
		t.Fatal(err)
	}
	return v
}

// Mantel–Haenszel and Peto weights end to end: SciPy 1.10 recomputation of the
// published sets. Q is taken about the model's own estimate.
func TestTablesPooled(t *testing.T) {
	want := published(t, "meta-bcg")
	text := head + outcome("y", "risk-ratio", two) + hypothesis("H1", "y", "differs", pooled1) +
		pooling("y", "common", "weights = \"mantel-haenszel\"") + tables(cells(t, "bcg.csv"), "y")
	res := computed(t, text)
	h := hyp(t, res, "H1")
	near(t, "MH risk ratio", h.Estimate.V, wanted(t, want, "mh_rr"), 1e-9)
	near(t, "MH low", h.Low.V, wanted(t, want, "mh_rr_low"), 1e-9)
	near(t, "MH high", h.High.V, wanted(t, want, "mh_rr_high"), 1e-9)
	q := model(t, res, "common")
	about := 0.0
	for _, r := range cells(t, "bcg.csv") {
		x1, n1, x2, n2 := number1(t, r[1]), number1(t, r[2]), number1(t, r[3]), number1(t, r[4])
		d := math.Log(x1/n1*n2/x2) - math.Log(h.Estimate.V)
		about += d * d / (1/x1 - 1/n1 + 1/x2 - 1/n2)
	}
	nearOpt(t, "Q about it", q.Q, about, 1e-9)
	if q.Weights != "mantel-haenszel" || model(t, res, "random").Weights != "inverse-variance" || h.Method != "common-mantel-haenszel" {
		t.Errorf("weights %s and %s, method %s", q.Weights, model(t, res, "random").Weights, h.Method)
	}
	if len(q.LeaveOneOut) != q.K || len(q.Cumulative) != q.K {
		t.Errorf("%d left out, %d steps", len(q.LeaveOneOut), len(q.Cumulative))
	}
	text = strings.Replace(strings.Replace(text, "risk-ratio", "odds-ratio", 1), "mantel-haenszel", "peto", 1)
	res = computed(t, text)
	near(t, "Peto", hyp(t, res, "H1").Estimate.V, wanted(t, want, "peto_or"), 1e-9)
	if !strings.Contains(codes(res), "S202") {
		t.Error("unequal arms are not said")
	}
	// A study that gives its effect alone has no table.
	res = computed(t, text+given1("Another", "y", 0.8, 0.3))
	if h = hyp(t, res, "H1"); h.Reason == nil || h.Reason.Code != "S104" || !strings.Contains(Text(*h.Reason), "Another") {
		t.Errorf("without a table: %s %v", h.Verdict, h.Reason)
	}
}

// Zero cells get the continuity correction, which is said; double-zero studies
// leave a ratio, are counted, and stay in a difference.
func TestZeroCells(t *testing.T) {
	entries := tables([][]string{{"A", "0", "20", "4", "20"}, {"B", "3", "30", "6", "30"}, {"C", "0", "15", "0", "15"}}, "y")
	plan := func(measure, more string) string {
		return head + outcome("y", measure, two) + hypothesis("H1", "y", "differs", pooled1) + pooling("y", "common", more) + entries
	}
	y := [2]float64{math.Log(0.5 / 20.5 * 16.5 / 4.5), math.Log(3.0 / 27 * 24 / 6)}
	v := [2]float64{1/0.5 + 1/20.5 + 1/4.5 + 1/16.5, 1.0/3 + 1.0/27 + 1.0/6 + 1.0/24}
	mean := (y[0]/v[0] + y[1]/v[1]) / (1/v[0] + 1/v[1])
	res := computed(t, plan("odds-ratio", ""))
	near(t, "odds ratio", hyp(t, res, "H1").Estimate.V, math.Exp(mean), 1e-12)
	q := model(t, res, "common")
	if q.K != 2 || len(q.LeftForZero) != 1 || q.LeftForZero[0] != "C" || !strings.Contains(codes(res), "S214") || !strings.Contains(codes(res), "S215") {
		t.Errorf("k %d, left %v, %s", q.K, q.LeftForZero, codes(res))
	}
	res = computed(t, plan("odds-ratio", "continuity = 0.25"))
	if math.Abs(hyp(t, res, "H1").Estimate.V-math.Exp(mean)) < 1e-6 {
		t.Error("the stated correction changes nothing")
	}
	res = computed(t, plan("risk-difference", ""))
	if q = model(t, res, "common"); q.K != 3 || len(q.LeftForZero) > 0 {
		t.Errorf("difference: k %d, left %v", q.K, q.LeftForZero)
	}
	res = computed(t, plan("odds-ratio", "weights = \"peto\""))
	if strings.Contains(codes(res), "S215") {
		t.Error("Peto weights need no correction, and one is said")
	}
	// Nothing but double zeros: no study is left.
	res = computed(t, head+outcome("y", "odds-ratio", two)+hypothesis("H1", "y", "differs", pooled1)+pooling("y", "common", "")+
		tables([][]string{{"A", "0", "20", "0", "20"}, {"B", "9", "9", "8", "8"}}, "y"))
	if h := hyp(t, res, "H1"); h.Verdict != result.Open || h.Reason == nil || h.Reason.Code != "S101" {
		t.Errorf("double zeros alone: %s %v", h.Verdict, h.Reason)
	}
}

// pooledEffects is a record of effects with their errors under a model.
func pooledEffects(claims, model, more string, y, se []float64) string {
	var b strings.Builder
	b.WriteString(head + outcome("e", "estimate", "better = \"higher\"\nsmallest = 0.3\n"+why) + claims + pooling("e", model, more))
	for i := range y {
		b.WriteString(given1(string(rune('A'+i)), "e", y[i], se[i]))
	}
	return b.String()
}

// Claims on pooled evidence are decided as those on one study: here against
// the common-effect mean worked out by hand.
func TestClaimsOnPools(t *testing.T) {
	y, se := []float64{0.4, 0.5, 0.2}, []float64{0.1, 0.2, 0.15}
	var sw, swy float64
	for i := range y {
		w := 1 / (se[i] * se[i])
		sw, swy = sw+w, swy+w*y[i]
	}
	mu, s := swy/sw, math.Sqrt(1/sw)
	claims := ""
	want := map[string]float64{"noninferior": tail((mu + 0.3) / s), "minimum-effect": tail((mu - 0.3) / s), "equivalent": tail((0.3 - mu) / s),
		"superior": tail(mu / s), "differs": 2 * tail(mu/s), "benefit-too-small": tail((0.3 - mu) / s)}
	for claim := range want {
		claims += hypothesis("H-"+claim, "e", claim, pooled1+"role = \"secondary\"")
	}
	res := computed(t, pooledEffects(claims, "common", "", y, se))
	for claim, p := range want {
		h := hyp(t, res, "H-"+claim)
		near(t, claim, h.P.P, p, 1e-12)
		near(t, claim+" estimate", h.Estimate.V, mu, 1e-12)
		nearOpt(t, claim+" se", h.SE, s, 1e-12)
	}
	if len(res.Pooled) != 2 || len(res.Pooled[0].Hypotheses) != len(want) {
		t.Errorf("%d models, for %v", len(res.Pooled), res.Pooled[0].Hypotheses)
	}
}

// Leaving out a study gives the estimate, verdict and reading of a record
// without that study.
func TestLeaveOneOutIsTheRecordWithout(t *testing.T) {
	y, se := []float64{0.5, 0.45, 0.1, 0.6}, []float64{0.2, 0.25, 0.3, 0.2}
	claims := hypothesis("H1", "e", "superior", pooled1) + hypothesis("H2", "e", "noninferior", pooled1) +
		"[plan.family.F]\nmembers = [\"H1\", \"H2\"]\nprocedure = \"holm\"\n"
	for _, m := range []string{"common", "random"} {
		full := computed(t, pooledEffects(claims, m, "", y, se)+"")
		q := model(t, full, m)
		if !q.Decides || len(q.LeaveOneOut) != len(y) {
			t.Fatalf("%s: %d left out", m, len(q.LeaveOneOut))
		}
		for i, l := range q.LeaveOneOut {
			ys := append(append([]float64{}, y[:i]...), y[i+1:]...)
			ss := append(append([]float64{}, se[:i]...), se[i+1:]...)
			rest := computed(t, pooledEffects(claims, m, "", ys, ss))
			near(t, m+" estimate", l.Estimate, model(t, rest, m).Estimate.V, 1e-9)
			near(t, m+" low", l.Low, model(t, rest, m).Low.V, 1e-9)
			h := hyp(t, rest, "H1")
			if l.Verdicts[0].Hypothesis != "H1" || l.Verdicts[0].Reading != h.Reading {
				t.Errorf("%s without %s: %+v, the record says %+v", m, l.Study, l.Verdicts[0], h.Reading)
			}
		}
		// The cumulative steps are those of the studies as they came.
		if c := q.Cumulative; len(c) != 4 || c[0].Study != "A" || math.Abs(c[3].Estimate-q.Estimate.V) > 1e-9 {
			t.Errorf("%s: steps %+v", m, c)
		}
	}
}

// Evidence grows by date, then in the order of the record.
func TestCumulativeByDate(t *testing.T) {
	text := pooledEffects(hypothesis("H1", "e", "superior", pooled1), "common", "", []float64{0.1, 0.2, 0.3}, []float64{0.1, 0.1, 0.1})
	text = strings.Replace(text, "study = \"C\"\noutcome = \"e\"\ndate = 2026-03-02", "study = \"C\"\noutcome = \"e\"\ndate = 2026-03-01", 1)
	c := model(t, computed(t, text), "common").Cumulative
	var got []string
	for _, s := range c {
		got = append(got, s.Study)
	}
	if strings.Join(got, "") != "CAB" || math.Abs(c[1].Estimate-0.2) > 1e-12 {
		t.Errorf("%+v", c)
	}
}

// One study stands for itself, by its own method, also when another is left
// out or gives a p-value alone; earlier results count only when asked for.
func TestOneStudyInAPool(t *testing.T) {
	entry := "groups.new = { n = 12, mean = 5, sd = 2 }\ngroups.old = { n = 12, mean = 3, sd = 1 }"
	base := head + outcome("y", "mean-difference", two) + hypothesis("H1", "y", "superior", pooled1)
	random := pooling("y", "random", "")
	alone := hyp(t, computed(t, base+random+entryOf("A", "y", entry)), "H1")
	if alone.Method != "welch" || alone.Evidence != "pooled" {
		t.Errorf("one study: %s, %s", alone.Method, alone.Evidence)
	}
	res := computed(t, base+random+"[plan.combination.y]\nmethod = \"fisher\"\n"+entryOf("A", "y", entry)+
		entryOf("B", "y", "p = { value = 0.2, sides = 2, direction = \"above\" }"))
	h := hyp(t, res, "H1")
	if h.P != alone.P || len(h.Studies) != 1 || !strings.Contains(codes(res), "S113") {
		t.Errorf("beside a bare p: %+v of %v, %s", h.P, h.Studies, codes(res))
	}
	earlier := strings.Replace(entryOf("Before", "y", entry), "[[result]]", "[[earlier_result]]", 1)
	res = computed(t, base+random+entryOf("A", "y", entry)+earlier)
	if h = hyp(t, res, "H1"); h.P != alone.P || res.Studies[1].Use != result.EarlierUse {
		t.Errorf("an earlier result is analysed: %+v", h.P)
	}
	res = computed(t, base+pooling("y", "common", "include_earlier = true")+entryOf("A", "y", entry)+earlier)
	if h = hyp(t, res, "H1"); h.Method != "common" || len(h.Studies) != 2 {
		t.Errorf("an earlier result asked for is not: %s of %v", h.Method, h.Studies)
	}
	se := math.Sqrt(4.0/12 + 1.0/12)
	near(t, "p of both", h.P.P, tail(2/(se/math.Sqrt2)), 1e-12)
}

// The error common to all studies enters once, after pooling.
func TestSystematicErrorAfterPooling(t *testing.T) {
	text := pooledEffects(hypothesis("H1", "e", "superior", pooled1), "common", "", []float64{0.4, 0.6}, []float64{0.2, 0.2})
	text = strings.Replace(text, "smallest = 0.3", "systematic_u = 0.3\nsmallest = 0.3", 1)
	h := hyp(t, computed(t, text), "H1")
	nearOpt(t, "se", h.SE, math.Sqrt(0.02+0.09), 1e-12)
	near(t, "p", h.P.P, tail(0.5/math.Sqrt(0.11)), 1e-12)
	q := model(t, computed(t, text), "common")
	near(t, "left out", q.LeaveOneOut[0].High, 0.6+1.959963984540054*math.Sqrt(0.04+0.09), 1e-12)
}

// Few studies, agreeing studies, and too few for the small-study check are
// said; ten have one.
func TestNotesOfPools(t *testing.T) {
	claims := hypothesis("H1", "e", "superior", pooled1)
	res := computed(t, pooledEffects(claims, "random", "", []float64{0.4, 0.41, 0.39}, []float64{0.2, 0.2, 0.2}))
	for _, code := range []string{"S212", "S213", "S216"} {
		if strings.Count(codes(res), code) != 1 {
			t.Errorf("%s: %s", code, codes(res))
		}
	}
	h := hyp(t, res, "H1")
	nearOpt(t, "se with the floor", h.SE, 0.2/math.Sqrt(3), 1e-9)
	nearOpt(t, "df", h.DF, 2, 0)
	var y, se []float64
	for i := range 10 {
		y, se = append(y, 0.3+0.05*float64(i%4)), append(se, 0.1+0.02*float64(i))
	}
	res = computed(t, pooledEffects(claims, "random", "", y, se))
	if q := model(t, res, "random"); q.SmallStudy == nil || q.SmallStudy.Kind != "egger" || strings.Contains(codes(res), "S216") || strings.Contains(codes(res), "S212") {
		t.Errorf("ten studies: %+v, %s", q.SmallStudy, codes(res))
	}
	// Peters' regression of the 13 trials, R 4.2.2, 2026-12-01:
	// d <- read.csv("bcg.csv"); y <- log(d[,2]/d[,3]*d[,5]/d[,4]); N <- d[,3]+d[,5]; s <- d[,2]+d[,4]
	// coef(summary(lm(y ~ I(1/N), weights = s*(N-s)/N)))[2,]
	res = computed(t, head+outcome("y", "risk-ratio", two)+hypothesis("H1", "y", "differs", pooled1)+pooling("y", "random", "")+tables(cells(t, "bcg.csv"), "y"))
	if s := model(t, res, "random").SmallStudy; s == nil || s.Kind != "peters" {
		t.Errorf("counts: %+v", s)
	} else {
		near(t, "peters slope", s.Coefficient, -504.0136283724855275, 1e-9)
		near(t, "peters se", s.SE, 396.8019346996302374, 1e-9)
		near(t, "peters p", s.P.P, 0.2302268747226679, 1e-9)
	}
}

// A study that cannot be analysed keeps the pool open, by name.
func TestProblemInAPool(t *testing.T) {
	text := head + outcome("y", "mean-difference", two) + hypothesis("H1", "y", "superior", pooled1) + pooling("y", "common", "") +
		entryOf("good", "y", "groups.new = { n = 12, mean = 5, sd = 2 }\ngroups.old = { n = 12, mean = 3, sd = 1 }") +
		entryOf("bad", "y", "groups.new = { n = 1, mean = 5, sd = 0 }\ngroups.old = { n = 12, mean = 3, sd = 1 }")
	h := hyp(t, computed(t, text), "H1")
	if h.Verdict != result.Open || h.Reason == nil || h.Reason.Code != "S101" || !strings.Contains(Text(*h.Reason), "bad") {
		t.Errorf("%s, %v", h.Verdict, h.Reason)
	}
}

// The other models stand beside the planned one, each with its verdict.
func TestOtherModelsBeside(t *testing.T) {
	y, se := []float64{0.4, 0.5, 0.2}, []float64{0.1, 0.2, 0.15}
	h := hyp(t, computed(t, pooledEffects(hypothesis("H1", "e", "superior", pooled1), "random", "", y, se)), "H1")
	if h.MethodsTried != len(models())-1 {
		t.Errorf("%d models beside the planned one", h.MethodsTried)
	}
	agree := 0
	for _, j := range h.Alternatives {
		if j.Verdict == h.Verdict {
			agree++
		}
		if j.Method == h.Method {
			t.Errorf("the planned model %s stands beside itself", j.Method)
		}
	}
	if agree != h.MethodsAgree || agree == 0 {
		t.Errorf("%d agree, counted %d", h.MethodsAgree, agree)
	}
	var studies []pool.Study
	for i := range y {
		studies = append(studies, pool.Study{Y: y[i], V: se[i] * se[i]})
	}
	want := pool.Fit(studies, pool.Options{Random: true, Between: pool.PauleMandel, Interval: pool.Normal})
	j := because(h, "method:random-paule-mandel-normal")
	if len(j) != 1 {
		t.Fatal("no such model")
	}
	nearOpt(t, "its estimate", j[0].Estimate, want.Mu, 1e-12)
}

// The prediction interval is read against null and region.
func TestPredictionReading(t *testing.T) {
	y, se := []float64{2, 3, 2.5, 2.2}, []float64{0.1, 0.1, 0.1, 0.1}
	q := model(t, computed(t, pooledEffects(hypothesis("H1", "e", "superior", pooled1), "random", "", y, se)), "random")
	above := 0
	for _, c := range []float64{-0.3, 0, 0.3} {
		if q.PredictionLow.V > c {
			above++
		}
	}
	if r := q.PredictionReading; !r.OK || !r.HasRegion || r.Above != above || r.Below != 0 || above == 0 {
		t.Errorf("%+v for %g to %g", r, q.PredictionLow.V, q.PredictionHigh.V)
	}
}
