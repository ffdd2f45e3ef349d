package family

import (
	"math"
	"testing"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

func TestFallbackByHand(t *testing.T) {
	// Weights ½, ¼, ¼ at 0.05: H1 at 0.025; if it falls H2 has 0.0375.
	f := of(Fallback, 0.05, 0.03, 0.012, 0.02)
	f.Weights = []float64{0.5, 0.25, 0.25}
	r := adjusted(t, f)[0]
	// H2: 0.012/0.25 = 0.048 established; H3 then holds ½: 0.02/0.5 = 0.04, so
	// its value is the 0.048 before it; H1: 0.03/0.5 = 0.06 stays.
	if differs(ps(r), []float64{0.06, 0.048, 0.048}, 1e-12) {
		t.Errorf("%v", ps(r))
	}
	f.Order = []int{2, 1, 0} // H3 first
	r = adjusted(t, f)[0]
	// weights stay with the members; H2 first (0.048), hands ¼ to H1 (¾):
	// 0.03/0.75 = 0.04 → 0.048; H3 0.02/0.25 = 0.08.
	if differs(ps(r), []float64{0.048, 0.048, 0.08}, 1e-12) {
		t.Errorf("%v", ps(r))
	}
}

func TestDifferingLevels(t *testing.T) {
	f := of(Holm, 0.05, 0.01, 0.02)
	f.Members[1].Alpha = 0.025
	r := adjusted(t, f)[0]
	// q = 0.01 and 0.04; Holm: 0.02, 0.04; back: 0.02 and 0.02.
	if differs(ps(r), []float64{0.02, 0.02}, 1e-13) || !r.Members[1].Established {
		t.Errorf("%+v", r.Members)
	}
	if lv := r.Members[1].Level; math.Abs(lv-0.025) > 1e-15 {
		t.Errorf("local level %v", lv)
	}
	all := adjusted(t, Family{Procedure: All, Members: f.Members})[0]
	if differs(ps(all), []float64{0.01, 0.02}, 1e-13) || !all.Established || math.Abs(all.P.P-0.04) > 1e-15 {
		t.Errorf("all: %+v", all)
	}
}

func TestSerialGate(t *testing.T) {
	first, second := of(Holm, 0.05, 0.01, 0.03), of(Bonferroni, 0.05, 0.001, 0.02)
	second.After = []int{0}
	r := adjusted(t, first, second)
	// first: 0.02, 0.03; second: max(0.03, 0.002), max(0.03, 0.04)
	if differs(ps(r[1]), []float64{0.03, 0.04}, 1e-13) || !r[1].Established || !r[1].Open {
		t.Errorf("open gate: %+v", r[1])
	}
	first.Members[1].P = dist.TailOf(0.06)
	r = adjusted(t, second.afterOnly(1), first) // order of the input does not matter
	if r[0].Open || r[0].Members[0].Established || r[0].Members[0].Tested || len(r[0].Path) > 0 || r[0].Members[0].P.P != 0.06 {
		t.Errorf("shut gate: %+v", r[0])
	}
}

func (f Family) afterOnly(i int) Family {
	f.After = []int{i}
	return f
}

// The parallel gate: the adjusted value must be the smallest level at which
// running the rule as it is written establishes the member.
func TestParallelGateIsTheSmallestLevel(t *testing.T) {
	s := numeric.NewStream("test", 4, "gate", 0)
	for range 200 {
		m, k := 1+s.IntN(4), 1+s.IntN(4)
		first := of(Bonferroni, 0.05, randomP(s, m)...)
		if s.IntN(2) == 0 {
			first.Weights = make([]float64, m)
			for i := range m {
				first.Weights[i] = s.Uniform() / float64(m)
			}
		}
		second := of([]Procedure{Holm, Hommel, Bonferroni, FixedSequence}[s.IntN(4)], 0.05, randomP(s, k)...)
		second.After, second.RequireAny = []int{0}, true
		got := adjusted(t, first, second)[1]
		atLevel := func(a float64) []bool {
			share := 0.0
			for i, mem := range first.Members {
				w := 1 / float64(m)
				if first.Weights != nil {
					w = first.Weights[i]
				}
				if mem.P.P/w < a {
					share += w
				}
			}
			out := make([]bool, k)
			plain := second
			plain.After, plain.RequireAny = nil, false
			for i, mem := range adjusted(t, plain)[0].Members {
				out[i] = mem.P.P < a*share
			}
			return out
		}
		for i := range k {
			lo, hi := 0.0, 1.0
			if !atLevel(1)[i] {
				lo = 1
			}
			for hi-lo > 1e-13 {
				mid := (lo + hi) / 2
				if atLevel(mid)[i] {
					hi = mid
				} else {
					lo = mid
				}
			}
			if math.Abs(got.Members[i].P.P-hi) > 1e-11 {
				t.Fatalf("member %d: %v, by search %v (%+v, %+v)", i, got.Members[i].P.P, hi, first, second)
			}
			if got.Members[i].Established != atLevel(0.05)[i] {
				t.Fatalf("member %d established %v", i, got.Members[i].Established)
			}
		}
	}
}

// Contradictions are Holm-adjusted under every procedure but "all".
func TestContradictionsAreHolmAdjusted(t *testing.T) {
	for _, proc := range Procedures() {
		f := of(proc, 0.05, 0.999, 0.99, 0.5)
		f.Members[0].Against, f.Members[1].Against = dist.TailOf(0.001), dist.TailOf(0.03)
		f.Transfer = [][]float64{{0, 1, 0}, {0, 0, 1}, {1, 0, 0}}
		r := adjusted(t, f)[0]
		want, second := []float64{0.003, 0.06, 1}, false
		if proc == All {
			want, second = []float64{0.001, 0.03, 1}, true
		}
		var got []float64
		for _, m := range r.Members {
			got = append(got, m.Against.P)
		}
		if differs(got, want, 1e-12) || !r.Members[0].Contradicted || r.Members[1].Contradicted != second || r.Members[2].Contradicted {
			t.Errorf("%s: %v", proc, got)
		}
	}
}

func TestTinyAndCertainValues(t *testing.T) {
	for _, proc := range Procedures() {
		f := of(proc, 0.05, 0, 1)
		f.Members[0].P = dist.NormalUpper(60)
		f.Members = append(f.Members, Member{P: dist.TailOf(0), Against: dist.TailOf(1), Alpha: 0.05})
		f.Transfer = [][]float64{{0, 0, 1}, {1, 0, 0}, {0, 1, 0}}
		f.Order = []int{0, 2, 1}
		r := adjusted(t, f)[0]
		if a := r.Members[0]; !a.Established || a.P.LnP > -1790 || a.P.LnP < -1820 {
			t.Errorf("%s: %+v", proc, a)
		}
		if a := r.Members[1]; a.Established || a.P.P != 1 {
			t.Errorf("%s: certain %+v", proc, a)
		}
		if a := r.Members[2]; !a.Established {
			t.Errorf("%s: zero %+v", proc, a)
		}
	}
}

// p equal to the level is not established (strictly below is).
func TestTiesWithTheLevel(t *testing.T) {
	for proc, p := range map[Procedure][]float64{
		All: {0.05}, Bonferroni: {0.0125, 1, 1, 1}, Holm: {0.0125, 1, 1, 1}, Hochberg: {0.05, 0.05},
		Hommel: {0.05, 0.05}, FixedSequence: {0.05, 0.01}, Fallback: {0.025, 0.5},
	} {
		if m := adjusted(t, of(proc, 0.05, p...))[0].Members[0]; m.Established || m.P.P != 0.05 {
			t.Errorf("%s: %+v", proc, m)
		}
	}
}
