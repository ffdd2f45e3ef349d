package compute

import (
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"steelyard/compute/result"
)

// fromFile writes an entry that names a data file.
func fromFile(study, outcome, columns string) string {
	return entryOf(study, outcome, "data = { file = \"d.csv\", "+columns+" }")
}

// Published data sets through a file, one row an observation: R 4.2.2
// (published.json and the calls beside the rows).
func TestPublishedData(t *testing.T) {
	sleep := published(t, "mean-sleep-paired")
	tomato, skin := published(t, "mean-tomato-two-sample"), published(t, "gmr-skinfold")
	wing, perm := published(t, "corr-wing-tail"), published(t, "rank-permeability")
	cross, cox, rmst := published(t, "tost-chow-liu"), published(t, "cox-leukaemia"), published(t, "rmst-leukaemia")
	for _, c := range []struct {
		what, measure, keys, method, columns, file string
		estimate, low, high, p                     float64
	}{
		{"pairs in two columns", "paired-mean-difference", `groups = ["drug2", "drug1"]`, "", `first = "drug2", second = "drug1"`, text(t, "sleep.csv"),
			sleep["estimate"], sleep["low"], sleep["high"], sleep["p"]},
		{"pairs in rows", "paired-mean-difference", `groups = ["drug2", "drug1"]`, "", `value = "v", group = "g", pair = "patient"`, longSleep(t),
			sleep["estimate"], sleep["low"], sleep["high"], sleep["p"]},
		{"two groups", "mean-difference", `groups = ["B", "A"]`, "pooled-variance", `value = "yield", group = "fertilizer"`, text(t, "tomato.csv"),
			tomato["estimate"], tomato["low"], tomato["high"], tomato["p"]},
		{"logs", "geometric-mean-ratio", `groups = ["crohn", "coeliac"]`, "pooled-variance", `value = "biceps_mm", group = "disease"`, text(t, "skinfold.csv"),
			skin["ratio"], skin["ratio_low"], skin["ratio_high"], skin["p_log"]},
		{"logs by welch", "geometric-mean-ratio", `groups = ["crohn", "coeliac"]`, "welch", `value = "biceps_mm", group = "disease"`, text(t, "skinfold.csv"),
			skin["ratio"], skin["welch_ratio_low"], skin["welch_ratio_high"], -1},
		{"correlation", "correlation", "", "", `first = "wing_cm", second = "tail_cm"`, text(t, "wing_tail.csv"), wing["r"], wing["low"], wing["high"], -1},
		{"shift", "median-shift", `groups = ["term", "early"]`, "wilcoxon-exact", `value = "pd", group = "stage"`, text(t, "permeability.csv"),
			perm["shift"], perm["low"], perm["high"], perm["p_two_sided"]},
		{"crossover", "mean-difference", "groups = [\"T\", \"R\"]\ndesign = \"crossover\"", "", `value = "v", subject = "subject", period = "p", sequence = "s"`, crossover(t),
			cross["estimate"], -1, -1, -1},
		{"hazards", "hazard-ratio", `groups = ["placebo", "six_mp"]`, "", `time = "weeks", event = "relapse", group = "arm"`, text(t, "leukaemia_6mp.csv"),
			cox["hr_efron"], cox["low_efron"], cox["high_efron"], -1},
		{"restricted means", "restricted-mean-difference", "groups = [\"six_mp\", \"placebo\"]\nhorizon = 23", "", `time = "weeks", event = "relapse", group = "arm"`, text(t, "leukaemia_6mp.csv"),
			rmst["six_mp_23"] - rmst["placebo_23"], -1, -1, -1},
	} {
		method := ""
		if c.method != "" {
			method = fmt.Sprintf("method = %q\n", c.method)
		}
		res := computed(t, head+outcome("y", c.measure, c.keys)+hypothesis("H1", "y", "differs", method)+fromFile("A", "y", c.columns), "d.csv", c.file)
		h := hyp(t, res, "H1")
		if h.Reason != nil {
			t.Errorf("%s: %s", c.what, Text(*h.Reason))
			continue
		}
		nearOpt(t, c.what, h.Estimate, c.estimate, 1e-9)
		for _, x := range []struct {
			what string
			got  float64
			want float64
		}{{"low", h.Low.V, c.low}, {"high", h.High.V, c.high}, {"p", h.P.P, c.p}} {
			if x.want != -1 {
				near(t, c.what+" "+x.what, x.got, x.want, 1e-8)
			}
		}
		if s := res.Studies[0]; s.Form != "data" || s.File != "d.csv" || !s.Analysis.Estimate.OK || res.Files[0].Used == 0 {
			t.Errorf("%s: the entry %+v", c.what, s)
		}
		if timed := strings.Contains(c.measure, "hazard") || strings.Contains(c.measure, "restricted"); timed != (len(res.Studies[0].Survival) == 2) {
			t.Errorf("%s: %d curves", c.what, len(res.Studies[0].Survival))
		}
	}
	// The 90 % interval of the crossover is the two one-sided tests'.
	res := computed(t, head+outcome("y", "mean-difference", "groups = [\"T\", \"R\"]\ndesign = \"crossover\"\nsmallest = 16.5\n"+why)+hypothesis("H1", "y", "equivalent", "")+
		fromFile("A", "y", `value = "v", subject = "subject", period = "p", sequence = "s"`), "d.csv", crossover(t))
	near(t, "crossover low", hyp(t, res, "H1").Low.V, cross["low90"], 1e-9)
	near(t, "crossover high", hyp(t, res, "H1").High.V, cross["high90"], 1e-9)
}

