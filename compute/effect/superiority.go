package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

const (
	separated   = "the groups do not overlap: no error can be computed from the placements; hanley-mcneil is used"
	noPlacement = "the placements do not vary in either group"
)

// superiority is the probability that a value of the first group is above one
// of the second, ties half: Brunner & Munzel (2000), DeLong, DeLong &
// Clarke-Pearson (1988), the former on the logit scale, and method 5 of
// Newcombe (2006) after Hanley & McNeil; all from memory.
func superiority(word string) analysis {
	return func(in Input) (*Inference, *Problem) {
		if bad := rankInput(in, word); bad != nil {
			return nil, bad
		}
		x, y := in.First.Values, in.Second.Values
		if x == nil || y == nil {
			return nil, problem("S104", needsData, word)
		}
		for _, v := range [][]float64{x, y} {
			if bad := finiteValues("a value", v); bad != nil {
				return nil, bad
			}
			if len(v) < 2 {
				return nil, problem("S101", tooFew, "a group", float64(len(v)), 2)
			}
		}
		return fromPlacements(word, x, y)
	}
}

func fromPlacements(word string, x, y []float64) (*Inference, *Problem) {
	n1, n2 := float64(len(x)), float64(len(y))
	v10, v01 := placements(x, y)
	a, b := numeric.MomentsOf(v10), numeric.MomentsOf(v01)
	theta := math.Min(1, math.Max(0, a.Mean))
	ca, cb := a.SD*a.SD/n1, b.SD*b.SD/n2
	se := math.Sqrt(ca + cb)
	inf := &Inference{Word: word, Estimate: theta, N: n1 + n2}
	if !(se > 1e-14) || theta == 0 || theta == 1 {
		if theta != 0 && theta != 1 && word != "hanley-mcneil" {
			return nil, problem("S102", noPlacement)
		}
		if word != "hanley-mcneil" {
			inf.Notes = append(inf.Notes, note("S206", separated))
		}
		inf.Word, inf.Method = "hanley-mcneil", HanleyMcNeil{theta, n1, n2}
	} else {
		df := square(ca+cb) / (ca*ca/(n1-1) + cb*cb/(n2-1))
		w := Wald{Scale: record.Identity, Y: theta, SE: se, DF: df, Low: 0, High: 1}
		slope := theta * (1 - theta)
		inf.SE, inf.DF = result.Some(se), result.Some(df)
		inf.Y, inf.V = result.Some(To(record.Logit, theta)), result.Some(square(se/slope))
		switch word {
		case "brunner-munzel":
		case "delong":
			w.DF, inf.DF = math.Inf(1), result.Opt{}
		case "logit":
			w.Scale, w.Y, w.SE = record.Logit, To(record.Logit, theta), se/slope
		case "hanley-mcneil":
			inf.DF = result.Opt{}
		}
		inf.Method = w
		if word == "hanley-mcneil" {
			inf.Method = HanleyMcNeil{theta, n1, n2}
		}
	}
	inf.Checks = []result.Check{check("independent-values", []result.Shown{{What: "n", Group: firstGroup, Value: n1}, {What: "n", Group: secondGroup, Value: n2}},
		[]result.Shown{{What: "tied values", Value: tied(append(append([]float64{}, x...), y...))}})}
	return inf, nil
}

// placements are, for each value, the share of the other group below it (of
// the first group's values) or above it (of the second's), ties half: from
// midranks, O(N log N).
func placements(x, y []float64) (v10, v01 []float64) {
	all := midranks(append(append([]float64{}, x...), y...))
	own1, own2 := midranks(x), midranks(y)
	v10, v01 = make([]float64, len(x)), make([]float64, len(y))
	for i := range x {
		v10[i] = (all[i] - own1[i]) / float64(len(y))
	}
	for j := range y {
		v01[j] = 1 - (all[len(x)+j]-own2[j])/float64(len(x))
	}
	return v10, v01
}

// HanleyMcNeil is the kernel of the probability of superiority with a variance
// that follows from the null itself, so that it holds when the groups do not
// overlap: z(c) = (theta - c)/sqrt(V(c)).
type HanleyMcNeil struct{ Theta, N1, N2 float64 }

// Test implements Method.
func (m HanleyMcNeil) Test(c float64) Test {
	c = math.Min(1, math.Max(0, c))
	half := (m.N1+m.N2)/2 - 1
	v := c * (1 - c) * (1 + half*((1-c)/(2-c)+c/(1+c))) / (m.N1 * m.N2)
	z := ratio(m.Theta-c, math.Sqrt(v))
	up := dist.NormalUpper(z)
	return Test{Up: up, Down: up.Complement(), Value: z, Kind: "z"}
}

// Limits implements Method by inversion.
func (m HanleyMcNeil) Limits(a float64) (low, high float64) {
	start := math.Min(math.Max(m.Theta, 1e-9), 1-1e-9)
	return Inversion{Test: m.Test, Scale: record.Logit, Low: 0, High: 1, Start: start, Step: 0.3}.Limits(a)
}
