package protocol

import (
	"bytes"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"steelyard/protocol/read"
	"steelyard/protocol/record"
)

// Reference is the reference of the language, in Markdown, made from the table
// of keys, the measures, the claims and the cards of reading. It is kept as
// README.md beside this file.
func Reference() []byte {
	var b bytes.Buffer
	b.WriteString(referenceHead)
	for _, s := range sections {
		s.write(&b)
	}
	writeMeasures(&b)
	writeClaims(&b)
	writeFaults(&b)
	return b.Bytes()
}

// referenceHead is what no table can say.
const referenceHead = `# The language of a record

*This file is made from the table of keys by ` + "`go test ./protocol -run TestReference -update`" + `; do not edit it.*

A record is one TOML file. It is read from top to bottom like the story of a decision: who and what for (` + "`[record]`" + `), what was
promised before the data (` + "`[plan]`" + `), what arrived (` + "`[[result]]`" + `), what was done otherwise (` + "`[[deviation]]`" + `), what was decided
(` + "`[[decision]]`, `[conclusion]`" + `). Its first key is ` + "`steelyard = 1`" + `, the version of the language. ` + "`steelyard new FILE`" + ` writes a
commented record to begin with.

Four ideas carry the rest:

- **An effect has a null and a region that is too small to matter.** Intervals are read against both, never against the null alone.
- **The plan is sealed before the data.** Every later compile holds the record against the seal and shows what differs.
- **A choice is stated, or shown as a default.** Nothing is chosen in silence.
- **Nothing disappears.** Results that were left out, are missing or came too early are counted on page one.

## A whole record

` + "```toml" + `
steelyard = 1

[record]
title   = "Leaks after the change of film (invented)"
number  = "R-017"
setting = "quality"

[plan]
question = "Does the new film leak less, or at least not more than we can bear?"
alpha    = { one_sided = 0.025 }

[plan.outcome.leak]
label    = "Pouches that leak"
measure  = "risk-difference"
groups   = ["new", "current"]     # the effect is new minus current
better   = "lower"
smallest = 0.02
why      = "Two leaking pouches in a hundred are caught at the final inspection anyway."

[plan.hypothesis.not_worse]
outcome = "leak"
claim   = "noninferior"
margin  = 0.02
margin_why = "The final inspection catches two more in a hundred."

[[result]]
study   = "Line 2, week 14 (invented)"
outcome = "leak"
date    = 2026-04-03
groups.new     = { n = 600, events = 21 }
groups.current = { n = 600, events = 30 }
` + "```" + `

## How it is written

Keys are written in ` + "`snake_case`" + `, words of closed lists in ` + "`kebab-case`" + `. A name of your own begins with a letter and goes on with letters,
digits, ` + "`_` and `-`" + `; in the tables below it is NAME. Dates stand without quotes. Values stay raw: five percentage points are 0.05, and a
ratio of a half is 0.5. An unknown key or word is an error, and so is a key that says nothing where it stands: what is written is never
passed over. A key marked **later** is part of the language and not computed by this version, which refuses it.

The column *required* says that every table of that kind needs the key. Some keys are required by what others say; the text names when.

`

// section is one part of the reference: one table, and those below it that
// are shown with it.
type section struct {
	title string
	table string // path of the table's keys, as record.KeysIn takes it
	text  string
	skip  []string // tables below that have a section of their own
}

var sections = []section{
	{title: "[record] — the document", table: "record"},
	{title: "[plan] — what is promised", table: "plan",
		skip: []string{"outcome", "hypothesis", "family", "set", "data", "looks", "pooling", "combination", "size", "rehearsal", "prior", "sensitivity", "estimand"}},
	{title: "[plan.outcome.NAME] — what is measured", table: "plan.outcome.NAME"},
	{title: "[plan.hypothesis.NAME] — what is claimed", table: "plan.hypothesis.NAME"},
	{title: "[plan.family.NAME] — several claims together", table: "plan.family.NAME"},
	{title: "[plan.set.NAME] — analysis sets", table: "plan.set.NAME",
		text: "A row that filters drop is counted once, by the first filter that drops it, and by group."},
	{title: "[plan.data] — exclusions promised in advance", table: "plan.data"},
	{title: "[plan.looks] — planned looks before the end", table: "plan.looks"},
	{title: "[plan.pooling.OUTCOME] — several studies, one estimate", table: "plan.pooling.NAME"},
	{title: "[plan.combination.OUTCOME] — p-values without estimates", table: "plan.combination.NAME"},
	{title: "[plan.size.NAME] — how large the study is to be", table: "plan.size.NAME"},
	{title: "[plan.rehearsal] — the plan simulated", table: "plan.rehearsal"},
	{title: "[plan.prior.NAME] — what is believed before", table: "plan.prior.NAME"},
	{title: "[plan.sensitivity.NAME] — what hangs on a choice", table: "plan.sensitivity.NAME"},
	{title: "[plan.estimand.NAME] — what exactly is estimated", table: "plan.estimand.NAME"},
	{title: "[[result]] — what arrived", table: "result",
		text: "`[[earlier_result]]` has the same keys: results known before the plan, shown and not analysed unless a pooling includes them."},
	{title: "[[missing_result]] — what exists and cannot be had", table: "missing_result"},
	{title: "[[deviation]] — what was done otherwise", table: "deviation"},
	{title: "[[decision]], [[approval]], [[witness]] — who decided, approved, bore witness", table: "decision"},
	{title: "", table: "approval"},
	{title: "", table: "witness"},
	{title: "[conclusion] — your own words", table: "conclusion"},
}

