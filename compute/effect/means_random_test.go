package effect

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// TestRandomInputs: whatever the numbers, nothing panics and nothing is NaN.
func TestRandomInputs(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 14))
	odd := []float64{0, 1, 2, 3, -1, 0.5, 1e-300, 1e300, 1e9, -1e9, 17, 100, math.Inf(1), math.Inf(-1), math.NaN()}
	pick := func() float64 { return odd[r.IntN(len(odd))] }
	group := func() Group {
		g := Group{N: pick(), Mean: pick(), SD: pick(), LogMean: pick(), LogSD: pick()}
		if r.IntN(3) == 0 {
			g.Values = make([]float64, r.IntN(5))
			for i := range g.Values {
				g.Values[i] = pick()
			}
		}
		return g
	}
	some := func() result.Opt { return result.Opt{V: pick(), OK: r.IntN(2) == 0} }
	computed := 0
	for range 1200 {
		in := Input{First: group(), Second: group(), Sample: group(), DesignEffect: []float64{1, 1, 2.5, pick()}[r.IntN(4)],
			SystematicU: []float64{0, 0, pick()}[r.IntN(3)], A: 0.025}
		in.Pairs = Pairs{N: pick(), Mean: pick(), SD: pick(), FirstSD: pick(), SecondSD: pick(), R: pick(), HasParts: r.IntN(2) == 0}
		if r.IntN(3) == 0 {
			n := r.IntN(9)
			for i := range n {
				in.Value = append(in.Value, pick())
				in.Group = append(in.Group, uint8(r.IntN(2)))
				in.Subject = append(in.Subject, int32(i/2))
				in.Period = append(in.Period, uint8(i%2+1))
				in.Sequence = append(in.Sequence, uint8(i/2%2))
			}
			in.Crossover = r.IntN(2) == 0
		}
		if r.IntN(4) == 0 {
			in.Given = &Given{Estimate: pick(), SE: some(), DF: some(), Low: some(), High: some(), Level: result.Some(0.95)}
		}
		if in.Given != nil {
			for _, m := range record.Measures {
				if inf, bad := Analyse(m.Word, "", in); bad == nil {
					neverNaN(t, "given "+m.Word, inf, odd)
				}
			}
		}
		for measure, methods := range means {
			for method := range methods {
				inf, bad := Analyse(measure, method, in)
				if (inf == nil) == (bad == nil) {
					t.Fatalf("%s %s: inference %v and problem %v", measure, method, inf, bad)
				}
				if bad != nil {
					continue
				}
				computed++
				neverNaN(t, measure+" "+method, inf, odd)
			}
		}
		if t.Failed() {
			t.Fatalf("input %+v", in)
		}
	}
	if computed < 300 {
		t.Errorf("only %d of the random inputs could be computed", computed)
	}
}

// neverNaN looks at every number of an inference and its tests.
func neverNaN(t reporter, what string, inf *Inference, at []float64) {
	t.Helper()
	for _, x := range []float64{inf.Estimate, inf.SE.V, inf.DF.V, inf.Y.V, inf.V.V, inf.N} {
		if math.IsNaN(x) {
			t.Errorf("%s: NaN in %+v", what, inf)
		}
	}
	for _, c := range inf.Checks {
		for _, s := range c.Shows {
			if math.IsNaN(s.Value) || math.IsInf(s.Value, 0) {
				t.Errorf("%s: %s shows %v", what, s.What, s.Value)
			}
		}
	}
	for _, c := range at {
		sane(t, fmt.Sprintf("%s at %g (%+v)", what, c, inf.Method), inf.Method.Test(c))
	}
	for _, a := range []float64{0, 0.025, 0.9, 1} {
		if low, high := inf.Method.Limits(a); math.IsNaN(low) || math.IsNaN(high) {
			t.Errorf("%s: limits %v, %v at %g (%+v)", what, low, high, a, inf.Method)
		}
	}
}
