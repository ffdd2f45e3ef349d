package record

// This file is a table; it is long because the language is.

// planKeys are the keys of [plan] itself.
func planKeys() []Key {
	return []Key{
		{Path: "plan", Kind: KindTable, Required: true,
			Doc: "What was promised before the data. Everything in it is sealed."},
		{Path: "plan.question", Kind: KindString, Required: true, Prose: true,
			Doc: "The decision to be made, in plain words."},
		{Path: "plan.population", Kind: KindString, Prose: true, Doc: "Whom or what the answer is about."},
		{Path: "plan.comparison", Kind: KindString, Prose: true, Doc: "What is compared with what."},
		{Path: "plan.design", Kind: KindString, Prose: true, Doc: "How the results come about."},
		{Path: "plan.background", Kind: KindString, Prose: true, Doc: "What was known before."},
		{Path: "plan.missing", Kind: KindString, Prose: true, Doc: "How missing values will be handled."},
		{Path: "plan.alpha", Kind: KindTable,
			Doc: "The error levels. `differs` uses `two_sided`; every other claim that is judged uses `one_sided`, and `equivalent` uses it for each of its two tests. A level that a claim needs and nobody states is an error."},
		{Path: "plan.alpha.one_sided", Kind: KindNumber, Range: between(0, 0.5),
			Doc: "The chance, at most, of claiming a direction, a margin or a limit wrongly."},
		{Path: "plan.alpha.two_sided", Kind: KindNumber, Range: between(0, 1),
			Doc: "The chance, at most, of claiming a difference where there is none."},
		{Path: "plan.alpha_why", Kind: KindString, Prose: true,
			Doc: "Why these levels. Clinical and safety records are warned when a one-sided level is above 0.025 and this is absent."},
		{Path: "plan.level", Kind: KindNumber, Range: between(0, 1), Default: 0.95,
			Doc: "The level of descriptive intervals: those that decide no claim."},
		{Path: "plan.seed", Kind: KindInt, Range: fromTo(0, 1<<53-1),
			Doc: "The start of all random numbers. Without it the seed follows from the digest of the plan, so that nobody can shop for it."},
	}
}

