package record

import (
	"slices"
	"strings"
)

// This file answers questions about a record that follow from more than one
// of its keys: names, points of an effect, error levels, dates.

// OutcomeNamed finds an outcome of the plan; nil when there is none.
func (r *Record) OutcomeNamed(name string) *Outcome {
	return find(r.Plan.Outcomes, func(o *Outcome) bool { return o.Name == name })
}

// HypothesisNamed finds a hypothesis of the plan; nil when there is none.
func (r *Record) HypothesisNamed(name string) *Hypothesis {
	return find(r.Plan.Hypotheses, func(h *Hypothesis) bool { return h.Name == name })
}

// SetNamed finds an analysis set; nil when there is none.
func (r *Record) SetNamed(name string) *Set {
	return find(r.Plan.Sets, func(s *Set) bool { return s.Name == name })
}

// FamilyNamed finds a family; nil when there is none.
func (r *Record) FamilyNamed(name string) *Family {
	return find(r.Plan.Families, func(f *Family) bool { return f.Name == name })
}

// FamilyOf finds the family that a hypothesis is a member of; nil when there is
// none.
func (r *Record) FamilyOf(hypothesis string) *Family {
	return find(r.Plan.Families, func(f *Family) bool { return Lists(f.Members, hypothesis) })
}

// PoolingOf finds the pooling of an outcome; nil when there is none.
func (r *Record) PoolingOf(outcome string) *Pooling {
	return find(r.Plan.Poolings, func(p *Pooling) bool { return p.Name == outcome })
}

// CombinationOf finds the combination of an outcome; nil when there is none.
func (r *Record) CombinationOf(outcome string) *Combination {
	return find(r.Plan.Combinations, func(c *Combination) bool { return c.Name == outcome })
}

// EstimandNamed finds an estimand; nil when there is none.
func (r *Record) EstimandNamed(name string) *Estimand {
	return find(r.Plan.Estimands, func(e *Estimand) bool { return e.Name == name })
}

func find[T any](list []*T, is func(*T) bool) *T {
	if i := slices.IndexFunc(list, is); i >= 0 {
		return list[i]
	}
	return nil
}

// Lists reports whether a list of texts holds one.
func Lists(v Strings, text string) bool {
	return slices.ContainsFunc(v.V, func(s String) bool { return s.V == text })
}

// Texts are the plain texts of a list.
func Texts(v Strings) []string {
	out := make([]string, len(v.V))
	for i, s := range v.V {
		out[i] = s.V
	}
	return out
}

// Floats are the plain numbers of a list.
func Floats(v Numbers) []float64 {
	out := make([]float64, len(v.V))
	for i, n := range v.V {
		out[i] = n.V
	}
	return out
}

// Null is the value of the effect that means nothing happened. It is false
// where the measure takes it from a reference that is not stated.
func (o *Outcome) Null() (null float64, ok bool) {
	m := MeasureOf(o.Measure.V)
	if m == nil {
		return 0, false
	}
	switch m.Null {
	case NullZero:
		return 0, true
	case NullOne:
		return 1, true
	case NullHalf:
		return 0.5, true
	case NullReference:
		return o.Reference.V, o.Reference.Stated
	case NullReferenceOrZero:
		return o.Reference.V, true
	}
	return 0, false
}

// Points are the null and the two ends of the region too small to matter, as
// values of the effect. Without a region low and high are the null itself.
func (o *Outcome) Points() (null, low, high float64, hasRegion bool) {
	return points(o, o.Smallest)
}

// Points are the points that the hypothesis is tested against: the outcome's,
// or those of its own margin, which is written in the same way.
func (h *Hypothesis) Points(o *Outcome) (null, low, high float64, hasRegion bool) {
	if h.Margin.Stated {
		return points(o, h.Margin)
	}
	return o.Points()
}

func points(o *Outcome, b Bounds) (null, low, high float64, has bool) {
	null, ok := o.Null()
	if !ok {
		return 0, 0, 0, false
	}
	if !b.Stated {
		return null, null, null, false
	}
	low, high = Limits(o, null, b.V)
	return null, low, high, true
}

// Limits are the two values of the effect that a region means around a null:
// a pair as it stands; a distance on both sides; for ratios, a factor.
func Limits(o *Outcome, null float64, r Region) (low, high float64) {
	m := MeasureOf(o.Measure.V)
	switch {
	case r.IsPair:
		return r.Low, r.High
	case m != nil && m.IsRatio():
		return null / r.Distance, null * r.Distance
	default:
		return null - r.Distance, null + r.Distance
	}
}

