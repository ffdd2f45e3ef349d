// Package wording finds what a text claims of an effect: that there is none,
// that it is proven, that one thing is better than another, equal to it or no
// worse. Of each claim it says where it stands, how firmly it is said, in which
// direction it points and which of the given names it speaks of. It reads
// English by fixed rules and knows no number and no result: whether an analysis
// bears a claim out is for others to say.
//
//	for _, p := range wording.Find(text, wording.Term{Kind: wording.Group, Name: "new", Words: []string{"new"}}) {
//		fmt.Println(p.Class, p.Force, text[p.Start:p.End])
//	}
package wording

import "sync"

// Class is what a phrase claims.
type Class string

// The closed set of classes.
const (
	NoEffect       Class = "no-effect"       // there is no effect, no difference
	NotSignificant Class = "not-significant" // nothing significant, no evidence of anything
	Equivalence    Class = "equivalence"     // as good as, the same as
	Noninferiority Class = "noninferiority"  // not worse than
	Difference     Class = "difference"      // there is an effect, things differ
	Superiority    Class = "superiority"     // better
	Harm           Class = "harm"            // worse
	Change         Class = "change"          // higher or lower
	Relevance      Class = "relevance"       // large or important enough to matter
	TooSmall       Class = "too-small"       // too small to matter
	Limit          Class = "limit"           // above or below a limit, a requirement met or missed
	Safety         Class = "safety"          // safe, harmless
	Proof          Class = "proof"           // proven, beyond doubt
	Truth          Class = "truth"           // a hypothesis is true, false, accepted
	Misread        Class = "misread"         // a p-value or an interval taken for a probability of a claim
	Trend          Class = "trend"           // a trend, nearly significant
	Failure        Class = "failure"         // failed to show, a negative study
	Count          Class = "count"           // studies counted for and against
	Average        Class = "average"         // on average, overall, in all studies
	Causation      Class = "causation"       // caused by
	Generality     Class = "generality"      // always, everybody
	Verdict        Class = "verdict"         // a hypothesis or endpoint was established, met
	Decision       Class = "decision"        // what will be done; claims nothing
)

// Classes lists every class.
var Classes = []Class{NoEffect, NotSignificant, Equivalence, Noninferiority, Difference, Superiority, Harm, Change, Relevance, TooSmall,
	Limit, Safety, Proof, Truth, Misread, Trend, Failure, Count, Average, Causation, Generality, Verdict, Decision}

// Force is how firmly a phrase is said.
type Force string

// The closed set of forces, the firmest first.
const (
	Stated     Force = "stated"     // as a fact
	Suggested  Force = "suggested"  // suggests, appears, probably
	Possible   Force = "possible"   // may, could, is compatible with
	Denied     Force = "denied"     // not shown, cannot be concluded, remains open
	Attributed Force = "attributed" // somebody else says so
	Asked      Force = "asked"      // a question, condition, aim or requirement
	Quoted     Force = "quoted"     // between quotation marks
)

// Direction is where a claim points.
type Direction string

// The directions; "" for none.
const (
	Better Direction = "better"
	Worse  Direction = "worse"
	Higher Direction = "higher"
	Lower  Direction = "lower"
)

// Opposite is the other way.
func (d Direction) Opposite() Direction {
	switch d {
	case Better:
		return Worse
	case Worse:
		return Better
	case Higher:
		return Lower
	case Lower:
		return Higher
	}
	return d
}

// Phrase is one claim in a text. Start and End are byte offsets.
//
// A claim that a denial turns is given as what it then says: "is not better"
// is NoEffect with Negated set and Better as the direction that is denied,
// "is not equivalent" a Difference, "is not worse" Noninferiority.
type Phrase struct {
	Class      Class
	Force      Force
	Start, End int
	Negated    bool
	Direction  Direction
	Subject    string // the group that is said to be so; "" where the text names none
	Object     string // the group it is compared with
	Outcomes   []string
	Hypotheses []string
	Topic      []string // the outcomes that the latest sentence before named
	Exact      bool     // the same in every respect
	Benefit    bool     // speaks of the better side only
	HarmOnly   bool     // speaks of the worse side only
	Within     bool     // the sentence names a margin, region or number
	Observed   bool     // said of the sample or the estimate
	Explained  bool     // this sentence or the next says what remains possible
	AtLeastOne bool     // said of at least one study only
	Sentence   int      // counted from 0
}

// Find returns the claims of an English text in the order in which they
// stand. Terms are the names to look for. The work grows with the length of
// the text.
func Find(text string, terms ...Term) []Phrase {
	names := newNames(terms)
	var out []Phrase
	first := 0 // of the sentence before, in out
	var topic []string
	list := sentences(text)
	for n := range list {
		s := &list[n]
		s.terms = names.find(s)
		s.mark()
		triggers := s.triggers()
		explains := false
		for i := range triggers {
			explains = explains || triggers[i].force == explained
		}
		for i := first; i < len(out) && explains; i++ {
			out[i].Explained = true
		}
		first = len(out)
		var before *Phrase
		end := 0 // of the phrase before
		for _, m := range s.matches() {
			if s.absorbed(m, before, end) {
				before.Within = before.Within || m.entry.class == Relevance
				continue
			}
			ended := end
			end = m.to
			p := s.phrase(m, triggers, before, ended)
			p.Sentence, p.Topic = n, topic
			names.resolve(s, m, &p)
			out = append(out, p)
			before = &out[len(out)-1]
		}
		if named := names.near(s, Outcome, 0, len(s.tokens)); len(named) > 0 {
			topic = named
		}
	}
	return out
}

