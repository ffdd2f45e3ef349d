package compute

import (
	"strings"
	"testing"
	"time"

	"steelyard/compute/result"
)

var (
	january = time.Date(2026, 1, 10, 8, 0, 0, 0, time.UTC)
	april   = time.Date(2026, 4, 10, 8, 0, 0, 0, time.UTC)
)

const planned = head + `[plan.outcome.y]
label = "Invented"
measure = "mean-difference"
groups = ["new", "old"]
better = "higher"
smallest = 0.5
why = "Below this nobody would notice the difference in use."
[plan.hypothesis.H1]
outcome = "y"
claim = "noninferior"
[plan.hypothesis.H2]
outcome = "y"
claim = "superior"
role = "secondary"
`

const arrived = `[[result]]
study = "A"
outcome = "y"
date = 2026-03-02
groups.new = { n = 20, mean = 5.3, sd = 1.0 }
groups.old = { n = 20, mean = 5.0, sd = 1.4 }
`

func deviation(changes string) string {
	return "[[deviation]]\ndate = 2026-02-01\nwhat = \"Changed the plan.\"\nwhy = \"A new regulation asks for it.\"\nresults_known = false\nchanges = [" + changes + "]\n"
}

// under computes a changed record against the chain of the plan as it was.
func under(t *testing.T, changed string, at time.Time) *result.Result {
	t.Helper()
	res := Run(load(t, changed, sealed(t, planned, at), nil), "test")
	consistent(t, res)
	return res
}

// The verdict under the sealed plan stands beside the present one wherever a
// number differs, declared or not; it is the verdict of the record as sealed.
func TestChangedPlans(t *testing.T) {
	asSealed := computed(t, planned+arrived)
	for _, c := range []struct {
		what, old, new, path string
		h1, h2               bool // whose numbers change
	}{
		{"level", "one_sided = 0.05", "one_sided = 0.025", "plan.alpha.one_sided", true, true},
		{"region", "smallest = 0.5", "smallest = 0.9", "plan.outcome.y.smallest", true, false},
		{"margin", "claim = \"noninferior\"\n", "claim = \"noninferior\"\nmargin = 0.2\nmargin_why = \"Half of what the older comparison preserved.\"\n", "plan.hypothesis.H1.margin", true, false},
		{"method", "claim = \"superior\"\n", "claim = \"superior\"\nmethod = \"pooled-variance\"\n", "plan.hypothesis.H2.method", false, true},
		{"claim", "claim = \"noninferior\"", "claim = \"equivalent\"", "plan.hypothesis.H1.claim", true, false},
	} {
		for _, declared := range []bool{false, true} {
			text := strings.Replace(planned, c.old, c.new, 1) + arrived
			if declared {
				text += deviation("\"" + c.path + "\"" + map[bool]string{true: ", \"plan.hypothesis.H1.margin_why\""}[c.what == "margin"])
			}
			res := under(t, text, january)
			want := "changed"
			if declared {
				want = "sealed"
			}
			if res.Seal.State != want || len(res.Seal.Changes) == 0 {
				t.Errorf("%s, declared %v: %s, %+v", c.what, declared, res.Seal.State, res.Seal.Changes)
			}
			for name, differs := range map[string]bool{"H1": c.h1, "H2": c.h2} {
				h := hyp(t, res, name)
				old := because(h, "sealed-plan")
				if differs != (len(old) == 1) {
					t.Errorf("%s: %s has %d verdicts under the sealed plan", c.what, name, len(old))
					continue
				}
				if differs {
					was := hyp(t, asSealed, name)
					if old[0].Verdict != was.Verdict || old[0].P != was.P || old[0].Low != was.Low || old[0].High != was.High {
						t.Errorf("%s: %s was %+v, the sealed plan says %+v", c.what, name, was.Judged, old[0])
					}
				}
			}
			from := ""
			for _, x := range res.Choices {
				if c.what == "level" && x.What == "one-sided error level" || c.what == "region" && strings.HasSuffix(x.What, "too small to matter") ||
					c.what == "margin" && x.What == "H1: margin" || c.what == "method" && x.What == "H2: method" || c.what == "claim" && x.What == "H1: claim" {
					from = x.From
				}
			}
			if wantFrom := map[bool]string{true: "deviation", false: "plan"}[declared]; from != wantFrom {
				t.Errorf("%s, declared %v: from %q", c.what, declared, from)
			}
		}
	}
}

