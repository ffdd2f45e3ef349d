package compute

import (
	"math"

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
	out.DensityBefore = densityOf(prior, o)
	grown := r.growth(o)
	for _, e := range grown {
		out.After = r.believed(prior.Update(e.Y, e.V), o, e.study)
		out.Path = append(out.Path, out.After)
	}
	if len(grown) == 0 {
		out.DensityAfter = out.DensityBefore
		return
	}
	last := grown[len(grown)-1]
	out.DensityAfter = densityOf(prior.Update(last.Y, last.V), o)
	if p.NullShare.Stated {
		ln := prior.LnBayesFactor(last.Y, last.V)
		out.LnBayesFactor = opt(ln)
		if bf := math.Exp(ln); bf > 0 && !math.IsInf(bf, 0) {
			out.BayesFactor = result.Some(bf)
		}
	}
	if far := prior.Conflict(last.Y, last.V); far > 2 {
		r.note(p.At, "", result.Note{Code: "S222", Message: disagreement, Args: []any{p.Name, far}})
	}
}

// grown is the evidence on an outcome after one more study.
type grown struct {
	pool.Study
	study string
}

// growth is the pooled evidence after each study, by date then record order:
// the planned model when the outcome is pooled, the common one otherwise. One
// study alone stands by its own method, whose error is made normal.
func (r *run) growth(o *record.Outcome) []grown {
	p := r.poolFor(o, r.sets()[0])
	if len(p.studies) == 0 {
		return nil
	}
	a := (1 - r.level) / 2
	order := p.byDate()
	var out []grown
	for i, f := range p.grown(p.options(p.random()), order) {
		if i == 0 {
			f = pool.Pooled{Mu: order[0].Y, SE: math.Sqrt(order[0].V), DF: math.Inf(1)}
			if inf, problem := r.analyse(p.spec, order[0].entry, true); problem == nil && inf.DF.OK {
				f.DF = inf.DF.V
			}
		}
		if !(f.SE > 0) || math.IsInf(f.SE, 0) {
			continue
		}
		w := p.wald(f)
		se := belief.NormalError(w.SE, w.DF, a)
		out = append(out, grown{pool.Study{Y: w.Y, V: se * se}, order[i].name})
	}
	return out
}

// densityOf is a belief's density at values of the effect.
func densityOf(p belief.Prior, o *record.Outcome) []result.DensityPoint {
	scale := record.MeasureOf(o.Measure.V).Scale
	y, height := p.Density()
	var out []result.DensityPoint
	for i := range y {
		if v := effect.From(scale, y[i]); !math.IsInf(v, 0) {
			out = append(out, result.DensityPoint{Value: v, Height: height[i]})
		}
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
