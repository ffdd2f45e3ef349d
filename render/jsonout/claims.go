package jsonout

import (
	"steelyard/compute/result"
	"steelyard/render"
)

func hypothesisObject(res *result.Result, h *result.Hypothesis) *object {
	o := &object{}
	o.str("name", h.Name)
	o.str("outcome", h.Outcome)
	o.str("claim", h.Claim)
	o.text("role", h.Role)
	o.text("statement", h.Statement)
	if h.Claim != "describe" {
		o.number("alpha", h.Alpha)
	}
	if h.MarginLow.OK && h.MarginHigh.OK {
		o.list("margin", []any{finite(h.MarginLow.V), finite(h.MarginHigh.V)})
	}
	o.text("margin_why", h.MarginWhy)
	o.opt("limit", h.Limit)
	o.text("evidence", h.Evidence)
	o.some("studies", words(h.Studies))
	judgedNumbers(o, res, h, &h.Judged)
	verdict(o, res, h, &h.Judged)
	o.flag("post_hoc", h.PostHoc)
	o.str("sentence", plain(render.Sentence(res, h, &h.Judged)))
	o.flag("interval_decides", h.IntervalDecides)
	if h.Descriptive.Low.OK || h.Descriptive.High.OK {
		d := &object{}
		analysis(d, &h.Descriptive)
		o.put("descriptive", d)
	}
	o.some("curve", curve(h.Curve))
	o.some("assumptions", each(h.Assumptions, checkObject))
	if h.WhatNext != nil {
		o.put("what_next", nextObject(h.WhatNext))
	}
	if h.MethodsTried > 0 {
		o.integer("methods_agree", h.MethodsAgree)
		o.integer("methods_tried", h.MethodsTried)
	}
	o.text("excludes", h.Excludes)
	o.some("by_set", judgements(res, h, h.BySet))
	o.some("alternatives", judgements(res, h, h.Alternatives))
	return o
}

// withP reports whether a verdict carries a p-value.
func withP(v result.Verdict) bool {
	switch v {
	case result.Described, result.Masked, result.Pending:
		return false
	case result.Established, result.Suggested, result.Contradicted, result.Open:
		return true
	}
	return false
}

// judgedNumbers adds estimate, interval, tests and p-values.
func judgedNumbers(o *object, res *result.Result, h *result.Hypothesis, j *result.Judged) {
	o.text("set", j.Set)
	if j.Verdict == result.Masked {
		return
	}
	if j.N > 0 {
		o.number("n", j.N)
	}
	o.opt("events", j.Events)
	analysis(o, &j.Analysis)
	o.some("notes", notes(j.Notes))
	if !withP(j.Verdict) {
		return
	}
	o.some("tests", each(j.Tests, testObject))
	o.p("p", j.P)
	o.p("p_adjusted", j.PAdjusted)
	o.opt("s_value", j.SValue)
	o.opt("smallest_margin", j.SmallestMargin)
	o.opt("smallest_limit", j.SmallestLimit)
	o.opt("smallest_low", j.SmallestLow)
}

// verdict adds the verdict with its reason and reading.
func verdict(o *object, res *result.Result, h *result.Hypothesis, j *result.Judged) {
	o.str("verdict", string(j.Verdict))
	if j.Reason != nil {
		o.str("reason", plain(render.NoteText(*j.Reason)))
	}
	if withP(j.Verdict) {
		better := render.Better(res, h.Outcome)
		o.text("reading", render.ReadingName(j.Reading, better))
		o.text("reading_words", plain(render.ReadingWords(j.Reading, better)))
	}
}

// judgements are sets or alternatives: the same numbers and verdict.
func judgements(res *result.Result, h *result.Hypothesis, js []result.Judged) []any {
	return each(js, func(j *result.Judged) *object {
		o := &object{}
		o.text("because", j.Because)
		judgedNumbers(o, res, h, j)
		verdict(o, res, h, j)
		return o
	})
}

func testObject(t *result.Test) *object {
	o := &object{}
	o.number("null", t.Null)
	o.str("alternative", t.Alternative)
	o.text("statistic", t.Statistic)
	o.opt("value", t.Value)
	o.opt("df", t.DF)
	o.p("p", t.P)
	return o
}

// curve are the points of the p-value function.
func curve(c []result.CurvePoint) []any {
	out := make([]any, 0, len(c))
	for _, p := range c {
		out = append(out, []any{finite(p.Value), finite(p.P)})
	}
	return out
}

func checkObject(c *result.Check) *object {
	o := &object{}
	o.str("assumption", c.Assumption)
	o.list("shows", each(c.Shows, func(s *result.Shown) *object {
		x := &object{}
		x.str("what", s.What)
		x.text("group", s.Group)
		x.number("value", s.Value)
		return x
	}))
	return o
}

func nextObject(n *result.WhatNext) *object {
	o := &object{}
	o.flag("no_size", n.NoSize)
	o.opt("new_study_n80", n.NewStudyN80)
	o.opt("new_study_n90", n.NewStudyN90)
	o.opt("added_n80", n.AddedN80)
	o.opt("added_n90", n.AddedN90)
	o.opt("excluded_below", n.ExcludedLow)
	o.opt("excluded_above", n.ExcludedHigh)
	return o
}

func sensitivityObject(res *result.Result, s *result.Sensitivity) *object {
	o := &object{}
	o.str("name", s.Name)
	o.str("of", s.Of)
	o.str("kind", s.Kind)
	o.some("curve", each(s.Curve, func(m *result.MarginVerdict) *object {
		x := &object{}
		x.number("margin", m.Margin)
		x.p("p", m.P)
		x.str("verdict", string(m.Verdict))
		return x
	}))
	o.opt("smallest_margin", s.Smallest)
	for i := range res.Hypotheses {
		if h := &res.Hypotheses[i]; h.Name == s.Of {
			o.some("results", judgements(res, h, s.Judged))
		}
	}
	if t := s.Tipping; t != nil {
		x := &object{}
		x.list("missing", []any{finite(t.Missing[0]), finite(t.Missing[1])})
		x.opt("shift", t.Shift)
		if t.Events[0].OK && t.Events[1].OK {
			x.list("events", []any{finite(t.Events[0].V), finite(t.Events[1].V)})
		}
		x.text("verdict", string(t.Verdict))
		o.put("tipping", x)
	}
	return o
}
