package effect

import (
	"fmt"

	"steelyard/protocol/card"
)

// The formats of notes are beside the methods; this file is a table of cards.

// valuesExample is a small invented record on individual values: keys of the
// outcome, the method, and the columns of its data file.
func valuesExample(measure, outcome, method, data string) string {
	return fmt.Sprintf(`steelyard = 1

[record]
title   = "Invented example: %[1]s"
setting = "laboratory"
date    = 2026-05-04

[plan]
question = "What do these invented readings say?"
alpha    = { two_sided = 0.05 }

[plan.outcome.reading]
label   = "Reading"
measure = "%[1]s"
%[2]s
[plan.hypothesis.H1]
outcome = "reading"
claim   = "differs"
%[3]s
[[result]]
study   = "Bench 2, invented"
outcome = "reading"
date    = 2026-05-04
%[4]s
`, measure, lines(outcome), lines(method), data)
}

const (
	exampleUnit  = "unit    = \"mg\"\n"
	exampleNames = "groups  = [\"new\", \"current\"]\n"
	filterData   = `data    = { file = "example.csv", value = "recovery", group = "filter" }`
	pairedData   = `data    = { file = "pairs.csv", first = "morning", second = "evening" }`
)

func shiftExample(method string) string {
	return valuesExample("median-shift", exampleUnit+exampleNames, methodKey(method), filterData)
}

func pairedShiftExample(method string) string {
	return valuesExample("paired-median-shift", exampleUnit+"groups  = [\"morning\", \"evening\"]\n", methodKey(method), pairedData)
}

func superiorityExample(method string) string {
	return valuesExample("superiority-probability", exampleNames, methodKey(method), filterData)
}

// methodKey is the line that chooses a method; "" chooses none.
func methodKey(method string) string {
	if method == "" {
		return ""
	}
	return "method  = \"" + method + "\"\n"
}

