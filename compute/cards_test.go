package compute

import (
	"io/fs"
	"maps"
	"os"
	"path"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"steelyard/compute/belief"
	"steelyard/compute/claim"
	"steelyard/compute/combine"
	"steelyard/compute/effect"
	"steelyard/compute/family"
	"steelyard/compute/pool"
	"steelyard/compute/result"
	"steelyard/compute/survival"
	"steelyard/protocol"
	"steelyard/protocol/card"
	"steelyard/protocol/diag"
)

// roomCards joins the cards of every package of this room.
func roomCards() []card.Card {
	return slices.Concat(claim.Cards, effect.Cards, survival.Cards, family.Cards, pool.Cards, combine.Cards, belief.Cards, Cards)
}

// unjoined lists the packages below root that have cards which the text of
// cards_test.go does not import.
func unjoined(root fs.FS, joined string) (list []string, err error) {
	err = fs.WalkDir(root, ".", func(name string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || path.Base(name) != "cards.go" || name == "cards.go" {
			return err
		}
		if dir := path.Dir(name); !strings.Contains(joined, `"steelyard/compute/`+dir+`"`) {
			list = append(list, dir)
		}
		return nil
	})
	return list, err
}

func TestEveryPackageOfCardsIsJoined(t *testing.T) {
	src, err := os.ReadFile("cards_test.go")
	if err != nil {
		t.Fatal(err)
	}
	list, err := unjoined(os.DirFS("."), string(src))
	if err != nil || list != nil {
		t.Errorf("not joined: %v, %v", list, err)
	}
	if list, _ := unjoined(os.DirFS("."), ""); !slices.Contains(list, "survival") {
		t.Errorf("the check finds only %v", list)
	}
}

// exampleFiles are the data files that the examples name.
func exampleFiles() fstest.MapFS {
	files := fstest.MapFS{}
	all := maps.Clone(effect.ExampleFiles())
	maps.Copy(all, survival.ExampleFiles())
	for name, text := range all {
		files[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return files
}

// faultsOf computes an example and lists what is wrong with it: an error, a
// hypothesis that could not be computed, a claim without a number.
func faultsOf(text string) (faults []string, res *result.Result) {
	in := protocol.Load("example.toml", []byte(text), nil, exampleFiles())
	for _, d := range in.Diagnostics {
		if d.Severity == diag.SeverityError {
			faults = append(faults, diag.OneLine(d, in.Source))
		}
	}
	if faults != nil {
		return faults, nil
	}
	res = Run(in, "test")
	for _, d := range res.Diagnostics {
		if strings.HasPrefix(d.Code, "S1") {
			faults = append(faults, diag.OneLine(d, in.Source))
		}
	}
	if len(res.Hypotheses) == 0 {
		faults = append(faults, "no hypothesis")
	}
	for _, h := range res.Hypotheses {
		switch {
		case h.Reason != nil:
			faults = append(faults, h.Name+": "+h.Reason.Code)
		case h.Verdict != result.Described && !h.P.OK:
			faults = append(faults, h.Name+" has no p")
		}
	}
	return faults, res
}

// Every example of a card compiles and computes: no error, no hypothesis that
// stays open for a reason, consistent numbers.
func TestExamplesCompute(t *testing.T) {
	n := 0
	for _, c := range roomCards() {
		if c.Example == "" {
			continue
		}
		n++
		faults, res := faultsOf(c.Example)
		for _, f := range faults {
			t.Errorf("%s of %v: %s", c.Word, c.Of, f)
		}
		if res != nil {
			consistent(t, res)
		}
	}
	if n < 100 {
		t.Errorf("only %d examples", n)
	}
}

// The check of examples finds what it is there for.
func TestFaultsAreFound(t *testing.T) {
	good := survival.Cards[0].Example
	for name, bad := range map[string]string{
		"an unknown key":     good + "colour = \"red\"\n",
		"no such file":       strings.ReplaceAll(good, "times.csv", "other.csv"),
		"nothing to compute": strings.Replace(good, "time = \"weeks\"", "time = \"leak\"", 1) + "labels = 3\n",
		"a horizon too far":  strings.Replace(example(t, "greenwood"), "horizon = 20", "horizon = 2000", 1),
	} {
		if f, _ := faultsOf(bad); f == nil {
			t.Errorf("%s passed", name)
		}
	}
	if f, _ := faultsOf(good); f != nil {
		t.Errorf("%v", f)
	}
}

func example(t *testing.T, word string) string {
	t.Helper()
	i := slices.IndexFunc(survival.Cards, func(c card.Card) bool { return c.Word == word })
	return survival.Cards[i].Example
}

// Measures, methods, claims and procedures show an example; notes and terms
// may. Nothing lacks its title, meaning or source.
func TestCardsAreComplete(t *testing.T) {
	for _, c := range roomCards() {
		if c.Title == "" || c.Meaning == "" || c.Source == "" {
			t.Errorf("%s of %v lacks a title, meaning or source", c.Word, c.Of)
		}
		switch c.Kind {
		case card.Measure, card.Method, card.Claim:
			if c.Example == "" || c.Formula == "" || c.Assumptions == "" {
				t.Errorf("%s of %v lacks a formula, assumptions or an example", c.Word, c.Of)
			}
		case card.Procedure:
			if c.Formula == "" || c.Example == "" && c.Word != "combined" { // the methods of combination have theirs
				t.Errorf("%s of %v lacks a rule or an example", c.Word, c.Of)
			}
		case card.Term:
			if c.Formula == "" {
				t.Errorf("%s lacks its rule", c.Word)
			}
		case card.Diagnostic:
		}
	}
}
