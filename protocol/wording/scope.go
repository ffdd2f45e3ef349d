package wording

// trigger is a row of words that changes how the claims in its reach are said.
type trigger struct {
	force       Force
	scope       scope
	from, to    int
	first, last int // its clause
}

// farthest is how many words a trigger reaches at most.
const farthest = 40

// triggers finds the triggers of a sentence.
func (s *sentence) triggers() (out []trigger) {
	table := triggerTable()
	for i := range s.tokens {
		table.index.each(s.tokens[i].text, func(n int) {
			if end := table.patterns[n].at(s, i); end > i {
				t := trigger{force: table.owners[n].force, scope: table.owners[n].scope, from: i, to: end}
				t.first, t.last = s.clause(i, min(end, len(s.tokens)))
				out = append(out, t)
			}
		})
	}
	return out
}

// reaches reports whether the trigger governs the words from a to b.
func (t *trigger) reaches(s *sentence, a, b int) bool {
	switch t.scope {
	case forward:
		if t.from >= a || a-t.from > farthest {
			return false
		}
		if a < t.last {
			return true
		}
		// "If it were dearer, it would …": a condition in front holds for the sentence.
		return t.from == 0 && oneOf(s.tokens[0].text, "if", "unless", "suppose", "assuming", "provided")
	case backward:
		return b <= t.from && a >= t.first && t.from-b <= farthest
	case near:
		return t.to <= a && a < t.to+3 && a < t.last
	case whole:
		return true
	}
	panic("wording: unknown scope")
}

// reading is what the triggers around a phrase come to.
type reading struct {
	force                                         Force
	turned, observed, explained, within, atLeast1 bool
}

// rank orders the forces: of several the highest holds.
func rank(f Force) int {
	switch f {
	case Quoted:
		return 6
	case Asked:
		return 5
	case Attributed:
		return 4
	case Denied:
		return 3
	case Possible:
		return 2
	case Suggested:
		return 1
	case Stated:
		return 0
	}
	panic("wording: unknown force")
}

// read weighs the triggers that reach the words from a to b.
func (s *sentence) read(triggers []trigger, a, b int) reading {
	r := reading{force: Stated}
	raise := func(f Force) {
		if rank(f) > rank(r.force) {
			r.force = f
		}
	}
	if s.question {
		raise(Asked)
	}
	if s.tokens[a].quoted {
		raise(Quoted)
	}
	for i := range triggers {
		t := &triggers[i]
		if !t.reaches(s, a, b) {
			continue
		}
		switch t.force {
		case turn:
			r.turned = true
		case observed:
			r.observed = true
		case explained:
			r.explained = true
		case within:
			r.within = true
		case onlyOne:
			r.atLeast1 = true
		case Stated, Suggested, Possible, Denied, Attributed, Asked, Quoted:
			raise(t.force)
		}
	}
	if r.force == Stated && s.counted(a) && s.mentions("interval", "compatible", "ci", "confidence", "limits") {
		r.observed = true
	}
	return r
}

// counted reports whether a number stands right before the word or near behind it.
func (s *sentence) counted(a int) bool {
	for i := max(0, a-3); i < min(len(s.tokens), a+9); i++ {
		if isDigit(s.tokens[i].text[0]) {
			return true
		}
	}
	return false
}

func (s *sentence) mentions(words ...string) bool {
	for i := range s.tokens {
		if oneOf(s.tokens[i].text, words...) {
			return true
		}
	}
	return false
}

// between are the words that may stand between a denial and what it denies.
var between = set(`be been being is are was were any a an the to more much clearly really truly actually significantly statistically itself
thus therefore yet however in at all significantly seem appear become prove proved shown necessarily even either been so very that such also have has show give bring produce offer`)

// denial finds the word that denies what begins at word a: right before it, or
// before an insertion between commas ("not, in our view, better"); -1 for none.
func (s *sentence) denial(a int) int {
	for i := a - 1; i >= max(0, a-5); i-- {
		if s.tokens[i+1].brk {
			return -1
		}
		w := s.tokens[i].text
		if turns(w) {
			return i
		}
		if !between[w] {
			break
		}
	}
	if !s.tokens[a].comma {
		return -1
	}
	for i := a - 1; i > max(0, a-7); i-- {
		if s.tokens[i].brk {
			return -1
		}
		if s.tokens[i].comma {
			if turns(s.tokens[i-1].text) {
				return i - 1
			}
			return -1
		}
	}
	return -1
}

