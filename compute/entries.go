package compute

import (
	"slices"
	"strconv"
	"strings"

	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/data"
	"steelyard/protocol/record"
)

// entries lists the analysed entries of an outcome in a set, in record order.
// Left-out entries come too when withLeftOut is set.
func (r *run) entries(outcome, set string, withLeftOut bool) []entry {
	var out []entry
	for i, res := range r.rec.Results {
		if res.Outcome.V != outcome || res.LeaveOut.Stated && !withLeftOut {
			continue
		}
		if e, ok := r.entry(data.Key{Entry: i, Set: set}, res, result.Analysed); ok {
			out = append(out, e)
		}
	}
	return out
}

// entry finds an entry's numbers in a set: its vectors, or its summary when
// it speaks of that set.
func (r *run) entry(key data.Key, res *record.Result, use result.Use) (entry, bool) {
	e := entry{key: key, res: res, kind: use}
	if res.Data != nil {
		if res.Set.Stated && res.Set.V != key.Set {
			return e, false
		}
		e.vec = r.in.Tables[key]
		return e, e.vec != nil
	}
	return e, !res.Set.Stated || res.Set.V == key.Set
}

// sets are the analysis sets of the plan, or one nameless set.
func (r *run) sets() []string {
	if len(r.rec.Plan.Sets) == 0 {
		return []string{""}
	}
	var out []string
	for _, s := range r.rec.Plan.Sets {
		out = append(out, s.Name)
	}
	return out
}

// studies fills the list of entries, each with its own analysis at the
// descriptive level.
func (r *run) studies() {
	sets := r.sets()
	for i, res := range r.rec.Results {
		use := result.Analysed
		if res.LeaveOut.Stated {
			use = result.LeftOut
		}
		for _, set := range sets {
			r.study(data.Key{Entry: i, Set: set}, res, use)
		}
	}
	for i, res := range r.rec.Earlier {
		for _, set := range sets {
			r.study(keyOfEarlier(i, set), res, result.EarlierUse)
		}
	}
	for _, m := range r.rec.Missing {
		r.res.Studies = append(r.res.Studies, result.Study{Study: m.Study.V, Outcome: m.Outcome.V,
			Use: result.MissingUse, Why: m.Why.V})
	}
}

func (r *run) study(key data.Key, res *record.Result, use result.Use) {
	e, ok := r.entry(key, res, use)
	o := r.rec.OutcomeNamed(res.Outcome.V)
	if !ok || o == nil {
		return
	}
	s := result.Study{Study: res.Study.V, Outcome: res.Outcome.V, Set: key.Set, Date: res.Day(), Look: lookOf(res.Look),
		Use: use, Why: res.LeaveOut.V, Form: formOf(res), Source: res.Source.V}
	if res.Data != nil {
		s.File = res.Data.File.V
	}
	if p := res.P; p != nil {
		s.BareP = &result.BareP{Value: p.Value.V, Sides: int(p.Sides.V), Direction: p.Direction.V,
			Relation: p.Relation.V, N: result.Opt{V: p.N.V, OK: p.N.Stated}}
		s.Groups = withFlow(nil, res)
	} else {
		r.analysedStudy(&s, e, o)
	}
	r.res.Studies = append(r.res.Studies, s)
}

// analysedStudy adds an entry's own numbers and analysis.
func (r *run) analysedStudy(s *result.Study, e entry, o *record.Outcome) {
	sp := r.studySpec(o, e.res)
	in := r.input(e, sp)
	s.Groups = groupNumbers(in, e, o)
	inf, problem := r.analyse(sp, e, false)
	if problem != nil {
		s.Analysis.Notes = []result.Note{*problem}
		if s.Use == result.Analysed {
			s.Use, s.Why = result.NotComputed, Text(*problem)
		}
		return
	}
	low, high := inf.Method.Limits((1 - r.level) / 2)
	s.Analysis = analysisOf(sp, inf, r.level, low, high)
	s.P = twoSided(inf.Method.Test(in.Null))
	if in.Time != nil && in.Given == nil && len(o.Groups.V) == 2 {
		s.Survival = r.curvesOf(in, [2]string{o.Groups.V[0].V, o.Groups.V[1].V})
	}
}

// studySpec is how an entry of an outcome is shown: by the method that the
// first hypothesis on the outcome that reads it names, else by the default.
func (r *run) studySpec(o *record.Outcome, res *record.Result) spec {
	a := (1 - r.level) / 2
	for _, h := range r.rec.Plan.Hypotheses {
		if h.Outcome.V == o.Name && (res == nil || h.Counts(res.Study.V)) {
			return r.specOf(h, o, a)
		}
	}
	return r.specOf(&record.Hypothesis{}, o, a)
}

func (r *run) specOf(h *record.Hypothesis, o *record.Outcome, a float64) spec {
	word, _ := h.MethodWord(o)
	return spec{outcome: o, measure: record.MeasureOf(o.Measure.V), method: word, stated: h.Method.Stated,
		adjust: record.Texts(h.Adjust), strata: h.Strata.V, a: a}
}

