package effect

import "steelyard/protocol/card"

// This file is a table: the cards of measures of spread, of relation and of
// the share inside limits.

const (
	pairedNames  = "groups  = [\"morning\", \"evening\"]\n"
	relatedData  = `data    = { file = "pairs.csv", first = "morning", second = "evening" }`
	specKeys     = "spec    = [9.0, 14.0]\nreference = 0.5\n"
	agreeKeys    = "spec    = [-3.0, 3.0]\nreference = 0.5\n"
	anyKey       = "distribution = \"any\"\n"
	exampleValue = `data    = { file = "example.csv", value = "recovery" }`
)

func spreadExample(measure, outcome, method, data string) string {
	return valuesExample(measure, outcome, methodKey(method), data)
}

// spreadCards explains them.
var spreadCards = []card.Card{
	{Kind: card.Measure, Word: "sd", Title: "one standard deviation",
		Meaning:     "How widely the values of one sample spread, held against a reference: the repeatability of a method, the spread of a process.",
		Formula:     "s = √(Σ(x - x̄)²/(n - 1)). On the logarithm the variance is ¼ψ′(ν/2), ν = n - 1, and the bias ½[ψ(ν/2) - ln(ν/2)] is taken off for pooling.",
		Assumptions: "Independent values from one normal population, at every sample size.",
		Source:      practice, Example: spreadExample("sd", exampleUnit+"reference = 0.5\n", "", "sample  = { n = 12, sd = 0.62 }")},
	{Kind: card.Method, Word: "chi-square", Of: []string{"sd"}, Title: "chi-square test of a standard deviation",
		Meaning:     "The exact test for normal values. A large sample does not make it safe: heavier tails make it wrong however many values there are.",
		Formula:     "νs²/c² is chi-square with ν = n - 1 degrees of freedom; limits s√(ν/χ²) at its a and 1 - a points.",
		Assumptions: "Normal values, always: the shape is shown beside.",
		Source:      "Fisher 1925, from memory", Example: spreadExample("sd", exampleUnit+"reference = 0.5\n", "chi-square", "sample  = { n = 12, sd = 0.62 }")},
	{Kind: card.Measure, Word: "sd-ratio", Title: "ratio of two standard deviations",
		Meaning:     "The spread of the first group over that of the second.",
		Formula:     "s₁/s₂; on the logarithm each ln s is corrected by ½[ψ(ν/2) - ln(ν/2)] and has variance ¼ψ′(ν/2).",
		Assumptions: "Two independent groups of independent values.",
		Source:      practice, Example: spreadExample("sd-ratio", exampleNames, "", "groups.new     = { n = 14, sd = 0.9 }\ngroups.current = { n = 16, sd = 0.6 }")},
	{Kind: card.Method, Word: "f", Of: []string{"sd-ratio"}, Title: "F test of two spreads",
		Meaning:     "The exact test for normal values; wrong at every size for others.",
		Formula:     "F(c) = (s₁/s₂)²/c² with n₁ - 1 and n₂ - 1 degrees of freedom; limits (s₁/s₂)/√F_a and (s₁/s₂)√F_a with the degrees of freedom exchanged.",
		Assumptions: "Normal values in both groups, always.",
		Source:      "Fisher 1924, from memory", Example: spreadExample("sd-ratio", exampleNames, "f", "groups.new     = { n = 14, sd = 0.9 }\ngroups.current = { n = 16, sd = 0.6 }")},
	{Kind: card.Method, Word: "log-kurtosis", Of: []string{"sd-ratio"}, Title: "log ratio of spreads with the kurtosis of the data",
		Meaning:     "The logarithm of the ratio with an error that grows with the tails of the values, so that normal values are not needed.",
		Formula:     "z(c) = ln(s₁/s₂/c)/√Σ[κ - (n - 3)/(n - 1)]/(4n), κ = NΣ(y - ȳ)⁴/(Σνs²)² over both groups.",
		Assumptions: "The same shape in both groups; some forty values a side. In simulations with eight degrees of freedom of t and 40 and 60 values the test at 5 % was wrong in 5.6 % of cases.",
		Source:      "delta method with the pooled kurtosis of Bonett 2006, from memory", Example: spreadExample("sd-ratio", exampleNames, "log-kurtosis", filterData)},
	{Kind: card.Measure, Word: "paired-sd-ratio", Title: "ratio of two standard deviations in the same pairs",
		Meaning:     "The spread of the first reading over that of the second, where each unit has both.",
		Formula:     "s₁/s₂; on the logarithm the variance is (1 - r²)/(n - 2).",
		Assumptions: "Independent pairs.",
		Source:      practice, Example: spreadExample("paired-sd-ratio", pairedNames, "", "pairs   = { n = 20, first_sd = 1.4, second_sd = 1.0, r = 0.6 }")},
	{Kind: card.Method, Word: "pitman-morgan", Of: []string{"paired-sd-ratio"}, Title: "test of two spreads within pairs",
		Meaning:     "Two spreads are equal exactly when the sum and the difference of the readings are unrelated; the test is that of their correlation.",
		Formula:     "With F = (s₁/s₂)²/c², T(c) = (F - 1)√(n - 2)/(2√(F(1 - r²))) with n - 2 degrees of freedom; limits (s₁/s₂)(K ∓ √(K² - 1))^½, K = 1 + 2(1 - r²)t²/(n - 2).",
		Assumptions: "Both readings normal together, at every size.",
		Source:      "Pitman 1939; Morgan 1939; from memory", Example: spreadExample("paired-sd-ratio", pairedNames, "pitman-morgan", "pairs   = { n = 20, first_sd = 1.4, second_sd = 1.0, r = 0.6 }")},

	{Kind: card.Measure, Word: "correlation", Title: "correlation of two readings",
		Meaning:     "How closely two readings of the same units follow a straight line. It grows with the range of the units chosen, and high correlation is not agreement.",
		Formula:     "Pearson's r = Σ(x - x̄)(y - ȳ)/√(Σ(x - x̄)² Σ(y - ȳ)²); the analysis scale is atanh r with variance 1/(n - 3).",
		Assumptions: "Independent units, both readings normal together.",
		Source:      "Pearson 1896, from memory", Example: spreadExample("correlation", "", "", "sample  = { n = 24, r = 0.48 }")},
	{Kind: card.Method, Word: "fisher-z", Of: []string{"correlation"}, Title: "test on the inverse hyperbolic tangent",
		Meaning:     "On this scale a correlation is close to normal, with an error that does not depend on its size.",
		Formula:     "z(c) = (atanh r - atanh c)√(n - 3).",
		Assumptions: "Both readings normal together; ten units or more.",
		Source:      "Fisher 1921, from memory", Example: spreadExample("correlation", "", "fisher-z", "sample  = { n = 24, r = 0.48 }")},
	{Kind: card.Method, Word: "exact", Of: []string{"correlation"}, Title: "exact test of a correlation",
		Meaning:     "The exact distribution of r for normal readings, integrated from its density; against 0 it is the t test of a correlation.",
		Formula:     "p↑(c) = ∫ from r to 1 of the density (n-2)Γ(n-1)(1-c²)^((n-1)/2)(1-x²)^((n-4)/2)/(√(2π)Γ(n-½)(1-cx)^(n-3/2))·₂F₁(½,½;n-½;(1+cx)/2) dx.",
		Assumptions: "Both readings normal together. No size from four units on is too small.",
		Source:      "Hotelling 1953, from memory", Example: spreadExample("correlation", "", "exact", "sample  = { n = 24, r = 0.48 }")},
	{Kind: card.Measure, Word: "rank-correlation", Title: "rank correlation of two readings",
		Meaning:     "How closely one reading rises with the other, on whatever curve.",
		Formula:     "Pearson's r of the ranks, ties at their mean rank; the analysis scale is atanh with variance (1 + r²/2)/(n - 3).",
		Assumptions: "Independent units.",
		Source:      "Spearman 1904, from memory", Example: spreadExample("rank-correlation", "", "", relatedData)},
	{Kind: card.Method, Word: "bonett-wright", Of: []string{"rank-correlation"}, Title: "test of a rank correlation",
		Meaning:     "As `fisher-z`, with the error that ranks have.",
		Formula:     "z(c) = (atanh r - atanh c)/√((1 + r²/2)/(n - 3)), the same error at every c. Ranks in perfect order have no such error: the permutation test is used, without an interval.",
		Assumptions: "Independent units, ten or more; r not near to -1 or 1.",
		Source:      "Bonett and Wright 2000", Example: spreadExample("rank-correlation", "", "bonett-wright", relatedData)},
	{Kind: card.Method, Word: "permutation", Of: []string{"rank-correlation"}, Title: "permutation test of a rank correlation",
		Meaning:     "Of all ways to pair the readings anew, how many give a rank correlation at least as far out. It tests no relation only; the interval shown is that of `bonett-wright`.",
		Formula:     "All n! orders to nine units; beyond, the observed order and 99 999 random ones from the plan's seed. p↑(0) = number of orders with at least the observed sum of products, over all.",
		Assumptions: "Independent units, each pairing as likely as any other if there is no relation.",
		Source:      "Spearman 1904; Pitman 1937; from memory", Example: spreadExample("rank-correlation", "", "permutation", relatedData)},

	{Kind: card.Measure, Word: "conforming-share", Title: "share of values inside limits",
		Meaning:     "Which share of single values lies inside `spec`, with the limit below which it does not lie. For one limit it is the tolerance limit read the other way round.",
		Formula:     "Normal: Φ((b - x̄)/s) - Φ((a - x̄)/s) for limits a and b. With `distribution = \"any\"` the share of the values counted inside.",
		Assumptions: "Independent values from one population; normal ones unless `distribution = \"any\"`.",
		Source:      practice, Example: spreadExample("conforming-share", exampleUnit+specKeys, "", "sample  = { n = 30, mean = 11.9, sd = 0.8 }")},
	{Kind: card.Measure, Word: "agreement", Title: "share of paired differences inside limits",
		Meaning:     "Whether two ways to measure can stand for each other: the share of differences between their readings that lies inside `spec`. Beside it stand the limits of agreement with limits of their own.",
		Formula:     "`conforming-share` of the differences first - second. Limits of agreement x̄ ± 1.96 s, each with exact 95 % limits x̄ ± s·t′/√n, t′ points of the noncentral t with noncentrality 1.96√n.",
		Assumptions: "Independent pairs; differences that do not grow with the size of what is measured, and normal unless `distribution = \"any\"`.",
		Source:      "Bland and Altman 1986; from memory", Example: spreadExample("agreement", exampleUnit+pairedNames+agreeKeys, "", relatedData)},
	{Kind: card.Method, Word: "normal", Of: []string{"conforming-share", "agreement"}, Title: "share of a normal population",
		Meaning: "With one limit the test is exact. With two, the side that claims a large share is safe (in simulations of n = 5, 10 and 30 the error at 5 % was 2.1 to 5.0 %), and the other side is bounded by the two one-sided shares.",
		Formula: "One limit, K = its distance from the mean in standard deviations: p↑(c) = P(T_{n-1}(√nΦ⁻¹(c)) ≥ √nK). " +
			"Two limits: p↑(c) is the chance, over the pivots of mean and spread, that the share is at most c, integrated in V = s/σ; p↓(c) = min(1, 2·min of the two one-sided p↓).",
		Assumptions: "Normal values, at every size and above all in the tails: a share near 1 is a statement about tails that few values show.",
		Source:      "Owen 1963 for one limit; generalised pivot of Weerahandi 1993 for two; from memory", Example: spreadExample("conforming-share", exampleUnit+specKeys, "normal", "sample  = { n = 30, mean = 11.9, sd = 0.8 }")},
	{Kind: card.Method, Word: "any", Of: []string{"conforming-share", "agreement"}, Title: "share counted, no shape",
		Meaning:     "The values inside the limits are counted, and the count is tested as a proportion. It costs many values: with all of n inside, the lower limit of the share is a^(1/n).",
		Formula:     "`exact` of `proportion` on the count inside; limits belong to the inside.",
		Assumptions: "Independent values from one population. No shape.",
		Source:      "Clopper and Pearson 1934, from memory", Example: spreadExample("agreement", exampleUnit+pairedNames+agreeKeys+anyKey, "any", relatedData)},

	{Kind: card.Diagnostic, Word: "S202", Title: "approximation doubtful at this size", Source: practice,
		Meaning: "The method is right for large numbers, and these are small: few expected counts or events, few subjects in a group, or arms too unequal for the way of pooling.",
		Formula: "Expected counts below 5; events of a rate below 10; fewer than 30 subjects a group for restricted means; for `peto` arms differing by more than 2 to 1, or a log odds ratio beyond 0.7.",
		Repair:  "Use the exact method that the note names. Choosing it after the results is a deviation, and says so."},
	{Kind: card.Diagnostic, Word: "S208", Title: "ties in an exact rank test", Source: "Streitberg and Röhmel 1986, from memory",
		Meaning: "Values or differences are tied. Two groups: the exact distribution given the ties is used. Pairs: the distribution without ties is kept and ties are broken against the claim, which is safe.",
		Repair:  "Nothing needs to be done. Many ties often come from rounding: record values as finely as they are read."},
	{Kind: card.Diagnostic, Word: "S221", Title: "rests on normal values", Source: "Box 1953, from memory",
		Meaning: "Comparisons of spreads and shares inside limits depend on normal values at every sample size: more values do not help. The skewness and kurtosis of the data stand among the assumptions.",
		Repair:  "Look at the values. For two spreads `log-kurtosis`, for shares `distribution = \"any\"` need no normal values."},
}
