package effect

import (
	"fmt"
	"math"
	"testing"
)

func TestCountProblems(t *testing.T) {
	clustered := func(in Input) Input { in.DesignEffect = 1.5; return in }
	uncertain := func(in Input) Input { in.SystematicU = 0.01; return in }
	stratified := func(in Input) Input { in.Strata = []int32{0}; return in }
	for _, tc := range []struct {
		code, measure, method string
		in                    Input
	}{
		{"S101", "proportion", "exact", one(0, 0)},
		{"S101", "risk-difference", "score", two(1, 0, 1, 5)},
		{"S101", "risk-difference", "score", func() Input { in := two(1, 1, 0, 1); in.DesignEffect = 2; return in }()},
		{"S101", "proportion", "wilson", one(0, math.NaN())},
		{"S101", "paired-risk-difference", "tango", paired(0, 0, 0, 0)},
		{"S103", "proportion", "exact", one(13, 12)},
		{"S103", "proportion", "exact", one(-1, 12)},
		{"S103", "proportion", "exact", one(1.5, 12)},
		{"S103", "proportion", "wilson", one(math.NaN(), 12)},
		{"S103", "odds-ratio", "exact", two(1.5, 12, 1, 12)},
		{"S103", "odds-ratio", "woolf", two(7, 12, 0, 12)},
		{"S103", "odds-ratio", "woolf", two(12, 12, 1, 12)},
		{"S103", "risk-ratio", "log-delta", two(0, 12, 1, 12)},
		{"S103", "risk-ratio", "log-delta", two(12, 12, 12, 12)},
		{"S103", "paired-risk-difference", "tango", paired(1, -1, 0, 0)},
		{"S103", "rate", "exact", onePer(1, 0)},
		{"S103", "rate", "exact", onePer(1, math.Inf(1))},
		{"S103", "rate", "exact", onePer(-1, 1)},
		{"S103", "rate-ratio", "score", twoExposed(1, 1, 1, -1)},
		{"S104", "proportion", "exact", clustered(one(1, 12))},
		{"S104", "proportion", "mid-p", clustered(one(1, 12))},
		{"S104", "risk-difference", "unconditional", clustered(two(7, 12, 1, 12))},
		{"S104", "odds-ratio", "exact", clustered(two(7, 12, 1, 12))},
		{"S104", "odds-ratio", "boschloo", clustered(two(7, 12, 1, 12))},
		{"S104", "paired-risk-difference", "exact", clustered(paired(1, 2, 3, 4))},
		{"S104", "rate", "mid-p", clustered(onePer(3, 4))},
		{"S104", "rate-ratio", "exact", clustered(twoExposed(1, 2, 3, 4))},
		{"S104", "risk-difference", "score", uncertain(two(7, 12, 1, 12))},
		{"S104", "risk-difference", "newcombe", uncertain(two(7, 12, 1, 12))},
		{"S104", "odds-ratio", "exact", uncertain(two(7, 12, 1, 12))},
		{"S104", "rate", "score", uncertain(onePer(3, 4))},
		{"S105", "risk-difference", "unconditional", two(1, 2001, 1, 2000)},
		{"S105", "odds-ratio", "boschloo", two(1, 2001, 1, 2000)},
		{"S112", "risk-difference", "score", stratified(two(7, 12, 1, 12))},
		{"S112", "odds-ratio", "mantel-haenszel", two(7, 12, 1, 12)},
	} {
		refused(t, tc.code, tc.measure, tc.method, tc.in)
	}
}

