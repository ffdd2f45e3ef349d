package claim

import (
	"fmt"
	"slices"

	"steelyard/protocol/card"
)

// This file is a table: the cards of claims, verdicts, readings and of what
// stands beside them.

const (
	practice = "common practice, no source"
	ours     = "this language, no outside source"
	byLimits = "The test and the interval are one: the claim is established exactly when the interval at 1 - 2·one_sided lies on that side, and limits are strict."
)

// example is a small invented record whose claim is the given one.
func example(claim, better, keys string) string {
	return `steelyard = 1

[record]
title   = "Invented example: ` + claim + `"
setting = "quality"
date    = 2026-04-12

[plan]
question = "What do these invented measurements settle?"
alpha    = { one_sided = 0.05, two_sided = 0.05 }

[plan.outcome.peel]
label    = "Seal peel strength"
unit     = "N"
measure  = "mean-difference"
groups   = ["new", "current"]
better   = "` + better + `"
smallest = 0.8
why      = "Invented: below 0.8 N a difference is lost in the spread between lots."

[plan.hypothesis.H1]
outcome = "peel"
claim   = "` + claim + `"
` + keys + `
[[result]]
study   = "Line 3, invented"
outcome = "peel"
date    = 2026-04-12
groups.new     = { n = 24, mean = 12.61, sd = 1.31 }
groups.current = { n = 24, mean = 12.10, sd = 1.18 }
`
}

// Cards explain the claims, their verdicts and readings, and two notes.
var Cards = slices.Concat(claimCards(), verdictCards(), readingCards(), []card.Card{
	{Kind: card.Diagnostic, Word: "S204", Title: "test and interval disagree at a point", Source: ours,
		Meaning: "The p-value and the interval stand on different sides of a point that the claim is about. It can happen where a test is not monotone in the tested value, where ties put a limit exactly on the point, or where the test exists at the null alone and the interval is another method's.",
		Formula: "p below the level, and the point inside the interval, or the other way round; a limit within 1e-9 of the point is let pass for tests that are continuous.",
		Repair:  "The verdict is the test's. Read the interval with care at that limit, or plan a method that has both."},
	{Kind: card.Diagnostic, Word: "S209", Title: "error of a contradicted equivalence", Source: ours,
		Meaning: "The region is so narrow for the precision reached that a truly equivalent effect at its edge could be called contradicted more often than the level says.",
		Formula: "α + P(Z > z_α + width/se) above 1.1·α, width of the region and se on the analysis scale.",
		Repair:  "Take a contradiction with that error. A larger study removes it."},
})

