package effect

import (
	"slices"

	"steelyard/protocol/card"
)

// The formats of the problems and notes of the count measures.
const (
	notWhole        = "method %q needs whole numbers of events; %v is none"
	ignoresStrata   = "method %q takes no strata; \"mantel-haenszel\" does"
	needsStrata     = "method \"mantel-haenszel\" needs strata"
	fewExpected     = "the smallest expected count is %.3g, below 5: the normal approximation is doubtful; method %q is exact"
	fewExpectedOnly = "the smallest expected count is %.3g, below 5: the normal approximation is doubtful, and no exact method serves here"
	fewEventsFound  = "only %.4g events: the normal approximation is doubtful below 10; method %q is exact"
	fewEventsOnly   = "only %.4g events: the normal approximation is doubtful below 10, and no exact method serves here"
	zeroCell        = "a cell of the table is 0, which leaves method %q without an error; method %q has one"
	tooManyTables   = "method %q looks at %v tables at most; the groups make %v"
	sparseStrata    = "the strata support no finite ratio above 0: the estimate lies at the end of its range and has no interval"
)

// countExample is a small invented record for a measure and method.
func countExample(outcome, reference, method, numbers string) string {
	return `steelyard = 1

[record]
title   = "Invented example"
setting = "other"

[plan]
question = "What do these invented counts say?"
alpha    = { two_sided = 0.05 }

[plan.outcome.events]
label   = "Events"
` + outcome + reference + `
[plan.hypothesis.H1]
outcome = "events"
claim   = "differs"
method  = "` + method + `"

[[result]]
study   = "Study 1"
outcome = "events"
date    = 2026-04-12
` + numbers
}

const (
	twoGroupsNamed = "groups  = [\"new\", \"current\"]\n"
	fourfoldCounts = "groups.new     = { n = 40, events = 14 }\ngroups.current = { n = 40, events = 6 }\n"
	exposedCounts  = "groups.new     = { events = 12, exposure = 100 }\ngroups.current = { events = 5, exposure = 90 }\n"
	pairedCounts   = "pairs = { both = 20, first_only = 10, second_only = 3, neither = 17 }\n"
)

func proportionExample(method string) string {
	return countExample("measure = \"proportion\"\n", "reference = 0.1\n", method, "sample = { n = 60, events = 2 }\n")
}

func rateExample(method string) string {
	return countExample("measure = \"rate\"\n", "reference = 0.02\n", method, "sample = { events = 5, exposure = 740 }\n")
}

func twoRisksExample(measure, method string) string {
	return countExample("measure = \""+measure+"\"\n", twoGroupsNamed, method, fourfoldCounts)
}

func pairedExample(method string) string {
	return countExample("measure = \"paired-risk-difference\"\n", twoGroupsNamed, method, pairedCounts)
}

func twoRatesExample(measure, method string) string {
	return countExample("measure = \""+measure+"\"\n", twoGroupsNamed, method, exposedCounts)
}

// countCards explains the measures and methods for counts.
var countCards = slices.Concat(countMeasureCards, oneCountCards, twoRisksCards, twoRatesCards)