func TestCountNotes(t *testing.T) {
	clustered := two(3, 100, 1, 100)
	clustered.DesignEffect = 1.5
	for _, tc := range []struct {
		code, measure, method string
		in                    Input
		want                  bool
	}{
		{"S201", "risk-ratio", "score", two(3, 100, 0, 100), true},
		{"S201", "risk-ratio", "score", two(0, 100, 0, 100), true},
		{"S201", "risk-ratio", "score", two(0, 100, 3, 100), false},
		{"S201", "odds-ratio", "score", two(100, 100, 3, 100), true},
		{"S201", "odds-ratio", "exact", two(100, 100, 100, 100), true},
		{"S201", "risk-difference", "score", two(0, 100, 0, 100), false},
		{"S201", "rate-ratio", "exact", twoExposed(3, 1, 0, 1), true},
		{"S201", "rate-ratio", "exact", twoExposed(0, 1, 3, 1), false},
		{"S202", "risk-difference", "score", two(7, 12, 1, 12), true},
		{"S202", "risk-difference", "score", two(12, 24, 12, 24), false},
		{"S202", "risk-difference", "unconditional", two(7, 12, 1, 12), false},
		{"S202", "odds-ratio", "woolf", two(7, 12, 1, 12), true},
		{"S202", "odds-ratio", "exact", two(7, 12, 1, 12), false},
		{"S202", "risk-ratio", "score", clustered, true},
		{"S202", "rate-ratio", "score", twoExposed(5, 1, 4, 1), true},
		{"S202", "rate-ratio", "score", twoExposed(6, 1, 4, 1), false},
		{"S202", "rate-ratio", "exact", twoExposed(5, 1, 4, 1), false},
	} {
		inf := analysed(t, tc.measure, tc.method, tc.in)
		t.Run(fmt.Sprintf("%s %s %s", tc.code, tc.measure, tc.method), func(t *testing.T) {
			hasNote(t, inf, tc.code, tc.want)
		})
		for _, n := range inf.Notes {
			if text := fmt.Sprintf(n.Message, n.Args...); len(text) == 0 || containsBadVerb(text) {
				t.Errorf("message %q", text)
			}
		}
	}
}

// containsBadVerb sees a format that does not fit its arguments.
func containsBadVerb(text string) bool {
	for i := range len(text) - 1 {
		if text[i] == '%' && text[i+1] == '!' {
			return true
		}
	}
	return false
}

func TestContainsBadVerb(t *testing.T) {
	wrong := []any{"x", "y"}
	if !containsBadVerb(fmt.Sprintf("%d is %s", wrong...)) || containsBadVerb("100 % sure") {
		t.Error("bad verbs are not seen")
	}
}

// An exact method is recommended only where it would run.
func TestRecommendedMethodsRun(t *testing.T) {
	for _, in := range []Input{two(1, 30, 0, 30), two(2, 5000, 1, 5000)} {
		for measure := range map[string]bool{"risk-difference": true, "risk-ratio": true, "odds-ratio": true} {
			for _, n := range analysed(t, measure, "score", in).Notes {
				if n.Code != "S202" || len(n.Args) < 2 {
					continue
				}
				analysed(t, measure, n.Args[1].(string), in)
			}
		}
	}
}

func TestNoEventsAtAll(t *testing.T) {
	for _, tc := range []struct {
		measure, method string
		in              Input
		low, high       float64
	}{
		{"risk-ratio", "score", two(0, 10, 0, 20), 0, math.Inf(1)},
		{"risk-ratio", "unconditional", two(0, 10, 0, 20), 0, math.Inf(1)},
		{"odds-ratio", "score", two(0, 10, 0, 20), 0, math.Inf(1)},
		{"odds-ratio", "score", two(10, 10, 20, 20), 0, math.Inf(1)},
		{"odds-ratio", "exact", two(0, 10, 0, 20), 0, math.Inf(1)},
		{"odds-ratio", "mid-p", two(10, 10, 20, 20), 0, math.Inf(1)},
		{"odds-ratio", "boschloo", two(0, 10, 0, 20), 0, math.Inf(1)},
		{"rate-ratio", "score", twoExposed(0, 10, 0, 20), 0, math.Inf(1)},
		{"rate-ratio", "exact", twoExposed(0, 10, 0, 20), 0, math.Inf(1)},
		{"rate-ratio", "mid-p", twoExposed(0, 10, 0, 20), 0, math.Inf(1)},
	} {
		inf := analysed(t, tc.measure, tc.method, tc.in)
		low, high := inf.Method.Limits(0.025)
		if !inf.NoEstimate || low != tc.low || high != tc.high {
			t.Errorf("%s %s: no estimate %v, limits %v, %v", tc.measure, tc.method, inf.NoEstimate, low, high)
		}
		at := inf.Method.Test(1)
		if at.Up.P < 0.5 || at.Down.P < 0.5 {
			t.Errorf("%s %s: p %v, %v without any information", tc.measure, tc.method, at.Up.P, at.Down.P)
		}
		if inf.Y.OK || inf.V.OK {
			t.Errorf("%s %s: y %v, v %v", tc.measure, tc.method, inf.Y, inf.V)
		}
	}
	// A risk ratio of 1 when everybody has the event is an estimate.
	inf := analysed(t, "risk-ratio", "score", two(10, 10, 20, 20))
	low, high := inf.Method.Limits(0.025)
	if inf.NoEstimate || inf.Estimate != 1 || !(low > 0.5 && low < 1 && high > 1 && high < 2) {
		t.Errorf("all have the event: %v, limits %v, %v", inf.Estimate, low, high)
	}
}