// outcomeKeys are [plan.outcome.NAME].
func outcomeKeys() []Key {
	const at = "plan.outcome.NAME."
	return []Key{
		{Path: "plan.outcome", Kind: KindNamedTables, Required: true,
			Doc: "What is measured: one table for each outcome, under a name of your choice."},
		{Path: at + "label", Kind: KindString, Required: true, Prose: true,
			Doc: "The outcome's name for readers."},
		{Path: at + "measure", Kind: KindWord, Words: measureWords(), Required: true,
			Doc: "The effect that is estimated. See the list of measures."},
		{Path: at + "unit", Kind: KindString,
			Doc: "Printed with every value."},
		{Path: at + "better", Kind: KindWord, Words: []string{"higher", "lower", "neither"}, Default: "neither",
			Doc: "The direction of benefit. Claims that have a direction require one."},
		{Path: at + "groups", Kind: KindStrings, MinLen: 2, MaxLen: 2,
			Doc: "Two names, for measures of two groups and of pairs: the effect is the first minus the second, or the first over the second."},
		{Path: at + "reference", Kind: KindNumber,
			Doc: "The null of measures of one sample. Correlations and `estimate` take 0 without it; the others require it."},
		{Path: at + "smallest", Kind: KindBounds,
			Doc: "The smallest effect that would matter. A number is a distance from the null on both sides, for ratios a factor above 1. A pair is the two limits as values of the effect, on either side of the null."},
		{Path: at + "why", Kind: KindString, Prose: true,
			Doc: "Why that size. Required with `smallest`; a single word or a stock phrase is refused."},
		{Path: at + "spec", Kind: KindNumbers, MinLen: 2, MaxLen: 2, Infinite: true,
			Doc: "The limits for individual values, low and high, for `conforming-share` and `agreement`; `-inf` and `inf` leave a side open."},
		{Path: at + "distribution", Kind: KindWord, Words: []string{"normal", "any"}, Default: "normal",
			Doc: "What is assumed of individual values, for `conforming-share` and `agreement`."},
		{Path: at + "horizon", Kind: KindNumber, Range: above(0),
			Doc: "The time up to which `restricted-mean-difference` averages."},
		{Path: at + "cluster", Kind: KindTable,
			Doc: "Individuals come in clusters. Data are analysed as cluster means; summaries are widened by 1 + (size − 1) icc, which is printed as an assumption."},
		{Path: at + "cluster.icc", Kind: KindNumber, Range: fromTo(0, 1), Required: true,
			Doc: "The correlation within clusters."},
		{Path: at + "cluster.size", Kind: KindNumber, Range: atLeast(1), Required: true,
			Doc: "The mean number of individuals in a cluster."},
		{Path: at + "systematic_u", Kind: KindNumber, Range: atLeast(0),
			Doc: "A standard uncertainty that all results share, in the effect's unit (for ratios, of its natural logarithm). It is added in quadrature after averaging and never divided by n."},
		{Path: at + "per", Kind: KindNumber, Range: above(0),
			Doc: "Display only: rates are printed per this much exposure. Values in the record stay raw."},
		{Path: at + "as", Kind: KindWord, Words: []string{"percent"},
			Doc: "Display only: proportions are printed in percent. Values in the record stay raw: five points are 0.05."},
		{Path: at + "design", Kind: KindWord, Words: []string{"independent", "crossover"}, Default: "independent",
			Doc: "`crossover`: two periods and two sequences, for `mean-difference` and `geometric-mean-ratio`, from data; the period effect is removed."},
		{Path: at + "estimand", Kind: KindString,
			Doc: "The name of an estimand of the plan."},
		{Path: at + "timepoint", Kind: KindString, Prose: true, Doc: "When it is measured."},
		{Path: at + "instrument", Kind: KindString, Prose: true, Doc: "What it is measured with."},
		{Path: at + "notes", Kind: KindString, Prose: true, Doc: "Anything else a reader should know."},
		{Path: at + "digits", Kind: KindInt, Range: fromTo(0, 8),
			Doc: "Decimals for values in the unit. Without it they follow from the data."},
	}
}

