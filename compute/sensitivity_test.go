package compute

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"steelyard/compute/result"
)

// sensitivity writes one planned sensitivity analysis.
func sensitivity(name, of, kind, more string) string {
	return fmt.Sprintf("[plan.sensitivity.%s]\nof = %q\nkind = %q\n%s\n", name, of, kind, more)
}

// The margin curve is one step, at the smallest margin.
func TestMarginCurve(t *testing.T) {
	for _, c := range []struct{ claim, better string }{{"noninferior", "higher"}, {"noninferior", "lower"}, {"minimum-effect", "higher"},
		{"benefit-too-small", "higher"}, {"benefit-too-small", "lower"}, {"equivalent", "higher"}} {
		for _, measure := range []string{"estimate", "ratio-estimate"} {
			margin, y := "smallest = 0.5\n", 0.2
			if measure == "ratio-estimate" {
				margin, y = "smallest = 1.3\n", 1.1
			}
			if c.claim == "minimum-effect" {
				y += 0.6
			}
			res := computed(t, head+outcome("e", measure, "better = \""+c.better+"\"\n"+margin+why)+hypothesis("H1", "e", c.claim, "")+
				given1("A", "e", y, 0.15)+sensitivity("S", "H1", "margin", ""))
			h, s := hyp(t, res, "H1"), res.Sensitivity[0]
			name := measure + " " + c.claim + " " + c.better
			if len(s.Curve) < 20 || s.Smallest != h.SmallestMargin || !h.SmallestLimit.OK {
				t.Errorf("%s: %d points, smallest %v", name, len(s.Curve), s.Smallest)
				continue
			}
			flips := 0
			away := func(x float64) float64 { // distance of a limit from the null, as the curve goes
				null := 0.0
				if measure == "ratio-estimate" {
					return math.Abs(math.Log(x))
				}
				return math.Abs(x - null)
			}
			at := away(h.SmallestLimit.V)
			for i, p := range s.Curve {
				established := p.Verdict == result.Established
				wide := away(p.Margin) > at
				if c.claim == "minimum-effect" {
					wide = !wide
				}
				// A benefit that is worse than the null is too small for any margin.
				if established != wide {
					t.Errorf("%s: at %g %s, the smallest is %g", name, p.Margin, p.Verdict, h.SmallestLimit.V)
				}
				if i > 0 {
					if before := s.Curve[i-1]; (before.Verdict == result.Established) != established {
						flips++
					}
					if step := p.P.P - s.Curve[i-1].P.P; c.claim == "minimum-effect" && step < -1e-12 || c.claim != "minimum-effect" && step > 1e-12 {
						t.Errorf("%s: p goes the wrong way at %g", name, p.Margin)
					}
				}
			}
			if flips > 1 {
				t.Errorf("%s: %d steps", name, flips)
			}
		}
	}
	res := computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+given1("A", "e", 1, 0.2)+sensitivity("S", "H1", "margin", ""))
	if !strings.Contains(codes(res), "S108") || len(res.Sensitivity[0].Curve) > 0 {
		t.Errorf("a claim without a margin: %s", codes(res))
	}
}

const groupsOf24 = "groups.new = { n = 24, mean = 11.92, sd = 1.31 }\ngroups.old = { n = 14, mean = 11.10, sd = 1.98 }"

// Another method decides beside the planned one, as a record of its own would.
func TestOtherMethod(t *testing.T) {
	base := head + outcome("y", "mean-difference", two) + entryOf("A", "y", groupsOf24)
	res := computed(t, base+hypothesis("H1", "y", "superior", "")+sensitivity("S", "H1", "method", "method = \"pooled-variance\""))
	want := hyp(t, computed(t, base+hypothesis("H1", "y", "superior", "method = \"pooled-variance\"")), "H1")
	j := res.Sensitivity[0].Judged
	if len(j) != 1 || j[0].P != want.P || j[0].Low != want.Low || j[0].Verdict != want.Verdict || j[0].Because != "sensitivity:S" {
		t.Errorf("%+v, want %+v", j, want.Judged)
	}
	if len(because(hyp(t, res, "H1"), "sensitivity:S")) != 1 {
		t.Error("not among the alternatives")
	}
	res = computed(t, base+hypothesis("H1", "y", "superior", "")+sensitivity("S", "H1", "method", "method = \"permutation\""))
	if j = res.Sensitivity[0].Judged; len(j) != 1 || j[0].Reason == nil || j[0].Verdict != result.Open {
		t.Errorf("a method that needs values: %+v", j)
	}
}

