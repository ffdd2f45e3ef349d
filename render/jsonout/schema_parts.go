package jsonout

// open is an object whose keys are the user's names.
func openObject(of any) *object {
	o := kind("object")
	o.put("additionalProperties", of)
	return o
}

func resultNameFields() []field {
	look := &object{}
	look.put("type", []any{"string", "integer"})
	return []field{must("study", text()), must("outcome", text()), may("set", text()), may("look", look)}
}

func sealSchema() *object {
	return fields(may("state", oneOf("unsealed", "sealed", "changed", "broken")), must("entries", integer()), may("first_at", text()), may("last_at", text()), may("plan_sha256", text()),
		may("order", oneOf("before-results", "same-day", "after-results", "unsealed")), must("declared", array(text())), must("undeclared", array(text())), may("wording", array(text())),
		must("edited_results", array(fields(append(resultNameFields(), may("file", text()), must("removed", yesNo()), must("declared", yesNo()), may("seal", integer()))...))),
		may("vanished_deviations", array(text())), may("amendments", array(fields(must("seal", integer()), must("at", text()), must("changed", array(fields(must("path", text()), may("old", text()), may("new", text()))))))),
		may("not_computed", array(text())), may("broken", text()), may("order_proved", yesNo()),
		may("witnesses", array(fields(must("seal", integer()), must("what", text()), may("reference", text()), must("outcome", oneOf("stated", "verified", "other-digest", "refused", "unread")),
			may("why", text()), may("at", text()), may("authority", text()), must("chain", yesNo()), may("ca", array(text()))))))
}

func outcomesSchema() *object {
	return openObject(fields(must("label", text()), may("unit", text()), must("measure", text()), may("scale", oneOf("identity", "log", "logit", "atanh")),
		may("null", number()), may("low", number()), may("high", number()), may("why", text()), may("better", oneOf("higher", "lower", "neither")), may("groups", array(text()))))
}

func studySchema() *object {
	given := fields(must("value", number()), must("sides", integer()), may("direction", text()), may("relation", text()), may("n", number()))
	return fields(joinFields(must("study", text()), must("outcome", text()), may("set", text()), may("date", text()), may("look", text()), may("n", number()), may("events", number()),
		analysisFields(), withLn("p"), may("given_p", given),
		must("use", oneOf("analysed", "left-out", "earlier", "superseded", "masked", "missing", "not-computed")), may("why", text()), may("source", text()), may("file", text()))...)
}

func hypothesisSchema() *object {
	pair := array(number())
	check := fields(must("assumption", text()), must("shows", array(fields(must("what", text()), may("group", text()), must("value", number())))))
	next := fields(must("no_size", yesNo()), may("new_study_n80", number()), may("new_study_n90", number()), may("added_n80", number()), may("added_n90", number()), may("excluded_below", number()), may("excluded_above", number()))
	other := array(fields(joinFields(may("because", text()), judgedFields())...))
	return fields(joinFields(must("name", text()), must("outcome", text()), must("claim", text()), may("role", oneOf("primary", "secondary", "exploratory")), may("statement", text()), may("alpha", number()),
		may("margin", pair), may("margin_why", text()), may("limit", number()), may("evidence", oneOf(evidenceWords...)), may("studies", array(text())), judgedFields(),
		must("post_hoc", yesNo()), must("sentence", text()), must("interval_decides", yesNo()), may("descriptive", fields(analysisFields()...)),
		may("curve", array(pair)), may("assumptions", array(check)), may("what_next", next), may("methods_agree", integer()), may("methods_tried", integer()), may("excludes", text()), may("by_set", other), may("alternatives", other))...)
}

