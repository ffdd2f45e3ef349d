package wording

import "strings"

// TermKind is what a name names.
type TermKind uint8

// The kinds of name.
const (
	Group TermKind = iota
	Outcome
	Hypothesis
)

// Term is a name to look for: Name is what is reported, Words are the ways in
// which a text may put it (the name itself, a label).
type Term struct {
	Kind  TermKind
	Name  string
	Words []string
}

type termSet uint8

const (
	groupWord termSet = 1 << iota
	outcomeWord
	hypothesisWord
	insideName // of a name of several words
)

// mention is a place where a term is named: the words from to to.
type mention struct {
	term     int
	kind     TermKind
	from, to int
}

// names finds terms in sentences. A term is named by its whole name or by one
// stem that no other term of its kind has.
type names struct {
	terms []Term
	whole [][][]string     // stems of each way to put each term
	one   map[string][]int // distinctive stems
	heads map[string][]int // first stem of a whole name
}

// vague are words of names that tell nothing of what is named.
var vague = stemmed(`share rate score time level number area mean value percent percentage count ratio total index average group groups arm
arms treatment per the and of in with for without no any use usual care plan at to from by on or a an one two three line result size amount degree change
effect difference study trial data test month week day year hour`)

// everyday are words that tell groups apart but name no outcome or hypothesis.
var everyday = stemmed("small large main primary second secondary first low lower high higher short long big better worse equal same key final early late overall effect")

func newNames(terms []Term) *names {
	n := &names{terms: terms, one: map[string][]int{}, heads: map[string][]int{}}
	owners := map[TermKind]map[string]map[int]bool{}
	n.whole = make([][][]string, len(terms))
	for i, t := range terms {
		if owners[t.Kind] == nil {
			owners[t.Kind] = map[string]map[int]bool{}
		}
		for _, w := range t.Words {
			var stems []string
			for _, s := range sentences(strings.NewReplacer("_", " ", "-", " ", ".", " ").Replace(w)) {
				for _, tok := range s.tokens {
					st := stem(tok.text)
					stems = append(stems, st)
					if owners[t.Kind][st] == nil {
						owners[t.Kind][st] = map[int]bool{}
					}
					owners[t.Kind][st][i] = true
				}
			}
			if len(stems) > 0 {
				n.whole[i] = append(n.whole[i], stems)
				n.heads[stems[0]] = append(n.heads[stems[0]], i)
			}
		}
	}
	for i, t := range terms {
		n.distinctive(i, owners[t.Kind], false)
		if len(n.whole[i]) > 0 && t.Kind == Outcome && !n.known(i) {
			n.distinctive(i, owners[t.Kind], true)
		}
	}
	return n
}

// distinctive enters the stems that only term i of its kind has.
func (n *names) distinctive(i int, owners map[string]map[int]bool, vagueToo bool) {
	seen := map[string]bool{}
	for _, way := range n.whole[i] {
		for _, st := range way {
			if seen[st] || len(st) < 3 || len(owners[st]) > 1 || n.terms[i].Kind != Group && everyday[st] || vague[st] && !vagueToo || englishSmall[st] && st != "new" {
				continue
			}
			seen[st] = true
			n.one[st] = append(n.one[st], i)
		}
	}
}

func (n *names) known(i int) bool {
	for _, list := range n.one {
		for _, k := range list {
			if k == i {
				return true
			}
		}
	}
	return false
}

// find returns the mentions in a sentence, in order.
func (n *names) find(s *sentence) (out []mention) {
	if len(n.terms) == 0 {
		return nil
	}
	stems := make([]string, len(s.tokens))
	for i := range s.tokens {
		stems[i] = stem(s.tokens[i].text)
	}
	for i := range stems {
		for _, k := range n.one[stems[i]] {
			out = append(out, mention{k, n.terms[k].Kind, i, i + 1})
		}
		for _, k := range n.heads[stems[i]] {
			for _, way := range n.whole[k] {
				if begins(stems[i:], way) && !(len(way) == 1 && (len(way[0]) >= 3 || englishSmall[way[0]])) {
					out = append(out, mention{k, n.terms[k].Kind, i, i + len(way)})
				}
			}
		}
	}
	return out
}

func begins(stems, way []string) bool {
	if len(way) == 0 || len(stems) < len(way) {
		return false
	}
	for i := range way {
		if stems[i] != way[i] {
			return false
		}
	}
	return true
}

// mark notes on every word what kinds of name it belongs to.
func (s *sentence) mark() {
	s.kinds = make([]termSet, len(s.tokens))
	for _, m := range s.terms {
		kind := groupWord
		switch m.kind {
		case Group:
		case Outcome:
			kind = outcomeWord
		case Hypothesis:
			kind = hypothesisWord
		}
		if m.to-m.from > 1 {
			kind |= insideName
		}
		for i := m.from; i < m.to; i++ {
			s.kinds[i] |= kind
		}
	}
}

