package effect

import (
	"fmt"
	"slices"
	"strings"

	"steelyard/protocol/card"
)

// practice is the source of rules that no paper states.
const practice = "common practice, no source"

// meansExample is an invented record that compiles: one outcome with a
// measure, one hypothesis with a method, one result in the given form.
func meansExample(measure, outcome, hypothesis, result string) string {
	two := ""
	if m := measure; m != "mean" && m != "estimate" && m != "ratio-estimate" {
		two = "groups  = [\"new\", \"current\"]\n"
	}
	return fmt.Sprintf(`steelyard = 1

[record]
title   = "Invented example: %[1]s"
setting = "laboratory"
date    = 2026-05-04

[plan]
question = "Does the new column filter change the recovery?"
alpha    = { one_sided = 0.05, two_sided = 0.05 }

[plan.outcome.recovery]
label   = "Recovery"
unit    = "mg"
measure = "%[1]s"
%[2]s%[3]s
[plan.hypothesis.H1]
outcome = "recovery"
claim   = "differs"
%[4]s
[[result]]
study   = "Bench 2, invented"
outcome = "recovery"
date    = 2026-05-04
%[5]s
`, measure, two, lines(outcome), lines(hypothesis), strings.TrimRight(result, "\n"))
}

// lines ends a text that is not empty with a newline.
func lines(s string) string {
	if s == "" {
		return ""
	}
	return strings.TrimRight(s, "\n") + "\n"
}

const (
	exampleGroups = `groups.new     = { n = 24, mean = 11.92, sd = 1.31 }
groups.current = { n = 24, mean = 12.10, sd = 1.18 }`
	exampleLogs = `groups.new     = { n = 18, log_mean = 2.31, log_sd = 0.35 }
groups.current = { n = 20, log_mean = 2.12, log_sd = 0.41 }`
	examplePairs  = `pairs   = { n = 15, first_mean = 4.8, second_mean = 4.5, first_sd = 0.9, second_sd = 1.0, r = 0.7 }`
	exampleSample = `sample  = { n = 12, mean = 50.4, sd = 1.9 }`
	exampleData   = `data    = { file = "example.csv", value = "recovery", group = "filter" }`
)

// meansCards explains the measures of means, their methods and given effects.
var meansCards = slices.Concat(meansMeasureCards, meansMethodCards)

// ExampleFiles are the data files that the examples of this package's cards
// name: invented numbers.
func ExampleFiles() map[string]string {
	return map[string]string{"example.csv": `filter,recovery,ph
new,12.1,6.8
new,11.4,7.1
new,13.0,6.5
new,12.6,6.9
new,11.9,7.3
current,12.0,7.0
current,11.2,7.2
current,11.8,6.6
current,12.3,6.7
current,11.1,7.4
`, "pairs.csv": `morning,evening
11.2,10.1
12.9,12.6
10.4,11.0
13.1,11.9
11.8,11.1
12.2,10.3
10.9,10.7
14.0,12.4
12.5,12.1
11.6,9.9
13.4,13.6
10.1,9.8
`, "visits.csv": `event,arm,clinic
1,new,north
0,new,north
0,new,north
0,new,north
0,new,north
1,current,north
1,current,north
0,current,north
0,current,north
1,new,south
0,new,south
0,new,south
0,new,south
1,current,south
1,current,south
0,current,south
0,current,south
`, "values.csv": "recovery\n50.9\n49.8\n51.7\n50.2\n52.4\n48.9\n51.1\n50.6\n"}
}

