package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// claimed is the claim as page one heads it. It is marked as a claim, so that
// it is not taken for a finding, and so that names the user gave stay as typed.
func (v voice) claimed() string {
	if v.h.Claim == "describe" {
		return capital(v.claim()) + "."
	}
	return "Claim: " + v.atLeastOne() + v.claim() + "."
}

// read reports whether a judgement is spoken of by null and region. A claim
// about a limit is not, unless a region was stated: the limit is its measure.
func (v voice) read(j *result.Judged) bool {
	if !judged(j.Verdict) {
		return false
	}
	return j.Reading.HasRegion || v.h.Claim != "below" && v.h.Claim != "above"
}

// reading is the reading of a judgement that is spoken of in that way.
func (v voice) reading(j *result.Judged) (name, words string) {
	if !v.read(j) {
		return "", ""
	}
	return reading(j.Reading, v.o.Better)
}

// worstLine says that a combined claim is open only because its least
// favourable line does not agree, "" otherwise.
func (v voice) worstLine() string {
	if v.h.Evidence != "combined" || v.h.Verdict != result.Open || v.h.Reason != nil || !v.h.P.OK || v.h.P.P >= v.h.Alpha {
		return ""
	}
	for i := range v.h.Alternatives {
		a := &v.h.Alternatives[i]
		if a.Because == "worst-case" && a.Verdict != result.Established && a.Verdict != result.Suggested {
			s := "As reported, the p-values would carry the claim (" + number.PEquals(v.h.P, v.h.Alpha) + "); with what is not fully known at its least favourable value they do not"
			if a.P.OK {
				s += " (" + number.PEquals(a.P, v.h.Alpha) + ")"
			}
			return s + ", and only for that the claim is open."
		}
	}
	return ""
}

// changedSince names the changes since the seal that touch a claim and were
// not declared.
func (c *composer) changedSince(h *result.Hypothesis) []string {
	var q []string
	for i := range c.res.Seal.Changes {
		ch := &c.res.Seal.Changes[i]
		if !ch.Declared && !ch.Wording && c.touches(h, ch.Path) {
			q = append(q, "plan changed after the seal, undeclared")
			break
		}
	}
	for i := range c.res.Seal.EditedResults {
		e := &c.res.Seal.EditedResults[i]
		if !e.Declared && e.Outcome == h.Outcome {
			q = append(q, "sealed result changed, undeclared")
			break
		}
	}
	return q
}

// touches reports whether a key of the plan bears on a claim: its own keys,
// those of its outcome and how its evidence is put together, the error level
// that it uses, its sets and filters, and the families it belongs to.
func (c *composer) touches(h *result.Hypothesis, path string) bool {
	under := func(key string) bool {
		return path == key || strings.HasPrefix(path, key+".") || strings.HasPrefix(path, key+"[") || strings.HasPrefix(key, path+".")
	}
	for _, key := range []string{"plan.hypothesis." + h.Name, "plan.outcome." + h.Outcome, "plan.pooling." + h.Outcome, "plan.combination." + h.Outcome, "plan.data", "plan.looks"} {
		if under(key) {
			return true
		}
	}
	if strings.HasPrefix(path, "plan.set.") || path == "plan.set" {
		return h.Set != "" || len(h.BySet) > 0
	}
	side := "one_sided"
	if h.TwoSided {
		side = "two_sided"
	}
	if under("plan.alpha." + side) {
		return h.Claim != "describe"
	}
	for i := range c.res.Families {
		f := &c.res.Families[i]
		for _, m := range f.Members {
			if m.Hypothesis == h.Name && under("plan.family."+f.Name) {
				return true
			}
		}
	}
	return false
}

// methodName is the word of a method as it is read; the parts of a pooled one
// (model, estimator, interval or weights) stand apart.
func methodName(word string) string {
	for _, model := range []string{"random", "common"} {
		rest, ok := strings.CutPrefix(word, model+"-")
		if !ok {
			continue
		}
		for _, between := range []string{"reml", "paule-mandel", "dersimonian-laird", "sidik-jonkman"} {
			if interval, ok := strings.CutPrefix(rest, between+"-"); ok {
				return model + ", " + between + ", " + interval
			}
		}
		return model + ", " + rest
	}
	return word
}

// pluralWord is one of two words by number.
func pluralWord(n int, one, many string) string {
	if n == 1 {
		return one
	}
	return many
}

// formula writes the minus signs of a card's formula: a hyphen between blanks
// or before a digit. Hyphens within words stay.
func formula(s string) string {
	r := []rune(s)
	for i, c := range r {
		if c != '-' || i == 0 || i+1 == len(r) {
			continue
		}
		spaced := r[i-1] == ' ' && r[i+1] == ' '
		power := r[i-1] == 'e' && i > 1 && r[i-2] >= '0' && r[i-2] <= '9' // 1e-8
		if spaced || !power && r[i+1] >= '0' && r[i+1] <= '9' {
			r[i] = '−'
		}
	}
	return string(r)
}
