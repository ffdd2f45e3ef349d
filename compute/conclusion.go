package compute

import (
	"fmt"
	"slices"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
	"steelyard/protocol/wording"
)

// conclusion compares the user's own words with what was computed, and raises
// every phrase that claims more than the analysis supports, at its place.
func (r *run) conclusion() {
	c := r.rec.Conclusion
	if c == nil || strings.TrimSpace(c.Text.V) == "" {
		return
	}
	if !wording.IsEnglish(c.Text.V) {
		r.notes = append(r.notes, diag.Note(wording.NotChecked, c.Text.Span, "the conclusion does not read as English; it is printed and not checked"))
		return
	}
	r.res.Conclusion.Checked = true
	place := wording.Places(r.in.Source, c.Text)
	k := checker{res: r.res, randomised: r.randomised(), beliefs: len(r.rec.Plan.Priors) > 0}
	for _, f := range k.check(c.Text.V) {
		d := diag.Diagnostic{Code: f.code, Severity: diag.SeverityWarning, Span: place(f.at.Start, f.at.End),
			Message: fmt.Sprintf("“%s” %s", strings.Join(strings.Fields(c.Text.V[f.at.Start:f.at.End]), " "), f.why), Help: f.repair}
		r.notes = append(r.notes, d)
	}
}

// randomised reports whether the record says that groups were formed at random.
func (r *run) randomised() bool {
	if strings.Contains(strings.ToLower(r.rec.Plan.Design.V), "random") {
		return true
	}
	return slices.ContainsFunc(r.res.Totals, func(t result.GroupTotal) bool { return t.Randomised.OK })
}

// overclaim is a phrase that claims more than the analysis supports.
type overclaim struct {
	code   string
	at     wording.Phrase
	why    string
	repair string
}

// checker compares a text with a result.
type checker struct {
	res        *result.Result
	randomised bool
	beliefs    bool
}

// terms are the names that the record gives to groups, outcomes and hypotheses.
func (k *checker) terms() (out []wording.Term) {
	var groups []string
	for _, o := range k.res.Outcomes {
		out = append(out, wording.Term{Kind: wording.Outcome, Name: o.Name, Words: []string{o.Label, o.Name}})
		for _, g := range o.Groups {
			if g != "" && !slices.Contains(groups, g) {
				groups = append(groups, g)
				out = append(out, wording.Term{Kind: wording.Group, Name: g, Words: []string{g}})
			}
		}
	}
	for _, h := range k.res.Hypotheses {
		out = append(out, wording.Term{Kind: wording.Hypothesis, Name: h.Name, Words: []string{h.Name}})
	}
	return out
}

// check returns the overclaims of a text, one per code and sentence.
func (k *checker) check(text string) (out []overclaim) {
	type seen struct {
		code     string
		sentence int
	}
	done := map[seen]bool{}
	k.randomised = k.randomised || saysRandom(text)
	for _, p := range wording.Find(text, k.terms()...) {
		if len(p.Outcomes) == 0 && ofSpeed(text[p.Start:p.End]) && !k.aboutTime() {
			continue // "the method is faster" is no claim on an outcome that is not about time
		}
		f, bad := k.judge(p)
		if !bad || done[seen{f.code, p.Sentence}] {
			continue
		}
		done[seen{f.code, p.Sentence}] = true
		out = append(out, f)
	}
	return out
}

// ofSpeed reports whether a phrase speaks of speed or effort.
func ofSpeed(phrase string) bool {
	first, _, _ := strings.Cut(strings.ToLower(phrase), " ")
	return slices.Contains([]string{"faster", "quicker", "sooner", "slower", "speeds"}, first)
}

// aboutTime reports whether an outcome speaks of time or speed.
func (k *checker) aboutTime() bool {
	return slices.ContainsFunc(k.res.Outcomes, func(o result.Outcome) bool {
		label := strings.ToLower(o.Label)
		return slices.ContainsFunc([]string{"time", "speed", "duration", "delay", "rate", "days", "hours"}, func(w string) bool { return strings.Contains(label, w) })
	})
}

// saysRandom reports whether the text itself says that groups were formed at random.
func saysRandom(text string) bool {
	low := strings.ToLower(text)
	for _, not := range []string{"not randomi", "non-randomi", "nonrandomi", "without randomi", "never randomi"} {
		if strings.Contains(low, not) {
			return false
		}
	}
	return strings.Contains(low, "randomised") || strings.Contains(low, "randomized")
}

// about are the hypotheses that a phrase speaks of: those it names, those on
// the outcomes it names, those on the outcomes named last, else the primary ones.
func (k *checker) about(p wording.Phrase) (list []*result.Hypothesis, named bool) {
	pick := func(want func(*result.Hypothesis) bool) (out []*result.Hypothesis) {
		for i := range k.res.Hypotheses {
			if want(&k.res.Hypotheses[i]) {
				out = append(out, &k.res.Hypotheses[i])
			}
		}
		return out
	}
	if len(p.Hypotheses) > 0 {
		return pick(func(h *result.Hypothesis) bool { return slices.Contains(p.Hypotheses, h.Name) }), true
	}
	for _, outcomes := range [][]string{p.Outcomes, p.Topic} {
		if len(outcomes) > 0 {
			return pick(func(h *result.Hypothesis) bool { return slices.Contains(outcomes, h.Outcome) }), true
		}
	}
	if list = pick(func(h *result.Hypothesis) bool { return h.Role == "" || h.Role == "primary" }); len(list) == 0 {
		list = pick(func(*result.Hypothesis) bool { return true })
	}
	return list, false
}