// meansMeasureCards explains the measures of means and the given effects.
var meansMeasureCards = []card.Card{
	{Kind: card.Measure, Word: "mean", Title: "a mean", Source: practice,
		Meaning:     "The mean of one sample, held against a reference value.",
		Formula:     "x̄ = Σx/n; se = sd/√n.",
		Assumptions: "Independent values from one population.",
		Example:     meansExample("mean", "reference = 50", "", exampleSample)},
	{Kind: card.Measure, Word: "mean-difference", Title: "difference of two means", Source: practice,
		Meaning:     "The mean of the first group minus that of the second, in the unit of the values.",
		Formula:     "x̄₁ - x̄₂; with `adjust` or `strata` the coefficient of the group in a linear model; in a crossover half the difference of the mean period differences.",
		Assumptions: "Two independent groups of independent values.",
		Example:     meansExample("mean-difference", "", "", exampleGroups)},
	{Kind: card.Measure, Word: "paired-mean-difference", Title: "mean difference within pairs", Source: practice,
		Meaning:     "The mean of the differences, first minus second, of readings that belong together.",
		Formula:     "Σd/n with d = first - second; se = sd(d)/√n.",
		Assumptions: "Independent pairs.",
		Example:     meansExample("paired-mean-difference", "", "", examplePairs)},
	{Kind: card.Measure, Word: "standardized-mean-difference", Title: "standardized difference of means", Source: "Hedges 1981, Journal of Educational Statistics 6",
		Meaning:     "The difference of two means in units of their common spread, so that results on different scales can be set side by side.",
		Formula:     "g = J·(x̄₁ - x̄₂)/s with the pooled spread s and J = Γ(ν/2)/(√(ν/2) Γ((ν-1)/2)).",
		Assumptions: "Normal values, equal spreads that mean the same in every study.",
		Example:     meansExample("standardized-mean-difference", "", "", exampleGroups)},
	{Kind: card.Measure, Word: "ratio-of-means", Title: "ratio of two means", Source: practice,
		Meaning:     "The mean of the first group over that of the second.",
		Formula:     "x̄₁/x̄₂; on the natural logarithm the variance is s₁²/(n₁x̄₁²) + s₂²/(n₂x̄₂²).",
		Assumptions: "Both means positive, on a scale with a true zero.",
		Example:     meansExample("ratio-of-means", "", "", exampleGroups)},
	{Kind: card.Measure, Word: "geometric-mean-ratio", Title: "ratio of two geometric means", Source: practice,
		Meaning:     "How many times the typical value of the first group is that of the second, where values spread by factors.",
		Formula:     "exp of the difference of the means of natural logarithms.",
		Assumptions: "All values positive; their logarithms close to normal.",
		Example:     meansExample("geometric-mean-ratio", "", "", exampleLogs)},
	{Kind: card.Measure, Word: "estimate", Title: "an effect estimated elsewhere", Source: practice,
		Meaning:     "Any additive effect with its standard error or interval, as another analysis gave it.",
		Formula:     "The estimate is taken as it is; the error is the one given, or half the interval over its critical value.",
		Assumptions: "The estimate is close to normal, and its error is right.",
		Example:     meansExample("estimate", "reference = 0", "", `effect  = { estimate = 1.3, se = 0.45 }`)},
	{Kind: card.Measure, Word: "ratio-estimate", Title: "a ratio estimated elsewhere", Source: practice,
		Meaning:     "Any ratio with its interval, or with the standard error of its logarithm, as another analysis gave it.",
		Formula:     "As `estimate`, on the natural logarithm.",
		Assumptions: "The logarithm of the estimate is close to normal, and its error is right.",
		Example:     meansExample("ratio-estimate", "", "", `effect  = { estimate = 0.74, low = 0.60, high = 0.92, level = 0.95 }`)},
}

