package main

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"testing"
	"time"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/pipeline"
	"steelyard/protocol/diag"
)

// published is one example of testdata/reference/published.json.
type published struct {
	ID         string             `json:"id"`
	Source     string             `json:"source"`
	FromMemory bool               `json:"from_memory"`
	Expected   map[string]any     `json:"expected"`
	Digits     map[string]int     `json:"printed_digits"`
	Slack      map[string]float64 `json:"slack"`
}

// check compares a computed value with the printed one: within half a unit of
// the last printed digit, and the slack that the example allows.
func (p published) check(name string, got float64) error {
	want, ok := p.Expected[name].(float64)
	digits, known := p.Digits[name]
	if !ok || !known {
		return fmt.Errorf("%s: no printed number %s", p.ID, name)
	}
	allowed := (0.5 + p.Slack[name]) * math.Pow(10, -float64(digits))
	if !(math.Abs(got-want) <= allowed*(1+1e-9)) {
		return fmt.Errorf("%s: %s is %v, printed %v with %d digits (%s)", p.ID, name, got, want, digits, p.Source)
	}
	return nil
}

func TestCheckFails(t *testing.T) {
	p := published{ID: "x", Expected: map[string]any{"a": 1.25, "b": true}, Digits: map[string]int{"a": 2}, Slack: map[string]float64{}}
	for _, got := range []float64{1.2449, 1.2551, math.NaN(), math.Inf(1)} {
		if p.check("a", got) == nil {
			t.Errorf("%v was accepted for 1.25", got)
		}
	}
	if p.check("b", 1) == nil || p.check("c", 1) == nil {
		t.Error("a name without a printed number was accepted")
	}
	if err := p.check("a", 1.2451); err != nil {
		t.Error(err)
	}
}

// readPublished reads the examples by name.
func readPublished(t *testing.T) map[string]published {
	t.Helper()
	text, err := os.ReadFile(filepath.Join("..", "..", "testdata", "reference", "published.json"))
	if err != nil {
		t.Fatal(err)
	}
	var list []published
	if err := json.Unmarshal(text, &list); err != nil {
		t.Fatal(err)
	}
	m := map[string]published{}
	for _, p := range list {
		m[p.ID] = p
	}
	return m
}

// contract is the part of the JSON output that these tests read.
type contract struct {
	Studies []struct {
		Estimate *float64 `json:"estimate"`
		SE       *float64 `json:"se"`
	} `json:"studies"`
	Hypotheses []struct {
		Name     string   `json:"name"`
		Verdict  string   `json:"verdict"`
		Estimate *float64 `json:"estimate"`
		SE       *float64 `json:"se"`
		DF       *float64 `json:"df"`
		Low      *float64 `json:"low"`
		High     *float64 `json:"high"`
		P        *float64 `json:"p"`
		Tests    []struct {
			Value *float64 `json:"value"`
			P     *float64 `json:"p"`
		} `json:"tests"`
	} `json:"hypotheses"`
}

// compiled takes a record of the project from the disk to its JSON.
func compiled(t testing.TB, path string) (c contract, diagnostics diag.List) {
	t.Helper()
	form := pipeline.JSON
	w := batch.Worker{Rooms: pipeline.Real(), Print: &form, Now: time.Now}
	rep := w.Do(batch.FoundIn(filepath.Dir(path), path))
	if rep.Err != nil {
		t.Fatal(rep.Err)
	}
	if err := json.Unmarshal(rep.Printed, &c); err != nil {
		t.Fatal(err)
	}
	return c, rep.Compiled.Diagnostics
}

