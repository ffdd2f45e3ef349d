package wording

import (
	"fmt"
	"os"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// marked is a sentence with what is marked in it.
type marked struct {
	line  int
	miss  bool // known to go wrong
	text  string
	wants []want
}

type want struct {
	class, force string
	start, end   int
}

func readPhrases(t testing.TB) (out []marked) {
	t.Helper()
	raw, err := os.ReadFile("testdata/phrases.txt")
	if err != nil {
		t.Fatal(err)
	}
	for i, line := range strings.Split(string(raw), "\n") {
		if line == "" || strings.HasPrefix(line, "#") {
			continue
		}
		head, body, ok := strings.Cut(line, " | ")
		if !ok {
			t.Fatalf("phrases.txt:%d: no bar", i+1)
		}
		m := marked{line: i + 1}
		head, m.miss = strings.CutPrefix(head, "miss ")
		if head != "-" {
			for _, part := range strings.Split(head, ", ") {
				class, force, _ := strings.Cut(part, " ")
				m.wants = append(m.wants, want{class: class, force: force})
			}
		}
		k := 0
		for _, r := range body {
			switch {
			case r == '{' && k < len(m.wants):
				m.wants[k].start = len(m.text)
			case r == '}' && k < len(m.wants):
				m.wants[k].end = len(m.text)
				k++
			default:
				m.text += string(r)
			}
		}
		if k != len(m.wants) {
			t.Fatalf("phrases.txt:%d: %d phrases marked, %d classes", m.line, k, len(m.wants))
		}
		out = append(out, m)
	}
	return out
}

// differs compares what was found in a sentence with what is marked: the same
// classes and forces in the same order, every place touching the mark.
func differs(m marked, found []Phrase) string {
	found = slices.DeleteFunc(slices.Clone(found), func(p Phrase) bool { return p.Class == Decision })
	var got []string
	same := len(found) == len(m.wants)
	for i, p := range found {
		got = append(got, fmt.Sprintf("%s %s %q", p.Class, p.Force, m.text[p.Start:p.End]))
		if same {
			w := m.wants[i]
			same = string(p.Class) == w.class && string(p.Force) == w.force && p.Start < w.end && w.start < p.End
		}
	}
	if same {
		return ""
	}
	return "found [" + strings.Join(got, ", ") + "]"
}

func TestPhrases(t *testing.T) {
	for _, m := range readPhrases(t) {
		switch d := differs(m, Find(m.text)); {
		case m.miss && d == "":
			t.Errorf("phrases.txt:%d: no longer missed: %s", m.line, m.text)
		case !m.miss && d != "":
			t.Errorf("phrases.txt:%d: %s\n\t%s; want %v", m.line, m.text, d, m.wants)
		}
	}
}

// The comparison of found and marked must be able to fail.
func TestDiffers(t *testing.T) {
	m := marked{text: "The gel has no effect.", wants: []want{{"no-effect", "stated", 12, 21}}}
	good := Phrase{Class: NoEffect, Force: Stated, Start: 12, End: 21}
	if differs(m, []Phrase{good}) != "" {
		t.Error("the right phrase is refused")
	}
	for _, bad := range [][]Phrase{nil, {good, good}, {{Class: Proof, Force: Stated, Start: 12, End: 21}}, {{Class: NoEffect, Force: Denied, Start: 12, End: 21}},
		{{Class: NoEffect, Force: Stated, Start: 0, End: 3}}} {
		if differs(m, bad) == "" {
			t.Errorf("%v is accepted", bad)
		}
	}
}

// What a phrase says besides its class.
func TestParticulars(t *testing.T) {
	terms := []Term{
		{Group, "new adhesive", []string{"new adhesive"}}, {Group, "current adhesive", []string{"current adhesive"}},
		{Outcome, "peel", []string{"Seal peel strength", "peel"}}, {Outcome, "leaks", []string{"Leaking pouches", "leaks"}},
		{Hypothesis, "H1", []string{"H1"}},
	}
	for _, tt := range []struct {
		text string
		want Phrase // without place and sentence
	}{
		{"The new adhesive is stronger than the current one.",
			Phrase{Class: Change, Force: Stated, Direction: Higher, Subject: "new adhesive", Object: "current adhesive", Outcomes: []string{"peel"}}},
		{"Fewer pouches leak with the current adhesive.",
			Phrase{Class: Change, Force: Stated, Direction: Lower, Subject: "current adhesive", Outcomes: []string{"leaks"}}},
		{"The current adhesive is not better than the new one.",
			Phrase{Class: NoEffect, Force: Stated, Negated: true, Benefit: true, Direction: Better, Subject: "current adhesive", Object: "new adhesive"}},
		{"Peel strength is the same to within 0.8 N.",
			Phrase{Class: Equivalence, Force: Stated, Exact: true, Within: true, Outcomes: []string{"peel"}}},
		{"H1 was confirmed.", Phrase{Class: Verdict, Force: Stated, Hypotheses: []string{"H1"}}},
		{"The seals are not equivalent.", Phrase{Class: Difference, Force: Stated, Negated: true, Outcomes: []string{"peel"}}},
		{"“The new adhesive is better” is what the brochure says.",
			Phrase{Class: Superiority, Force: Quoted, Direction: Better, Subject: "new adhesive"}},
		{"The supplier says that the new adhesive is better.",
			Phrase{Class: Superiority, Force: Attributed, Direction: Better, Subject: "new adhesive"}},
		{"In at least one study leaks are rarer.", Phrase{Class: Change, Force: Stated, Direction: Lower, Outcomes: []string{"leaks"}, Within: true, AtLeastOne: true}},
	} {
		found := Find(tt.text, terms...)
		if len(found) != 1 {
			t.Errorf("%q: %+v", tt.text, found)
			continue
		}
		got := found[0]
		got.Start, got.End, got.Sentence = 0, 0, 0
		if d := cmp.Diff(tt.want, got); d != "" {
			t.Errorf("%q: %s", tt.text, d)
		}
	}
}

func TestForceInClauses(t *testing.T) {
	for text, want := range map[string]string{
		"The gel is not cheap, but it is better than the cream.":                  "stated",
		"The gel is not cheap; it is better than the cream.":                      "stated",
		"Superiority is open. The gel is better than the cream.":                  "stated",
		"It is not shown whether it works. Prices aside, it is better than that.": "asked stated",
		"THE GEL IS BETTER.":                    "stated",
		"":                                      "",
		"It costs 1.5 N vs. 2 N. It is better.": "stated",
		"If it were cheaper, it would be better.":           "asked",
		"It may be better, but it is not shown to be safe.": "possible denied",
	} {
		var got []string
		for _, p := range Find(text) {
			got = append(got, string(p.Force))
		}
		if strings.Join(got, " ") != want {
			t.Errorf("%q: %v, want %q", text, got, want)
		}
	}
}

func TestIsEnglish(t *testing.T) {
	for text, want := range map[string]bool{
		"The new adhesive is as strong as the current one.":            true,
		"We conclude that the course improved scores in both schools.": true,
		"Superior.": true,
		"":          false,
		"Der neue Klebstoff ist so fest wie der alte und kann verwendet werden.":        false,
		"In der Studie war kein Unterschied zwischen den Gruppen zu sehen.":             false,
		"Le nouvel adhésif est aussi solide que l'ancien, et nous allons le garder.":    false,
		"El nuevo adhesivo es tan fuerte como el actual y se puede usar en la línea.":   false,
		"Il nuovo adesivo non è più debole di quello vecchio.":                          false,
		"O novo adesivo não é mais fraco do que o atual, e será usado na linha.":        false,
		"De nieuwe lijm is niet zwakker dan de oude en wordt vanaf nu gebruikt.":        false,
		"Det nya limmet är inte svagare än det gamla och kommer att användas i linjen.": false,
		"新しい接着剤は現在のものと同じくらい強い。":                                                         false,
		"Новый клей не слабее прежнего.":                                                false,
		"The effect β̂ is open at α = 0.05, and μ lies between 1 and 3.":                true,
	} {
		if IsEnglish(text) != want {
			t.Errorf("%q: English %v", text, !want)
		}
	}
}

func FuzzFind(f *testing.F) {
	for _, s := range []string{"The gel has no effect.", "Not, in our view, better; but 95% certain that the p-value isn’t.", "a.b. C? \xff no\n\neffect", "whether if not only better",
		"“can't” won’t \"be as good as\" it.", "0.5 % of all"} {
		f.Add(s)
	}
	terms := []Term{{Group, "new gel", []string{"new gel"}}, {Outcome, "pain", []string{"Pain score"}}, {Hypothesis, "H1", []string{"H1"}}, {Group, "", []string{""}}}
	f.Fuzz(func(t *testing.T, text string) {
		last := 0
		found := Find(text, terms...)
		for _, p := range found {
			if p.Start < last || p.End <= p.Start || p.End > len(text) {
				t.Fatalf("%q: place outside or out of order: %+v", text, p)
			}
			last = p.End
			if !slices.Contains(Classes, p.Class) {
				t.Fatalf("%q: class %q", text, p.Class)
			}
			rank(p.Force) // panics for a force that is none
		}
		if d := cmp.Diff(found, Find(text, terms...)); d != "" {
			t.Fatalf("%q: a second reading differs: %s", text, d)
		}
		IsEnglish(text)
	})
}

// BenchmarkFind reads a megabyte: of prose, and of the same without a full stop.
func BenchmarkFind(b *testing.B) {
	var all strings.Builder
	for all.Len() < 1<<20 {
		for _, m := range readPhrases(b) {
			all.WriteString(m.text + " ")
		}
	}
	prose := all.String()[:1<<20]
	for name, text := range map[string]string{"prose": prose, "no stops": strings.NewReplacer(".", "", "?", "", ";", "").Replace(prose),
		"denials": strings.Repeat("not no never whether ", 1<<20/21)} {
		b.Run(name, func(b *testing.B) {
			b.SetBytes(int64(len(text)))
			for b.Loop() {
				Find(text)
			}
		})
	}
}