func pooledSchema() *object {
	verdicts := openObject(oneOf(verdictWords...))
	left := fields(must("study", text()), must("estimate", number()), must("low", number()), must("high", number()), must("verdicts", verdicts))
	step := fields(may("date", text()), must("study", text()), must("estimate", number()), must("low", number()), must("high", number()))
	small := fields(joinFields(must("kind", oneOf("egger", "peters")), must("coefficient", number()), must("se", number()), must("df", number()), must("t", number()), withLn("p"))...)
	return fields(joinFields(must("outcome", text()), may("set", text()), must("studies", array(text())), must("model", oneOf("common", "random")), may("between", text()), may("interval", text()), may("weighting", text()),
		must("decides", yesNo()), must("k", integer()), analysisFields(), withLn("p"), may("q", number()), may("q_df", number()), withLn("q_p"),
		may("i2", number()), may("i2_low", number()), may("i2_high", number()), may("h2", number()), may("tau2", number()), may("tau2_low", number()), may("tau2_high", number()),
		may("prediction_low", number()), may("prediction_high", number()), must("weights", array(number())), may("left_for_zero", array(text())),
		may("leave_one_out", array(left)), may("cumulative", array(step)), may("small_study", small))...)
}

func combinedSchema() *object {
	tally := fields(joinFields(must("toward", integer()), must("with_direction", integer()), withLn("p"))...)
	return fields(joinFields(must("hypothesis", text()), may("set", text()), must("method", text()), must("k", integer()), may("statistic", number()), may("df", number()), withLn("p"),
		may("toward", text()), must("case", oneOf("as-reported", "worst-case")), may("studies", array(text())), may("tally", tally))...)
}

func familySchema() *object {
	member := fields(joinFields(must("hypothesis", text()), withLn("p"), withLn("p_adjusted"), may("alpha_local", number()), must("rejected", yesNo()))...)
	step := fields(must("hypothesis", text()), must("level", number()), must("p", number()), must("rejected", yesNo()))
	return fields(must("name", text()), must("procedure", text()), may("verdict", oneOf(verdictWords...)), must("alpha", number()), may("after", array(text())), must("members", array(member)), may("path", array(step)))
}

func lookSchema() *object {
	look := &object{}
	look.put("type", []any{"string", "integer"})
	power := fields(may("assumed", number()), may("estimate", number()), may("null", number()))
	return fields(joinFields(must("hypothesis", text()), must("look", look), may("date", text()), may("fraction", number()), may("information", number()), may("alpha_spent", number()),
		may("upper", number()), may("lower", number()), may("value", number()), may("value_low", number()), may("value_high", number()), withLn("p"),
		must("crossed", oneOf("none", "efficacy", "futility")), may("repeated_low", number()), may("repeated_high", number()), may("conditional_power", power))...)
}

func priorSchema() *object {
	belief := fields(may("study", text()), must("mean", number()), must("sd", number()), must("benefit", number()), must("inside", number()), must("harm", number()), may("null_share", number()))
	return fields(must("name", text()), must("outcome", text()), may("label", text()), must("before", belief), must("after", belief), may("bayes_factor", number()), may("ln_bayes_factor", number()), must("path", array(belief)))
}

func deviationSchema() *object {
	return fields(may("date", text()), must("what", text()), must("why", text()), must("results_known", yesNo()), may("changes", array(text())),
		may("results", array(fields(resultNameFields()...))), may("approved", fields(must("by", text()), may("reference", text()), may("date", text()))))
}

func sensitivitySchema() *object {
	at := fields(joinFields(must("margin", number()), withLn("p"), must("verdict", oneOf(verdictWords...)))...)
	tipping := fields(must("missing", array(number())), may("shift", number()), may("events", array(number())), may("verdict", oneOf(verdictWords...)))
	return fields(must("name", text()), must("of", text()), must("kind", text()), may("curve", array(at)), may("smallest_margin", number()),
		may("results", array(fields(joinFields(may("because", text()), judgedFields())...))), may("tipping", tipping))
}

func fileSchema() *object {
	return fields(must("path", text()), must("sha256", text()), may("study", text()), may("outcome", text()), may("set", text()), must("rows", integer()), must("used", integer()), must("dropped", openObject(integer())))
}
