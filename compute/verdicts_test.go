package compute

import (
	"fmt"
	"math"
	"testing"

	"steelyard/compute/result"
)

// tail is the upper tail of the normal law.
func tail(z float64) float64 { return math.Erfc(z/math.Sqrt2) / 2 }

// one judges one claim on an effect of 0.4 with error 0.2.
func one(t *testing.T, outcomeMore, claim, more string) *result.Hypothesis {
	t.Helper()
	res := computed(t, head+outcome("e", "estimate", outcomeMore)+hypothesis("H1", "e", claim, more)+given1("A", "e", 0.4, 0.2))
	return hyp(t, res, "H1")
}

// A margin takes the place of the point that the claim is tested against, and
// of no other; the other side stays the outcome's, or is not stated at all.
func TestMarginsReplaceOnePoint(t *testing.T) {
	const margin = "margin = 0.1\nmargin_why = \"Half of what the older comparison preserved.\""
	const pair = "margin = [-0.1, 0.3]\nmargin_why = \"Half of what the older comparison preserved.\""
	smallest := "smallest = 0.5\n" + why
	for _, c := range []struct {
		outcome, claim, more string
		low, high            result.Opt
		p                    float64
		region               bool
	}{
		{"better = \"higher\"\n" + smallest, "noninferior", margin, result.Some(-0.1), result.Some(0.5), tail(2.5), true},
		{"better = \"lower\"\n" + smallest, "noninferior", margin, result.Some(-0.5), result.Some(0.1), tail(-1.5), true},
		{"better = \"higher\"\n" + smallest, "minimum-effect", margin, result.Some(-0.5), result.Some(0.1), tail(1.5), true},
		{"better = \"lower\"\n" + smallest, "minimum-effect", margin, result.Some(-0.1), result.Some(0.5), tail(-2.5), true},
		{"better = \"higher\"\n" + smallest, "benefit-too-small", margin, result.Some(-0.5), result.Some(0.1), tail(-1.5), true},
		{"better = \"higher\"\n" + smallest, "noninferior", "", result.Some(-0.5), result.Some(0.5), tail(4.5), true},
		{"better = \"higher\"\n", "noninferior", margin, result.Some(-0.1), result.Opt{}, tail(2.5), false},
		{"better = \"lower\"\n", "minimum-effect", margin, result.Some(-0.1), result.Opt{}, tail(-2.5), false},
		{"better = \"higher\"\n", "noninferior", pair, result.Some(-0.1), result.Some(0.3), tail(2.5), true},
		{smallest, "equivalent", margin, result.Some(-0.1), result.Some(0.1), tail(-1.5), true},
		{smallest, "equivalent", pair, result.Some(-0.1), result.Some(0.3), tail(-0.5), true},
	} {
		h := one(t, c.outcome, c.claim, c.more)
		if h.MarginLow != c.low || h.MarginHigh != c.high {
			t.Errorf("%s %q: points %v and %v", c.claim, c.more, h.MarginLow, h.MarginHigh)
		}
		near(t, c.claim+" p", h.P.P, c.p, 1e-12)
		if h.Reading.HasRegion != c.region {
			t.Errorf("%s %q: the reading knows a region: %v", c.claim, c.more, h.Reading.HasRegion)
		}
	}
}

// A ratio measure reads a scalar as a factor, on the log scale.
func TestFactorsOfRatios(t *testing.T) {
	res := computed(t, head+outcome("r", "ratio-estimate", "better = \"lower\"\nsmallest = 1.25\n"+why)+
		hypothesis("N", "r", "noninferior", "")+hypothesis("E", "r", "equivalent", "role = \"secondary\"")+
		hypothesis("B", "r", "below", "limit = 1.3\nrole = \"secondary\"")+given1("A", "r", 1.1, 0.1))
	y, m := math.Log(1.1), math.Log(1.25)
	near(t, "noninferior", hyp(t, res, "N").P.P, tail((m-y)/0.1), 1e-12)
	near(t, "equivalent", hyp(t, res, "E").P.P, tail((m-y)/0.1), 1e-12)
	near(t, "below", hyp(t, res, "B").P.P, tail((math.Log(1.3)-y)/0.1), 1e-12)
	n := hyp(t, res, "N")
	near(t, "smallest margin", n.SmallestMargin.V, n.High.V, 1e-12)
	near(t, "upper limit", n.High.V, math.Exp(y+1.6448536269514722*0.1), 1e-12)
}

