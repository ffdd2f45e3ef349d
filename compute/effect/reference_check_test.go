package effect

import (
	"fmt"
	"math"
	"testing"

	"steelyard/compute/dist"
	"steelyard/compute/result"
)

// complaints records what a helper reports.
type complaints []string

func (c *complaints) Helper() {}
func (c *complaints) Errorf(format string, args ...any) {
	*c = append(*c, fmt.Sprintf(format, args...))
}

// TestHelpersCanFail feeds every comparison helper one thing that it must
// accept and things that it must refuse.
func TestHelpersCanFail(t *testing.T) {
	row := publishedRow{ID: "x", Expected: map[string]any{"a": 1.23, "text": "no"},
		PrintedDigits: map[string]int{"a": 2}, Recomputed: map[string]any{"a": 1.2345}}
	loose := row
	loose.Slack = map[string]float64{"a": 1}
	value := valueRow{ID: "y", Expected: map[string]float64{"a": 123.456, "b": 1}, Digits: map[string]int{"a": 6}}
	wald := Wald{Scale: "identity", Y: 1, SE: 1, DF: math.Inf(1), Low: math.Inf(-1), High: math.Inf(1)}
	inf := &Inference{Notes: []result.Note{{Code: "S203"}}}
	two := Group{N: 5, Mean: 1, SD: 1}
	good := Test{Up: dist.Tail{P: .5, Q: .5, LnP: math.Log(.5), LnQ: math.Log(.5)},
		Down: dist.Tail{P: .5, Q: .5, LnP: math.Log(.5), LnQ: math.Log(.5)}}
	nan, wrongLog, wrongSum := good, good, good
	nan.Value = math.NaN()
	wrongLog.Up.LnP = -1
	wrongSum.Down.Q = .4
	for name, tc := range map[string]struct {
		pass func(r reporter)
		fail []func(r reporter)
	}{
		"published": {
			func(r reporter) { row.check(r, "a", 1.2349); loose.check(r, "a", 1.2441) },
			[]func(r reporter){
				func(r reporter) { row.check(r, "a", 1.2351) },
				func(r reporter) { loose.check(r, "a", 1.2451) },
				func(r reporter) { row.check(r, "a", math.NaN()) },
				func(r reporter) { row.check(r, "text", 1) },
				func(r reporter) { row.check(r, "absent", 1) },
			}},
		"second": {
			func(r reporter) { row.second(r, "a", 1.2345, 1e-9) },
			[]func(r reporter){
				func(r reporter) { row.second(r, "a", 1.2346, 1e-9) },
				func(r reporter) { row.second(r, "b", 1, 1e-9) },
			}},
		"value": {
			func(r reporter) { value.check(r, "a", 123.4564) },
			[]func(r reporter){
				func(r reporter) { value.check(r, "a", 123.4566) },
				func(r reporter) { value.check(r, "a", math.Inf(1)) },
				func(r reporter) { value.check(r, "b", 1) }, // no digits stated
				func(r reporter) { value.check(r, "c", 1) },
			}},
		"near": {
			func(r reporter) { near(r, "x", 1+1e-10, 1, 1e-9); near(r, "x", math.Inf(1), math.Inf(1), 0) },
			[]func(r reporter){
				func(r reporter) { near(r, "x", 1+1e-8, 1, 1e-9) },
				func(r reporter) { near(r, "x", math.NaN(), math.NaN(), 1) },
				func(r reporter) { near(r, "x", math.Inf(-1), 1, 1) },
			}},
		"within": {
			func(r reporter) { within(r, "x", 1, 1.05, 0.1) },
			[]func(r reporter){
				func(r reporter) { within(r, "x", 1, 1.2, 0.1) },
				func(r reporter) { within(r, "x", math.NaN(), 1, 0.1) },
			}},
		"invertsTest": {
			func(r reporter) { invertsTest(r, "x", wald, 0.025, 1e-9) },
			[]func(r reporter){
				func(r reporter) { invertsTest(r, "x", wrongLimits{wald, 1.01}, 0.025, 1e-9) },
				func(r reporter) { invertsTest(r, "x", wrongLimits{wald, math.NaN()}, 0.025, 1e-9) },
				func(r reporter) { invertsTest(r, "x", wrongLimits{stepped{wald}, 0.9}, 0.025, 1e-6) },
				func(r reporter) { invertsTest(r, "x", wrongLimits{stepped{wald}, 1.1}, 0.025, 1e-6) },
			}},
		"sane": {
			func(r reporter) { sane(r, "x", good) },
			[]func(r reporter){
				func(r reporter) { sane(r, "x", nan) },
				func(r reporter) { sane(r, "x", wrongLog) },
				func(r reporter) { sane(r, "x", wrongSum) },
			}},
		"refused": {
			func(r reporter) { refused(r, "S104", "mean", "no-such-method", Input{Sample: two}) },
			[]func(r reporter){
				func(r reporter) { refused(r, "S101", "mean", "no-such-method", Input{Sample: two}) },
				func(r reporter) { refused(r, "S101", "mean", "t", Input{Sample: two}) },
			}},
		"hasNote": {
			func(r reporter) { hasNote(r, inf, "S203", true); hasNote(r, inf, "S201", false) },
			[]func(r reporter){
				func(r reporter) { hasNote(r, inf, "S203", false) },
				func(r reporter) { hasNote(r, inf, "S201", true) },
			}},
	} {
		var c complaints
		tc.pass(&c)
		if len(c) > 0 {
			t.Errorf("%s complained about what is right: %q", name, c)
		}
		for i, f := range tc.fail {
			c = nil
			f(&c)
			if len(c) == 0 {
				t.Errorf("%s accepted wrong case %d", name, i)
			}
		}
	}
}

// wrongLimits scales a method's limits.
type wrongLimits struct {
	Method
	factor float64
}

func (w wrongLimits) Limits(a float64) (low, high float64) {
	low, high = w.Method.Limits(a)
	return low * w.factor, high * w.factor
}

// stepped says of a test that it is a step function.
type stepped struct{ Method }

func (s stepped) Test(c float64) Test {
	t := s.Method.Test(c)
	t.Step = true
	return t
}
