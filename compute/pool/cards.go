package pool

import "steelyard/protocol/card"

// This file is a table: the cards of models, estimators, intervals and
// weights, of what is printed with them, and of their notes.

const (
	practice    = "common practice, no source"
	independent = "Independent studies, each with an estimate close to normal on the analysis scale and a variance taken as known."
)

// example is a small invented record that pools five studies.
func example(pooling string) string {
	return `steelyard = 1

[record]
title   = "Invented example"
setting = "other"
date    = 2026-06-01

[plan]
question = "What do these invented studies say together?"
alpha    = { two_sided = 0.05 }

[plan.outcome.fault]
label   = "Faulty parts"
measure = "odds-ratio"
groups  = ["new", "current"]

[plan.hypothesis.H1]
outcome  = "fault"
claim    = "differs"
evidence = "pooled"

[plan.pooling.fault]
independent = "Invented: five plants with machines and staff of their own."
` + pooling + `
[[result]]
study   = "Plant 1, invented"
outcome = "fault"
date    = 2026-01-15
groups.new     = { n = 120, events = 9 }
groups.current = { n = 118, events = 16 }

[[result]]
study   = "Plant 2, invented"
outcome = "fault"
date    = 2026-02-15
groups.new     = { n = 80, events = 7 }
groups.current = { n = 82, events = 8 }

[[result]]
study   = "Plant 3, invented"
outcome = "fault"
date    = 2026-03-15
groups.new     = { n = 210, events = 12 }
groups.current = { n = 205, events = 27 }

[[result]]
study   = "Plant 4, invented"
outcome = "fault"
date    = 2026-04-15
groups.new     = { n = 60, events = 6 }
groups.current = { n = 64, events = 5 }

[[result]]
study   = "Plant 5, invented"
outcome = "fault"
date    = 2026-05-15
groups.new     = { n = 150, events = 10 }
groups.current = { n = 149, events = 19 }
`
}

const (
	commonModel = "model       = \"common\"\n"
	randomModel = "model       = \"random\"\n"
)

var (
	model    = []string{"plan.pooling.model"}
	between  = []string{"plan.pooling.between"}
	interval = []string{"plan.pooling.interval"}
	weights  = []string{"plan.pooling.weights"}
)