var countMeasureCards = []card.Card{
	{Kind: card.Measure, Word: "proportion", Title: "a proportion",
		Meaning:     "The share of subjects with the event, held against a reference value.",
		Formula:     "events / n; the analysis scale is the logit, ln(p/(1 - p)) with variance 1/events + 1/(n - events).",
		Assumptions: "Every subject counts once, has the event or not, and none tells anything about another.",
		Source:      "common practice, no source", Example: proportionExample("exact")},
	{Kind: card.Measure, Word: "risk-difference", Title: "difference of two risks",
		Meaning:     "The share with the event in the first group minus that in the second: how many more of a hundred, whatever the level.",
		Formula:     "x1/n1 - x2/n2, between -1 and 1; variance p1·q1/n1 + p2·q2/n2.",
		Assumptions: "Two independent groups of independent subjects.",
		Source:      "common practice, no source", Example: twoRisksExample("risk-difference", "score")},
	{Kind: card.Measure, Word: "risk-ratio", Title: "ratio of two risks",
		Meaning:     "The share with the event in the first group over that in the second. Which of event and non-event is counted changes the ratio.",
		Formula:     "(x1/n1)/(x2/n2); the analysis scale is the natural logarithm with variance 1/x1 - 1/n1 + 1/x2 - 1/n2.",
		Assumptions: "Two independent groups of independent subjects.",
		Source:      "common practice, no source", Example: twoRisksExample("risk-ratio", "score")},
	{Kind: card.Measure, Word: "odds-ratio", Title: "ratio of two odds",
		Meaning:     "The odds of the event in the first group over those in the second. It is close to the risk ratio only where the event is rare.",
		Formula:     "x1(n2 - x2)/(x2(n1 - x1)); the analysis scale is the natural logarithm with variance 1/x1 + 1/(n1 - x1) + 1/x2 + 1/(n2 - x2).",
		Assumptions: "Two independent groups of independent subjects.",
		Source:      "common practice, no source", Example: twoRisksExample("odds-ratio", "score")},
	{Kind: card.Measure, Word: "paired-risk-difference", Title: "difference of two risks in the same pairs",
		Meaning:     "Each pair gives a yes or no on both sides. The difference of the two shares depends only on the pairs that disagree.",
		Formula:     "(first_only - second_only)/pairs; variance [(first_only + second_only)/N - y²]/N.",
		Assumptions: "Independent pairs.",
		Source:      "common practice, no source", Example: pairedExample("tango")},
	{Kind: card.Measure, Word: "rate", Title: "events per exposure",
		Meaning:     "How many events there are per unit of time, area or whatever the exposure is, held against a reference value.",
		Formula:     "events / exposure; the analysis scale is the natural logarithm with variance 1/events.",
		Assumptions: "Events fall independently at a constant rate, so that their number is a Poisson number.",
		Source:      "common practice, no source", Example: rateExample("exact")},
	{Kind: card.Measure, Word: "rate-difference", Title: "difference of two rates",
		Meaning:     "The first group's events per exposure minus the second's.",
		Formula:     "x1/T1 - x2/T2; variance x1/T1² + x2/T2².",
		Assumptions: "Independent events at a constant rate in each group.",
		Source:      "common practice, no source", Example: twoRatesExample("rate-difference", "score")},
	{Kind: card.Measure, Word: "rate-ratio", Title: "ratio of two rates",
		Meaning:     "The first group's events per exposure over the second's.",
		Formula:     "(x1/T1)/(x2/T2); the analysis scale is the natural logarithm with variance 1/x1 + 1/x2.",
		Assumptions: "Independent events at a constant rate in each group.",
		Source:      "common practice, no source", Example: twoRatesExample("rate-ratio", "score")},
}

