package record

// This file is a table; it is long because the language is.

// evidenceKeys are pooling and combination.
func evidenceKeys() []Key {
	const pool, comb = "plan.pooling.NAME.", "plan.combination.NAME."
	return []Key{
		{Path: "plan.pooling", Kind: KindNamedTables,
			Doc: "How several independent studies of an outcome become one estimate; the name is the outcome's. Both models are printed, the plan's decides."},
		{Path: pool + "independent", Kind: KindString, Required: true, Prose: true,
			Doc: "Why the studies share no subjects, units or blocks."},
		{Path: pool + "model", Kind: KindWord, Words: []string{"common", "random"}, Required: true,
			Doc: "One true effect for all studies, or effects that vary between them."},
		{Path: pool + "between", Kind: KindWord, Words: []string{"reml", "paule-mandel", "dersimonian-laird", "sidik-jonkman"}, Default: "reml",
			Doc: "How the variance between studies is estimated."},
		{Path: pool + "interval", Kind: KindWord, Words: []string{"hartung-knapp", "normal"},
			Doc: "The interval: `hartung-knapp` is the default of the random model and never narrower than the common-effect interval unless `guard = false`; `normal` is that of the common model."},
		{Path: pool + "guard", Kind: KindBool, Default: true, Doc: "See `interval`."},
		{Path: pool + "weights", Kind: KindWord, Words: []string{"inverse-variance", "mantel-haenszel", "peto"}, Default: "inverse-variance",
			Doc: "How studies are weighted."},
		{Path: pool + "continuity", Kind: KindNumber, Range: atLeast(0), Default: 0.5,
			Doc: "What is added to the cells of a table that has a zero, and only there."},
		{Path: pool + "include_earlier", Kind: KindBool, Default: false, Doc: "Whether earlier results are pooled too."},

		{Path: "plan.combination", Kind: KindNamedTables,
			Doc: "How p-values without estimates are combined; the name is the outcome's. What it can show is an effect in at least one study."},
		{Path: comb + "method", Kind: KindWord, Required: true,
			Words: []string{"fisher", "stouffer", "tippett", "pearson", "edgington", "logit", "cauchy", "harmonic"},
			Doc:   "The method."},
		{Path: comb + "weights", Kind: KindWord, Words: []string{"equal", "sqrt-n"}, Default: "equal",
			Doc: "`sqrt-n` weights studies by the root of their size, for `stouffer` only."},
	}
}