// hypothesisKeys are [plan.hypothesis.NAME].
func hypothesisKeys() []Key {
	const at = "plan.hypothesis.NAME."
	return []Key{
		{Path: "plan.hypothesis", Kind: KindNamedTables, Required: true,
			Doc: "What is claimed of an outcome: one table for each claim, under a name of your choice."},
		{Path: at + "outcome", Kind: KindString, Required: true, Doc: "The name of an outcome of the plan."},
		{Path: at + "claim", Kind: KindWord, Words: claimWords(), Required: true,
			Doc: "What is to be established. See the list of claims."},
		{Path: at + "role", Kind: KindWord, Words: []string{"primary", "secondary", "exploratory"}, Default: "primary",
			Doc: "An exploratory claim is never adjusted and at most suggested."},
		{Path: at + "statement", Kind: KindString, Prose: true, Doc: "The claim in your own words."},
		{Path: at + "alpha", Kind: KindTable, Doc: "Error levels for this claim, instead of the plan's."},
		{Path: at + "alpha.one_sided", Kind: KindNumber, Range: between(0, 0.5), Doc: "As in `plan.alpha`."},
		{Path: at + "alpha.two_sided", Kind: KindNumber, Range: between(0, 1), Doc: "As in `plan.alpha`."},
		{Path: at + "margin", Kind: KindBounds,
			Doc: "The limit this claim is tested against, instead of the outcome's `smallest` and written like it. `noninferior` needs its own in clinical and safety records."},
		{Path: at + "margin_why", Kind: KindString, Prose: true, Doc: "Why that margin; its absence is a warning."},
		{Path: at + "margin_basis", Kind: KindTable,
			Doc: "The evidence that the margin keeps a part of the comparator's effect. A margin beyond the effect's nearer limit is a warning."},
		{Path: at + "margin_basis.effect", Kind: KindNumber, Required: true, Doc: "The comparator's effect, on the outcome's scale."},
		{Path: at + "margin_basis.low", Kind: KindNumber, Required: true, Doc: "The lower limit of its interval."},
		{Path: at + "margin_basis.high", Kind: KindNumber, Required: true, Doc: "The upper limit of its interval."},
		{Path: at + "margin_basis.source", Kind: KindString, Required: true, Prose: true, Doc: "Where it comes from."},
		{Path: at + "limit", Kind: KindNumber, Doc: "The value of the effect that `below` and `above` are about."},
		{Path: at + "evidence", Kind: KindWord, Words: []string{"single", "pooled", "combined"},
			Doc: "How studies speak for the claim: a single one (which `studies` names where there are several), several pooled into one estimate, or several by their p-values. Required once more than one study has results."},
		{Path: at + "method", Kind: KindString,
			Doc: "The test and its matching interval. The first method of the measure is the default; see the list of measures."},
		{Path: at + "studies", Kind: KindStrings, MinLen: 1, Doc: "The studies that count for this claim. Without it, all."},
		{Path: at + "sets", Kind: KindStrings, MinLen: 1,
			Doc: "The analysis sets in which the claim must hold, every one of them. Required once more than one set is declared."},
		{Path: at + "adjust", Kind: KindStrings, MinLen: 1,
			Doc: "Columns of the data files: covariates of a linear model."},
		{Path: at + "strata", Kind: KindString, Doc: "A column of the data files: the analysis is stratified by it."},
	}
}

// familyKeys are families, sets, exclusions and looks.
func familyKeys() []Key {
	keys := []Key{
		{Path: "plan.family", Kind: KindNamedTables,
			Doc: "Several claims judged together, so that the chance of any wrong claim among them stays at the level."},
		{Path: "plan.family.NAME.members", Kind: KindStrings, MinLen: 1, Required: true,
			Doc: "Names of hypotheses, in order of importance."},
		{Path: "plan.family.NAME.procedure", Kind: KindWord, Required: true,
			Words: []string{"all", "bonferroni", "holm", "hochberg", "hommel", "fixed-sequence", "fallback", "graph"},
			Doc:   "How the level is shared. With `all` the family stands when every member does, each at its own level."},
		{Path: "plan.family.NAME.order", Kind: KindStrings, MinLen: 1,
			Doc: "The order of testing for `fixed-sequence` and `fallback`, where it differs from that of `members`."},
		{Path: "plan.family.NAME.weights", Kind: KindNumbers, Range: fromTo(0, 1), MinLen: 1,
			Doc: "Each member's share of the level, in the order of `members`, together at most 1: for `bonferroni`, `holm`, `fallback` and `graph`."},
		{Path: "plan.family.NAME.transfer", Kind: KindRows, Range: fromTo(0, 1), MinLen: 1,
			Doc: "For `graph`: one row for each member with the shares of its level that go to the others once it is established. Rows sum to at most 1, a member gives nothing to itself."},
		{Path: "plan.family.NAME.after", Kind: KindStrings, MinLen: 1,
			Doc: "Families that are tested before this one."},
		{Path: "plan.family.NAME.require", Kind: KindWord, Words: []string{"all", "any"}, Default: "all",
			Doc: "What of those must be established first. `any` opens this family only behind one single `bonferroni` family."},

		{Path: "plan.set", Kind: KindNamedTables, Doc: "Analysis sets: which rows of the data files are analysed."},
		{Path: "plan.set.NAME.label", Kind: KindString, Required: true, Prose: true, Doc: "The set's name for readers."},
		{Path: "plan.set.NAME.why", Kind: KindString, Prose: true, Doc: "Why this set."},
		{Path: "plan.set.NAME.keep", Kind: KindTables, Doc: "Filters; a row is kept when it passes them all. Without any, every row is kept."},
	}
	keys = append(keys, filterKeys("plan.set.NAME.keep.")...)
	keys = append(keys,
		Key{Path: "plan.data", Kind: KindTable, Doc: "What is promised about rows of the data files, for every set."},
		Key{Path: "plan.data.exclude", Kind: KindTables, Doc: "Filters of the exclusions promised in advance: a row that one of them selects is dropped and counted once, by the first that selects it."})
	keys = append(keys, filterKeys("plan.data.exclude.")...)
	return append(keys, looksKeys()...)
}

