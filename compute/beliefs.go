package compute

import (
	"math"
	"sort"

	"steelyard/compute/belief"
	"steelyard/compute/effect"
	"steelyard/compute/pool"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// The messages of this file.
const (
	noBelief     = "a prior needs a standard deviation above zero"
	disagreement = "prior %s and the data disagree: they lie %.3g standard deviations apart"
)

// beliefs moves every stated prior by the results of its outcome.
func (r *run) beliefs() {
	for _, p := range r.rec.Plan.Priors {
		o := r.rec.OutcomeNamed(p.Outcome.V)
		if o == nil {
			continue
		}
		m := record.MeasureOf(o.Measure.V)
		prior := priorOf(p, m)
		prior.Null = effect.To(m.Scale, nullOf(o))
		if !(prior.SD > 0) || math.IsInf(prior.Mean, 0) || math.IsNaN(prior.Mean) {
			r.note(p.At, p.Name, result.Note{Code: "S103", Message: noBelief})
			continue
		}
		out := result.Prior{Name: p.Name, Outcome: o.Name, Label: p.Label.V, Why: p.Why.V, Before: r.believed(prior, o, "")}
		r.move(&out, prior, p, o)
		r.res.Priors = append(r.res.Priors, out)
	}
}

func priorOf(p *record.Prior, m *record.Measure) belief.Prior {
	b := belief.Prior{Mean: p.Mean.V, SD: p.SD.V}
	if p.Median.Stated {
		level := p.Level.V
		if level == 0 {
			level = 0.95
		}
		b = belief.FromLimits(effect.To(m.Scale, p.Median.V), effect.To(m.Scale, p.Low.V), effect.To(m.Scale, p.High.V), level)
	}
	b.NullShare = p.NullShare.V
	return b
}

// move updates a prior with the evidence as it grew and fills after, path and
// Bayes factor.
func (r *run) move(out *result.Prior, prior belief.Prior, p *record.Prior, o *record.Outcome) {
	out.After = out.Before
	for i, e := range r.growth(o) {
		after := prior.Update(e.Y, e.V)
		b := r.believed(after, o, e.study)
		out.Path = append(out.Path, b)
		out.After = b
		if i == len(r.growth(o))-1 {
			if p.NullShare.Stated {
				out.BayesFactor = result.Some(math.Exp(prior.LnBayesFactor(e.Y, e.V)))
			}
			if far := prior.Conflict(e.Y, e.V); far > 2 {
				r.note(p.At, "", result.Note{Code: "S222", Message: disagreement, Args: []any{p.Name, far}})
			}
		}
	}
}

// grown is the evidence on an outcome after one more study.
type grown struct {
	pool.Study
	study string
}

// growth is the pooled evidence after each study, by date then record order:
// the planned model when the outcome is pooled, the common one otherwise.
func (r *run) growth(o *record.Outcome) []grown {
	entries := r.entries(o.Name, r.sets()[0], false)
	sort.SliceStable(entries, func(i, j int) bool { return entries[i].res.Day().Compare(entries[j].res.Day()) < 0 })
	opt := pool.Options{}
	plan := r.rec.PoolingOf(o.Name)
	if plan != nil {
		opt = (&poolRun{plan: plan}).planned()
	} else {
		plan = &record.Pooling{Continuity: record.Number{V: 0.5}}
	}
	sp := r.studySpec(o)
	a := (1 - r.level) / 2
	u := o.SystematicU.V
	var studies []pool.Study
	var out []grown
	for _, e := range entries {
		if e.res.P != nil {
			continue
		}
		in := r.input(e, sp)
		in.SystematicU = 0
		one, _, problem := r.onScale(sp, plan, in)
		if problem != nil {
			continue
		}
		if len(entries) == 1 {
			if inf, bad := r.analyse(sp, in); bad == nil && inf.DF.OK {
				se := belief.NormalError(math.Sqrt(one.V), inf.DF.V, a)
				one.V = se * se
			}
		}
		studies = append(studies, one.Study)
		f := pool.Fit(studies, opt)
		se := belief.NormalError(f.SE, f.DF, a)
		out = append(out, grown{pool.Study{Y: f.Mu, V: se*se + u*u}, e.res.Study.V})
	}
	return out
}

// believed is a belief with its shares beyond, inside and on the harmful side
// of the region; without a region the null alone divides.
func (r *run) believed(p belief.Prior, o *record.Outcome, study string) result.Belief {
	m := record.MeasureOf(o.Measure.V)
	null, low, high, has := o.Points()
	if !has {
		low, high = null, null
	}
	above, inside, below := p.Shares(effect.To(m.Scale, low), effect.To(m.Scale, high))
	b := result.Belief{Study: study, Mean: p.Mean, SD: p.SD, Benefit: above, Inside: inside, Harm: below}
	if o.Better.V == "lower" {
		b.Benefit, b.Harm = below, above
	}
	if p.NullShare > 0 {
		b.NullShare = result.Some(p.NullShare)
	}
	return b
}