// irregular forms that a stem must not keep apart.
var irregular = map[string]string{"strong": "streng", "stronger": "streng", "weak": "streng", "weaker": "streng", "died": "die", "dying": "die",
	"deaths": "die", "death": "die", "long": "length", "longer": "length", "hurts": "pain", "hurt": "pain", "slept": "sleep", "fell": "fall", "errors": "error", "people": "person"}

// stem is the part of a word that its forms share, roughly.
func stem(w string) string {
	if s, ok := irregular[w]; ok {
		return s
	}
	if w == "strength" {
		return "streng"
	}
	for _, end := range []string{"fulness", "ingly", "edly", "ising", "ised", "ings", "ing", "ies", "ied", "est", "ers", "ed", "es", "er", "ly", "al", "s", "e", "y"} {
		if h, ok := strings.CutSuffix(w, end); ok && len(h) >= 3 {
			w = h
			break
		}
	}
	if len(w) > 6 && w[5] < 0x80 && w[6] < 0x80 {
		return w[:6]
	}
	return w
}

func stemmed(words string) map[string]bool {
	m := map[string]bool{}
	for w := range set(words) {
		m[stem(w)] = true
	}
	return m
}

// resolve says which names a phrase speaks of, and which group it calls so.
func (n *names) resolve(s *sentence, m match, p *Phrase) {
	first, last := s.clause(m.from, m.to)
	p.Outcomes = n.near(s, Outcome, first, last)
	p.Hypotheses = n.near(s, Hypothesis, first, last)
	switch p.Class {
	case Superiority, Harm, Change, Noninferiority, NoEffect, Difference, Relevance, Causation:
		n.subject(s, m, first, last, p)
	case NotSignificant, Equivalence, TooSmall, Limit, Safety, Proof, Truth, Misread, Trend, Failure, Count, Average, Generality, Verdict, Decision:
	}
}

// near lists the terms of a kind named in a clause or, where there are none,
// in the sentence.
func (n *names) near(s *sentence, kind TermKind, first, last int) []string {
	collect := func(a, b int) (out []string) {
		for _, t := range s.terms {
			if t.kind == kind && t.from >= a && t.from < b && !oneOf(n.terms[t.term].Name, out...) {
				out = append(out, n.terms[t.term].Name)
			}
		}
		return out
	}
	if out := collect(first, last); len(out) > 0 {
		return out
	}
	return collect(0, len(s.tokens))
}

// subject finds which group the phrase is said of, and against which.
func (n *names) subject(s *sentence, m match, first, last int, p *Phrase) {
	than := -1
	for i := m.to - 1; i < min(last, m.to+14); i++ {
		if oneOf(s.tokens[i].text, "than", "versus", "vs", "over", "compared", "against", "beat", "beats", "outperforms", "outperformed", "surpasses", "surpassed") ||
			i == m.to && s.tokens[i].text == "to" || i == m.to-1 && s.tokens[i].text == "to" {
			than = i
			break
		}
	}
	for _, t := range s.terms {
		if t.kind != Group {
			continue
		}
		name := n.terms[t.term].Name
		switch {
		case than >= 0 && t.from > than && t.from <= than+4 && t.from < last && !governed(s, t.from, than+1):
			if p.Object == "" {
				p.Object = name
			}
		case t.from >= m.to && t.from < last:
			if p.Subject == "" && t.from > 0 && governed(s, t.from, m.to-1) {
				p.Subject = name
			}
		case t.to <= m.from && t.from >= first && !s.after(t.from, first, "than", "versus", "vs"):
			p.Subject = name
		}
	}
	if p.Subject == "" { // in an earlier clause of the sentence
		for _, t := range s.terms {
			if p.Subject == "" && t.kind == Group && t.to <= m.from && n.terms[t.term].Name != p.Object && !s.after(t.from, 0, "than", "versus", "vs") {
				p.Subject = n.terms[t.term].Name
			}
		}
	}
	if p.Subject == p.Object {
		p.Subject = ""
	}
}

// governed reports whether a word that ties a group to what was said stands
// between the phrase and the group: "higher with primer A", "fewer people are
// cured by the short course".
func governed(s *sentence, at, from int) bool {
	for i := at - 1; i >= max(from, at-5); i-- {
		if oneOf(s.tokens[i].text, "with", "in", "under", "for", "on", "after", "by", "from", "of", "among", "at", "using", "through", "during", "when", "via") {
			return true
		}
	}
	return false
}

// after reports whether one of the words stands before i, at or after first.
func (s *sentence) after(i, first int, words ...string) bool {
	for k := i - 1; k >= max(first, i-4); k-- {
		if oneOf(s.tokens[k].text, words...) {
			return true
		}
	}
	return false
}