// longSleep is the sleep data with a row a reading.
func longSleep(t *testing.T) string {
	b := "patient,g,v\n"
	for _, r := range cells(t, "sleep.csv") {
		b += r[0] + ",drug1," + r[1] + "\n" + r[0] + ",drug2," + r[2] + "\n"
	}
	return b
}

// crossover is the crossover data with a row a period.
func crossover(t *testing.T) string {
	b := "subject,s,p,v\n"
	for _, r := range cells(t, "crossover_auc.csv") {
		for i, v := range r[2:] {
			b += fmt.Sprintf("%s,%s,%d,%s\n", r[0], r[1][:1], i+1, v)
		}
	}
	return b
}

// Covariates and strata of a linear model: R 4.2.2, 2026-12-01, with
// a <- subset(read.csv("anorexia.csv"), Treat != "Cont"); g <- Treat == "FT";
// half <- ifelse(Prewt > 83, "high", "low"): coef(summary(lm(Postwt ~ g + Prewt)))
// and coef(summary(lm(Postwt ~ g + half))).
func TestLinearModels(t *testing.T) {
	b := "Treat,Prewt,Postwt,half\n"
	for _, r := range cells(t, "anorexia.csv") {
		half := "low"
		if number1(t, r[1]) > 83 {
			half = "high"
		}
		if r[0] != "Cont" {
			b += strings.Join(append(r[:3:3], half), ",") + "\n"
		}
	}
	record := func(more string) string {
		return head + outcome("y", "mean-difference", `groups = ["FT", "CBT"]`) + hypothesis("H1", "y", "differs", more) + fromFile("A", "y", `value = "Postwt", group = "Treat"`)
	}
	h := hyp(t, computed(t, record(`adjust = ["Prewt"]`), "d.csv", b), "H1")
	nearOpt(t, "covariate", h.Estimate, 4.32730538594237935, 1e-10)
	nearOpt(t, "its error", h.SE, 2.23617093628897257, 1e-10)
	near(t, "low", h.Low.V, -0.1823630974115709, 1e-9)
	near(t, "p", h.P.P, 0.05956764535917908, 1e-9)
	nearOpt(t, "df", h.DF, 43, 0)
	if h.Method != "linear" || h.MethodsTried != 1 || because(h, "method:linear-hc3") == nil {
		t.Errorf("method %s, %d beside it", h.Method, h.MethodsTried)
	}
	h = hyp(t, computed(t, record(`strata = "half"`), "d.csv", b), "H1")
	nearOpt(t, "strata", h.Estimate, 4.02944523470840110, 1e-10)
	nearOpt(t, "error with strata", h.SE, 2.13100727368947229, 1e-10)
	h = hyp(t, computed(t, record(`adjust = ["Prewt", "half"]`), "d.csv", b), "H1")
	if h.Reason != nil {
		t.Error(Text(*h.Reason))
	}
	// A covariate that repeats another has a code of its own.
	twice := strings.ReplaceAll(strings.ReplaceAll(b, "\n", ",1\n"), "half,1\n", "half,same\n")
	if h = hyp(t, computed(t, record(`adjust = ["same"]`), "d.csv", twice), "H1"); h.Reason == nil || h.Reason.Code != "S107" || h.Verdict != result.Open {
		t.Errorf("a constant covariate: %s %v", h.Verdict, h.Reason)
	}
}