// rankCards explains the measures that use the order of values, and their
// methods.
var rankCards = []card.Card{
	{Kind: card.Measure, Word: "median-shift", Title: "shift between two groups",
		Meaning:     "How far the values of the first group would have to be moved to lie like those of the second. It needs no shape of the distributions, and few outlying values do not move it. It is the difference of the medians only where both groups have the same shape.",
		Formula:     "The median of all n₁n₂ differences x - y. For pooling, its error is the width of the 95 % interval over 2·1.96.",
		Assumptions: "Two independent groups; as a shift, the same shape in both.",
		Source:      "Hodges and Lehmann 1963, from memory", Example: shiftExample("")},
	{Kind: card.Method, Word: "wilcoxon", Of: []string{"median-shift"}, Title: "rank-sum test, exact where it can be",
		Meaning:     "How the values of the two groups lie among each other once the first group is moved by c. It chooses between the two other forms by a fixed rule and says which it took.",
		Formula:     "`wilcoxon-exact` when no group is larger than 50 and no value is tied with another at the null; `wilcoxon-normal` otherwise.",
		Assumptions: "Exchangeable groups up to a shift: the same shape and spread.",
		Source:      "Wilcoxon 1945; Mann and Whitney 1947; from memory", Example: shiftExample("wilcoxon")},
	{Kind: card.Method, Word: "wilcoxon-exact", Of: []string{"median-shift"}, Title: "exact rank-sum test",
		Meaning: "The exact chance, over all ways to divide the ranks into the two groups, of a rank sum at least as far out.",
		Formula: "U(c) counts the differences x - y above c. p↑(c) = P(U ≥ U(c)), with differences equal to c counted against the claim; the limits are the (k+1)-th smallest and largest differences, k the largest number with P(U ≤ k) ≤ a. " +
			"With tied values the distribution given the ties is used, up to 100 values together, and the limits are found by stepping through the ordered differences. Without ties up to 1000 values a side.",
		Assumptions: "As for `wilcoxon`. No size is too small, but a level that the number of selections cannot reach leaves a limit infinite.",
		Source:      "Wilcoxon 1945; with ties Streitberg and Röhmel 1986; from memory", Example: shiftExample("wilcoxon-exact")},
	{Kind: card.Method, Word: "wilcoxon-normal", Of: []string{"median-shift"}, Title: "rank-sum test by its normal approximation",
		Meaning: "The rank sum against its mean and standard deviation, both exact given the ties, without a continuity correction.",
		Formula: "z(c) = (U(c) - n₁n₂/2)/√((n₁n₂/12)(N + 1 - Σ(t³ - t)/(N(N - 1)))), ties t of the values once the first group is moved by c, U with half of the differences equal to c. " +
			"Limits are order statistics of the differences.",
		Assumptions: "As for `wilcoxon`, and some ten values a side. With very few values and many ties the exact form is better.",
		Source:      "Mann and Whitney 1947; Lehmann 1975, Nonparametrics; from memory", Example: shiftExample("wilcoxon-normal")},

	{Kind: card.Measure, Word: "paired-median-shift", Title: "shift within pairs",
		Meaning:     "The centre of the differences within pairs, first minus second, without a shape for them other than symmetry.",
		Formula:     "The median of all n(n+1)/2 averages of two differences, each with itself too. For pooling, its error is the width of the 95 % interval over 2·1.96.",
		Assumptions: "Independent pairs whose differences are symmetric about their centre.",
		Source:      "Tukey 1949; Hodges and Lehmann 1963; from memory", Example: pairedShiftExample("")},
	{Kind: card.Method, Word: "signed-rank", Of: []string{"paired-median-shift"}, Title: "signed-rank test, exact where it can be",
		Meaning:     "How the differences lie about c by size and side. It chooses between the two other forms by a fixed rule and says which it took.",
		Formula:     "`signed-rank-exact` with at most 50 pairs and no ties or zeros among the distances from the null; `signed-rank-normal` otherwise.",
		Assumptions: "Independent pairs; differences symmetric about the true value.",
		Source:      "Wilcoxon 1945, from memory", Example: pairedShiftExample("signed-rank")},
	{Kind: card.Method, Word: "signed-rank-exact", Of: []string{"paired-median-shift"}, Title: "exact signed-rank test",
		Meaning: "The exact chance, over all signs of the differences, of a sum of ranks at least as far out.",
		Formula: "V(c) counts the averages of two differences above c. p↑(c) = P(V ≥ V(c)), with averages equal to c counted against the claim; the limits are the (k+1)-th smallest and largest averages. " +
			"Ties keep this distribution: they are broken against the claim. Up to 1000 pairs.",
		Assumptions: "As for `signed-rank`. No size is too small.",
		Source:      "Wilcoxon 1945, from memory", Example: pairedShiftExample("signed-rank-exact")},
	{Kind: card.Method, Word: "signed-rank-normal", Of: []string{"paired-median-shift"}, Title: "signed-rank test by its normal approximation",
		Meaning:     "The sum of signed ranks against its mean and standard deviation given the ties, without a continuity correction.",
		Formula:     "z(c) = (V(c) - n(n+1)/4)/√([n(n+1)(2n+1) - m(m+1)(2m+1)]/24 - Σ(t³ - t)/48), ties t of the distances from c; the m differences equal to c keep the lowest ranks and count half to either side.",
		Assumptions: "As for `signed-rank`, and some ten pairs.",
		Source:      "Wilcoxon 1945; Pratt 1959; Lehmann 1975, Nonparametrics; from memory", Example: pairedShiftExample("signed-rank-normal")},

	{Kind: card.Measure, Word: "superiority-probability", Title: "probability that the first group's value is higher",
		Meaning:     "Of one value drawn from each group, how often the first is the higher one; ties count half. One half says that neither tends to be higher. It is the area under the curve of a diagnostic test.",
		Formula:     "θ = P(X > Y) + ½P(X = Y), estimated by the share of all n₁n₂ comparisons. The analysis scale is the logit, with variance se²/(θ(1 - θ))².",
		Assumptions: "Two independent groups of independent values. No shape, no equal spread.",
		Source:      "Mann and Whitney 1947; Hanley and McNeil 1982; from memory", Example: superiorityExample("")},
	{Kind: card.Method, Word: "brunner-munzel", Of: []string{"superiority-probability"}, Title: "studentised test of placements",
		Meaning: "The share of comparisons with an error estimated from how the placements of the values vary, so that the spreads need not be equal.",
		Formula: "The placement of a value is the share of the other group on its far side. A and B are the variances of the placements over n₁ and n₂; t(c) = (θ - c)/√(A + B) with (A + B)²/(A²/(n₁-1) + B²/(n₂-1)) degrees of freedom; limits cut to 0 and 1. " +
			"Groups that do not overlap leave no error: `hanley-mcneil` is used.",
		Assumptions: "Independent values; ten or more a side.",
		Source:      "Brunner and Munzel 2000, from memory", Example: superiorityExample("brunner-munzel")},
	{Kind: card.Method, Word: "delong", Of: []string{"superiority-probability"}, Title: "placements, normal",
		Meaning:     "As `brunner-munzel`, with the normal distribution in the place of t: usual for areas under curves of diagnostic tests.",
		Formula:     "z(c) = (θ - c)/√(A + B).",
		Assumptions: "Independent values; some thirty a side.",
		Source:      "DeLong, DeLong and Clarke-Pearson 1988, from memory", Example: superiorityExample("delong")},
	{Kind: card.Method, Word: "logit", Of: []string{"superiority-probability"}, Title: "placements on the logit scale",
		Meaning:     "As `brunner-munzel`, computed on the logit of the probability, so that the limits never leave 0 to 1.",
		Formula:     "t(c) = (logit θ - logit c)·θ(1 - θ)/√(A + B), the same degrees of freedom.",
		Assumptions: "As for `brunner-munzel`; better near 0 and 1.",
		Source:      practice, Example: superiorityExample("logit")},
	{Kind: card.Method, Word: "hanley-mcneil", Of: []string{"superiority-probability"}, Title: "variance from the tested value",
		Meaning:     "The error follows from the tested probability itself, not from the values, so it exists even where the groups do not overlap.",
		Formula:     "z(c) = (θ - c)/√V(c), V(c) = c(1 - c)[1 + M((1 - c)/(2 - c) + c/(1 + c))]/(n₁n₂) with M = (n₁ + n₂)/2 - 1; limits by inversion.",
		Assumptions: "Distributions near to exponential ones, as the formula of the variance takes them.",
		Source:      "Newcombe 2006, method 5, after Hanley and McNeil 1982; from memory", Example: superiorityExample("hanley-mcneil")},
}
