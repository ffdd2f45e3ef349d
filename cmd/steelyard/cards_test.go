package main

import (
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"steelyard/protocol/card"
	"steelyard/protocol/record"
)

// unjoined lists the folders of packages that have cards which a file does
// not import.
func unjoined(root fs.FS, joined string) (list []string) {
	fs.WalkDir(root, ".", func(name string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || !strings.HasSuffix(name, ".go") || strings.HasSuffix(name, "_test.go") {
			return err
		}
		src, err := fs.ReadFile(root, name)
		if err != nil {
			return err
		}
		dir := filepath.ToSlash(filepath.Dir(name))
		if hasCards.Match(src) && !strings.Contains(joined, `"steelyard/`+dir+`"`) {
			list = append(list, dir)
		}
		return nil
	})
	return list
}

var hasCards = regexp.MustCompile(`(?m)^(var Cards\b|func Cards\()`)

func TestEveryPackageOfCardsIsJoined(t *testing.T) {
	src, err := os.ReadFile("cards.go")
	if err != nil {
		t.Fatal(err)
	}
	root := os.DirFS(filepath.Join("..", ".."))
	for _, dir := range unjoined(root, string(src)) {
		t.Errorf("the cards of %s are not joined", dir)
	}
	if found := unjoined(root, ""); !slices.Contains(found, "protocol/data") {
		t.Errorf("packages with cards: %q", found)
	}
}

// cardless lists the words of the language, as far as this version computes
// them, that have no card.
func cardless(list []card.Card) (missing []string) {
	has := func(kind card.Kind, word, of string) bool {
		return slices.ContainsFunc(list, func(c card.Card) bool {
			return c.Kind == kind && c.Word == word && (of == "" || len(c.Of) == 0 || slices.Contains(c.Of, of))
		})
	}
	for _, m := range record.Measures {
		if !m.Ready {
			continue
		}
		if !has(card.Measure, m.Word, "") {
			missing = append(missing, "measure "+m.Word)
		}
		for _, method := range m.Methods {
			if !has(card.Method, method, m.Word) {
				missing = append(missing, "method "+method+" of "+m.Word)
			}
		}
	}
	for _, c := range record.Claims {
		if !has(card.Claim, c.Word, "") {
			missing = append(missing, "claim "+c.Word)
		}
	}
	return missing
}

func TestEveryWordHasACard(t *testing.T) {
	for _, word := range cardless(cards()) {
		t.Errorf("no card for the %s", word)
	}
	if n := len(cardless(nil)); n < len(record.Claims) {
		t.Errorf("without any card only %d words miss theirs", n)
	}
}

func TestCardsAreWhole(t *testing.T) {
	seen := map[string]bool{}
	for _, c := range cards() {
		key := kindName(c.Kind) + " " + c.Word + " " + strings.Join(c.Of, ",")
		if seen[key] {
			t.Errorf("two cards for the %s", key)
		}
		seen[key] = true
		if c.Title == "" || c.Meaning == "" || c.Source == "" {
			t.Errorf("%s: title, meaning or source is empty", key)
		}
		var b strings.Builder
		writeCard(&b, c, 80)
		for _, line := range strings.Split(b.String(), "\n") {
			if len([]rune(line)) > 80 && strings.Contains(strings.TrimSpace(line), " ") && !strings.HasPrefix(line, "    ") {
				t.Errorf("%s: line of %d characters: %s", key, len([]rune(line)), line)
			}
		}
	}
}

func TestNear(t *testing.T) {
	for word, want := range map[string]string{"D1100": "D110", "colum": ""} {
		got := near(word)
		if want != "" && !slices.Contains(got, want) {
			t.Errorf("near %s: %q, want %s", word, got, want)
		}
	}
	for _, tt := range []struct {
		a, b string
		want int
	}{{"kitten", "sitting", 3}, {"", "abc", 3}, {"same", "same", 0}} { // the first pair: Wagner & Fischer's usual example, from memory
		if got := distance(tt.a, tt.b); got != tt.want {
			t.Errorf("distance %s %s: %d, want %d", tt.a, tt.b, got, tt.want)
		}
	}
}
