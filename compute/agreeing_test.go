package compute

import (
	"math"
	"slices"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"testing"
)

// agreeing checks that an established or contradicted claim has its interval
// on the side that the verdict says, and an open one has not: unless the
// record says that test and interval disagree, or that the interval does not
// decide.
func agreeing(t reporter, res *result.Result, h *result.Hypothesis) {
	t.Helper()
	if !h.P.OK || !h.IntervalDecides || !h.Low.OK || !h.High.OK || slices.ContainsFunc(h.Notes, func(n result.Note) bool { return n.Code == "S204" }) {
		return
	}
	i := slices.IndexFunc(res.Outcomes, func(o result.Outcome) bool { return o.Name == h.Outcome })
	o := res.Outcomes[i]
	iv := seen{h: h, o: o, t: t, flip: o.Better == "lower"}
	iv.low, iv.high = effect.To(o.Scale, h.Low.V), effect.To(o.Scale, h.High.V)
	good, bad := h.MarginHigh, h.MarginLow
	if iv.flip {
		good, bad = bad, good
	}
	switch h.Claim {
	case "differs":
		if above, below, ok := iv.over(o.Null); ok {
			iv.want(above || below, false)
		}
	case "superior":
		iv.better(o.Null, false)
	case "minimum-effect":
		iv.better(good, false)
	case "noninferior":
		iv.better(bad, false)
	case "benefit-too-small":
		iv.better(good, true)
	case "equivalent":
		aboveLow, belowLow, ok1 := iv.over(h.MarginLow)
		aboveHigh, belowHigh, ok2 := iv.over(h.MarginHigh)
		if ok1 && ok2 {
			iv.want(aboveLow && belowHigh, belowLow || aboveHigh)
		}
	case "above", "below":
		above, below, ok := iv.over(h.Limit)
		if h.Claim == "below" {
			above, below = below, above
		}
		if ok {
			iv.want(above, below)
		}
	}
}

func TestAgreeingFails(t *testing.T) {
	res := computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+given1("A", "e", 1, 0.2))
	h := *hyp(t, res, "H1")
	var c counter
	agreeing(&c, res, &h)
	if c != 0 {
		t.Fatal("a sound result is at fault")
	}
	h.Verdict = result.Open
	agreeing(&c, res, &h)
	if c != 1 {
		t.Fatal("a wrong verdict was not found")
	}
}

// seen is an interval as a reader sees it, on the analysis scale.
type seen struct {
	t         reporter
	h         *result.Hypothesis
	o         result.Outcome
	low, high float64
	flip      bool // lower is better
}

// over says whether the interval lies above or below a point; not where a
// limit is so near that it is known no better.
func (s seen) over(c result.Opt) (above, below, ok bool) {
	at := effect.To(s.o.Scale, c.V)
	w := math.Max(1e-12, 1e-7*(s.high-s.low))
	return s.low > at, s.high < at, c.OK && math.Abs(s.low-at) > w && math.Abs(s.high-at) > w
}

// better wants the verdict of "better than c", or turned, of "worse than c".
func (s seen) better(c result.Opt, turned bool) {
	above, below, ok := s.over(c)
	if s.flip != turned {
		above, below = below, above
	}
	if ok {
		s.want(above, below)
	}
}

func (s seen) want(yes, no bool) {
	s.t.Helper()
	expect := result.Open
	switch {
	case yes:
		expect = result.Established
	case no:
		expect = result.Contradicted
	}
	got := s.h.Verdict
	if got == result.Suggested {
		got = result.Established
	}
	if got != expect {
		s.t.Errorf("%s %s of %s is %s; the interval is %g to %g (%s, p %g)", s.h.Name, s.h.Claim, s.o.Measure, got, s.h.Low.V, s.h.High.V, s.h.Method, s.h.P.P)
	}
}
