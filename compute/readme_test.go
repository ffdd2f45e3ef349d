package compute

import (
	"bytes"
	"flag"
	"fmt"
	"os"
	"regexp"
	"slices"
	"strings"
	"testing"

	"steelyard/compute/claim"
	"steelyard/compute/effect"
	"steelyard/compute/survival"
	"steelyard/protocol/card"
	"steelyard/protocol/record"
)

var update = flag.Bool("update", false, "write README.md")

// topic is one chapter of measures with the files that compute them.
type topic struct {
	title    string
	files    []string
	measures []string
}

var topics = []topic{
	{"Means", []string{"effect/mean.go", "effect/meandifference.go", "effect/means.go", "effect/paired.go", "effect/smd.go", "effect/ratioofmeans.go",
		"effect/geometricmeanratio.go", "effect/linear.go", "effect/leastsquares.go", "effect/crossover.go", "effect/permutation.go", "effect/permutation_groups.go"},
		[]string{"mean", "mean-difference", "paired-mean-difference", "standardized-mean-difference", "ratio-of-means", "geometric-mean-ratio"}},
	{"Ranks", []string{"effect/ranks.go", "effect/medianshift.go", "effect/pairedshift.go", "effect/superiority.go"},
		[]string{"median-shift", "paired-median-shift", "superiority-probability"}},
	{"Events among subjects", []string{"effect/counts.go", "effect/proportion.go", "effect/twoproportions.go", "effect/twoproportions_closed.go", "effect/twoproportions_exact.go",
		"effect/twoproportions_region.go", "effect/twoproportions_score.go", "effect/twoproportions_unconditional.go", "effect/pairedproportions.go", "effect/strata.go"},
		[]string{"proportion", "risk-difference", "risk-ratio", "odds-ratio", "paired-risk-difference"}},
	{"Events per exposure", []string{"effect/rate.go", "effect/tworates.go", "effect/strata.go"}, []string{"rate", "rate-difference", "rate-ratio"}},
	{"Times to an event", []string{"survival/survival.go", "survival/hazard.go", "survival/restricted.go"}, []string{"hazard-ratio", "restricted-mean-difference"}},
	{"Spread, relation, shares inside limits", []string{"effect/spread.go", "effect/relation.go", "effect/conforming.go"},
		[]string{"correlation", "rank-correlation", "sd", "sd-ratio", "paired-sd-ratio", "agreement", "conforming-share"}},
	{"Effects estimated elsewhere", []string{"effect/given.go"}, []string{"estimate", "ratio-estimate"}},
}

var codeInSource = regexp.MustCompile(`"(S[12]\d\d)"`)

// codesIn lists the findings that source files of this room raise.
func codesIn(files []string) ([]string, error) {
	var codes []string
	for _, f := range files {
		src, err := os.ReadFile(f)
		if err != nil {
			return nil, err
		}
		for _, m := range codeInSource.FindAllStringSubmatch(string(src), -1) {
			codes = append(codes, m[1])
		}
	}
	slices.Sort(codes)
	return slices.Compact(codes), nil
}

// readme is the text of README.md.
func readme() ([]byte, error) {
	var b strings.Builder
	b.WriteString(strings.NewReplacer("‹", "`", "›", "`").Replace(readmeHead))
	b.WriteString("\n## Measures at a glance\n\n| measure | effect | null | analysis scale | methods, default first |\n|---|---|---|---|---|\n")
	for _, m := range record.Measures {
		fmt.Fprintf(&b, "| `%s` | %s | %s | %s | `%s` |\n", m.Word, m.Label, nullWords(m), m.Scale, strings.Join(m.Methods, "`, `"))
	}
	for _, t := range topics {
		fmt.Fprintf(&b, "\n## %s\n", t.title)
		for _, w := range t.measures {
			for _, c := range pick(card.Measure, w, "") {
				section(&b, "###", "The measure `"+w+"`: "+c.Title, c)
			}
		}
		for _, c := range pick(card.Method, "", "") {
			if len(c.Of) > 0 && slices.Contains(t.measures, c.Of[0]) {
				section(&b, "####", "`"+c.Word+"` of "+quoted(c.Of)+": "+c.Title, c)
			}
		}
		if t.title == "Times to an event" {
			for _, c := range survival.Cards {
				if c.Kind == card.Term {
					section(&b, "####", c.Word+": "+c.Title, c)
				}
			}
		}
		codes, err := codesIn(t.files)
		if err != nil {
			return nil, err
		}
		fmt.Fprintf(&b, "\nFindings of this chapter: %s.\n", strings.Join(codes, ", "))
	}
	closing(&b)
	return []byte(b.String()), nil
}

