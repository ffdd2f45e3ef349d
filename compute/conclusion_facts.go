package compute

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/wording"
)

// facts are what the verdicts and readings on one outcome establish of its
// effect. Signs are +1 above and -1 below, 0 for not established.
type facts struct {
	sign          int  // against the null
	beyond        int  // outside the region
	inside        bool // any difference is smaller than matters
	notWorse      bool // no harm that matters
	notMuchBetter bool // no benefit that matters
	limit         int  // against the limit of a below or above
	decided       bool // some claim is established or contradicted
	limitClaim    int  // which side a below or above claims
}

// better is the sign of benefit of an outcome.
func better(o *result.Outcome) int {
	switch o.Better {
	case "higher":
		return 1
	case "lower":
		return -1
	}
	return 0
}

// add enters what one hypothesis establishes.
func (f *facts) add(h *result.Hypothesis, o *result.Outcome) {
	b := better(o)
	if h.Claim == "below" {
		f.limitClaim = -1
	} else if h.Claim == "above" {
		f.limitClaim = 1
	}
	switch h.Verdict {
	case result.Established, result.Suggested:
		f.decided = true
		f.established(h, b)
	case result.Contradicted:
		f.decided = true
		f.contradicted(h, b)
	case result.Open:
		if h.PAdjusted.OK {
			return // the reading knows nothing of the adjustment
		}
	case result.Pending, result.Described, result.Masked:
		return
	}
	f.read(h.Reading, b)
}

func (f *facts) established(h *result.Hypothesis, b int) {
	switch h.Claim {
	case "differs":
		f.sign = side(h)
	case "superior":
		f.sign = b
	case "minimum-effect":
		f.sign, f.beyond = b, b
	case "noninferior":
		f.notWorse = true
	case "equivalent":
		f.inside = true
	case "benefit-too-small":
		f.notMuchBetter = true
	case "below":
		f.limit = -1
	case "above":
		f.limit = 1
	}
}

func (f *facts) contradicted(h *result.Hypothesis, b int) {
	switch h.Claim {
	case "superior":
		f.sign = -b
	case "minimum-effect":
		f.notMuchBetter = true
	case "noninferior":
		f.sign, f.beyond = -b, -b
	case "equivalent":
		f.sign = side(h)
		f.beyond = f.sign
	case "benefit-too-small":
		f.sign, f.beyond = b, b
	case "below":
		f.limit = 1
	case "above":
		f.limit = -1
	}
}

// side is where the estimate of a hypothesis lies against its null, by its
// reading or, without one, by the margin that it left behind.
func side(h *result.Hypothesis) int {
	switch {
	case h.Reading.Above > h.Reading.Below:
		return 1
	case h.Reading.Below > h.Reading.Above:
		return -1
	}
	return 0
}

// read adds what the reading says beside the verdict.
func (f *facts) read(r result.Reading, b int) {
	if !r.OK {
		return
	}
	if !r.HasRegion {
		if r.Above > 0 {
			f.sign = 1
		} else if r.Below > 0 {
			f.sign = -1
		}
		return
	}
	switch {
	case r.Above >= 2:
		f.sign = 1
	case r.Below >= 2:
		f.sign = -1
	}
	switch {
	case r.Above == 3:
		f.beyond = 1
	case r.Below == 3:
		f.beyond = -1
	}
	f.inside = f.inside || r.Above >= 1 && r.Below >= 1
	notLow, notHigh := r.Above >= 1, r.Below >= 1
	if b < 0 {
		notLow, notHigh = notHigh, notLow
	}
	if b != 0 {
		f.notWorse = f.notWorse || notLow
		f.notMuchBetter = f.notMuchBetter || notHigh
	}
}

// support is how well facts bear out a phrase, from worst to best.
type support uint8

const (
	none support = iota
	contrary
	someStudy // in at least one study
	suggested
	full
)