// planningKeys are sizes, rehearsal, priors, sensitivity, estimands.
func planningKeys() []Key {
	const size, reh, prior, sens, est = "plan.size.NAME.", "plan.rehearsal.", "plan.prior.NAME.", "plan.sensitivity.NAME.", "plan.estimand.NAME."
	return []Key{
		{Path: "plan.size", Kind: KindNamedTables,
			Doc: "The size of the study for a hypothesis. What is missing is solved for; what contradicts itself is an error that prints the arithmetic."},
		{Path: size + "hypothesis", Kind: KindString, Required: true, Doc: "The name of a hypothesis."},
		{Path: size + "assumed", Kind: KindNumber, Doc: "The true effect that is assumed."},
		{Path: size + "sd", Kind: KindNumbers, One: true, Range: above(0), MinLen: 1, MaxLen: 2, Doc: "The standard deviation, or one for each group."},
		{Path: size + "control_mean", Kind: KindNumber, Doc: "The second group's mean."},
		{Path: size + "control_risk", Kind: KindNumber, Range: between(0, 1), Doc: "The second group's risk."},
		{Path: size + "control_rate", Kind: KindNumber, Range: above(0), Doc: "The second group's rate."},
		{Path: size + "exposure", Kind: KindNumber, Range: above(0), Doc: "Exposure of one subject."},
		{Path: size + "event_share", Kind: KindNumber, Range: &Range{Low: 0, High: 1, LowOpen: true}, Doc: "The share of participants who have an event."},
		{Path: size + "discordant", Kind: KindNumber, Range: &Range{Low: 0, High: 1, LowOpen: true}, Doc: "The share of pairs whose members differ."},
		{Path: size + "pair_r", Kind: KindNumber, Range: between(-1, 1), Doc: "The correlation within pairs."},
		{Path: size + "power", Kind: KindNumber, Range: between(0, 1), Doc: "The power that is wanted."},
		{Path: size + "allocation", Kind: KindNumbers, Range: above(0), MinLen: 2, MaxLen: 2, Doc: "The ratio of the groups, first and second."},
		{Path: size + "dropout", Kind: KindNumber, Range: fromBelow(0, 1), Doc: "The share that is lost and must be recruited beside."},
		{Path: size + "n", Kind: KindInt, Range: atLeast(1), Doc: "The total analysed."},
		{Path: size + "half_width", Kind: KindNumber, Range: above(0), Doc: "Half the width of the interval that is wanted."},
		{Path: size + "accept", Kind: KindInt, Range: atLeast(0), Doc: "The number of events that is still accepted, for `below` on a proportion."},

		{Path: "plan.rehearsal", Kind: KindTable, Doc: "How the whole plan is simulated."},
		{Path: reh + "replicates", Kind: KindInt, Range: fromTo(1, 1e9), Default: int64(40000), Doc: "How often."},
		{Path: reh + "scenarios", Kind: KindTables, Doc: "The truths under which it is simulated."},
		{Path: reh + "scenarios.label", Kind: KindString, Required: true, Doc: "The scenario's name for readers."},
		{Path: reh + "scenarios.effects", Kind: KindNamedNumbers, Required: true, Doc: "The true effect of each outcome, under its name."},
		{Path: reh + "scenarios.between_sd", Kind: KindNumber, Range: atLeast(0), Doc: "How far true effects of studies spread, on the analysis scale."},

		{Path: "plan.prior", Kind: KindNamedTables,
			Doc: "What somebody believes before the results, to see how far the results move it. It never changes a verdict."},
		{Path: prior + "outcome", Kind: KindString, Required: true, Doc: "The name of an outcome."},
		{Path: prior + "label", Kind: KindString, Required: true, Prose: true, Doc: "Whose belief, for readers."},
		{Path: prior + "why", Kind: KindString, Required: true, Prose: true, Doc: "Where it comes from."},
		{Path: prior + "mean", Kind: KindNumber, Doc: "Its mean, on the analysis scale; goes with `sd`."},
		{Path: prior + "sd", Kind: KindNumber, Range: above(0), Doc: "Its standard deviation, on the analysis scale."},
		{Path: prior + "median", Kind: KindNumber, Doc: "Its median, on the effect's own scale; goes with `low`, `high` and `level`."},
		{Path: prior + "low", Kind: KindNumber, Doc: "The lower limit of its central interval."},
		{Path: prior + "high", Kind: KindNumber, Doc: "The upper limit."},
		{Path: prior + "level", Kind: KindNumber, Range: between(0, 1), Doc: "The level of that interval."},
		{Path: prior + "null_share", Kind: KindNumber, Range: fromBelow(0, 1), Doc: "How much of the belief sits exactly on the null."},

		{Path: "plan.sensitivity", Kind: KindNamedTables, Doc: "What else will be looked at to see how far a verdict hangs on a choice."},
		{Path: sens + "of", Kind: KindString, Required: true, Doc: "The name of a hypothesis."},
		{Path: sens + "kind", Kind: KindWord, Required: true, Words: []string{"margin", "leave-one-out", "method", "tipping-point", "keep-excluded"},
			Doc: "What is varied."},
		{Path: sens + "method", Kind: KindString, Doc: "The other method, with `kind = \"method\"`."},

		{Path: "plan.estimand", Kind: KindNamedTables, Doc: "What exactly is estimated, in the terms of ICH E9(R1)."},
		{Path: est + "population", Kind: KindString, Prose: true, Doc: "Whom it is about."},
		{Path: est + "treatment", Kind: KindString, Prose: true, Doc: "The conditions that are compared."},
		{Path: est + "variable", Kind: KindString, Prose: true, Doc: "What is observed of each."},
		{Path: est + "summary", Kind: KindString, Prose: true, Doc: "How it is summarised."},
		{Path: est + "intercurrent", Kind: KindTables, Doc: "Events after the start that change what a value means."},
		{Path: est + "intercurrent.event", Kind: KindString, Required: true, Prose: true, Doc: "The event."},
		{Path: est + "intercurrent.strategy", Kind: KindWord, Required: true,
			Words: []string{"treatment-policy", "hypothetical", "composite", "while-on-treatment", "principal-stratum"},
			Doc:   "How it is handled."},
		{Path: est + "intercurrent.why", Kind: KindString, Prose: true, Doc: "Why so."},
	}
}

