// Package jsonout prints a result as versioned JSON: the contract that other
// programs read. Numbers have full precision; a limit that does not exist is
// null; keys that do not apply are absent. It computes nothing.
//
//	err := jsonout.Write(os.Stdout, in, res)
package jsonout

import (
	"io"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/record"
	"steelyard/render"
)

// Version is the version of the contract, the value of the first key.
const Version = 1

// Write prints one JSON object, indented, ending in a newline. A record with
// errors prints the same object with its diagnostics.
func Write(w io.Writer, in *protocol.Loaded, res *result.Result) error {
	return print(w, document(in, res))
}

// document builds the whole object in the order of the contract.
func document(in *protocol.Loaded, res *result.Result) *object {
	o := &object{}
	o.integer("steelyard", Version)
	o.str("engine", res.Engine)
	o.put("record", recordObject(in, res))
	o.put("seal", sealObject(res))
	o.flag("masked", res.Masked)
	o.put("outcomes", outcomesObject(res))
	o.list("studies", each(res.Studies, func(s *result.Study) *object { return studyObject(s) }))
	o.list("hypotheses", each(res.Hypotheses, func(h *result.Hypothesis) *object { return hypothesisObject(res, h) }))
	o.some("removed_hypotheses", each(res.Removed, func(h *result.Hypothesis) *object { return hypothesisObject(res, h) }))
	o.list("pooled", each(res.Pooled, pooledObject))
	o.list("combined", each(res.Combined, combinedObject))
	o.list("families", each(res.Families, familyObject))
	o.list("looks", each(res.Looks, lookObject))
	o.list("size", each(res.Sizes, sizeObject))
	o.list("priors", each(res.Priors, priorObject))
	o.list("deviations", deviations(in.Record))
	o.list("decisions", decisions(in.Record))
	o.list("timeline", each(res.Timeline, eventObject))
	o.list("flow", flow(res))
	o.list("sensitivity", each(res.Sensitivity, func(s *result.Sensitivity) *object { return sensitivityObject(res, s) }))
	if c := &res.Conclusion; c.Text != "" || c.Decision != "" || c.NextSteps != "" {
		o.put("conclusion", conclusionObject(c))
	}
	o.list("cautions", words([]string{render.Caution(res.Record.Setting)}))
	o.list("files", files(res))
	o.list("choices", each(res.Choices, choiceObject))
	o.list("diagnostics", diagnostics(in, res))
	return o
}

// each turns a slice into array items.
func each[T any](s []T, f func(*T) *object) []any {
	out := make([]any, 0, len(s))
	for i := range s {
		out = append(out, f(&s[i]))
	}
	return out
}

// plain replaces the blanks that keep numbers together on a page.
func plain(s string) string {
	return strings.NewReplacer("\u00a0", " ", "\u202f", " ").Replace(s)
}

func date(d record.Date) string {
	if d.IsZero() {
		return ""
	}
	return d.String()
}

// recordObject identifies the record; of a record with errors, which has no
// result, what could be read.
func recordObject(in *protocol.Loaded, res *result.Result) *object {
	r, head, o := &res.Record, &in.Record.Head, &object{}
	o.str("title", first(r.Title, head.Title.V))
	o.text("number", first(r.Number, head.Number.V))
	o.text("version", first(r.Version, head.Version.V))
	if s := first(r.Status, head.Status.V); documentStatus(s) {
		o.str("status", s)
	}
	o.text("stage", string(r.Stage))
	o.text("date", date(r.Date))
	o.text("setting", first(r.Setting, head.Setting.V))
	o.text("source_sha256", r.SourceSHA256)
	o.text("plan_sha256", r.PlanSHA256)
	return o
}

// first is the first text that is not empty.
func first(a, b string) string {
	if a != "" {
		return a
	}
	return b
}

// documentStatus reports whether a word is a status of the language: an
// erroneous record can hold any.
func documentStatus(s string) bool {
	switch s {
	case "draft", "review", "effective", "superseded":
		return true
	}
	return false
}

