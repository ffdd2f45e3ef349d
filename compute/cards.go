package compute

import "steelyard/protocol/card"

// This file is a table: the cards of what this package itself decides.

const (
	practice = "common practice, no source"
	ours     = "this language, no outside source"
)

// sensitivityExample is a small invented record with one sensitivity
// analysis of its hypothesis.
func sensitivityExample(keys, result string) string {
	return `steelyard = 1

[record]
title   = "Invented example: sensitivity"
setting = "other"
date    = 2026-05-04

[plan]
question = "Does the verdict of this invented trial hang on a choice?"
alpha    = { one_sided = 0.025 }

[plan.outcome.healed]
label    = "Healed"
measure  = "risk-difference"
groups   = ["new", "current"]
better   = "higher"
smallest = 0.1
why      = "Invented: one more healed in ten is worth the change."

[plan.hypothesis.H1]
outcome    = "healed"
claim      = "noninferior"
margin     = 0.1
margin_why = "Invented: a loss of one in ten would undo the gain in time."
` + evidenceOf(result) + `
[plan.sensitivity.S1]
of   = "H1"
` + keys + `
` + result
}

func evidenceOf(result string) string {
	if result == twoTrials {
		return `evidence   = "pooled"

[plan.pooling.healed]
independent = "Invented: two clinics with patients of their own."
model       = "common"
`
	}
	return ""
}

const (
	oneTrial = `[[result]]
study   = "Clinic A, invented"
outcome = "healed"
date    = 2026-05-04
groups.new     = { n = 110, events = 84 }
groups.current = { n = 112, events = 80 }
flow.new       = { randomised = 118, analysed = 110 }
flow.current   = { randomised = 119, analysed = 112 }
`
	twoTrials = oneTrial + `
[[result]]
study   = "Clinic B, invented"
outcome = "healed"
date    = 2026-05-04
groups.new     = { n = 90, events = 66 }
groups.current = { n = 88, events = 61 }
`
	keptTrial = oneTrial + `
[[result]]
study     = "Clinic B, invented"
outcome   = "healed"
date      = 2026-05-04
leave_out = "Invented: the clinic's freezer failed."
groups.new     = { n = 90, events = 66 }
groups.current = { n = 88, events = 61 }

[[deviation]]
date          = 2026-05-04
what          = "Clinic B is left out."
why           = "Invented: its samples thawed."
results_known = true
`
)

var (
	kind     = []string{"plan.sensitivity.kind"}
	evidence = []string{"plan.hypothesis.evidence"}
)