func claimCards() []card.Card {
	return []card.Card{
		{Kind: card.Claim, Word: "differs", Title: "not the null", Source: practice,
			Meaning:     "There is some effect, in either direction. It says nothing about size: a difference too small to matter is established as easily as one that matters, given enough data; the reading beside it tells them apart.",
			Formula:     "p = min(1, 2·min(p↑(null), p↓(null))) < two_sided. It is never contradicted. Interval at 1 - two_sided.",
			Assumptions: "Those of the method.",
			Example:     example("differs", "neither", "")},
		{Kind: card.Claim, Word: "superior", Title: "better than the null", Source: "ICH E9 (1998), section 3.3.2, from memory",
			Meaning:     "The effect is on the better side of no effect, by whatever amount.",
			Formula:     "p = p↑(null), for `better = \"lower\"` p↓(null), < one_sided. Contradicted when the p of the other side is below it.",
			Assumptions: "Those of the method. " + byLimits,
			Example:     example("superior", "higher", "")},
		{Kind: card.Claim, Word: "minimum-effect", Title: "better by more than the smallest effect that matters", Source: "Murphy and Myors 1999, from memory",
			Meaning:     "The whole interval lies beyond the smallest effect of interest: what was found is large enough to matter.",
			Formula:     "With B the limit of the region on the better side: p = p↑(B), for lower p↓(B), < one_sided. Contradicted when any benefit is shown to be below B.",
			Assumptions: "Those of the method; a smallest effect that was chosen before the results.",
			Example:     example("minimum-effect", "higher", "")},
		{Kind: card.Claim, Word: "noninferior", Title: "not worse than the margin", Source: "ICH E10 (2000), section 1.5.1, from memory",
			Meaning:     "A loss as large as the margin is excluded. It does not say that there is no loss: the reading beside it does, where the interval lies wholly on the harmful side.",
			Formula:     "With H the margin, else the region's limit on the harmful side: p = p↑(H), for lower p↓(H), < one_sided. Contradicted when worse than H is shown.",
			Assumptions: "Those of the method; a comparator that would have beaten doing nothing in this study too; a study that could have shown a difference.",
			Example:     example("noninferior", "higher", "margin  = 0.6\nmargin_why = \"Invented: six tenths of a newton are within what machines in use differ by.\"\n")},
		{Kind: card.Claim, Word: "equivalent", Title: "inside the region", Source: "Schuirmann 1987, from memory",
			Meaning:     "The effect is larger than the lower and smaller than the upper limit of the region: any difference is too small to matter.",
			Formula:     "p = max(p↑(low), p↓(high)) < one_sided: both one-sided tests must hold, each at the full level. Contradicted when wholly beyond one side is shown.",
			Assumptions: "Those of the method. The interval has level 1 - 2·one_sided, not 1 - one_sided.",
			Example:     example("equivalent", "neither", "")},
		{Kind: card.Claim, Word: "benefit-too-small", Title: "any benefit is below the smallest that matters", Source: ours,
			Meaning:     "An effect as good as the smallest of interest is excluded: it is not worth it. Harm is not excluded, and the record says so.",
			Formula:     "p = p↓(B), for lower p↑(B), < one_sided. Contradicted when minimum-effect is shown.",
			Assumptions: "Those of the method; a smallest effect that was chosen before the results.",
			Example:     example("benefit-too-small", "higher", "")},
		{Kind: card.Claim, Word: "below", Title: "below a limit", Source: practice,
			Meaning:     "The effect lies below `limit`: a rate below what is tolerated, a mean below a specification.",
			Formula:     "p = p↓(limit) < one_sided. Contradicted when p↑(limit) is.",
			Assumptions: "Those of the method. " + byLimits,
			Example:     example("below", "neither", "limit   = 2.0\n")},
		{Kind: card.Claim, Word: "above", Title: "above a limit", Source: practice,
			Meaning:     "The effect lies above `limit`.",
			Formula:     "p = p↑(limit) < one_sided. Contradicted when p↓(limit) is.",
			Assumptions: "Those of the method. " + byLimits,
			Example:     example("above", "neither", "limit   = -1.0\n")},
		{Kind: card.Claim, Word: "describe", Title: "shown, never judged", Source: ours,
			Meaning:     "Estimate and interval at `level`, without a test and without a verdict.",
			Formula:     "Interval at one-sided error (1 - level)/2 on each side.",
			Assumptions: "Those of the method.",
			Example:     example("describe", "neither", "")},
	}
}

