package main

import (
	"io/fs"
	"os"
	"path"
	"regexp"
	"slices"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol/card"
	"steelyard/protocol/record"
	"steelyard/render"
)

// codeLiteral is a diagnostic code as a string of its own.
var codeLiteral = regexp.MustCompile(`"([SRDLW][1-9]\d\d)"`)

// notRaised are files whose codes are lists or invented pages: they raise
// nothing. The weights of codes not raised yet are listed in compute/notes.go.
var notRaised = []string{"compute/notes.go"}

// raised lists, in order, the codes that the sources under root raise. The
// files of cards, tests and fixtures count for nothing.
func raised(root fs.FS) (codes []string) {
	fs.WalkDir(root, ".", func(name string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		base := path.Base(name)
		switch {
		case d.IsDir():
			if base == "fixture" || base == "testdata" {
				return fs.SkipDir
			}
			return nil
		case !strings.HasSuffix(base, ".go") || strings.HasSuffix(base, "_test.go"), strings.HasPrefix(base, "cards") && path.Dir(name) != "protocol/wording":
			return nil
		case slices.Contains(notRaised, name):
			return nil
		}
		src, err := fs.ReadFile(root, name)
		if err != nil {
			return err
		}
		for _, line := range strings.Split(string(src), "\n") {
			if strings.Contains(line, "card.Diagnostic") { // the card itself
				continue
			}
			for _, m := range codeLiteral.FindAllStringSubmatch(line, -1) {
				codes = append(codes, m[1])
			}
		}
		return nil
	})
	slices.Sort(codes)
	return slices.Compact(codes)
}

// uncarded lists the codes without a card, and the cards without a code.
func uncarded(codes []string, list []card.Card) (missing, unused []string) {
	var have []string
	for _, c := range list {
		if c.Kind == card.Diagnostic {
			have = append(have, c.Word)
		}
	}
	for _, code := range codes {
		if !slices.Contains(have, code) {
			missing = append(missing, code)
		}
	}
	for _, code := range have {
		if !slices.Contains(codes, code) {
			unused = append(unused, code)
		}
	}
	return missing, unused
}

func TestEveryCodeHasACard(t *testing.T) {
	codes := raised(os.DirFS("../.."))
	missing, unused := uncarded(codes, cards())
	if missing != nil {
		t.Errorf("no card for %v", missing)
	}
	if unused != nil {
		t.Errorf("nothing raises %v", unused)
	}
	missing, unused = uncarded([]string{"S101", "S999"}, []card.Card{{Kind: card.Diagnostic, Word: "S101"}, {Kind: card.Diagnostic, Word: "R101"}})
	if !slices.Equal(missing, []string{"S999"}) || !slices.Equal(unused, []string{"R101"}) {
		t.Errorf("the check finds %v, %v", missing, unused)
	}
}

// procedureKeys are the keys whose words are procedures with cards.
var procedureKeys = []string{"plan.family.NAME.procedure", "plan.pooling.NAME.model", "plan.pooling.NAME.between", "plan.pooling.NAME.interval",
	"plan.pooling.NAME.weights", "plan.combination.NAME.method", "plan.sensitivity.NAME.kind", "plan.hypothesis.NAME.evidence"}

// wordsOf are the words that a key takes.
func wordsOf(t *testing.T, path string) []string {
	t.Helper()
	for _, k := range record.Keys {
		if k.Path == path {
			return k.Words
		}
	}
	t.Fatalf("no key %s", path)
	return nil
}

// Every word of the explained keys has a card of a procedure that is of this
// key, and every card of a procedure, measure, method or claim explains a word
// that the language has.
func TestEveryCardsWordExists(t *testing.T) {
	known := map[string]bool{}
	for _, path := range procedureKeys {
		key := strings.Replace(path, ".NAME", "", 1)
		for _, w := range wordsOf(t, path) {
			known[w] = true
			if !slices.ContainsFunc(cards(), func(c card.Card) bool {
				return c.Kind == card.Procedure && c.Word == w && (len(c.Of) == 0 || slices.Contains(c.Of, key))
			}) {
				t.Errorf("no card for %s = %q", path, w)
			}
		}
	}
	for _, path := range []string{"plan.looks.spending", "plan.looks.futility.spending"} {
		for _, w := range wordsOf(t, path) {
			known[w] = true
		}
	}
	for _, k := range record.Keys {
		known[k.Name()] = true // keys that are procedures themselves: anytime
	}
	for _, c := range cards() {
		ok := true
		switch c.Kind {
		case card.Measure:
			ok = record.MeasureOf(c.Word) != nil
		case card.Claim:
			ok = record.ClaimOf(c.Word) != nil
		case card.Method:
			ok = len(c.Of) > 0
			for _, of := range c.Of {
				m := record.MeasureOf(of)
				ok = ok && m != nil && m.HasMethod(c.Word)
			}
		case card.Procedure:
			ok = known[c.Word]
		case card.Diagnostic, card.Term: // codes have a test of their own
		}
		if !ok {
			t.Errorf("the %s %s of %v is no word of the language", kindName(c.Kind), c.Word, c.Of)
		}
	}
}

// The cards of readings and verdicts have the names that documents print.
func TestTermsAreThePrintedOnes(t *testing.T) {
	var printed []string
	for above := range 4 {
		for below := range 4 - above {
			if name := render.ReadingName(result.Reading{Above: above, Below: below, HasRegion: true, OK: true}, "higher"); name != "" {
				printed = append(printed, name)
			}
		}
	}
	for _, v := range []result.Verdict{result.Established, result.Suggested, result.Contradicted, result.Open, result.Pending, result.Described, result.Masked} {
		printed = append(printed, string(v))
	}
	for _, name := range printed {
		if !slices.ContainsFunc(cards(), func(c card.Card) bool { return c.Kind == card.Term && c.Word == name }) {
			t.Errorf("no card for %q", name)
		}
	}
	if len(printed) != 17 {
		t.Errorf("%d readings and verdicts: %q", len(printed), printed)
	}
}
