package compute

import (
	"slices"
	"time"

	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/protocol/seal"
)

// sealOf copies how the record stands to its chain.
func sealOf(s *seal.State) result.Seal {
	if s == nil {
		return result.Seal{State: seal.Unsealed, Order: seal.Unsealed}
	}
	out := result.Seal{State: s.State, Order: s.Order, Entries: len(s.Entries), PlanSHA256: s.PlanSHA256(),
		Changes: changesOf(s.Changes), Broken: s.Broken, Unreadable: s.Unreadable}
	if n := len(s.Entries); n > 0 {
		out.FirstAt, out.LastAt = s.Entries[0].Time.Format(time.RFC3339), s.Entries[n-1].Time.Format(time.RFC3339)
	}
	for _, e := range s.Edited {
		out.EditedResults = append(out.EditedResults, result.ResultName{Study: e.Study, Outcome: e.Outcome, Set: e.Set, Look: e.Look,
			File: e.File, Removed: e.Removed, Declared: e.Declared, Seal: e.Seal})
	}
	for _, a := range s.Amendments {
		if len(a.Changes) > 0 {
			out.Amendments = append(out.Amendments, result.Amendment{Number: a.Seal, At: a.At.Format(time.RFC3339), Changes: changesOf(a.Changes)})
		}
	}
	for _, v := range s.Vanished {
		out.Vanished = append(out.Vanished, v.Date)
	}
	out.OrderProved = s.Proved()
	return out
}

// witnesses copies what became of each witness, beside what the record says.
func witnesses(s *seal.State, rec *record.Record) (out []result.Witness) {
	for i, w := range rec.Witnesses {
		if s == nil || i >= len(s.Witnesses) {
			break
		}
		found := s.Witnesses[i]
		at := found.At
		if found.Outcome == seal.Stated {
			at = w.At.V.UTC()
		}
		x := result.Witness{Seal: found.Seal, What: w.What.V, Reference: w.Reference.V, Outcome: found.Outcome, Why: found.Why,
			Authority: found.Authority, Chain: found.Chain, CA: found.CA}
		if !at.IsZero() {
			x.At = at.Format(time.RFC3339Nano)
		}
		out = append(out, x)
	}
	return out
}

func changesOf(list []seal.Change) []result.Change {
	var out []result.Change
	for _, c := range list {
		old := c.Old
		if old == "" {
			old = c.Default
		}
		out = append(out, result.Change{Path: c.Path, Old: old, New: c.New, Span: c.Span, Declared: c.Declared, Wording: c.Wording})
	}
	return out
}

// sealDays are the days of the seals, which date the record too.
func (r *run) sealDays() (out []record.Date) {
	if r.in.Seal == nil {
		return nil
	}
	for _, e := range r.in.Seal.Entries {
		out = append(out, record.DateOf(e.Time))
	}
	return out
}

// seedOf is the seed of all random draws: stated, or from the digest of the
// plan as sealed, or as it stands.
func seedOf(plan record.Plan, sealed, now string) uint64 {
	switch {
	case plan.Seed.Stated:
		return uint64(plan.Seed.V)
	case sealed != "":
		return seal.Seed(sealed)
	}
	return seal.Seed(now)
}

// sealedPlan computes the record under the plan that binds it, and puts each
// verdict beside the present one. A hypothesis that the plan no longer has is
// kept as removed.
func (r *run) sealedPlan() {
	if r.in.Sealed == nil {
		return
	}
	old := newRun(r.in.Sealed, r.res.Engine)
	old.plain = true
	old.decide()
	for _, was := range old.res.Hypotheses {
		i := slices.IndexFunc(r.res.Hypotheses, func(h result.Hypothesis) bool { return h.Name == was.Name })
		if i < 0 {
			r.res.Removed = append(r.res.Removed, was)
			continue
		}
		j := was.Judged
		j.Because = "sealed-plan"
		if now := r.res.Hypotheses[i].Judged; j.Verdict != now.Verdict || j.P != now.P || j.Estimate != now.Estimate || j.Low != now.Low || j.High != now.High {
			r.res.Hypotheses[i].Alternatives = append([]result.Judged{j}, r.res.Hypotheses[i].Alternatives...)
		}
	}
}