// judge decides on one phrase; bad where it claims too much.
func (k *checker) judge(p wording.Phrase) (f overclaim, bad bool) {
	if (p.Force != wording.Stated && p.Force != wording.Suggested) || p.Class == wording.Decision {
		return f, false
	}
	about, named := k.about(p)
	code := k.code(p, about, named)
	if code == "" {
		return f, false
	}
	f = overclaim{code: code, at: p}
	f.why, f.repair = k.explain(code, p, about)
	return f, true
}

// code is the code under which the phrase is raised, "" for none.
func (k *checker) code(p wording.Phrase, about []*result.Hypothesis, named bool) string {
	if len(about) > 0 && all(about, func(h *result.Hypothesis) bool { return h.Verdict == result.Pending || h.Verdict == result.Masked }) {
		switch p.Class {
		case wording.Average, wording.Causation, wording.Generality, wording.Proof, wording.Decision:
			return ""
		}
		return wording.NoResults
	}
	switch p.Class { // whatever the verdict is
	case wording.Count:
		if p.AtLeastOne {
			return ""
		}
		return p.Class.Code()
	case wording.Proof, wording.Truth, wording.Failure, wording.Generality:
		return p.Class.Code()
	case wording.Misread:
		if k.beliefs {
			return ""
		}
		return p.Class.Code()
	case wording.Causation:
		if k.randomised {
			return ""
		}
		return p.Class.Code()
	case wording.NotSignificant:
		if p.Explained {
			return ""
		}
		return p.Class.Code()
	case wording.Average:
		if len(about) > 0 && !p.AtLeastOne && all(about, func(h *result.Hypothesis) bool { return h.Evidence == "combined" }) {
			return p.Class.Code()
		}
		return ""
	case wording.Verdict:
		return verdictCode(about)
	}
	if p.Observed && (p.Class == wording.Change || p.Class == wording.Limit || p.Class == wording.Difference) {
		return ""
	}
	judged := slices.DeleteFunc(slices.Clone(about), func(h *result.Hypothesis) bool { return h.Verdict == result.Described })
	if len(judged) == 0 {
		if p.Class == wording.Limit || len(k.res.Hypotheses) == 0 && !named {
			return ""
		}
		return wording.NotJudged
	}
	return k.supported(p, judged)
}

func verdictCode(about []*result.Hypothesis) string {
	switch {
	case len(about) == 0:
		return ""
	case all(about, func(h *result.Hypothesis) bool { return h.Verdict == result.Established }):
		return ""
	case all(about, func(h *result.Hypothesis) bool {
		return h.Verdict == result.Established || h.Verdict == result.Suggested
	}):
		return wording.OnlySuggested
	}
	return wording.Verdict.Code()
}

func all(list []*result.Hypothesis, ok func(*result.Hypothesis) bool) bool {
	return !slices.ContainsFunc(list, func(h *result.Hypothesis) bool { return !ok(h) })
}

// supported weighs the phrase against everything established of its outcomes.
// A phrase that names no outcome needs support by one of them.
func (k *checker) supported(p wording.Phrase, judged []*result.Hypothesis) string {
	best, mixed := none, false
	for _, o := range outcomesOf(judged) {
		firm, weak := facts{}, facts{}
		combined := true
		for _, h := range judged {
			if h.Outcome != o {
				continue
			}
			combined = combined && h.Evidence == "combined"
			if h.Verdict == result.Suggested {
				weak.add(h, k.outcome(o))
			} else {
				firm.add(h, k.outcome(o))
				weak.add(h, k.outcome(o))
			}
		}
		firm.limitClaim = weak.limitClaim
		s := k.support(p, k.outcome(o), firm)
		if s != full && k.support(p, k.outcome(o), weak) == full {
			s = suggested
		}
		if s == full && combined && !p.AtLeastOne {
			s = someStudy
		}
		mixed = mixed || s == contrary
		best = max(best, s)
	}
	switch best {
	case full:
		return ""
	case suggested:
		if p.Force == wording.Suggested {
			return ""
		}
		return wording.OnlySuggested
	case someStudy:
		return wording.Average.Code()
	case contrary:
		return wording.OppositeDirection
	case none:
		if mixed {
			return wording.OppositeDirection
		}
	}
	if o := k.outcome(judged[0].Outcome); p.Class == wording.NoEffect && p.Negated && better(o) != 0 && k.sign(p, o) == -better(o) {
		return wording.Noninferiority.Code() // "no more frequent", of something bad
	}
	return p.Class.Code()
}

func outcomesOf(list []*result.Hypothesis) (out []string) {
	for _, h := range list {
		if !slices.Contains(out, h.Outcome) {
			out = append(out, h.Outcome)
		}
	}
	return out
}

func (k *checker) outcome(name string) *result.Outcome {
	for i := range k.res.Outcomes {
		if k.res.Outcomes[i].Name == name {
			return &k.res.Outcomes[i]
		}
	}
	return &result.Outcome{Name: name}
}

// claimLabel is a claim for readers.
func claimLabel(word string) string {
	if c := record.ClaimOf(word); c != nil {
		return c.Label
	}
	return word
}