// The verdict of every claim, with what is never judged, not yet known, or
// only explored.
func TestVerdicts(t *testing.T) {
	smallest := "better = \"higher\"\nsmallest = 0.1\n" + why
	for _, c := range []struct {
		claim, more string
		want        result.Verdict
		p           bool
	}{
		{"superior", "", result.Established, true},
		{"superior", "role = \"exploratory\"", result.Suggested, true},
		{"differs", "", result.Established, true},
		{"minimum-effect", "", result.Open, true},
		{"benefit-too-small", "", result.Open, true},
		{"below", "limit = 0", result.Contradicted, true},
		{"below", "limit = 0\nrole = \"exploratory\"", result.Contradicted, true},
		{"describe", "", result.Described, false},
		{"superior", "studies = [\"Another\"]", result.Pending, false},
	} {
		h := one(t, smallest, c.claim, c.more)
		if h.Verdict != c.want || h.P.OK != c.p || h.Reason != nil {
			t.Errorf("%s %q: %s, p %v, reason %v", c.claim, c.more, h.Verdict, h.P, h.Reason)
		}
		if !h.PostHoc {
			t.Errorf("%s: an unsealed plan is not post hoc", c.claim)
		}
		wantEvidence := "single"
		if c.want == result.Pending {
			wantEvidence = "none"
		}
		if h.Evidence != wantEvidence {
			t.Errorf("%s %q: evidence %s", c.claim, c.more, h.Evidence)
		}
	}
	res := computed(t, head+outcome("e", "estimate", smallest)+hypothesis("H1", "e", "superior", ""))
	if h := hyp(t, res, "H1"); h.PostHoc || h.Verdict != result.Pending || res.Record.Stage != result.PlanOnly {
		t.Errorf("a plan alone: %+v", h)
	}
}

// What the data do not support stays open with its reason, warns, and leaves
// the rest of the record alone.
func TestProblemsStayOpen(t *testing.T) {
	base := head + outcome("y", "mean-difference", two+"smallest = 1\n"+why) + outcome("z", "mean-difference", two+"smallest = 1\n"+why) +
		hypothesis("H1", "y", "superior", "") + hypothesis("H2", "z", "superior", "role = \"secondary\"") +
		entryOf("A", "z", "groups.new = { n = 9, mean = 5, sd = 1 }\ngroups.old = { n = 9, mean = 3, sd = 1 }")
	for _, c := range []struct{ entry, code string }{
		{"groups.new = { n = 1, mean = 5, sd = 0 }\ngroups.old = { n = 9, mean = 4, sd = 1 }", "S101"},
		{"groups.new = { n = 5, mean = 5, sd = 0 }\ngroups.old = { n = 9, mean = 4, sd = 0 }", "S102"},
	} {
		res := computed(t, base+entryOf("A", "y", c.entry))
		h := hyp(t, res, "H1")
		if h.Verdict != result.Open || h.Reason == nil || h.Reason.Code != c.code || h.P.OK || h.Evidence != "single" {
			t.Errorf("%s: %s, reason %v, evidence %s", c.code, h.Verdict, h.Reason, h.Evidence)
		}
		if hyp(t, res, "H2").Verdict != result.Established {
			t.Errorf("%s: the other claim is %s", c.code, hyp(t, res, "H2").Verdict)
		}
		if s := res.Studies[1]; s.Use != result.NotComputed || s.Why == "" {
			t.Errorf("%s: the entry is %s", c.code, s.Use)
		}
		warned := false
		for _, d := range res.Diagnostics {
			warned = warned || d.Code == c.code && d.Severity == 1
		}
		if !warned {
			t.Errorf("%s is no warning: %s", c.code, codes(res))
		}
	}
}

// A test that exists at the null alone shows a borrowed interval, which does
// not decide, and cannot decide a claim at a margin.
func TestNullOnlyMethods(t *testing.T) {
	text := func(claim string) string {
		return head + outcome("y", "paired-risk-difference", two+"smallest = 0.1\n"+why) + hypothesis("H1", "y", claim, "method = \"exact\"") +
			entryOf("A", "y", "pairs = { both = 20, first_only = 12, second_only = 3, neither = 15 }")
	}
	h := hyp(t, computed(t, text("superior")), "H1")
	want := 0.0 // P(X >= 12), X binomial of 15 and one half
	for _, c := range []float64{455, 105, 15, 1} {
		want += c / 32768
	}
	near(t, "p", h.P.P, want, 1e-12)
	if h.IntervalDecides || h.SmallestMargin.OK || len(h.Curve) > 0 {
		t.Errorf("a borrowed interval decides: %+v", h.Judged)
	}
	if h = hyp(t, computed(t, text("noninferior")), "H1"); h.Reason == nil || h.Reason.Code != "S104" || h.Verdict != result.Open {
		t.Errorf("at a margin: %s, %v", h.Verdict, h.Reason)
	}
}

