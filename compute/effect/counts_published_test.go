package effect

import (
	"fmt"
	"math"
	"testing"

	"steelyard/compute/dist"
)

// publishedGroups decodes the first and second group of a row.
type publishedGroups struct {
	Groups map[string]struct{ N, Events, Exposure float64 }
	Sample struct{ N, Events float64 }
	Pairs  struct {
		Both       float64
		FirstOnly  float64 `json:"first_only"`
		SecondOnly float64 `json:"second_only"`
		Neither    float64
	}
	Table [2][2]float64
}

func (g publishedGroups) two(first, second string) Input {
	a, b := g.Groups[first], g.Groups[second]
	return Input{First: Group{N: a.N, Events: a.Events, Exposure: a.Exposure},
		Second: Group{N: b.N, Events: b.Events, Exposure: b.Exposure}}
}

func (g publishedGroups) one() Input { return one(g.Sample.Events, g.Sample.N) }

func (g publishedGroups) paired() Input {
	return paired(g.Pairs.Both, g.Pairs.FirstOnly, g.Pairs.SecondOnly, g.Pairs.Neither)
}

// across reads a table whose columns are the groups and whose first row holds
// the events.
func (g publishedGroups) across() Input {
	t := g.Table
	return two(t[0][0], t[0][0]+t[1][0], t[0][1], t[0][1]+t[1][1])
}

func loadPublished(t *testing.T, id string) (publishedRow, publishedGroups) {
	t.Helper()
	r := published(t, id)
	var g publishedGroups
	r.input(t, &g)
	return r, g
}

// TestCountsPublishedLimits compares limits with published ones; "" skips a
// side that the source does not print. Where a source prints a method that
// this program does not offer, there is no row.
func TestCountsPublishedLimits(t *testing.T) {
	for _, tc := range []struct {
		id, measure, method, low, high string
		first, second                  string
		a                              float64
	}{
		{"prop-newcombe1-81-263", "proportion", "wilson", "wilson_low", "wilson_high", "", "", 0.025},
		{"prop-newcombe1-81-263", "proportion", "exact", "clopper_pearson_low", "clopper_pearson_high", "", "", 0.025},
		{"prop-newcombe1-81-263", "proportion", "mid-p", "midp_low", "midp_high", "", "", 0.025},
		{"prop-newcombe1-0-20", "proportion", "wilson", "wilson_low", "wilson_high", "", "", 0.025},
		{"prop-newcombe1-0-20", "proportion", "exact", "clopper_pearson_low", "clopper_pearson_high", "", "", 0.025},
		{"prop-newcombe1-0-20", "proportion", "mid-p", "midp_low", "midp_high", "", "", 0.025},
		{"prop-vegetarians", "proportion", "wilson", "", "wilson_high", "", "", 0.025},
		{"prop-vegetarians", "proportion", "exact", "", "clopper_pearson_high", "", "", 0.025},
		{"rd-newcombe2-a", "risk-difference", "score", "miettinen_nurminen_low", "miettinen_nurminen_high", "first", "second", 0.025},
		{"rd-newcombe2-a", "risk-difference", "farrington-manning", "mee_low", "mee_high", "first", "second", 0.025},
		{"rd-newcombe2-a", "risk-difference", "newcombe", "newcombe10_low", "newcombe10_high", "first", "second", 0.025},
		{"rd-newcombe2-b", "risk-difference", "score", "miettinen_nurminen_low", "miettinen_nurminen_high", "first", "second", 0.025},
		{"rd-newcombe2-b", "risk-difference", "farrington-manning", "mee_low", "mee_high", "first", "second", 0.025},
		{"rd-newcombe2-b", "risk-difference", "newcombe", "newcombe10_low", "newcombe10_high", "first", "second", 0.025},
		{"rd-newcombe2-e", "risk-difference", "score", "miettinen_nurminen_low", "miettinen_nurminen_high", "first", "second", 0.025},
		{"rd-newcombe2-e", "risk-difference", "farrington-manning", "mee_low", "mee_high", "first", "second", 0.025},
		{"rd-newcombe2-e", "risk-difference", "newcombe", "newcombe10_low", "newcombe10_high", "first", "second", 0.025},
		{"rd-newcombe2-h", "risk-difference", "score", "miettinen_nurminen_low", "miettinen_nurminen_high", "first", "second", 0.025},
		{"rd-newcombe2-h", "risk-difference", "farrington-manning", "mee_low", "mee_high", "first", "second", 0.025},
		{"rd-newcombe2-h", "risk-difference", "newcombe", "newcombe10_low", "newcombe10_high", "first", "second", 0.025},
		{"rr-gart-nam-1988-8", "risk-ratio", "farrington-manning", "koopman_low", "koopman_high", "first", "second", 0.025},
		{"rr-or-fagerland-newcombe-1", "risk-ratio", "score", "rr_mn_low", "rr_mn_high", "first", "second", 0.025},
		{"rr-or-fagerland-newcombe-1", "odds-ratio", "score", "or_mn_low", "or_mn_high", "first", "second", 0.025},
		{"rr-michelle", "risk-ratio", "log-delta", "", "high", "rivaroxaban", "control", 0.025},
		{"twoprop-physicians", "risk-ratio", "log-delta", "rr_low", "rr_high", "placebo", "aspirin", 0.025},
		{"twoprop-physicians", "odds-ratio", "woolf", "or_low", "or_high", "placebo", "aspirin", 0.025},
		{"rate-ratio-fay", "rate-ratio", "exact", "low", "high", "first", "second", 0.025},
		{"paired-tango-lens", "paired-risk-difference", "tango", "low90", "high90", "", "", 0.05},
		{"paired-tang-2010", "paired-risk-difference", "tango", "tango_low", "tango_high", "", "", 0.025},
	} {
		t.Run(tc.id+" "+tc.method, func(t *testing.T) {
			r, g := loadPublished(t, tc.id)
			in := g.two(tc.first, tc.second)
			switch tc.measure {
			case "proportion":
				in = g.one()
			case "paired-risk-difference":
				in = g.paired()
			}
			low, high := analysed(t, tc.measure, tc.method, in).Method.Limits(tc.a)
			if tc.low != "" {
				r.check(t, tc.low, low)
			}
			if tc.high != "" {
				r.check(t, tc.high, high)
			}
		})
	}
}

