package effect

import (
	"math"

	"gonum.org/v1/gonum/mathext"

	"steelyard/compute/dist"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// spread are the measures of spread, of relation between paired readings, and
// of the share inside limits.
var spread = map[string]map[string]analysis{
	"sd":               {"chi-square": sdChiSquare},
	"sd-ratio":         {"f": sdRatioF, "log-kurtosis": sdRatioLogKurtosis},
	"paired-sd-ratio":  {"pitman-morgan": pairedSDRatio},
	"correlation":      {"fisher-z": correlationFisher, "exact": correlationExact},
	"rank-correlation": {"bonett-wright": rankCorrelationBonettWright, "permutation": rankCorrelationPermutation},
	"conforming-share": {"normal": conformingNormal, "any": conformingAny},
	"agreement":        {"normal": agreementNormal, "any": agreementAny},
}

// The formats of this file's notes.
const (
	needsNormal  = "%s depends on normal data at every sample size; look at the shape of the values before leaning on it"
	halfConstant = "%s does not vary: the ratio stands at the end of its range and has no interval"
)

// lnSD is the bias-corrected logarithm of a standard deviation with nu degrees
// of freedom, and its variance, for normal data (methods.md 0).
func lnSD(sd, nu float64) (y, v float64) {
	b := (mathext.Digamma(nu/2) - math.Log(nu/2)) / 2
	return math.Log(sd) - b, mathext.Zeta(2, nu/2) / 4
}

// SDChiSquare is the kernel of the chi-square test of one standard deviation:
// nu s^2/c^2 with nu degrees of freedom. It depends on normal data.
type SDChiSquare struct{ SD, Nu float64 }

// Test implements Method.
func (m SDChiSquare) Test(c float64) Test {
	x := m.Nu * square(ratio(m.SD, math.Max(0, c)))
	up := chiSquareUpper(x, m.Nu)
	return Test{Up: up, Down: up.Complement(), Value: x, DF: m.Nu, Kind: "chi2"}
}

// Limits implements Method in closed form.
func (m SDChiSquare) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return 0, math.Inf(1)
	case a >= 1:
		return math.Inf(1), 0
	}
	return m.SD * math.Sqrt(m.Nu/dist.ChiSquareQuantile(a, m.Nu)), m.SD * math.Sqrt(m.Nu/dist.ChiSquareLowerQuantile(a, m.Nu))
}

func square(x float64) float64 { return x * x }

// chiSquareUpper moves the ends of the range to their limits.
func chiSquareUpper(x, nu float64) dist.Tail {
	switch {
	case math.IsInf(x, 1):
		return sureTail.Complement()
	case x <= 0:
		return sureTail
	}
	return dist.ChiSquareUpper(x, nu)
}

func sdChiSquare(in Input) (*Inference, *Problem) {
	s := sampleOf(in.Sample, 1)
	if bad := spreadOnly(in, s, "the sample", "chi-square"); bad != nil {
		return nil, bad
	}
	nu := s.n - 1
	y, v := lnSD(s.sd, nu)
	inf := &Inference{Method: SDChiSquare{s.sd, nu}, Word: "chi-square", Estimate: s.sd, SE: result.Some(math.Sqrt(v)), DF: result.Some(nu),
		Y: result.Some(y), V: result.Some(v), N: s.n, Notes: []result.Note{note("S221", needsNormal, "the test of a standard deviation")}}
	inf.Checks = []result.Check{check("normal-values", s.shows(""))}
	return inf, nil
}

// spreadOnly refuses what a measure of spread cannot use.
func spreadOnly(in Input, s sample, who, method string) *Problem {
	switch {
	case in.SystematicU > 0:
		return problem("S104", notWithU, method)
	case in.DesignEffect != 1:
		return problem("S104", notClustered, method)
	}
	if bad := s.bad(who); bad != nil {
		return bad
	}
	if !(s.n >= 2) || math.IsInf(s.n, 0) {
		return problem("S101", tooFew, who, s.n, 2)
	}
	if s.sd == 0 {
		return problem("S102", noVariation, who)
	}
	return nil
}

// SDRatioF is the kernel of the F test of a ratio of standard deviations:
// (s1/s2)^2/c^2. It depends on normal data.
type SDRatioF struct{ Ratio, Nu1, Nu2 float64 }

// Test implements Method.
func (m SDRatioF) Test(c float64) Test {
	f := square(ratio(m.Ratio, math.Max(0, c)))
	up := sureTail
	switch {
	case math.IsInf(f, 1):
		up = sureTail.Complement()
	case f > 0:
		up = dist.FUpper(f, m.Nu1, m.Nu2)
	}
	return Test{Up: up, Down: up.Complement(), Value: f, DF: m.Nu1, Kind: "f"}
}

// Limits implements Method in closed form.
func (m SDRatioF) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return 0, math.Inf(1)
	case a >= 1:
		return math.Inf(1), 0
	}
	return m.Ratio / math.Sqrt(dist.FQuantile(a, m.Nu1, m.Nu2)), m.Ratio * math.Sqrt(dist.FQuantile(a, m.Nu2, m.Nu1))
}

// twoSpreads reads both groups for a ratio of standard deviations.
func twoSpreads(in Input, method string) (s1, s2 sample, bad *Problem) {
	s1, s2 = sampleOf(in.First, 1), sampleOf(in.Second, 1)
	if bad = spreadOnly(in, s1, "the first group", method); bad != nil && bad.Code != "S102" {
		return s1, s2, bad
	}
	if again := spreadOnly(in, s2, "the second group", method); again != nil {
		return s1, s2, again
	}
	return s1, s2, bad
}