// Cards explain pooling.
var Cards = []card.Card{
	{Kind: card.Procedure, Word: "common", Of: model, Title: "one true effect for all studies",
		Meaning:     "Every study estimates the same effect; what differs between them is their own error. The answer is about that one effect.",
		Formula:     "μ̂ = Σy/v / Σ1/v, se = √(1/Σ1/v), normal.",
		Assumptions: independent + " One effect for all: heterogeneity is printed and never used to choose the model.",
		Source:      "Cochran 1954, from memory", Example: example(commonModel)},
	{Kind: card.Procedure, Word: "random", Of: model, Title: "effects that vary between studies",
		Meaning:     "Each setting has an effect of its own; claims are about their mean. The prediction interval says where the effect of a new setting like these may lie.",
		Formula:     "μ̂ = Σwy/Σw with w = 1/(v + τ²), τ² by the estimator, error by the interval that the plan names.",
		Assumptions: independent + " Effects that scatter as normal ones around their mean; more than four studies for τ² to be known at all.",
		Source:      "DerSimonian and Laird 1986, from memory", Example: example(randomModel)},

	{Kind: card.Procedure, Word: "reml", Of: between, Title: "restricted maximum likelihood",
		Meaning:     "The default estimator of the variance between studies: the value under which the scatter of the studies is likeliest, allowing for the mean's being estimated.",
		Formula:     "Maximum of -½Σln(v + τ²) - ½Σw(y - μ̂)² - ½ln Σw. The best of 0 and 64 points between 1e-8 and 1e3 times the mean v, refined as a root of the derivative.",
		Assumptions: independent, Source: "Harville 1977; Viechtbauer 2005; from memory", Example: example(randomModel + "between     = \"reml\"\n")},
	{Kind: card.Procedure, Word: "paule-mandel", Of: between, Title: "the variance that explains the scatter exactly",
		Meaning:     "The variance between studies under which they scatter just as much as expected.",
		Formula:     "The root of Σ(y - μ̂)²/(v + τ²) = k - 1; 0 where the left side is already below at 0.",
		Assumptions: independent + " Normality is not used.", Source: "Paule and Mandel 1982, from memory", Example: example(randomModel + "between     = \"paule-mandel\"\n")},
	{Kind: card.Procedure, Word: "dersimonian-laird", Of: between, Title: "method of moments",
		Meaning:     "The oldest estimator in closed form; too small where studies differ much in size and vary much.",
		Formula:     "τ² = max(0, (Q - (k - 1))/(Σw - Σw²/Σw)), w = 1/v.",
		Assumptions: independent, Source: "DerSimonian and Laird 1986, from memory", Example: example(randomModel + "between     = \"dersimonian-laird\"\n")},
	{Kind: card.Procedure, Word: "sidik-jonkman", Of: between, Title: "estimate that is never zero",
		Meaning:     "One step from a crude start; above 0 unless all estimates are equal, and large where studies hardly vary.",
		Formula:     "τ₀² = Σ(y - ȳ)²/k, r = v/τ₀² + 1, m = Σ(y/r)/Σ(1/r), τ² = Σ(y - m)²/r/(k - 1).",
		Assumptions: independent, Source: "Sidik and Jonkman 2005, from memory", Example: example(randomModel + "between     = \"sidik-jonkman\"\n")},

	{Kind: card.Procedure, Word: "hartung-knapp", Of: interval, Title: "t interval with the scatter that was seen",
		Meaning:     "The default interval under `random`: it allows for the variance between studies being estimated. The guard keeps it from becoming narrower than the normal one; without it (`guard = false`) studies that agree by luck make it too narrow.",
		Formula:     "se² = max(1, q)/Σw with q = Σw(y - μ̂)²/(k - 1); t with k - 1 degrees of freedom. `guard = false`: q in the place of max(1, q).",
		Assumptions: independent, Source: "Hartung and Knapp 2001; Sidik and Jonkman 2002; guard: Röver, Knapp and Friede 2015; from memory",
		Example: example(randomModel + "interval    = \"hartung-knapp\"\n")},
	{Kind: card.Procedure, Word: "normal", Of: interval, Title: "normal interval",
		Meaning:     "The pooled estimate over its standard error, τ² taken as known. Under `random` with few studies it is too narrow.",
		Formula:     "μ̂ ± z/√Σw.",
		Assumptions: independent + " Many studies, under `random`.", Source: "DerSimonian and Laird 1986, from memory", Example: example(randomModel + "interval    = \"normal\"\n")},

	{Kind: card.Procedure, Word: "inverse-variance", Of: weights, Title: "weights by precision",
		Meaning:     "Each study counts by the inverse of its variance. A study of counts with a zero cell needs a correction (`continuity`) to have one.",
		Formula:     "w = 1/v under `common`, 1/(v + τ²) under `random`; with a zero cell `continuity` is added to all four cells (to both counts for rates).",
		Assumptions: independent, Source: "Birge 1932; Cochran 1954; from memory", Example: example(commonModel + "weights     = \"inverse-variance\"\n")},
	{Kind: card.Procedure, Word: "mantel-haenszel", Of: weights, Title: "weights by the tables",
		Meaning:     "The studies are strata of one table. It needs no correction for zero cells and stays right when studies are small; under the common model only.",
		Formula:     "The estimates and variances of the method `mantel-haenszel` with studies as strata; Q about that estimate with weights 1/v.",
		Assumptions: "Independent studies of counts, one effect for all.", Source: "Mantel and Haenszel 1959, from memory", Example: example(commonModel + "weights     = \"mantel-haenszel\"\n")},
	{Kind: card.Procedure, Word: "peto", Of: weights, Title: "observed less expected events",
		Meaning:     "An odds ratio from how many events of the first group exceed what its share of the subjects would have. Good for rare events, equal arms and small effects; S202 says where they are not.",
		Formula:     "ln OR = Σ(x₁ - n₁s/N)/ΣV, variance 1/ΣV, V = n₁n₂s(N - s)/(N²(N - 1)).",
		Assumptions: "Independent studies of counts, one effect for all, arms within 2 to 1, |ln OR| at most 0.7.", Source: "Yusuf, Peto, Lewis, Collins and Sleight 1985, from memory",
		Example: example(commonModel + "weights     = \"peto\"\n")},

	{Kind: card.Term, Word: "heterogeneity", Title: "how far studies differ beyond their errors", Source: "Cochran 1954; Higgins and Thompson 2002; limits Viechtbauer 2007; from memory",
		Meaning: "Q and its p, H², I² and τ² with limits. None of them chooses the model. I² is a share, not a size: it grows with the studies' precision.",
		Formula: "Q = Σ(y - μ̂)²/v against chi-square with k - 1 degrees of freedom; H² = Q/(k - 1); I² = τ²/(τ² + ṽ), ṽ = (k - 1)Σw/((Σw)² - Σw²), w = 1/v. " +
			"Limits of τ² where Σ(y - μ̂)²/(v + τ²) meets the chi-square points; those of I² by the same map."},
	{Kind: card.Term, Word: "prediction interval", Title: "the effect in a new setting", Source: "Higgins, Thompson and Spiegelhalter 2009, from memory",
		Meaning: "Where the true effect of one more setting like these may lie. Needs three studies.",
		Formula: "μ̂ ± t√(τ² + se²) with k - 2 degrees of freedom, se as the interval uses it."},
	{Kind: card.Term, Word: "small-study check", Title: "do small studies show other effects", Source: "Egger, Davey Smith, Schneider and Minder 1997; Peters, Sutton, Jones, Abrams and Rushton 2006; from memory",
		Meaning: "Whether effects go with study size, as they do when small studies with other results stay unpublished; other reasons look the same. Reported, and nothing is corrected for it. Needs ten studies.",
		Formula: "y/√v on 1/√v, the intercept; for two risks y on 1/N weighted by s(N - s)/N, the slope; t with k - 2 degrees of freedom."},
	{Kind: card.Term, Word: "cumulative", Title: "the evidence as it grew", Source: "Lau et al. 1992, from memory",
		Meaning: "The pooled estimate after each study, by date. It is a history, not a series of tests: looking after each is not allowed for.",
		Formula: "The same model on the first 1, 2, … k studies, by date, then by their order in the record."},

	{Kind: card.Diagnostic, Word: "S212", Title: "few studies", Source: practice,
		Meaning: "Two to four studies hardly tell how effects vary between settings; the random-effects interval says less than it seems to.",
		Repair:  "Read the common model's line and each study beside it."},
	{Kind: card.Diagnostic, Word: "S213", Title: "a floor was applied", Source: "Röver, Knapp and Friede 2015, from memory",
		Meaning: "The studies agree better than their own errors let expect, which is luck or an error in their variances. The interval was not made narrower for it; the note gives the one without the floor.",
		Formula: "q = Σw(y - μ̂)²/(k - 1) below 1."},
	{Kind: card.Diagnostic, Word: "S214", Title: "studies without events in both groups", Source: practice,
		Meaning: "A study in which nobody, or everybody, had the event says nothing about a ratio and is left out of it, counted by name. For a difference of risks it stays.",
		Repair:  "Where such studies are many, `risk-difference` or `rate-difference` uses them."},
	{Kind: card.Diagnostic, Word: "S215", Title: "continuity correction", Source: practice,
		Meaning: "A cell was 0, so the stated number was added to the cells of that study alone. The estimate leans toward the correction.",
		Repair:  "`weights = \"mantel-haenszel\"` needs none."},
	{Kind: card.Diagnostic, Word: "S216", Title: "nothing to check or to restore", Source: practice,
		Meaning: "Fewer than ten studies are too few for the small-study check; or a sensitivity analysis asks for left-out results back, and none is left out.",
		Formula: "Fewer than ten studies; no entry with `leave_out`.",
		Repair:  "Nothing needs to be done."},
}