func TestCountsPublishedEstimates(t *testing.T) {
	r, g := loadPublished(t, "twoprop-physicians")
	in := g.two("placebo", "aspirin")
	rd := analysed(t, "risk-difference", "score", in)
	r.check(t, "rd", rd.Estimate)
	// The printed interval is the Wald one; standard error and estimate give it.
	r.check(t, "rd_low", rd.Estimate-dist.NormalQuantile(0.025)*rd.SE.V)
	r.check(t, "rd_high", rd.Estimate+dist.NormalQuantile(0.025)*rd.SE.V)
	r.second(t, "rd_se", rd.SE.V, 1e-12)
	r.check(t, "rr", analysed(t, "risk-ratio", "score", in).Estimate)
	r.check(t, "odds_ratio", analysed(t, "odds-ratio", "score", in).Estimate)
	r, g = loadPublished(t, "rr-michelle")
	r.check(t, "rr", analysed(t, "risk-ratio", "score", g.two("rivaroxaban", "control")).Estimate)
	r, g = loadPublished(t, "rr-zou-donner")
	low, high := analysed(t, "risk-ratio", "log-delta", g.two("first", "second")).Method.Limits(0.025)
	r.second(t, "katz_low", low, 1e-12)
	r.second(t, "katz_high", high, 1e-12)
	r, g = loadPublished(t, "paired-newcombe3")
	r.check(t, "estimate", analysed(t, "paired-risk-difference", "tango", g.paired()).Estimate)
}

func TestCountsPublishedPaired(t *testing.T) {
	r, g := loadPublished(t, "paired-approval")
	inf := analysed(t, "paired-risk-difference", "tango", g.paired())
	r.check(t, "estimate", inf.Estimate)
	r.check(t, "wald_se", inf.SE.V)
	r.check(t, "z", inf.Method.Test(0).Value)
	r.second(t, "wald_se", inf.SE.V, 1e-12)
	low, high := inf.Method.Limits(0.025)
	r.second(t, "tango_low", low, 1e-9)
	r.second(t, "tango_high", high, 1e-9)
	both := func(m string) float64 {
		at := analysed(t, "paired-risk-difference", m, g.paired()).Method.Test(0)
		return 2 * math.Min(at.Up.P, at.Down.P)
	}
	r.second(t, "mcnemar_exact", both("exact"), 1e-11)
	r.second(t, "mcnemar_midp", both("mid-p"), 1e-11)
	r, g = loadPublished(t, "paired-tango-lens")
	r.check(t, "z_margin", analysed(t, "paired-risk-difference", "tango", g.paired()).Method.Test(-0.1).Value)
}