// ErrorLevel is the error level of the hypothesis: the two-sided one for
// `differs`, the one-sided one for every other claim that is judged, its own
// before the plan's. A claim that is never judged has 1 minus the plan's
// descriptive level, for its two-sided interval. Stated is false where the
// record gives no level that the claim can use.
func (h *Hypothesis) ErrorLevel(p *Plan) (alpha float64, stated bool) {
	c := ClaimOf(h.Claim.V)
	if c == nil {
		return 0, false
	}
	if !c.Judged {
		return 1 - p.Level.V, true
	}
	own, plan := h.Alpha.OneSided, p.Alpha.OneSided
	if c.TwoSided {
		own, plan = h.Alpha.TwoSided, p.Alpha.TwoSided
	}
	if own.Stated {
		return own.V, true
	}
	return plan.V, plan.Stated
}

// MethodWord is the method that the hypothesis uses on an outcome, and whether
// the record states it. Covariates and strata change the default: a linear
// model for means, `mantel-haenszel` for counts.
func (h *Hypothesis) MethodWord(o *Outcome) (word string, stated bool) {
	if h.Method.Stated {
		return h.Method.V, true
	}
	m := MeasureOf(o.Measure.V)
	if m == nil || len(m.Methods) == 0 {
		return "", false
	}
	switch {
	case (h.Adjust.Stated || h.Strata.Stated) && m.HasMethod("linear"):
		return "linear", false
	case h.Strata.Stated && m.HasMethod("mantel-haenszel"):
		return "mantel-haenszel", false
	case o.Design.V == "crossover" && m.HasMethod("pooled-variance"):
		return "pooled-variance", false
	case len(m.Methods) == 2 && m.Methods[0] == "normal" && m.Methods[1] == "any":
		return o.Distribution.V, false
	}
	return m.Methods[0], false
}

// Counts reports whether a hypothesis reads results of a study.
func (h *Hypothesis) Counts(study string) bool {
	return !h.Studies.Stated || Lists(h.Studies, study)
}

// Forms lists the forms that an entry is given in, by their keys: exactly one
// in a record without errors.
func (r *Result) Forms() []string {
	var out []string
	for _, f := range []struct {
		key string
		has bool
	}{
		{"groups", len(r.Groups) > 0}, {"sample", r.Sample != nil}, {"pairs", r.Pairs != nil},
		{"effect", r.Effect != nil}, {"p", r.P != nil}, {"data", r.Data != nil},
	} {
		if f.has {
			out = append(out, f.key)
		}
	}
	return out
}

// Dated is the date that the record bears: its own, or the latest among the
// given days of seals and those of results, deviations, decisions and
// approvals. Zero when there is none.
func (r *Record) Dated(seals ...Date) Date {
	if r.Head.Date.Stated {
		return r.Head.Date.V
	}
	return r.LatestDay(seals...)
}

// LatestDay is the latest of the given days and of those of results,
// deviations, decisions and approvals. Zero when there is none.
func (r *Record) LatestDay(days ...Date) Date {
	latest := Date{}
	see := func(d Date) {
		if d.Compare(latest) > 0 {
			latest = d
		}
	}
	for _, d := range days {
		see(d)
	}
	for _, list := range [][]*Result{r.Results, r.Earlier} {
		for _, e := range list {
			see(e.Day())
		}
	}
	for _, d := range r.Deviations {
		see(d.Date.V)
	}
	for _, d := range r.Decisions {
		if d.At.Stated {
			see(DateOf(d.At.V))
		}
	}
	for _, a := range r.Approvals {
		if a.At.Stated {
			see(DateOf(a.At.V))
		}
	}
	return latest
}

// KeyAt finds the row of a key by a path in which names stand as the user
// wrote them: "plan.hypothesis.H1.alpha". Name reports that the path ends in
// such a name, so that it means one whole table. Nil when there is no such key.
func KeyAt(path string) (k *Key, name bool) {
	table := ""
	parts := strings.Split(path, ".")
	for i := 0; i < len(parts); i++ {
		at := parts[i]
		if table != "" {
			at = table + "." + parts[i]
		}
		k = KeyOf(at)
		if k == nil || k.Parent() != table {
			return nil, false
		}
		if k.Kind == KindNamedTables && i+1 < len(parts) {
			i++
			name = i+1 == len(parts)
		}
		if !k.Kind.IsTable() && i+1 < len(parts) {
			return nil, false
		}
		table = k.Below()
	}
	return k, name
}
