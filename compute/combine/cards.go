package combine

import "steelyard/protocol/card"

// example is a small invented record that combines p-values by one method.
func example(combination string) string {
	return `steelyard = 1

[record]
title   = "Invented example"
setting = "other"

[plan]
question = "Does any of these invented studies show an effect?"
alpha    = { one_sided = 0.025 }

[plan.outcome.yield]
label   = "Yield"
measure = "mean-difference"
unit    = "kg"
better  = "higher"
groups  = ["new", "current"]

[plan.hypothesis.H1]
outcome  = "yield"
claim    = "superior"
evidence = "combined"

[plan.combination.yield]
` + combination + `
[[result]]
study   = "Study 1"
outcome = "yield"
date    = 2026-02-03
p       = { value = 0.03, sides = 2, direction = "above", n = 40 }

[[result]]
study   = "Study 2"
outcome = "yield"
date    = 2026-03-11
p       = { value = 0.2, sides = 2, direction = "above", n = 55 }
`
}

const (
	independent = "The studies are independent and every p-value is uniform when there is no effect. " +
		"What is shown is an effect in at least one study, not an average effect."
	dependent = "Exact for independent studies; small p-values stay approximately right under dependence. " +
		"What is shown is an effect in at least one study, not an average effect."
)

// Cards explain the methods.
var Cards = []card.Card{
	{
		Kind: card.Procedure, Word: "fisher", Title: "product of the p-values",
		Meaning:     "Sensitive to one or a few very small p-values.",
		Formula:     "upper tail of chi-square with 2k degrees of freedom at −2Σln p",
		Assumptions: independent, Source: "Fisher (1932), from memory",
		Example: example("method = \"fisher\"\n"),
	},
	{
		Kind: card.Procedure, Word: "stouffer", Title: "sum of normal deviates",
		Meaning:     "Weighs every study alike, or by the root of its size; evidence in both directions cancels.",
		Formula:     "P(Z > Σwz/√Σw²), z the normal deviate of each one-sided p; w = 1, or √n with weights = \"sqrt-n\"",
		Assumptions: independent, Source: "Stouffer et al. (1949), from memory",
		Example: example("method = \"stouffer\"\nweights = \"sqrt-n\"\n"),
	},
	{
		Kind: card.Procedure, Word: "tippett", Title: "smallest p-value",
		Meaning:     "Looks at the smallest p alone and corrects for having picked it.",
		Formula:     "1 − (1 − min p)^k",
		Assumptions: independent, Source: "Tippett (1931), from memory",
		Example: example("method = \"tippett\"\n"),
	},
	{
		Kind: card.Procedure, Word: "pearson", Title: "product of the complements",
		Meaning:     "Small only when no p-value is large: asks for agreement between the studies.",
		Formula:     "lower tail of chi-square with 2k degrees of freedom at −2Σln(1−p); 1 when some p is 1",
		Assumptions: independent, Source: "Pearson (1933), from memory",
		Example: example("method = \"pearson\"\n"),
	},
	{
		Kind: card.Procedure, Word: "edgington", Title: "sum of the p-values",
		Meaning:     "Treats small and large p-values alike: one large p-value weighs as much as one small one.",
		Formula:     "P(U₁ + … + U_k ≤ Σp) for uniform U: a recursion of positive terms, for many p-values an inverse Laplace integral",
		Assumptions: independent, Source: "Edgington (1972), from memory",
		Example: example("method = \"edgington\"\n"),
	},
	{
		Kind: card.Procedure, Word: "logit", Title: "sum of log odds",
		Meaning:     "Between fisher and stouffer; evidence in both directions cancels.",
		Formula:     "exact tail of a sum of k logistic variables at Σln((1−p)/p), by an inverse Laplace integral; 1 when some p is 1",
		Assumptions: independent, Source: "statistic of Mudholkar and George (1979), from memory; their t approximation is not used",
		Example: example("method = \"logit\"\n"),
	},
	{
		Kind: card.Procedure, Word: "cauchy", Title: "mean of cotangents",
		Meaning:     "Driven by the smallest p-values, and little disturbed when the studies are not quite independent.",
		Formula:     "½ − atan(T)/π, T = Σcot(πp)/k; 1 when some p is 1",
		Assumptions: dependent, Source: "Liu and Xie (2020), from memory",
		Example: example("method = \"cauchy\"\n"),
	},
	{
		Kind: card.Procedure, Word: "harmonic", Title: "harmonic mean of the p-values",
		Meaning:     "Driven by the smallest p-values, and little disturbed when the studies are not quite independent.",
		Formula:     "P(Σ1/U > Σ1/p) for uniform U, exactly: an integral along the cut of the Laplace transform",
		Assumptions: dependent, Source: "Wilson (2019) for the statistic and its limit, from memory; the law used here is the exact one",
		Example: example("method = \"harmonic\"\n"),
	},
}