// filterKeys are the keys of a filter.
func filterKeys(at string) []Key {
	return []Key{
		{Path: at + "column", Kind: KindString, Required: true, Doc: "A column of the data file. Exactly one condition goes with it."},
		{Path: at + "above", Kind: KindNumber, Doc: "The cell is a number above this."},
		{Path: at + "at_least", Kind: KindNumber, Doc: "The cell is this number or more."},
		{Path: at + "below", Kind: KindNumber, Doc: "The cell is a number below this."},
		{Path: at + "at_most", Kind: KindNumber, Doc: "The cell is this number or less."},
		{Path: at + "equals", Kind: KindScalar, Doc: "The cell is this."},
		{Path: at + "one_of", Kind: KindScalars, MinLen: 1, Doc: "The cell is one of these."},
		{Path: at + "missing", Kind: KindBool, Doc: "The cell is missing (`true`), or is not (`false`)."},
		{Path: at + "why", Kind: KindString, Prose: true, Doc: "Why; printed with the count."},
	}
}

func looksKeys() []Key {
	spending := []string{"obrien-fleming", "pocock", "power", "gamma", "none"}
	return []Key{
		{Path: "plan.looks", Kind: KindTable,
			Doc: "Planned looks at the data before the end. Until an entry names its look, its results are masked."},
		{Path: "plan.looks.fractions", Kind: KindNumbers, Range: &Range{Low: 0, High: 1, LowOpen: true}, MinLen: 1,
			Doc: "When looks are planned, as shares of the total information, rising; the last is 1."},
		{Path: "plan.looks.total", Kind: KindNumber, Range: above(0), Doc: "The total information: participants, events, or precision on the analysis scale."},
		{Path: "plan.looks.information", Kind: KindWord, Words: []string{"participants", "events", "precision"}, Default: "participants",
			Doc: "What information is counted in."},
		{Path: "plan.looks.spending", Kind: KindWord, Words: spending,
			Doc: "How the error is spent over the looks. `none` looks without adjusting, and the actual error is printed."},
		{Path: "plan.looks.parameter", Kind: KindNumber, Doc: "The parameter of `power` (above 0) and `gamma`."},
		{Path: "plan.looks.futility", Kind: KindTable, Doc: "Boundaries for stopping because the claim is out of reach."},
		{Path: "plan.looks.futility.spending", Kind: KindWord, Words: spending[:4], Required: true, Doc: "How the second error is spent."},
		{Path: "plan.looks.futility.parameter", Kind: KindNumber, Doc: "Its parameter, as above."},
		{Path: "plan.looks.futility.beta", Kind: KindNumber, Range: between(0, 1), Required: true, Doc: "The second error: one minus the power."},
		{Path: "plan.looks.futility.binding", Kind: KindBool, Default: false,
			Doc: "Whether the study must stop at the boundary. Only then does it count for the first error."},
		{Path: "plan.looks.hypotheses", Kind: KindStrings, MinLen: 1, Doc: "The hypotheses that are looked at; their outcomes are masked. Without it, all."},
		{Path: "plan.looks.masked", Kind: KindBool, Default: true, Doc: "`false` shows results by group before a look, which is printed."},
		{Path: "plan.looks.anytime", Kind: KindBool, Default: false,
			Doc: "A confidence sequence, valid at every look whether planned or not, in place of boundaries."},
	}
}
