package compute

import (
	"strings"
	"testing"

	"steelyard/compute/result"
)

// Every entry is listed once, in the order of the record: results, earlier
// results, missing ones; each with what became of it.
func TestEntriesAreListed(t *testing.T) {
	text := head + outcome("e", "estimate", "better = \"higher\"\n") + outcome("y", "mean", "reference = 0\nbetter = \"higher\"\n") +
		hypothesis("H1", "e", "superior", "studies = [\"A\"]") + hypothesis("H2", "y", "superior", "role = \"secondary\"") +
		"[plan.combination.e]\nmethod = \"fisher\"\n" +
		given1("A", "e", 1, 0.2) + given1("B", "e", 2, 0.2) + "leave_out = \"The scale was found to be broken.\"\nsource = \"Notebook 4\"\n" +
		entryOf("A", "y", "sample = { n = 1, mean = 2, sd = 0 }") +
		entryOf("C", "e", "p = { value = 0.03, sides = 2, direction = \"above\", n = 40 }") +
		strings.Replace(given1("D", "e", 0.5, 0.2), "[[result]]", "[[earlier_result]]", 1) + missing1
	var got []string
	res := computed(t, text)
	for _, s := range res.Studies {
		got = append(got, s.Study+" "+s.Outcome+" "+string(s.Use)+" "+s.Form)
	}
	want := "A e analysed effect; B e left-out effect; A y not-computed sample; C e analysed p; D e earlier effect; M e missing "
	if strings.Join(got, "; ") != want {
		t.Errorf("%s\nwant %s", strings.Join(got, "; "), want)
	}
	b, c, d := res.Studies[1], res.Studies[3], res.Studies[4]
	if b.Why == "" || b.Source != "Notebook 4" || !b.Analysis.Estimate.OK || !d.Analysis.Estimate.OK || !d.P.OK || d.Date.IsZero() {
		t.Errorf("%+v\n%+v", b, d)
	}
	if c.BareP == nil || c.BareP.Value != 0.03 || c.BareP.Sides != 2 || c.BareP.N.V != 40 || c.Analysis.Estimate.OK || c.P.OK {
		t.Errorf("%+v", c)
	}
	near(t, "two-sided", res.Studies[0].P.P, 2*tail(5), 1e-12)
	near(t, "descriptive low", res.Studies[0].Analysis.Low.V, 1-1.959963984540054*0.2, 1e-12)
	if h := hyp(t, res, "H1"); len(h.Studies) != 1 || h.Studies[0] != "A" {
		t.Errorf("read from %v", h.Studies)
	}
}

// Entries show the numbers that their measure is made of.
func TestGroupNumbers(t *testing.T) {
	one := func(measure, keys, entry string) []result.GroupNumbers {
		return computed(t, head+outcome("y", measure, keys)+hypothesis("H1", "y", "describe", "")+entryOf("A", "y", entry)).Studies[0].Groups
	}
	g := one("rate-ratio", two, "groups.new = { events = 3, exposure = 12 }\ngroups.old = { events = 5, exposure = 9.5 }")
	if g[0].Name != "new" || g[0].Events.V != 3 || g[1].Exposure.V != 9.5 || g[0].N.OK || g[0].Mean.OK {
		t.Errorf("rates: %+v", g)
	}
	if g = one("correlation", "", "sample = { n = 12, r = 0.4 }"); g[0].R.V != 0.4 || g[0].N.V != 12 || g[0].Mean.OK {
		t.Errorf("correlation: %+v", g)
	}
	if g = one("mean", "reference = 1\n", "sample = { n = 12, mean = 0, sd = 1 }"); !g[0].Mean.OK || g[0].Mean.V != 0 || g[0].SD.V != 1 {
		t.Errorf("a mean of zero: %+v", g)
	}
	if g = one("sd-ratio", two, "groups.new = { n = 9, sd = 2 }\ngroups.old = { n = 8, sd = 1 }"); g[0].Mean.OK || g[0].SD.V != 2 || g[1].N.V != 8 {
		t.Errorf("spreads: %+v", g)
	}
	if g = one("paired-risk-difference", two, "pairs = { both = 4, first_only = 3, second_only = 2, neither = 1 }"); g[0].N.V != 10 || g[0].Mean.OK {
		t.Errorf("pairs of counts: %+v", g)
	}
	if g = one("risk-ratio", two, "effect = { estimate = 1.2, se = 0.1, n = 80 }"); len(g) != 1 || g[0].N.V != 80 {
		t.Errorf("an effect: %+v", g)
	}
	res := computed(t, head+outcome("y", "median-shift", `groups = ["term", "early"]`)+hypothesis("H1", "y", "describe", "")+fromFile("A", "y", `value = "pd", group = "stage"`), "d.csv", text(t, "permeability.csv"))
	// R 4.2.2: median(c(0.80, 0.83, 1.89, 1.04, 1.45, 1.38, 1.91, 1.64, 0.73, 1.46))
	if g = res.Studies[0].Groups; !g[0].Median.OK || g[0].Mean.OK || g[0].Median.V != 1.415 {
		t.Errorf("medians: %+v", g)
	}
}

// Counts of page one are sums over the analysed entries; what one entry does
// not say is not said of all.
func TestTotals(t *testing.T) {
	groups := "groups.new = { n = 12, mean = 5, sd = 2 }\ngroups.old = { n = 11, mean = 3, sd = 1 }\n"
	text := head + outcome("y", "mean-difference", two) + outcome("z", "mean-difference", two) + hypothesis("H1", "y", "superior", pooled1) + hypothesis("H2", "z", "superior", "role = \"secondary\"") +
		pooling("y", "common", "") + entryOf("A", "y", groups+flow(2, 3, 12, 11)) + entryOf("B", "y", groups+"flow.new = { randomised = 12, analysed = 12 }\n") +
		entryOf("C", "y", groups+"leave_out = \"The scale was found to be broken.\"\n") + entryOf("A", "z", groups)
	res := computed(t, text)
	if len(res.Totals) != 2 {
		t.Fatalf("%+v", res.Totals)
	}
	a, b := res.Totals[0], res.Totals[1]
	if a.Outcome != "y" || a.Group != "new" || a.Analysed.V != 24 || a.Randomised.V != 26 || a.Missing.V != 2 {
		t.Errorf("%+v", a)
	}
	if b.Group != "old" || b.Analysed.V != 22 || b.Randomised.OK || b.Missing.OK {
		t.Errorf("%+v", b)
	}
}

// Every choice of the analysis is listed with where it came from.
func TestChoices(t *testing.T) {
	text := head + outcome("y", "mean-difference", two+"smallest = 0.4\n"+why) + hypothesis("H1", "y", "superior", pooled1) + pooling("y", "random", "between = \"paule-mandel\"\n") +
		entryOf("A", "y", groupsOf24) + entryOf("B", "y", groupsOf24)
	got := map[string]string{}
	for _, c := range computed(t, text).Choices {
		got[c.What] = c.Value + " (" + c.From + ")"
	}
	for what, want := range map[string]string{"y: variance between studies": "paule-mandel (plan)", "y: interval of the pool": "hartung-knapp (default)", "y: model of the pool": "random (plan)",
		"level of descriptive intervals": "0.95 (default)", "H1: method": "random-paule-mandel-hartung-knapp (default)", "y: floor of the interval": "kept (default)",
		"y: region too small to matter": "-0.4 to 0.4 (plan)", "H1: evidence": "pooled (plan)", "y: better": "higher (plan)"} {
		if got[what] != want {
			t.Errorf("%s: %q, want %q", what, got[what], want)
		}
	}
}