// Of a benefit beyond a limit and one below it at most one can be wrong, which
// is said where no family adjusts the two and their limits do not overlap.
func TestExclusiveClaims(t *testing.T) {
	o := "better = \"higher\"\nsmallest = 0.5\n" + why
	for _, c := range []struct {
		m, b, family string
		said         bool
	}{
		{"", "", "", true},
		{"margin = 0.4\n", "", "", true},
		{"margin = 0.6\n", "", "", false},
		{"", "", "[plan.family.F]\nmembers = [\"M\", \"B\"]\nprocedure = \"holm\"\n", false},
		{"", "", "[plan.family.F]\nmembers = [\"M\", \"B\"]\nprocedure = \"all\"\n", true},
	} {
		because := ""
		if c.m != "" {
			because = "margin_why = \"Half of what the older comparison preserved.\"\n"
		}
		res := computed(t, head+outcome("e", "estimate", o)+hypothesis("M", "e", "minimum-effect", c.m+because)+
			hypothesis("B", "e", "benefit-too-small", c.b)+c.family+given1("A", "e", 1, 0.1))
		m, b := hyp(t, res, "M"), hyp(t, res, "B")
		if (m.Excludes == "B") != c.said || (b.Excludes == "M") != c.said {
			t.Errorf("%+v: %q and %q", c, m.Excludes, b.Excludes)
		}
		if m.Verdict != result.Established || b.Verdict != result.Contradicted {
			t.Errorf("%+v: %s and %s", c, m.Verdict, b.Verdict)
		}
	}
}

// A claim over several sets has the largest p of its sets, for and against;
// the set that decides gives the numbers at the top.
func TestSeveralSets(t *testing.T) {
	base := head + "[plan.set.all]\nlabel = \"All\"\nwhy = \"Everyone who was assigned.\"\n[plan.set.done]\nlabel = \"Done\"\nwhy = \"Those who finished as planned.\"\n" +
		outcome("e", "estimate", "better = \"higher\"\nsmallest = 0.3\n"+why) +
		hypothesis("H1", "e", "superior", "sets = [\"all\", \"done\"]") + hypothesis("H2", "e", "superior", "sets = [\"done\"]\nrole = \"secondary\"")
	in := func(set string, y, se float64) string {
		return entryOf("A", "e", fmt.Sprintf("set = %q\neffect = { estimate = %v, se = %v }", set, y, se))
	}
	for _, c := range []struct {
		all, done float64
		want      result.Verdict
		set       string
	}{
		{0.6, 0.4, result.Established, "done"}, {0.4, 0.6, result.Established, "all"}, {0.1, 0.6, result.Open, "all"},
		{-0.6, 0.6, result.Open, "all"}, {-0.6, -0.4, result.Contradicted, "all"}, {-0.6, -0.1, result.Open, "all"},
	} {
		res := computed(t, base+in("all", c.all, 0.2)+in("done", c.done, 0.2))
		h := hyp(t, res, "H1")
		if h.Verdict != c.want || h.Set != c.set || len(h.BySet) != 2 {
			t.Errorf("%v and %v: %s by set %s", c.all, c.done, h.Verdict, h.Set)
		}
		near(t, "p", h.P.P, math.Max(tail(c.all/0.2), tail(c.done/0.2)), 1e-12)
		near(t, "p of the first set", h.BySet[0].P.P, tail(c.all/0.2), 1e-12)
		near(t, "p of the second set", h.BySet[1].P.P, tail(c.done/0.2), 1e-12)
		near(t, "alone", hyp(t, res, "H2").P.P, tail(c.done/0.2), 1e-12)
	}
	res := computed(t, base+in("all", 0.6, 0.2))
	h := hyp(t, res, "H1")
	if h.Verdict != result.Pending || h.P.OK || h.SValue.OK || h.IntervalDecides || h.Set != "all" || h.BySet[0].Verdict != result.Established || h.BySet[1].Verdict != result.Pending {
		t.Errorf("one set without results: %s, %+v", h.Verdict, h.BySet)
	}
	if hyp(t, res, "H2").Verdict != result.Pending {
		t.Errorf("the claim on the set without results: %s", hyp(t, res, "H2").Verdict)
	}
	twice := base + in("all", 0.6, 0.2) + in("done", 0.6, 0.2)
	if s := computed(t, twice).Studies; len(s) != 2 || s[0].Set != "all" || s[1].Set != "done" {
		t.Errorf("%d entries", len(s))
	}
}

// A set with a problem keeps the claim open for that reason, whatever the
// other set says.
func TestSetsWithProblems(t *testing.T) {
	text := head + "[plan.set.all]\nlabel = \"All\"\nwhy = \"Everyone who was assigned.\"\n[plan.set.done]\nlabel = \"Done\"\nwhy = \"Those who finished as planned.\"\n" +
		outcome("y", "mean", "better = \"higher\"\nreference = 0\n") + hypothesis("H1", "y", "superior", "sets = [\"all\", \"done\"]") +
		entryOf("A", "y", "set = \"all\"\nsample = { n = 20, mean = 2, sd = 1 }") + entryOf("A", "y", "set = \"done\"\nsample = { n = 1, mean = 2, sd = 0 }")
	h := hyp(t, computed(t, text), "H1")
	if h.Verdict != result.Open || h.Reason == nil || h.Reason.Code != "S101" || h.P.OK || !h.Estimate.OK {
		t.Errorf("%s, %v", h.Verdict, h.Reason)
	}
	if h.BySet[0].Verdict != result.Established || h.BySet[1].Reason == nil {
		t.Errorf("by set: %+v", h.BySet)
	}
}
