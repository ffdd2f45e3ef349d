package compute

import (
	"fmt"
	"slices"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/wording"
)

// explain says what is wrong with a phrase and how to put it.
func (k *checker) explain(code string, p wording.Phrase, about []*result.Hypothesis) (why, repair string) {
	why = says[code]
	if p.Exact && slices.ContainsFunc(about, func(h *result.Hypothesis) bool { return h.Claim == "equivalent" && h.Verdict == result.Established }) {
		why = "calls the two the same in every respect, where a difference inside the region remains possible"
	}
	if len(about) > 0 {
		why += "; " + k.standing(about)
	}
	return why, "write for example: “" + k.sentence(code, about) + "”"
}

// says is what each code holds against a phrase.
var says = map[string]string{
	wording.NoEffect.Code():       "says that there is no effect, which no result can show",
	wording.NotSignificant.Code(): "makes a finding of the lack of significance",
	wording.Proof.Code():          "speaks of proof or certainty, which no test gives",
	wording.Difference.Code():     "claims an effect that is not established",
	wording.Superiority.Code():    "claims an advantage or disadvantage that is not established",
	wording.Relevance.Code():      "says that the effect is large enough to matter, which is not established",
	wording.Equivalence.Code():    "calls the two the same, which is not established",
	wording.Noninferiority.Code(): "says that it is not worse, which is not established",
	wording.Trend.Code():          "makes a finding of a result that decides nothing",
	wording.Causation.Code():      "names a cause, though the record does not say that groups were formed at random",
	wording.Safety.Code():         "says that it is safe, which is not established",
	wording.Generality.Code():     "speaks of every case, where the results speak of those studied",
	wording.Misread.Code():        "reads a p-value or an interval as the probability of a claim",
	wording.OppositeDirection:     "says the opposite of what is established",
	wording.TooSmall.Code():       "says that the effect is too small to matter, which is not established",
	wording.Limit.Code():          "puts the value on a side of the limit that is not established",
	wording.Truth.Code():          "speaks of the truth of a hypothesis, which a test does not decide",
	wording.Failure.Code():        "calls an open or unwelcome result a failure",
	wording.Count.Code():          "counts studies, though each may be open for lack of data",
	wording.Average.Code():        "speaks of all studies, where combined p-values establish an effect in at least one",
	wording.OnlySuggested:         "states as a fact what an exploratory analysis can only suggest",
	wording.NoResults:             "says how a comparison came out that has no results to be read yet",
	wording.NotJudged:             "makes a claim for which no hypothesis was planned",
	wording.Verdict.Code():        "says that a claim is established which is not",
}

// standing says how the hypotheses stand.
func (k *checker) standing(about []*result.Hypothesis) string {
	var parts []string
	for _, h := range about[:min(3, len(about))] {
		s := fmt.Sprintf("%s (%s, %s) is %s", h.Name, k.outcome(h.Outcome).Label, claimLabel(h.Claim), h.Verdict)
		if h.Verdict == result.Open {
			s += k.compatible(h, ", and ", " remain compatible with the data")
		}
		parts = append(parts, s)
	}
	if len(about) > 3 {
		parts = append(parts, fmt.Sprintf("and %d more", len(about)-3))
	}
	return strings.Join(parts, "; ")
}

// compatible puts the interval of a hypothesis between two words; "" without one.
func (k *checker) compatible(h *result.Hypothesis, before, after string) string {
	if !h.Low.OK || !h.High.OK {
		return ""
	}
	unit := k.outcome(h.Outcome).Unit
	if unit != "" {
		unit = " " + unit
	}
	return fmt.Sprintf("%svalues from %.3g to %.3g%s%s", before, h.Low.V, h.High.V, unit, after)
}

// sentence offers wording that the analysis supports.
func (k *checker) sentence(code string, about []*result.Hypothesis) string {
	switch code {
	case wording.Misread.Code():
		return "At the planned error level the data show …, with the estimate and its interval."
	case wording.Causation.Code():
		return "… went with … in this comparison."
	case wording.Generality.Code():
		return "In the population that was studied …"
	case wording.Count.Code():
		return "The studies together give an estimate of …, with its interval."
	case wording.Average.Code():
		return "In at least one of the studies …"
	case wording.NoResults:
		return "There are no results to be read yet."
	case wording.NotJudged:
		return "The estimate is …; no claim was planned for it."
	}
	if len(about) == 0 {
		return "The data leave open whether …"
	}
	h := about[0]
	label := k.outcome(h.Outcome).Label
	claim := plainClaim[h.Claim]
	if h.Evidence == "combined" {
		claim += " in at least one study"
	}
	switch h.Verdict {
	case result.Established:
		return fmt.Sprintf("For %s the data show %s, at the planned error level.", lowerFirst(label), claim)
	case result.Suggested:
		return fmt.Sprintf("For %s this exploratory analysis suggests %s.", lowerFirst(label), claim)
	case result.Contradicted:
		return fmt.Sprintf("For %s the data show the opposite of %s.", lowerFirst(label), claim)
	case result.Open:
		return fmt.Sprintf("For %s the data leave %s open%s.", lowerFirst(label), claim, k.compatible(h, "; ", " remain compatible with them"))
	case result.Pending, result.Masked:
		return "There are no results to be read yet."
	case result.Described:
		return "The estimate is …; no claim was planned for it."
	}
	panic("compute: unknown verdict")
}

// plainClaim names what each claim claims.
var plainClaim = map[string]string{
	"differs": "a difference", "superior": "superiority", "minimum-effect": "a benefit that matters", "noninferior": "noninferiority by the margin",
	"equivalent": "equivalence within the region", "benefit-too-small": "a benefit too small to matter", "below": "a value below the limit",
	"above": "a value above the limit", "describe": "a description",
}

// lowerFirst puts a label into a sentence: names in capitals stay.
func lowerFirst(s string) string {
	if len(s) > 1 && s[0] >= 'A' && s[0] <= 'Z' && s[1] >= 'a' && s[1] <= 'z' {
		return string(s[0]+'a'-'A') + s[1:]
	}
	return s
}
