package pool

import (
	"math"

	"steelyard/compute/numeric"
)

// tau2 estimates the variance between studies. near, when it is a number, is
// where to look first.
func (b Between) tau2(studies []Study, near float64) float64 {
	if len(studies) < 2 {
		return 0
	}
	switch b {
	case REML:
		return reml(studies, near)
	case PauleMandel:
		return qRoot(studies, float64(len(studies)-1))
	case DerSimonianLaird:
		return dersimonianLaird(studies)
	case SidikJonkman:
		return sidikJonkman(studies)
	}
	panic("pool: unknown estimator " + string(b))
}

// dersimonianLaird is the moment estimator (DerSimonian & Laird 1986, from
// memory).
func dersimonianLaird(studies []Study) float64 {
	_, _, q := moments(studies, 0)
	unit, sw, cross := weightSums(studies)
	excess := q - float64(len(studies)-1)
	if !(excess > 0) || cross == 0 {
		return 0
	}
	return excess * unit * sw / cross
}

// sidikJonkman is the estimator of Sidik & Jonkman (2005, from memory),
// started from the variance of the estimates with divisor k.
func sidikJonkman(studies []Study) float64 {
	k := float64(len(studies))
	var mean, start float64
	for _, s := range studies {
		mean += s.Y / k
	}
	for _, s := range studies {
		start += (s.Y - mean) * (s.Y - mean) / k
	}
	if start == 0 {
		return 0
	}
	var sy, sr float64
	for _, s := range studies {
		r := s.V/start + 1
		sy += s.Y / r
		sr += 1 / r
	}
	m := sy / sr
	var sum float64
	for _, s := range studies {
		sum += (s.Y - m) * (s.Y - m) / (s.V/start + 1)
	}
	return sum / (k - 1)
}

// qRoot is the variance between studies at which Q equals target: Paule &
// Mandel's estimator for k-1, the limits of the Q-profile for chi-square
// points. Q falls in it; 0 where Q(0) is already below.
func qRoot(studies []Study, target float64) float64 {
	q := func(tau2 float64) float64 {
		_, _, q := moments(studies, tau2)
		return q - target
	}
	if q(0) <= 0 {
		return 0
	}
	hi := meanV(studies)
	for range 2000 {
		if q(hi) < 0 {
			t, _ := numeric.Root(q, 0, hi, 1e-14)
			return t
		}
		hi *= 4
	}
	return math.Inf(1)
}

func meanV(studies []Study) float64 {
	var v float64
	for _, s := range studies {
		v += s.V
	}
	return v / float64(len(studies))
}

// likelihood is the restricted log-likelihood up to a constant.
func likelihood(studies []Study, tau2 float64) float64 {
	_, sw, q := moments(studies, tau2)
	var ln float64
	for _, s := range studies {
		ln += math.Log(s.V + tau2)
	}
	return -0.5*ln - 0.5*q - 0.5*math.Log(sw)
}

// score is the derivative of the restricted log-likelihood.
func score(studies []Study, tau2 float64) float64 {
	first, d, sw := centre(studies, tau2)
	mu := first + d
	var sw2, swe float64
	for i := range studies {
		w, e := 1/(studies[i].V+tau2), studies[i].Y-mu
		sw2 += w * w
		swe += w * w * e * e
	}
	return 0.5 * (swe - sw + sw2/sw)
}

// scanned is how many points of ln tau2 the search for the REML maximum looks
// at, from 1e-8 to 1e3 times the mean sampling variance.
const scanned = 64

// reml maximises the restricted likelihood: the best of 0 and a grid, refined
// as a root of the score between the neighbours of the best point.
func reml(studies []Study, near float64) float64 {
	if t, ok := remlNear(studies, near); ok {
		return t
	}
	unit := meanV(studies)
	grid := make([]float64, scanned+1)
	best, bestAt := likelihood(studies, 0), 0
	for i := 1; i <= scanned; i++ {
		grid[i] = unit * math.Pow(10, -8+11*float64(i-1)/(scanned-1))
		if l := likelihood(studies, grid[i]); l > best {
			best, bestAt = l, i
		}
	}
	f := func(t float64) float64 { return score(studies, t) }
	lo := grid[max(0, bestAt-1)]
	hi := grid[min(scanned, bestAt+1)]
	if bestAt == scanned {
		hi = grid[scanned]
		for range 200 {
			if hi *= 10; f(hi) < 0 {
				break
			}
		}
	}
	if f(lo) <= 0 { // falling from the start: the maximum is the end
		return lo
	}
	t, ok := numeric.Root(f, lo, hi, 1e-14)
	if !ok {
		return grid[bestAt]
	}
	return t
}

// remlNear looks for the root of the score around a known one. It gives up,
// for the full search, where the score does not change sign from plus to
// minus within a factor of eight.
func remlNear(studies []Study, near float64) (float64, bool) {
	if !(near > 0) {
		return 0, false
	}
	f := func(t float64) float64 { return score(studies, t) }
	lo, hi := near, near
	atLo := f(near)
	atHi := atLo
	for step := 1.1; step < 9; step *= step {
		if atLo <= 0 {
			lo = near / step
			atLo = f(lo)
		} else if atHi >= 0 {
			hi = near * step
			atHi = f(hi)
		} else {
			break
		}
	}
	if atLo <= 0 || atHi >= 0 {
		return 0, false
	}
	return numeric.Root(func(t float64) float64 {
		switch t {
		case lo:
			return atLo
		case hi:
			return atHi
		}
		return f(t)
	}, lo, hi, 1e-12)
}
