package render

import (
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/render/number"
)

var update = flag.Bool("update", false, "write golden files anew")

// golden compares with a file under testdata, or writes it.
func golden(t *testing.T, name, got string) {
	t.Helper()
	path := filepath.Join("testdata", name)
	if *update {
		if err := os.MkdirAll("testdata", 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(strings.Split(string(want), "\n"), strings.Split(got, "\n")); d != "" {
		t.Errorf("%s changed; -update after reading (-old +new):\n%s", name, d)
	}
}

var allVerdicts = []result.Verdict{result.Established, result.Suggested, result.Contradicted, result.Open, result.Pending, result.Described, result.Masked}

// allReadings are the ten readings with a region and the three without.
func allReadings() []result.Reading {
	var r []result.Reading
	for above := 0; above <= 3; above++ {
		for below := 0; above+below <= 3; below++ {
			r = append(r, result.Reading{Above: above, Below: below, HasRegion: true, OK: true})
		}
	}
	for _, p := range [][2]int{{1, 0}, {0, 0}, {0, 1}} {
		r = append(r, result.Reading{Above: p[0], Below: p[1], OK: true})
	}
	return r
}

// spoken is one case of the wording.
type spoken struct {
	title    string
	outcome  result.Outcome
	evidence string
	model    string
}

func spokenCases() []spoken {
	two := result.Outcome{Name: "o", Label: "Peel strength", Unit: "N", Measure: "mean-difference", Better: "higher", Null: result.Some(0), Low: result.Some(-0.8), High: result.Some(0.8), Groups: [2]string{"new", "current"}, Digits: -1}
	lower := result.Outcome{Name: "o", Label: "Relapse", Measure: "risk-ratio", Better: "lower", Null: result.Some(1), Low: result.Some(0.8), High: result.Some(1.25), Groups: [2]string{"short", "standard"}, Ratio: true, Digits: -1, Scale: record.Log}
	one := result.Outcome{Name: "o", Label: "Fill weight", Unit: "g", Measure: "mean", Better: "higher", Null: result.Some(0), Low: result.Some(-0.8), High: result.Some(0.8), Digits: -1}
	return []spoken{
		{"two groups, higher is better", two, "single", ""},
		{"two groups, lower is better, a ratio", lower, "single", ""},
		{"one sample", one, "single", ""},
		{"pooled, common effect", two, "pooled", "common"},
		{"pooled, random effects", two, "pooled", "random"},
		{"combined p-values", two, "combined", ""},
	}
}

// speak makes the result and hypothesis of one sentence.
func speak(s spoken, claim string, verdict result.Verdict, reading result.Reading) (*result.Result, *result.Hypothesis) {
	h := &result.Hypothesis{Name: "H1", Outcome: "o", Claim: claim, Alpha: 0.05, TwoSided: claim == "differs", MarginLow: s.outcome.Low, MarginHigh: s.outcome.High, Evidence: s.evidence}
	if claim == "below" || claim == "above" {
		h.Limit = result.Some(0.5)
	}
	h.Verdict, h.Reading, h.IntervalDecides = verdict, reading, true
	res := &result.Result{Outcomes: []result.Outcome{s.outcome}}
	if s.evidence != "single" {
		h.Studies = []string{"A", "B", "C"}
	}
	if s.model != "" {
		res.Pooled = []result.Pooled{{Outcome: "o", Model: s.model, Decides: true}}
	}
	switch verdict {
	case result.Pending, result.Masked:
	default:
		if s.evidence != "combined" {
			h.Level = 0.90
			h.Estimate, h.Low, h.High = result.Some(0.31), result.Some(0.12), result.Some(0.65)
			if s.outcome.Ratio {
				h.Estimate, h.Low, h.High = result.Some(0.91), result.Some(0.85), result.Some(0.97)
			}
		}
	}
	return res, h
}

// possible reports whether a verdict can go with a claim.
func possible(claim string, v result.Verdict) bool {
	switch {
	case claim == "describe":
		return v == result.Described || v == result.Pending || v == result.Masked
	case v == result.Described:
		return false
	case claim == "differs":
		return v != result.Contradicted
	}
	return true
}

// The golden file holds every sentence, to be read aloud.
func TestWordingGolden(t *testing.T) {
	var b strings.Builder
	for _, better := range []string{"higher", "lower", "neither"} {
		fmt.Fprintf(&b, "# Readings, better = %s\n\n", better)
		for _, r := range allReadings() {
			region := "region"
			if !r.HasRegion {
				region = "no region"
			}
			fmt.Fprintf(&b, "(%d,%d) %s: %s – %s\n    not supported: %s\n", r.Above, r.Below, region, ReadingName(r, better), ReadingWords(r, better), notShown(r, better))
		}
		b.WriteByte('\n')
	}
	for _, s := range spokenCases() {
		fmt.Fprintf(&b, "# Sentences: %s\n\n", s.title)
		for _, c := range record.Claims {
			for _, v := range allVerdicts {
				if !possible(c.Word, v) {
					continue
				}
				writeSentences(&b, s, c.Word, v)
			}
		}
		b.WriteByte('\n')
	}
	b.WriteString("# Cautions\n\n")
	for _, setting := range []string{"clinical", "safety", "quality", "laboratory", "field", "education", "other"} {
		short, full := caution(setting)
		fmt.Fprintf(&b, "%s: %s\n    %s\n", setting, short, full)
	}
	golden(t, "wording.golden", visible(b.String()))
}

// writeSentences prints the sentences of one claim and verdict, each once
// with the readings that lead to it.
func writeSentences(b *strings.Builder, s spoken, claim string, v result.Verdict) {
	var order []string
	by := map[string][]string{}
	for _, r := range allReadings() {
		res, h := speak(s, claim, v, r)
		text := Sentence(res, h, &h.Judged)
		if by[text] == nil {
			order = append(order, text)
		}
		name := fmt.Sprintf("%d,%d", r.Above, r.Below)
		if !r.HasRegion {
			name += "–"
		}
		by[text] = append(by[text], name)
	}
	for _, text := range order {
		which := "every reading"
		if len(order) > 1 {
			which = strings.Join(by[text], " ")
		}
		fmt.Fprintf(b, "%s, %s [%s]\n    %s\n", claim, v, which, text)
	}
}

// visible makes the blanks that do not break plain.
func visible(s string) string {
	return strings.NewReplacer(number.Hard, " ", number.Thin, " ").Replace(s)
}

// forbidden are words that no sentence about an effect may hold.
var forbidden = []*regexp.Regexp{
	regexp.MustCompile(`(?i)\bno (effect|difference)s?\b`),
	regexp.MustCompile(`(?i)\baccept`),
	regexp.MustCompile(`(?i)\bprove[sdn]?\b|\bproof\b`),
	regexp.MustCompile(`(?i)\btrend`),
	regexp.MustCompile(`(?i)nearly significant|significant`),
	regexp.MustCompile(`(?i)\bfail(s|ed|ure)?\b`),
	regexp.MustCompile(`(?i)\bthe uncertainty\b`),
	regexp.MustCompile(`(?i)\bprobabilit|\bchance\b|\blikely\b|\bbelieve`),
	regexp.MustCompile(`NaN|%!|\(\)|  `),
}

// broken names the first rule that a text breaks.
func broken(s string) string {
	for _, f := range forbidden {
		if m := f.FindString(s); m != "" {
			return m
		}
	}
	return ""
}

func TestWordingForbidden(t *testing.T) {
	for _, s := range spokenCases() {
		for _, c := range record.Claims {
			for _, v := range allVerdicts {
				for _, r := range allReadings() {
					res, h := speak(s, c.Word, v, r)
					text := Sentence(res, h, &h.Judged)
					if m := broken(visible(text)); m != "" {
						t.Errorf("%s %s: %q in %q", c.Word, v, m, text)
					}
					if !strings.HasSuffix(text, ".") {
						t.Errorf("no full stop: %q", text)
					}
				}
			}
		}
	}
	for _, better := range []string{"higher", "lower", "neither"} {
		for _, r := range allReadings() {
			name, words := reading(r, better)
			if name == "" || words == "" {
				t.Errorf("reading %v has no words", r)
			}
			if m := broken(name + " " + words + " " + notShown(r, better)); m != "" {
				t.Errorf("%q in reading %v", m, r)
			}
		}
	}
}

// The check itself must find what it looks for.
func TestForbiddenFinds(t *testing.T) {
	for _, s := range []string{"There is no effect.", "We accept H1.", "This proves it.", "a trend toward", "nearly significant", "The test failed.", "the uncertainty is", "it is likely", "NaN"} {
		if broken(s) == "" {
			t.Errorf("%q passes", s)
		}
	}
	if m := broken("The data show that new is better than current."); m != "" {
		t.Errorf("found %q where there is nothing", m)
	}
}

// Readings come in mirror images: exchanging the better direction exchanges
// the two counts.
func TestReadingsMirror(t *testing.T) {
	for _, r := range allReadings() {
		m := r
		m.Above, m.Below = r.Below, r.Above
		if a, b := ReadingName(r, "higher"), ReadingName(m, "lower"); a != b {
			t.Errorf("%v: %q and %q", r, a, b)
		}
	}
	if ReadingName(result.Reading{}, "higher") != "" {
		t.Error("an absent reading has a name")
	}
}

// Cases that a reader would otherwise miss.
func TestSentenceAsides(t *testing.T) {
	base := spokenCases()[0]
	harm := result.Reading{Above: 1, Below: 2, HasRegion: true, OK: true}
	inside := result.Reading{Above: 2, Below: 1, HasRegion: true, OK: true}
	sentence := func(claim string, v result.Verdict, r result.Reading, change func(*result.Hypothesis)) string {
		res, h := speak(base, claim, v, r)
		if change != nil {
			change(h)
		}
		return visible(Sentence(res, h, &h.Judged))
	}
	for _, c := range []struct{ name, text, want string }{
		{"noninferior on the harmful side", sentence("noninferior", result.Established, harm, nil), "wholly on the harmful side"},
		{"difference inside the region", sentence("differs", result.Established, inside, nil), "whole interval lies inside the region too small to matter"},
		{"limit on the margin", sentence("equivalent", result.Open, result.Reading{OK: true, HasRegion: true}, func(h *result.Hypothesis) { h.High = result.Some(0.8) }), "The upper limit is equal to 0.8 N."},
		{"no upper limit", sentence("superior", result.Open, result.Reading{OK: true, HasRegion: true}, func(h *result.Hypothesis) { h.High = result.Some(math.Inf(1)) }), "no upper limit"},
		{"reason", sentence("superior", result.Open, result.Reading{}, func(h *result.Hypothesis) {
			h.Reason = &result.Note{Code: "S102", Message: "the values of %s do not vary (sd %.2g)", Args: []any{"new", 0.0}}
		}), "stays open: the values of new do not vary (sd 0)"},
		{"interval that does not decide", sentence("superior", result.Established, result.Reading{}, func(h *result.Hypothesis) { h.IntervalDecides = false }), "does not decide"},
		{"exploratory", sentence("superior", result.Suggested, result.Reading{}, nil), "(exploratory)"},
		{"outside the region", sentence("equivalent", result.Contradicted, result.Reading{Above: 3, HasRegion: true, OK: true}, nil), "(difference above 0.8 N)"},
		{"open names what is compatible", sentence("superior", result.Open, result.Reading{}, nil), "still compatible: 0.12 to 0.65 N (90 % interval)"},
	} {
		if !strings.Contains(c.text, c.want) {
			t.Errorf("%s: %q lacks %q", c.name, c.text, c.want)
		}
	}
}

func TestNoteText(t *testing.T) {
	for _, c := range []struct {
		n    result.Note
		want string
	}{
		{result.Note{Message: "100%% of it"}, "100% of it"},
		{result.Note{Message: "%d of %s", Args: []any{3, "x"}}, "3 of x"},
		{result.Note{Message: "p %.3g, %g", Args: []any{0.03124, -1.5}}, "p 0.0312, −1.5"},
		{result.Note{Message: "%v left", Args: []any{math.Inf(1)}}, "without upper limit left"},
		{result.Note{Message: "%s and %s", Args: []any{"one"}}, "one and "},
	} {
		if got := noteText(c.n); got != c.want {
			t.Errorf("got %q, want %q", got, c.want)
		}
	}
}