func TestPublishedRecords(t *testing.T) {
	examples := readPublished(t)
	num := func(p *float64) float64 {
		if p == nil {
			return math.NaN()
		}
		return *p
	}
	// Each row names a record, a hypothesis, the example it is compared with,
	// and which of its numbers stand for which printed ones. Limits are those
	// of the interval that decides; scale turns ours into the printed unit, a
	// negative one into the percentage by which a ratio is below 1.
	for _, tt := range []struct {
		record, hypothesis, example string
		scale                       float64
		names                       map[string]string // ours → printed
		verdict                     string
	}{
		{"sleep", "welch", "mean-sleep-welch", 1, map[string]string{"value": "t", "df": "df", "p": "p", "low": "low", "high": "high"}, "open"},
		{"auto83b", "pooled", "mean-auto83b", 1, map[string]string{"value": "t", "df": "df"}, "established"},
		{"auto83b", "welch", "mean-auto83b", 1, map[string]string{"value": "welch_t", "df": "welch_df"}, "suggested"},
		{"tomato", "higher", "mean-tomato-two-sample", 1, map[string]string{"estimate": "estimate", "value": "t", "df": "df", "p": "p_one_sided"}, "open"},
		{"particles", "moved", "mean-particles", 1, map[string]string{"estimate": "mean", "value": "t"}, "open"},
		{"newcombe-single", "wilson", "prop-newcombe1-81-263", 1, map[string]string{"low": "wilson_low", "high": "wilson_high"}, "suggested"},
		{"newcombe-single", "exact", "prop-newcombe1-81-263", 1, map[string]string{"low": "clopper_pearson_low", "high": "clopper_pearson_high"}, "suggested"},
		{"newcombe-single", "midp", "prop-newcombe1-81-263", 1, map[string]string{"low": "midp_low", "high": "midp_high"}, "suggested"},
		{"newcombe-difference", "score", "rd-newcombe2-a", 1, map[string]string{"low": "miettinen_nurminen_low", "high": "miettinen_nurminen_high"}, "suggested"},
		{"newcombe-difference", "unscaled", "rd-newcombe2-a", 1, map[string]string{"low": "mee_low", "high": "mee_high"}, "suggested"},
		{"newcombe-difference", "hybrid", "rd-newcombe2-a", 1, map[string]string{"low": "newcombe10_low", "high": "newcombe10_high"}, "suggested"},
		{"physicians", "ratio", "twoprop-physicians", 1, map[string]string{"estimate": "rr", "low": "rr_low", "high": "rr_high"}, "established"},
		{"physicians", "odds", "twoprop-physicians", 1, map[string]string{"estimate": "odds_ratio", "low": "or_low", "high": "or_high"}, "suggested"},
		{"score-ratios", "risk", "rr-or-fagerland-newcombe-1", 1, map[string]string{"low": "rr_mn_low", "high": "rr_mn_high"}, "suggested"},
		{"score-ratios", "odds", "rr-or-fagerland-newcombe-1", 1, map[string]string{"low": "or_mn_low", "high": "or_mn_high"}, "suggested"},
		{"score-ratios", "small", "rr-gart-nam-1988-8", 1, map[string]string{"low": "koopman_low", "high": "koopman_high"}, "open"},
		{"spring2", "noninferior", "ni-spring2-w48", 100, map[string]string{"low": "low_percent", "high": "high_percent"}, "established"},
		{"spring2", "superior", "ni-spring2-w48", 1, nil, "open"},
		{"rocket-af", "noninferior", "ni-rocket-af", 1, nil, "established"},
		{"rocket-af", "superior", "ni-rocket-af", 2, map[string]string{"p": "p_superiority"}, "open"}, // printed two-sided
		{"sleep-pairs", "pairs", "mean-sleep-paired", 1, map[string]string{"estimate": "estimate", "se": "se", "value": "t", "df": "df", "p": "p", "low": "low", "high": "high"}, "established"},
		{"shoes", "pairs", "mean-shoes-paired", 1, map[string]string{"estimate": "estimate", "value": "t", "df": "df", "p": "p", "low": "low", "high": "high"}, "established"},
		{"skinfold", "ratio", "gmr-skinfold", 1, map[string]string{"estimate": "ratio", "value": "t_log", "low": "ratio_low", "high": "ratio_high"}, "open"},
		{"tango-lens", "noninferior", "paired-tango-lens", 1, map[string]string{"value": "z_margin", "low": "low90", "high": "high90"}, "established"},
		{"fluoroscopy", "score", "rate-ratio-fluoroscopy", 1, map[string]string{"estimate": "ratio", "p": "p_score"}, "open"},
		{"fluoroscopy", "exact", "rate-ratio-fluoroscopy", 1, map[string]string{"p": "p_exact_conditional"}, "open"},
		{"fluoroscopy", "midp", "rate-ratio-fluoroscopy", 1, map[string]string{"p": "p_midp"}, "open"},
		{"vaccine", "lower", "ve-bnt-primary", -100, map[string]string{"estimate": "efficacy", "low": "high", "high": "low"}, "established"},
		{"tuna", "linear", "corr-tuna", 1, map[string]string{"estimate": "pearson", "low": "pearson_low", "high": "pearson_high"}, "open"},
		{"permeability", "higher", "rank-permeability", 1, map[string]string{"estimate": "shift", "p": "p_greater"}, "open"},
		{"crossover", "same", "tost-chow-liu", 1, map[string]string{"estimate": "estimate", "se": "se", "low": "low90", "high": "high90"}, "established"},
		{"aristotle", "noninferior", "ni-aristotle", 1, nil, "established"},
		{"aristotle", "superior", "ni-aristotle", 2, map[string]string{"p": "p_superiority"}, "established"},
	} {
		t.Run(tt.record+"/"+tt.hypothesis, func(t *testing.T) {
			c, list := compiled(t, filepath.Join("..", "..", "testdata", "records", tt.record+".toml"))
			if n := list.Count(diag.SeverityError); n > 0 {
				t.Fatalf("%d errors: %v", n, list)
			}
			for _, h := range c.Hypotheses {
				if h.Name != tt.hypothesis {
					continue
				}
				if h.Verdict != tt.verdict {
					t.Errorf("verdict %s, want %s", h.Verdict, tt.verdict)
				}
				if len(h.Tests) == 0 {
					t.Fatal("no test")
				}
				ours := map[string]float64{"estimate": num(h.Estimate), "df": num(h.DF), "low": num(h.Low), "high": num(h.High),
					"p": num(h.P), "value": num(h.Tests[0].Value), "se": num(h.SE)}
				shift := 0.0
				if tt.scale < 0 {
					shift = -tt.scale
				}
				for name, printed := range tt.names {
					if err := examples[tt.example].check(printed, shift+ours[name]*tt.scale); err != nil {
						t.Error(err)
					}
				}
				return
			}
			t.Fatal("no such hypothesis")
		})
	}
}
