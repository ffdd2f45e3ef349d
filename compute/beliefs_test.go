package compute

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"steelyard/compute/result"
)

func prior(name, outcome, more string) string {
	return fmt.Sprintf("[plan.prior.%s]\noutcome = %q\nlabel = \"Invented\"\nwhy = \"What the older reports in the field suggest together.\"\n%s\n", name, outcome, more)
}

// Published example through the record: bayes-great of published.json, the
// effect with its 0.5 in every cell as the source gives it.
func TestPublishedBelief(t *testing.T) {
	want := published(t, "bayes-great")
	a, b, c, d := 13.5, 150.5, 23.5, 125.5
	estimate, se := a*d/(b*c), math.Sqrt(1/a+1/b+1/c+1/d)
	res := computed(t, head+outcome("y", "odds-ratio", "groups = [\"home\", \"hospital\"]\nbetter = \"lower\"\n")+hypothesis("H1", "y", "superior", "")+
		given1("A", "y", estimate, se)+prior("P", "y", "mean = -0.26\nsd = 0.13"))
	p := res.Priors[0]
	near(t, "mean", p.After.Mean, wanted(t, want, "posterior_mean"), 1e-10)
	near(t, "sd", p.After.SD, wanted(t, want, "posterior_sd"), 1e-10)
	near(t, "benefit", p.After.Benefit, wanted(t, want, "prob_benefit"), 1e-10)
	if len(p.Path) != 1 || p.Path[0].Study != "A" || p.BayesFactor.OK {
		t.Errorf("%+v", p)
	}
}

// Before and after every result the shares sum to 1, with a point mass or
// without, and the harmful side is the one away from benefit.
func TestSharesOfBeliefs(t *testing.T) {
	for _, better := range []string{"higher", "lower"} {
		for _, more := range []string{"mean = 0.2\nsd = 0.4", "mean = -0.1\nsd = 0.3\nnull_share = 0.4", "median = 0.1\nlow = -0.5\nhigh = 0.7\nlevel = 0.9"} {
			text := head + outcome("e", "estimate", "better = \""+better+"\"\nsmallest = 0.3\n"+why) + hypothesis("H1", "e", "superior", pooled1) + pooling("e", "common", "") +
				given1("A", "e", 0.4, 0.2) + given1("B", "e", 0.1, 0.3) + given1("C", "e", 0.3, 0.2) + prior("P", "e", more)
			p := computed(t, text).Priors[0]
			if len(p.Path) != 3 || p.Path[2] != p.After {
				t.Fatalf("path %+v", p.Path)
			}
			for _, b := range append(p.Path, p.Before) {
				near(t, "shares", b.Benefit+b.Inside+b.Harm, 1, 1e-12)
				rest := 1.0
				if b.NullShare.OK {
					rest -= b.NullShare.V
				}
				up, down := rest*tail((0.3-b.Mean)/b.SD), rest*tail((b.Mean+0.3)/b.SD)
				if better == "lower" {
					up, down = down, up
				}
				near(t, "benefit", b.Benefit, up, 1e-12)
				near(t, "harm", b.Harm, down, 1e-12)
			}
			if strings.Contains(more, "null_share") != p.BayesFactor.OK {
				t.Errorf("%s: Bayes factor %+v", more, p.BayesFactor)
			}
			if p.BayesFactor.OK { // odds of the null after = before × factor
				odds := 0.4 / 0.6 * p.BayesFactor.V
				nearOpt(t, "null share", p.After.NullShare, odds/(1+odds), 1e-12)
				near(t, "logarithm", p.LnBayesFactor.V, math.Log(p.BayesFactor.V), 1e-12)
			}
		}
	}
}

// Step by step is all at once, since the studies are independent and the model
// is common: the conjugate update by hand.
func TestBeliefPath(t *testing.T) {
	text := head + outcome("e", "estimate", "better = \"higher\"\n") + hypothesis("H1", "e", "superior", "studies = [\"A\"]") + given1("A", "e", 0.4, 0.2) + given1("B", "e", 0.1, 0.3) + prior("P", "e", "mean = 0\nsd = 0.5")
	p := computed(t, text).Priors[0]
	w, m := 1/0.25, 0.0
	for i, x := range []struct{ y, se float64 }{{0.4, 0.2}, {0.1, 0.3}} {
		w2 := 1 / (x.se * x.se)
		m = (m*w + x.y*w2) / (w + w2)
		w += w2
		near(t, "mean", p.Path[i].Mean, m, 1e-12)
		near(t, "sd", p.Path[i].SD, math.Sqrt(1/w), 1e-12)
	}
}