// Strata of counts and of hazards: mh-berkeley of published.json; R 4.2.2 with
// survival 3.5-3, 2026-12-01, coxph(Surv(days, death) ~ I(trt == 1) +
// strata(celltype), ties = "efron") on the veteran data.
func TestStrata(t *testing.T) {
	want := published(t, "mh-berkeley")
	var b strings.Builder
	b.WriteString("dept,sex,admitted\n")
	for _, r := range cells(t, "berkeley.csv") {
		for i, sex := range []string{"men", "women"} {
			x, n := int(number1(t, r[1+2*i])), int(number1(t, r[2+2*i]))
			for k := range n {
				e := 0
				if k < x {
					e = 1
				}
				fmt.Fprintf(&b, "%s,%s,%d\n", r[0], sex, e)
			}
		}
	}
	h := hyp(t, computed(t, head+outcome("y", "odds-ratio", `groups = ["men", "women"]`)+hypothesis("H1", "y", "differs", `strata = "dept"`)+
		fromFile("A", "y", `event = "admitted", group = "sex"`), "d.csv", b.String()), "H1")
	nearOpt(t, "MH odds ratio", h.Estimate, wanted(t, want, "mh_odds_ratio"), 1e-10)
	near(t, "low", h.Low.V, wanted(t, want, "low"), 1e-9)
	near(t, "high", h.High.V, wanted(t, want, "high"), 1e-9)
	if h.Method != "mantel-haenszel" || h.MethodsTried != 0 {
		t.Errorf("%s, %d methods beside it", h.Method, h.MethodsTried)
	}
	h = hyp(t, computed(t, head+outcome("y", "hazard-ratio", `groups = ["one", "two"]`)+hypothesis("H1", "y", "differs", `strata = "celltype"`)+
		fromFile("A", "y", `time = "days", event = "death", group = "trt", labels = { 1 = "one", 2 = "two" }`), "d.csv", text(t, "veteran.csv")), "H1")
	nearOpt(t, "stratified hazard ratio", h.Estimate, math.Exp(-0.1690639091280872), 1e-8)
	nearOpt(t, "its error", h.SE, 0.1982356125659654, 1e-8)
}

// The systematic error joins after averaging, with the degrees of freedom of
// the GUM; where a method has no room for it the claim stays open.
func TestSystematicError(t *testing.T) {
	text := head + outcome("y", "mean", "reference = 0\nbetter = \"higher\"\nsystematic_u = 0.3\n") + hypothesis("H1", "y", "superior", "") + entryOf("A", "y", "sample = { n = 16, mean = 2, sd = 1.6 }")
	h := hyp(t, computed(t, text), "H1")
	nearOpt(t, "se", h.SE, 0.5, 1e-12)                  // 0.4 and 0.3 in quadrature
	nearOpt(t, "df", h.DF, 15*math.Pow(5.0/4, 4), 1e-9) // JCGM 100:2008, G.4.1
	text = head + outcome("y", "hazard-ratio", "groups = [\"six_mp\", \"placebo\"]\nbetter = \"lower\"\nsystematic_u = 0.3\n") + hypothesis("H1", "y", "superior", "") +
		fromFile("A", "y", `time = "weeks", event = "relapse", group = "arm"`)
	h = hyp(t, computed(t, text, "d.csv", cellsText(t)), "H1")
	nearOpt(t, "hazard ratio", h.SE, math.Hypot(published(t, "cox-leukaemia")["se_efron"], 0.3), 1e-7)
	text = strings.Replace(text, "\"superior\"", "\"superior\"\nmethod = \"score\"", 1)
	if h = hyp(t, computed(t, text, "d.csv", cellsText(t)), "H1"); h.Reason == nil || h.Reason.Code != "S104" {
		t.Errorf("score with a systematic error: %v", h.Reason)
	}
}

func cellsText(t *testing.T) string { return text(t, "leukaemia_6mp.csv") }

