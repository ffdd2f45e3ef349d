package compute

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"steelyard/compute/result"
)

// z of one-sided p-values, so that a record can be given any p: R 4.2.2,
// qnorm(p, lower.tail = FALSE) is inverted here by bisection on erfc.
func zOf(p float64) float64 {
	lo, hi := -40.0, 40.0
	for range 200 {
		mid := (lo + hi) / 2
		if tail(mid) > p {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2
}

// withP writes hypotheses H1, H2, … each on an outcome of its own whose
// one-sided p-value toward higher is the one given, and a family of them.
func withP(family string, claims string, ps ...float64) string {
	var b strings.Builder
	b.WriteString(head)
	for i, p := range ps {
		name := fmt.Sprintf("o%d", i+1)
		b.WriteString(outcome(name, "estimate", "better = \"higher\"\n") + hypothesis(fmt.Sprintf("H%d", i+1), name, "superior", claims) +
			entryOf("A", name, fmt.Sprintf("effect = { estimate = %.17g, se = 1 }", zOf(p))))
	}
	return b.String() + family
}

// familyTable writes one family of the first m hypotheses.
func familyTable(name, procedure string, members []int, more string) string {
	var names []string
	for _, i := range members {
		names = append(names, fmt.Sprintf("%q", fmt.Sprintf("H%d", i)))
	}
	return fmt.Sprintf("[plan.family.%s]\nmembers = [%s]\nprocedure = %q\n%s\n", name, strings.Join(names, ", "), procedure, more)
}

// Published families through the record: statsmodels and R's p.adjust
// (published.json), a graph of Bretz et al. 2009.
func TestPublishedFamilies(t *testing.T) {
	for _, id := range []string{"mult-hypertension-1", "mult-hypertension-3"} {
		want := published(t, id)
		ps := map[string][]float64{"mult-hypertension-1": {0.047, 0.0167, 0.015}, "mult-hypertension-3": {0.053, 0.026, 0.017}}[id]
		for _, procedure := range []string{"bonferroni", "holm", "hochberg", "hommel"} {
			res := computed(t, withP(familyTable("F", procedure, []int{1, 2, 3}, ""), "", ps...))
			established := 0.0
			for i := range ps {
				h := hyp(t, res, fmt.Sprintf("H%d", i+1))
				adjusted := math.Min(1, wanted(t, want, fmt.Sprintf("%s_%d", procedure, i+1)))
				near(t, id+" "+procedure, h.PAdjusted.P, adjusted, 1e-9)
				near(t, id+" own p", h.P.P, ps[i], 1e-9)
				if (h.Verdict == result.Established) != (adjusted < 0.05) {
					t.Errorf("%s %s: p̃ %g is %s", id, procedure, h.PAdjusted.P, h.Verdict)
				}
				if h.Verdict == result.Established {
					established++
				}
				if same := math.Abs(h.PAdjusted.P-h.P.P) < 1e-12; h.IntervalDecides != same {
					t.Errorf("%s %s: p %g, p̃ %g, the interval decides: %v", id, procedure, h.P.P, h.PAdjusted.P, h.IntervalDecides)
				}
				m := res.Families[0].Members[i]
				if m.PAdjusted != h.PAdjusted || m.Rejected != (h.Verdict == result.Established) || m.Hypothesis != h.Name {
					t.Errorf("%s %s: member %+v beside %+v", id, procedure, m, h.PAdjusted)
				}
			}
			if established != want["rejected_"+procedure] {
				t.Errorf("%s %s: %g established", id, procedure, established)
			}
		}
	}
	want := published(t, "mult-graph-4")
	text := withP(familyTable("F", "graph", []int{1, 2, 3, 4}, "weights = [0.5, 0.5, 0, 0]\ntransfer = [[0, 0.5, 0.5, 0], [0.5, 0, 0, 0.5], [0, 1, 0, 0], [1, 0, 0, 0]]"), "", 0.01, 0.005, 0.1, 0.5)
	res := computed(t, strings.Replace(text, "one_sided = 0.05", "one_sided = 0.025", 1))
	for i := range 4 {
		near(t, "graph", hyp(t, res, fmt.Sprintf("H%d", i+1)).PAdjusted.P, wanted(t, want, fmt.Sprintf("adj_%d", i+1)), 1e-9)
	}
	if f := res.Families[0]; f.Verdict != result.Open || len(f.Path) == 0 || f.Path[0].Hypothesis != "H2" || !f.Path[0].Rejected {
		t.Errorf("%+v", f)
	}
}

// A member of all stands at its own level; the family holds when all do.
func TestCoPrimary(t *testing.T) {
	for _, c := range []struct {
		p    float64
		want result.Verdict
	}{{0.04, result.Established}, {0.06, result.Open}} {
		res := computed(t, withP(familyTable("F", "all", []int{1, 2}, ""), "", 0.01, c.p))
		if f := res.Families[0]; f.Verdict != c.want {
			t.Errorf("with %g the family is %s", c.p, f.Verdict)
		}
		h := hyp(t, res, "H1")
		if h.Verdict != result.Established || h.PAdjusted.OK || !h.IntervalDecides {
			t.Errorf("a member alone: %s, %+v", h.Verdict, h.PAdjusted)
		}
	}
}

// A gate opens for the family behind it when what it waits for is
// established; behind a shut gate nothing is.
func TestGates(t *testing.T) {
	serial := familyTable("F", "holm", []int{1, 2}, "") + familyTable("G", "fixed-sequence", []int{3}, "after = [\"F\"]")
	for _, c := range []struct {
		p    float64
		want result.Verdict
	}{{0.04, result.Established}, {0.2, result.Open}} {
		res := computed(t, withP(serial, "", 0.01, c.p, 0.001))
		h := hyp(t, res, "H3")
		if h.Verdict != c.want {
			t.Errorf("serial, with %g before: %s", c.p, h.Verdict)
		}
		near(t, "adjusted behind the gate", h.PAdjusted.P, c.p, 1e-9)
		if h.IntervalDecides {
			t.Error("the interval of an adjusted claim decides")
		}
	}
	parallel := familyTable("F", "bonferroni", []int{1, 2}, "") + familyTable("G", "holm", []int{3, 4}, "after = [\"F\"]\nrequire = \"any\"")
	res := computed(t, withP(parallel, "", 0.01, 0.2, 0.01, 0.02))
	// Half the level is handed on: Holm at 0.025 rejects 0.01 and then 0.02.
	for _, name := range []string{"H3", "H4"} {
		if h := hyp(t, res, name); h.Verdict != result.Established {
			t.Errorf("parallel, %s: %s, %g", name, h.Verdict, h.PAdjusted.P)
		}
	}
	near(t, "H3 needs 2 × 0.01 at half the level", hyp(t, res, "H3").PAdjusted.P, 0.04, 1e-9)
	if after := res.Families[1].After; len(after) != 1 || after[0] != "F" {
		t.Errorf("after %v", after)
	}
}

// Contradictions are adjusted too; a claim that is contradicted on its own may
// stay open, and then its interval does not decide.
func TestContradictionsInFamilies(t *testing.T) {
	against := func(p float64) float64 { return 1 - p }
	h := hyp(t, computed(t, withP(familyTable("F", "holm", []int{1, 2}, ""), "", against(0.03), 0.5)), "H1")
	if h.Verdict != result.Open || h.IntervalDecides {
		t.Errorf("against at 0.03 of two: %s, the interval decides: %v", h.Verdict, h.IntervalDecides)
	}
	if h = hyp(t, computed(t, withP(familyTable("F", "holm", []int{1, 2}, ""), "", against(0.02), 0.5)), "H1"); h.Verdict != result.Contradicted {
		t.Errorf("against at 0.02 of two: %s", h.Verdict)
	}
}

// Members have their own levels: p̃ compares with the member's own.
func TestLevelsInAFamily(t *testing.T) {
	text := withP(familyTable("F", "bonferroni", []int{1, 2}, ""), "", 0.011, 0.02)
	text = strings.Replace(text, "[plan.hypothesis.H1]\n", "[plan.hypothesis.H1]\nalpha = { one_sided = 0.025 }\n", 1)
	res := computed(t, text)
	near(t, "H1", hyp(t, res, "H1").PAdjusted.P, 0.022, 1e-9)
	near(t, "H2", hyp(t, res, "H2").PAdjusted.P, 0.04, 1e-9)
	if hyp(t, res, "H1").Verdict != result.Established || hyp(t, res, "H2").Verdict != result.Established {
		t.Error("a member is held to another's level")
	}
}

// A member without results enters with p = 1, and the family waits only while
// no member has any.
func TestPendingMembers(t *testing.T) {
	text := withP(familyTable("F", "holm", []int{1, 2}, ""), "", 0.01, 0.01)
	one := text[:strings.Index(text, "[[result]]\nstudy = \"A\"\noutcome = \"o2\"")] + text[strings.Index(text, "[plan.family.F]"):]
	res := computed(t, one)
	near(t, "H1 beside a pending one", hyp(t, res, "H1").PAdjusted.P, 0.02, 1e-9)
	if h := hyp(t, res, "H2"); h.Verdict != result.Pending || h.P.OK || h.PAdjusted.OK {
		t.Errorf("pending: %+v", h.Judged)
	}
	if res.Families[0].Verdict != result.Open {
		t.Errorf("the family is %s", res.Families[0].Verdict)
	}
	none := withP(familyTable("F", "holm", []int{1, 2}, ""), "", 0.01, 0.01)
	for _, o := range []string{"o1", "o2"} {
		i := strings.Index(none, "[[result]]\nstudy = \"A\"\noutcome = \""+o)
		j := i + strings.Index(none[i:], "}\n") + 2
		none = none[:i] + none[j:]
	}
	if f := computed(t, none).Families[0]; f.Verdict != result.Pending {
		t.Errorf("without results the family is %s", f.Verdict)
	}
}

// Alternatives take the planned p-value's place in the family: the same
// adjustment, beside the same others.
func TestAlternativesInAFamily(t *testing.T) {
	entry := entryOf("A", "y", "groups.new = { n = 10, mean = 1.5, sd = 1.5 }\ngroups.old = { n = 25, mean = 0, sd = 2.5 }")
	text := func(family, method string) string {
		return head + outcome("y", "mean-difference", two) + hypothesis("H1", "y", "superior", method) + entry +
			outcome("z", "estimate", "better = \"higher\"\n") + hypothesis("H2", "z", "superior", "") + given1("A", "z", 0.1, 1) + family
	}
	family := "[plan.family.F]\nmembers = [\"H1\", \"H2\"]\nprocedure = \"bonferroni\"\n"
	alt := because(hyp(t, computed(t, text(family, "")), "H1"), "method:pooled-variance")
	if len(alt) != 1 {
		t.Fatal("no other method")
	}
	want := hyp(t, computed(t, text(family, "method = \"pooled-variance\"\n")), "H1")
	near(t, "adjusted", alt[0].PAdjusted.P, want.PAdjusted.P, 1e-12)
	if alt[0].Verdict != want.Verdict || alt[0].P != want.P || want.PAdjusted.P == want.P.P {
		t.Errorf("%s %v, planned %s %v", alt[0].Verdict, alt[0].P, want.Verdict, want.P)
	}
}

// What an open claim still needs is sized by the level that the family left it.
func TestNextUnderAFamily(t *testing.T) {
	sized := func(family string) *result.WhatNext {
		text := strings.ReplaceAll(withP(family, "", 0.03, 0.9), "se = 1 }", "se = 1, n = 50 }")
		return hyp(t, computed(t, text), "H1").WhatNext
	}
	alone, two := sized(""), sized(familyTable("F", "bonferroni", []int{1, 2}, ""))
	if alone != nil || two == nil || !two.AddedN80.OK || two.AddedN80.V < 2 {
		t.Fatalf("alone %+v, in a family %+v", alone, two)
	}
	// (z of 0.025 + z of 0.8)^2 over the squared gap is the information, R 4.2.2.
	e := zOf(0.03)
	near(t, "a new study", two.NewStudyN80.V, math.Ceil(50*math.Pow((1.959963984540054+0.8416212335729143)/e, 2)), 0)
}
