package survival

import "steelyard/protocol/card"

// example is a small invented record on times to an event.
func example(measure, outcome, method string) string {
	if method != "" {
		method = "method  = \"" + method + "\"\n"
	}
	return `steelyard = 1

[record]
title   = "Invented example: ` + measure + `"
setting = "laboratory"
date    = 2026-05-04

[plan]
question = "Do these invented seals last longer with the new adhesive?"
alpha    = { two_sided = 0.05 }

[plan.outcome.leak]
label   = "Time to the first leak"
measure = "` + measure + `"
groups  = ["new", "current"]
` + outcome + `
[plan.hypothesis.H1]
outcome = "leak"
claim   = "differs"
` + method + `
[[result]]
study   = "Bench 4, invented"
outcome = "leak"
date    = 2026-05-04
data    = { file = "times.csv", time = "weeks", event = "leak", group = "adhesive" }
`
}

// ExampleFiles are the data files that the examples of this package's cards
// name: invented numbers.
func ExampleFiles() map[string]string {
	return map[string]string{"times.csv": `adhesive,weeks,leak
new,6,1
new,9,1
new,11,0
new,14,1
new,17,1
new,20,0
new,21,1
new,24,0
new,24,0
new,24,0
current,3,1
current,5,1
current,6,1
current,8,1
current,10,1
current,12,0
current,13,1
current,15,1
current,18,1
current,24,0
`}
}

const proportional = "Independent subjects; censoring that says nothing about the risk; hazards in one ratio over all time, which a check of proportionality looks at."

// Cards explain the measures and methods of times to an event, what stands
// beside them, and their notes.
var Cards = []card.Card{
	{Kind: card.Measure, Word: "hazard-ratio", Title: "ratio of two hazards",
		Meaning:     "The first group's rate of events, among those still at risk, over the second's. It is one number for all times, and says nothing by itself about how much later events come.",
		Formula:     "exp(β̂), β̂ the maximum of the partial likelihood with Efron's treatment of ties; the analysis scale is β with variance 1/information.",
		Assumptions: proportional,
		Source:      "Cox 1972; Efron 1977; from memory", Example: example("hazard-ratio", "", "")},
	{Kind: card.Method, Word: "wald", Of: []string{"hazard-ratio"}, Title: "estimate over its error",
		Meaning:     "The logarithm of the ratio with the error that the curve of the likelihood gives at its top. A group without events has no such error: `likelihood-ratio` is used.",
		Formula:     "z(c) = (β̂ - ln c)√i(β̂). Ties: with d events at a time, for k = 0 … d-1 the risk set less k/d of those events. Strata: sums over strata.",
		Assumptions: proportional + " Not too few events in either group.",
		Source:      "Cox 1972; Efron 1977; from memory", Example: example("hazard-ratio", "", "wald")},
	{Kind: card.Method, Word: "likelihood-ratio", Of: []string{"hazard-ratio"}, Title: "likelihood lost at a ratio",
		Meaning:     "How much less likely the order of the events is under the tested ratio than under the best one. Its limits are right where those of `wald` are not: few events, or a group without any.",
		Formula:     "z(c) = sign(β̂ - ln c)√(2(ℓ(β̂) - ℓ(ln c))); limits by inversion.",
		Assumptions: proportional,
		Source:      "Cox 1972; Efron 1977; from memory", Example: example("hazard-ratio", "", "likelihood-ratio")},
	{Kind: card.Method, Word: "score", Of: []string{"hazard-ratio"}, Title: "slope of the likelihood at a ratio",
		Meaning:     "The slope of the likelihood at the tested ratio over its error there. At a ratio of 1 without ties it is the log-rank test.",
		Formula:     "z(c) = U(ln c)/√i(ln c), U the derivative of the partial likelihood; limits by inversion.",
		Assumptions: proportional,
		Source:      "Cox 1972; Rao 1948; from memory", Example: example("hazard-ratio", "", "score")},
	{Kind: card.Measure, Word: "restricted-mean-difference", Title: "difference of mean times up to a horizon",
		Meaning:     "How much time without event a subject gains, on average, within the horizon. It needs no proportional hazards and is in units of time.",
		Formula:     "μ = ∫ from 0 to `horizon` of the Kaplan–Meier curve; first minus second.",
		Assumptions: "Independent subjects; censoring that says nothing about the risk; follow-up of both groups to the horizon.",
		Source:      "Irwin 1949; Royston and Parmar 2013; from memory", Example: example("restricted-mean-difference", "horizon = 20\n", "")},
	{Kind: card.Method, Word: "greenwood", Of: []string{"restricted-mean-difference"}, Title: "area under the curve with Greenwood's variance",
		Meaning:     "The difference of the areas over its standard error.",
		Formula:     "Var = Σ over event times t ≤ horizon of [∫ from t to horizon of S]²·d/(n(n - d)), a term 0 where all at risk have the event; z(c) = (μ₁ - μ₂ - c)/√(Var₁ + Var₂).",
		Assumptions: "As for the measure, and thirty subjects or more a group: in simulations with 60 the mean of the variance was 3 % low.",
		Source:      "Greenwood 1926; Kaplan and Meier 1958; from memory", Example: example("restricted-mean-difference", "horizon = 20\n", "greenwood")},
	{Kind: card.Term, Word: "log-rank", Title: "test beside a hazard ratio",
		Meaning: "Whether the events of the first group are more or fewer than its share of those at risk would have; printed beside the hazard ratio, stratified where it is.",
		Formula: "z = Σ(d₁ - d·n₁/n)/√Σ d·n₀n₁(n - d)/(n²(n - 1)), over event times and strata.",
		Source:  "Mantel 1966, from memory"},
	{Kind: card.Term, Word: "kaplan-meier", Title: "curve of those without event",
		Meaning: "The share still without event at each time, with limits.",
		Formula: "S = Π(1 - d/n) over event times; limits S^exp(∓z√(Σd/(n(n - d)))/ln S): on the scale ln(-ln S) with Greenwood's variance.",
		Source:  "Kaplan and Meier 1958; Kalbfleisch and Prentice 1980; from memory"},
	{Kind: card.Diagnostic, Word: "S106", Title: "horizon beyond follow-up", Source: "common practice, no source",
		Meaning: "In one group nobody was followed to the horizon and not everybody had the event, so its mean time up to there is not known.",
		Formula: "horizon above the largest time of a group whose curve has not reached 0.",
		Repair:  "Plan a horizon that both groups reach."},
	{Kind: card.Diagnostic, Word: "S223", Title: "hazards not in proportion", Source: "Grambsch and Therneau 1994, from memory",
		Meaning: "The hazard ratio seems to change with time, so that one number describes it badly. The check proposes nothing and changes nothing.",
		Formula: "With residuals r = first group's events less expected at each time and g the mean rank of the time among the d events: χ² = (Σ(g - ḡ)r)²d/(iΣ(g - ḡ)²), 1 degree of freedom, p below 0.05.",
		Repair:  "Look at the curves. `restricted-mean-difference` needs no proportional hazards; choosing it after the results is a deviation."},
}