// support weighs one phrase against the facts on one outcome.
func (k *checker) support(p wording.Phrase, o *result.Outcome, f facts) support {
	b := better(o)
	says := k.sign(p, o)
	switch p.Class {
	case wording.NoEffect:
		return noEffect(p, f, b, says)
	case wording.Equivalence:
		return yes(f.inside && (!p.Exact || p.Within) || f.notWorse && p.Within && !p.Exact)
	case wording.Noninferiority:
		if k.flipped(p, o) {
			return yes(f.notMuchBetter || f.inside || b != 0 && f.sign == -b)
		}
		return yes(f.notWorse || f.inside || b != 0 && f.sign == b)
	case wording.Difference:
		return yes(f.sign != 0 || f.beyond != 0)
	case wording.Superiority, wording.Harm, wording.Change:
		return direction(f.sign, says)
	case wording.Relevance:
		if f.beyond != 0 && says != 0 {
			return direction(f.beyond, says)
		}
		return yes(f.beyond != 0)
	case wording.TooSmall:
		return yes(f.inside || p.Benefit && f.notMuchBetter || p.HarmOnly && f.notWorse)
	case wording.Limit:
		return limit(p, f)
	case wording.Safety:
		return yes(aboutSafety(o) && (f.notWorse || f.inside || b != 0 && f.sign == b || f.limit != 0 && f.limit == f.limitClaim))
	case wording.Trend:
		return yes(f.decided || f.sign != 0)
	case wording.NotSignificant, wording.Proof, wording.Truth, wording.Misread, wording.Failure, wording.Count, wording.Average,
		wording.Causation, wording.Generality, wording.Verdict, wording.Decision:
		return full // decided without an outcome
	}
	panic("compute: unknown class of phrase")
}

func yes(ok bool) support {
	if ok {
		return full
	}
	return none
}

// noEffect weighs the denial of an effect. Flat, no result bears it out; the
// denial of one direction is borne out by the other, or by an exclusion of it.
func noEffect(p wording.Phrase, f facts, b, says int) support {
	if p.Negated && says != 0 {
		switch {
		case f.sign == -says:
			return full
		case p.Within && (f.inside || says == b && f.notMuchBetter || says == -b && f.notWorse):
			return full
		case says == -b && f.notWorse: // "no more frequent", of something bad
			return full
		}
	}
	return none
}

func direction(fact, says int) support {
	switch {
	case fact == 0:
		return none
	case says == 0 || says == fact:
		return full
	}
	return contrary
}

// limit weighs "above" and "below". Where no claim has a limit, such words
// only describe.
func limit(p wording.Phrase, f facts) support {
	if f.limitClaim == 0 {
		return full
	}
	says := 0
	switch p.Direction {
	case wording.Higher:
		says = 1
	case wording.Lower:
		says = -1
	case wording.Better:
		says = f.limitClaim
	case wording.Worse:
		says = -f.limitClaim
	}
	return yes(f.limit != 0 && (says == 0 || says == f.limit))
}

// sign is the sign of the effect that a phrase claims (or denies): first group
// against second. 0 where its words do not say.
func (k *checker) sign(p wording.Phrase, o *result.Outcome) int {
	s := 0
	switch p.Direction {
	case wording.Higher:
		s = 1
	case wording.Lower:
		s = -1
	case wording.Better:
		s = better(o)
	case wording.Worse:
		s = -better(o)
	}
	if (p.Direction == wording.Higher || p.Direction == wording.Lower) && len(p.Outcomes) == 0 && (p.Subject == "" || p.Object == "" || len(k.res.Outcomes) > 1) {
		return 0 // what is higher is not said
	}
	if k.flipped(p, o) {
		return -s
	}
	return s
}

// flipped reports whether the phrase is said of the second group.
func (k *checker) flipped(p wording.Phrase, o *result.Outcome) bool {
	switch {
	case o.Groups[1] == "":
		return false
	case p.Subject != "":
		return p.Subject == o.Groups[1]
	}
	return p.Object != "" && p.Object == o.Groups[0]
}

// safetyWords are found in the labels of outcomes that speak of safety.
var safetyWords = []string{"adverse", "safe", "harm", "risk", "infect", "bleed", "event", "complication", "death", "mortal", "toxic", "side effect", "injur", "leak", "fail", "incident", "accident", "residual", "contamin"}

func aboutSafety(o *result.Outcome) bool {
	label := strings.ToLower(o.Label)
	for _, w := range safetyWords {
		if strings.Contains(label, w) {
			return true
		}
	}
	return false
}
