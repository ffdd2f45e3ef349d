package belief

import "steelyard/protocol/card"

// Cards explain what a stated belief becomes, and its note.
var Cards = []card.Card{
	{Kind: card.Term, Word: "prior", Title: "a stated belief, before and after the results",
		Meaning: "How probable benefit, an effect inside the region, and harm are to someone who started from the stated belief, before any result and after each. Priors never change a verdict.",
		Formula: "Prior N(m, s²) and estimate y with variance v on the analysis scale: precision 1/s² + 1/v, mean weighted by precision. With `null_share` π the null keeps π·BF/(π·BF + 1 - π), BF = N(y; null, v)/N(y; m, v + s²). " +
			"A prior given by median and limits has s = (high - low)/(2z). For an estimate judged by t, se is widened by t/z at the level of the descriptive interval.",
		Assumptions: "A normal likelihood on the analysis scale; a belief stated before the results.",
		Source:      "Jeffreys 1961; Spiegelhalter, Abrams and Myles 2004; from memory",
		Example: `steelyard = 1

[record]
title   = "Invented example: prior"
setting = "other"
date    = 2026-04-12

[plan]
question = "How far do these invented results move a sceptic?"
alpha    = { one_sided = 0.025 }

[plan.outcome.yield]
label    = "Yield"
unit     = "kg"
measure  = "mean-difference"
groups   = ["new", "current"]
better   = "higher"
smallest = 0.5
why      = "Invented: half a kilogram pays for the change."

[plan.hypothesis.H1]
outcome = "yield"
claim   = "superior"

[plan.prior.sceptic]
outcome = "yield"
label   = "A sceptic"
why     = "Invented: three changes before this one brought nothing."
mean    = 0
sd      = 0.4

[[result]]
study   = "Field 1, invented"
outcome = "yield"
date    = 2026-04-12
groups.new     = { n = 30, mean = 6.1, sd = 1.1 }
groups.current = { n = 30, mean = 5.4, sd = 1.2 }
`},
	{Kind: card.Diagnostic, Word: "S222", Title: "prior and data disagree", Source: "Box 1980, from memory",
		Meaning: "The estimate lies further from the belief's mean than the two allow for together. What comes out lies where neither of them is.",
		Formula: "|y - m|/√(v + s²) above 2.",
		Repair:  "Look at the belief's reasons and at the data. A probability from the two should not be quoted without saying this."},
}
