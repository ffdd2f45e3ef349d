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
		Setting: h.Setting.V, Stage: r.stage(), Date: r.rec.Dated(r.sealDays()...), SourceSHA256: hex.EncodeToString(sum[:]), PlanSHA256: r.in.PlanSHA256}
	if r.res.Record.Status == "" {
		r.res.Record.Status = "draft"
	}
	r.res.Seal = sealOf(r.in.Seal)
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
	add := func(what, value string, stated bool, why, path string) {
		from := "default"
		switch {
		case r.deviates(path):
			from = "deviation"
		case stated:
			from = "plan"
		}
		r.res.Choices = append(r.res.Choices, result.Choice{What: what, Value: value, From: from, Why: why})
	}
	p := r.rec.Plan
	if p.Alpha.OneSided.Stated {
		add("one-sided error level", number(p.Alpha.OneSided.V), true, p.AlphaWhy.V, "plan.alpha.one_sided")
	}
	if p.Alpha.TwoSided.Stated {
		add("two-sided error level", number(p.Alpha.TwoSided.V), true, p.AlphaWhy.V, "plan.alpha.two_sided")
	}
	add("level of descriptive intervals", number(r.level), p.Level.Stated, "", "plan.level")
	if r.drawsRandom() {
		add("seed of random draws", strconv.FormatUint(r.seed, 10), p.Seed.Stated, "", "plan.seed")
	}
	for _, o := range r.res.Outcomes {
		rec := r.rec.OutcomeNamed(o.Name)
		add(o.Name+": measure", o.Measure, true, "", "plan.outcome."+o.Name+".measure")
		if o.Low.OK {
			add(o.Name+": region too small to matter", number(o.Low.V)+" to "+number(o.High.V), true, o.Why, "plan.outcome."+o.Name+".smallest")
		}
		add(o.Name+": better", o.Better, rec.Better.Stated, "", "plan.outcome."+o.Name+".better")
	}
	for i, t := range r.tried {
		h := r.res.Hypotheses[i]
		at := "plan.hypothesis." + h.Name + "."
		add(h.Name+": claim", h.Claim, true, "", at+"claim")
		if h.Alpha > 0 {
			add(h.Name+": error level", number(h.Alpha), true, "", at+"alpha")
		}
		if t.h.Margin.Stated {
			add(h.Name+": margin", marginText(h), true, h.MarginWhy, at+"margin")
		}
		if h.Judged.Method != "" {
			add(h.Name+": method", h.Judged.Method, t.h.Method.Stated, "", at+"method")
		}
		add(h.Name+": evidence", h.Evidence, t.h.Evidence.Stated, "", at+"evidence")
		if t.h.Studies.Stated {
			add(h.Name+": studies", strings.Join(record.Texts(t.h.Studies), ", "), true, "", at+"studies")
		}
	}
}

// marginText is a margin as its points.
func marginText(h result.Hypothesis) string {
	var ends []string
	for _, o := range []result.Opt{h.MarginLow, h.MarginHigh} {
		if o.OK {
			ends = append(ends, number(o.V))
		}
	}
	return strings.Join(ends, " to ")
}

// deviates reports whether a declared deviation changed the key at a path, or
// the table that holds it.
func (r *run) deviates(path string) bool {
	return slices.ContainsFunc(r.res.Seal.Changes, func(c result.Change) bool {
		return c.Declared && (c.Path == path || strings.HasPrefix(path, c.Path+".") || strings.HasPrefix(c.Path, path+"."))
	})
}

// drawsRandom reports whether any analysis used the seed.
func (r *run) drawsRandom() bool {
	return slices.ContainsFunc(r.res.Hypotheses, func(h result.Hypothesis) bool { return h.Judged.Method == "permutation" })
}

// number is a value as a user would type it, to six digits.
func number(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

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
	if r.in.Seal != nil {
		for _, e := range r.in.Seal.Entries {
			all = append(all, result.Event{At: e.Time.Format("2006-01-02 15:04 UTC"), Sort: e.Time.UTC().Format(sortable), Kind: "seal", What: fmt.Sprintf("seal %d of the plan", e.Number)})
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

// sortable orders instants of Greenwich as text.
const sortable = "2006-01-02T15:04:05.000000000"

func instant(at record.Instant, kind, what string) result.Event {
	return result.Event{At: at.V.Format("2006-01-02 15:04 -07:00"), Sort: at.V.UTC().Format(sortable), Kind: kind, What: what}
}
