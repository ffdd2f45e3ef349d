package family

import "steelyard/protocol/card"

// example is a small invented record whose family is judged by one procedure.
func example(family string) string {
	return `steelyard = 1

[record]
title   = "Invented example"
setting = "other"

[plan]
question = "Which of these invented outcomes change?"
alpha    = { one_sided = 0.025 }

[plan.outcome.strength]
label   = "Strength"
measure = "mean-difference"
unit    = "N"
better  = "higher"
groups  = ["new", "current"]

[plan.outcome.weight]
label   = "Weight"
measure = "mean-difference"
unit    = "g"
better  = "lower"
groups  = ["new", "current"]

[plan.hypothesis.H1]
outcome = "strength"
claim   = "superior"

[plan.hypothesis.H2]
outcome = "weight"
claim   = "superior"

[plan.family.main]
members   = ["H1", "H2"]
` + family + `
[[result]]
study   = "Study 1"
outcome = "strength"
date    = 2026-04-12
groups.new     = { n = 20, mean = 31.2, sd = 4.1 }
groups.current = { n = 20, mean = 28.0, sd = 3.9 }

[[result]]
study   = "Study 1"
outcome = "weight"
date    = 2026-04-12
groups.new     = { n = 20, mean = 101.0, sd = 6.3 }
groups.current = { n = 20, mean = 105.5, sd = 6.8 }
`
}

// Cards explain the procedures and the diagnostic of this package.
var Cards = []card.Card{
	{
		Kind: card.Procedure, Word: string(All), Title: "every member at its own level",
		Meaning: "Each hypothesis keeps its own verdict. The family as a whole is established only when all of its members are.",
		Formula: "no adjustment; the family's p is the largest of its members' p (on the scale of the largest level). " +
			"Contradictions are not adjusted either.",
		Assumptions: "None for the claim that all hold. Read one member at a time, nothing limits the chance that some claim is wrong.",
		Source:      "intersection–union test: Berger (1982), from memory",
		Example:     example("procedure = \"all\"\n"),
	},
	{
		Kind: card.Procedure, Word: string(Bonferroni), Title: "a fixed share of the level each",
		Meaning:     "The level is divided among the hypotheses once and for all; each is judged alone at its share.",
		Formula:     "adjusted p = min(1, m·p), or p/w with weights w that add to at most 1; established when below the level",
		Assumptions: "None: valid under any dependence between the results.",
		Source:      "Bonferroni's inequality; Dunn (1961), from memory",
		Example:     example("procedure = \"bonferroni\"\nweights   = [0.8, 0.2]\n"),
	},
	{
		Kind: card.Procedure, Word: string(Holm), Title: "step down from the smallest p",
		Meaning: "As bonferroni, but the share of every established hypothesis passes to those still open. It never establishes less.",
		Formula: "smallest p first, at level/m; then the next at level/(m−1), and so on until one fails. " +
			"With weights: p_j/w_j, the share of an established member divided in proportion to the other weights",
		Assumptions: "None: valid under any dependence between the results.",
		Source:      "Holm (1979), from memory",
		Example:     example("procedure = \"holm\"\n"),
	},
	{
		Kind: card.Procedure, Word: string(Hochberg), Title: "step up from the largest p",
		Meaning:     "Uses the same levels as holm from the other end: one hypothesis that passes takes all those with smaller p along.",
		Formula:     "adjusted p of the i-th smallest = min over k ≥ i of (m−k+1)·p of the k-th smallest",
		Assumptions: "The results are independent or positively dependent. Under other dependence the error may exceed the level.",
		Source:      "Hochberg (1988), from memory",
		Example:     example("procedure = \"hochberg\"\n"),
	},
	{
		Kind: card.Procedure, Word: string(Hommel), Title: "closed test with Simes' inequality",
		Meaning: "A hypothesis is established when every combination of hypotheses that contains it is refuted together. Establishes at least what hochberg does.",
		Formula: "a set of r hypotheses is refuted when, for some k, r·(its k-th smallest p)/k is below the level; " +
			"adjusted values by Wright's algorithm",
		Assumptions: "The results are independent or positively dependent. Under other dependence the error may exceed the level.",
		Source:      "Hommel (1988); Wright (1992); both from memory",
		Example:     example("procedure = \"hommel\"\n"),
	},
	{
		Kind: card.Procedure, Word: string(FixedSequence), Title: "one after another, each at the full level",
		Meaning:     "Hypotheses are tested in the stated order; the first that fails ends the testing, and those after it stay open however small their p.",
		Formula:     "adjusted p of the i-th in order = the largest p among the first i",
		Assumptions: "The order is fixed before the results are known. Valid under any dependence.",
		Source:      "Maurer, Hothorn and Lehmacher (1995), from memory",
		Example:     example("procedure = \"fixed-sequence\"\norder     = [\"H1\", \"H2\"]\n"),
	},
	{
		Kind: card.Procedure, Word: string(Fallback), Title: "in order, with a reserve for the later ones",
		Meaning: "Like fixed-sequence, but every hypothesis holds a share of the level of its own, so a failure does not end the testing. " +
			"An established hypothesis hands its share to the next.",
		Formula:     "the graph with the stated weights in which member i hands everything to member i+1",
		Assumptions: "Order and weights are fixed before the results are known. Valid under any dependence.",
		Source:      "Wiens (2003), from memory",
		Example:     example("procedure = \"fallback\"\norder     = [\"H1\", \"H2\"]\nweights   = [0.8, 0.2]\n"),
	},
	{
		Kind: card.Procedure, Word: string(Graph), Title: "shares of the level that move along arrows",
		Meaning: "Every hypothesis holds a share of the level and says where the share goes once it is established. " +
			"The order of testing does not matter for the outcome.",
		Formula: "establish j when p_j < w_j·level; then w_l += w_j·g_jl and g_lk ← (g_lk + g_lj·g_jk)/(1 − g_lj·g_jl); repeat. " +
			"The adjusted p is the smallest level at which the member falls",
		Assumptions: "Weights and transfers are fixed before the results are known. Valid under any dependence.",
		Source:      "Bretz, Maurer, Brannath and Posch (2009), from memory",
		Example:     example("procedure = \"graph\"\nweights   = [1.0, 0.0]\ntransfer  = [[0, 1], [1, 0]]\n"),
	},
	{
		Kind: card.Diagnostic, Word: Code, Title: "weights, transfers or gates cannot be used",
		Meaning: "The family as written does not keep its error, or cannot be run: the text names which number or gate is at fault.",
		Formula: "weights are at least 0, one a member, and add to at most 1; transfers likewise row by row, none from a member to itself; " +
			"the order names every member once; families do not wait for each other in a circle; " +
			"a gate that any success opens has exactly one bonferroni family before it",
		Assumptions: "A gate opened by any one of several successes and followed by tests at the full level lets the error approach twice the level.",
		Source:      "Dmitrienko, Offen and Westfall (2003), from memory",
		Repair:      "Correct the number that is named; for a gate, use `require = \"all\"` or put a bonferroni family in front.",
	},
}