var oneCountCards = []card.Card{
	{Kind: card.Method, Word: "exact", Of: []string{"proportion"}, Title: "exact limits of a proportion",
		Meaning:     "The p-values are the binomial tails themselves, and the interval holds every proportion that neither tail excludes. It covers at least as often as it says, mostly more often.",
		Formula:     "p-up(c) = P(X >= x | n, c), p-down(c) = P(X <= x | n, c); limits are quantiles of Beta(x, n - x + 1) and Beta(x + 1, n - x).",
		Assumptions: "Independent subjects with one common probability.",
		Source:      "Clopper and Pearson 1934, from memory", Example: proportionExample("exact")},
	{Kind: card.Method, Word: "mid-p", Of: []string{"proportion"}, Title: "mid-p limits of a proportion",
		Meaning:     "As the exact method, with half the probability of the observed number in each tail: shorter, and right on average instead of always.",
		Formula:     "p-up(c) = P(X > x) + P(X = x)/2, p-down(c) = 1 - p-up(c).",
		Assumptions: "Independent subjects with one common probability.",
		Source:      "Lancaster 1961, from memory", Example: proportionExample("mid-p")},
	{Kind: card.Method, Word: "wilson", Of: []string{"proportion"}, Title: "score limits of a proportion",
		Meaning:     "The normal approximation with the variance at the tested value, not at the estimate, so that the interval never leaves 0 to 1.",
		Formula:     "z(c) = (x/n - c)/√(c(1 - c)/n); limits (x + z²/2 -+ z√(x(n - x)/n + z²/4))/(n + z²).",
		Assumptions: "Independent subjects with one common probability; a count that is not tiny.",
		Source:      "Wilson 1927, from memory", Example: proportionExample("wilson")},
	{Kind: card.Method, Word: "exact", Of: []string{"rate"}, Title: "exact limits of a rate",
		Meaning:     "The p-values are the Poisson tails themselves, and the interval holds every rate that neither tail excludes.",
		Formula:     "p-up(c) = P(X >= x | cT), p-down(c) = P(X <= x | cT); the limits are half chi-square quantiles with 2x and 2x + 2 degrees of freedom over T.",
		Assumptions: "Independent events at a constant rate.",
		Source:      "Garwood 1936, from memory", Example: rateExample("exact")},
	{Kind: card.Method, Word: "mid-p", Of: []string{"rate"}, Title: "mid-p limits of a rate",
		Meaning:     "As the exact method, with half the probability of the observed number in each tail.",
		Formula:     "p-up(c) = P(X > x | cT) + P(X = x | cT)/2, p-down(c) = 1 - p-up(c).",
		Assumptions: "Independent events at a constant rate.",
		Source:      "Lancaster 1961, from memory", Example: rateExample("mid-p")},
	{Kind: card.Method, Word: "score", Of: []string{"rate"}, Title: "score limits of a rate",
		Meaning:     "The normal approximation with the variance at the tested rate.",
		Formula:     "z(c) = (x - cT)/√(cT); limits (x + z²/2 -+ z√(x + z²/4))/T.",
		Assumptions: "Independent events at a constant rate; a count that is not tiny.",
		Source:      "common practice, no source", Example: rateExample("score")},
	{Kind: card.Method, Word: "tango", Of: []string{"paired-risk-difference"}, Title: "score method for paired risks",
		Meaning:     "The difference is held against the variance that the pairs would have if the tested difference were true. At 0 it is the test of the pairs that disagree.",
		Formula:     "z(d) = (b - c - Nd)/√(N(2q + d(1 - d))), q the second-only probability of maximum likelihood at d.",
		Assumptions: "Independent pairs.",
		Source:      "Tango 1998, from memory", Example: pairedExample("tango")},
	{Kind: card.Method, Word: "exact", Of: []string{"paired-risk-difference"}, Title: "exact test of the discordant pairs",
		Meaning:     "Given the pairs that disagree, either direction is a coin toss if the risks are equal. It tests 0 only; the interval shown is tango's, and a claim at a margin is refused.",
		Formula:     "p-up(0) = P(X >= b), p-down(0) = P(X <= b), X binomial with b + c tosses and probability 1/2.",
		Assumptions: "Independent pairs.",
		Source:      "McNemar 1947, from memory", Example: pairedExample("exact")},
	{Kind: card.Method, Word: "mid-p", Of: []string{"paired-risk-difference"}, Title: "mid-p test of the discordant pairs",
		Meaning:     "As the exact test, with half the probability of the observed split in each tail. It tests 0 only; the interval shown is tango's.",
		Formula:     "p-up(0) = P(X > b) + P(X = b)/2, X binomial with b + c tosses and probability 1/2.",
		Assumptions: "Independent pairs.",
		Source:      "Lancaster 1961, from memory", Example: pairedExample("mid-p")},
}

