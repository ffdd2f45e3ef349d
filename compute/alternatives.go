package compute

import (
	"slices"

	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// smallEnough is the largest number of subjects for which costly methods are
// run beside the planned one.
const smallEnough = 200

// costly are the methods whose work grows fast with the numbers.
var costly = []string{"unconditional", "boschloo", "permutation", "wilcoxon-exact", "signed-rank-exact"}

// alternatives decides the claim again under other choices: with left-out
// results kept, and by the other valid methods of the measure.
func (r *run) alternatives(t *trial) []result.Judged {
	var out []result.Judged
	o := r.rec.OutcomeNamed(t.h.Outcome.V)
	if r.leftOut(t.h, o) {
		for i := range max(1, len(t.bySet)) {
			set := ""
			if i < len(t.bySet) {
				set = t.bySet[i].set
			}
			at := r.attempt(t.h, o, t.question, set, true)
			at.because = "left-out-kept"
			out = append(out, t.judged(at))
		}
	}
	return append(out, r.otherMethods(t, o)...)
}

func (t *trial) judged(at attempt) result.Judged {
	j := t.numbers(at)
	j.Verdict = t.verdictOf(at)
	return j
}

func (r *run) leftOut(h *record.Hypothesis, o *record.Outcome) bool {
	return slices.ContainsFunc(r.rec.Results, func(res *record.Result) bool {
		return res.LeaveOut.Stated && res.Outcome.V == o.Name && h.Counts(res.Study.V)
	})
}

// otherMethods runs every other method of the measure on the deciding entry.
// A method that the data or the question do not allow is left out.
func (r *run) otherMethods(t *trial, o *record.Outcome) []result.Judged {
	if t.deciding < 0 || t.out.Evidence != "single" || t.out.Claim == "describe" {
		return nil
	}
	decided := t.bySet[t.deciding]
	entries := r.entriesOf(t.h, o, decided.set)
	if len(entries) != 1 || decided.inf == nil || decided.spec.strata != "" || len(decided.spec.adjust) > 0 {
		return nil
	}
	in := r.input(entries[0], decided.spec)
	if in.Given != nil {
		return nil
	}
	var out []result.Judged
	for _, word := range decided.spec.measure.Methods {
		if word == decided.inf.Word || !r.offers(word, in, decided) {
			continue
		}
		at := attempt{set: decided.set, because: "method:" + word, spec: decided.spec, studies: decided.studies}
		at.spec.method, at.spec.stated = word, true
		r.gather(&at, t.h, t.question, entries)
		if at.problem == nil && at.inf != nil && at.inf.Word == word {
			out = append(out, t.judged(at))
		}
	}
	return out
}

// offers reports whether a method may be run beside the planned one.
func (r *run) offers(word string, in effect.Input, decided attempt) bool {
	switch word {
	case "linear", "linear-hc3", "mantel-haenszel":
		return false
	case "any", "normal":
		return false // another distribution is another plan
	}
	return decided.inf.N <= smallEnough || !slices.Contains(costly, word)
}

func (r *run) entriesOf(h *record.Hypothesis, o *record.Outcome, set string) []entry {
	var found []entry
	for _, e := range r.entries(o.Name, set, false) {
		if h.Counts(e.res.Study.V) {
			found = append(found, e)
		}
	}
	return found
}
