package jsonout

import (
	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/record"
)

func deviations(r *record.Record) []any {
	var out []any
	for _, d := range r.Deviations {
		o := &object{}
		o.text("date", date(d.Date.V))
		o.str("what", d.What.V)
		o.str("why", d.Why.V)
		o.flag("results_known", d.ResultsKnown.V)
		var paths []any
		for _, s := range d.Changes.V {
			paths = append(paths, s.V)
		}
		o.some("changes", paths)
		var results []any
		for _, x := range d.Results {
			e := &object{}
			e.str("study", x.Study.V)
			e.str("outcome", x.Outcome.V)
			e.text("set", x.Set.V)
			look(e, x.Look)
			results = append(results, e)
		}
		o.some("results", results)
		if a := d.Approved; a != nil {
			e := &object{}
			e.str("by", a.By.V)
			e.text("reference", a.Reference.V)
			e.text("date", date(a.Date.V))
			o.put("approved", e)
		}
		out = append(out, o)
	}
	return out
}

// look adds the look of an entry where it has one.
func look(o *object, l record.Look) {
	switch {
	case !l.Stated:
	case l.Unplanned:
		o.str("look", "unplanned")
	default:
		o.integer("look", l.Number)
	}
}

func decisions(r *record.Record) []any {
	var out []any
	for _, d := range r.Decisions {
		o := &object{}
		o.text("at", instant(d.At))
		o.text("body", d.Body.V)
		o.text("on", d.On.V)
		o.text("saw", d.Saw.V)
		o.text("what", d.What.V)
		out = append(out, o)
	}
	return out
}

// instant is RFC 3339 with the offset as written.
func instant(t record.Instant) string {
	if !t.Stated {
		return ""
	}
	return t.V.Format("2006-01-02T15:04:05.999999999Z07:00")
}

func eventObject(e *result.Event) *object {
	o := &object{}
	o.str("at", e.At)
	o.str("kind", e.Kind)
	o.str("what", e.What)
	o.text("order", e.Order)
	return o
}

func conclusionObject(c *result.Conclusion) *object {
	o := &object{}
	o.text("text", c.Text)
	o.text("decision", c.Decision)
	o.text("next_steps", c.NextSteps)
	if c.Text != "" {
		o.flag("checked", c.Checked)
	}
	return o
}

func files(res *result.Result) []any {
	return each(res.Files, func(f *result.File) *object {
		o := &object{}
		o.str("path", f.Path)
		o.str("sha256", f.SHA256)
		o.text("study", f.Study)
		o.text("outcome", f.Outcome)
		o.text("set", f.Set)
		o.integer("rows", f.Rows)
		o.integer("used", f.Used)
		dropped, seen := &object{}, map[string]int{}
		var order []string
		for _, d := range f.Dropped {
			if _, ok := seen[d.Reason]; !ok {
				order = append(order, d.Reason)
			}
			seen[d.Reason] += d.Count
		}
		for _, r := range order {
			dropped.integer(r, seen[r])
		}
		o.put("dropped", dropped)
		return o
	})
}

func choiceObject(c *result.Choice) *object {
	o := &object{}
	o.str("what", c.What)
	o.str("value", c.Value)
	o.str("from", c.From)
	o.text("why", c.Why)
	return o
}

func diagnostics(in *protocol.Loaded, res *result.Result) []any {
	var out []any
	for _, d := range res.Diagnostics {
		o := &object{}
		file, line, column := in.Source.Place(d)
		o.str("file", file)
		o.str("code", d.Code)
		o.str("severity", d.Severity.String())
		o.integer("line", line)
		o.integer("column", column)
		o.str("message", d.Message)
		o.text("help", d.Help)
		out = append(out, o)
	}
	return out
}
