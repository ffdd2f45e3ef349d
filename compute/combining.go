package compute

import (
	"math"

	"steelyard/compute/claim"
	"steelyard/compute/combine"
	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// The messages of this file.
const (
	noCombination = "the plan has no [plan.combination.%s], so several p-values cannot be combined"
	onlyTheNull   = "p-values can be combined for a claim about the null only, not for %s, which has a margin or limit"
	noSizes       = "weights by sample size need an n for every study; %s has none"
	zeroP         = "study %s gives p = 0; write relation = \"<\" and the bound"
	notCombined   = "%s"
)

// contribution is one study's part in a combination: its one-sided p-values
// upward and downward as reported, and at their least favourable.
type contribution struct {
	study     string
	n         float64
	up, down  dist.Tail
	worstUp   dist.Tail
	worstDown dist.Tail
	known     bool
	missing   bool
	direction int // +1 above the null, -1 below, 0 unknown
}

// combined decides a claim on combined p-values. There is no estimate and no
// interval: the attempt carries an assessment alone, and its least favourable
// twin in worst.
func (r *run) combined(at *attempt, h *record.Hypothesis, q claim.Question, found []entry) {
	o := at.spec.outcome
	plan := r.rec.CombinationOf(o.Name)
	switch {
	case plan == nil:
		at.problem = &result.Note{Code: "S111", Message: noCombination, Args: []any{o.Name}}
		return
	case q.Claim != "differs" && q.Claim != "superior":
		at.problem = &result.Note{Code: "S113", Message: onlyTheNull, Args: []any{q.Claim}}
		return
	}
	parts, problem := r.contributions(at, h, found)
	if problem != nil {
		at.problem = problem
		return
	}
	method := plan.Method.V
	weights, problem := weightsOf(plan, parts)
	if problem != nil {
		at.problem = problem
		return
	}
	first, k1, problem := assessCombined(q, method, parts, weights, false)
	if problem != nil {
		at.problem = problem
		return
	}
	worst, k2, problem := assessCombined(q, method, parts, weights, true)
	if problem != nil {
		at.problem = problem
		return
	}
	if k1 == 0 {
		first = worst
	}
	at.a, at.worst = first.a, &worst.a
	if !at.planned {
		return
	}
	for _, line := range []struct {
		c    combinedLine
		k    int
		name string
	}{{first, k1, "as-reported"}, {worst, k2, "worst-case"}} {
		if line.k > 0 {
			c := line.c.result(h, method, q, line.k, line.name, parts)
			c.Set = at.set
			r.res.Combined = append(r.res.Combined, c)
		}
	}
}

// contributions reads every entry's p-values, and the missing results.
func (r *run) contributions(at *attempt, h *record.Hypothesis, found []entry) ([]contribution, *result.Note) {
	var out []contribution
	for _, e := range found {
		c := contribution{study: e.res.Study.V}
		if p := e.res.P; p != nil {
			if p.Value.V == 0 && p.Relation.V != "<" {
				return nil, &result.Note{Code: "S109", Message: zeroP, Args: []any{c.study}}
			}
			c.fromReport(p)
		} else {
			inf, problem := r.analyse(at.spec, e, false)
			if problem != nil {
				return nil, problem
			}
			c.fromInference(inf, nullOf(at.spec.outcome))
		}
		out = append(out, c)
	}
	for _, m := range r.rec.Missing {
		if m.Outcome.V == at.spec.outcome.Name && h.Counts(m.Study.V) {
			out = append(out, contribution{study: m.Study.V, missing: true, worstUp: combine.Missing(), worstDown: combine.Missing()})
		}
	}
	return out, nil
}

func (c *contribution) fromReport(p *record.PValue) {
	r := combine.Reported{P: p.Value.V, Sides: int(p.Sides.V), Direction: p.Direction.V, Relation: p.Relation.V}
	if r.Sides == 0 {
		r.Sides = 2
	}
	if r.Relation == "" {
		r.Relation = "="
	}
	c.up, c.known, c.worstUp = r.OneSided(true)
	c.down, _, c.worstDown = r.OneSided(false)
	c.n, c.direction = p.N.V, directionOf(r)
}

// directionOf is the side of the null on which a reported result lies, 0 where
// it is not said. With one side tested, a p below one half lies on that side.
func directionOf(r combine.Reported) int {
	side := map[string]int{"above": 1, "below": -1}[r.Direction]
	if r.Sides == 2 {
		return side
	}
	switch {
	case r.P < 0.5 && r.Relation != ">":
		return side
	case r.P > 0.5 && r.Relation != "<":
		return -side
	}
	return 0
}

func (c *contribution) fromInference(inf *effect.Inference, null float64) {
	t := inf.Method.Test(null)
	c.up, c.down, c.known = t.Up, t.Down, true
	c.worstUp, c.worstDown, c.n = t.Up, t.Down, inf.N
	switch {
	case inf.NoEstimate:
	case inf.Estimate > null:
		c.direction = 1
	case inf.Estimate < null:
		c.direction = -1
	}
}

// weightsOf are the weights of every contribution; nil for equal ones.
func weightsOf(plan *record.Combination, parts []contribution) ([]float64, *result.Note) {
	if plan.Weights.V != "sqrt-n" {
		return nil, nil
	}
	var w []float64
	for _, c := range parts {
		if c.missing { // enters with p = 1, whose weight does not matter
			w = append(w, 1)
			continue
		}
		if !(c.n > 0) {
			return nil, &result.Note{Code: "S113", Message: noSizes, Args: []any{c.study}}
		}
		w = append(w, math.Sqrt(c.n))
	}
	return w, nil
}

// combinedLine is one line of a combination: both directions.
type combinedLine struct {
	up, down combine.Combined
	a        claim.Assessment
}

// assessCombined combines in both directions, as reported or at the least
// favourable admissible values, and reads the claim.
func assessCombined(q claim.Question, method string, parts []contribution, weights []float64, worst bool) (combinedLine, int, *result.Note) {
	var up, down []dist.Tail
	var w []float64
	for i, c := range parts {
		if !worst && !c.known {
			continue
		}
		if worst {
			up, down = append(up, c.worstUp), append(down, c.worstDown)
		} else {
			up, down = append(up, c.up), append(down, c.down)
		}
		if weights != nil {
			w = append(w, weights[i])
		}
	}
	if len(up) == 0 {
		return combinedLine{}, 0, nil
	}
	var line combinedLine
	var err error
	if line.up, err = combine.Combine(method, up, w); err != nil {
		return line, 0, &result.Note{Code: "S104", Message: notCombined, Args: []any{err.Error()}}
	}
	if line.down, err = combine.Combine(method, down, w); err != nil {
		return line, 0, &result.Note{Code: "S104", Message: notCombined, Args: []any{err.Error()}}
	}
	line.a = claim.OfTails(q, line.up.P, line.down.P)
	return line, len(up), nil
}

// result writes one line of a combination.
func (l combinedLine) result(h *record.Hypothesis, method string, q claim.Question, k int, name string, parts []contribution) result.Combined {
	toward, c, sign := "above", l.up, 1
	if q.Claim == "superior" && q.Better == "lower" || q.Claim == "differs" && l.down.P.LnP < l.up.P.LnP {
		toward, c, sign = "below", l.down, -1
	}
	out := result.Combined{Hypothesis: h.Name, Method: method, Toward: toward, Case: name, K: k,
		P: result.P{P: l.a.P.P, Ln: l.a.P.LnP, OK: true}}
	if !math.IsInf(c.Statistic, 0) {
		out.Statistic = result.Some(c.Statistic)
	}
	if c.DF > 0 {
		out.DF = result.Some(c.DF)
	}
	t := result.Tally{}
	for _, p := range parts {
		if name == "as-reported" && !p.known {
			continue
		}
		out.Studies = append(out.Studies, p.study)
		if p.direction != 0 {
			t.With++
			if p.direction == sign {
				t.Toward++
			}
		}
	}
	if t.With > 0 {
		p := combine.Tally(t.Toward, t.With)
		t.P = result.P{P: p.P, Ln: p.LnP, OK: true}
		out.Tally = &t
	}
	return out
}
