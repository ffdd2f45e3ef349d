package protocol

import (
	"bytes"
	"fmt"
	"slices"
	"strings"

	"steelyard/protocol/record"
)

// Starter writes a commented record to begin with, for a measure and a claim;
// empty words mean `mean-difference` and `superior`. It compiles as it is, and
// everything in it is invented. A measure or claim that is unknown, or that is
// not computed, or a claim that makes no sense of the measure, is an error that
// says what there is.
func Starter(measure, claim string) ([]byte, error) {
	if measure == "" {
		measure = "mean-difference"
	}
	m := record.MeasureOf(measure)
	if m == nil {
		return nil, fmt.Errorf("there is no measure %q; the measures are %s", measure, strings.Join(readyMeasures(), ", "))
	}
	if !m.Ready {
		return nil, fmt.Errorf("this version does not compute %q; it computes %s", measure, strings.Join(readyMeasures(), ", "))
	}
	claims := SensibleClaims(m)
	if claim == "" {
		claim = "superior"
		if !slices.Contains(claims, claim) {
			claim = claims[0]
		}
	}
	c := record.ClaimOf(claim)
	if c == nil {
		return nil, fmt.Errorf("there is no claim %q; those on %s are %s", claim, measure, strings.Join(claims, ", "))
	}
	if !slices.Contains(claims, claim) {
		return nil, fmt.Errorf("no first record of the measure %s is kept for the claim %q; there is one for %s", measure, claim, strings.Join(claims, ", "))
	}
	s := storyOf(m)
	w := &starter{m: m, c: c, s: s}
	w.head()
	w.plan()
	w.outcome()
	w.hypothesis()
	w.result()
	w.after()
	return w.b.Bytes(), nil
}

func readyMeasures() []string {
	var out []string
	for _, m := range record.Measures {
		if m.Ready {
			out = append(out, m.Word)
		}
	}
	return out
}

// SensibleClaims lists the claims that make sense of a measure. A share of
// conforming values has a lower confidence limit and nothing else.
func SensibleClaims(m *record.Measure) []string {
	if m.Word == "conforming-share" || m.Word == "agreement" {
		return []string{"above", "describe"}
	}
	out := make([]string, len(record.Claims))
	for i, c := range record.Claims {
		out[i] = c.Word
	}
	return out
}

// starter writes one record.
type starter struct {
	m *record.Measure
	c *record.Claim
	s story
	b bytes.Buffer
}

func (w *starter) line(format string, args ...any) { fmt.Fprintf(&w.b, format+"\n", args...) }

func (w *starter) head() {
	w.line("# A record to begin with. All of it is invented: replace it line by line, and")
	w.line("# compile it as it stands to see what becomes of it:  steelyard compile THIS-FILE")
	w.line("steelyard = 1          # the version of the language; always the first key")
	w.line("")
	w.line("# ---- What this document is -------------------------------------------------")
	w.line("[record]")
	w.line("title   = %q", w.s.title+" (invented)")
	w.line("number  = \"R-001\"      # in your own system")
	w.line("setting = %q    # clinical, safety, quality, laboratory, field, education, other", w.s.setting)
	w.line("status  = \"draft\"      # draft, review, effective, superseded")
	w.line("")
}

func (w *starter) plan() {
	w.line("# ---- What is promised before the data --------------------------------------")
	w.line("# Write this part first, then keep it with:  steelyard seal THIS-FILE")
	w.line("# What is changed after that is shown as a change.")
	w.line("[plan]")
	w.line("question = %q", w.question())
	switch {
	case !w.c.Judged:
		w.line("level    = 0.95        # of the interval that describes the effect")
	case w.c.TwoSided:
		w.line("# How often, at most, a difference may be claimed where there is none.")
		w.line("alpha    = { two_sided = 0.05 }")
	default:
		w.line("# How often, at most, the claim below may be made although it is false.")
		w.line("alpha    = { one_sided = 0.025 }")
	}
	w.line("")
}

func (w *starter) question() string {
	s := w.s
	than, with := "than with "+s.second, "with "+s.first
	if w.m.Shape == record.OneSample || w.m.Shape == record.Given {
		than = "than " + s.second
	}
	worse := pick(s.better == "higher", "lower", "higher")
	limit := record.FormatNumber(w.limit())
	switch w.c.Word {
	case "differs":
		return fmt.Sprintf("Does %s change %s?", s.thing, with)
	case "superior":
		return fmt.Sprintf("Is %s %s %s %s?", s.thing, s.better, with, than)
	case "minimum-effect":
		return fmt.Sprintf("Is %s %s %s %s, by more than the least that matters?", s.thing, s.better, with, than)
	case "noninferior":
		return fmt.Sprintf("Is %s not %s %s %s, but for the margin at most?", s.thing, worse, with, than)
	case "equivalent":
		return fmt.Sprintf("Is %s neither higher nor lower %s %s by as much as matters?", s.thing, with, than)
	case "benefit-too-small":
		return fmt.Sprintf("Is it excluded that %s is %s %s %s by as much as matters?", s.thing, s.better, with, than)
	case "below", "above":
		if w.m.Shape == record.OneSample {
			unit := pick(s.spec == "", s.unit, "") // shares of values have none
			return strings.TrimSpace(fmt.Sprintf("Is %s %s %s %s %s", s.thing, with, w.c.Word, limit, unit)) + "?"
		}
		return fmt.Sprintf("Is the effect on %s%s %s %s?", s.thing, w.kind(), w.c.Word, limit)
	}
	if w.m.Shape == record.OneSample {
		return fmt.Sprintf("How large is %s %s?", s.thing, with)
	}
	return fmt.Sprintf("How large is the effect on %s%s?", s.thing, strings.TrimSuffix(w.kind(), ","))
}