func (s section) write(b *bytes.Buffer) {
	if s.title != "" {
		fmt.Fprintf(b, "## %s\n\n", s.title)
	}
	if k := record.KeyOf(strings.TrimSuffix(s.table, ".NAME")); k != nil {
		fmt.Fprintf(b, "%s%s\n\n", strings.TrimSpace(k.Doc+" "+s.text), later(k))
	}
	prefix := ""
	if s.title == "" {
		prefix = s.table + "."
	}
	b.WriteString("| key | takes | |\n|---|---|---|\n")
	s.rows(b, s.table, prefix)
	b.WriteByte('\n')
}

// rows writes the keys of a table and of those below it.
func (s section) rows(b *bytes.Buffer, table, prefix string) {
	for _, k := range record.KeysIn(table) {
		if table == s.table && slices.Contains(s.skip, k.Name()) {
			continue
		}
		fmt.Fprintf(b, "| `%s` | %s | %s%s |\n", prefix+k.Name(), cell(takes(k)), cell(k.Doc), later(k))
		if k.Kind.IsTable() {
			below := prefix + k.Name() + "."
			if k.Kind == record.KindNamedTables {
				below += "NAME."
			}
			s.rows(b, k.Below(), below)
		}
	}
}

// cell keeps a text inside its cell of a table.
func cell(s string) string { return strings.ReplaceAll(s, "|", `\|`) }

// later marks what is not computed yet.
func later(k *record.Key) string {
	if parent := record.KeyOf(strings.TrimSuffix(k.Parent(), ".NAME")); parent != nil && !parent.Ready {
		return "" // said at the table
	}
	switch {
	case !k.Ready:
		return " **Later.**"
	case len(k.Later) > 0:
		return " **Later:** `" + strings.Join(k.Later, "`, `") + "`."
	}
	return ""
}

// takes says what a key holds, whether it must, and what stands in for it.
func takes(k *record.Key) string {
	var parts []string
	switch {
	case k.Path == "plan.outcome.NAME.measure":
		parts = append(parts, "a measure")
	case k.Path == "plan.hypothesis.NAME.claim":
		parts = append(parts, "a claim")
	case len(k.Words) > 0:
		parts = append(parts, "`"+strings.Join(k.Words, "`, `")+"`")
	default:
		parts = append(parts, kind(k))
	}
	if k.Range != nil {
		parts = append(parts, k.Range.String())
	}
	if k.Whole {
		parts = append(parts, "whole")
	}
	if k.Required {
		parts = append(parts, "**required**")
	}
	if k.Default != nil {
		parts = append(parts, "default "+defaultText(k.Default))
	}
	return strings.Join(parts, ", ")
}

// kind names a kind in few words.
func kind(k *record.Key) string {
	switch k.Kind {
	case record.KindTable:
		return "table"
	case record.KindNamedTables:
		return "tables by name"
	case record.KindTables:
		return "array of tables"
	case record.KindString, record.KindWord:
		return "text"
	case record.KindStrings, record.KindWords:
		return lengths(k, "texts")
	case record.KindNumber:
		return "number"
	case record.KindNumbers:
		if k.One {
			return "number, or two"
		}
		return lengths(k, "numbers")
	case record.KindRows:
		return "rows of numbers"
	case record.KindInt:
		return "whole number"
	case record.KindBool:
		return "true or false"
	case record.KindDay:
		return "date"
	case record.KindInstant:
		return "date and time with offset"
	case record.KindBounds:
		return "number or [low, high]"
	case record.KindScalar:
		return "text, number, true or false"
	case record.KindScalars:
		return "array of those"
	case record.KindLook:
		return "whole number from 1, or `unplanned`"
	case record.KindNamedStrings:
		return "texts by name"
	case record.KindNamedNumbers:
		return "numbers by name"
	}
	panic("protocol: a key of no kind: " + k.Path)
}

func lengths(k *record.Key, what string) string {
	if k.MaxLen > 0 && k.MinLen == k.MaxLen {
		return strconv.Itoa(k.MinLen) + " " + what
	}
	return "array of " + what
}

func defaultText(v any) string {
	switch v := v.(type) {
	case string:
		return "`" + v + "`"
	case float64:
		return record.FormatNumber(v)
	case int64:
		return strconv.FormatInt(v, 10)
	case bool:
		return strconv.FormatBool(v)
	case []string:
		out := make([]string, len(v))
		for i, s := range v {
			out[i] = strconv.Quote(s)
		}
		return "`[" + strings.Join(out, ", ") + "]`"
	}
	panic("protocol: a default of no kind")
}

