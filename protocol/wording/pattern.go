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
	items []*item
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
	words    []string
	sets     []map[string]bool
	stems    []string
	term     termSet
	number   bool
	notLabel bool // not a word of a name of several words: "impact energy" is no impact
	optional bool
	gap      int
}

// A parser reads patterns. Items written alike, and sets of the same name, are
// read once and shared; nothing writes to them afterwards.
type parser struct {
	items map[string]*item
	sets  map[string]*item
}

// parse reads one pattern. A fault of the table is a fault of the program.
func (p *parser) parse(text string) pattern {
	items := make([]*item, 0, strings.Count(text, " ")+1)
	for f := range strings.FieldsSeq(text) {
		it, ok := p.items[f]
		if !ok {
			it = p.item(f)
			p.items[f] = it
		}
		items = append(items, it)
	}
	return pattern{items: items}
}

func (p *parser) item(f string) *item {
	it := new(item)
	switch {
	case f == "$":
		it.kind = endItem
		return it
	case f[0] == '_':
		it.kind, it.gap = gapItem, int(f[1]-'0')
		return it
	case f[0] == '!':
		it.kind, f = notItem, f[1:]
	}
	f, it.optional = strings.CutSuffix(f, "?")
	for w := range strings.SplitSeq(f, "|") {
		p.add(it, w)
	}
	return it
}

// add adds one alternative to an item.
func (p *parser) add(it *item, w string) {
	switch {
	case w == "#":
		it.number = true
	case w == "%grp":
		it.term |= groupWord
	case w == "%out":
		it.term |= outcomeWord
	case w == "%hyp":
		it.term |= hypothesisWord
		it.words = append(it.words, "hypothesis", "claim")
	case len(w) > 1 && w[0] == '%':
		set := p.set(w[1:])
		it.sets = append(it.sets, set.sets...)
		it.stems = append(it.stems, set.stems...)
		it.number, it.term = it.number || set.number, it.term|set.term
		it.notLabel = it.notLabel || set.notLabel || w == "%eff"
	case strings.HasSuffix(w, "~"):
		it.stems = append(it.stems, w[:len(w)-1])
	default:
		it.words = append(it.words, w)
	}
}

// set reads a set of the vocabulary; what is in it word by word becomes one map.
func (p *parser) set(name string) *item {
	if it, ok := p.sets[name]; ok {
		return it
	}
	words, ok := vocabulary[name]
	if !ok {
		panic("wording: no set %" + name)
	}
	it := new(item)
	for w := range strings.FieldsSeq(words) {
		p.add(it, w)
	}
	exact := make(map[string]bool, len(it.words))
	for _, w := range it.words {
		exact[w] = true
	}
	it.words, it.sets = nil, append(it.sets, exact)
	p.sets[name] = it
	return it
}

// takes reports whether the word at i fits.
func (it *item) takes(s *sentence, i int) bool {
	w := s.tokens[i].text
	if it.holds(w) {
		return !it.notLabel || s.kinds[i]&insideName == 0
	}
	for _, stem := range it.stems {
		if strings.HasPrefix(w, stem) {
			return true
		}
	}
	return it.number && isNumber(w) || it.term&s.kinds[i] != 0
}

// holds reports whether a word is one of those that are given in full.
func (it *item) holds(w string) bool {
	for _, word := range it.words {
		if word == w {
			return true
		}
	}
	for _, set := range it.sets {
		if set[w] {
			return true
		}
	}
	return false
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
	it := p.items[k]
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
		first := patterns[n].items[0]
		if first.kind != wordItem || first.optional {
			panic("wording: a pattern begins with a word")
		}
		add := func(w string) {
			if list := x.exact[w]; len(list) == 0 || list[len(list)-1] != n {
				x.exact[w] = append(list, n)
			}
		}
		for _, w := range first.words {
			add(w)
		}
		for _, set := range first.sets {
			for w := range set {
				add(w)
			}
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