func sealObject(res *result.Result) *object {
	s, o := &res.Seal, &object{}
	o.text("state", s.State)
	o.integer("entries", s.Entries)
	o.text("first_at", s.FirstAt)
	o.text("last_at", s.LastAt)
	o.text("plan_sha256", s.PlanSHA256)
	o.text("order", s.Order)
	var declared, undeclared, wording []any
	for _, c := range s.Changes {
		switch {
		case c.Wording:
			wording = append(wording, c.Path)
		case c.Declared:
			declared = append(declared, c.Path)
		default:
			undeclared = append(undeclared, c.Path)
		}
	}
	o.list("declared", declared)
	o.list("undeclared", undeclared)
	o.some("wording", wording)
	o.list("edited_results", each(s.EditedResults, func(e *result.ResultName) *object {
		x := &object{}
		x.str("study", e.Study)
		x.str("outcome", e.Outcome)
		x.text("set", e.Set)
		x.text("look", e.Look)
		x.text("file", e.File)
		x.flag("removed", e.Removed)
		x.flag("declared", e.Declared)
		if e.Seal > 0 {
			x.integer("seal", e.Seal)
		}
		return x
	}))
	o.some("vanished_deviations", words(s.Vanished))
	o.some("amendments", each(s.Amendments, func(a *result.Amendment) *object {
		x := &object{}
		x.integer("seal", a.Number)
		x.str("at", a.At)
		x.list("changed", each(a.Changes, func(ch *result.Change) *object {
			y := &object{}
			y.str("path", ch.Path)
			y.text("old", ch.Old)
			y.text("new", ch.New)
			return y
		}))
		return x
	}))
	o.some("not_computed", words(s.Unreadable))
	o.text("broken", s.Broken)
	o.some("witnesses", each(s.Witnesses, witnessObject))
	if len(s.Witnesses) > 0 {
		o.flag("order_proved", s.OrderProved)
	}
	return o
}

func witnessObject(w *result.Witness) *object {
	o := &object{}
	o.integer("seal", w.Seal)
	o.str("what", w.What)
	o.text("reference", w.Reference)
	o.str("outcome", w.Outcome)
	o.text("why", w.Why)
	o.text("at", w.At)
	o.text("authority", w.Authority)
	o.flag("chain", w.Chain)
	o.some("ca", words(w.CA))
	return o
}

func outcomesObject(res *result.Result) *object {
	all := &object{}
	for i := range res.Outcomes {
		x, o := &res.Outcomes[i], &object{}
		o.str("label", x.Label)
		o.text("unit", x.Unit)
		o.str("measure", x.Measure)
		o.text("scale", string(x.Scale))
		o.opt("null", x.Null)
		o.opt("low", x.Low)
		o.opt("high", x.High)
		o.text("why", x.Why)
		o.text("better", x.Better)
		if x.Groups[0] != "" {
			o.list("groups", words(x.Groups[:]))
		}
		all.put(x.Name, o)
	}
	return all
}

// analysis adds the numbers of one estimate.
func analysis(o *object, a *result.Analysis) {
	o.text("method", a.Method)
	o.opt("estimate", a.Estimate)
	o.opt("se", a.SE)
	o.opt("df", a.DF)
	if a.Low.OK || a.High.OK {
		o.number("level", a.Level)
	}
	o.opt("low", a.Low)
	o.opt("high", a.High)
}

// notes are a computation's findings: their codes. The texts are diagnostics.
func notes(n []result.Note) []any {
	var out []any
	for _, x := range n {
		out = append(out, x.Code)
	}
	return out
}

func studyObject(s *result.Study) *object {
	o := &object{}
	o.str("study", s.Study)
	o.str("outcome", s.Outcome)
	o.text("set", s.Set)
	o.text("date", date(s.Date))
	o.text("look", s.Look)
	if s.Analysis.N > 0 {
		o.number("n", s.Analysis.N)
	}
	o.opt("events", s.Analysis.Events)
	if s.Analysis.Method != "" && s.Use != result.MaskedUse {
		analysis(o, &s.Analysis)
		o.p("p", s.P)
	}
	if b := s.BareP; b != nil && s.Use != result.MaskedUse {
		x := &object{}
		x.number("value", b.Value)
		x.integer("sides", b.Sides)
		x.text("direction", b.Direction)
		x.text("relation", b.Relation)
		x.opt("n", b.N)
		o.put("given_p", x)
	}
	o.str("use", string(s.Use))
	o.text("why", s.Why)
	o.text("source", s.Source)
	o.text("file", s.File)
	return o
}

// flow lists the stated numbers per group.
func flow(res *result.Result) []any {
	var out []any
	for i := range res.Studies {
		s := &res.Studies[i]
		if s.Use == result.MaskedUse {
			continue
		}
		for _, g := range s.Groups {
			if !g.Assessed.OK && !g.Randomised.OK && !g.Received.OK && !g.Lost.OK && !g.Analysed.OK {
				continue
			}
			o := &object{}
			o.str("study", s.Study)
			o.str("outcome", s.Outcome)
			o.text("group", g.Name)
			o.opt("assessed", g.Assessed)
			o.opt("randomised", g.Randomised)
			o.opt("received", g.Received)
			o.opt("lost", g.Lost)
			o.opt("analysed", g.Analysed)
			out = append(out, o)
		}
	}
	return out
}