// Leaving out each study as planned is what the pool says.
func TestLeaveOneOutAsPlanned(t *testing.T) {
	text := pooledEffects(hypothesis("H1", "e", "superior", pooled1), "common", "", []float64{0.4, 0.1, 0.2}, []float64{0.2, 0.2, 0.2}) + sensitivity("S", "H1", "leave-one-out", "")
	res := computed(t, text)
	j := res.Sensitivity[0].Judged
	q := model(t, res, "common").LeaveOneOut
	if len(j) != 3 {
		t.Fatalf("%d without", len(j))
	}
	for i := range j {
		if j[i].Because != "leave-one-out:"+q[i].Study || j[i].Verdict != q[i].Verdicts[0].Verdict || j[i].Estimate.V != q[i].Estimate {
			t.Errorf("%+v beside %+v", j[i], q[i])
		}
	}
	// Without A the mean is 0.15 with error 0.2/√2: open; the whole is 0.7/3 at 0.2/√3.
	if j[0].Verdict != result.Open || hyp(t, res, "H1").Verdict != result.Established {
		t.Errorf("without A %s, with it %s", j[0].Verdict, hyp(t, res, "H1").Verdict)
	}
	res = computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+given1("A", "e", 1, 0.2)+sensitivity("S", "H1", "leave-one-out", ""))
	if !strings.Contains(codes(res), "S104") {
		t.Errorf("one study: %s", codes(res))
	}
}

// Left-out results are shown and not analysed; the verdict with them stands
// beside, with each and with all.
func TestLeftOut(t *testing.T) {
	out := func(study string, y float64) string {
		return given1(study, "e", y, 0.2) + "leave_out = \"The scale was found to be broken.\"\n"
	}
	base := pooledEffects(hypothesis("H1", "e", "superior", pooled1), "common", "", []float64{0.4, 0.3}, []float64{0.2, 0.2})
	res := computed(t, base+out("C", -1)+out("D", 0.1)+sensitivity("S", "H1", "keep-excluded", ""))
	h := hyp(t, res, "H1")
	nearOpt(t, "without them", h.Estimate, 0.35, 1e-12)
	if len(res.Pooled) != 2 || res.Pooled[0].K != 2 || res.Studies[2].Use != result.LeftOut || res.Studies[2].Why == "" || !res.Studies[2].Analysis.Estimate.OK {
		t.Errorf("%d pools, %+v", len(res.Pooled), res.Studies[2])
	}
	kept := because(h, "left-out-kept")
	if len(kept) != 1 || kept[0].Verdict != result.Open {
		t.Fatalf("%+v", kept)
	}
	nearOpt(t, "with them", kept[0].Estimate, (0.4+0.3-1+0.1)/4, 1e-12)
	var got []string
	for _, j := range res.Sensitivity[0].Judged {
		got = append(got, fmt.Sprintf("%s %.4f", j.Because, j.Estimate.V))
	}
	want := []string{"left-out-kept:C -0.1000", "left-out-kept:D 0.2667", "sensitivity:S -0.0500"}
	if !slices.Equal(got, want) {
		t.Errorf("%v", got)
	}
	// The only study is left out: the claim waits, and the verdict with it is
	// beside.
	res = computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+out("C", 1))
	h = hyp(t, res, "H1")
	if kept = because(h, "left-out-kept"); h.Verdict != result.Pending || len(kept) != 1 || kept[0].Verdict != result.Established {
		t.Errorf("%s, beside %+v", h.Verdict, kept)
	}
	res = computed(t, base+sensitivity("S", "H1", "keep-excluded", ""))
	if !strings.Contains(codes(res), "S104") || len(res.Sensitivity[0].Judged) > 0 {
		t.Errorf("nothing left out: %s", codes(res))
	}
	// A combination with left-out results has its own two lines and no more.
	res = computed(t, reports("fisher", "superior", "", above(0.01), above(0.02))+entryOf("C", "e", "p = { value = 0.9, sides = 1, direction = \"above\" }\nleave_out = \"The scale was found to be broken.\"\n"))
	if len(res.Combined) != 2 || res.Combined[0].K != 2 || len(because(hyp(t, res, "H1"), "left-out-kept")) != 1 {
		t.Errorf("%d lines of %d", len(res.Combined), res.Combined[0].K)
	}
}

