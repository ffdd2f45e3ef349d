package wording

import (
	"strings"
)

// A pattern is a row of items parted by blanks:
//
//	a|b    one of these words; a word that ends in ~ stands for all that begin so
//	%name  one of a set of vocabulary.go; %grp, %out and %hyp: a word that names a
//	       group, an outcome or a hypothesis; # a number
//	x?     may be absent
//	_N     up to N words that deny nothing
//	!a|b   the next word is none of these
//	$      the clause ends here
//
// No pattern runs over the beginning of a clause.
type pattern struct {
	items []item
}

type itemKind uint8

const (
	wordItem itemKind = iota
	gapItem
	notItem
	endItem
)

type item struct {
	kind     itemKind
	exact    map[string]bool
	stems    []string
	term     termSet
	number   bool
	notLabel bool // not a word of a name of several words: "impact energy" is no impact
	optional bool
	gap      int
}

// parse reads one pattern. A fault of the table is a fault of the program.
func parse(text string) pattern {
	var p pattern
	for _, f := range strings.Fields(text) {
		switch {
		case f == "$":
			p.items = append(p.items, item{kind: endItem})
			continue
		case f[0] == '_':
			p.items = append(p.items, item{kind: gapItem, gap: int(f[1] - '0')})
			continue
		}
		it := item{exact: map[string]bool{}}
		if f[0] == '!' {
			it.kind, f = notItem, f[1:]
		}
		f, it.optional = strings.CutSuffix(f, "?")
		it.add(f)
		p.items = append(p.items, it)
	}
	return p
}

func (it *item) add(alternatives string) {
	for _, w := range strings.Split(alternatives, "|") {
		switch {
		case w == "#":
			it.number = true
		case w == "%grp":
			it.term |= groupWord
		case w == "%out":
			it.term |= outcomeWord
		case w == "%hyp":
			it.term |= hypothesisWord
			it.exact["hypothesis"], it.exact["claim"] = true, true
		case len(w) > 1 && w[0] == '%':
			words, ok := vocabulary[w[1:]]
			if !ok {
				panic("wording: no set " + w)
			}
			it.add(strings.Join(strings.Fields(words), "|"))
			it.notLabel = it.notLabel || w == "%eff"
		case strings.HasSuffix(w, "~"):
			it.stems = append(it.stems, w[:len(w)-1])
		default:
			it.exact[w] = true
		}
	}
}

// takes reports whether the word at i fits.
func (it *item) takes(s *sentence, i int) bool {
	w := s.tokens[i].text
	if it.exact[w] {
		return !it.notLabel || s.kinds[i]&insideName == 0
	}
	for _, stem := range it.stems {
		if strings.HasPrefix(w, stem) {
			return true
		}
	}
	return it.number && isNumber(w) || it.term&s.kinds[i] != 0
}

// isNumber reports whether a word is a number in digits or a small one in letters.
func isNumber(w string) bool {
	return isDigit(w[0]) || oneOf(w, "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "twelve")
}

// at returns where the pattern ends that begins at word i, or -1.
func (p *pattern) at(s *sentence, i int) int { return p.match(s, i, i, 0) }

func (p *pattern) match(s *sentence, start, i, k int) int {
	if k == len(p.items) {
		return i
	}
	it := &p.items[k]
	inside := i < len(s.tokens) && (i == start || !s.tokens[i].brk)
	switch it.kind {
	case endItem:
		if inside {
			return -1
		}
		return p.match(s, start, i, k+1)
	case notItem:
		if inside && it.takes(s, i) {
			return -1
		}
		return p.match(s, start, i, k+1)
	case gapItem:
		for n := 0; n <= it.gap && i+n <= len(s.tokens); n++ {
			if n > 0 && (s.tokens[i+n-1].brk && i+n-1 != start || denies[s.tokens[i+n-1].text]) {
				break
			}
			if end := p.match(s, start, i+n, k+1); end >= 0 {
				return end
			}
		}
		return -1
	case wordItem:
		if inside && it.takes(s, i) {
			if end := p.match(s, start, i+1, k+1); end >= 0 {
				return end
			}
		}
		if it.optional {
			return p.match(s, start, i, k+1)
		}
	}
	return -1
}

// index finds the patterns that can begin with a word.
type index struct {
	exact map[string][]int
	stems map[string][]int // by the first three letters
	terms []int            // that begin with a name or number
}

func newIndex(patterns []pattern) *index {
	x := &index{exact: map[string][]int{}, stems: map[string][]int{}}
	for n := range patterns {
		first := &patterns[n].items[0]
		if first.kind != wordItem || first.optional {
			panic("wording: a pattern begins with a word")
		}
		for w := range first.exact {
			x.exact[w] = append(x.exact[w], n)
		}
		seen := map[string]bool{}
		for _, s := range first.stems {
			if k := s[:3]; !seen[k] {
				seen[k] = true
				x.stems[k] = append(x.stems[k], n)
			}
		}
		if first.number || first.term != 0 {
			x.terms = append(x.terms, n)
		}
	}
	return x
}

// each calls f for every pattern that may begin with the word.
func (x *index) each(word string, f func(n int)) {
	for _, n := range x.exact[word] {
		f(n)
	}
	if len(word) >= 3 {
		for _, n := range x.stems[word[:3]] {
			f(n)
		}
	}
	for _, n := range x.terms {
		f(n)
	}
}
