package effect

import (
	"math"

	"steelyard/compute/numeric"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// sample is one column of numbers reduced to what a t test needs. The counts
// are effective ones: divided by the design effect.
type sample struct {
	n, mean, sd float64 // n as given
	eff         float64 // n over the design effect
	moments     numeric.Moments
	values      []float64 // nil for summaries
}

// nu is the degrees of freedom, eff - 1.
func (s sample) nu() float64 { return s.eff - 1 }

// c is the squared standard error of the mean.
func (s sample) c() float64 { return s.sd * s.sd / s.eff }

// sampleOf reads a group; individual values take the place of a summary.
func sampleOf(g Group, design float64) sample {
	if g.Values == nil {
		return summary(g.N, g.Mean, g.SD, design)
	}
	return sampleOfValues(g.Values, design)
}

func summary(n, mean, sd, design float64) sample {
	s := sample{n: n, mean: mean, sd: sd, eff: n / design}
	if sd >= 0 && sd < smallestSD {
		s.sd = 0
	}
	return s
}

func sampleOfValues(x []float64, design float64) sample {
	s := sample{n: float64(len(x)), eff: float64(len(x)) / design, values: x}
	if len(x) > 0 {
		s.moments = numeric.MomentsOf(x)
		s.mean, s.sd = s.moments.Mean, s.moments.SD
	}
	if len(x) < 2 || s.sd < smallestSD {
		s.sd = 0
	}
	return s
}

// The sizes of numbers that can be squared and divided without overflow; a
// spread below the smallest counts as none.
const (
	largestNumber = 1e150
	smallestSD    = 1e-140
	largestCount  = 1 << 53
)

// bad reports numbers that no data can have.
func (s sample) bad(who string) *Problem {
	for _, v := range [...]struct {
		what  string
		value float64
		ok    bool
	}{
		{"n", s.n, s.n >= 0 && s.n <= largestCount},
		{"mean", s.mean, math.Abs(s.mean) <= largestNumber},
		{"sd", s.sd, s.sd >= 0 && s.sd <= largestNumber},
	} {
		if !v.ok {
			return problem("S103", outsideRange, who+"'s "+v.what, v.value)
		}
	}
	return nil
}

func (s sample) shows(group string) []result.Shown {
	shown := []result.Shown{{What: "n", Group: group, Value: s.n}}
	if len(s.values) >= 3 {
		shown = append(shown, shape(group, s.moments, s.values)...)
	}
	return shown
}

func isFinite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// OneSampleT is the kernel of the one-sample t test: (mean - c)/(sd/sqrt n)
// with n - 1 degrees of freedom (Student 1908).
func OneSampleT(n, mean, sd float64) Wald {
	return Wald{Scale: record.Identity, Y: mean, SE: sd / math.Sqrt(n), DF: n - 1,
		Low: math.Inf(-1), High: math.Inf(1)}
}

func meanT(in Input) (*Inference, *Problem) {
	return oneSampleT("the sample", sampleOf(in.Sample, in.DesignEffect), in)
}

// oneSampleT is the t test of a mean or of within-pair differences.
func oneSampleT(who string, s sample, in Input) (*Inference, *Problem) {
	if bad := s.bad(who); bad != nil {
		return nil, bad
	}
	if s.nu() <= 0 || s.n < 2 {
		return nil, problem("S101", tooFew, who, s.n, 2)
	}
	if s.sd == 0 {
		return nil, problem("S102", noVariation, who)
	}
	w := OneSampleT(s.eff, s.mean, s.sd).WithSystematic(in.SystematicU)
	inf := fromWald("t", w, s.n)
	inf.Checks = []result.Check{check("normal-means", s.shows(""))}
	return inf, nil
}

// fromWald is the inference of a Wald method. The standard error is on the
// analysis scale, which for ratios is where the language wants it.
func fromWald(word string, w Wald, n float64) *Inference {
	inf := &Inference{
		Method:   w,
		Word:     word,
		Estimate: w.clip(From(w.Scale, w.Y)),
		SE:       result.Some(w.SE),
		Y:        result.Some(w.Y),
		V:        result.Some(w.SE * w.SE),
		N:        n,
	}
	if !math.IsInf(w.DF, 1) {
		inf.DF = result.Some(w.DF)
	}
	return inf
}
