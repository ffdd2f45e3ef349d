package compute

import (
	"math"
	"slices"
	"strings"

	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/pool"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// The messages of this file.
const (
	noPooling    = "the plan has no [plan.pooling.%s], so several results cannot be pooled"
	nonePooled   = "no study gives an estimate with its error"
	notInPool    = "study %s cannot be pooled: %s"
	pOnly        = "study %s gives a p-value alone and is not in the pool"
	fewStudies   = "only %d studies: their variance between each other is hardly known, and the interval says less than it seems to"
	floored      = "the studies scatter less around their mean than their errors and the estimated variance between them would suggest (q = %.4g, below 1); the error was not reduced for it. Without this floor the interval would be %.4g to %.4g"
	leftForZero  = "left out of the pooled ratio because no or all subjects of both groups have events: %s"
	corrected    = "%.3g was added to the cells of studies with a zero cell: %s"
	smallStudies = "the small-study check needs ten studies or more; there are %d"
	unequalArms  = "Peto's method is doubtful here: arms differ by more than 2 to 1, or the effect is large"
	needsTables  = "the weights %s need the counts of every study, as numbers of independent individuals; %s does not give them"
	noTables     = "the tables of all studies together give no finite estimate with the weights %s"
)

// pooledStudy is one study on its way into a pool.
type pooledStudy struct {
	entry entry
	in    effect.Input
	name  string
	pool.Study
	total, events float64 // counts, for the small-study check
	tabled        bool    // its counts can enter Mantel–Haenszel or Peto weights
}

// poolRun is one set of studies to be pooled.
type poolRun struct {
	run     *run
	spec    spec
	plan    *record.Pooling
	set     string
	studies []pooledStudy
	found   []entry
	zero    []string // double-zero studies left out
	notes   []result.Note
	n       float64
	events  result.Opt
	trials  []*trial     // the hypotheses that it decides
	fits    [2]modelFits // common, random
}

// modelFits are the fits of one model, each made once.
type modelFits struct {
	done    bool
	full    pool.Pooled
	problem *result.Note
	without []pool.Pooled
}

// pooled pools the entries as the plan says. One study that is left stands
// for itself, by its own method.
func (r *run) pooled(at *attempt, h *record.Hypothesis, found []entry) (*effect.Inference, *result.Note) {
	o := at.spec.outcome
	plan := r.rec.PoolingOf(o.Name)
	if plan == nil {
		return nil, &result.Note{Code: "S111", Message: noPooling, Args: []any{o.Name}}
	}
	if plan.IncludeEarlier.V {
		found = append(slices.Clone(found), r.earlierOf(h, o, at.set)...)
	}
	at.studies = nil
	var usable []entry
	for _, e := range found {
		if e.res.P == nil {
			usable = append(usable, e)
			at.studies = append(at.studies, e.res.Study.V)
		} else if at.planned {
			r.note(e.res.P.At, h.Name, result.Note{Code: "S113", Message: pOnly, Args: []any{e.res.Study.V}})
		}
	}
	if len(usable) == 0 {
		return nil, &result.Note{Code: "S113", Message: nonePooled}
	}
	if len(usable) == 1 {
		return r.analyse(at.spec, usable[0], false)
	}
	p, problem := r.poolOf(at, plan, usable)
	if problem != nil {
		return nil, problem
	}
	if len(p.studies) == 1 {
		inf, problem := r.analyse(at.spec, p.studies[0].entry, false)
		if problem != nil {
			return nil, problem
		}
		one := *inf
		one.Notes = append(slices.Clone(p.notes), inf.Notes...)
		return &one, nil
	}
	f, problem := p.fit(p.random())
	if problem != nil {
		return nil, problem
	}
	at.pool = p
	return p.inference(p.options(p.random()), f, at.spec.a), nil
}

// earlierOf are the earlier results that a hypothesis reads in a set.
func (r *run) earlierOf(h *record.Hypothesis, o *record.Outcome, set string) []entry {
	var found []entry
	for i, res := range r.rec.Earlier {
		if res.Outcome.V != o.Name || !h.Counts(res.Study.V) {
			continue
		}
		if e, ok := r.entry(keyOfEarlier(i, set), res, result.EarlierUse); ok {
			found = append(found, e)
		}
	}
	return found
}

// poolOf finds the pool of these studies, or makes it. Only those of planned
// analyses are kept for the record.
func (r *run) poolOf(at *attempt, plan *record.Pooling, found []entry) (*poolRun, *result.Note) {
	for _, p := range r.pools {
		if p.same(at, found) {
			return p, nil
		}
	}
	p := &poolRun{run: r, spec: at.spec, plan: plan, set: at.set, found: found}
	if problem := p.collect(); problem != nil {
		return nil, problem
	}
	if at.planned && len(p.studies) > 1 {
		r.pools = append(r.pools, p)
	}
	return p, nil
}

func (p *poolRun) same(at *attempt, found []entry) bool {
	s := at.spec
	return p.spec.outcome == s.outcome && p.set == at.set && p.spec.method == s.method && p.spec.strata == s.strata &&
		slices.Equal(p.spec.adjust, s.adjust) && slices.EqualFunc(p.found, found, func(a, b entry) bool { return a.key == b.key })
}

// collect brings every entry onto the analysis scale.
func (p *poolRun) collect() *result.Note {
	var amended []string
	for _, e := range p.found {
		name := e.res.Study.V
		one, fixed, problem := p.run.onScale(p.spec, p.plan, e)
		switch {
		case problem != nil && problem.Code == "S214":
			p.zero = append(p.zero, name)
			continue
		case problem != nil:
			return &result.Note{Code: problem.Code, Message: notInPool, Args: []any{name, Text(*problem)}}
		}
		if fixed {
			amended = append(amended, name)
		}
		p.studies = append(p.studies, one)
		p.n += one.total
		if counts(p.spec.measure) {
			p.events = result.Some(p.events.V + one.events)
		}
	}
	if len(p.studies) == 0 {
		return &result.Note{Code: "S101", Message: nonePooled}
	}
	if len(p.zero) > 0 {
		p.notes = append(p.notes, result.Note{Code: "S214", Message: leftForZero, Args: []any{join(p.zero)}})
	}
	if len(amended) > 0 && (p.weights() == inverseVariance || p.random()) {
		p.notes = append(p.notes, result.Note{Code: "S215", Message: corrected, Args: []any{p.plan.Continuity.V, join(amended)}})
	}
	if k := len(p.studies); p.random() && k >= 2 && k <= 4 {
		p.notes = append(p.notes, result.Note{Code: "S212", Message: fewStudies, Args: []any{k}})
	}
	return nil
}

func (p *poolRun) random() bool { return p.plan.Model.V == "random" }

const inverseVariance = "inverse-variance"

func (p *poolRun) weights() string {
	if p.plan.Weights.V == "" {
		return inverseVariance
	}
	return p.plan.Weights.V
}

// weightsOf are the weights that a model really uses: tables are pooled under
// the common effect only.
func (p *poolRun) weightsOf(o pool.Options) string {
	if o.Random {
		return inverseVariance
	}
	return p.weights()
}

func (p *poolRun) options(random bool) pool.Options {
	if !random {
		return pool.Options{}
	}
	o := pool.Options{Random: true, Between: pool.Between(p.plan.Between.V), Interval: pool.Interval(p.plan.Interval.V), Guard: !p.plan.Guard.Stated || p.plan.Guard.V}
	if o.Between == "" {
		o.Between = pool.REML
	}
	if o.Interval == "" {
		o.Interval = pool.HartungKnapp
	}
	return o
}

func (p *poolRun) values() []pool.Study { return valuesOf(p.studies) }

func valuesOf(studies []pooledStudy) []pool.Study {
	out := make([]pool.Study, len(studies))
	for i, s := range studies {
		out[i] = s.Study
	}
	return out
}

// fit pools all studies under one of the two models, once.
func (p *poolRun) fit(random bool) (pool.Pooled, *result.Note) {
	m := p.model(random)
	return m.full, m.problem
}

// model makes the fits of a model.
func (p *poolRun) model(random bool) *modelFits {
	m := &p.fits[0]
	if random {
		m = &p.fits[1]
	}
	if !m.done {
		m.done = true
		m.full, m.problem = p.fitOf(p.options(random), p.studies)
	}
	return m
}

// leftOneOut are the fits without each study, in order; nil where there are
// none.
func (p *poolRun) leftOneOut(random bool) []pool.Pooled {
	m, o := p.model(random), p.options(random)
	if m.without != nil || m.problem != nil {
		return m.without
	}
	if p.weightsOf(o) == inverseVariance {
		m.without = pool.LeaveOneOut(p.values(), o)
		return m.without
	}
	for i := range p.studies {
		f, problem := p.fitOf(o, slices.Delete(slices.Clone(p.studies), i, i+1))
		if problem != nil {
			f.SE = math.Inf(1)
		}
		m.without = append(m.without, f)
	}
	return m.without
}

// fitOf pools some of the studies. Mantel–Haenszel and Peto weights replace
// the inverse variances of the common-effect model.
func (p *poolRun) fitOf(o pool.Options, studies []pooledStudy) (pool.Pooled, *result.Note) {
	if p.weightsOf(o) != inverseVariance {
		return p.byTables(studies)
	}
	return pool.Fit(valuesOf(studies), o), nil
}

// byTables pools the fourfold tables themselves.
func (p *poolRun) byTables(studies []pooledStudy) (pool.Pooled, *result.Note) {
	strata := make([]effect.Stratum, len(studies))
	rates := strings.HasPrefix(p.spec.measure.Word, "rate")
	for i, s := range studies {
		if !s.tabled {
			return pool.Pooled{}, &result.Note{Code: "S104", Message: needsTables, Args: []any{p.weights(), s.name}}
		}
		d := s.in.DesignEffect
		x := effect.Stratum{X1: s.in.First.Events / d, N1: s.in.First.N / d, X2: s.in.Second.Events / d, N2: s.in.Second.N / d}
		if rates {
			x.N1, x.N2 = s.in.First.Exposure/d, s.in.Second.Exposure/d
		}
		strata[i] = x
	}
	none := &result.Note{Code: "S102", Message: noTables, Args: []any{p.weights()}}
	if p.weights() == "peto" {
		f, ok := pool.Peto(strata)
		if !ok {
			return f, none
		}
		return f, nil
	}
	m, ok := effect.MantelHaenszel(p.spec.measure.Word, strata)
	if !ok || !m.OK || !(m.V > 0) || math.IsInf(m.V, 0) {
		return pool.Pooled{}, none
	}
	return pool.Pooled{Mu: m.Y, SE: math.Sqrt(m.V), DF: math.Inf(1), Weights: m.Weights}, nil
}

// wald is a fit as a method: the error common to all studies enters here,
// once, in the effect's unit (for ratios: of the logarithm).
func (p *poolRun) wald(f pool.Pooled) effect.Wald {
	m := p.spec.measure
	w := effect.Wald{Scale: m.Scale, Y: f.Mu, SE: f.SE, DF: f.DF, Low: m.Low, High: m.High}
	if u := p.spec.outcome.SystematicU.V; u > 0 {
		w = w.WithSystematic(u * slope(m, f.Mu))
	}
	return w
}

// slope carries an error in the effect's unit onto the analysis scale at y;
// that of a ratio is on it already.
func slope(m *record.Measure, y float64) float64 {
	x := effect.From(m.Scale, y)
	switch {
	case m.IsRatio() || m.Scale == record.Identity:
		return 1
	case m.Scale == record.Log:
		return 1 / x
	case m.Scale == record.Logit:
		return 1 / (x * (1 - x))
	}
	return 1 / ((1 - x) * (1 + x))
}

// inference is a fit as an inference at one-sided error a, with its notes.
func (p *poolRun) inference(o pool.Options, f pool.Pooled, a float64) *effect.Inference {
	m, w := p.spec.measure, p.wald(f)
	inf := &effect.Inference{Method: w, Word: p.word(o), Estimate: effect.From(m.Scale, f.Mu), SE: result.Some(w.SE),
		Y: result.Some(f.Mu), V: result.Some(w.SE * w.SE), N: p.n, Events: p.events, Notes: slices.Clone(p.notes)}
	if !math.IsInf(w.DF, 1) {
		inf.DF = result.Some(w.DF)
	}
	if !m.IsRatio() {
		inf.SE = result.Some(w.SE / slope(m, f.Mu))
	}
	if f.Floored {
		half := dist.TQuantile(a, f.DF) * f.Unfloored
		inf.Notes = append(inf.Notes, result.Note{Code: "S213", Message: floored,
			Args: []any{f.Ratio, effect.From(m.Scale, f.Mu-half), effect.From(m.Scale, f.Mu+half)}})
	}
	if p.weightsOf(o) == "peto" && p.petoDoubtful(f) {
		inf.Notes = append(inf.Notes, result.Note{Code: "S202", Message: unequalArms})
	}
	return inf
}

func (p *poolRun) petoDoubtful(f pool.Pooled) bool {
	return math.Abs(f.Mu) > 0.7 || slices.ContainsFunc(p.studies, func(s pooledStudy) bool {
		return s.in.First.N > 2*s.in.Second.N || s.in.Second.N > 2*s.in.First.N
	})
}

// word names a model for readers of JSON.
func (p *poolRun) word(o pool.Options) string {
	switch {
	case o.Random && o.Interval == pool.HartungKnapp && !o.Guard:
		return "random-" + string(o.Between) + "-" + string(o.Interval) + "-unguarded"
	case o.Random:
		return "random-" + string(o.Between) + "-" + string(o.Interval)
	case p.weights() != inverseVariance:
		return "common-" + p.weights()
	}
	return "common"
}

func (p *poolRun) names() []string {
	out := make([]string, len(p.studies))
	for i, s := range p.studies {
		out[i] = s.name
	}
	return out
}
