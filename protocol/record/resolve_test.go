package record

import (
	"testing"
	"time"
)

func number(v float64) Number { return Number{V: v, Stated: true} }

func TestPoints(t *testing.T) {
	scalar := func(v float64) Bounds { return Bounds{V: Region{Distance: v}, Stated: true} }
	pair := func(l, h float64) Bounds { return Bounds{V: Region{IsPair: true, Low: l, High: h}, Stated: true} }
	for _, c := range []struct {
		name            string
		o               Outcome
		margin          Bounds
		null, low, high float64
		has             bool
	}{
		{"difference", Outcome{Measure: text("mean-difference"), Smallest: scalar(0.8)}, Bounds{}, 0, -0.8, 0.8, true},
		{"ratio", Outcome{Measure: text("risk-ratio"), Smallest: scalar(1.25)}, Bounds{}, 1, 0.8, 1.25, true},
		{"reference", Outcome{Measure: text("mean"), Reference: number(5), Smallest: scalar(2)}, Bounds{}, 5, 3, 7, true},
		{"sd is no ratio", Outcome{Measure: text("sd"), Reference: number(2), Smallest: scalar(0.5)}, Bounds{}, 2, 1.5, 2.5, true},
		{"half", Outcome{Measure: text("superiority-probability"), Smallest: scalar(0.1)}, Bounds{}, 0.5, 0.4, 0.6, true},
		{"pair", Outcome{Measure: text("risk-ratio"), Smallest: pair(0.5, 1.5)}, Bounds{}, 1, 0.5, 1.5, true},
		{"own margin", Outcome{Measure: text("mean-difference"), Smallest: scalar(0.8)}, scalar(0.4), 0, -0.4, 0.4, true},
		{"own pair", Outcome{Measure: text("odds-ratio")}, pair(0.5, 3), 1, 0.5, 3, true},
		{"none", Outcome{Measure: text("mean-difference")}, Bounds{}, 0, 0, 0, false},
		{"no reference", Outcome{Measure: text("mean"), Smallest: scalar(1)}, Bounds{}, 0, 0, 0, false},
		{"correlation", Outcome{Measure: text("correlation"), Smallest: scalar(0.25)}, Bounds{}, 0, -0.25, 0.25, true},
	} {
		h := Hypothesis{Margin: c.margin}
		null, low, high, has := h.Points(&c.o)
		if null != c.null || low != c.low || high != c.high || has != c.has {
			t.Errorf("%s: %v %v %v %v", c.name, null, low, high, has)
		}
	}
}

func TestErrorLevel(t *testing.T) {
	plan := &Plan{Alpha: Alpha{OneSided: number(0.025)}, Level: Number{V: 0.95}}
	for _, c := range []struct {
		claim  string
		own    Alpha
		want   float64
		stated bool
	}{
		{"equivalent", Alpha{}, 0.025, true},
		{"equivalent", Alpha{OneSided: number(0.05)}, 0.05, true},
		{"differs", Alpha{OneSided: number(0.05)}, 0, false},
		{"differs", Alpha{TwoSided: number(0.1)}, 0.1, true},
		{"no claim", Alpha{}, 0, false},
	} {
		h := Hypothesis{Claim: text(c.claim), Alpha: c.own}
		if got, stated := h.ErrorLevel(plan); got != c.want || stated != c.stated {
			t.Errorf("%s %v: %v, %v", c.claim, c.own, got, stated)
		}
	}
	h := Hypothesis{Claim: text("describe")}
	if got, stated := h.ErrorLevel(plan); !stated || got != 1-plan.Level.V {
		t.Errorf("describe: %v", got)
	}
}

func TestMethodWord(t *testing.T) {
	mean := &Outcome{Measure: text("mean-difference"), Design: String{V: "independent"}}
	for _, c := range []struct {
		h      Hypothesis
		o      *Outcome
		want   string
		stated bool
	}{
		{Hypothesis{}, mean, "welch", false},
		{Hypothesis{Method: text("permutation")}, mean, "permutation", true},
		{Hypothesis{Adjust: Strings{Stated: true, V: []String{text("age")}}}, mean, "linear", false},
		{Hypothesis{Strata: text("site")}, &Outcome{Measure: text("risk-ratio")}, "mantel-haenszel", false},
		{Hypothesis{}, &Outcome{Measure: text("mean-difference"), Design: text("crossover")}, "pooled-variance", false},
		{Hypothesis{}, &Outcome{Measure: text("conforming-share"), Distribution: text("any")}, "any", false},
		{Hypothesis{}, &Outcome{Measure: text("estimate")}, "normal", false},
		{Hypothesis{}, &Outcome{}, "", false},
	} {
		if got, stated := c.h.MethodWord(c.o); got != c.want || stated != c.stated {
			t.Errorf("%+v: %q, %v", c.o.Measure.V, got, stated)
		}
	}
}

func TestDated(t *testing.T) {
	day := func(d int) Date { return Date{2026, time.March, d} }
	r := &Record{}
	if !r.Dated().IsZero() {
		t.Error("an empty record is dated")
	}
	r.Results = []*Result{{Date: Day{V: day(4), Stated: true}}}
	// Late in the evening, west of Greenwich: the day is that of its own offset.
	r.Approvals = []*Approval{{At: Instant{Stated: true, V: time.Date(2026, 3, 6, 23, 0, 0, 0, time.FixedZone("", -5*3600))}}}
	if got := r.Dated(day(5)); got != day(6) {
		t.Errorf("dated %v", got)
	}
	if got := r.Dated(day(9)); got != day(9) {
		t.Errorf("with a later seal dated %v", got)
	}
	r.Head.Date = Day{V: day(1), Stated: true}
	if got := r.Dated(day(9)); got != day(1) {
		t.Errorf("its own date is passed over: %v", got)
	}
}
