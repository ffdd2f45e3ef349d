package effect

import (
	"math"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// Fieller is the kernel of the ratio of two means: (m1 - c m2) over its
// standard error, with Satterthwaite's degrees of freedom at every c
// (Fieller 1954).
type Fieller struct {
	M1, C1, Nu1 float64 // mean, its squared standard error, degrees of freedom
	M2, C2, Nu2 float64
}

// Test implements Method. Beyond 1 the statistic is formed with 1/c, so that
// it stays finite up to c = +Inf; below 0 it is that at 0.
func (f Fieller) Test(c float64) Test {
	var t, df float64
	switch {
	case !(c > 0):
		t, df = ratio(f.M1, math.Sqrt(f.C1)), f.Nu1
	case c <= 1:
		b := c * c * f.C2
		t, df = ratio(f.M1-c*f.M2, math.Sqrt(f.C1+b)), satterthwaite(f.C1, f.Nu1, b, f.Nu2)
	default:
		r := 1 / c
		b := r * r * f.C1
		t, df = ratio(r*f.M1-f.M2, math.Sqrt(b+f.C2)), satterthwaite(b, f.Nu1, f.C2, f.Nu2)
	}
	up := tUpper(t, df)
	return Test{Up: up, Down: up.Complement(), Value: t, DF: df, Kind: "t"}
}

// Limits implements Method by inversion: the degrees of freedom change with
// c, so there is no closed form.
func (f Fieller) Limits(a float64) (low, high float64) {
	return Inversion{
		Test: f.Test, Scale: record.Log, Low: 0, High: math.Inf(1),
		Start: f.M1 / f.M2, Step: math.Sqrt(f.relative()),
	}.Limits(a)
}

// relative is the variance of the log ratio by the delta method.
func (f Fieller) relative() float64 {
	a, b := f.parts()
	return a + b
}

// parts are the squared relative errors of the two means.
func (f Fieller) parts() (a, b float64) {
	a, b = math.Sqrt(f.C1)/f.M1, math.Sqrt(f.C2)/f.M2
	return a * a, b * b
}

func ratioOfMeansFieller(in Input) (*Inference, *Problem) {
	if in.SystematicU > 0 {
		return nil, problem("S104", notWithU, "fieller")
	}
	f, inf, bad := ratioOfMeans("fieller", in)
	if bad != nil {
		return nil, bad
	}
	inf.Method = f
	inf.DF = result.Some(f.Test(inf.Estimate).DF)
	inf.addInfinite(in.A)
	return inf, nil
}

func ratioOfMeansDelta(in Input) (*Inference, *Problem) {
	f, inf, bad := ratioOfMeans("log-delta", in)
	if bad != nil {
		return nil, bad
	}
	a, b := f.parts()
	w := Welch(inf.Y.V, a, f.Nu1, b, f.Nu2)
	w.Scale, w.Low = record.Log, 0
	w = w.WithSystematic(in.SystematicU)
	delta := fromWald("log-delta", w, inf.N)
	delta.Notes, delta.Checks = inf.Notes, inf.Checks
	return delta, nil
}

// ratioOfMeans makes what both methods share.
func ratioOfMeans(word string, in Input) (Fieller, *Inference, *Problem) {
	s1, s2 := sampleOf(in.First, in.DesignEffect), sampleOf(in.Second, in.DesignEffect)
	_, notes, bad := twoMeansWald("welch", s1, s2)
	switch {
	case bad != nil:
		return Fieller{}, nil, bad
	case !(s1.mean > smallestSD):
		return Fieller{}, nil, problem("S103", outsideRange, "the first group's mean", s1.mean)
	case !(s2.mean > smallestSD):
		return Fieller{}, nil, problem("S103", outsideRange, "the second group's mean", s2.mean)
	}
	f := Fieller{M1: s1.mean, C1: s1.c(), Nu1: s1.nu(), M2: s2.mean, C2: s2.c(), Nu2: s2.nu()}
	v := f.relative()
	inf := &Inference{
		Word: word, Estimate: s1.mean / s2.mean, SE: result.Some(math.Sqrt(v)),
		Y: result.Some(math.Log(s1.mean) - math.Log(s2.mean)), V: result.Some(v), N: s1.n + s2.n,
		Notes: notes, Checks: twoMeansChecks("welch", s1, s2),
	}
	return f, inf, nil
}

// addInfinite adds note S201 for each limit that does not exist at error a;
// a = 0 asks for none.
func (inf *Inference) addInfinite(a float64) {
	if !(a > 0) {
		return
	}
	low, high := inf.Method.Limits(a)
	if math.IsInf(low, 0) {
		inf.Notes = append(inf.Notes, note("S201", infiniteLimit, "lower"))
	}
	if math.IsInf(high, 0) {
		inf.Notes = append(inf.Notes, note("S201", infiniteLimit, "upper"))
	}
}