// A sensitivity analysis of a claim without results has nothing to vary.
func TestNothingToVary(t *testing.T) {
	for _, kind := range []string{"margin", "leave-one-out", "tipping-point", "keep-excluded"} {
		res := computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+sensitivity("S", "H1", kind, ""))
		if !strings.Contains(codes(res), "S104") || len(res.Sensitivity) != 1 {
			t.Errorf("%s: %s", kind, codes(res))
		}
	}
}

func flow(a, b int, n1, n2 int) string {
	return fmt.Sprintf("flow.new = { randomised = %d, analysed = %d }\nflow.old = { randomised = %d, analysed = %d }\n", a+n1, n1, b+n2, n2)
}

// Shifting the missing of each group by d moves the estimate by their shares;
// at the tipping point the verdict changes, before it does not.
func TestTippingShift(t *testing.T) {
	for _, c := range []struct {
		claim, better, keys string
		m1, m2              int
		mean                float64
	}{
		{"superior", "higher", "", 4, 2, 11.98}, {"superior", "higher", "", 4, 0, 11.3}, {"superior", "lower", "", 3, 2, 9}, {"superior", "higher", "", 3, 2, 9},
		{"noninferior", "higher", "smallest = 0.8\n" + why, 5, 5, 11.1}, {"equivalent", "neither", "smallest = 2\n" + why, 5, 1, 11.3},
		{"differs", "neither", "", 4, 4, 13}, {"differs", "neither", "", 4, 4, 9.4}, {"below", "neither", "", 2, 2, 11},
	} {
		n1, n2 := 24, 14
		more := ""
		if c.claim == "below" {
			more = "limit = 3"
		}
		record := func(mean float64) string {
			return head + outcome("y", "mean-difference", "groups = [\"new\", \"old\"]\nbetter = \""+c.better+"\"\n"+c.keys) + hypothesis("H1", "y", c.claim, more) +
				entryOf("A", "y", fmt.Sprintf("groups.new = { n = 24, mean = %.17g, sd = 1.31 }\ngroups.old = { n = 14, mean = 11.10, sd = 1.98 }\n%s", mean, flow(c.m1, c.m2, n1, n2))) +
				sensitivity("S", "H1", "tipping-point", "")
		}
		res := computed(t, record(c.mean))
		h, tip := hyp(t, res, "H1"), res.Sensitivity[0].Tipping
		if tip == nil || !tip.Shift.OK || tip.Missing != [2]float64{float64(c.m1), float64(c.m2)} || tip.Verdict == h.Verdict {
			t.Fatalf("%s: %+v, %s", c.claim, tip, h.Verdict)
		}
		share := float64(c.m1)/float64(c.m1+n1) + float64(c.m2)/float64(c.m2+n2)
		moved := func(by float64) result.Verdict { // either way: against the claim is not the same for all
			down := verdictAlone(t, record(c.mean-by*share))
			up := verdictAlone(t, record(c.mean+by*share))
			if down != h.Verdict {
				return down
			}
			return up
		}
		d := math.Abs(tip.Shift.V)
		if got := moved(d * (1 + 1e-6)); got != tip.Verdict {
			t.Errorf("%s %s: beyond %g it is %s, said %s", c.claim, c.better, tip.Shift.V, got, tip.Verdict)
		}
		if got := moved(d * (1 - 1e-6)); got != h.Verdict {
			t.Errorf("%s %s: short of %g it is %s already", c.claim, c.better, tip.Shift.V, got)
		}
		if toward := h.Verdict == result.Established; toward != (tip.Shift.V > 0) {
			t.Errorf("%s %s: %s with a shift of %g", c.claim, c.better, h.Verdict, tip.Shift.V)
		}
	}
}