// meansMethodCards explains the methods for means and for given effects.
var meansMethodCards = []card.Card{
	{Kind: card.Method, Word: "t", Of: []string{"mean", "paired-mean-difference"}, Title: "t test",
		Meaning:     "How far the mean lies from a value, in units of its own standard error.",
		Formula:     "T(c) = (mean - c)/(sd/√n) with n - 1 degrees of freedom; limits mean ± t·sd/√n. Pairs by parts: sd² = s₁² + s₂² - 2 r s₁ s₂.",
		Assumptions: "Independent values whose mean is close to normal: near-normal values, or many of them without extreme ones. The checks show skewness, kurtosis and values far out.",
		Source:      "Student 1908, Biometrika 6",
		Example:     meansExample("mean", "reference = 50", `method  = "t"`, exampleSample)},
	{Kind: card.Method, Word: "permutation", Of: []string{"mean", "paired-mean-difference"}, Title: "permutation test by sign changes",
		Meaning: "How many of all ways to turn the signs of the values about c give a mean at least as extreme.",
		Formula: "p↑(c) = (1 + number of non-empty subsets with mean ≤ c)/2ⁿ; the lower limit is the ⌊a·2ⁿ⌋-th smallest subset mean. " +
			"All subsets to n = 20, then 99 999 random ones, drawn from the plan's seed. Subset means within 1e-12 of the range of c count as equal to it.",
		Assumptions: "Independent values, symmetric about the true value. No normality.",
		Source:      "Fisher 1935, The Design of Experiments (from memory); Pitman 1937",
		Example: meansExample("mean", "reference = 50", `method  = "permutation"`,
			`data    = { file = "values.csv", value = "recovery" }`)},
	{Kind: card.Method, Word: "welch", Of: []string{"mean-difference", "geometric-mean-ratio"}, Title: "Welch's t test",
		Meaning: "Two means compared without taking their spreads to be equal.",
		Formula: "T(c) = (x̄₁ - x̄₂ - c)/√(s₁²/n₁ + s₂²/n₂), degrees of freedom by Satterthwaite. Ratios of geometric means: the same on natural logarithms. " +
			"Crossover: on half the period differences of the two sequences.",
		Assumptions: "Independent values in both groups; means close to normal (of the logarithms, for ratios).",
		Source:      "Welch 1947, Biometrika 34; Satterthwaite 1946, Biometrics Bulletin 2; crossover: Hills and Armitage 1979",
		Example:     meansExample("mean-difference", "", `method  = "welch"`, exampleGroups)},
	{Kind: card.Method, Word: "pooled-variance", Of: []string{"mean-difference", "geometric-mean-ratio"}, Title: "t test with one variance",
		Meaning: "Two means compared, both groups taken to have one spread.",
		Formula: "s² = (ν₁s₁² + ν₂s₂²)/(ν₁ + ν₂), se = s√(1/n₁ + 1/n₂), ν₁ + ν₂ degrees of freedom. Ratios of geometric means: the same on natural logarithms. " +
			"Crossover: se = ½ s_D √(1/n₁ + 1/n₂) with s_D the pooled spread of the period differences.",
		Assumptions: "As for `welch`, and equal variances: the ratio of the spreads is shown.",
		Source:      "Student 1908; Fisher 1925 (from memory); crossover: Hills and Armitage 1979",
		Example:     meansExample("geometric-mean-ratio", "", `method  = "pooled-variance"`, exampleLogs)},
	{Kind: card.Method, Word: "permutation", Of: []string{"mean-difference"}, Title: "permutation test of a shift",
		Meaning: "How many of all ways to divide the values into the two groups give a difference at least as extreme, once the first group is moved by c.",
		Formula: "A selection that moves j values out of the first group and j in has d = (Σout - Σin)/j. p↑(c) = (1 + number of d ≤ c)/M; the lower limit is the ⌊aM⌋-th smallest d. " +
			"All selections up to 2 000 000, then 99 999 random ones from the plan's seed. d within 1e-12 of the range of c counts as equal to it.",
		Assumptions: "Exchangeable groups up to a shift: the two distributions have the same shape and spread.",
		Source:      "Pitman 1937, Supplement to the Journal of the Royal Statistical Society 4",
		Example:     meansExample("mean-difference", "", `method  = "permutation"`, exampleData)},
	{Kind: card.Method, Word: "linear", Of: []string{"mean-difference", "geometric-mean-ratio"}, Title: "linear model",
		Meaning: "The difference of means between units alike in the covariates.",
		Formula: "Least squares on intercept, covariates, dummies of factors and strata (reference: the first level in byte order) and the indicator of the first group. " +
			"The effect is the indicator's coefficient, se = s√(X′X)⁻¹, n - p degrees of freedom. Solved by Householder QR; a column with |R_jj| < 1e-10 of the largest is refused.",
		Assumptions: "The outcome depends on the covariates in straight lines, alike in both groups; independent errors of equal variance.",
		Source:      "Fisher 1932, Statistical Methods for Research Workers (from memory); Golub and Van Loan, Matrix Computations",
		Example:     meansExample("mean-difference", "", "method  = \"linear\"\nadjust  = [\"ph\"]", exampleData)},
	{Kind: card.Method, Word: "linear-hc3", Of: []string{"mean-difference", "geometric-mean-ratio"}, Title: "linear model, variances free",
		Meaning:     "The linear model with a standard error that does not take the errors to have one variance.",
		Formula:     "Variance (X′X)⁻¹ Σ x x′ e²/(1-h)² (X′X)⁻¹ with residual e and leverage h of each row; n - p degrees of freedom.",
		Assumptions: "As for `linear`, without equal variances. With few rows it is conservative.",
		Source:      "MacKinnon and White 1985, Journal of Econometrics 29",
		Example:     meansExample("mean-difference", "", "method  = \"linear-hc3\"\nadjust  = [\"ph\"]", exampleData)},
	{Kind: card.Method, Word: "noncentral-t", Of: []string{"standardized-mean-difference"}, Title: "exact test of a standardized difference",
		Meaning: "The difference of two means in units of the common spread, with the interval that belongs to it.",
		Formula: "d = (x̄₁ - x̄₂)/s, ñ = n₁n₂/(n₁+n₂), p↑(c) = P(T_ν(c√ñ) ≥ d√ñ), ν = n₁+n₂-2; estimate g = J·d with the exact J = Γ(ν/2)/(√(ν/2) Γ((ν-1)/2)). " +
			"For pooling v = 1/ñ + g²[1 - (ν-2)/(νJ²)]. Where ln p is below -20 000 only its leading term is computed.",
		Assumptions: "Normal values, equal variances, independence. The same difference is larger in units of a smaller spread: compare only where the spreads mean the same.",
		Source:      "Hedges 1981, Journal of Educational Statistics 6",
		Example:     meansExample("standardized-mean-difference", "", `method  = "noncentral-t"`, exampleGroups)},
	{Kind: card.Method, Word: "fieller", Of: []string{"ratio-of-means"}, Title: "Fieller's test of a ratio",
		Meaning:     "The ratio of two means, tested as the difference x̄₁ - c·x̄₂.",
		Formula:     "T(c) = (x̄₁ - c x̄₂)/√(s₁²/n₁ + c² s₂²/n₂), degrees of freedom by Satterthwaite at every c. A denominator that is not clearly positive leaves no upper limit, a numerator no lower one above 0.",
		Assumptions: "Both true means positive; means close to normal; independence.",
		Source:      "Fieller 1954, Journal of the Royal Statistical Society B 16",
		Example:     meansExample("ratio-of-means", "", `method  = "fieller"`, exampleGroups)},
	{Kind: card.Method, Word: "log-delta", Of: []string{"ratio-of-means"}, Title: "Wald test of a log ratio of means",
		Meaning:     "The logarithm of the ratio with a standard error by the delta method.",
		Formula:     "v = s₁²/(n₁x̄₁²) + s₂²/(n₂x̄₂²), t with degrees of freedom by Satterthwaite on the two terms.",
		Assumptions: "Both means many standard errors above 0; otherwise use `fieller`.",
		Source:      practice,
		Example:     meansExample("ratio-of-means", "", `method  = "log-delta"`, exampleGroups)},
	{Kind: card.Method, Word: "normal", Of: []string{"estimate", "ratio-estimate"}, Title: "given effect, normal",
		Meaning: "An effect estimated elsewhere, tested with its standard error.",
		Formula: "z(c) = (g(estimate) - g(c))/se on the analysis scale g (the logarithm for ratios). From an interval: se = (g(high) - g(low))/(2 crit). " +
			"For measures that are no ratios but analysed on another scale, se is multiplied by g′(estimate).",
		Assumptions: "The estimate is close to normal on the analysis scale and its error is right: neither can be checked here.",
		Source:      practice,
		Example:     meansExample("estimate", "reference = 0", `method  = "normal"`, `effect  = { estimate = 1.3, low = 0.4, high = 2.2, level = 0.95 }`)},
	{Kind: card.Method, Word: "t", Of: []string{"estimate", "ratio-estimate"}, Title: "given effect, t",
		Meaning:     "As `normal`, with the degrees of freedom that came with the effect.",
		Formula:     "t(c) = (g(estimate) - g(c))/se with df degrees of freedom.",
		Assumptions: "As for `normal`.",
		Source:      practice,
		Example:     meansExample("ratio-estimate", "", `method  = "t"`, `effect  = { estimate = 1.21, se = 0.08, df = 17 }`)},
}