// match is an entry of the table found in the words from to to.
type match struct {
	entry    *entry
	from, to int
}

// matches finds the phrases of a sentence from left to right, of those that
// begin together the longest.
func (s *sentence) matches() (out []match) {
	table := phraseTable()
	for i := 0; i < len(s.tokens); {
		best := match{to: i}
		table.index.each(s.tokens[i].text, func(n int) {
			if end := table.patterns[n].at(s, i); end > best.to {
				best = match{table.owners[n], i, end}
			}
		})
		if best.entry != nil && (s.names(i, best.to) || s.aside(i, best.to)) {
			best.entry = nil
		}
		if best.entry == nil {
			i++
			continue
		}
		out = append(out, best)
		i = best.to
	}
	return out
}

// absorbed reports whether a match only says how much of the phrase before is
// meant ("not worse by an amount that matters"), or where it points ("a trend
// towards fewer relapses").
func (s *sentence) absorbed(m match, before *Phrase, end int) bool {
	if before != nil && before.Class == Decision && m.entry.class == Generality {
		return true // "we will offer it to all patients"
	}
	if before == nil || m.from-end > 6 {
		return false
	}
	for i := end; i <= m.from; i++ {
		if s.tokens[i].brk {
			return false
		}
	}
	switch before.Class {
	case Trend:
		return m.from > 0 && (m.entry.class == Superiority || m.entry.class == Harm || m.entry.class == Change || m.entry.class == Relevance)
	case Noninferiority, NoEffect, TooSmall:
		return (m.entry.class == Relevance || m.entry.class == Change || m.entry.class == Limit) &&
			oneOf(s.tokens[m.from].text, "by", "more", "less", "larger", "greater", "above", "beyond", "than")
	}
	return false
}

// phrase reads a match in its sentence; the phrase before it ends at word ended.
func (s *sentence) phrase(m match, triggers []trigger, before *Phrase, ended int) (p Phrase) {
	r := s.read(triggers, m.from, m.to)
	e := m.entry
	p = Phrase{Class: e.class, Force: r.force, Start: s.tokens[m.from].start, End: s.tokens[m.to-1].end, Direction: e.direction,
		Exact: e.flags&exact != 0, Benefit: e.flags&ofBenefit != 0, Within: r.within,
		Observed: r.observed, Explained: r.explained, AtLeastOne: r.atLeast1, Negated: e.flags&negative != 0 && e.direction != ""}
	if p.Force == Denied {
		return p
	}
	gains := s.mentions("benefit", "gain", "gains", "saving", "savings", "save", "saves", "saved", "advantage", "improvement", "relief") &&
		!s.mentions("difference", "differences", "effect", "effects", "change")
	losses := !gains && s.mentions("loss", "rise", "increase", "harm", "deterioration", "worsening") && !s.mentions("difference", "differences", "effect", "effects", "change")
	defer func() {
		p.Benefit = p.Benefit || p.Class == TooSmall && gains
		p.HarmOnly = p.Class == TooSmall && losses
	}()
	at := s.denial(m.from)
	not := at >= 0
	if !not && before != nil && before.Negated && m.from > 0 && oneOf(s.tokens[m.from-1].text, "or", "nor") && before.End == s.tokens[max(0, m.from-2)].end {
		not = true
	}
	if not != r.turned {
		if e.flags&plain != 0 || e.flags&negative != 0 && not {
			p.Force = Denied
			return p
		}
		p.deny()
		if at >= ended {
			p.Start = s.tokens[at].start
		}
	}
	return p
}

// deny turns a claim into what its denial says.
func (p *Phrase) deny() {
	p.Negated = true
	switch p.Class {
	case Superiority, Change, Difference:
		p.Class = NoEffect
	case Harm:
		p.Class = Noninferiority
	case Equivalence:
		p.Class = Difference
	case Noninferiority:
		p.Class, p.Direction = Harm, Worse
	case NoEffect:
		p.Class = Difference
		if p.Direction != "" {
			p.Class = Superiority
		}
	case Relevance:
		p.Class = TooSmall
	case TooSmall:
		p.Class = Relevance
	case Limit:
		p.Direction = p.Direction.Opposite()
	case Safety:
		p.Class, p.Direction = Harm, Worse
	case NotSignificant, Proof, Truth, Misread, Trend, Failure, Count, Average, Causation, Generality, Verdict, Decision:
		p.Force = Denied
	}
}

// A table is the patterns of a list of entries, ready to be searched, each
// with the entry that it belongs to. Nothing writes to one once it is built.
type table[E any] struct {
	patterns []pattern
	owners   []*E
	index    *index
}

// Tables are built when the first conclusion is read: most runs need none.
var (
	phraseTable = sync.OnceValue(func() *table[entry] {
		return newTable(func(e *entry) []string { return e.patterns }, entries, moreEntries)
	})
	triggerTable = sync.OnceValue(func() *table[triggerEntry] {
		return newTable(func(e *triggerEntry) []string { return e.patterns }, triggerEntries)
	})
)

func newTable[E any](texts func(*E) []string, lists ...[]E) *table[E] {
	t, p := new(table[E]), parser{items: map[string]*item{}, sets: map[string]*item{}}
	for _, list := range lists {
		for i := range list {
			for _, text := range texts(&list[i]) {
				t.patterns = append(t.patterns, p.parse(text))
				t.owners = append(t.owners, &list[i])
			}
		}
	}
	t.index = newIndex(t.patterns)
	return t
}