func analysisOf(s spec, inf *effect.Inference, level, low, high float64) result.Analysis {
	estimate := opt(inf.Estimate)
	if inf.NoEstimate {
		estimate = result.Opt{}
	}
	out := result.Analysis{Measure: s.measure.Word, Method: inf.Word, N: inf.N, Events: inf.Events,
		Estimate: estimate, SE: inf.SE, DF: inf.DF, Level: level, Low: opt(low), High: opt(high), Notes: inf.Notes}
	if inf.NoInterval {
		out.Low, out.High = result.Opt{}, result.Opt{}
	}
	return out
}

func lookOf(l record.Look) string {
	switch {
	case l.Unplanned:
		return "unplanned"
	case l.Stated:
		return strconv.Itoa(l.Number)
	}
	return ""
}

func formOf(r *record.Result) string {
	switch {
	case r.Data != nil:
		return "data"
	case r.Effect != nil:
		return "effect"
	case r.P != nil:
		return "p"
	case r.Pairs != nil:
		return "pairs"
	case r.Sample != nil:
		return "sample"
	}
	return "groups"
}

// groupNumbers says what an entry gives for each group, with its flow and
// the rows that dropped.
func groupNumbers(in effect.Input, e entry, o *record.Outcome) []result.GroupNumbers {
	var out []result.GroupNumbers
	m := record.MeasureOf(o.Measure.V)
	switch {
	case in.Given != nil:
		if in.Given.N.OK {
			out = append(out, result.GroupNumbers{N: in.Given.N})
		}
	case m.Shape == record.TwoGroups:
		for i, g := range []effect.Group{in.First, in.Second} {
			if len(o.Groups.V) == 2 {
				out = append(out, oneGroup(m, o.Groups.V[i].V, g))
			}
		}
	case m.Shape == record.Paired:
		out = append(out, pairNumbers(m, in.Pairs))
	default:
		out = append(out, oneGroup(m, "", in.Sample))
	}
	return withFlow(withDropped(out, e), e.res)
}

// oneGroup are the numbers of a group that its measure is made of.
func oneGroup(m *record.Measure, name string, g effect.Group) result.GroupNumbers {
	n := result.GroupNumbers{Name: name, N: opt(g.N)}
	switch m.Word {
	case "proportion", "risk-difference", "risk-ratio", "odds-ratio", "hazard-ratio", "restricted-mean-difference":
		n.Events = opt(g.Events)
	case "rate", "rate-difference", "rate-ratio":
		n.Events, n.Exposure = opt(g.Events), opt(g.Exposure)
		if g.N == 0 {
			n.N = result.Opt{}
		}
	case "correlation", "rank-correlation":
		n.R = opt(g.R)
	case "sd", "sd-ratio":
		n.SD = opt(g.SD)
	case "median-shift", "superiority-probability":
		n.Median = median(g.Values)
	case "geometric-mean-ratio":
		if g.Values != nil {
			n.Mean, n.SD = opt(g.Mean), opt(g.SD)
		}
	default:
		n.Mean, n.SD = opt(g.Mean), opt(g.SD)
	}
	return n
}

func pairNumbers(m *record.Measure, p effect.Pairs) result.GroupNumbers {
	n := p.N
	if sum := p.Both + p.FirstOnly + p.SecondOnly + p.Neither; n == 0 {
		n = sum
	}
	g := result.GroupNumbers{N: opt(n)}
	switch m.Word {
	case "paired-risk-difference":
	case "paired-sd-ratio":
		g.R = opt(p.R)
	case "paired-median-shift":
		g.Median = median(differences(p))
	default:
		g.Mean, g.SD = opt(p.Mean), opt(p.SD)
	}
	return g
}

func differences(p effect.Pairs) []float64 {
	d := make([]float64, len(p.First))
	for i := range d {
		d[i] = p.First[i] - p.Second[i]
	}
	return d
}

// median is the middle of values, the mean of two middle ones.
func median(x []float64) result.Opt {
	n := len(x)
	if n == 0 {
		return result.Opt{}
	}
	s := slices.Clone(x)
	slices.Sort(s)
	return opt((s[(n-1)/2] + s[n/2]) / 2)
}

func withDropped(out []result.GroupNumbers, e entry) []result.GroupNumbers {
	if e.vec == nil {
		return out
	}
	for i := range out {
		for _, d := range e.vec.Dropped {
			switch {
			case d.Group != out[i].Name:
			case d.Planned:
				out[i].Excluded += d.Count
			default:
				out[i].Missing += d.Count
			}
		}
	}
	return out
}

func withFlow(out []result.GroupNumbers, res *record.Result) []result.GroupNumbers {
	of := func(n record.Int) result.Opt { return result.Opt{V: float64(n.V), OK: n.Stated} }
	for _, f := range res.Flow {
		i := slices.IndexFunc(out, func(g result.GroupNumbers) bool { return g.Name == f.Name })
		if i < 0 {
			out = append(out, result.GroupNumbers{Name: f.Name})
			i = len(out) - 1
		}
		g := &out[i]
		g.Assessed, g.Randomised, g.Received, g.Lost, g.Analysed = of(f.Assessed), of(f.Randomised), of(f.Received), of(f.Lost), of(f.Analysed)
	}
	return out
}

// keyOfEarlier is the key of the i-th earlier result.
func keyOfEarlier(i int, set string) data.Key { return data.Key{Entry: -1 - i, Set: set} }

// join lists names for a message.
func join(names []string) string { return strings.Join(names, "; ") }
