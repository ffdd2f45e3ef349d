// Package starter writes a first record for a measure and a claim: commented,
// invented, and free of faults as it is, so that a user changes a working
// record instead of filling in an empty one. It refuses to know the disk; the
// day of the invented result is given to it.
//
//	text, err := starter.Record("risk-difference", "noninferior", day)
package starter

import (
	"fmt"
	"slices"
	"strings"

	"steelyard/protocol/record"
)

// DefaultMeasure is the measure of a starting record that asks for none.
const DefaultMeasure = "mean-difference"

// DefaultClaim is the claim that suits a measure when none is asked for.
func DefaultClaim(measure string) string {
	switch measure {
	case "sd":
		return "below"
	case "conforming-share", "agreement", "proportion":
		return "above"
	case "correlation", "rank-correlation", "estimate":
		return "differs"
	}
	return "equivalent"
}

// Measures lists the measures that this version computes.
func Measures() (words []string) {
	for _, m := range record.Measures {
		if m.Ready {
			words = append(words, m.Word)
		}
	}
	return words
}

// Claims lists the claims of the language.
func Claims() (words []string) {
	for _, c := range record.Claims {
		words = append(words, c.Word)
	}
	return words
}

// Record writes the starting record. Words that are not of the language, or
// not computed by this version, are an error that lists the others.
func Record(measure, claim string, day record.Date) (string, error) {
	m, c := record.MeasureOf(measure), record.ClaimOf(claim)
	if m == nil || !m.Ready {
		return "", fmt.Errorf("measure %q: allowed are %s", measure, strings.Join(Measures(), ", "))
	}
	if c == nil {
		return "", fmt.Errorf("claim %q: allowed are %s", claim, strings.Join(Claims(), ", "))
	}
	w := writer{m: m, c: c, e: exampleOf(m), day: day}
	w.head()
	w.outcome()
	w.hypothesis()
	w.result()
	return w.b.String(), nil
}

type writer struct {
	b   strings.Builder
	m   *record.Measure
	c   *record.Claim
	e   example
	day record.Date
}

func (w *writer) linef(format string, args ...any) { fmt.Fprintf(&w.b, format+"\n", args...) }

// key writes a key with a remark.
func (w *writer) key(name, value, remark string) {
	line := fmt.Sprintf("%-9s = %s", name, value)
	if remark == "" {
		w.linef("%s", line)
		return
	}
	w.linef("%-44s # %s", line, remark)
}

func (w *writer) head() {
	w.linef("# A record to begin with. All of it is invented: put your own in its place.")
	w.linef("# `steelyard watch FILE` compiles it whenever it is saved, and")
	w.linef("# `steelyard explain WORD` explains any measure, claim or method.")
	w.linef("steelyard = 1")
	w.linef("")
	w.linef("[record]")
	w.key("title", quote("Invented example: "+w.m.Label), "what this document decides")
	w.key("number", quote("EX-001"), "in your own system")
	w.key("setting", quote("quality"), words("record.setting"))
	w.linef("# status = \"draft\"   # %s", words("record.status"))
	w.linef("")
	w.linef("# What is promised before the data are seen.")
	w.linef("[plan]")
	w.key("question", quote(w.question()), "the decision, in plain words")
	if w.c.TwoSided {
		w.key("alpha", "{ two_sided = 0.05 }", "the error you accept")
	} else {
		w.key("alpha", "{ one_sided = 0.05 }", "the error you accept")
	}
	w.linef("")
}

func words(path string) string {
	if k := record.KeyOf(path); k != nil {
		return strings.Join(k.Words, ", ")
	}
	return ""
}

// question is a decision that fits the claim.
func (w *writer) question() string {
	what := strings.ToLower(w.e.label)
	switch {
	case w.c.NeedsLimit:
		return fmt.Sprintf("Is the %s %s %s?", w.m.Label, w.c.Word, w.e.limit(w.c.Word))
	case w.m.Shape == record.OneSample || w.m.Shape == record.Given:
		return fmt.Sprintf("Is the %s (%s) what was demanded?", w.m.Label, what)
	default:
		return fmt.Sprintf("How does the new way compare with the current one in %s?", what)
	}
}

func (w *writer) outcome() {
	m, e := w.m, w.e
	w.linef("[plan.outcome.main]")
	w.key("label", quote(e.label), "")
	if e.unit != "" {
		w.key("unit", quote(e.unit), "printed with every value")
	}
	w.key("measure", quote(m.Word), m.Label)
	if w.c.Directed {
		w.key("better", quote(e.better), "the direction of benefit: higher, lower")
	}
	if m.Shape == record.TwoGroups || m.Shape == record.Paired {
		w.key("groups", `["new", "current"]`, "first and second: the effect is first against second")
	}
	if m.Null == record.NullReference {
		w.key("reference", e.reference, "what the effect is compared with")
	}
	if e.spec != "" {
		w.key("spec", e.spec, "limits for individual values")
	}
	if e.horizon != "" {
		w.key("horizon", e.horizon, "the mean is that up to this time")
	}
	if w.c.NeedsSize {
		w.key("smallest", e.smallest, "the smallest effect that matters")
		w.key("why", quote(e.why), "")
	}
	w.linef("")
}

func (w *writer) hypothesis() {
	w.linef("[plan.hypothesis.H1]")
	w.key("outcome", quote("main"), "")
	w.key("claim", quote(w.c.Word), strings.Join(Claims(), ", "))
	if w.c.NeedsLimit {
		w.key("limit", w.e.limit(w.c.Word), "")
	}
	// Methods that ask for more columns are left to `explain`.
	plain := slices.DeleteFunc(slices.Clone(w.m.Methods), func(word string) bool {
		return word == "linear" || word == "linear-hc3" || word == "mantel-haenszel"
	})
	if len(plain) > 1 {
		w.linef("# method = %s   # the default; also %s", quote(plain[0]), strings.Join(plain[1:], ", "))
	}
	w.linef("")
}

func (w *writer) result() {
	w.linef("# What arrived.")
	w.linef("[[result]]")
	w.key("study", quote("Invented study 1"), "")
	w.key("outcome", quote("main"), "")
	w.key("date", w.day.String(), "when the result became known")
	w.key("source", quote("invented"), "where it is written down")
	keys := []string{"estimate", "low", "high", "level"}
	form := "effect"
	if w.m.Summary != nil {
		keys = strings.Fields(w.m.Summary[0])
		form = map[record.Shape]string{record.OneSample: "sample", record.TwoGroups: "groups", record.Paired: "pairs"}[w.m.Shape]
	}
	switch form {
	case "groups":
		w.linef("groups.new     = %s", w.e.summary(keys, 0))
		w.linef("groups.current = %s", w.e.summary(keys, 1))
	default:
		w.linef("%-9s = %s", form, w.e.summary(keys, 0))
	}
	if len(w.m.Data) > 0 {
		var columns strings.Builder
		for _, name := range strings.Fields(w.m.Data[0]) {
			fmt.Fprintf(&columns, ", %s = \"COLUMN\"", name)
		}
		w.linef("# or, in place of the numbers, columns of a CSV file beside this record:")
		w.linef("# data = { file = \"data.csv\"%s }", columns.String())
	}
}

func quote(s string) string { return `"` + strings.ReplaceAll(s, `"`, `\"`) + `"` }