// A hypothesis that was sealed and is gone is kept; one that came later stands
// without a verdict under the sealed plan.
func TestAddedAndRemovedHypotheses(t *testing.T) {
	i := strings.Index(planned, "[plan.hypothesis.H2]")
	res := under(t, planned[:i]+arrived, january)
	if len(res.Removed) != 1 || res.Removed[0].Name != "H2" || res.Removed[0].Verdict != hyp(t, computed(t, planned+arrived), "H2").Verdict {
		t.Errorf("removed: %+v", res.Removed)
	}
	res = under(t, planned+"[plan.hypothesis.H3]\noutcome = \"y\"\nclaim = \"differs\"\nrole = \"secondary\"\n"+arrived, january)
	if len(because(hyp(t, res, "H3"), "sealed-plan")) > 0 || len(res.Removed) > 0 || res.Seal.State != "changed" {
		t.Errorf("added: %+v", hyp(t, res, "H3").Alternatives)
	}
}

// The order of seal and results decides whether the verdicts are post hoc.
func TestPostHoc(t *testing.T) {
	march := time.Date(2026, 3, 2, 12, 0, 0, 0, time.UTC)
	for _, c := range []struct {
		at    time.Time
		order string
		post  bool
	}{{january, "before-results", false}, {march, "same-day", true}, {april, "after-results", true}} {
		res := under(t, planned+arrived, c.at)
		if res.Seal.Order != c.order || hyp(t, res, "H1").PostHoc != c.post {
			t.Errorf("sealed at %v: %s, post hoc %v", c.at, res.Seal.Order, hyp(t, res, "H1").PostHoc)
		}
	}
}

// The seed follows the digest of the plan as sealed, so that changing the plan
// afterwards shops for nothing.
func TestSeedOfASealedPlan(t *testing.T) {
	text := strings.ReplaceAll(planned, "claim = \"superior\"", "claim = \"superior\"\nmethod = \"permutation\"")
	chain := sealed(t, text, january)
	seedOf := func(text string, chain []byte) uint64 { return newRun(load(t, text, chain, nil), "test").seed }
	changed := strings.Replace(text, "smallest = 0.5", "smallest = 0.6", 1)
	if a, b := seedOf(text, chain), seedOf(changed, chain); a != b {
		t.Errorf("sealed: %d, changed since: %d", a, b)
	}
	if a, b := seedOf(text, nil), seedOf(changed, nil); a == b {
		t.Error("two unsealed plans share a seed")
	}
	in := load(t, changed, chain, nil)
	if in.Sealed == nil || newRun(in.Sealed, "").seed != newRun(in, "").seed {
		t.Error("the plan as sealed draws otherwise than the plan now")
	}
	stated := strings.Replace(text, "alpha =", "seed = 77\nalpha =", 1)
	if seedOf(stated, nil) != 77 {
		t.Error("a stated seed is not used")
	}
}

// The timeline is in order and marks what cannot be ordered.
func TestTimeline(t *testing.T) {
	march := time.Date(2026, 3, 2, 12, 0, 0, 0, time.UTC)
	text := planned + arrived + strings.Replace(strings.Replace(arrived, "\"A\"", "\"B\"", 1), "date = 2026-03-02", "known = 2026-03-01T23:30:00-05:00", 1) +
		"[[decision]]\nat = 2026-05-02T09:00:00+02:00\nbody = \"The board\"\non = \"H1\"\nsaw = \"unmasked\"\nwhat = \"Go on.\"\n" +
		"[[witness]]\nseal = 1\nwhat = \"Printed and signed.\"\nreference = \"Book 3\"\nat = 2026-03-02T14:00:00+00:00\n" +
		strings.Replace(deviation(""), "2026-02-01", "2026-05-01", 1)
	text = strings.ReplaceAll(text, "claim = \"noninferior\"\n", "claim = \"noninferior\"\nstudies = [\"A\"]\n")
	text = strings.ReplaceAll(text, "claim = \"superior\"\n", "claim = \"superior\"\nstudies = [\"A\"]\n")
	text = strings.ReplaceAll(text, "changes = []\n", "")
	res := Run(load(t, text, sealed(t, planned, march), nil), "test")
	var got []string
	for _, e := range res.Timeline {
		kind := e.Kind
		if e.Order != "" {
			kind += "?"
		}
		got = append(got, kind)
	}
	// The day alone (A) comes first; B was known at 04:30 of the same day at
	// Greenwich, the seal was at noon, its witness at two.
	if want := "result? result? seal? witness? deviation decision"; strings.Join(got, " ") != want {
		t.Errorf("%v, want %s", got, want)
	}
}