// resultKeys are [[result]].
func resultKeys() []Key {
	keys := []Key{
		{Path: "result", Kind: KindTables,
			Doc: "What arrived: one entry for each study, outcome and analysis set, in exactly one of the forms `groups`, `sample`, `pairs`, `effect`, `p` and `data`."},
		{Path: "result.study", Kind: KindString, Required: true, Doc: "The study. Different studies are independent."},
		{Path: "result.outcome", Kind: KindString, Required: true, Doc: "The name of an outcome of the plan."},
		{Path: "result.date", Kind: KindDay, Doc: "The day the result became known. This or `known` is required."},
		{Path: "result.known", Kind: KindInstant, Doc: "The moment the result became known, where the order within a day matters."},
		{Path: "result.set", Kind: KindString, Doc: "The analysis set of a summary, once sets are declared."},
		{Path: "result.look", Kind: KindLook, Doc: "The look at which these are the data so far."},
	}
	keys = append(keys, formKeys()...)
	keys = append(keys, dataKeys()...)
	return append(keys, []Key{
		{Path: "result.flow", Kind: KindNamedTables, Doc: "How many there were at each step, for each group, for the flow figure."},
		{Path: "result.flow.NAME.assessed", Kind: KindInt, Range: atLeast(0), Doc: "Assessed."},
		{Path: "result.flow.NAME.randomised", Kind: KindInt, Range: atLeast(0), Doc: "Randomised."},
		{Path: "result.flow.NAME.received", Kind: KindInt, Range: atLeast(0), Doc: "Received what was planned."},
		{Path: "result.flow.NAME.lost", Kind: KindInt, Range: atLeast(0), Doc: "Lost."},
		{Path: "result.flow.NAME.analysed", Kind: KindInt, Range: atLeast(0), Doc: "Analysed."},
		{Path: "result.source", Kind: KindString, Prose: true, Doc: "Where the numbers are written down."},
		{Path: "result.by", Kind: KindString, Prose: true, Doc: "Who entered them."},
		{Path: "result.checked_by", Kind: KindString, Prose: true, Doc: "Who checked them against the source."},
		{Path: "result.leave_out", Kind: KindString, Prose: true,
			Doc: "Why this entry is shown and not analysed. That is a deviation unless a planned exclusion covers it; the verdict with it is printed beside."},
	}...)
}

// formKeys are the summaries a result can give.
func formKeys() []Key {
	keys := []Key{{Path: "result.groups", Kind: KindNamedTables, Doc: "A summary of each of two groups, under the groups' names."}}
	keys = append(keys, groupKeys("result.groups.NAME.")...)
	keys = append(keys, Key{Path: "result.sample", Kind: KindTable, Doc: "A summary of one sample."})
	keys = append(keys, groupKeys("result.sample.")...)
	count := func(path, doc string) Key {
		return Key{Path: path, Kind: KindNumber, Range: atLeast(0), Whole: true, Doc: doc}
	}
	return append(keys, []Key{
		{Path: "result.pairs", Kind: KindTable, Doc: "A summary of pairs: of the differences, of both readings, or the four counts of a yes-or-no reading."},
		{Path: "result.pairs.n", Kind: KindNumber, Range: atLeast(1), Whole: true, Doc: "How many pairs."},
		{Path: "result.pairs.mean", Kind: KindNumber, Doc: "The mean of the differences, first minus second."},
		{Path: "result.pairs.sd", Kind: KindNumber, Range: atLeast(0), Doc: "The standard deviation of the differences."},
		{Path: "result.pairs.first_mean", Kind: KindNumber, Doc: "The mean of the first readings."},
		{Path: "result.pairs.second_mean", Kind: KindNumber, Doc: "The mean of the second readings."},
		{Path: "result.pairs.first_sd", Kind: KindNumber, Range: atLeast(0), Doc: "Their standard deviation: first readings."},
		{Path: "result.pairs.second_sd", Kind: KindNumber, Range: atLeast(0), Doc: "Their standard deviation: second readings."},
		{Path: "result.pairs.r", Kind: KindNumber, Range: fromTo(-1, 1), Doc: "The correlation of the two readings."},
		count("result.pairs.both", "Pairs with the event in both."),
		count("result.pairs.first_only", "Pairs with the event in the first only."),
		count("result.pairs.second_only", "Pairs with the event in the second only."),
		count("result.pairs.neither", "Pairs with the event in neither."),

		{Path: "result.effect", Kind: KindTable, Doc: "An effect estimated elsewhere: `estimate` with `se`, or with `low`, `high` and `level`. Estimates and limits of ratios are ratios; their `se` is that of the natural logarithm."},
		{Path: "result.effect.estimate", Kind: KindNumber, Required: true, Doc: "The estimate."},
		{Path: "result.effect.se", Kind: KindNumber, Range: above(0), Doc: "Its standard error."},
		{Path: "result.effect.df", Kind: KindNumber, Range: above(0), Doc: "Degrees of freedom of that error; without them the normal distribution is used."},
		{Path: "result.effect.n", Kind: KindNumber, Range: atLeast(1), Whole: true, Doc: "How many subjects it rests on."},
		{Path: "result.effect.low", Kind: KindNumber, Doc: "The lower limit of its interval."},
		{Path: "result.effect.high", Kind: KindNumber, Doc: "The upper limit of its interval."},
		{Path: "result.effect.level", Kind: KindNumber, Range: between(0, 1), Doc: "The level of that interval."},

		{Path: "result.p", Kind: KindTable, Doc: "Nothing but a p-value. It can join a combination and nothing else."},
		{Path: "result.p.value", Kind: KindNumber, Range: fromTo(0, 1), Required: true, Doc: "The p-value."},
		{Path: "result.p.sides", Kind: KindInt, Range: fromTo(1, 2), Required: true, Doc: "Whether the test had one side or two."},
		{Path: "result.p.direction", Kind: KindWord, Words: []string{"above", "below", "unknown"}, Required: true,
			Doc: "The side of the null on which the result lies; for a test with one side, the side that was tested."},
		{Path: "result.p.n", Kind: KindNumber, Range: atLeast(1), Whole: true, Doc: "How many subjects it rests on."},
		{Path: "result.p.relation", Kind: KindWord, Words: []string{"=", "<", ">"}, Default: "=", Doc: "Whether the p-value is that number, less or more."},
	}...)
}