// verdictAlone is the verdict of a record's first hypothesis, without what
// stands beside it.
func verdictAlone(t *testing.T, text string) result.Verdict {
	t.Helper()
	r := newRun(load(t, text, nil, nil), "test")
	r.plain = true
	r.decide()
	return r.res.Hypotheses[0].Verdict
}

// The split that tips a verdict of counts is the nearest of the whole grid.
func TestTippingSplit(t *testing.T) {
	for _, c := range []struct {
		measure        string
		x1, x2, m1, m2 int
	}{{"risk-difference", 30, 18, 6, 6}, {"risk-ratio", 30, 18, 25, 30}, {"odds-ratio", 26, 20, 12, 3}, {"risk-difference", 30, 18, 0, 40}, {"risk-difference", 45, 5, 1, 1}} {
		record := func(i, j, m1, m2 int, flow string) string {
			return head + outcome("y", c.measure, two) + hypothesis("H1", "y", "superior", "") +
				entryOf("A", "y", fmt.Sprintf("groups.new = { n = %d, events = %d }\ngroups.old = { n = %d, events = %d }\n%s", 50+m1, c.x1+i, 50+m2, c.x2+j, flow))
		}
		res := computed(t, record(0, 0, 0, 0, flow(c.m1, c.m2, 50, 50))+sensitivity("S", "H1", "tipping-point", ""))
		tip, now := res.Sensitivity[0].Tipping, hyp(t, res, "H1").Verdict
		if tip == nil {
			t.Fatalf("%+v: no tipping point", c)
		}
		best, bi, bj, verdict := math.Inf(1), -1, -1, result.Verdict("")
		for i := range c.m1 + 1 {
			for j := range c.m2 + 1 {
				v := verdictAlone(t, record(i, j, c.m1, c.m2, ""))
				d := square(share(float64(i), float64(c.m1))-float64(c.x1)/50) + square(share(float64(j), float64(c.m2))-float64(c.x2)/50)
				if v != now && d < best {
					best, bi, bj, verdict = d, i, j, v
				}
			}
		}
		if !tip.Events[0].OK {
			if bi >= 0 {
				t.Errorf("%+v: no split found, and %d of them tips at %d, %d", c, c.m1, bi, bj)
			}
			continue
		}
		if g := (square(share(tip.Events[0].V, float64(c.m1))-float64(c.x1)/50) + square(share(tip.Events[1].V, float64(c.m2))-float64(c.x2)/50)); g != best || tip.Verdict != verdict {
			t.Errorf("%+v: %v to %s at distance %g, the nearest is %d, %d to %s at %g", c, tip.Events, tip.Verdict, g, bi, bj, verdict, best)
		}
	}
}

// Where a tipping point has no meaning it is refused, and says so.
func TestNoTippingPoint(t *testing.T) {
	for _, text := range []string{
		head + outcome("y", "mean-difference", two) + hypothesis("H1", "y", "superior", "") + entryOf("A", "y", groupsOf24),
		head + outcome("e", "estimate", "better = \"higher\"\n") + hypothesis("H1", "e", "superior", "") + given1("A", "e", 1, 0.2),
		head + outcome("y", "sd-ratio", two) + hypothesis("H1", "y", "superior", "") + entryOf("A", "y", "groups.new = { n = 9, sd = 1 }\ngroups.old = { n = 9, sd = 2 }\n"+flow(2, 2, 9, 9)),
	} {
		res := computed(t, text+sensitivity("S", "H1", "tipping-point", ""))
		if res.Sensitivity[0].Tipping != nil || !strings.Contains(codes(res), "S104") {
			t.Errorf("%+v, %s", res.Sensitivity[0].Tipping, codes(res))
		}
	}
}