// Random permutations follow the seed of the plan, stated or drawn from its
// digest: the same record gives the same bytes, another seed other draws.
func TestSeeds(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 9))
	file := "g,v\n"
	for i := range 60 {
		file += fmt.Sprintf("%s,%.6f\n", []string{"new", "old"}[i%2], rng.NormFloat64()+0.4*float64(1-i%2))
	}
	record := func(seed string) string {
		return strings.Replace(head, "alpha =", seed+"alpha =", 1) + outcome("y", "mean-difference", two) + hypothesis("H1", "y", "superior", "method = \"permutation\"") +
			fromFile("A", "y", `value = "v", group = "g"`)
	}
	p := func(seed string) float64 { return hyp(t, computed(t, record(seed), "d.csv", file), "H1").P.P }
	one, other, derived := p("seed = 1\n"), p("seed = 2\n"), p("")
	if one == other || one == derived {
		t.Errorf("seeds 1 and 2 and the digest give %g, %g, %g", one, other, derived)
	}
	if again := p("seed = 1\n"); again != one {
		t.Errorf("the same seed gives %g and %g", one, again)
	}
	a, b := computed(t, record(""), "d.csv", file), computed(t, record(""), "d.csv", file)
	if !reflect.DeepEqual(a, b) {
		t.Error("the same record gives two results")
	}
	seeded := false
	for _, c := range a.Choices {
		seeded = seeded || c.What == "seed of random draws" && c.From == "default"
	}
	if !seeded {
		t.Error("the seed is no choice")
	}
	near(t, "near welch", one, because(hyp(t, a, "H1"), "method:welch")[0].P.P, 0.02)
}

// Rows that drop are counted by reason and group; the flow says the rest.
func TestDroppedRowsAndFlow(t *testing.T) {
	file := "g,v,age\nnew,1,5\nnew,2,5\nnew,NA,5\nnew,4,50\nold,1,5\nold,NA,5\nold,,5\nold,2.5,5\nold,3,5\n"
	res := computed(t, head+"[[plan.data.exclude]]\ncolumn = \"age\"\nabove = 40\nwhy = \"Too old for the claim.\"\n"+outcome("y", "mean-difference", two)+hypothesis("H1", "y", "superior", "")+
		fromFile("A", "y", `value = "v", group = "g"`)+"flow.new = { randomised = 5, received = 4, lost = 1 }\n", "d.csv", file)
	g := res.Studies[0].Groups
	if len(g) != 2 || g[0].N.V != 2 || g[1].N.V != 3 || g[0].Missing != 1 || g[0].Excluded != 1 || g[1].Missing != 2 || g[0].Randomised.V != 5 || g[0].Received.V != 4 || g[1].Randomised.OK {
		t.Errorf("%+v", g)
	}
	f := res.Files[0]
	if f.Rows != 9 || f.Used != 5 || len(f.SHA256) != 64 {
		t.Errorf("%+v", f)
	}
	total := 0
	for _, d := range f.Dropped {
		total += d.Count
		if d.Reason == "" {
			t.Errorf("no reason: %+v", d)
		}
	}
	if total != 4 {
		t.Errorf("%d rows dropped: %+v", total, f.Dropped)
	}
	if len(res.Totals) != 2 || res.Totals[0].Randomised.V != 5 || res.Totals[0].Analysed.V != 2 || res.Totals[0].Missing.V != 2 || res.Totals[0].Excluded.V != 1 || res.Totals[1].Missing.V != 2 || res.Totals[1].Randomised.OK {
		t.Errorf("totals %+v", res.Totals)
	}
}