// A t-based result enters with its error widened by t/z; R 4.2.2:
// qt(0.975, 9)/qnorm(0.975) = 2.262157162740992/1.959963984540054.
func TestBeliefFromT(t *testing.T) {
	text := head + outcome("y", "mean", "reference = 0\nbetter = \"higher\"\n") + hypothesis("H1", "y", "superior", "") + entryOf("A", "y", "sample = { n = 10, mean = 1, sd = 2 }") + prior("P", "y", "mean = 0\nsd = 1")
	p := computed(t, text).Priors[0]
	v := 0.4 * math.Pow(2.262157162740992/1.959963984540054, 2)
	near(t, "mean", p.After.Mean, (1/v)/(1+1/v), 1e-10)
	near(t, "sd", p.After.SD, math.Sqrt(1/(1+1/v)), 1e-10)
}

// Beliefs about a ratio are stated as ratios or on the log scale: the same.
func TestBeliefsOfRatios(t *testing.T) {
	base := head + outcome("r", "ratio-estimate", "better = \"lower\"\nsmallest = 1.2\n"+why) + hypothesis("H1", "r", "superior", "") + given1("A", "r", 0.8, 0.1)
	a := computed(t, base+prior("P", "r", "median = 1.1\nlow = 0.9\nhigh = 1.3444444444444446\nlevel = 0.95")).Priors[0]
	sd := math.Log(1.3444444444444446/0.9) / (2 * 1.959963984540054)
	b := computed(t, base+prior("P", "r", fmt.Sprintf("mean = %.17g\nsd = %.17g", math.Log(1.1), sd))).Priors[0]
	near(t, "mean", a.After.Mean, b.After.Mean, 1e-12)
	near(t, "sd", a.After.SD, b.After.SD, 1e-12)
	near(t, "harm before", a.Before.Harm, tail((math.Log(1.2)-math.Log(1.1))/sd), 1e-10)
}

// A prior that the data contradict is said; none of this moves a verdict.
func TestBeliefsNeverDecide(t *testing.T) {
	base := head + outcome("e", "estimate", "better = \"higher\"\n") + hypothesis("H1", "e", "superior", "") + given1("A", "e", 1, 0.2)
	plain := computed(t, base)
	with := computed(t, base+prior("P", "e", "mean = -3\nsd = 0.1"))
	if !strings.Contains(codes(with), "S222") || strings.Contains(codes(plain), "S222") {
		t.Errorf("%s", codes(with))
	}
	if a, b := hyp(t, plain, "H1"), hyp(t, with, "H1"); a.Verdict != b.Verdict || a.P != b.P {
		t.Errorf("%s %v and %s %v", a.Verdict, a.P, b.Verdict, b.P)
	}
	if p := computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+prior("P", "e", "mean = 0\nsd = 1")).Priors[0]; p.After != p.Before || len(p.Path) > 0 {
		t.Errorf("without results: %+v", p)
	}
}

// Evidence beyond what a number holds leaves the factor absent and its
// logarithm there.
func TestHugeBayesFactors(t *testing.T) {
	p := computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+given1("A", "e", 100, 0.1)+prior("P", "e", "mean = 0\nsd = 100\nnull_share = 0.5")).Priors[0]
	if p.BayesFactor.OK || !p.LnBayesFactor.OK || p.LnBayesFactor.V > -1e5 || p.After.NullShare.V != 0 {
		t.Errorf("%+v", p)
	}
}

// Zero cells move a belief through the continuity correction of the plan.
func TestBeliefFromZeroCells(t *testing.T) {
	res := computed(t, head+outcome("y", "odds-ratio", two)+hypothesis("H1", "y", "superior", "")+
		entryOf("A", "y", "groups.new = { n = 20, events = 0 }\ngroups.old = { n = 20, events = 4 }")+prior("P", "y", "mean = 0\nsd = 1"))
	y, v := math.Log(0.5/20.5*16.5/4.5), 1/0.5+1/20.5+1/4.5+1/16.5
	near(t, "mean", res.Priors[0].After.Mean, y/v/(1+1/v), 1e-12)
	_ = result.Open
}
