package compute

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/diag"
)

// warnings are the S codes that weigh as warnings (methods.md N); the codes of
// the 100s that come from data leave a hypothesis open and warn too.
var warnings = []string{"S202", "S204", "S207", "S210", "S211", "S214", "S222", "S223"}

// severity weighs a code of this room.
func severity(code string) diag.Severity {
	if strings.HasPrefix(code, "S1") || slices.Contains(warnings, code) {
		return diag.SeverityWarning
	}
	return diag.SeverityNote
}

// Text fills a note's message with its arguments. Numbers are given six
// significant digits; the typographic minus is the views' business.
func Text(n result.Note) string {
	if len(n.Args) == 0 {
		return n.Message
	}
	return fmt.Sprintf(n.Message, n.Args...)
}

// note raises a finding at its place, once.
func (r *run) note(at diag.Span, about string, n result.Note) {
	d := diag.Diagnostic{Code: n.Code, Severity: severity(n.Code), Span: at, Message: Text(n)}
	if about != "" {
		d.Message = about + ": " + d.Message
	}
	if !slices.Contains(r.notes, d) {
		r.notes = append(r.notes, d)
	}
}

// opt is a finite number that applies, or nothing.
func opt(v float64) result.Opt {
	if math.IsNaN(v) {
		return result.Opt{}
	}
	return result.Some(v)
}