// groupKeys are the numbers of one group or sample.
func groupKeys(at string) []Key {
	return []Key{
		{Path: at + "n", Kind: KindNumber, Range: atLeast(1), Whole: true, Doc: "How many."},
		{Path: at + "mean", Kind: KindNumber, Doc: "The mean."},
		{Path: at + "sd", Kind: KindNumber, Range: atLeast(0), Doc: "The standard deviation, with n − 1."},
		{Path: at + "log_mean", Kind: KindNumber, Doc: "The mean of the natural logarithms."},
		{Path: at + "log_sd", Kind: KindNumber, Range: atLeast(0), Doc: "The standard deviation of the natural logarithms."},
		{Path: at + "events", Kind: KindNumber, Range: atLeast(0), Whole: true, Doc: "How many events."},
		{Path: at + "exposure", Kind: KindNumber, Range: above(0), Doc: "The exposure: person-years, hours, metres."},
		{Path: at + "r", Kind: KindNumber, Range: fromTo(-1, 1), Doc: "The correlation."},
	}
}

// dataKeys name the columns of a data file.
func dataKeys() []Key {
	const at = "result.data."
	return []Key{
		{Path: "result.data", Kind: KindTable, Doc: "The columns of a UTF-8 CSV file with a header line that hold individual values."},
		{Path: at + "file", Kind: KindString, Required: true, Doc: "The file, relative to the record and never outside its folder."},
		{Path: at + "value", Kind: KindString, Doc: "The column of values."},
		{Path: at + "group", Kind: KindString, Doc: "The column that says the group."},
		{Path: at + "labels", Kind: KindNamedStrings, Doc: "What the codes of the group column mean: `labels = { A = \"new\", B = \"current\" }`."},
		{Path: at + "pair", Kind: KindString, Doc: "The column that says which two rows are a pair."},
		{Path: at + "subject", Kind: KindString, Doc: "The column that says the subject of a crossover."},
		{Path: at + "period", Kind: KindString, Doc: "The column that says the period, 1 or 2."},
		{Path: at + "sequence", Kind: KindString, Doc: "The column that holds the group of the first period."},
		{Path: at + "first", Kind: KindString, Doc: "The column of first readings."},
		{Path: at + "second", Kind: KindString, Doc: "The column of second readings."},
		{Path: at + "time", Kind: KindString, Doc: "The column of times."},
		{Path: at + "event", Kind: KindString, Doc: "The column of events, 1 or 0; for rates a count."},
		{Path: at + "exposure", Kind: KindString, Doc: "The column of exposures."},
		{Path: at + "cluster", Kind: KindString, Doc: "The column that says the cluster."},
		{Path: at + "missing_values", Kind: KindStrings, Default: []string{"", "NA"}, Doc: "What stands in a cell whose value is missing."},
		{Path: at + "sha256", Kind: KindString, Doc: "The SHA-256 digest of the file, 64 hexadecimal digits. Every view prints the digest and the seal keeps it; a wrong one here is an error."},
	}
}
