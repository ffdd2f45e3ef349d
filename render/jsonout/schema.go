package jsonout

// OutputSchema is the JSON Schema (draft 2020-12) of what Write prints,
// indented, ending in a newline.
func OutputSchema() []byte {
	return append(encode(nil, schema(), 0), '\n')
}

// The kinds of values in the schema. A number that may be infinite is null.
func kind(words ...any) *object {
	o := &object{}
	if len(words) == 1 {
		o.put("type", words[0])
	} else {
		o.put("type", words)
	}
	return o
}

func text() *object    { return kind("string") }
func number() *object  { return kind("number", "null") }
func integer() *object { return kind("integer") }
func yesNo() *object   { return kind("boolean") }

// oneOf is a string from a closed list.
func oneOf(words ...string) *object {
	o := kind("string")
	var w []any
	for _, x := range words {
		w = append(w, x)
	}
	o.put("enum", w)
	return o
}

func array(of any) *object {
	o := kind("array")
	o.put("items", of)
	return o
}

// field is one key of an object.
type field struct {
	key      string
	required bool
	value    any
}

func must(key string, value any) field { return field{key, true, value} }
func may(key string, value any) field  { return field{key, false, value} }

// fields is an object with exactly these keys.
func fields(fs ...field) *object {
	o := kind("object")
	p := &object{}
	var req []any
	for _, f := range fs {
		p.put(f.key, f.value)
		if f.required {
			req = append(req, f.key)
		}
	}
	o.put("properties", p)
	o.some("required", req)
	o.flag("additionalProperties", false)
	return o
}

// withLn adds a p-value and its logarithm.
func withLn(key string) []field { return []field{may(key, number()), may("ln_"+key, number())} }

// join concatenates fields and groups of fields.
func joinFields(parts ...any) []field {
	var out []field
	for _, p := range parts {
		switch p := p.(type) {
		case field:
			out = append(out, p)
		case []field:
			out = append(out, p...)
		}
	}
	return out
}

var (
	verdictWords  = []string{"established", "suggested", "contradicted", "open", "pending", "described", "masked"}
	evidenceWords = []string{"single", "pooled", "combined", "none"}
)

// analysisFields are the numbers of one estimate.
func analysisFields() []field {
	return []field{may("method", text()), may("estimate", number()), may("se", number()), may("df", number()), may("level", number()), may("low", number()), may("high", number())}
}

// judgedFields are estimate, tests, p-values and verdict.
func judgedFields() []field {
	test := fields(joinFields(must("null", number()), must("alternative", oneOf("greater", "less", "two-sided")), may("statistic", text()), may("value", number()), may("df", number()), withLn("p"))...)
	return joinFields(may("set", text()), may("n", number()), may("events", number()), analysisFields(), may("notes", array(text())),
		may("tests", array(test)), withLn("p"), withLn("p_adjusted"), may("s_value", number()), may("smallest_margin", number()), may("smallest_limit", number()), may("smallest_low", number()),
		must("verdict", oneOf(verdictWords...)), may("reason", text()), may("reading", text()), may("reading_words", text()))
}

func schema() *object {
	o := &object{}
	o.str("$schema", "https://json-schema.org/draft/2020-12/schema")
	o.str("title", "Steelyard result")
	one := &object{}
	one.integer("const", Version)
	body := fields(
		must("steelyard", one),
		must("engine", text()),
		must("record", fields(must("title", text()), may("number", text()), may("version", text()), may("status", oneOf("draft", "review", "effective", "superseded")),
			may("stage", oneOf("plan-only", "interim", "complete")), may("date", text()), may("setting", text()), may("source_sha256", text()), may("plan_sha256", text()))),
		must("seal", sealSchema()),
		must("masked", yesNo()),
		must("outcomes", outcomesSchema()),
		must("studies", array(studySchema())),
		must("hypotheses", array(hypothesisSchema())),
		may("removed_hypotheses", array(hypothesisSchema())),
		must("pooled", array(pooledSchema())),
		must("combined", array(combinedSchema())),
		must("families", array(familySchema())),
		must("looks", array(lookSchema())),
		must("size", array(fields(must("name", text()), must("hypothesis", text()), must("n", array(number())), may("total", number()), may("recruit", number()), may("power", number()), may("detectable", number()), may("assumed", number())))),
		must("priors", array(priorSchema())),
		must("deviations", array(deviationSchema())),
		must("decisions", array(fields(may("at", text()), may("body", text()), may("on", text()), may("saw", text()), may("what", text())))),
		must("timeline", array(fields(must("at", text()), must("kind", text()), must("what", text()), may("order", text())))),
		must("flow", array(fields(must("study", text()), must("outcome", text()), may("group", text()), may("assessed", number()), may("randomised", number()), may("received", number()), may("lost", number()), may("analysed", number())))),
		must("sensitivity", array(sensitivitySchema())),
		may("conclusion", fields(may("text", text()), may("decision", text()), may("next_steps", text()), may("checked", yesNo()))),
		must("cautions", array(text())),
		must("files", array(fileSchema())),
		must("choices", array(fields(must("what", text()), must("value", text()), must("from", oneOf("plan", "default", "deviation")), may("why", text())))),
		must("diagnostics", array(fields(must("file", text()), must("code", text()), must("severity", oneOf("error", "warning", "note")), must("line", integer()), must("column", integer()), must("message", text()), may("help", text())))),
	)
	o.members = append(o.members, body.members...)
	return o
}
