package data

import (
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"steelyard/protocol/card"
)

// Every code in the sources has a card and a case in the tests, every card a
// use.
func TestCards(t *testing.T) {
	files, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	code := regexp.MustCompile(`\bD1\d\d\b`)
	var used, tested []string
	for _, name := range files {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		switch found := code.FindAllString(string(text), -1); {
		case name == "cards.go" || name == "cards_test.go":
		case strings.HasSuffix(name, "_test.go"):
			tested = append(tested, found...)
		default:
			used = append(used, found...)
		}
	}
	var carded []string
	for _, c := range Cards {
		carded = append(carded, c.Word)
		if c.Kind != card.Diagnostic || c.Title == "" || c.Meaning == "" || c.Source == "" || c.Repair == "" {
			t.Errorf("%s: the card lacks something", c.Word)
		}
		if !slices.Contains(used, c.Word) {
			t.Errorf("%s has a card and no use", c.Word)
		}
		if !slices.Contains(tested, c.Word) {
			t.Errorf("%s has no case", c.Word)
		}
	}
	if !slices.IsSorted(carded) || len(slices.Compact(slices.Clone(carded))) != len(carded) {
		t.Error("cards out of order or twice")
	}
	for _, u := range used {
		if !slices.Contains(carded, u) {
			t.Errorf("%s has no card", u)
		}
	}
}
