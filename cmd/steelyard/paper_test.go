package main

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"steelyard/protocol/card"
	"steelyard/protocol/record"
)

// TestMethodsPaper keeps compute/README.md the same as the cards it is made
// from; -update writes it.
func TestMethodsPaper(t *testing.T) {
	path := filepath.Join("..", "..", "compute", "README.md")
	got := []byte(methodsPaper(cards()))
	if *update {
		if err := os.WriteFile(path, got, 0o666); err != nil {
			t.Fatal(err)
		}
		return
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if err := sameText(want, got); err != nil {
		t.Errorf("%s is not what the cards say; go test ./cmd/steelyard -run MethodsPaper -update\n%v", path, err)
	}
}

// methodsPaper is the paper of the methods: measures in the order of the
// language, each with its methods, then claims, procedures and diagnostics.
func methodsPaper(list []card.Card) string {
	var b strings.Builder
	b.WriteString("# Methods\n\nMade from the cards that lie beside the code; `steelyard explain WORD` prints the same. A test keeps this file current.\n")
	of := func(kind card.Kind, keep func(card.Card) bool) (some []card.Card) {
		for _, c := range list {
			if c.Kind == kind && keep(c) {
				some = append(some, c)
			}
		}
		return some
	}
	all := func(card.Card) bool { return true }
	b.WriteString("\n## Measures\n")
	for _, m := range record.Measures {
		for _, c := range of(card.Measure, func(c card.Card) bool { return c.Word == m.Word }) {
			section(&b, c, fmt.Sprintf("Null %s, %s scale. Methods, default first: %s.", nullWord(m.Null), m.Scale, strings.Join(m.Methods, ", ")))
		}
	}
	for _, part := range []struct {
		title string
		cards []card.Card
	}{
		{"Methods of measures", of(card.Method, all)},
		{"Claims", of(card.Claim, all)},
		{"Procedures", of(card.Procedure, all)},
		{"Words of the printed record", of(card.Term, all)},
		{"Diagnostics", sorted(of(card.Diagnostic, func(c card.Card) bool { return strings.HasPrefix(c.Word, "S") }))},
	} {
		if part.cards == nil {
			continue
		}
		fmt.Fprintf(&b, "\n## %s\n", part.title)
		for _, c := range part.cards {
			remark := ""
			if len(c.Of) > 0 {
				remark = "Of " + strings.Join(c.Of, ", ") + "."
			}
			section(&b, c, remark)
		}
	}
	return b.String()
}

func section(b *strings.Builder, c card.Card, remark string) {
	fmt.Fprintf(b, "\n### `%s`: %s\n\n", c.Word, c.Title)
	if remark != "" {
		b.WriteString(remark + "\n\n")
	}
	b.WriteString(c.Meaning + "\n")
	for _, part := range [][2]string{{"Rule", c.Formula}, {"Assumes", c.Assumptions}, {"Repair", c.Repair}, {"Source", c.Source}} {
		if part[1] != "" {
			fmt.Fprintf(b, "\n*%s.* %s\n", part[0], part[1])
		}
	}
}

func sorted(list []card.Card) []card.Card {
	slices.SortStableFunc(list, func(a, b card.Card) int { return strings.Compare(a.Word, b.Word) })
	return list
}

func nullWord(k record.NullKind) string {
	switch k {
	case record.NullZero:
		return "0"
	case record.NullOne:
		return "1"
	case record.NullHalf:
		return "½"
	case record.NullReference:
		return "`reference`"
	case record.NullReferenceOrZero:
		return "`reference`, default 0"
	}
	panic("steelyard: unknown null")
}
