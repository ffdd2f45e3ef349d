package compute

import (
	"crypto/sha256"
	"encoding/hex"
	"slices"
	"sort"

	"steelyard/compute/result"
	"steelyard/protocol/data"
	"steelyard/protocol/record"
)

// describe fills what the record says of itself, errors or not.
func (r *run) describe() {
	h := r.rec.Head
	sum := sha256.Sum256(r.in.Source.Text)
	r.res.Record = result.Record{Title: h.Title.V, Number: h.Number.V, Version: h.Version.V, Status: h.Status.V,
		Setting: h.Setting.V, Stage: r.stage(), Date: r.rec.Dated(r.sealDays()...), SourceSHA256: hex.EncodeToString(sum[:]), PlanSHA256: r.in.PlanSHA256}
	if r.res.Record.Status == "" {
		r.res.Record.Status = "draft"
	}
	r.res.Seal = sealOf(r.in.Seal)
	r.res.Seal.Witnesses = witnesses(r.in.Seal, r.rec)
	for _, o := range r.rec.Plan.Outcomes {
		if m := record.MeasureOf(o.Measure.V); m != nil {
			r.res.Outcomes = append(r.res.Outcomes, outcomeOf(o, m))
		}
	}
	c := r.rec.Conclusion
	if c != nil {
		r.res.Conclusion = result.Conclusion{Text: c.Text.V, Decision: c.Decision.V, NextSteps: c.NextSteps.V}
	}
}

func (r *run) stage() result.Stage {
	switch {
	case r.rec.Head.Complete.V:
		return result.Complete
	case len(r.rec.Results) == 0:
		return result.PlanOnly
	}
	return result.Interim
}

func outcomeOf(o *record.Outcome, m *record.Measure) result.Outcome {
	null, low, high, has := o.Points()
	out := result.Outcome{Name: o.Name, Label: o.Label.V, Unit: o.Unit.V, Measure: m.Word, MeasureLabel: m.Label,
		Better: o.Better.V, Why: o.Why.V, Scale: m.Scale, Null: result.Some(null), Ratio: m.IsRatio(), Digits: -1,
		Per: o.Per.V, Percent: o.As.V == "percent"}
	if out.Better == "" {
		out.Better = "neither"
	}
	if has {
		out.Low, out.High = result.Some(low), result.Some(high)
	}
	if o.Digits.Stated {
		out.Digits = int(o.Digits.V)
	}
	for i, g := range o.Groups.V {
		if i < 2 {
			out.Groups[i] = g.V
		}
	}
	return out
}

// files lists the data files as they were used, in record order, then by set.
func (r *run) files() {
	keys := make([]data.Key, 0, len(r.in.Tables))
	for k := range r.in.Tables {
		keys = append(keys, k)
	}
	sets := r.sets()
	sort.Slice(keys, func(i, j int) bool {
		if keys[i].Entry != keys[j].Entry {
			return keys[i].Entry < keys[j].Entry
		}
		return slices.Index(sets, keys[i].Set) < slices.Index(sets, keys[j].Set)
	})
	for _, k := range keys {
		v := r.in.Tables[k]
		f := result.File{Path: v.File, SHA256: v.SHA256, Set: v.Set, Rows: v.Rows, Used: v.Used}
		if res := r.resultAt(k.Entry); res != nil {
			f.Study, f.Outcome = res.Study.V, res.Outcome.V
		}
		for _, d := range v.Dropped {
			f.Dropped = append(f.Dropped, result.Dropped{Reason: d.Reason, Why: d.Why, Group: d.Group, Count: d.Count})
		}
		r.res.Files = append(r.res.Files, f)
	}
}

func (r *run) resultAt(entry int) *record.Result {
	switch {
	case entry >= 0 && entry < len(r.rec.Results):
		return r.rec.Results[entry]
	case entry < 0 && -1-entry < len(r.rec.Earlier):
		return r.rec.Earlier[-1-entry]
	}
	return nil
}
