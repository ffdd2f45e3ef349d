package compute

import (
	"math"
	"slices"
	"sort"

	"steelyard/compute/claim"
	"steelyard/compute/effect"
	"steelyard/compute/pool"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// pooledEvidence writes both models of every pool, with the verdicts that
// leaving out each study would give: after the families, which they enter.
func (r *run) pooledEvidence() {
	if r.plain {
		return
	}
	for _, t := range r.tried {
		for _, at := range t.bySet {
			if at.pool != nil {
				at.pool.trials = append(at.pool.trials, t)
			}
		}
	}
	for _, p := range r.pools {
		if len(p.trials) == 0 {
			continue
		}
		for _, random := range []bool{false, true} {
			if q, ok := p.result(random); ok {
				r.res.Pooled = append(r.res.Pooled, q)
			}
		}
		if k := len(p.studies); k < smallStudyNeeds {
			h := p.trials[0].h
			r.note(h.At, h.Name, result.Note{Code: "S216", Message: smallStudies, Args: []any{k}})
		}
	}
}

// smallStudyNeeds is the least number of studies for the small-study check.
const smallStudyNeeds = 10

// result is one model in full, at the plan's descriptive level; false where
// the tables give the model no estimate.
func (p *poolRun) result(random bool) (result.Pooled, bool) {
	f, problem := p.fit(random)
	if problem != nil {
		return result.Pooled{}, false
	}
	o, a := p.options(random), (1-p.run.level)/2
	inf := p.inference(o, f, a)
	low, high := inf.Method.Limits(a)
	q := result.Pooled{Outcome: p.spec.outcome.Name, Set: p.set, Studies: p.names(), Model: "common", Weights: p.weightsOf(o), K: len(p.studies),
		Decides: random == p.random(), Share: f.Weights, LeftForZero: p.zero}
	for _, t := range p.trials {
		q.Hypotheses = append(q.Hypotheses, t.h.Name)
	}
	q.Analysis = analysisOf(p.spec, inf, p.run.level, low, high)
	q.P = twoSided(inf.Method.Test(nullOf(p.spec.outcome)))
	p.heterogeneity(&q, f, a, random)
	if random {
		q.Model, q.Between, q.Interval = "random", string(o.Between), string(o.Interval)
		p.prediction(&q, f, a)
		q.SmallStudy = p.smallStudy()
	}
	q.Cumulative = p.cumulative(o, a)
	q.LeaveOneOut = p.leaveOneOutOf(random, a)
	return q, true
}

// heterogeneity says how far the studies differ. Q is taken about the model's
// own common estimate, which is not the inverse-variance one where tables are
// pooled.
func (p *poolRun) heterogeneity(q *result.Pooled, f pool.Pooled, a float64, random bool) {
	if len(p.studies) < 2 {
		return
	}
	h := pool.HeterogeneityOf(p.values(), f.Tau2, a)
	if q.Weights != inverseVariance {
		h = pool.HeterogeneityAbout(p.values(), f.Mu)
	}
	q.Q, q.QDF, q.QP = result.Some(h.Q), result.Some(h.DF), result.P{P: h.P.P, Ln: h.P.LnP, OK: true}
	q.H2 = result.Some(h.H2)
	if random {
		q.Tau2 = result.Some(f.Tau2)
		q.I2, q.I2Low, q.I2High = result.Some(h.I2), result.Some(h.I2Low), result.Some(h.I2High)
		q.Tau2Low, q.Tau2High = result.Some(h.Tau2Low), result.Some(h.Tau2High)
	}
}

// prediction is the interval for a new setting like these, and how it stands
// to null and region.
func (p *poolRun) prediction(q *result.Pooled, f pool.Pooled, a float64) {
	w := p.wald(f)
	f.SE = w.SE
	low, high, ok := f.Prediction(len(p.studies), a)
	if !ok {
		return
	}
	low, high = effect.From(w.Scale, low), effect.From(w.Scale, high)
	q.PredictionLow, q.PredictionHigh = result.Some(low), result.Some(high)
	null, left, right, has := p.spec.outcome.Points()
	points := []float64{null}
	if has {
		points = []float64{left, null, right}
	}
	q.PredictionReading = result.Reading{HasRegion: has, OK: true}
	for _, c := range points {
		if low > c {
			q.PredictionReading.Above++
		}
		if high < c {
			q.PredictionReading.Below++
		}
	}
}

// smallStudy is the regression on size: of counts Peters', which needs the
// numbers of subjects and events, otherwise Egger's.
func (p *poolRun) smallStudy() *result.SmallStudy {
	if len(p.studies) < smallStudyNeeds {
		return nil
	}
	kind := "egger"
	var total, events []float64
	for _, s := range p.studies {
		total, events = append(total, s.total), append(events, s.events)
	}
	var fit pool.Regression
	var ok bool
	if slices.Contains([]string{"risk-difference", "risk-ratio", "odds-ratio"}, p.spec.measure.Word) && p.counted() {
		kind = "peters"
		fit, ok = pool.Peters(p.values(), total, events)
	} else {
		fit, ok = pool.Egger(p.values())
	}
	if !ok {
		return nil
	}
	return &result.SmallStudy{Kind: kind, Coefficient: fit.Coefficient, SE: fit.SE, DF: fit.DF, T: fit.T,
		P: result.P{P: math.Min(1, 2*fit.P.P), Ln: math.Min(0, fit.P.LnP+math.Ln2), OK: true}}
}

// counted reports whether every study gives its counts.
func (p *poolRun) counted() bool {
	return !slices.ContainsFunc(p.studies, func(s pooledStudy) bool { return s.in.Given != nil || !(s.total > 0) })
}

// cumulative is the evidence as it grew: by date, then by record order.
func (p *poolRun) cumulative(o pool.Options, a float64) []result.Step {
	order := p.byDate()
	var out []result.Step
	for i, f := range p.grown(o, order) {
		if f.SE > 0 && !math.IsInf(f.SE, 0) {
			low, high := p.wald(f).Limits(a)
			out = append(out, result.Step{Date: order[i].entry.res.Day(), Study: order[i].name, Estimate: effect.From(p.spec.measure.Scale, f.Mu), Low: low, High: high})
		}
	}
	return out
}

func (p *poolRun) byDate() []pooledStudy {
	order := slices.Clone(p.studies)
	sort.SliceStable(order, func(i, j int) bool { return order[i].entry.res.Day().Compare(order[j].entry.res.Day()) < 0 })
	return order
}

// grown are the fits of the first 1, 2, … studies; a fit that tables do not
// allow has the error 0.
func (p *poolRun) grown(o pool.Options, order []pooledStudy) []pool.Pooled {
	if p.weightsOf(o) == inverseVariance {
		return pool.Cumulative(valuesOf(order), o)
	}
	out := make([]pool.Pooled, len(order))
	for i := range order {
		out[i], _ = p.fitOf(o, order[:i+1])
	}
	return out
}

// leaveOneOutOf is the model without each study, with the verdict and the
// reading that every hypothesis on it would have.
func (p *poolRun) leaveOneOutOf(random bool, a float64) []result.LeftOne {
	fits := p.leftOneOut(random)
	out := make([]result.LeftOne, 0, len(fits))
	m := p.spec.measure
	for i, f := range fits {
		if math.IsInf(f.SE, 0) {
			continue
		}
		w := p.wald(f)
		low, high := w.Limits(a)
		one := result.LeftOne{Study: p.studies[i].name, Estimate: effect.From(m.Scale, f.Mu), Low: low, High: high}
		inf := &effect.Inference{Method: w}
		for _, t := range p.trials {
			if v, ok := p.verdict(t, inf); ok {
				one.Verdicts = append(one.Verdicts, v)
			}
		}
		out = append(out, one)
	}
	return out
}

// verdict decides a hypothesis with this inference in the place of that of the
// pool's set; false where another set keeps the claim from being decided.
func (p *poolRun) verdict(t *trial, inf *effect.Inference) (result.NamedVerdict, bool) {
	if _, blocked := t.blocked(); blocked {
		return result.NamedVerdict{}, false
	}
	a := claim.Judge(inf, t.question)
	one := attempt{a: a}
	up, against := one.pair()
	for _, at := range t.bySet {
		if at.set != p.set {
			x, y := at.pair()
			up, against = larger(up, x), larger(against, y)
		}
	}
	up, against = p.run.inFamily(t, up, against)
	return result.NamedVerdict{Hypothesis: t.h.Name, Reading: claim.Read(inf, t.question),
		Verdict: a.Verdict(up.P, against.P, t.question.Alpha, t.out.Role == "exploratory")}, true
}

// poolFor is the pool of an outcome's entries in a set, as the plan says or,
// where it says nothing, under the common effect: what a belief is moved by.
// Studies that cannot be pooled are left out of it.
func (r *run) poolFor(o *record.Outcome, set string) *poolRun {
	s := r.studySpec(o, nil)
	plan := r.rec.PoolingOf(o.Name)
	if plan == nil {
		plan = &record.Pooling{Continuity: record.Number{V: 0.5}}
	}
	found := r.entries(o.Name, set, false)
	if plan.IncludeEarlier.V {
		found = append(found, r.earlierOf(&record.Hypothesis{}, o, set)...)
	}
	p := &poolRun{run: r, spec: s, plan: plan, set: set, found: found}
	for _, e := range found {
		if e.res.P != nil {
			continue
		}
		if one, _, problem := r.onScale(s, plan, e); problem == nil {
			p.studies = append(p.studies, one)
		}
	}
	return p
}
