package compute

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
)

// reports writes a record of bare p-values for a claim.
func reports(method, claim, more string, ps ...string) string {
	var b strings.Builder
	b.WriteString(head + outcome("e", "estimate", "better = \"higher\"\n") + hypothesis("H1", "e", claim, "evidence = \"combined\"") +
		fmt.Sprintf("[plan.combination.e]\nmethod = %q\n%s\n", method, more))
	for i, p := range ps {
		b.WriteString(entryOf(string(rune('A'+i)), "e", "p = { "+p+" }"))
	}
	return b.String()
}

func above(p float64) string {
	return fmt.Sprintf("value = %v, sides = 1, direction = \"above\"", p)
}

const missing1 = "[[missing_result]]\nstudy = \"M\"\noutcome = \"e\"\nwhy = \"The report could not be had.\"\n"

// Two published cases through the record, by every method: SciPy 1.10 and
// R 4.2.2 (published.json); cauchy and harmonic of the four p-values of
// methods.md's table, computed in 30 digits for the project.
func TestCombinationsOfPublishedCases(t *testing.T) {
	for _, c := range []struct {
		id string
		p  []float64
	}{{"pcomb-fisher", []float64{0.145, 0.263, 0.087}}, {"pcomb-doc-4", []float64{0.01, 0.02, 0.3, 0.5}}} {
		want := published(t, c.id)
		if c.id == "pcomb-fisher" {
			want["fisher_p"] = want["p"]
		}
		var ps []string
		for _, p := range c.p {
			ps = append(ps, above(p))
		}
		for _, method := range []string{"fisher", "stouffer", "tippett", "edgington", "pearson", "cauchy"} {
			res := computed(t, reports(method, "superior", "", ps...))
			h := hyp(t, res, "H1")
			near(t, c.id+" "+method, h.P.P, wanted(t, want, method+"_p"), 1e-10)
			if h.Estimate.OK || h.Low.OK || h.IntervalDecides || h.Evidence != "combined" || len(res.Combined) != 2 {
				t.Errorf("%s: an interval from p-values alone, or %d lines", method, len(res.Combined))
			}
		}
	}
	var ps []string
	for _, p := range []float64{0.01, 0.2, 0.3, 0.04} {
		ps = append(ps, above(p))
	}
	for method, want := range map[string]float64{"fisher": 0.0064519, "pearson": 0.0040024, "stouffer": 0.0032490, "tippett": 0.0394040,
		"edgington": 0.0038128, "logit": 0.0041478, "cauchy": 0.0303395, "harmonic": 0.0334650} {
		near(t, method, hyp(t, computed(t, reports(method, "superior", "", ps...)), "H1").P.P, want, 6e-8)
	}
}

// Directions turn every p one-sided toward the claim: against a claim of
// "lower" they turn round, and differs takes twice the smaller direction.
func TestDirectionsOfCombinations(t *testing.T) {
	two := func(p float64, direction string) string {
		return fmt.Sprintf("value = %v, sides = 2, direction = %q", p, direction)
	}
	up := hyp(t, computed(t, reports("stouffer", "superior", "", two(0.02, "above"), two(0.4, "below"))), "H1")
	z := (2.3263478740408408 - 0.8416212335729143) / math.Sqrt2 // R 4.2.2: qnorm(0.99), qnorm(0.8)
	near(t, "toward and against", up.P.P, tail(z), 1e-12)
	lower := strings.Replace(reports("stouffer", "superior", "", two(0.02, "above"), two(0.4, "below")), "better = \"higher\"", "better = \"lower\"", 1)
	res := computed(t, lower)
	near(t, "turned round", hyp(t, res, "H1").P.P, tail(-z), 1e-12)
	if c := res.Combined[0]; c.Toward != "below" || c.Tally.Toward != 1 || c.Tally.With != 2 {
		t.Errorf("%+v %+v", c, c.Tally)
	}
	near(t, "differs", hyp(t, computed(t, reports("stouffer", "differs", "", two(0.02, "above"), two(0.4, "below"))), "H1").P.P, 2*tail(z), 1e-12)
	h := hyp(t, computed(t, reports("fisher", "superior", "", two(0.001, "below"), two(0.001, "below"))), "H1")
	if h.Verdict != result.Contradicted {
		t.Errorf("both against: %s", h.Verdict)
	}
}

// Of one-sided p-values the side on which the result lies follows from the p.
func TestTallyOfOneSided(t *testing.T) {
	res := computed(t, reports("fisher", "superior", "", above(0.01), above(0.9), above(0.5), "value = 0.2, sides = 1, direction = \"below\"",
		"value = 0.03, sides = 2, direction = \"unknown\""))
	c := res.Combined[1]
	if c.Case != "worst-case" || c.K != 5 || c.Tally.With != 3 || c.Tally.Toward != 1 {
		t.Errorf("%+v, tally %+v", c, c.Tally)
	}
	// P(X >= 1), X binomial of 3 and one half
	near(t, "tally", c.Tally.P.P, 7.0/8, 1e-14)
	if res.Combined[0].K != 4 {
		t.Errorf("as reported: %d", res.Combined[0].K)
	}
}