// turns reports whether a word denies what follows.
func turns(w string) bool {
	return oneOf(w, "not", "no", "never", "neither", "nor", "hardly", "without")
}

// nouns are words of the table that are nouns behind an article or adjective.
var nouns = set("cure cures help boost ease benefit benefits cleaner relief damage harm hurt increase rise drop fall decrease reduction save saves works work change changes impact")

// comparatives before a noun only tell things apart: "the longer course".
var comparatives = set(vocabulary["up"] + " " + vocabulary["down"] + " faster slower quicker later safer poorer cleaner")

// ofWork are things of a study that a phrase may be said of without claiming
// anything of its results.
var ofWork = set("analysis analyses design report conduct decision decisions plan protocol schedule publication conclusion conclusions budget timetable visits forms questionnaire knowledge understanding")

// aside reports whether a phrase speaks of how the study was run: "no influence
// on the analysis", "the protocol was not changed".
func (s *sentence) aside(a, b int) bool {
	for i := b; i < min(len(s.tokens), b+3); i++ {
		if s.tokens[i].brk {
			break
		}
		if ofWork[s.tokens[i].text] && s.kinds[i] == 0 {
			return true
		}
		if !oneOf(s.tokens[i].text, "on", "in", "of", "to", "the", "our", "this", "its", "by") {
			break
		}
	}
	if s.ofTime(a, b) {
		return true
	}
	// "Changing it less often did not …": how, not how much
	if oneOf(s.tokens[a].text, "less", "more") && b < len(s.tokens) && !s.tokens[b].brk && oneOf(s.tokens[b].text, "did", "does", "do", "will", "would", "has", "have") {
		return true
	}
	if a > 0 && oneOf(s.tokens[a-1].text, "cost", "costs", "priced") {
		return true
	}
	if !oneOf(s.tokens[b-1].text, "changed", "altered", "modified", "unchanged", "unaltered") {
		return false
	}
	for i := a - 1; i >= max(0, a-2); i-- {
		if ofWork[s.tokens[i].text] && !s.tokens[i+1].brk {
			return true
		}
	}
	return false
}

// names reports whether the words from a to b name a thing and claim nothing.
func (s *sentence) names(a, b int) bool {
	if b == a+1 && s.kinds[a]&insideName != 0 {
		return true
	}
	if a == 0 || b != a+1 || s.tokens[a].brk {
		return false
	}
	w, before := s.tokens[a].text, s.tokens[a-1].text
	if oneOf(before, "who", "those") {
		return true
	}
	if comparatives[w] && b < len(s.tokens) && oneOf(s.tokens[b].text, "differences", "effects", "changes", "values", "samples", "trials", "studies", "trial", "study", "groups") {
		return true
	}
	determined := oneOf(before, "the", "this", "that", "these", "those", "its", "our", "each", "every")
	if comparatives[w] && determined && b < len(s.tokens) && !s.tokens[b].brk && !oneOf(s.tokens[b].text, "of", "than", "was", "is", "were", "are") {
		return true
	}
	if w == "better" && determined && b < len(s.tokens) && s.tokens[b].text == "of" {
		return true
	}
	return nouns[w] && (determined || oneOf(before, "a", "an", "new", "old", "of", "and", "or", "second", "first") || comparatives[before])
}

// ofTime reports whether a phrase only counts days or money, and no outcome is
// named: "saves four weeks", "two days shorter".
func (s *sentence) ofTime(a, b int) bool {
	if !oneOf(s.tokens[a].text, "saves", "save", "saved", "shorter", "longer", "less", "more") {
		return false
	}
	for _, m := range s.terms {
		if m.kind == Outcome {
			return false
		}
	}
	for i := max(0, a-2); i < min(len(s.tokens), b+4); i++ {
		if oneOf(s.tokens[i].text, "visits", "hours", "minutes", "beds", "staff", "weeks", "days", "months", "years", "euros", "money", "costs") {
			return true
		}
	}
	return false
}
