package survival

import (
	"math"
	"sort"

	"steelyard/compute/dist"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// likelihood is the partial likelihood of the log hazard ratio with Efron's
// treatment of ties (Efron 1977, from memory).
type likelihood struct {
	steps []step
	d1    float64 // events in the first group
	d     float64 // all events
}

func newLikelihood(all []step) likelihood {
	l := likelihood{steps: all}
	for _, s := range all {
		l.d1 += s.d1
		l.d += s.d0 + s.d1
	}
	return l
}

// at returns log-likelihood, score and information at beta. Sums are scaled
// by the larger of the two groups' weights, so that no beta overflows.
func (l likelihood) at(beta float64) (ll, score, info float64) {
	wa, wb, shift := 1.0, math.Exp(beta), 0.0 // weights of second and first group
	if beta > 0 {
		wa, wb, shift = math.Exp(-beta), 1, beta
	}
	ll, score = l.d1*beta, l.d1
	for _, s := range l.steps {
		d := s.d0 + s.d1
		for k := 0.0; k < d; k++ {
			b := wb * (s.n1 - k/d*s.d1)
			t := wa*(s.n0-k/d*s.d0) + b
			p := b / t
			ll -= math.Log(t) + shift
			score -= p
			info += p * (1 - p)
		}
	}
	return ll, score, info
}

// ends reports where the likelihood keeps rising for ever: +1, -1, or 0; flat
// says that it does not depend on beta at all. At the end it also returns the
// limit of the log-likelihood.
func (l likelihood) ends() (toward int, limit float64, flat bool) {
	up, down := l.d1, l.d1 // score at +Inf and -Inf
	var llUp, llDown float64
	for _, s := range l.steps {
		d := s.d0 + s.d1
		for k := 0.0; k < d; k++ {
			a, b := s.n0-k/d*s.d0, s.n1-k/d*s.d1
			if b > 0 {
				up--
				llUp -= math.Log(b)
			} else {
				llUp -= math.Log(a)
			}
			if a > 0 {
				llDown -= math.Log(a)
			} else {
				down--
				llDown -= math.Log(b)
			}
		}
	}
	switch {
	case up >= 0 && down <= 0:
		return 0, 0, true
	case up >= 0:
		return 1, llUp, false
	case down <= 0:
		return -1, llDown, false
	}
	return 0, 0, false
}

// maximum finds the estimate by Newton's method with step halving from 0.
func (l likelihood) maximum() (beta, ll, info float64) {
	ll, score, info := l.at(0)
	for range 200 {
		step := score / info
		next := beta + step
		nll, nscore, ninfo := l.at(next)
		for range 60 {
			if nll >= ll-1e-12*math.Abs(ll) {
				break
			}
			step /= 2
			next = beta + step
			nll, nscore, ninfo = l.at(next)
		}
		beta, ll, score, info = next, nll, nscore, ninfo
		if math.Abs(step) <= 1e-13*math.Max(1, math.Abs(beta)) {
			break
		}
	}
	return beta, ll, info
}

// HazardRatio estimates the ratio of the first group's hazard to the second's
// by the method wald, likelihood-ratio or score ("" is wald), stratified
// where the input has strata. Beside it stand the log-rank test and a check
// of proportionality, as checks.
func HazardRatio(method string, in Input) (*effect.Inference, *effect.Problem) {
	rows := in.ordered()
	all := steps(rows)
	if !bothGroups(in.Group) {
		return nil, problem("S101", emptyGroup)
	}
	l := newLikelihood(all)
	if l.d == 0 {
		return nil, problem("S101", noEvents)
	}
	toward, limit, flat := l.ends()
	if flat {
		return nil, problem("S102", noInformation)
	}
	inf := &effect.Inference{Word: method, N: float64(len(rows)), Events: result.Some(l.d)}
	if method == "" {
		inf.Word = "wald"
	}
	h := hazard{l: l, top: limit}
	switch toward {
	case 0:
		h.beta, h.top, h.info = l.maximum()
		inf.Estimate = math.Exp(h.beta)
		inf.SE, inf.Y, inf.V = result.Some(1/math.Sqrt(h.info)), result.Some(h.beta), result.Some(1/h.info)
		inf.Checks = append(inf.Checks, proportionality(l, h.beta, h.info)...)
		if p := lastCheck(inf.Checks); p < 0.05 {
			inf.Notes = append(inf.Notes, note("S223", notProportion, p))
		}
	default:
		h.beta = math.Inf(toward)
		inf.Estimate = math.Exp(h.beta)
		if inf.Word == "wald" {
			inf.Word = "likelihood-ratio"
		}
		inf.Notes = append(inf.Notes, note("S206", infiniteRatio))
	}
	inf.Checks = append(inf.Checks, logRankCheck(all)...)
	inf.Costly = l.d > 20000 && inf.Word != "wald"
	inf.Method = h.method(inf.Word)
	return inf, nil
}

func bothGroups(group []uint8) bool {
	var seen [2]bool
	for _, g := range group {
		seen[g] = true
	}
	return seen[0] && seen[1]
}

// hazard is a fitted likelihood.
type hazard struct {
	l               likelihood
	beta, top, info float64 // estimate, its log-likelihood and information
}

func (h hazard) method(word string) effect.Method {
	if word == "wald" {
		return effect.Wald{Scale: record.Log, Y: h.beta, SE: 1 / math.Sqrt(h.info), DF: math.Inf(1), Low: 0, High: math.Inf(1)}
	}
	test := h.likelihoodRatio
	if word == "score" {
		test = h.score
	}
	v := effect.Inversion{Test: test, Scale: record.Log, Low: 0, High: math.Inf(1), Start: math.Exp(h.beta), Monotone: true}
	if h.info > 0 {
		v.Step = 1 / math.Sqrt(h.info)
	}
	return inverted{test, v}
}

// inverted is a test with the limits found from it.
type inverted struct {
	test func(c float64) effect.Test
	at   effect.Inversion
}

func (m inverted) Test(c float64) effect.Test           { return m.test(c) }
func (m inverted) Limits(a float64) (low, high float64) { return m.at.Limits(a) }

// likelihoodRatio is the signed root of twice the log-likelihood lost at c.
func (h hazard) likelihoodRatio(c float64) effect.Test {
	b := math.Log(c)
	ll, _, _ := h.l.at(clamp(b))
	z := math.Sqrt(math.Max(0, 2*(h.top-ll)))
	if h.beta < b {
		z = -z
	}
	return normal(z)
}

// score is the score at c over the root of the information there.
func (h hazard) score(c float64) effect.Test {
	_, score, info := h.l.at(clamp(math.Log(c)))
	switch {
	case score == 0:
		return normal(0)
	case info == 0:
		return normal(math.Copysign(math.Inf(1), score))
	}
	return normal(score / math.Sqrt(info))
}

func clamp(b float64) float64 { return math.Max(-700, math.Min(b, 700)) }

func normal(z float64) effect.Test {
	up := dist.NormalUpper(z)
	return effect.Test{Up: up, Down: up.Complement(), Value: z, Kind: "z"}
}

// proportionality tests whether the log hazard ratio changes with the rank of
// the event time (Grambsch & Therneau 1994, from memory).
func proportionality(l likelihood, beta, info float64) []result.Check {
	type point struct{ g, r, d float64 }
	all := append([]step{}, l.steps...)
	sort.SliceStable(all, func(i, j int) bool { return all[i].time < all[j].time })
	var points []point
	before := 0.0
	w := math.Exp(clamp(beta))
	for i := 0; i < len(all); {
		p := point{}
		j := i
		for ; j < len(all) && all[j].time == all[i].time; j++ {
			s := all[j]
			d := s.d0 + s.d1
			p.d += d
			p.r += s.d1
			for k := 0.0; k < d; k++ {
				b := w * (s.n1 - k/d*s.d1)
				p.r -= b / (s.n0 - k/d*s.d0 + b)
			}
		}
		p.g = before + (p.d+1)/2
		before += p.d
		points = append(points, p)
		i = j
	}
	mean := (l.d + 1) / 2
	var num, den float64
	for _, p := range points {
		num += (p.g - mean) * p.r
		den += (p.g - mean) * (p.g - mean) * p.d
	}
	if !(den > 0) || !(info > 0) {
		return nil
	}
	chi2 := num * num * l.d / (info * den)
	return []result.Check{{Assumption: "proportional-hazards", Shows: []result.Shown{
		{What: "chi-square with 1 degree of freedom", Value: chi2}, {What: "p", Value: dist.ChiSquareUpper(chi2, 1).P}}}}
}

// lastCheck is the p of the last check; 1 without one.
func lastCheck(c []result.Check) float64 {
	if len(c) == 0 {
		return 1
	}
	s := c[len(c)-1].Shows
	return s[len(s)-1].Value
}

func logRankCheck(all []step) []result.Check {
	z, ok := logRank(all)
	if !ok {
		return nil
	}
	return []result.Check{{Assumption: "log-rank", Shows: []result.Shown{
		{What: "z", Value: z}, {What: "p", Value: math.Min(1, 2*dist.NormalUpper(math.Abs(z)).P)}}}}
}