// effectCards explains the problems and notes that every measure can raise.
var effectCards = []card.Card{
	{Kind: card.Diagnostic, Word: "S101", Title: "too few observations", Source: practice,
		Meaning: "The data are too few for an error to be estimated, so the hypothesis stays open.",
		Formula: "Each method states its least number; with a design effect D the numbers count as n/D.",
		Repair:  "Nothing can be done with these data. Plan the number with `steelyard size`."},
	{Kind: card.Diagnostic, Word: "S102", Title: "no variation", Source: practice,
		Meaning: "All values are the same, or the model leaves nothing over: no error can be computed, so nothing can be judged.",
		Formula: "A spread of 0, or one below the rounding of the values.",
		Repair:  "Check the values: rounding or a limit of the instrument may hide the spread."},
	{Kind: card.Diagnostic, Word: "S103", Title: "value outside the measure's range", Source: practice,
		Meaning: "A number cannot belong to this measure, as a mean of 0 in a ratio or a value of 0 under a logarithm.",
		Repair:  "Correct the number, or choose a measure whose range holds it."},
	{Kind: card.Diagnostic, Word: "S104", Title: "method not defined here", Source: practice,
		Meaning: "The method does not exist for this measure, or has no place for what the plan asks of it: a systematic part, clusters, a margin.",
		Repair:  "Choose one of the methods that the message lists, or leave `method` out."},
	{Kind: card.Diagnostic, Word: "S105", Title: "too large for the exact method", Source: practice,
		Meaning: "The method goes through more cases than can be computed in a reasonable time.",
		Repair:  "Choose the approximate method: at this size it differs little."},
	{Kind: card.Diagnostic, Word: "S107", Title: "covariate is a combination of others", Source: "Golub and Van Loan, Matrix Computations (from memory)",
		Meaning: "A column of the linear model is constant, or can be computed from those before it, so their effects cannot be told apart.",
		Formula: "|R_jj| < 1e-10 of the largest in the QR decomposition of the centred and scaled columns.",
		Repair:  "Leave the column out; where it is the group itself, a covariate separates the groups completely."},
	{Kind: card.Diagnostic, Word: "S112", Title: "adjust or strata not available", Source: practice,
		Meaning: "The method compares groups as they are.",
		Repair:  "Use `linear` or `linear-hc3` with covariates, or a measure and method that take strata."},
	{Kind: card.Diagnostic, Word: "S113", Title: "an estimate or its error is missing", Source: practice,
		Meaning: "A bare p-value, or an effect without standard error or interval, where an estimate with its error is needed.",
		Repair:  "State `se`, or `low`, `high` and `level`."},
	{Kind: card.Diagnostic, Word: "S201", Title: "no limit on one side", Source: practice,
		Meaning: "The data exclude nothing on this side at this level; the interval has no limit there.",
		Formula: "No c has a p-value at most a on that side."},
	{Kind: card.Diagnostic, Word: "S203", Title: "one group does not vary", Source: practice,
		Meaning: "All values of one group are the same. Its error enters as 0, and the degrees of freedom are those of the other group."},
	{Kind: card.Diagnostic, Word: "S205", Title: "resolution of a permutation test", Source: "Pitman 1937",
		Meaning: "Either random selections stand for all, with the Monte Carlo error stated, or there are so few selections that no p-value reaches the level and a limit does not exist.",
		Formula: "Error √(p(1-p)/M); the smallest p-value is 1/M."},
	{Kind: card.Diagnostic, Word: "S206", Title: "another method was used", Source: practice,
		Meaning: "The planned method cannot be computed from what is at hand; the note names the one that was."},
	{Kind: card.Diagnostic, Word: "S207", Title: "published interval not symmetric", Source: practice,
		Meaning: "The estimate does not lie in the middle of its interval on the analysis scale: the interval was made by another method, or a number is mistyped.",
		Formula: "Off the middle by more than 5 % of the half-width.",
		Repair:  "Compare with the source; if the numbers are right, expect small differences from the published test."},
}
