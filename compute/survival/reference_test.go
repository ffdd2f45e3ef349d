package survival

import (
	"encoding/json"
	"math"
	"os"
	"strings"
	"testing"

	"steelyard/compute/result"
)

// valueRow is one computation by another program.
type valueRow struct {
	ID, Program, Call string
	Input             struct {
		Time, Event   []float64
		Group, Strata []int32
		Stratified    bool
		Tau           float64
	}
	Expected map[string]float64
	Digits   map[string]int
}

// check compares within half a unit of the row's last significant digit.
func (r valueRow) check(t reporter, name string, got float64) {
	t.Helper()
	want, ok := r.Expected[name]
	digits := r.Digits[name]
	if digits == 0 {
		digits = r.Digits["all"]
	}
	if !ok || digits == 0 {
		t.Errorf("%s: no number %q", r.ID, name)
		return
	}
	half := 0.5 * math.Pow(10, math.Ceil(math.Log10(math.Abs(want)))-float64(digits))
	if !(math.Abs(got-want) <= half) {
		t.Errorf("%s: %s = %.15g, %s gives %.15g", r.ID, name, got, r.Program, want)
	}
}

func TestRowCheckCanFail(t *testing.T) {
	r := valueRow{Expected: map[string]float64{"a": 1.2345}, Digits: map[string]int{"all": 4}}
	var c counter
	r.check(&c, "a", 1.2349)
	if c != 0 {
		t.Error("refuses what is right")
	}
	r.check(&c, "a", 1.2361)
	r.check(&c, "a", math.NaN())
	r.check(&c, "b", 1)
	if c != 3 {
		t.Error("accepts what is wrong")
	}
}

// TestReference holds the hazard ratio by every method, the log-rank test, the
// check of proportionality, restricted means and curves against R survival.
func TestReference(t *testing.T) {
	text, err := os.ReadFile("../../testdata/reference/survival.json")
	if err != nil {
		t.Fatal(err)
	}
	var rows []valueRow
	if err := json.Unmarshal(text, &rows); err != nil {
		t.Fatal(err)
	}
	for _, r := range rows {
		in := Input{Time: r.Input.Time, Event: r.Input.Event, Horizon: r.Input.Tau}
		for _, g := range r.Input.Group {
			in.Group = append(in.Group, uint8(g))
		}
		if r.Input.Stratified {
			in.Strata = r.Input.Strata
		}
		if strings.HasPrefix(r.ID, "cox-") {
			checkHazard(t, r, in)
		} else {
			checkRestricted(t, r, in)
		}
	}
}

func checkHazard(t *testing.T, r valueRow, in Input) {
	t.Helper()
	wald, problem := HazardRatio("wald", in)
	if problem != nil {
		t.Fatalf("%s: %v", r.ID, problem)
	}
	r.check(t, "beta", math.Log(wald.Estimate))
	r.check(t, "se", wald.SE.V)
	r.check(t, "proportionality_chisq", shown(wald.Checks, "proportional-hazards"))
	for method, word := range map[string]string{"likelihood-ratio": "lr", "score": "score"} {
		inf, problem := HazardRatio(method, in)
		if problem != nil {
			t.Fatalf("%s: %v", r.ID, problem)
		}
		r.check(t, word+"_z_at_1", inf.Method.Test(1).Value)
		r.check(t, word+"_z_at_half", inf.Method.Test(0.5).Value)
		low, high := inf.Method.Limits(0.025)
		r.check(t, word+"_low", low)
		r.check(t, word+"_high", high)
		if word == "lr" {
			z := inf.Method.Test(1).Value
			r.check(t, "loglik_gain", z*z/2)
		}
	}
	z, ok := LogRank(in)
	if !ok {
		t.Errorf("%s: no log-rank test", r.ID)
	}
	r.check(t, "logrank_chisq", z*z)
}

// shown is the first number under a check.
func shown(checks []result.Check, assumption string) float64 {
	for _, c := range checks {
		if c.Assumption == assumption {
			return c.Shows[0].Value
		}
	}
	return math.NaN()
}

func checkRestricted(t *testing.T, r valueRow, in Input) {
	t.Helper()
	inf, problem := RestrictedMeanDifference(in)
	if problem != nil {
		t.Fatalf("%s: %v", r.ID, problem)
	}
	r.check(t, "difference", inf.Estimate)
	r.check(t, "se", inf.SE.V)
	r.check(t, "mean_first", inf.Checks[0].Shows[0].Value)
	r.check(t, "mean_second", inf.Checks[0].Shows[1].Value)
	points, _ := Curve(in, 0, 0.025)
	for at, name := range map[float64]string{2: "2", 4: "4"} {
		p := Point{Share: 1, Low: 1, High: 1}
		for _, q := range points {
			if q.Time <= at {
				p = q
			}
		}
		r.check(t, "share_"+name, p.Share)
		r.check(t, "low_"+name, p.Low)
		r.check(t, "high_"+name, p.High)
	}
}