func writeMeasures(b *bytes.Buffer) {
	b.WriteString("## Measures\n\nRatios are analysed on the logarithm and printed as ratios. `data` names columns of a file; `effect` is an estimate made elsewhere; " +
		"every measure can also join a combination by a bare `p`. The first method is the default.\n\n" +
		"| measure | effect | null | a result gives | columns of `data` | methods |\n|---|---|---|---|---|---|\n")
	for _, m := range record.Measures {
		ready := ""
		if !m.Ready {
			ready = " **Later.**"
		}
		fmt.Fprintf(b, "| `%s` | %s.%s | %s | %s | %s | `%s` |\n", m.Word, m.Label, ready, nullText(m), forms(m), columns(m.Data), strings.Join(m.Methods, "`, `"))
	}
	b.WriteByte('\n')
}

func nullText(m *record.Measure) string {
	switch m.Null {
	case record.NullZero:
		return "0"
	case record.NullOne:
		return "1"
	case record.NullHalf:
		return "½"
	case record.NullReference:
		return "`reference`"
	case record.NullReferenceOrZero:
		return "`reference`, or 0"
	}
	panic("protocol: a null of no kind: " + m.Word)
}

func forms(m *record.Measure) string {
	var out []string
	for _, s := range m.Summary {
		keys := strings.ReplaceAll(s, " ", ", ")
		switch m.Shape {
		case record.OneSample:
			out = append(out, "`sample = { "+keys+" }`")
		case record.TwoGroups:
			out = append(out, "`groups.X = { "+keys+" }` twice")
		case record.Paired:
			out = append(out, "`pairs = { "+keys+" }`")
		case record.Given:
		}
	}
	if m.Effect {
		out = append(out, "`effect`")
	}
	if m.Data != nil {
		out = append(out, "`data`")
	}
	return strings.Join(out, "; ")
}

func columns(data []string) string {
	out := make([]string, len(data))
	for i, d := range data {
		out[i] = "`" + strings.ReplaceAll(d, " ", "`, `") + "`"
	}
	return strings.Join(out, "; or ")
}

// claimTexts says when a claim is established, contradicted, and at which
// level its interval stands. All limits are strict.
var claimTexts = map[string][3]string{
	"differs":           {"the effect is not the null", "never", "1 − two_sided"},
	"superior":          {"better than the null", "worse than the null", "1 − 2 one_sided"},
	"minimum-effect":    {"better by more than `smallest` or `margin`", "any benefit is smaller than that", "1 − 2 one_sided"},
	"noninferior":       {"not worse than the margin", "worse than the margin", "1 − 2 one_sided"},
	"equivalent":        {"inside the region, by two one-sided tests", "wholly outside of it on one side", "1 − 2 one_sided"},
	"benefit-too-small": {"any benefit is smaller than `smallest` or `margin`; harm is not excluded", "`minimum-effect` is shown", "1 − 2 one_sided"},
	"below":             {"below `limit`", "above it", "1 − 2 one_sided"},
	"above":             {"above `limit`", "below it", "1 − 2 one_sided"},
	"describe":          {"never judged", "", "`level`"},
}

func writeClaims(b *bytes.Buffer) {
	b.WriteString("## Claims\n\nThe interval shown is always the one that decides the claim, and a limit equal to the margin does not establish it. What is neither " +
		"established nor contradicted is open; without results it is pending.\n\n| claim | established | contradicted | interval | needs |\n|---|---|---|---|---|\n")
	for _, c := range record.Claims {
		t := claimTexts[c.Word]
		var needs []string
		for _, n := range []struct {
			key string
			is  bool
		}{{"`better`", c.Directed}, {"`smallest` or `margin`", c.NeedsSize}, {"`limit`", c.NeedsLimit},
			{"`alpha.two_sided`", c.TwoSided}, {"`alpha.one_sided`", c.Judged && !c.TwoSided}} {
			if n.is {
				needs = append(needs, n.key)
			}
		}
		fmt.Fprintf(b, "| `%s` | %s | %s | %s | %s |\n", c.Word, t[0], t[1], t[2], strings.Join(needs, ", "))
	}
	b.WriteByte('\n')
}

func writeFaults(b *bytes.Buffer) {
	b.WriteString("## Faults of a record\n\nAll faults of a file come in one run, each with its place. `steelyard explain CODE` says more. Codes are permanent. Those of data files " +
		"begin with D, of seals with L, of the numbers with S, of wording with W.\n\n| code | | what to do |\n|---|---|---|\n")
	for _, c := range read.Cards {
		fmt.Fprintf(b, "| %s | **%s.** %s | %s |\n", c.Word, cell(c.Title), cell(c.Meaning), cell(c.Repair))
	}
}
