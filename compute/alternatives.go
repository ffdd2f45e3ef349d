package compute

import (
	"slices"

	"steelyard/compute/claim"
	"steelyard/compute/pool"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// smallEnough is the largest number of subjects for which costly methods are
// run beside the planned one.
const smallEnough = 200

// fewEnough is the same for permutations, which are drawn by the 100 000.
const fewEnough = 40

// costly are the methods whose work grows fast with the numbers.
var costly = []string{"unconditional", "boschloo", "permutation", "wilcoxon-exact", "signed-rank-exact"}

// byMethod begins the reason of an alternative by another method.
const byMethod = "method:"

// alternatives decides the claim again under other choices: the least
// favourable values of a combination, left-out results kept, and the other
// valid methods of the measure or models of the pool.
func (r *run) alternatives(t *trial) []result.Judged {
	if r.plain {
		return nil
	}
	var out []result.Judged
	o := r.rec.OutcomeNamed(t.h.Outcome.V)
	if t.deciding >= 0 && t.bySet[t.deciding].worst != nil {
		at := t.bySet[t.deciding]
		at.a, at.worst, at.because = *at.worst, nil, "worst-case"
		out = append(out, t.judged(r, at))
	}
	if r.leftOut(t.h, o) {
		for _, at := range t.bySet {
			alt := r.again(t, at.set, "left-out-kept", r.entriesOf(t.h, o, at.set, true))
			out = append(out, t.judged(r, alt))
		}
	}
	return append(append(out, r.otherMethods(t, o)...), r.otherModels(t)...)
}

// again analyses other entries in the same way.
func (r *run) again(t *trial, set, because string, found []entry) attempt {
	o := r.rec.OutcomeNamed(t.h.Outcome.V)
	at := attempt{set: set, because: because, spec: r.specOf(t.h, o, t.question.Error())}
	r.gather(&at, t.h, t.question, found)
	return at
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
	entries := r.entriesOf(t.h, o, decided.set, false)
	if len(entries) != 1 || decided.inf == nil || entries[0].res.Effect != nil {
		return nil
	}
	var out []result.Judged
	for _, word := range decided.spec.measure.Methods {
		if word == decided.inf.Word || !offers(word, decided) {
			continue
		}
		at := attempt{set: decided.set, because: byMethod + word, spec: decided.spec}
		at.spec.method, at.spec.stated = word, true
		r.gather(&at, t.h, t.question, entries)
		if at.problem == nil && at.inf != nil && at.inf.Word == word {
			out = append(out, t.judged(r, at))
		}
	}
	return out
}

// offers reports whether a method may be run beside the planned one. With
// covariates or strata only the methods that respect them may.
func offers(word string, decided attempt) bool {
	adjusted := decided.spec.strata != "" || len(decided.spec.adjust) > 0
	switch word {
	case "linear", "linear-hc3":
		return adjusted
	case "mantel-haenszel":
		return false
	case "any", "normal":
		return false // another distribution is another plan
	}
	if adjusted && decided.spec.measure.Word != "hazard-ratio" {
		return false
	}
	if word == "permutation" {
		return decided.inf.N <= fewEnough
	}
	return decided.inf.N <= smallEnough || !slices.Contains(costly, word)
}

// otherModels decides a claim on pooled evidence by every estimator of the
// variance between studies with either interval, and by the common effect.
func (r *run) otherModels(t *trial) []result.Judged {
	if t.deciding < 0 || t.bySet[t.deciding].pool == nil || t.out.Claim == "describe" {
		return nil
	}
	decided := t.bySet[t.deciding]
	p := decided.pool
	var out []result.Judged
	for _, o := range models() {
		word := p.word(o)
		f, problem := p.fitOf(o, p.studies)
		if word == decided.inf.Word || problem != nil {
			continue
		}
		at := attempt{set: decided.set, because: byMethod + word, spec: decided.spec, studies: decided.studies}
		at.inf = p.inference(o, f, t.question.Error())
		at.a = claim.Assess(at.inf, t.question)
		out = append(out, t.judged(r, at))
	}
	return out
}

// models are the models that stand beside the planned one.
func models() []pool.Options {
	out := []pool.Options{{}}
	for _, between := range []pool.Between{pool.REML, pool.PauleMandel, pool.DerSimonianLaird, pool.SidikJonkman} {
		for _, interval := range []pool.Interval{pool.HartungKnapp, pool.Normal} {
			out = append(out, pool.Options{Random: true, Between: between, Interval: interval, Guard: true})
		}
	}
	return out
}

// entriesOf are the entries that a hypothesis reads in a set.
func (r *run) entriesOf(h *record.Hypothesis, o *record.Outcome, set string, withLeftOut bool) []entry {
	var found []entry
	for _, e := range r.entries(o.Name, set, withLeftOut) {
		if h.Counts(e.res.Study.V) {
			found = append(found, e)
		}
	}
	return found
}