// What is known only as a bound, without a side, or not at all enters the
// second line at its least favourable value; where the lines differ the claim
// is open.
func TestWorstCase(t *testing.T) {
	fisher := func(ps ...float64) float64 { // chi-square with 2k degrees of freedom in closed form
		s := 0.0
		for _, p := range ps {
			s -= math.Log(p)
		}
		sum, term := 0.0, 1.0
		for i := range ps {
			if i > 0 {
				term *= s / float64(i)
			}
			sum += term
		}
		return math.Exp(-s) * sum
	}
	good := []string{above(0.01), above(0.02)}
	for _, c := range []struct {
		what, entry string
		worst       float64
	}{
		{"not significant, toward", "value = 0.05, sides = 2, direction = \"above\", relation = \">\"", 0.5},
		{"not significant, against", "value = 0.05, sides = 2, direction = \"below\", relation = \">\"", 0.975},
		{"no direction", "value = 0.04, sides = 2, direction = \"unknown\"", 0.98},
		{"no direction, bound below", "value = 0.04, sides = 2, direction = \"unknown\", relation = \"<\"", 1},
		{"one-sided, not significant", "value = 0.05, sides = 1, direction = \"above\", relation = \">\"", 1},
	} {
		res := computed(t, reports("fisher", "superior", "", append(slices.Clone(good), c.entry)...))
		h := hyp(t, res, "H1")
		near(t, c.what+", first line", h.P.P, fisher(0.01, 0.02), 1e-12)
		worst := because(h, "worst-case")
		if len(worst) != 1 {
			t.Fatalf("%s: no second line", c.what)
		}
		near(t, c.what+", second line", worst[0].P.P, fisher(0.01, 0.02, c.worst), 1e-12)
		if res.Combined[0].K != 2 || res.Combined[1].K != 3 {
			t.Errorf("%s: %d and %d", c.what, res.Combined[0].K, res.Combined[1].K)
		}
	}
	for _, c := range []struct {
		method string
		want   result.Verdict
	}{{"fisher", result.Established}, {"stouffer", result.Open}, {"pearson", result.Open}, {"tippett", result.Established}} {
		h := hyp(t, computed(t, reports(c.method, "superior", "", good...)+missing1), "H1")
		if h.Verdict != c.want {
			t.Errorf("%s with a missing result: %s", c.method, h.Verdict)
		}
	}
	h := hyp(t, computed(t, reports("fisher", "superior", "", "value = 0.04, sides = 2, direction = \"unknown\"")), "H1")
	near(t, "no direction at all", h.P.P, 0.98, 1e-12)
}

// Both lines of differs are taken in both directions.
func TestWorstCaseOfDiffers(t *testing.T) {
	h := hyp(t, computed(t, reports("tippett", "differs", "", above(0.001), "value = 0.5, sides = 2, direction = \"unknown\"")), "H1")
	up := 1 - math.Pow(1-0.001, 2)
	near(t, "worst", because(h, "worst-case")[0].P.P, 2*up, 1e-10)
	near(t, "as reported", h.P.P, 2*0.001, 1e-12)
}

// Weights by size need a size for every p-value that counts; a missing result
// is not held against them.
func TestWeightsOfCombinations(t *testing.T) {
	sized := func(p, n float64) string { return above(p) + fmt.Sprintf(", n = %v", n) }
	text := reports("stouffer", "superior", "weights = \"sqrt-n\"", sized(0.01, 100), sized(0.2, 25))
	z := (10*2.3263478740408408 + 5*0.8416212335729143) / math.Sqrt(125)
	near(t, "weighted", hyp(t, computed(t, text), "H1").P.P, tail(z), 1e-12)
	h := hyp(t, computed(t, text+missing1), "H1")
	near(t, "beside a missing one", h.P.P, tail(z), 1e-12)
	if because(h, "worst-case")[0].P.P != 1 || h.Verdict != result.Open {
		t.Errorf("with the missing one: %+v", because(h, "worst-case")[0].P)
	}
	h = hyp(t, computed(t, reports("stouffer", "superior", "weights = \"sqrt-n\"", sized(0.01, 100), above(0.2))), "H1")
	if h.Reason == nil || h.Reason.Code != "S113" {
		t.Errorf("without a size: %v", h.Reason)
	}
}

// An estimate joins with its own two tails; a p of 0 is refused; a family takes the less favourable line.
func TestMixedCombinations(t *testing.T) {
	text := reports("fisher", "superior", "", above(0.03)) + given1("Z", "e", 0.4, 0.2)
	s := -math.Log(0.03) - math.Log(tail(2))
	near(t, "with an estimate", hyp(t, computed(t, text), "H1").P.P, math.Exp(-s)*(1+s), 1e-12)
	in := protocol.Load("test.toml", []byte(reports("fisher", "superior", "", "value = 0, sides = 1, direction = \"above\"", above(0.5))), nil, nil)
	if d := in.Diagnostics; !d.HasErrors() || d[0].Code != "S109" {
		t.Errorf("p = 0: %v", d)
	}
	family := reports("stouffer", "superior", "", above(0.01), above(0.02)) + missing1 +
		hypothesis("H2", "e", "differs", "evidence = \"combined\"") + "[plan.family.F]\nmembers = [\"H1\", \"H2\"]\nprocedure = \"holm\"\n"
	if h := hyp(t, computed(t, family), "H1"); h.Verdict != result.Open || h.PAdjusted.P != 1 {
		t.Errorf("family: %s, %v", h.Verdict, h.PAdjusted)
	}
}

// p-values down to 1e-300 and very many of them stay numbers.
func TestExtremeCombinations(t *testing.T) {
	for _, method := range []string{"fisher", "stouffer", "tippett", "pearson", "edgington", "logit", "cauchy", "harmonic"} {
		for _, ps := range [][]string{{above(1e-300), above(1e-300)}, {above(1e-300), above(1)}, {above(1), above(1)}, {above(0.5), above(0.5)}} {
			h := hyp(t, computed(t, reports(method, "superior", "", ps...)), "H1")
			if !h.P.OK || !(h.P.P >= 0 && h.P.P <= 1) || math.IsNaN(h.P.Ln) {
				t.Errorf("%s of %v: %+v %v", method, ps, h.P, h.Reason)
			}
		}
	}
}
