package compute

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"slices"
	"sort"
	"strconv"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/data"
	"steelyard/protocol/record"
)

// describe fills what the record says of itself, errors or not.
func (r *run) describe() {
	h := r.rec.Head
	sum := sha256.Sum256(r.in.Source.Text)
	r.res.Record = result.Record{Title: h.Title.V, Number: h.Number.V, Version: h.Version.V, Status: h.Status.V,
		Setting: h.Setting.V, Stage: r.stage(), Date: r.rec.Dated(), SourceSHA256: hex.EncodeToString(sum[:]), PlanSHA256: r.in.PlanSHA256}
	if r.res.Record.Status == "" {
		r.res.Record.Status = "draft"
	}
	r.res.Seal = result.Seal{State: "unsealed", Order: "unsealed"}
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

// choices lists every analysis choice and where it came from.
func (r *run) choices() {
	add := func(what, value string, stated bool, why string) {
		from := "default"
		if stated {
			from = "plan"
		}
		r.res.Choices = append(r.res.Choices, result.Choice{What: what, Value: value, From: from, Why: why})
	}
	p := r.rec.Plan
	if p.Alpha.OneSided.Stated {
		add("one-sided error level", number(p.Alpha.OneSided.V), true, p.AlphaWhy.V)
	}
	if p.Alpha.TwoSided.Stated {
		add("two-sided error level", number(p.Alpha.TwoSided.V), true, p.AlphaWhy.V)
	}
	add("level of descriptive intervals", number(r.level), p.Level.Stated, "")
	if r.drawsRandom() {
		add("seed of random draws", strconv.FormatUint(r.seed, 10), p.Seed.Stated, "")
	}
	for _, o := range r.res.Outcomes {
		rec := r.rec.OutcomeNamed(o.Name)
		add(o.Name+": measure", o.Measure, true, "")
		if o.Low.OK {
			add(o.Name+": region too small to matter", number(o.Low.V)+" to "+number(o.High.V), true, o.Why)
		}
		add(o.Name+": better", o.Better, rec.Better.Stated, "")
	}
	for i, t := range r.tried {
		h := r.res.Hypotheses[i]
		add(h.Name+": claim", h.Claim, true, "")
		if h.Alpha > 0 {
			add(h.Name+": error level", number(h.Alpha), true, "")
		}
		if t.h.Margin.Stated {
			add(h.Name+": margin", number(h.MarginLow.V)+" to "+number(h.MarginHigh.V), true, h.MarginWhy)
		}
		if h.Judged.Method != "" {
			add(h.Name+": method", h.Judged.Method, t.h.Method.Stated, "")
		}
		add(h.Name+": evidence", h.Evidence, t.h.Evidence.Stated, "")
		if t.h.Studies.Stated {
			add(h.Name+": studies", strings.Join(record.Texts(t.h.Studies), ", "), true, "")
		}
	}
}

// drawsRandom reports whether any analysis used the seed.
func (r *run) drawsRandom() bool {
	return slices.ContainsFunc(r.res.Hypotheses, func(h result.Hypothesis) bool { return h.Judged.Method == "permutation" })
}

// number is a value as a user would type it.
func number(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// timeline gathers what happened, in order. Dates without a time of day come
// before instants of the same day, and say that their order is not proved.
func (r *run) timeline() {
	rec := r.rec
	var all []result.Event
	day := func(d record.Date, kind, what string) {
		if !d.IsZero() {
			all = append(all, result.Event{At: d.String(), Sort: d.String(), Kind: kind, What: what})
		}
	}
	if b := rec.Head.Ethics; b != nil {
		day(b.Date.V, "ethics", strings.TrimSpace(b.Body.V+" "+b.Number.V))
	}
	if b := rec.Head.Registry; b != nil {
		day(b.Date.V, "registry", strings.TrimSpace(b.Body.V+" "+b.Number.V))
	}
	for _, list := range [][]*record.Result{rec.Earlier, rec.Results} {
		for _, res := range list {
			day(res.Day(), "result", res.Study.V+", "+res.Outcome.V)
		}
	}
	for _, d := range rec.Deviations {
		day(d.Date.V, "deviation", d.What.V)
		if d.Approved != nil {
			day(d.Approved.Date.V, "approval", fmt.Sprintf("of the deviation, by %s", d.Approved.By.V))
		}
	}
	for _, d := range rec.Decisions {
		all = append(all, instant(d.At, "decision", d.Body.V+": "+d.What.V))
	}
	for _, a := range rec.Approvals {
		all = append(all, instant(a.At, "approval", strings.TrimSpace(a.Role.V+" "+a.Meaning.V)))
	}
	sort.SliceStable(all, func(i, j int) bool { return all[i].Sort < all[j].Sort })
	for i := range all {
		for j := range all {
			if i != j && all[i].Sort[:10] == all[j].Sort[:10] && (len(all[i].Sort) == 10 || len(all[j].Sort) == 10) {
				all[i].Order = "unproven"
			}
		}
	}
	r.res.Timeline = append(r.res.Timeline, all...)
}

func instant(at record.Instant, kind, what string) result.Event {
	return result.Event{At: at.V.Format("2006-01-02 15:04 -07:00"), Sort: at.V.UTC().Format("2006-01-02T15:04:05.000000000"), Kind: kind, What: what}
}