// Data and the summary of the same values say the same, measure by measure.
func TestDataAgreesWithSummaries(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 8))
	var x, y []float64
	long, pairs := "g,v,e,t\n", "a,b\n"
	events := [2]int{}
	for range 20 {
		a := 5 + rng.NormFloat64()
		b := 4.5 + 0.5*rng.NormFloat64() + 0.4*(a-5)
		x, y = append(x, a), append(y, b)
		ea, eb := btoi(rng.Float64() < 0.6), btoi(rng.Float64() < 0.3)
		events[0], events[1] = events[0]+ea, events[1]+eb
		long += fmt.Sprintf("new,%.17g,%d,2\nold,%.17g,%d,3\n", a, ea, b, eb)
		pairs += fmt.Sprintf("%.17g,%.17g\n", a, b)
	}
	m1, s1 := momentsOf(x)
	m2, s2 := momentsOf(y)
	var d []float64
	r := 0.0
	for i := range x {
		d = append(d, x[i]-y[i])
		r += (x[i] - m1) * (y[i] - m2) / (19 * s1 * s2)
	}
	md, sd := momentsOf(d)
	groups := fmt.Sprintf("groups.new = { n = 20, mean = %.17g, sd = %.17g }\ngroups.old = { n = 20, mean = %.17g, sd = %.17g }", m1, s1, m2, s2)
	counts := fmt.Sprintf("groups.new = { n = 20, events = %d }\ngroups.old = { n = 20, events = %d }", events[0], events[1])
	rates := fmt.Sprintf("groups.new = { events = %d, exposure = 40 }\ngroups.old = { events = %d, exposure = 60 }", events[0], events[1])
	const value, event, rate = `value = "v", group = "g"`, `event = "e", group = "g"`, `event = "e", exposure = "t", group = "g"`
	for _, c := range []struct{ measure, keys, columns, summary, file string }{
		{"mean-difference", two, value, groups, long},
		{"standardized-mean-difference", two, value, groups, long},
		{"ratio-of-means", two, value, groups, long},
		{"sd-ratio", two, value, strings.NewReplacer(fmt.Sprintf("mean = %.17g, ", m1), "", fmt.Sprintf("mean = %.17g, ", m2), "").Replace(groups), long},
		{"risk-difference", two, event, counts, long}, {"risk-ratio", two, event, counts, long}, {"odds-ratio", two, event, counts, long},
		{"rate-difference", two, rate, rates, long}, {"rate-ratio", two, rate, rates, long},
		{"paired-mean-difference", two, `first = "a", second = "b"`, fmt.Sprintf("pairs = { n = 20, mean = %.17g, sd = %.17g }", md, sd), pairs},
		{"paired-mean-difference", two, `first = "a", second = "b"`, fmt.Sprintf("pairs = { n = 20, first_mean = %.17g, second_mean = %.17g, first_sd = %.17g, second_sd = %.17g, r = %.17g }", m1, m2, s1, s2, r), pairs},
		{"paired-sd-ratio", two, `first = "a", second = "b"`, fmt.Sprintf("pairs = { n = 20, first_sd = %.17g, second_sd = %.17g, r = %.17g }", s1, s2, r), pairs},
		{"correlation", "better = \"higher\"\n", `first = "a", second = "b"`, fmt.Sprintf("sample = { n = 20, r = %.17g }", r), pairs},
		{"mean", "better = \"higher\"\nreference = 4\n", `value = "a"`, fmt.Sprintf("sample = { n = 20, mean = %.17g, sd = %.17g }", m1, s1), pairs},
		{"sd", "better = \"lower\"\nreference = 1.2\n", `value = "a"`, fmt.Sprintf("sample = { n = 20, sd = %.17g }", s1), pairs},
	} {
		base := head + outcome("y", c.measure, c.keys) + hypothesis("H1", "y", "differs", "")
		from := hyp(t, computed(t, base+fromFile("A", "y", c.columns), "d.csv", c.file), "H1")
		sum := hyp(t, computed(t, base+entryOf("A", "y", c.summary)), "H1")
		if from.Reason != nil || sum.Reason != nil {
			t.Errorf("%s: %v, %v", c.measure, from.Reason, sum.Reason)
			continue
		}
		near(t, c.measure+" estimate", from.Estimate.V, sum.Estimate.V, 1e-10)
		near(t, c.measure+" low", from.Low.V, sum.Low.V, 1e-8)
		near(t, c.measure+" high", from.High.V, sum.High.V, 1e-8)
		near(t, c.measure+" p", from.P.P, sum.P.P, 1e-9)
		if from.Verdict != sum.Verdict || from.Method != sum.Method {
			t.Errorf("%s: %s by %s, %s by %s", c.measure, from.Verdict, from.Method, sum.Verdict, sum.Method)
		}
	}
}

// Readings that do not vary have no correlation, and are not given one.
func TestConstantReadings(t *testing.T) {
	h := hyp(t, computed(t, head+outcome("y", "correlation", "")+hypothesis("H1", "y", "differs", "")+fromFile("A", "y", `first = "a", second = "b"`), "d.csv", "a,b\n1,2\n1,3\n1,4\n1,5\n1,7\n"), "H1")
	if h.Reason == nil || h.Reason.Code != "S102" || h.Estimate.OK {
		t.Errorf("%v, %+v", h.Reason, h.Estimate)
	}
}