// kind names the measure inside a question.
func (w *starter) kind() string {
	if w.m.Shape == record.Given {
		return ""
	}
	return ", as " + w.m.Label + ","
}

// limit is the value that the claims below and above are about.
func (w *starter) limit() float64 {
	if w.c.Word == "below" {
		return w.s.below
	}
	return w.s.above
}

func (w *starter) outcome() {
	s := w.s
	w.line("[plan.outcome.%s]       # a name of your choice", s.name)
	w.line("label    = %q", s.label)
	w.line("measure  = %q", w.m.Word)
	if s.unit != "" {
		w.line("unit     = %q", s.unit)
	}
	switch w.m.Shape {
	case record.TwoGroups, record.Paired:
		w.line("groups   = [%q, %q]   # the effect is the first %s the second", s.groups[0], s.groups[1], pick(w.m.IsRatio(), "over", "minus"))
	case record.OneSample, record.Given:
	}
	if w.m.Null == record.NullReference {
		w.line("reference = %s          # what it is compared with", record.FormatNumber(s.reference))
	}
	if s.spec != "" {
		w.line("spec     = %s     # the limits for individual values", s.spec)
	}
	if w.m.Word == "restricted-mean-difference" {
		w.line("horizon  = 90           # the time up to which is averaged")
	}
	w.line("better   = %q      # higher, lower, neither", s.better)
	if s.smallest != "" {
		scale := "It is on the effect's own scale."
		switch {
		case w.m.IsRatio():
			scale = "A ratio's is a factor."
		case s.unit != "":
			scale = "It has the outcome's unit."
		}
		w.line("# The smallest effect that would matter, and why it is that. %s", scale)
		w.line("smallest = %s", s.smallest)
		w.line("why      = %q", s.why)
	}
	w.line("")
}

func (w *starter) hypothesis() {
	w.line("[plan.hypothesis.H1]")
	w.line("outcome  = %q", w.s.name)
	w.line("claim    = %q   # %s", w.c.Word, claimGloss(w.c.Word))
	if w.c.Word == "noninferior" {
		w.line("# The most that may be lost, in the same terms as `smallest`.")
		w.line("margin     = %s", w.s.smallest)
		w.line("margin_why = %q", w.s.why)
	}
	if w.c.NeedsLimit {
		w.line("limit    = %s", record.FormatNumber(w.limit()))
	}
	w.line("# method = %q      # the default; it has %s", w.m.Methods[0], strings.Join(w.m.Methods, ", "))
	w.line("")
}

// claimGloss says in a few words what a claim says.
func claimGloss(claim string) string {
	switch claim {
	case "differs":
		return "not the null, in either direction"
	case "superior":
		return "better than the null"
	case "minimum-effect":
		return "better by more than `smallest`"
	case "noninferior":
		return "not worse than the margin"
	case "equivalent":
		return "inside the region too small to matter"
	case "benefit-too-small":
		return "any benefit is smaller than `smallest`"
	case "below":
		return "below `limit`"
	case "above":
		return "above `limit`"
	}
	return "an interval, and no verdict"
}

func (w *starter) result() {
	w.line("# ---- What arrived -----------------------------------------------------------")
	w.line("# One entry for each study and outcome, dated the day the result became known.")
	w.line("[[result]]")
	w.line("study   = \"Run 1 (invented)\"")
	w.line("outcome = %q", w.s.name)
	w.line("date    = 2026-03-02")
	w.line("source  = \"Notebook 7, page 12 (invented)\"   # where the numbers are written down")
	for _, l := range w.s.result {
		w.line("%s", l)
	}
	if w.m.Data != nil {
		w.line("# Individual values come from a CSV file beside this record instead:")
		columns := strings.Fields(w.m.Data[0])
		for i, c := range columns {
			columns[i] = fmt.Sprintf("%s = %q", c, c)
		}
		w.line("# data = { file = \"run1.csv\", %s }", strings.Join(columns, ", "))
	}
	w.line("")
}

func (w *starter) after() {
	w.line("# ---- What was done otherwise, and what is concluded --------------------------")
	w.line("# [[deviation]]")
	w.line("# date = 2026-03-03")
	w.line("# what = \"…\"")
	w.line("# why  = \"…\"")
	w.line("# results_known = true")
	w.line("# changes = [\"plan.hypothesis.H1.claim\"]")
	w.line("#")
	w.line("# [conclusion]")
	w.line("# text = \"Your own words, checked against what the results support.\"")
}
