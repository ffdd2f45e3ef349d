package main

import (
	"strings"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/term"
	"steelyard/compute/result"
	"steelyard/protocol/diag"
)

// shownPath is the record as the user calls it.
func shownPath(r batch.Found) string {
	if r.Path == batch.Stdin {
		return "stdin"
	}
	return r.Path
}

// outcome is what became of a record, in one line: verdicts, faults, the files
// where they are asked for, time.
func outcome(r batch.Report, strict, files bool) string {
	var parts []string
	c := r.Compiled
	if c.Failed(strict) {
		parts = append(parts, term.Summary(c.Diagnostics)+", nothing written")
	} else {
		if v := verdicts(c.Result); v != "" {
			parts = append(parts, v)
		}
		if n := c.Diagnostics.Count(diag.SeverityWarning); n > 0 {
			parts = append(parts, term.Count(n, "warning"))
		}
		if files && len(r.Wrote) > 0 {
			parts = append(parts, "wrote "+strings.Join(r.Wrote, ", "))
		}
	}
	return strings.Join(append(parts, term.Took(r.Took)), " · ")
}

// verdicts are the verdicts of a record in words, in its order.
func verdicts(res *result.Result) string {
	var parts []string
	for _, h := range res.Hypotheses {
		word := h.Name + " " + string(h.Verdict)
		if h.PostHoc {
			word += " (post hoc)"
		}
		parts = append(parts, word)
	}
	return strings.Join(parts, ", ")
}
