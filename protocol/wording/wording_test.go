package wording

import (
	"fmt"
	"os"
	"slices"
	"strings"
	"testing"
)

// marked is a sentence of the corpus.
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

func readCorpus(t testing.TB, name string) (out []marked) {
	t.Helper()
	raw, err := os.ReadFile(name)
	if err != nil {
		t.Fatal(err)
	}
	for i, line := range strings.Split(string(raw), "\n") {
		if line == "" || strings.HasPrefix(line, "#") {
			continue
		}
		head, body, ok := strings.Cut(line, " | ")
		if !ok {
			t.Fatalf("%s:%d: no bar", name, i+1)
		}
		m := marked{line: i + 1}
		if rest, ok := strings.CutPrefix(head, "miss "); ok {
			head, m.miss = rest, true
		}
		if head != "-" {
			for _, part := range strings.Split(head, ", ") {
				f := strings.Fields(part)
				m.wants = append(m.wants, want{class: f[0], force: f[1]})
			}
		}
		k := 0
		for _, r := range body {
			switch r {
			case '{':
				if k < len(m.wants) {
					m.wants[k].start = len(m.text)
				}
			case '}':
				if k < len(m.wants) {
					m.wants[k].end = len(m.text)
				}
				k++
			default:
				m.text += string(r)
			}
		}
		if k != len(m.wants) && !(k > len(m.wants) && len(m.wants) == 1) {
			t.Fatalf("%s:%d: %d phrases marked, %d classes", name, i+1, k, len(m.wants))
		}
		out = append(out, m)
	}
	return out
}

// differs compares what was found in a sentence with what is marked: the same
// classes and forces in the same order, every place touching the mark.
func differs(m marked, found []Phrase) string {
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

// Every sentence of the corpus gives what is marked in it. Of the 124
// sentences of heldout.txt 110 did at the first run, before the patterns were
// amended by the others.
func TestCorpus(t *testing.T) {
	total := 0
	for _, name := range []string{"testdata/corpus.txt", "testdata/heldout.txt"} {
		corpus := readCorpus(t, name)
		for _, m := range corpus {
			switch d := differs(m, Find(m.text)); {
			case m.miss && d == "":
				t.Errorf("%s:%d: no longer missed: %s", name, m.line, m.text)
			case !m.miss && d != "":
				t.Errorf("%s:%d: %s\n\t%s; want %v", name, m.line, m.text, d, m.wants)
			}
		}
		total += len(corpus)
	}
	if total < 300 {
		t.Errorf("only %d sentences", total)
	}
}

// The comparison of found and marked must be able to fail.
func TestDiffers(t *testing.T) {
	m := marked{text: "The gel has no effect.", wants: []want{{"no-effect", "stated", 12, 21}}}
	good := Phrase{NoEffect, Stated, 12, 21}
	if differs(m, []Phrase{good}) != "" {
		t.Error("the right phrase is refused")
	}
	for _, bad := range [][]Phrase{nil, {good, good}, {{Proof, Stated, 12, 21}}, {{NoEffect, Denied, 12, 21}}, {{NoEffect, Stated, 0, 3}}} {
		if differs(m, bad) == "" {
			t.Errorf("%v is accepted", bad)
		}
	}
}

func TestForceInClauses(t *testing.T) {
	for text, want := range map[string]string{
		"The gel is not cheap, but it is better than the cream.":                  "stated",
		"The gel is not cheap; it is better than the cream.":                      "stated",
		"Superiority was not shown. The gel is better than the cream.":            "denied stated",
		"It is not shown whether it works. Prices aside, it is better than that.": "asked stated",
		"The gel isn\u2019t better.":                                              "denied",
		"THE GEL IS BETTER.":                                                      "stated",
		"":                                                                        "",
		"It costs 1.5 N vs. 2 N. It is better.":                                   "stated",
	} {
		text = strings.ReplaceAll(text, "\\u2019", "\u2019")
		var got []string
		for _, p := range Find(text) {
			got = append(got, string(p.Force))
		}
		if strings.Join(got, " ") != want {
			t.Errorf("%q: %v, want %q", text, got, want)
		}
	}
}

func TestEnglish(t *testing.T) {
	for text, want := range map[string]bool{
		"The new adhesive is as strong as the current one.":            true,
		"We conclude that the course improved scores in both schools.": true,
		"Superior.": true,
		"":          true,
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
	} {
		if English(text) != want {
			t.Errorf("%q: English %v", text, !want)
		}
	}
}

func FuzzFind(f *testing.F) {
	for _, s := range []string{"The gel has no effect.", "Not, in our view, better; but 95% certain that the p-value isn\u2019t.", "a.b. C? \xff no\n\neffect", "whether if not only better"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		last := 0
		for _, p := range Find(text) {
			if p.Start < last || p.End <= p.Start || p.End > len(text) {
				t.Fatalf("%q: place outside or out of order: %+v", text, p)
			}
			last = p.End
			if !slices.Contains(Classes, p.Class) {
				t.Fatalf("%q: class %q", text, p.Class)
			}
			switch p.Force {
			case Stated, Hedged, Denied, Asked:
			default:
				t.Fatalf("%q: force %q", text, p.Force)
			}
		}
		English(text)
	})
}

func BenchmarkFind(b *testing.B) {
	var all strings.Builder
	for _, m := range readCorpus(b, "testdata/corpus.txt") {
		all.WriteString(m.text + " ")
	}
	b.SetBytes(int64(all.Len()))
	for b.Loop() {
		Find(all.String())
	}
}