// Cards explain sensitivity analyses, how studies speak for a claim, what is
// printed beside combined p-values, and the findings raised here.
var Cards = []card.Card{
	{Kind: card.Procedure, Word: "margin", Of: kind, Title: "the verdict at other margins", Source: ours,
		Meaning: "What the claim would have been at margins from near the null to beyond the one that would just do: a step at the smallest margin.",
		Formula: "The claim's p at 61 margins, the region scaled k-fold on the analysis scale, k up to 1.5 times what holds the interval, 2 at least and 20 at most.",
		Example: sensitivityExample("kind = \"margin\"\n", oneTrial)},
	{Kind: card.Procedure, Word: "method", Of: kind, Title: "the verdict by another method", Source: ours,
		Meaning: "The claim decided again by the method that is named, without covariates and strata. The planned method's verdict stands. All other valid methods of the measure are run beside it without being asked for; costly ones up to 200 subjects.",
		Formula: "As the method says.",
		Example: sensitivityExample("kind = \"method\"\nmethod = \"newcombe\"\n", oneTrial)},
	{Kind: card.Procedure, Word: "leave-one-out", Of: kind, Title: "the verdict without each study", Source: ours,
		Meaning: "The pooled claim decided again without each study in turn: whether one study carries it.",
		Formula: "A full refit, with its own variance between studies, for each study left out.",
		Example: sensitivityExample("kind = \"leave-one-out\"\n", twoTrials)},
	{Kind: card.Procedure, Word: "tipping-point", Of: kind, Title: "how different the missing would have to be", Source: "Yan, Lee and Li 2009, from memory",
		Meaning: "How far those not analysed would have to differ from those analysed for the verdict to change. It does not say how far they do differ.",
		Formula: "Means: if the missing differ by d, the estimate moves by d·m/(n + m) in each group, against the claim in both; the d at which the limit that decides reaches its point, errors unchanged. " +
			"Counts: the split of events among the missing at which the verdict changes, nearest to the shares observed.",
		Assumptions: "The number missing is known: from `flow`, or from dropped rows of the data.",
		Example:     sensitivityExample("kind = \"tipping-point\"\n", oneTrial)},
	{Kind: card.Procedure, Word: "keep-excluded", Of: kind, Title: "the verdict with left-out results", Source: "ICH E9 (1998), section 5.2, from memory",
		Meaning: "The claim decided again with every entry that carries `leave_out` restored.",
		Formula: "As planned, on all entries.",
		Example: sensitivityExample("kind = \"keep-excluded\"\n", keptTrial)},

	{Kind: card.Procedure, Word: "single", Of: evidence, Title: "one study decides", Source: ours,
		Meaning: "The claim is judged on the one study that has results, or that `studies` names.",
		Formula: "As the measure's method says.", Example: sensitivityExample("kind = \"margin\"\n", oneTrial)},
	{Kind: card.Procedure, Word: "pooled", Of: evidence, Title: "studies pooled into one estimate", Source: ours,
		Meaning: "Independent studies are pooled as [plan.pooling.OUTCOME] says; the claim is judged on the pooled estimate.",
		Formula: "See `common` and `random`.", Example: sensitivityExample("kind = \"leave-one-out\"\n", twoTrials)},
	{Kind: card.Procedure, Word: "combined", Of: evidence, Title: "p-values combined", Source: ours,
		Meaning: "Only p-values are combined, as [plan.combination.OUTCOME] says. What is established is an effect in at least one study, not an average one; there is no estimate and no interval. Claims about the null only.",
		Formula: "Each p is turned one-sided toward the claim: of a two-sided P, P/2 toward and 1 - P/2 against it. `differs` combines in both directions and doubles the smaller."},
	{Kind: card.Term, Word: "worst-case line", Title: "combined p-values at their least favourable", Source: ours,
		Meaning: "A second line beside the combined p: results whose p is known only as a bound, whose direction is unknown, or that are missing, enter at the largest value that their report admits. Where the two lines differ in verdict the claim is open.",
		Formula: "Two-sided \"> P\" toward the claim ½, against it 1 - P/2; \"< P\" against it 1; direction unknown 1 - P/2, with \"<\" 1; one-sided \"> P\" toward it 1; missing 1."},
	{Kind: card.Term, Word: "direction tally", Title: "how many results point toward the claim", Source: "sign test: Arbuthnott 1710, from memory",
		Meaning: "Of the results with a direction, how many lie on the claim's side, and how often as many would if both sides were equally likely. It describes and decides nothing.",
		Formula: "P(Bin(k, ½) ≥ t)."},

	{Kind: card.Diagnostic, Word: "S108", Title: "the claim needs a direction or a region", Source: ours,
		Meaning: "superior, minimum-effect, noninferior and benefit-too-small need to know which direction is better; equivalence and margins need a region.",
		Repair:  "Add `better` to the outcome, or `smallest`, or choose a claim that needs neither."},
	{Kind: card.Diagnostic, Word: "S109", Title: "a p-value of 0", Source: ours,
		Meaning: "No test gives exactly 0: a program printed it for something smaller than its digits.",
		Formula: "p = 0 with relation \"=\".",
		Repair:  "Write the bound: value = 0.001 and relation = \"<\"."},
	{Kind: card.Diagnostic, Word: "S111", Title: "several results, and no word how they count", Source: ours,
		Meaning: "More than one study has results for the claim, and the plan does not say how they speak together, or the table that would say it is missing.",
		Repair:  "State `evidence`, with [plan.pooling.OUTCOME] or [plan.combination.OUTCOME]; or name the one study under `studies`. After the results this is a deviation."},
}