func verdictCards() []card.Card {
	verdict := func(word, title, meaning, rule string) card.Card {
		return card.Card{Kind: card.Term, Word: word, Title: title, Meaning: meaning, Formula: rule, Source: ours}
	}
	return []card.Card{
		verdict("established", "verdict", "The data show what was claimed, at the stated error. It bounds how often such claims are wrong; it is no statement about the chance that this one is.",
			"The claim's p, adjusted in its family, is below its level; for tests that move in steps (ranks, permutations) at most its level, compared as counts."),
		verdict("suggested", "verdict of an exploratory claim", "As established, for a hypothesis whose role is exploratory: never adjusted, and a reason to test it anew.", "As `established`."),
		verdict("contradicted", "verdict", "The data show the opposite of what was claimed, at the same error.",
			"Not established, and a p against the claim is below its level. Within a family the values against are adjusted by Holm's procedure, except under `all`."),
		verdict("open", "verdict", "Neither shown nor contradicted. The interval says which values remain compatible. An open claim is no evidence of no effect.", "Neither of the others; also where nothing could be computed, with the reason."),
		verdict("pending", "verdict before results", "No result has arrived yet.", "No entry counts for the hypothesis."),
		verdict("described", "verdict of describe", "Shown and not judged.", "The claim is `describe`."),
		verdict("masked", "verdict before a planned look", "Results are known in total only until a planned look.", "The plan has looks, and no entry names one yet."),
		{Kind: card.Term, Word: "s-value", Title: "surprise of a p-value in bits", Source: "Shannon 1948; Greenland 2019; from memory",
			Meaning: "How many fair coins, all falling heads, would surprise as much as the p-value does. 4.3 bits are p = 0.05.",
			Formula: "-log₂ p, from ln p, printed with one decimal."},
		{Kind: card.Term, Word: "p-value function", Title: "p at every value of the effect", Source: "Birnbaum 1961; Poole 1987; from memory",
			Meaning: "For each value of the effect, how compatible the data are with it: the intervals of all levels in one curve. Its top is at the estimate; where it is above a level lies the interval of that level.",
			Formula: "Two-sided p at 201 values (33 for costly methods), equally spaced on the analysis scale between the limits at one-sided 0.0005, and at the claim's points and the limits at 50, 80, 95 and 99 %."},
		{Kind: card.Term, Word: "smallest margin", Title: "the margin at which the claim would just hold", Source: ours,
			Meaning: "How near or far the claim was: the smallest margin, found after the data, at which it would be established. It is not a claim.",
			Formula: "The limit of the interval that decides: on the harmful side for noninferior, on the better side for benefit-too-small, nearer to harm for minimum-effect; for equivalent the factor by which the region must be widened to hold the interval."},
		{Kind: card.Term, Word: "what next", Title: "what would settle an open claim", Source: "normal theory; from memory",
			Meaning: "How many subjects would establish an open claim with power 0.8 and 0.9 if the present estimate were true: in a new study alone, and added to the present ones. Adding to a finished test is a new plan and must be sealed as looks. Where the estimate lies against the claim no size would do.",
			Formula: "With e the distance of the estimate from the claim's point and I the information on the analysis scale: the smallest D with Φ((e(I + D) - z√(I + D))/√D) ≥ power, D in subjects at the present information per subject (I = 0 for a new study); for two points the chances of missing either are added."},
	}
}

// readingRule is the rule that all readings share.
const readingRule = "Of the points low, null and high, %d excluded from below (p↑ < a) and %d from above (p↓ < a), a the one-sided error of the claim. " +
	"For `better = \"lower\"` the two are exchanged; without a direction the words are higher and lower. Without a region only the null counts."

// readingCards are the ten readings for an outcome whose better direction is
// higher. There are no others: the points are ordered, so excluded ones lie
// together.
func readingCards() []card.Card {
	var out []card.Card
	for _, r := range []struct {
		above, below int
		name, words  string
	}{
		{3, 0, "clearly better", "Better, by more than the smallest effect that matters"},
		{2, 0, "better, size open", "Better; whether by enough to matter is not settled"},
		{2, 1, "slightly better", "Better, but by less than matters"},
		{1, 0, "not much worse", "Not worse by an amount that matters; whether it is better is not settled"},
		{1, 1, "too close to matter", "Any difference is smaller than matters; its direction is not settled"},
		{0, 0, "undecided", "A benefit that matters and a harm that matters both remain possible"},
		{0, 1, "not much better", "Not better by an amount that matters; whether it is worse is not settled"},
		{1, 2, "slightly worse", "Worse, but by less than matters"},
		{0, 2, "worse, size open", "Worse; whether by enough to matter is not settled"},
		{0, 3, "clearly worse", "Worse, by more than the smallest effect that matters"},
	} {
		out = append(out, card.Card{Kind: card.Term, Word: r.name, Title: "reading of an interval against null and region",
			Meaning: r.words + ". A reading stands beside the verdict and never replaces it.",
			Formula: fmt.Sprintf(readingRule, r.above, r.below), Source: ours})
	}
	return out
}
