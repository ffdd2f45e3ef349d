package compute

import (
	"math"
	"slices"
	"sort"
	"strings"

	"steelyard/compute/claim"
	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/pool"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// pooledStudy is one study on its way into a pool.
type pooledStudy struct {
	entry entry
	in    effect.Input
	name  string
	pool.Study
	total, events float64 // counts, for the small-study check
}

// The messages of this file.
const (
	noPooling    = "the plan has no [plan.pooling.%s], so several results cannot be pooled"
	nonePooled   = "no study can be pooled: %s"
	fewStudies   = "only %d studies: their variance between each other is hardly known, and the interval says less than it seems to"
	floored      = "the studies agree better than their own errors suggest (q = %.4g); the error was not reduced for it. Without this floor the interval would be %.6g to %.6g"
	leftForZero  = "left out of the pooled ratio because no or all subjects of both groups have events: %s"
	corrected    = "%.3g was added to the cells of studies with a zero cell: %s"
	smallStudies = "the small-study check needs ten studies or more; there are %d"
	unequalArms  = "Peto's method is doubtful here: arms differ by more than 2 to 1, or the effect is large"
)

// pooled pools the entries as the plan says and records both models.
func (r *run) pooled(at *attempt, h *record.Hypothesis, found []entry) (*effect.Inference, *result.Note) {
	o := at.spec.outcome
	plan := r.rec.PoolingOf(o.Name)
	if plan == nil {
		return nil, &result.Note{Code: "S111", Message: noPooling, Args: []any{o.Name}}
	}
	if plan.IncludeEarlier.V {
		for i, res := range r.rec.Earlier {
			if res.Outcome.V != o.Name || !h.Counts(res.Study.V) || res.P != nil {
				continue
			}
			if e, ok := r.entry(keyOfEarlier(i, at.set), res, result.EarlierUse); ok {
				found = append(found, e)
				at.studies = append(at.studies, res.Study.V)
			}
		}
	}
	p, problem := r.collect(at.spec, plan, found)
	if problem != nil {
		return nil, problem
	}
	decides := p.fit(p.planned())
	inf := p.inference(decides)
	r.recordPools(at, h, p)
	return inf, nil
}

// poolRun is one set of studies to be pooled.
type poolRun struct {
	run     *run
	spec    spec
	plan    *record.Pooling
	studies []pooledStudy
	zero    []string // double-zero studies left out
	notes   []result.Note
	n       float64
	events  result.Opt
}

// collect brings every entry onto the analysis scale.
func (r *run) collect(s spec, plan *record.Pooling, found []entry) (*poolRun, *result.Note) {
	p := &poolRun{run: r, spec: s, plan: plan}
	var amended []string
	for _, e := range found {
		if e.res.P != nil {
			continue
		}
		in := r.input(e, s)
		in.SystematicU = 0 // common to all studies: it enters once, after pooling
		one, fixed, problem := r.onScale(s, plan, in)
		switch {
		case problem != nil && problem.Code == "S214":
			p.zero = append(p.zero, e.res.Study.V)
			continue
		case problem != nil:
			return nil, problem
		}
		if fixed {
			amended = append(amended, e.res.Study.V)
		}
		one.entry, one.name, one.in = e, e.res.Study.V, in
		p.studies = append(p.studies, one)
	}
	if len(p.studies) == 0 {
		return nil, &result.Note{Code: "S101", Message: nonePooled, Args: []any{"no study gives an estimate with its error"}}
	}
	if len(p.zero) > 0 {
		p.notes = append(p.notes, result.Note{Code: "S214", Message: leftForZero, Args: []any{join(p.zero)}})
	}
	if len(amended) > 0 && p.weights() == "inverse-variance" {
		p.notes = append(p.notes, result.Note{Code: "S215", Message: corrected, Args: []any{plan.Continuity.V, join(amended)}})
	}
	if p.random() && len(p.studies) >= 2 && len(p.studies) <= 4 {
		p.notes = append(p.notes, result.Note{Code: "S212", Message: fewStudies, Args: []any{len(p.studies)}})
	}
	return p, nil
}

// onScale is one study's estimate and variance on the analysis scale, with
// the continuity correction where a cell is zero (methods.md F).
func (r *run) onScale(s spec, plan *record.Pooling, in effect.Input) (pooledStudy, bool, *result.Note) {
	inf, problem := r.analyse(s, in)
	if counts(s.measure) && in.Given == nil {
		one, fixed, problem := countsOnScale(s.measure, in, plan)
		return one, fixed, problem
	}
	if problem != nil {
		return pooledStudy{}, false, problem
	}
	if !inf.Y.OK || !inf.V.OK || !(inf.V.V > 0) || math.IsInf(inf.Y.V, 0) {
		return pooledStudy{}, false, &result.Note{Code: "S102", Message: nonePooled, Args: []any{"a study has no finite estimate with an error above zero"}}
	}
	return pooledStudy{Study: pool.Study{Y: inf.Y.V, V: inf.V.V}, total: inf.N, events: inf.Events.V}, false, nil
}

// counts reports whether a measure is made of counts, which can be zero.
func counts(m *record.Measure) bool {
	return slices.Contains([]string{"proportion", "risk-difference", "risk-ratio", "odds-ratio", "rate", "rate-ratio", "rate-difference"}, m.Word)
}

func countsOnScale(m *record.Measure, in effect.Input, plan *record.Pooling) (pooledStudy, bool, *result.Note) {
	d := in.DesignEffect
	x1, n1, x2, n2 := in.First.Events/d, in.First.N/d, in.Second.Events/d, in.Second.N/d
	t1, t2 := in.First.Exposure, in.Second.Exposure
	c := plan.Continuity.V
	p := pooledStudy{total: in.First.N + in.Second.N, events: in.First.Events + in.Second.Events}
	doubleZero := &result.Note{Code: "S214", Message: leftForZero}
	fixed := false
	switch m.Word {
	case "proportion":
		x, n := in.Sample.Events/d, in.Sample.N/d
		p.total, p.events = in.Sample.N, in.Sample.Events
		if x == 0 || x == n {
			x, n, fixed = x+c, n+2*c, true
		}
		p.Study = pool.Study{Y: math.Log(x / (n - x)), V: 1/x + 1/(n-x)}
	case "rate":
		x := in.Sample.Events / d
		p.total, p.events = in.Sample.N, in.Sample.Events
		if x == 0 {
			x, fixed = x+c, true
		}
		p.Study = pool.Study{Y: math.Log(x / in.Sample.Exposure), V: 1 / x}
	case "rate-ratio":
		if x1+x2 == 0 {
			return p, false, doubleZero
		}
		if x1 == 0 || x2 == 0 {
			x1, x2, fixed = x1+c, x2+c, true
		}
		p.Study = pool.Study{Y: math.Log(x1 / t1 * t2 / x2), V: 1/x1 + 1/x2}
	case "rate-difference":
		v := x1/(t1*t1) + x2/(t2*t2)
		if v == 0 {
			x1, x2, fixed = x1+c, x2+c, true
			v = x1/(t1*t1) + x2/(t2*t2)
		}
		p.Study = pool.Study{Y: x1/t1 - x2/t2, V: v}
	case "risk-difference":
		y := x1/n1 - x2/n2
		v := x1*(n1-x1)/(n1*n1*n1) + x2*(n2-x2)/(n2*n2*n2)
		if v == 0 {
			fixed = true
			a, b, m1, m2 := x1+c, x2+c, n1+2*c, n2+2*c
			y, v = a/m1-b/m2, a*(m1-a)/(m1*m1*m1)+b*(m2-b)/(m2*m2*m2)
		}
		p.Study = pool.Study{Y: y, V: v}
	case "risk-ratio", "odds-ratio":
		if x1+x2 == 0 || x1+x2 == n1+n2 {
			return p, false, doubleZero
		}
		if x1 == 0 || x2 == 0 || x1 == n1 || x2 == n2 {
			x1, x2, n1, n2, fixed = x1+c, x2+c, n1+2*c, n2+2*c, true
		}
		p.Study = pool.Study{Y: math.Log(x1 / n1 * n2 / x2), V: 1/x1 - 1/n1 + 1/x2 - 1/n2}
		if m.Word == "odds-ratio" {
			p.Study = pool.Study{Y: math.Log(x1 / (n1 - x1) * (n2 - x2) / x2), V: 1/x1 + 1/(n1-x1) + 1/x2 + 1/(n2-x2)}
		}
	}
	return p, fixed, nil
}

func (p *poolRun) random() bool { return p.plan.Model.V == "random" }

func (p *poolRun) weights() string {
	if p.plan.Weights.V == "" {
		return "inverse-variance"
	}
	return p.plan.Weights.V
}

// planned are the options of the model that decides.
func (p *poolRun) planned() pool.Options { return p.options(p.random()) }

func (p *poolRun) options(random bool) pool.Options {
	o := pool.Options{Random: random, Between: pool.Between(p.plan.Between.V), Interval: pool.Interval(p.plan.Interval.V), Guard: !p.plan.Guard.Stated || p.plan.Guard.V}
	if o.Between == "" {
		o.Between = pool.REML
	}
	if o.Interval == "" {
		o.Interval = pool.HartungKnapp
	}
	return o
}

func (p *poolRun) values() []pool.Study {
	out := make([]pool.Study, len(p.studies))
	for i, s := range p.studies {
		out[i] = s.Study
	}
	return out
}

// fit pools all studies under the options. Mantel–Haenszel and Peto weights
// replace the common-effect estimate.
func (p *poolRun) fit(o pool.Options) pool.Pooled {
	return p.fitOf(o, p.studies)
}

func (p *poolRun) fitOf(o pool.Options, studies []pooledStudy) pool.Pooled {
	if !o.Random && p.weights() != "inverse-variance" {
		if f, ok := p.byTables(studies); ok {
			return f
		}
	}
	ys := make([]pool.Study, len(studies))
	for i, s := range studies {
		ys[i] = s.Study
	}
	return pool.Fit(ys, o)
}

// byTables pools the fourfold tables themselves; false where a study gives
// only its effect.
func (p *poolRun) byTables(studies []pooledStudy) (pool.Pooled, bool) {
	if slices.ContainsFunc(studies, func(s pooledStudy) bool { return s.in.Given != nil }) {
		return pool.Pooled{}, false
	}
	strata := make([]effect.Stratum, len(studies))
	rates := strings.HasPrefix(p.spec.measure.Word, "rate")
	for i, s := range studies {
		x := effect.Stratum{X1: s.in.First.Events, N1: s.in.First.N, X2: s.in.Second.Events, N2: s.in.Second.N}
		if rates {
			x.N1, x.N2 = s.in.First.Exposure, s.in.Second.Exposure
		}
		strata[i] = x
	}
	if p.weights() == "peto" {
		return pool.Peto(strata)
	}
	m, ok := effect.MantelHaenszel(p.spec.measure.Word, strata)
	if !ok || !m.OK || !(m.V > 0) {
		return pool.Pooled{}, false
	}
	return pool.Pooled{Mu: m.Y, SE: math.Sqrt(m.V), DF: math.Inf(1), Weights: m.Weights}, true
}

// inference is the deciding pool as a method with its notes.
func (p *poolRun) inference(f pool.Pooled) *effect.Inference {
	m := p.spec.measure
	w := effect.Wald{Scale: m.Scale, Y: f.Mu, SE: f.SE, DF: f.DF, Low: m.Low, High: m.High}
	if u := p.spec.outcome.SystematicU.V; u > 0 {
		w = w.WithSystematic(u)
	}
	inf := &effect.Inference{Method: w, Word: p.word(), Estimate: effect.From(m.Scale, f.Mu), SE: result.Some(w.SE),
		Y: result.Some(f.Mu), V: result.Some(w.SE * w.SE), Notes: append([]result.Note{}, p.notes...)}
	if !math.IsInf(w.DF, 1) {
		inf.DF = result.Some(w.DF)
	}
	for _, s := range p.studies {
		inf.N += s.total
		if counts(m) {
			inf.Events = result.Some(inf.Events.V + s.events)
		}
	}
	if f.Floored {
		g := func(y float64) float64 { return effect.From(m.Scale, y) }
		half := dist.TQuantile(p.spec.a, f.DF) * f.Unfloored
		inf.Notes = append(inf.Notes, result.Note{Code: "S213", Message: floored, Args: []any{f.Ratio, g(f.Mu - half), g(f.Mu + half)}})
	}
	if p.weights() == "peto" && p.petoDoubtful(f) {
		inf.Notes = append(inf.Notes, result.Note{Code: "S202", Message: unequalArms})
	}
	return inf
}

func (p *poolRun) petoDoubtful(f pool.Pooled) bool {
	return math.Abs(f.Mu) > 0.7 || slices.ContainsFunc(p.studies, func(s pooledStudy) bool {
		return s.in.First.N > 2*s.in.Second.N || s.in.Second.N > 2*s.in.First.N
	})
}

// word names the model for readers of JSON.
func (p *poolRun) word() string {
	switch {
	case p.random():
		o := p.options(true)
		return "random-" + string(o.Between) + "-" + string(o.Interval)
	case p.weights() != "inverse-variance":
		return "common-" + p.weights()
	}
	return "common"
}

// recordPools writes both models, once per outcome, set and studies.
func (r *run) recordPools(at *attempt, h *record.Hypothesis, p *poolRun) {
	names := p.names()
	for i := range r.res.Pooled {
		q := &r.res.Pooled[i]
		if q.Outcome == p.spec.outcome.Name && q.Set == at.set && slices.Equal(q.Studies, names) {
			q.Hypotheses = append(q.Hypotheses, h.Name)
			p.verdicts(q, h)
			if i+1 < len(r.res.Pooled) {
				p.verdicts(&r.res.Pooled[i+1], h)
			}
			return
		}
	}
	for _, random := range []bool{false, true} {
		q := p.result(at, random)
		q.Hypotheses = []string{h.Name}
		p.verdicts(&q, h)
		r.res.Pooled = append(r.res.Pooled, q)
	}
	if len(p.studies) < 10 {
		r.note(h.At, h.Name, result.Note{Code: "S216", Message: smallStudies, Args: []any{len(p.studies)}})
	}
}

func (p *poolRun) names() []string {
	var out []string
	for _, s := range p.studies {
		out = append(out, s.name)
	}
	return out
}

// result is one model in full, at the plan's descriptive level.
func (p *poolRun) result(at *attempt, random bool) result.Pooled {
	m, o := p.spec.measure, p.options(random)
	f := p.fit(o)
	g := func(y float64) float64 { return effect.From(m.Scale, y) }
	a := (1 - p.run.level) / 2
	inf := p.inference(f)
	low, high := inf.Method.Limits(a)
	q := result.Pooled{Outcome: p.spec.outcome.Name, Set: at.set, Studies: p.names(), Model: "common", Weights: p.weights(), K: len(p.studies),
		Decides: random == p.random(), Share: f.Weights, LeftForZero: p.zero}
	q.Analysis = analysisOf(p.spec, inf, p.run.level, low, high)
	q.P = twoSided(inf.Method.Test(nullOf(p.spec.outcome)))
	if random {
		q.Model, q.Between, q.Interval, q.Weights = "random", string(o.Between), string(o.Interval), "inverse-variance"
		q.Tau2 = result.Some(f.Tau2)
	}
	if len(p.studies) > 1 {
		h := pool.HeterogeneityOf(p.values(), f.Tau2, a)
		q.Q, q.QDF, q.QP = result.Some(h.Q), result.Some(h.DF), result.P{P: h.P.P, Ln: h.P.LnP, OK: true}
		q.H2 = result.Some(h.H2)
		if random {
			q.I2, q.I2Low, q.I2High = result.Some(h.I2), result.Some(h.I2Low), result.Some(h.I2High)
			q.Tau2Low, q.Tau2High = result.Some(h.Tau2Low), result.Some(h.Tau2High)
		}
	}
	if random {
		if l, u, ok := f.Prediction(len(p.studies), a); ok {
			q.PredictionLow, q.PredictionHigh = result.Some(g(l)), result.Some(g(u))
		}
		q.SmallStudy = p.smallStudy()
	}
	q.Cumulative = p.cumulative(o, a)
	q.LeaveOneOut = p.leaveOneOut(o, a)
	return q
}

func (p *poolRun) smallStudy() *result.SmallStudy {
	if len(p.studies) < 10 {
		return nil
	}
	kind, fit, ok := "egger", pool.Regression{}, false
	switch p.spec.measure.Word {
	case "risk-difference", "risk-ratio", "odds-ratio":
		kind = "peters"
		var total, events []float64
		for _, s := range p.studies {
			total, events = append(total, s.total), append(events, s.events)
		}
		fit, ok = pool.Peters(p.values(), total, events)
	default:
		fit, ok = pool.Egger(p.values())
	}
	if !ok {
		return nil
	}
	return &result.SmallStudy{Kind: kind, Coefficient: fit.Coefficient, SE: fit.SE, DF: fit.DF, T: fit.T,
		P: result.P{P: math.Min(1, 2*fit.P.P), Ln: math.Min(0, fit.P.LnP+math.Ln2), OK: true}}
}

// cumulative is the evidence as it grew: by date, then by record order.
func (p *poolRun) cumulative(o pool.Options, a float64) []result.Step {
	order := make([]pooledStudy, len(p.studies))
	copy(order, p.studies)
	sort.SliceStable(order, func(i, j int) bool { return order[i].entry.res.Day().Compare(order[j].entry.res.Day()) < 0 })
	g := func(y float64) float64 { return effect.From(p.spec.measure.Scale, y) }
	var fits []pool.Pooled
	if !o.Random && p.weights() != "inverse-variance" {
		for i := range order {
			fits = append(fits, p.fitOf(o, order[:i+1]))
		}
	} else {
		ys := make([]pool.Study, len(order))
		for i, s := range order {
			ys[i] = s.Study
		}
		fits = pool.Cumulative(ys, o)
	}
	out := make([]result.Step, len(order))
	for i, f := range fits {
		low, high := f.Limits(a)
		out[i] = result.Step{Date: order[i].entry.res.Day(), Study: order[i].name, Estimate: g(f.Mu), Low: g(low), High: g(high)}
	}
	return out
}

// leaveOneOut refits without each study.
func (p *poolRun) leaveOneOut(o pool.Options, a float64) []result.LeftOne {
	fits := p.without(o)
	g := func(y float64) float64 { return effect.From(p.spec.measure.Scale, y) }
	out := make([]result.LeftOne, len(fits))
	for i, f := range fits {
		low, high := f.Limits(a)
		out[i] = result.LeftOne{Study: p.studies[i].name, Estimate: g(f.Mu), Low: g(low), High: g(high)}
	}
	return out
}

func (p *poolRun) without(o pool.Options) []pool.Pooled {
	if len(p.studies) < 2 {
		return nil
	}
	if o.Random || p.weights() == "inverse-variance" {
		return pool.LeaveOneOut(p.values(), o)
	}
	var out []pool.Pooled
	for i := range p.studies {
		out = append(out, p.fitOf(o, slices.Delete(slices.Clone(p.studies), i, i+1)))
	}
	return out
}

// verdicts adds a hypothesis' verdict without each study to a model's
// leave-one-out list.
func (p *poolRun) verdicts(q *result.Pooled, h *record.Hypothesis) {
	question := p.run.question(h, p.spec.outcome)
	for i, f := range p.without(p.options(q.Model == "random")) {
		a := claim.Assess(p.inference(f), question)
		q.LeaveOneOut[i].Verdicts = append(q.LeaveOneOut[i].Verdicts, result.NamedVerdict{Hypothesis: h.Name,
			Verdict: a.Verdict(a.P.P, a.Against.P, question.Alpha, h.Role.V == "exploratory"), Reading: a.Reading})
	}
}