func sdRatioF(in Input) (*Inference, *Problem) {
	s1, s2, bad := twoSpreads(in, "f")
	if bad != nil {
		return nil, bad
	}
	nu1, nu2 := s1.n-1, s2.n-1
	y1, v1 := lnSD(s1.sd, nu1)
	y2, v2 := lnSD(s2.sd, nu2)
	inf := &Inference{Method: SDRatioF{s1.sd / s2.sd, nu1, nu2}, Word: "f", Estimate: s1.sd / s2.sd, SE: result.Some(math.Sqrt(v1 + v2)),
		Y: result.Some(y1 - y2), V: result.Some(v1 + v2), N: s1.n + s2.n, Notes: []result.Note{note("S221", needsNormal, "the F test")}}
	inf.Checks = []result.Check{check("normal-values", s1.shows(firstGroup), s2.shows(secondGroup))}
	return inf, nil
}

// sdRatioLogKurtosis is the Wald test on the logarithm with the kurtosis
// pooled over groups (delta method; kurtosis as Bonett 2006, from memory).
func sdRatioLogKurtosis(in Input) (*Inference, *Problem) {
	s1, s2, bad := twoSpreads(in, "log-kurtosis")
	if bad != nil {
		return nil, bad
	}
	if s1.values == nil || s2.values == nil {
		return nil, problem("S104", needsData, "log-kurtosis")
	}
	m1, m2 := s1.moments, s2.moments
	k := (m1.N + m2.N) * (m1.M4 + m2.M4) / square(m1.M2+m2.M2)
	v := 0.0
	for _, n := range []float64{s1.n, s2.n} {
		v += (k - (n-3)/(n-1)) / (4 * n)
	}
	if !(v > 0) {
		return nil, problem("S102", noVariation, "the spread of the groups")
	}
	w := Wald{Scale: record.Log, Y: math.Log(s1.sd / s2.sd), SE: math.Sqrt(v), DF: math.Inf(1), Low: 0, High: math.Inf(1)}
	inf := fromWald("log-kurtosis", w, s1.n+s2.n)
	inf.Checks = []result.Check{check("same-shape", s1.shows(firstGroup), s2.shows(secondGroup))}
	return inf, nil
}

// PitmanMorgan is the kernel of the test of a ratio of standard deviations
// within pairs (Pitman 1939, Morgan 1939, from memory): with F = (s1/s2)^2/c^2
// and r their correlation, T = (F-1) sqrt(nu)/(2 sqrt(F (1-r^2))), nu = n-2.
type PitmanMorgan struct{ Ratio, R, Nu float64 }

// Test implements Method.
func (m PitmanMorgan) Test(c float64) Test {
	q := ratio(m.Ratio, math.Max(0, c)) // (F-1)/sqrt F = q - 1/q
	t := (q - 1/q) * math.Sqrt(m.Nu) / (2 * math.Sqrt((1-m.R)*(1+m.R)))
	if q == 0 {
		t = math.Inf(-1)
	}
	up := tUpper(t, m.Nu)
	return Test{Up: up, Down: up.Complement(), Value: t, DF: m.Nu, Kind: "t"}
}

// Limits implements Method in closed form.
func (m PitmanMorgan) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return 0, math.Inf(1)
	case a >= 1:
		return math.Inf(1), 0
	}
	t := dist.TQuantile(a, m.Nu)
	u := t * math.Sqrt((1-m.R)*(1+m.R)/m.Nu) // q - 1/q = 2u at the limit
	root := math.Abs(u) + math.Hypot(1, u)
	if u < 0 {
		root = 1 / root
	}
	return m.Ratio / root, m.Ratio * root
}

func pairedSDRatio(in Input) (*Inference, *Problem) {
	p := in.Pairs
	switch {
	case in.SystematicU > 0:
		return nil, problem("S104", notWithU, "pitman-morgan")
	case in.DesignEffect != 1:
		return nil, problem("S104", notClustered, "pitman-morgan")
	case !(p.N >= 3) || math.IsInf(p.N, 0):
		return nil, problem("S101", tooFewOf, "the pairs", p.N, 3)
	case !(p.FirstSD > smallestSD) || !(p.SecondSD > smallestSD):
		return nil, problem("S102", noVariation, "one of the readings")
	case !(math.Abs(p.R) < 1):
		return nil, problem("S102", noVariation, "the difference or the sum of the readings, which are perfectly related,")
	}
	q, v := p.FirstSD/p.SecondSD, (1-p.R)*(1+p.R)/(p.N-2)
	inf := &Inference{Method: PitmanMorgan{q, p.R, p.N - 2}, Word: "pitman-morgan", Estimate: q, SE: result.Some(math.Sqrt(v)), DF: result.Some(p.N - 2),
		Y: result.Some(math.Log(q)), V: result.Some(v), N: p.N, Notes: []result.Note{note("S221", needsNormal, "the comparison of spreads within pairs")}}
	inf.Checks = []result.Check{check("normal-values", pairShape(p), []result.Shown{{What: "correlation of the readings", Value: p.R}})}
	return inf, nil
}

// pairShape shows the shape of both readings.
func pairShape(p Pairs) []result.Shown {
	return append(normality(firstGroup, p.N, p.First), normality(secondGroup, p.N, p.Second)...)
}

// differences are first minus second of every pair; nil for summaries.
func differences(p Pairs) []float64 {
	if p.First == nil {
		return nil
	}
	d := make([]float64, len(p.First))
	for i := range d {
		d[i] = p.First[i] - p.Second[i]
	}
	return d
}
