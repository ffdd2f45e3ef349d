package seal

import (
	"slices"
	"strconv"

	"steelyard/protocol/data"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// watch compares what is known of results with every seal: sealing again does
// not wash a change.
func (s *State) watch(rec *record.Record, tables data.Tables, list *diag.List) {
	now := results(rec)
	sums := map[string]string{}
	for _, f := range files(tables) {
		sums[f.Path] = f.SHA256
	}
	for _, e := range s.Entries {
		for _, was := range e.Results {
			s.watchResult(rec, now, was, e.Number)
		}
		for _, f := range e.Files {
			if sum, ok := sums[f.Path]; ok && sum != f.SHA256 {
				s.watchFile(now, f.Path, &e)
			}
		}
	}
	for i := range s.Edited {
		e := &s.Edited[i]
		e.By = correctedBy(rec, e.Name)
		if e.Declared = e.By >= 0; e.Declared {
			continue
		}
		list.Add(e.warning(rec))
	}
}

// watchResult looks for a sealed result among those of the record.
func (s *State) watchResult(rec *record.Record, now []known, was Sealed, number int) {
	if slices.ContainsFunc(s.Edited, func(e Edited) bool { return e.Name == was.Name && e.File == "" }) {
		return
	}
	edited := Edited{Name: was.Name, Seal: number, Removed: true}
	for _, k := range now {
		if k.Name == was.Name {
			if k.sum == was.SHA256 {
				return
			}
			edited.Removed, edited.Span = false, k.node.Span
		}
		// A result that could not be had and came after all is good news.
		if was.Kind == "missing" && k.Kind != "missing" && k.Study == was.Study && k.Outcome == was.Outcome {
			return
		}
	}
	s.Edited = append(s.Edited, edited)
}

// watchFile marks the results of a seal whose data file has another digest.
func (s *State) watchFile(now []known, path string, e *Entry) {
	for _, k := range now {
		if k.res == nil || k.res.Data == nil || k.res.Data.File.V != path {
			continue
		}
		sealed := slices.ContainsFunc(e.Results, func(r Sealed) bool { return r.Name == k.Name })
		reported := slices.ContainsFunc(s.Edited, func(x Edited) bool { return x.Name == k.Name })
		if sealed && !reported {
			s.Edited = append(s.Edited, Edited{Name: k.Name, Seal: e.Number, File: path, Span: k.res.Data.File.Span})
		}
	}
}

// correctedBy is the deviation that names a result as corrected, else -1.
func correctedBy(rec *record.Record, n Name) int {
	for i, d := range rec.Deviations {
		for _, r := range d.Results {
			if r.Study.V == n.Study && r.Outcome.V == n.Outcome && r.Set.V == n.Set && lookText(r.Look) == n.Look {
				return i
			}
		}
	}
	return -1
}

func (e *Edited) warning(rec *record.Record) diag.Diagnostic {
	what := "the result"
	switch e.Kind {
	case "earlier":
		what = "the earlier result"
	case "missing":
		what = "the missing result"
	}
	what += " of " + quote(e.Study) + " for " + quote(e.Outcome)
	if e.Set != "" {
		what += ", set " + e.Set
	}
	if e.Look != "" {
		what += ", look " + e.Look
	}
	const help = "declare it: [[deviation]] with results = [ { study, outcome } ]"
	switch {
	case e.Removed:
		return diag.Warning("L204", head1(rec), "%s was known in seal %d and is gone", what, e.Seal).WithHelp("put it back; leave_out shows an entry without analysing it")
	case e.File != "":
		return diag.Warning("L206", e.Span, "%s rests on other data than in seal %d: %s has changed", what, e.Seal, e.File).WithHelp("%s", help)
	}
	return diag.Warning("L203", e.Span, "%s is not as it was known in seal %d", what, e.Seal).WithHelp("%s", help)
}

// head1 is the head of the record, the place of what is gone.
func head1(rec *record.Record) diag.Span { return rec.Head.At }

// deviations looks for sealed deviations that are changed or gone.
func (s *State) deviations(rec *record.Record, list *diag.List) {
	var now []string
	for _, n := range items(rec, "deviation") {
		now = append(now, Digest(Canonical(n)))
	}
	var seen []string
	for _, e := range s.Entries {
		for _, d := range e.Deviations {
			if slices.Contains(now, d.SHA256) || slices.Contains(seen, d.SHA256) {
				continue
			}
			seen = append(seen, d.SHA256)
			s.Vanished = append(s.Vanished, Vanished{e.Number, d.Date})
			list.Add(diag.Warning("L205", head1(rec), "the deviation of %s that seal %d knew was changed or removed", d.Date, e.Number).
				WithHelp("put it back as it was; add a second deviation where there is more to say"))
		}
	}
}

// defaults warns where this program would choose otherwise than the one that
// sealed, for keys that the plan still leaves to it.
func (s *State) defaults(rec *record.Record, list *diag.List) {
	now := Defaults(rec)
	for _, was := range s.Binding.Defaults {
		i := slices.IndexFunc(now, func(d Default) bool { return d.Path == was.Path })
		if i < 0 || now[i].Value == was.Value {
			continue
		}
		s.Defaults = append(s.Defaults, Change{Path: was.Path, Old: was.Value, New: now[i].Value, Span: rec.Plan.At, By: -1})
		list.Add(diag.Warning("L208", rec.Plan.At, "this version takes %s as default of %s; the version that sealed, %s, took %s",
			now[i].Value, quote(was.Path), s.Binding.Engine, was.Value).WithHelp("state the value to keep it"))
	}
}

func itoa(n int) string { return strconv.Itoa(n) }

// short cuts a value for a message.
func short(s string) string {
	if r := []rune(s); len(r) > 60 {
		return string(r[:59]) + "…"
	}
	return s
}