var twoRisksCards = []card.Card{
	{Kind: card.Method, Word: "score", Of: []string{"risk-difference", "risk-ratio", "odds-ratio"}, Title: "score method for two risks",
		Meaning:     "The observed effect is held against the variance that the groups would have if the tested value were true. At no effect the three measures give one and the same test, so the measure cannot change that verdict.",
		Formula:     "z(c) = (estimate - c)/se with the risks of maximum likelihood under c and the variance times N/(N - 1). Difference: x1/n1 - x2/n2 - c; ratio: x1/n1 - c·x2/n2; odds: x1 - n1·p1, over their standard errors under c.",
		Assumptions: "Independent subjects; every expected count at least 5.",
		Source:      "Miettinen and Nurminen 1985, from memory", Example: twoRisksExample("risk-difference", "score")},
	{Kind: card.Method, Word: "farrington-manning", Of: []string{"risk-difference", "risk-ratio"}, Title: "score method without N/(N - 1)",
		Meaning:     "The score method with the plain variance; a little narrower in small samples.",
		Formula:     "As score, without the factor N/(N - 1).",
		Assumptions: "Independent subjects; every expected count at least 5.",
		Source:      "Farrington and Manning 1990, from memory", Example: twoRisksExample("risk-ratio", "farrington-manning")},
	{Kind: card.Method, Word: "newcombe", Of: []string{"risk-difference"}, Title: "difference from two Wilson intervals",
		Meaning:     "The Wilson limits of both risks are joined as sides of a right angle. The p-value of a point is the error at which a limit touches it.",
		Formula:     "lower = d - √((p1 - l1)² + (u2 - p2)²), upper = d + √((u1 - p1)² + (p2 - l2)²), with l and u the Wilson limits at the same z.",
		Assumptions: "Independent subjects.",
		Source:      "Newcombe 1998, method 10, from memory", Example: twoRisksExample("risk-difference", "newcombe")},
	{Kind: card.Method, Word: "log-delta", Of: []string{"risk-ratio"}, Title: "Wald method on the log risk ratio",
		Meaning:     "The normal approximation of the logarithm. It has no answer where a group has no events.",
		Formula:     "z(c) = (ln RR - ln c)/√(1/x1 - 1/n1 + 1/x2 - 1/n2).",
		Assumptions: "Independent subjects; no zero cell and none that is tiny.",
		Source:      "Katz, Baptista, Azen and Pike 1978, from memory", Example: twoRisksExample("risk-ratio", "log-delta")},
	{Kind: card.Method, Word: "woolf", Of: []string{"odds-ratio"}, Title: "Wald method on the log odds ratio",
		Meaning:     "The normal approximation of the logarithm. It has no answer where a cell of the table is 0.",
		Formula:     "z(c) = (ln OR - ln c)/√(1/x1 + 1/(n1 - x1) + 1/x2 + 1/(n2 - x2)).",
		Assumptions: "Independent subjects; no zero cell and none that is tiny.",
		Source:      "Woolf 1955, from memory", Example: twoRisksExample("odds-ratio", "woolf")},
	{Kind: card.Method, Word: "exact", Of: []string{"odds-ratio"}, Title: "conditional exact method",
		Meaning:     "All totals of the table are held fixed; what is left is the split of the events, whose exact distribution depends on the odds ratio alone. The estimate is the odds ratio under which the observed split is the mean one.",
		Formula:     "P(X = x) in proportion to C(n1, x)·C(n2, s - x)·c^x; p-up(c) = P(X >= x1), p-down(c) = P(X <= x1).",
		Assumptions: "Independent subjects. No size is too small.",
		Source:      "Fisher 1935; Cornfield 1956; both from memory", Example: twoRisksExample("odds-ratio", "exact")},
	{Kind: card.Method, Word: "mid-p", Of: []string{"odds-ratio"}, Title: "conditional mid-p method",
		Meaning:     "As the conditional exact method, with half the probability of the observed table in each tail.",
		Formula:     "p-up(c) = P(X > x1) + P(X = x1)/2, p-down(c) = 1 - p-up(c).",
		Assumptions: "Independent subjects.",
		Source:      "Lancaster 1961, from memory", Example: twoRisksExample("odds-ratio", "mid-p")},
	{Kind: card.Method, Word: "unconditional", Of: []string{"risk-difference", "risk-ratio"}, Title: "unconditional exact method",
		Meaning:     "Only the group sizes are held fixed. The p-value is the largest probability, over every pair of risks with the tested effect, of a table at least as extreme by the score.",
		Formula:     "p-up(c) = sup over p2 of P(z(X1, X2; c) >= z(x1, x2; c)), over 1001 values of p2 and then between the best ones; z without N/(N - 1); ties within 1e-10.",
		Assumptions: "Independent subjects. No size is too small; n1·n2 at most 4 million.",
		Source:      "Barnard 1947; Chan and Zhang 1999; both from memory", Example: twoRisksExample("risk-difference", "unconditional")},
	{Kind: card.Method, Word: "boschloo", Of: []string{"odds-ratio"}, Title: "unconditional exact method by Fisher's p",
		Meaning:     "As the unconditional method, with the tables ordered by their conditional one-sided p at the tested odds ratio. Its p-value never exceeds the conditional one.",
		Formula:     "p-up(c) = sup over p2 of P(p-conditional(X1, X2; c) <= p-conditional(x1, x2; c)).",
		Assumptions: "Independent subjects. No size is too small; n1·n2 at most 4 million.",
		Source:      "Boschloo 1970, from memory", Example: twoRisksExample("odds-ratio", "boschloo")},
	{Kind: card.Method, Word: "mantel-haenszel", Of: []string{"risk-difference", "risk-ratio", "odds-ratio", "rate-difference", "rate-ratio"},
		Title:       "one effect common to several strata",
		Meaning:     "Every stratum is compared within itself, and the comparisons are weighted into one effect. The test of no association over the strata stands beside it. It reads individual rows, with `strata` naming their column.",
		Formula:     "With N = n1 + n2 in each stratum: OR = Σx1(n2 - x2)/N / Σx2(n1 - x1)/N; RR = Σx1n2/N / Σx2n1/N; RD = Σw(p1 - p2)/Σw, w = n1n2/N; rates with exposures for n. Wald limits on the analysis scale.",
		Assumptions: "One common effect; independent subjects within the strata. Strata without both groups drop out, with a count.",
		Source:      "Mantel and Haenszel 1959; variances of Robins, Breslow and Greenland 1986 (odds ratio), Greenland and Robins 1985 (ratios), Sato 1989 (risk difference); from memory",
		Example: countExample("measure = \"risk-difference\"\n", twoGroupsNamed, "mantel-haenszel\"\nstrata  = \"clinic",
			"data = { file = \"visits.csv\", event = \"event\", group = \"arm\" }\n")},
}

