package effect

import (
	"math"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// Welch is the kernel of Welch's t test for the difference of two means from
// the squared standard errors c1, c2 of the means and their degrees of
// freedom (Welch 1947).
func Welch(difference, c1, nu1, c2, nu2 float64) Wald {
	return Wald{Scale: record.Identity, Y: difference, SE: math.Sqrt(c1 + c2),
		DF: satterthwaite(c1, nu1, c2, nu2), Low: math.Inf(-1), High: math.Inf(1)}
}

// satterthwaite is (c1+c2)^2/(c1^2/nu1 + c2^2/nu2), formed from the shares so
// that it can neither overflow nor become 0/0 unless both are 0.
func satterthwaite(c1, nu1, c2, nu2 float64) float64 {
	if c1 == 0 && c2 == 0 {
		return nu1 + nu2
	}
	top := math.Max(c1, c2)
	if math.IsInf(top, 1) {
		return math.Min(nu1, nu2)
	}
	a, b := c1/top, c2/top
	s := a + b
	den := 0.0
	if a > 0 {
		den += (a / s) * (a / s) / nu1
	}
	if b > 0 {
		den += (b / s) * (b / s) / nu2
	}
	return 1 / den
}

// PooledVariance is the kernel of the two-sample t test with one variance.
// The eff are the numbers of values over the design effect.
func PooledVariance(difference, eff1, sd1, eff2, sd2 float64) Wald {
	nu := eff1 + eff2 - 2
	sp := math.Sqrt(((eff1-1)*sd1*sd1 + (eff2-1)*sd2*sd2) / nu)
	return Wald{Scale: record.Identity, Y: difference, SE: sp * math.Sqrt(1/eff1+1/eff2), DF: nu,
		Low: math.Inf(-1), High: math.Inf(1)}
}

func meanDifferenceWelch(in Input) (*Inference, *Problem) { return meanDifference("welch", in) }
func meanDifferencePooled(in Input) (*Inference, *Problem) {
	return meanDifference("pooled-variance", in)
}

func meanDifference(word string, in Input) (*Inference, *Problem) {
	if in.Crossover {
		return crossover(word, record.Identity, in)
	}
	return twoMeans(word, record.Identity, sampleOf(in.First, in.DesignEffect), sampleOf(in.Second, in.DesignEffect), in)
}

// twoMeans compares two means by `welch` or `pooled-variance`; on the log
// scale the samples hold logarithms and the effect is a ratio.
func twoMeans(word string, scale record.Scale, s1, s2 sample, in Input) (*Inference, *Problem) {
	if len(in.Covariates) > 0 || in.Strata != nil {
		return nil, problem("S112", noAdjustment, word)
	}
	w, notes, bad := twoMeansWald(word, s1, s2)
	if bad != nil {
		return nil, bad
	}
	w.Scale = scale
	if scale == record.Log {
		w.Low = 0
	}
	inf := fromWald(word, w.WithSystematic(in.SystematicU), s1.n+s2.n)
	inf.Notes = notes
	inf.Checks = twoMeansChecks(word, s1, s2)
	return inf, nil
}

func twoMeansChecks(word string, s1, s2 sample) []result.Check {
	checks := []result.Check{check("normal-means", s1.shows(firstGroup), s2.shows(secondGroup))}
	if r := spreadRatio(s1.sd, s2.sd); r != nil && word == "pooled-variance" {
		checks = append(checks, check("equal-variances", r))
	}
	return checks
}

// twoMeansWald refuses what cannot be computed and makes the kernel.
func twoMeansWald(word string, s1, s2 sample) (Wald, []result.Note, *Problem) {
	var none Wald
	if bad := s1.bad("the first group"); bad != nil {
		return none, nil, bad
	}
	if bad := s2.bad("the second group"); bad != nil {
		return none, nil, bad
	}
	difference := s1.mean - s2.mean
	if word == "pooled-variance" {
		switch {
		case s1.n < 1 || s1.nu() < 0:
			return none, nil, problem("S101", tooFew, "the first group", s1.n, 1)
		case s2.n < 1 || s2.nu() < 0:
			return none, nil, problem("S101", tooFew, "the second group", s2.n, 1)
		case s1.nu()+s2.nu() <= 0 || s1.n+s2.n < 3:
			return none, nil, problem("S101", tooFewOf, "both groups together", s1.n+s2.n, 3)
		}
		w := PooledVariance(difference, s1.eff, s1.sd, s2.eff, s2.sd)
		if w.SE == 0 {
			return none, nil, problem("S102", neitherVaries)
		}
		return w, oneGroupConstant(s1, s2), nil
	}
	switch {
	case s1.n < 2 || s1.nu() <= 0:
		return none, nil, problem("S101", tooFew, "the first group", s1.n, 2)
	case s2.n < 2 || s2.nu() <= 0:
		return none, nil, problem("S101", tooFew, "the second group", s2.n, 2)
	case s1.sd == 0 && s2.sd == 0:
		return none, nil, problem("S102", neitherVaries)
	}
	return Welch(difference, s1.c(), s1.nu(), s2.c(), s2.nu()), oneGroupConstant(s1, s2), nil
}

// oneGroupConstant is note S203 where one group of several values does not
// vary.
func oneGroupConstant(s1, s2 sample) []result.Note {
	switch {
	case s1.sd == 0 && s1.n > 1:
		return []result.Note{note("S203", oneConstant, "the first group")}
	case s2.sd == 0 && s2.n > 1:
		return []result.Note{note("S203", oneConstant, "the second group")}
	}
	return nil
}
