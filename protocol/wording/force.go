package wording

import "strings"

// reach is how many words before a phrase a negation or a hedge can stand.
const reach = 12

// force reads how firmly the phrase is said from the words around it.
func (s *sentence) force(m match) Force {
	first, last := s.clause(m.from, m.to)
	switch {
	case s.question || s.asked(m, first):
		return Asked
	case s.denied(m, first, last):
		return Denied
	case s.hedged(m, first, last):
		return Hedged
	}
	return Stated
}

// clause is the stretch of words around from and to without a break.
func (s *sentence) clause(from, to int) (first, last int) {
	first, last = from, to
	for first > 0 && !s.words[first].breaks {
		first--
	}
	for last < len(s.words) && !s.words[last].breaks {
		last++
	}
	return first, last
}

// asked finds questions inside a sentence, conditions and aims. They hold for
// what follows them, over commas.
func (s *sentence) asked(m match, first int) bool {
	for i := 0; i < m.from; i++ {
		near := i >= first
		w := s.words[i].text
		switch w {
		case "whether", "unless", "until":
			if near || m.from-i <= 2*reach {
				return true
			}
		case "if", "would", "should", "were":
			// "Should the gel prove better", "were the gel to be better": the verb leads.
			inverted := i == 0 || s.words[i].breaks || s.words[i].comma
			if near && (inverted || w == "if" || w == "would") {
				return true
			}
		case "question", "aim", "aims", "objective", "goal", "purpose", "endpoint", "hypothesis", "hypotheses", "criterion", "claim", "idea":
			if near && s.leadsIn(i, m.from) && (i == first || oneOf(s.words[i-1].text, "the", "a", "an", "our", "its", "their", "this", "that",
				"main", "primary", "secondary", "first", "only", "next", "study", "trial", "planned", "sealed")) {
				return true
			}
		case "aimed", "hypothesised", "hypothesized", "designed", "intended", "planned", "plans", "plan", "expected", "hoped", "hope", "wanted", "assumed", "needed", "required":
			if near && i+1 < m.from && oneOf(s.words[i+1].text, "to", "that", "for") {
				return true
			}
		case "to":
			if near && i+1 < m.from && oneOf(s.words[i+1].text, "test", "learn", "see", "find", "determine", "assess", "examine", "investigate") {
				return true
			}
		}
	}
	return s.starts(m.to, "is|was|remains|are _2 whether|unknown|unclear|open|unanswered") || s.starts(m.to, "is|was|were a|the|an? aim|question|objective|hypothesis|assumption|claim")
}

// leadsIn reports whether a noun such as "aim" at i introduces what follows:
// "the aim of the study was to show", "the hypothesis that".
func (s *sentence) leadsIn(i, to int) bool {
	for k := i + 1; k < min(to, i+7); k++ {
		if oneOf(s.words[k].text, "to", "that", "if", "of", "how") {
			return true
		}
	}
	return false
}

// starts reports whether a pattern stands at a word.
func (s *sentence) starts(i int, text string) bool {
	p := parse("", text)
	return i < len(s.words) && p.at(s, i) > 0
}

// denied finds a negation before the phrase in its clause, or one behind it
// that takes it back: "superiority was not shown".
func (s *sentence) denied(m match, first, last int) bool {
	for i := m.from - 1; i >= max(first, m.from-reach); i-- {
		if s.words[i+1].comma && !s.insertion(i+1, m.from) && !s.series(i+1, m.from) {
			break
		}
		if s.negates(i) {
			return true
		}
	}
	for i := m.to; i < min(last, m.to+5); i++ {
		if s.words[i].comma && i > m.to {
			break
		}
		if s.negates(i) || oneOf(s.words[i].text, "cannot") {
			return s.takesBack(i+1, last)
		}
		if s.starts(i, "remains|is|was|are|were|remain still? unproven|unproved|unsupported|unestablished|inconclusive|excluded|refuted|unconfirmed") ||
			s.starts(i, "is|was|are|were|can|could be? ruled out") || s.starts(i, "can|could be excluded|refuted|rejected") ||
			s.starts(i, "fails|failed|falls|fell short|to") || s.starts(i, "is|was|are|were? lacking|absent|missing|rejected") ||
			s.starts(i, "is|was|goes|would more|beyond|further _2 than|what") || s.starts(i, "needs|need|requires|require more|further|larger|another|additional") {
			return true
		}
	}
	return false
}

