// Package wording finds phrases in a text that claim something of an effect:
// that there is none, that it is proven, that one thing is better than, equal
// to or no worse than another. It returns the class of each phrase, how firmly
// it is said, and where. It reads English only, and knows no result: whether
// the analysis supports a claim is for others to say.
//
//	for _, p := range wording.Find(text) {
//		fmt.Println(p.Class, p.Force, text[p.Start:p.End])
//	}
package wording

import (
	"slices"
	"strings"
)

// Class is what a phrase claims.
type Class string

// The closed set of classes.
const (
	NoEffect       Class = "no-effect"       // there is no effect, no difference
	NotSignificant Class = "not-significant" // no significant difference, no evidence of one
	Proof          Class = "proof"           // proven, beyond doubt
	Difference     Class = "difference"      // there is an effect, things differ
	Superiority    Class = "superiority"     // better, superior
	Relevance      Class = "relevance"       // large or important enough to matter
	Equivalence    Class = "equivalence"     // as good as, the same as
	Noninferiority Class = "noninferiority"  // not worse than
	Trend          Class = "trend"           // a trend, nearly significant
	Causation      Class = "causation"       // caused by
	Safety         Class = "safety"          // safe, harmless
	Generality     Class = "generality"      // always, in every case
	Misread        Class = "misread"         // a p-value or interval taken for a probability of a hypothesis
)

// Classes lists every class.
var Classes = []Class{NoEffect, NotSignificant, Proof, Difference, Superiority, Relevance, Equivalence,
	Noninferiority, Trend, Causation, Safety, Generality, Misread}

// Force is how firmly a phrase is said.
type Force string

// The closed set of forces.
const (
	Stated Force = "stated" // as a fact
	Hedged Force = "hedged" // may, suggests, is compatible with
	Denied Force = "denied" // not, cannot be concluded, remains open
	Asked  Force = "asked"  // a question, a condition, an aim
)

// Phrase is one claim in a text. Start and End are byte offsets.
type Phrase struct {
	Class      Class
	Force      Force
	Start, End int
}

// Find returns the claims of an English text in the order in which they
// stand. Of phrases that overlap the longer one counts.
func Find(text string) []Phrase {
	var out []Phrase
	for _, s := range sentences(text) {
		for _, m := range s.matches() {
			out = append(out, Phrase{m.class, s.force(m), s.words[m.from].start, s.words[m.to-1].end})
		}
	}
	return out
}

// match is a pattern found in the words from to to of a sentence.
type match struct {
	class    Class
	from, to int
}

// matches finds the patterns in a sentence, the longest first where they
// overlap, then the earlier, then the class listed first.
func (s *sentence) matches() []match {
	var all []match
	for i := range s.words {
		for _, k := range candidates(s.words[i].text) {
			p := &patterns[k]
			if n := p.at(s, i); n > 0 && !s.passive(p.class, i) && !(n == 1 && s.attributive(p.class, i)) {
				all = append(all, match{p.class, i, i + n})
			}
		}
	}
	slices.SortStableFunc(all, func(a, b match) int {
		if d := (b.to - b.from) - (a.to - a.from); d != 0 {
			return d
		}
		return a.from - b.from
	})
	var kept []match
	for _, m := range all {
		if !slices.ContainsFunc(kept, func(k match) bool { return m.from < k.to && k.from < m.to }) {
			kept = append(kept, m)
		}
	}
	slices.SortFunc(kept, func(a, b match) int { return a.from - b.from })
	return join(kept)
}

// join makes one of neighbours of one class: "proves beyond question".
func join(list []match) []match {
	var out []match
	for _, m := range list {
		if n := len(out); n > 0 && out[n-1].class == m.class && out[n-1].to == m.from {
			out[n-1].to = m.to
			continue
		}
		out = append(out, m)
	}
	return out
}

// candidates are the patterns, by number and in order, that can begin with a
// word.
func candidates(word string) []int {
	if list, ok := byFirst[word]; ok {
		return list
	}
	return anyFirst
}

// byFirst and anyFirst are the index of the patterns by their first word:
// those that can begin with it, and those that could begin with any.
var byFirst, anyFirst = index(patterns)

