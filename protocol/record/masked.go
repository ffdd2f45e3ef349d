package record

import "slices"

// Masked reports whether only the totals of an entry may be seen: it carries
// no look, the plan has looks that cover its outcome, masking is not turned
// off, and no entry of that outcome carries a numbered look yet. An unplanned
// look shows itself and leaves the others masked. Earlier results are never
// masked.
func (rec *Record) Masked(r *Result) bool {
	if r == nil || r.Look.Stated || !rec.MaskedOutcome(r.Outcome.V) {
		return false
	}
	return slices.Contains(rec.Results, r)
}

// MaskedOutcome reports whether the entries of an outcome that carry no look
// are masked.
func (rec *Record) MaskedOutcome(name string) bool {
	looks := rec.Plan.Looks
	if looks == nil || looks.Masked.Stated && !looks.Masked.V {
		return false
	}
	if !slices.ContainsFunc(rec.Plan.Hypotheses, func(h *Hypothesis) bool {
		return h.Outcome.V == name && looks.Covers(h.Name)
	}) {
		return false
	}
	return !slices.ContainsFunc(rec.Results, func(r *Result) bool {
		return r.Outcome.V == name && r.Look.Stated && !r.Look.Unplanned
	})
}

// Covers reports whether the looks concern a hypothesis: one of those named,
// or any where none is named.
func (l *Looks) Covers(hypothesis string) bool {
	if l == nil {
		return false
	}
	if len(l.Hypotheses.V) == 0 {
		return true
	}
	return slices.ContainsFunc(l.Hypotheses.V, func(s String) bool { return s.V == hypothesis })
}
