package seal

import (
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// Every code has a card and a case in the tests, every card a use.
func TestCards(t *testing.T) {
	names, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	code := regexp.MustCompile(`\bL[12]\d\d\b`)
	var used, tested []string
	for _, name := range names {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		switch found := code.FindAllString(string(text), -1); {
		case strings.HasPrefix(name, "cards"):
		case strings.HasSuffix(name, "_test.go"):
			tested = append(tested, found...)
		default:
			used = append(used, found...)
		}
	}
	var carded []string
	for _, c := range Cards {
		carded = append(carded, c.Word)
		if c.Title == "" || c.Meaning == "" || c.Source == "" || c.Repair == "" || !slices.Contains(used, c.Word) || !slices.Contains(tested, c.Word) {
			t.Errorf("%s lacks a text, a use or a case", c.Word)
		}
	}
	for _, u := range used {
		if !slices.Contains(carded, u) {
			t.Errorf("%s has no card", u)
		}
	}
	if !slices.IsSorted(carded) {
		t.Error("cards out of order")
	}
}
