package main

import (
	"fmt"
	"slices"
	"strings"
	"time"

	"steelyard/cmd/internal/term"
	"steelyard/protocol/record"
	"steelyard/protocol/seal"
)

// sealReport says what was sealed, what changed since the seal before, how the
// seals stand to the results, and how to have the seal witnessed.
func sealReport(s *sealed, width int) []byte {
	b := term.NewBlock(width)
	e := s.entry
	at := e.Time.UTC().Format(time.RFC3339)
	if s.unchanged {
		b.Head("%s: nothing has changed since seal %d of %s; no seal was added", s.file, e.Number, at)
	} else {
		b.Head("%s: seal %d of %s", s.file, e.Number, at)
	}
	b.Row("entry", "%s", e.Sum)
	b.Row("plan", "%s", e.Plan)
	b.Row("holds", "%s", sealHolds(e))
	b.Row("order", "%s", sealOrder(s))
	if s.before != nil {
		sealChanges(b, s)
	}
	b.Row("witness", "The time of a seal is only as good as the clock and the file. Give the digest of the entry to somebody outside (a registry, an ethics office, a time-stamping authority: --request) and record it as [[witness]] with seal = %d, what, reference and at.", e.Number)
	return b.Bytes()
}

func sealHolds(e *seal.Entry) string {
	parts := []string{"the plan"}
	counts := map[string]int{}
	for _, r := range e.Results {
		counts[r.Kind]++
	}
	for _, kind := range []struct{ word, one string }{{"result", "result"}, {"earlier", "earlier result"}, {"missing", "missing result"}} {
		if n := counts[kind.word]; n > 0 {
			parts = append(parts, term.Count(n, kind.one))
		}
	}
	if n := len(e.Deviations); n > 0 {
		parts = append(parts, term.Count(n, "deviation"))
	}
	if n := len(e.Files); n > 0 {
		parts = append(parts, term.Count(n, "data file"))
	}
	if counts["result"] == 0 {
		parts = append(parts, "no results")
	}
	return strings.Join(parts, ", ")
}

// sealOrder says which seals bind which results.
func sealOrder(s *sealed) string {
	results := s.compiled.Loaded.Record.Results
	if len(results) == 0 {
		day := s.entry.Time.UTC().Add(14*time.Hour).Truncate(24*time.Hour).AddDate(0, 0, 1)
		return fmt.Sprintf("No result is known yet. Those dated %s or later count as sealed before; for earlier days state known, the moment, instead of date.", record.DateOf(day))
	}
	var order []seal.Bind
	counts := map[seal.Bind]int{}
	for _, b := range s.state.Binds {
		if counts[b]++; counts[b] == 1 {
			order = append(order, b)
		}
	}
	var parts []string
	for _, b := range order {
		n := term.Count(counts[b], "result")
		switch b.Order {
		case seal.BeforeResults:
			parts = append(parts, fmt.Sprintf("%s bound by seal %d, sealed before", n, b.Seal))
		case seal.SameDay:
			parts = append(parts, fmt.Sprintf("%s with seal %d on the same day, order unproven", n, b.Seal))
		default:
			parts = append(parts, n+" known before the first seal: sealed after, post hoc")
		}
	}
	return strings.Join(parts, "; ")
}

// sealChanges lists what is not as in the seal before.
func sealChanges(b *term.Block, s *sealed) {
	var lines []string
	known := len(s.before.Results) > 0 || len(s.entry.Results) > 0
	for _, a := range s.state.Amendments {
		if a.Seal != s.entry.Number {
			continue
		}
		for _, c := range a.Changes {
			lines = append(lines, changeKind(c, known)+"  "+changeLine(c))
		}
	}
	lines = append(lines, resultChanges(s)...)
	for _, v := range s.state.Vanished {
		if v.Seal == s.before.Number {
			lines = append(lines, "undeclared  the deviation of "+v.Date+" was changed or removed")
		}
	}
	since := fmt.Sprintf("since seal %d of %s", s.before.Number, s.before.Time.UTC().Format(time.RFC3339))
	if lines == nil {
		lines = []string{"neither plan nor results"}
	}
	b.Row("changed", "%s", since)
	for _, l := range lines {
		b.Line("%s", l)
	}
}

// changeKind is one word for how a change of the plan is to be taken.
func changeKind(c seal.Change, known bool) string {
	switch {
	case c.Wording:
		return "wording   "
	case c.Declared:
		return "declared  "
	case known:
		return "undeclared"
	}
	return "amended   "
}

// changeLine is one change of a plan, old and new.
func changeLine(c seal.Change) string {
	was := c.Old
	switch {
	case was == "" && c.Default != "":
		was = c.Default + " (default)"
	case was == "":
		return c.Path + ": added, " + shorter(c.New)
	case c.New == "":
		return c.Path + ": removed, was " + shorter(was)
	}
	was, now := apart(was, c.New)
	return c.Path + ": " + shorter(was) + " → " + shorter(now)
}

// resultChanges are the results that are new, gone or not as they were.
func resultChanges(s *sealed) (lines []string) {
	for _, was := range s.before.Results {
		i := slices.IndexFunc(s.entry.Results, func(r seal.Sealed) bool { return r.Name == was.Name })
		if i >= 0 && s.entry.Results[i].SHA256 == was.SHA256 {
			continue
		}
		kind, what := "undeclared", "was edited"
		if i < 0 {
			what = "is gone"
		}
		for _, e := range s.state.Edited {
			if e.Name == was.Name && e.Declared {
				kind = "declared  "
			}
		}
		lines = append(lines, kind+"  "+resultName(was.Name)+" "+what)
	}
	for _, f := range s.before.Files {
		for _, g := range s.entry.Files {
			if f.Path == g.Path && f.SHA256 != g.SHA256 {
				lines = append(lines, "data        "+f.Path+" has changed")
			}
		}
	}
	for _, r := range s.entry.Results {
		if !slices.ContainsFunc(s.before.Results, func(x seal.Sealed) bool { return x.Name == r.Name }) {
			lines = append(lines, "new         "+resultName(r.Name))
		}
	}
	return lines
}

// resultName names an entry with results as a reader would.
func resultName(n seal.Name) string {
	what := map[string]string{"earlier": "earlier result", "missing": "missing result"}[n.Kind]
	if what == "" {
		what = "result"
	}
	what += fmt.Sprintf(" %q for %s", n.Study, n.Outcome)
	if n.Set != "" {
		what += ", set " + n.Set
	}
	if n.Look != "" {
		what += ", look " + n.Look
	}
	return what
}

// shorter cuts a long value.
func shorter(s string) string {
	if r := []rune(s); len(r) > 60 {
		return string(r[:59]) + "…"
	}
	return s
}
