package read

import (
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// TestEveryCodeHasACard compares the codes in the sources with the cards, both
// ways, and demands a case for every code.
func TestEveryCodeHasACard(t *testing.T) {
	pattern := regexp.MustCompile(`"(R\d{3})"`)
	used := map[string]bool{}
	files, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	tests := ""
	for _, f := range files {
		text, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		if strings.HasSuffix(f, "_test.go") {
			tests += string(text)
			continue
		}
		if f == "cards.go" {
			continue
		}
		for _, m := range pattern.FindAllStringSubmatch(string(text), -1) {
			used[m[1]] = true
		}
	}
	cases, err := os.ReadFile("testdata/faults.txt")
	if err != nil {
		t.Fatal(err)
	}
	tests += string(cases)
	last := ""
	for _, c := range Cards {
		if !used[c.Word] {
			t.Errorf("the card %s explains no code", c.Word)
		}
		if c.Word <= last {
			t.Errorf("the card %s stands out of order", c.Word)
		}
		last = c.Word
		if c.Title == "" || c.Meaning == "" || c.Repair == "" || c.Source == "" {
			t.Errorf("the card %s is not whole", c.Word)
		}
		if !strings.Contains(tests, " "+c.Word+" ") && !strings.Contains(tests, `"`+c.Word+`"`) {
			t.Errorf("no case shows %s", c.Word)
		}
		delete(used, c.Word)
	}
	for code := range used {
		t.Errorf("%s has no card", code)
	}
}
