// Package effect turns numbers into an estimate, its error, tests at any
// null, and the interval that inverts them: one file per measure. It takes
// numbers and knows no record; claims and verdicts are not its business.
//
//	inf, problem := effect.Analyse("risk-difference", "score", in)
//	up := inf.Method.Test(-0.1).Up // p of H: effect <= -0.1
package effect

import (
	"steelyard/compute/dist"
	"steelyard/compute/result"
)

// Method is a test with its interval. Both are the same thing seen from two
// sides: Limits inverts Test.
type Method interface {
	// Test returns both one-sided p-values at the null c, on the effect's own
	// scale. It does not allocate.
	Test(c float64) Test
	// Limits returns the interval at one-sided error a: level 1 - 2a. A limit
	// that does not exist is the end of the effect's range.
	Limits(a float64) (low, high float64)
}

// Test is a method's answer at one null.
type Test struct {
	Up   dist.Tail // H: effect <= c against effect > c
	Down dist.Tail // H: effect >= c against effect < c
	// Value is the statistic; +Inf and -Inf where its denominator is 0.
	Value float64
	DF    float64 // 0 where the statistic has none
	Kind  string  // t, z, chi2, f, exact, permutation, rank
	Step  bool    // a step function of c: p = a counts as beyond (methods.md 0)
}

// Below reports whether a one-sided p establishes at error a: strictly below
// it, or, for step tests, at most it, compared as counts.
func (t Test) Below(p dist.Tail, a float64) bool {
	if t.Step {
		return p.P <= a*(1+1e-12)
	}
	return p.P < a
}

// Inference is what a measure's method says of one set of numbers.
type Inference struct {
	Method   Method
	Word     string  // the method actually used
	Estimate float64 // on the effect's own scale; may be at the end of its range
	// NoEstimate says that the data support no value more than another (0/0);
	// Estimate is then the null and must not be printed.
	NoEstimate bool
	SE, DF     result.Opt
	Y, V       result.Opt // estimate and variance on the analysis scale (methods.md 0)
	N          float64    // subjects or pairs
	Events     result.Opt
	// NullOnly says that the test exists at the null alone: a claim at another
	// point is S104.
	NullOnly bool
	// NoInterval says that no interval exists whatever the level: Limits gives
	// the ends of the range, which the test need not agree with.
	NoInterval bool
	// Costly says that one test is expensive: curves use few points.
	Costly bool
	Notes  []result.Note
	Checks []result.Check
}

// Group are the numbers of one group. With individual values the summary is
// filled from them.
type Group struct {
	N, Mean, SD      float64
	LogMean, LogSD   float64
	Events, Exposure float64
	R                float64
	Values           []float64 // nil for summaries
}

// Pairs are the numbers of paired results.
type Pairs struct {
	N, Mean, SD                          float64 // of the differences first - second
	FirstMean, SecondMean                float64
	FirstSD, SecondSD, R                 float64
	HasParts                             bool // the four above and R are known
	Both, FirstOnly, SecondOnly, Neither float64
	First, Second                        []float64 // nil for summaries
}

// Given is an effect estimated elsewhere, on the effect's own scale; SE of a
// ratio is of its logarithm.
type Given struct {
	Estimate         float64
	SE, DF, N        result.Opt
	Low, High, Level result.Opt
}

// Input holds the numbers of one result entry in one set. A measure reads
// only what its definition needs.
type Input struct {
	First, Second Group // two-group measures
	Sample        Group // one-sample measures
	Pairs         Pairs
	Given         *Given // set: every measure goes through the given effect

	// Individual values beyond groups.
	Time, Event, Exposure []float64
	Group                 []uint8   // 0 first, 1 second; one a row
	Value                 []float64 // the rows in file order, where rows matter (covariates, strata)
	Period, Sequence      []uint8
	Subject               []int32
	Covariates            []Covariate
	Strata                []int32 // stratum of each row; nil: none
	StrataCount           int

	Null         float64
	Scale        func(c float64) float64 // g of the measure, set by Analyse
	Spec         [2]float64              // conforming-share, agreement
	AnySpread    bool                    // distribution = "any"
	Horizon      float64
	DesignEffect float64 // 1 without clusters (methods.md 0)
	SystematicU  float64
	Crossover    bool

	// Seed feeds permutations.
	Seed uint64
	// A is the one-sided error of the claim at hand, for notes about
	// resolution; methods must not depend on it.
	A float64
}

// Covariate is one column of the linear model.
type Covariate struct {
	Name   string
	Values []float64 // numeric; nil for a factor
	Levels []string  // factor, in byte order; the first is the reference
	Code   []int32
}

// Problem is why nothing could be computed: a note whose code is an error or
// warning of methods.md N.
type Problem = result.Note