// insertion reports whether the words from i up to the phrase follow a pair
// of commas that parts a few words from the rest: "not, in our view, better".
func (s *sentence) insertion(i, to int) bool {
	for k := i - 1; k >= max(0, i-6); k-- {
		if s.words[k].comma {
			return true
		}
	}
	// The insertion itself: a comma opens it here and one closes it before the phrase.
	for k := i + 1; k <= min(to, i+6) && k < len(s.words); k++ {
		if s.words[k].comma {
			return true
		}
	}
	return false
}

// series reports whether the words from i are one more link of a list: "not
// better, safer or cheaper", "neither better, nor safer".
func (s *sentence) series(i, to int) bool {
	return to-i <= 2 || oneOf(s.words[i].text, "or", "nor", "neither")
}

// takesBack reports whether one of the words behind a negation is the verb
// that it denies.
func (s *sentence) takesBack(i, last int) bool {
	for k := i; k < min(last, i+4); k++ {
		switch w := s.words[k].text; {
		case oneOf(w, "shown", "proven", "proved", "met", "reached", "found", "seen", "made", "given", "clear", "certain", "possible", "warranted",
			"excluded", "ruled", "rejected", "refuted", "follow", "hold", "apply", "mean", "imply", "allowed", "meant", "known", "evident"):
			return true
		case strings.HasPrefix(w, "establish"), strings.HasPrefix(w, "demonstrat"), strings.HasPrefix(w, "support"), strings.HasPrefix(w, "claim"),
			strings.HasPrefix(w, "conclu"), strings.HasPrefix(w, "confirm"), strings.HasPrefix(w, "justif"), strings.HasPrefix(w, "infer"),
			strings.HasPrefix(w, "achiev"), strings.HasPrefix(w, "detect"), strings.HasPrefix(w, "observ"), strings.HasPrefix(w, "declar"),
			strings.HasPrefix(w, "assum"), strings.HasPrefix(w, "drawn"), strings.HasPrefix(w, "test"), strings.HasPrefix(w, "assess"):
			return true
		}
	}
	return false
}

// negates reports whether word i denies what follows it. "Not only" and "no
// doubt" do not.
func (s *sentence) negates(i int) bool {
	w, next := s.words[i].text, ""
	if i+1 < len(s.words) {
		next = s.words[i+1].text
	}
	switch w {
	case "not":
		return !oneOf(next, "only", "just", "merely", "simply", "surprisingly", "least")
	case "no":
		return !oneOf(next, "doubt", "question", "longer", "less", "fewer", "sooner", "matter", "wonder", "surprise")
	case "never", "neither", "nor", "cannot", "without", "nothing", "nobody", "none", "hardly", "insufficient", "unable", "unproven",
		"impossible", "fails", "failed", "fail", "failing", "refutes", "excludes", "stops", "little":
		return true
	case "too":
		return oneOf(next, "few", "little", "small", "early", "short", "wide", "imprecise", "uncertain")
	case "far":
		return next == "from"
	case "short":
		return next == "of"
	case "rather", "instead":
		return false
	}
	return strings.HasSuffix(w, "n't")
}

// hedged finds words that take back part of a claim, before the phrase in its
// clause or right behind it.
func (s *sentence) hedged(m match, first, last int) bool {
	for i := m.from - 1; i >= max(first, m.from-reach); i-- {
		if s.hedges(i) {
			return true
		}
	}
	for i := m.to; i < min(last, m.to+4); i++ {
		if s.hedges(i) || s.starts(i, "is|was|remains|are|were possible|likely|plausible|probable|conceivable") {
			return true
		}
	}
	return false
}

func (s *sentence) hedges(i int) bool {
	switch w := s.words[i].text; w {
	case "may", "might", "could":
		// "Could not" denies, "may be used" permits.
		return !s.starts(i+1, "not|never") && !s.starts(i+1, "now? be used|exchanged|replaced|substituted|swapped|sold")
	case "possibly", "perhaps", "maybe", "probably", "likely", "conceivably", "presumably", "potentially",
		"plausible", "possible", "apparently", "hint", "hints", "tentative", "tentatively", "preliminary", "seemingly":
		return true
	case "consistent", "compatible":
		return i+1 < len(s.words) && s.words[i+1].text == "with"
	default:
		return strings.HasPrefix(w, "suggest") || strings.HasPrefix(w, "appear") || strings.HasPrefix(w, "seem") || strings.HasPrefix(w, "speculat")
	}
}

func oneOf(word string, list ...string) bool {
	for _, w := range list {
		if w == word {
			return true
		}
	}
	return false
}