// TestPairedExactStandsAtZero: exact and mid-p speak at 0 only and say so.
func TestPairedExactStandsAtZero(t *testing.T) {
	in := paired(20, 10, 3, 17)
	tango := analysed(t, "paired-risk-difference", "tango", in)
	for _, word := range []string{"exact", "mid-p"} {
		inf := analysed(t, "paired-risk-difference", word, in)
		l1, h1 := tango.Method.Limits(0.025)
		l2, h2 := inf.Method.Limits(0.025)
		if !inf.NullOnly || l1 != l2 || h1 != h2 {
			t.Errorf("%s: null only %v, limits %v, %v", word, inf.NullOnly, l2, h2)
		}
		if inf.Method.Test(0.1) != tango.Method.Test(0.1) {
			t.Errorf("%s: another test than tango away from 0", word)
		}
	}
	if tango.NullOnly {
		t.Error("tango is said to stand at the null only")
	}
}

// TestDesignEffectDivides: with design effect D the counts are those of n/D
// subjects, so that the standard error grows by √D.
func TestDesignEffectDivides(t *testing.T) {
	const d = 2.5
	for _, tc := range []struct {
		measure, method string
		full, reduced   Input
	}{
		{"proportion", "wilson", one(50, 200), one(20, 80)},
		{"risk-difference", "score", two(50, 200, 30, 150), two(20, 80, 12, 60)},
		{"risk-difference", "newcombe", two(50, 200, 30, 150), two(20, 80, 12, 60)},
		{"risk-ratio", "log-delta", two(50, 200, 30, 150), two(20, 80, 12, 60)},
		{"odds-ratio", "farrington-manning", two(50, 200, 30, 150), two(20, 80, 12, 60)},
		{"odds-ratio", "woolf", two(50, 200, 30, 150), two(20, 80, 12, 60)},
		{"paired-risk-difference", "tango", paired(50, 30, 20, 100), paired(20, 12, 8, 40)},
		{"rate", "score", onePer(50, 200), onePer(20, 80)},
		{"rate-difference", "score", twoExposed(50, 200, 30, 150), twoExposed(20, 80, 12, 60)},
		{"rate-ratio", "score", twoExposed(50, 200, 30, 150), twoExposed(20, 80, 12, 60)},
	} {
		if tc.method == "farrington-manning" && tc.measure == "odds-ratio" {
			refused(t, "S104", tc.measure, tc.method, tc.full) // not a method of the odds ratio
			continue
		}
		tc.full.DesignEffect = d
		a, b := analysed(t, tc.measure, tc.method, tc.full), analysed(t, tc.measure, tc.method, tc.reduced)
		l1, h1 := a.Method.Limits(0.025)
		l2, h2 := b.Method.Limits(0.025)
		near(t, tc.measure+" low", l1, l2, 1e-10)
		near(t, tc.measure+" high", h1, h2, 1e-10)
		near(t, tc.measure+" se", a.SE.V, b.SE.V, 1e-12)
		near(t, tc.measure+" estimate", a.Estimate, b.Estimate, 1e-12)
		if a.N < b.N || a.Events.V <= b.Events.V {
			t.Errorf("%s: the reported n and events are the reduced ones", tc.measure)
		}
	}
}

// TestSystematicWidens: only Wald methods take a systematic uncertainty, and
// add it in quadrature on the log scale.
func TestSystematicWidens(t *testing.T) {
	in := two(50, 200, 30, 150)
	plain := analysed(t, "odds-ratio", "woolf", in)
	in.SystematicU = 0.3
	wide := analysed(t, "odds-ratio", "woolf", in)
	l1, h1 := plain.Method.Limits(0.025)
	l2, h2 := wide.Method.Limits(0.025)
	near(t, "half-width", math.Log(h2/l2), math.Log(h1/l1)*math.Hypot(plain.SE.V, 0.3)/plain.SE.V, 1e-12)
}