func TestCountsPublishedFisher(t *testing.T) {
	r, g := loadPublished(t, "fisher-tea-3")
	exact := analysed(t, "odds-ratio", "exact", g.across())
	up := exact.Method.Test(1).Up.P
	r.check(t, "p_greater", up)
	r.check(t, "p_two_sided", 2*up) // symmetric table: doubling is the sum of both tails
	r.check(t, "odds_ratio_cmle", exact.Estimate)
	low, _ := exact.Method.Limits(0.05)
	r.check(t, "low_one_sided", low)
	r.second(t, "low_one_sided", low, 1e-7)
	r.second(t, "odds_ratio_cmle", exact.Estimate, 1e-8)
	r, g = loadPublished(t, "fisher-tea-4")
	all := analysed(t, "odds-ratio", "exact", g.across())
	r.check(t, "p_greater", all.Method.Test(1).Up.P)
	hasNote(t, all, "S201", true)
	r, g = loadPublished(t, "barnard-mehta")
	fm := analysed(t, "risk-difference", "farrington-manning", g.across())
	r.check(t, "statistic", fm.Method.Test(0).Value)
	r.check(t, "p_barnard", analysed(t, "risk-difference", "unconditional", g.across()).Method.Test(0).Down.P)
	r.check(t, "p_fisher", analysed(t, "odds-ratio", "exact", g.across()).Method.Test(1).Down.P)
}

func TestCountsPublishedRates(t *testing.T) {
	r := published(t, "poisson-limits-a")
	for _, x := range []float64{0, 1, 2, 5, 8, 10, 12, 20, 50} {
		low, high := analysed(t, "rate", "exact", onePer(x, 1)).Method.Limits(0.025)
		r.check(t, fmt.Sprintf("high_%g", x), high)
		if x > 0 {
			r.check(t, fmt.Sprintf("low_%g", x), low)
			r.second(t, fmt.Sprintf("low_%g", x), low, 1e-9)
		}
	}
	r, g := loadPublished(t, "rate-ratio-fay")
	r.check(t, "ratio", analysed(t, "rate-ratio", "score", g.two("first", "second")).Estimate)
	r, g = loadPublished(t, "rate-ratio-fluoroscopy")
	in := g.two("exposed", "unexposed")
	p := func(m string) float64 { return analysed(t, "rate-ratio", m, in).Method.Test(1.5).Up.P }
	r.check(t, "p_score", p("score"))
	r.check(t, "p_exact_conditional", p("exact"))
	r.check(t, "p_midp", p("mid-p"))
	r.second(t, "p_score", p("score"), 1e-11)
	r.second(t, "p_midp", p("mid-p"), 1e-11)
	r.check(t, "ratio", analysed(t, "rate-ratio", "exact", in).Estimate)
	d := analysed(t, "rate-difference", "score", in)
	r.check(t, "difference_per_10000", 1e4*d.Estimate)
	r.second(t, "difference_se_per_10000", 1e4*d.SE.V, 1e-12)
	r, g = loadPublished(t, "ve-bnt-primary")
	ve := analysed(t, "rate-ratio", "exact", g.two("vaccine", "placebo"))
	low, high := ve.Method.Limits(0.025)
	r.check(t, "efficacy", 100*(1-ve.Estimate))
	r.check(t, "low", 100*(1-high))
	r.check(t, "high", 100*(1-low))
}

func TestCountsPublishedStrata(t *testing.T) {
	r := published(t, "mh-berkeley")
	d := readTable(t, "berkeley.csv")
	x1, n1 := d.numbers(t, "men_admitted"), d.numbers(t, "men")
	x2, n2 := d.numbers(t, "women_admitted"), d.numbers(t, "women")
	var strata []Stratum
	for i := range x1 {
		strata = append(strata, Stratum{x1[i], n1[i], x2[i], n2[i]})
	}
	inf := analysed(t, "odds-ratio", "mantel-haenszel", rowsOf(strata))
	low, high := inf.Method.Limits(0.025)
	r.check(t, "mh_odds_ratio", inf.Estimate)
	r.check(t, "low", low)
	r.check(t, "high", high)
	s, _ := MantelHaenszel("odds-ratio", strata)
	// Printed with a continuity correction; without it in the second opinion.
	r.second(t, "chi2", s.Z*s.Z, 1e-11)
}