func index(list []pattern) (first map[string][]int, rest []int) {
	first = map[string][]int{}
	open := func(p *pattern) bool {
		return p.items[0].optional || slices.ContainsFunc(p.items[0].words, func(w string) bool { return w == "n't" || strings.HasSuffix(w, "~") })
	}
	for k := range list {
		if open(&list[k]) {
			rest = append(rest, k)
			continue
		}
		for _, w := range list[k].items[0].words {
			first[w] = nil
		}
	}
	for w := range first {
		for k := range list {
			if open(&list[k]) || slices.Contains(list[k].items[0].words, w) {
				first[w] = append(first[w], k)
			}
		}
	}
	return first, rest
}

// passive reports whether a verb of the class of differences at word i only
// says what was done: "the temperature was increased".
func (s *sentence) passive(c Class, i int) bool {
	return c == Difference && i > 0 && strings.HasSuffix(s.words[i].text, "ed") &&
		oneOf(s.words[i-1].text, "was", "were", "is", "are", "be", "been", "being")
}

// attributive reports whether a comparative stands before its noun and so
// compares nothing here: "better light".
func (s *sentence) attributive(c Class, i int) bool {
	if c != Superiority || i+1 >= len(s.words) || s.words[i+1].breaks || s.words[i+1].comma {
		return false
	}
	return oneOf(s.words[i].text, "better", "stronger", "safer", "faster") &&
		!oneOf(s.words[i+1].text, "than", "to", "for", "in", "on", "at", "and", "or", "nor", "with", "here", "now", "overall", "too", "again", "by", "when",
			"as", "is", "was", "remains", "after", "under", "throughout", "everywhere", "choice", "one", "of", "even", "still", "only", "both", "either")
}

// pattern is a sequence of items.
type pattern struct {
	class Class
	items []item
}

// item is one place of a pattern: any of some words, or a gap.
type item struct {
	words    []string // a word that ends in ~ stands for all that begin so
	optional bool
	gap      int // up to so many words, whatever they are
}

// parse reads a pattern: words parted by blanks, alternatives by |, a word
// that ends in ~ for all that begin so, ? behind what may be absent, _N for up
// to N words of any kind.
func parse(class Class, text string) pattern {
	p := pattern{class: class}
	for _, f := range strings.Fields(text) {
		if n, ok := strings.CutPrefix(f, "_"); ok {
			p.items = append(p.items, item{gap: int(n[0] - '0'), optional: true})
			continue
		}
		f, optional := strings.CutSuffix(f, "?")
		p.items = append(p.items, item{words: strings.Split(f, "|"), optional: optional})
	}
	return p
}

// at returns how many words the pattern takes from word i on, 0 for no match.
func (p *pattern) at(s *sentence, i int) int {
	if end := p.match(s, i, 0); end > i {
		return end - i
	}
	return 0
}

// match tries the items from k on at word i; it returns the end, or -1. A
// pattern does not run over the end of a clause.
func (p *pattern) match(s *sentence, i, k int) int {
	if k == len(p.items) {
		return i
	}
	it := p.items[k]
	inside := i < len(s.words) && (k == 0 || !s.words[i].breaks)
	if it.gap > 0 {
		for n := 0; n <= it.gap && i+n <= len(s.words); n++ {
			if n > 0 && (s.words[i+n-1].breaks || s.negates(i+n-1)) { // a gap hides no negation
				break
			}
			if end := p.match(s, i+n, k+1); end >= 0 {
				return end
			}
		}
		return -1
	}
	if inside && slices.ContainsFunc(it.words, func(w string) bool { return is(s.words[i].text, w) }) {
		if end := p.match(s, i+1, k+1); end >= 0 {
			return end
		}
	}
	if it.optional {
		return p.match(s, i, k+1)
	}
	return -1
}

// is compares a word with one of a pattern: "n't" stands for every contraction
// with not, "%~" for every percentage.
func is(word, want string) bool {
	switch want {
	case "n't":
		return strings.HasSuffix(word, "n't")
	case "%~":
		return strings.HasSuffix(word, "%")
	}
	if stem, ok := strings.CutSuffix(want, "~"); ok {
		return strings.HasPrefix(word, stem)
	}
	return word == want
}
