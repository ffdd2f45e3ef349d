package render

import (
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

func TestSigned(t *testing.T) {
	for in, want := range map[string]string{
		"the estimate is -0.5":                   "the estimate is −0.5",
		"(-3, 4) and x=-2":                       "(−3, 4) and x=−2",
		"2026-01-02 of lot A-7 by mid-p":         "2026-01-02 of lot A-7 by mid-p",
		"written as \"-0.5\" or `smallest = -1`": "written as \"-0.5\" or `smallest = -1`",
		"x -":                                    "x -",
	} {
		if got := signed(in); got != want {
			t.Errorf("%q: got %q, want %q", in, got, want)
		}
	}
}

func TestMethodName(t *testing.T) {
	for in, want := range map[string]string{
		"welch": "welch", "common": "common", "common-mantel-haenszel": "common, mantel-haenszel",
		"random-dersimonian-laird-hartung-knapp": "random, dersimonian-laird, hartung-knapp",
	} {
		if got := methodName(in); got != want {
			t.Errorf("%s: got %q, want %q", in, got, want)
		}
	}
}

// A claim bears the qualifier for every key that touches it, and for no other.
func TestTouches(t *testing.T) {
	c := &composer{rec: &record.Record{}, res: &result.Result{Families: []result.Family{{Name: "f", Members: []result.Member{{Hypothesis: "H1"}}}}}}
	h := &result.Hypothesis{Name: "H1", Outcome: "peel", Claim: "superior"}
	for path, want := range map[string]bool{
		"plan.hypothesis.H1.margin": true, "plan.hypothesis.H1": true, "plan.hypothesis.H11.margin": false, "plan.hypothesis.H2.margin": false,
		"plan.outcome.peel.smallest": true, "plan.outcome.peel2.smallest": false, "plan.alpha.one_sided": true, "plan.alpha": true,
		"plan.alpha.two_sided": false, "plan.family.f.procedure": true, "plan.family.g": false, "plan.set.full": false, "plan.data.exclude": true,
		"plan.level": false, "plan.pooling.peel.model": true,
	} {
		if got := c.touches(h, path); got != want {
			t.Errorf("%s: got %v", path, got)
		}
	}
	h.Verdict = result.Established
	c.res.Seal.Changes = []result.Change{{Path: "plan.outcome.peel.smallest", Declared: true}}
	if q := c.qualify(h); q != "" {
		t.Errorf("a declared change qualifies: %q", q)
	}
	c.res.Seal.Changes[0].Declared = false
	if q := c.qualify(h); q != "plan changed after the seal, undeclared" {
		t.Errorf("an undeclared change: %q", q)
	}
	h.Verdict = result.Pending
	if q := c.qualify(h); q != "" {
		t.Errorf("nothing judged: %q", q)
	}
}

func TestWorstLine(t *testing.T) {
	h := &result.Hypothesis{Name: "H1", Outcome: "o", Claim: "superior", Alpha: 0.025, Evidence: "combined"}
	h.Verdict, h.P = result.Open, result.P{P: 0.008, OK: true}
	h.Alternatives = []result.Judged{{Because: "worst-case", Verdict: result.Open, P: result.P{P: 0.093, OK: true}}}
	v := voiceOf(&result.Result{}, h)
	if s := v.worstLine(); !strings.Contains(s, "least favourable") || !strings.Contains(s, "0.093") || !strings.Contains(s, "0.008") {
		t.Errorf("got %q", s)
	}
	h.P.P = 0.3 // open of itself
	if s := v.worstLine(); s != "" {
		t.Errorf("got %q", s)
	}
}

// What is said of several claims in the same words stands once.
func TestGrouped(t *testing.T) {
	d := func(message, code string) diag.Diagnostic { return diag.Diagnostic{Code: code, Message: message} }
	res := &result.Result{Hypotheses: []result.Hypothesis{{Name: "H1"}, {Name: "H2"}}}
	res.Diagnostics = diag.List{d("H1: too few", "S212"), d("no date", "R506"), d("H2: too few", "S212"), d("H2: other", "S212"), d("H9: too few", "S212")}
	c := &composer{in: &protocol.Loaded{Source: diag.NewSource("a.toml", nil)}, res: res}
	var got []string
	for _, g := range c.grouped() {
		got = append(got, strings.Join(g.names, "+")+"|"+g.message)
	}
	want := "H1+H2|too few / |no date / H2|other / |H9: too few"
	if s := strings.Join(got, " / "); s != want {
		t.Errorf("got %s, want %s", s, want)
	}
}

func TestDroppedText(t *testing.T) {
	got := droppedText([]result.Dropped{{Reason: "site = Z", Why: "closed.", Group: "new", Count: 3}, {Reason: "site = Z", Why: "closed.", Group: "old", Count: 1}, {Reason: "value missing", Count: 2}})
	if want := "site = Z: 3 in new, 1 in old (closed); value missing: 2"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestFormula(t *testing.T) {
	for in, want := range map[string]string{
		"B)²/(n₂-1) of 1 - 2 one_sided": "B)²/(n₂−1) of 1 − 2 one_sided", "mid-p and hartung-knapp -": "mid-p and hartung-knapp -", "k = 0 … d-1": "k = 0 … d−1", "below 1e-8": "below 1e-8",
	} {
		if got := formula(in); got != want {
			t.Errorf("%q: got %q, want %q", in, got, want)
		}
	}
}