// closing writes the chapters that are not about measures.
func closing(b *strings.Builder) {
	written := map[string]bool{}
	chapter := func(title string, keep func(c card.Card) bool) {
		head := fmt.Sprintf("\n## %s\n", title)
		for _, c := range roomCards() {
			if key := fmt.Sprint(c.Kind, c.Word, c.Of); keep(c) && !written[key] {
				written[key] = true
				b.WriteString(head)
				head = ""
				name := "`" + c.Word + "`"
				if len(c.Of) > 0 {
					name += " of " + quoted(c.Of)
				}
				section(b, "###", name+": "+c.Title, c)
			}
		}
	}
	of := func(key string) func(c card.Card) bool {
		return func(c card.Card) bool {
			return c.Kind == card.Procedure && slices.ContainsFunc(c.Of, func(o string) bool { return strings.HasPrefix(o, key) })
		}
	}
	words := func(path string) []string {
		i := slices.IndexFunc(record.Keys, func(k *record.Key) bool { return k.Path == path })
		return record.Keys[i].Words
	}
	plain := func(path string) func(c card.Card) bool {
		return func(c card.Card) bool {
			return c.Kind == card.Procedure && len(c.Of) == 0 && slices.Contains(words(path), c.Word)
		}
	}
	own := func(list []card.Card) func(c card.Card) bool {
		return func(c card.Card) bool {
			return c.Kind == card.Term && slices.ContainsFunc(list, func(o card.Card) bool { return o.Kind == c.Kind && o.Word == c.Word })
		}
	}
	chapter("Claims", func(c card.Card) bool { return c.Kind == card.Claim })
	chapter("Verdicts, readings and what stands beside them", own(claim.Cards))
	chapter("Families of claims", plain("plan.family.NAME.procedure"))
	chapter("How studies speak for a claim", of("plan.hypothesis.evidence"))
	chapter("Pooling", of("plan.pooling."))
	chapter("Also printed", func(c card.Card) bool {
		return c.Kind == card.Term && !own(claim.Cards)(c) && !own(survival.Cards)(c)
	})
	chapter("Combined p-values", plain("plan.combination.NAME.method"))
	chapter("Sensitivity", of("plan.sensitivity."))
	chapter("Looks, sizes and rehearsals", func(c card.Card) bool { return c.Kind == card.Procedure })
	b.WriteString("\n## Findings\n\nProblems (S1) leave a hypothesis open with the reason; notes (S2) stand beside a result.\n")
	var notes []card.Card
	for _, c := range roomCards() {
		if c.Kind == card.Diagnostic {
			notes = append(notes, c)
		}
	}
	slices.SortFunc(notes, func(a, b card.Card) int { return strings.Compare(a.Word, b.Word) })
	for _, c := range notes {
		section(b, "###", c.Word+": "+c.Title, c)
	}
}

// pick lists the cards of measures and methods; "" takes all words.
func pick(kind card.Kind, word, of string) (found []card.Card) {
	for _, c := range slices.Concat(effect.Cards, survival.Cards) {
		if c.Kind == kind && (word == "" || c.Word == word) && (of == "" || slices.Contains(c.Of, of)) {
			found = append(found, c)
		}
	}
	return found
}

// section writes one card.
func section(b *strings.Builder, level, title string, c card.Card) {
	fmt.Fprintf(b, "\n%s %s\n\n%s\n", level, title, c.Meaning)
	for _, part := range []struct{ name, text string }{
		{"Rule", c.Formula}, {"Assumes", c.Assumptions}, {"Repair", c.Repair}, {"Source", c.Source},
	} {
		if part.text != "" {
			fmt.Fprintf(b, "\n- *%s*: %s", part.name, strings.ReplaceAll(part.text, "\n", " "))
		}
	}
	b.WriteString("\n")
}

func quoted(words []string) string { return "`" + strings.Join(words, "`, `") + "`" }

func nullWords(m *record.Measure) string {
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
	panic("unknown null")
}

// README.md is what the cards and the head say now.
func TestReadmeIsCurrent(t *testing.T) {
	got, err := readme()
	if err != nil {
		t.Fatal(err)
	}
	if *update {
		if err := os.WriteFile("README.md", got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Error("README.md is not current; write it with: go test ./compute -run TestReadme -update")
	}
}

// Every card of this room is in README.md exactly once, with its rule.
func TestReadmeIsWhole(t *testing.T) {
	text, err := readme()
	if err != nil {
		t.Fatal(err)
	}
	missing := func(list []card.Card) (out []string) {
		for _, c := range list {
			whole := "\n\n" + c.Meaning + "\n"
			if c.Formula != "" {
				whole += "\n- *Rule*: " + c.Formula
			}
			if !strings.Contains(string(text), whole) {
				out = append(out, c.Word)
			}
		}
		return out
	}
	if m := missing(roomCards()); m != nil {
		t.Errorf("not in README.md: %v", m)
	}
	if m := missing([]card.Card{{Word: "none", Meaning: "No such card."}}); m == nil {
		t.Error("the check finds nothing")
	}
	for _, m := range record.Measures {
		if !slices.ContainsFunc(topics, func(t topic) bool { return slices.Contains(t.measures, m.Word) }) {
			t.Errorf("%s is in no chapter", m.Word)
		}
	}
}