var twoRatesCards = []card.Card{
	{Kind: card.Method, Word: "score", Of: []string{"rate-difference"}, Title: "score method for two rates",
		Meaning:     "The observed difference is held against the variance that the counts would have if the tested difference were true.",
		Formula:     "z(c) = (x1/T1 - x2/T2 - c)/√(r1/T1 + r2/T2), r1 = r2 + c the rates of maximum likelihood.",
		Assumptions: "Independent events at constant rates; counts that are not tiny.",
		Source:      "common practice, no source", Example: twoRatesExample("rate-difference", "score")},
	{Kind: card.Method, Word: "score", Of: []string{"rate-ratio"}, Title: "score method for a ratio of rates",
		Meaning:     "Given all events, the first group's are binomial with a share that the ratio fixes; this is Wilson's method for that share, and the same as the score test of both counts.",
		Formula:     "share = cT1/(cT1 + T2); limits c = share/(1 - share)·T2/T1.",
		Assumptions: "Independent events at constant rates; 10 events or more.",
		Source:      "Wilson 1927, from memory", Example: twoRatesExample("rate-ratio", "score")},
	{Kind: card.Method, Word: "exact", Of: []string{"rate-ratio"}, Title: "exact method for a ratio of rates",
		Meaning:     "Given all events, the first group's are binomial with a share that the ratio fixes; the exact limits of the share are those of the ratio.",
		Formula:     "share = cT1/(cT1 + T2); p-up(c) = P(X >= x1 | x1 + x2, share); limits c = share/(1 - share)·T2/T1.",
		Assumptions: "Independent events at constant rates. No number is too small.",
		Source:      "Przyborowski and Wilenski 1940; Clopper and Pearson 1934; from memory", Example: twoRatesExample("rate-ratio", "exact")},
	{Kind: card.Method, Word: "mid-p", Of: []string{"rate-ratio"}, Title: "mid-p method for a ratio of rates",
		Meaning:     "As the exact method, with half the probability of the observed split in each tail.",
		Formula:     "p-up(c) = P(X > x1) + P(X = x1)/2 with the share cT1/(cT1 + T2).",
		Assumptions: "Independent events at constant rates.",
		Source:      "Lancaster 1961, from memory", Example: twoRatesExample("rate-ratio", "mid-p")},
}
