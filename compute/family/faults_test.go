package family

import (
	"math"
	"testing"

	"steelyard/compute/numeric"
)

func TestFaults(t *testing.T) {
	good := of(Bonferroni, 0.05, 0.1, 0.2)
	graph := of(Graph, 0.05, 0.1, 0.2)
	with := func(f Family, change func(*Family)) Family { change(&f); return f }
	for name, c := range map[string]struct {
		fs   []Family
		want []Rule
	}{
		"none":          {[]Family{good}, nil},
		"procedure":     {[]Family{with(good, func(f *Family) { f.Procedure = "best" })}, []Rule{UnknownProcedure}},
		"members":       {[]Family{{Procedure: Holm}}, []Rule{NoMembers}},
		"level":         {[]Family{of(Holm, 0, 0.1)}, []Rule{LevelOutside}},
		"length":        {[]Family{with(good, func(f *Family) { f.Weights = []float64{1} })}, []Rule{WeightsLength}},
		"negative":      {[]Family{with(good, func(f *Family) { f.Weights = []float64{1, -1} })}, []Rule{WeightsOutside}},
		"nan":           {[]Family{with(good, func(f *Family) { f.Weights = []float64{math.NaN(), 1} })}, []Rule{WeightsOutside}},
		"sum":           {[]Family{with(good, func(f *Family) { f.Weights = []float64{0.7, 0.4} })}, []Rule{WeightsSum}},
		"thirds":        {[]Family{with(good, func(f *Family) { f.Weights = []float64{0.6666666667, 0.3333333333} })}, nil},
		"shape":         {[]Family{graph}, []Rule{TransferShape}},
		"ragged":        {[]Family{with(graph, func(f *Family) { f.Transfer = [][]float64{{0, 1}, {1}} })}, []Rule{TransferShape}},
		"self":          {[]Family{with(graph, func(f *Family) { f.Transfer = [][]float64{{0.5, 0.5}, {1, 0}} })}, []Rule{TransferSelf}},
		"row":           {[]Family{with(graph, func(f *Family) { f.Transfer = [][]float64{{0, 1.5}, {1, 0}} })}, []Rule{TransferRow}},
		"outside":       {[]Family{with(graph, func(f *Family) { f.Transfer = [][]float64{{0, -1}, {1, 0}} })}, []Rule{TransferOutside}},
		"order":         {[]Family{with(good, func(f *Family) { f.Order = []int{0, 0} })}, []Rule{OrderInvalid}},
		"order short":   {[]Family{with(good, func(f *Family) { f.Order = []int{0} })}, []Rule{OrderInvalid}},
		"after":         {[]Family{with(good, func(f *Family) { f.After = []int{3} })}, []Rule{AfterInvalid}},
		"itself":        {[]Family{with(good, func(f *Family) { f.After = []int{0} })}, []Rule{AfterInvalid}},
		"cycle":         {[]Family{good.afterOnly(1), good.afterOnly(0)}, []Rule{AfterCycle, AfterCycle}},
		"any over holm": {[]Family{of(Holm, 0.05, 0.1), with(good.afterOnly(0), func(f *Family) { f.RequireAny = true })}, []Rule{AnyGate}},
		"any over two": {[]Family{good, good, with(good, func(f *Family) { f.After, f.RequireAny = []int{0, 1}, true })},
			[]Rule{AnyGate}},
		"waits for a fault": {[]Family{{Procedure: Holm}, good.afterOnly(0)}, []Rule{NoMembers, AfterInvalid}},
	} {
		r, faults := Adjust(c.fs)
		if len(faults) != len(c.want) {
			t.Errorf("%s: %+v, want %v", name, faults, c.want)
			continue
		}
		for i, f := range faults {
			if f.Rule != c.want[i] || f.Rule.String() == "unknown rule" {
				t.Errorf("%s: %v, want %v", name, f.Rule, c.want[i])
			}
			if r[f.Family].Members != nil {
				t.Errorf("%s: a faulty family has a result", name)
			}
		}
	}
}

// Under the null the chance of any establishment stays within the level:
// simulated with independent uniform p-values, seed fixed, 20 000 runs, so
// that 0.05 has a standard error of 0.0015; bound at five of them. The
// parallel gate by the naive rule would reach about 0.07.
func TestErrorRate(t *testing.T) {
	s := numeric.NewStream("test", 5, "error", 0)
	const runs = 20000
	count := map[string]float64{}
	for range runs {
		var p [4]float64
		for i := range p {
			p[i] = s.Uniform()
		}
		gate := of(Holm, 0.05, p[2], p[3])
		gate.After, gate.RequireAny = []int{0}, true
		fs := []Family{of(Bonferroni, 0.05, p[0], p[1]), gate}
		any := false
		for _, r := range adjusted(t, fs...) {
			for _, m := range r.Members {
				any = any || m.Established
			}
		}
		if any {
			count["gate"]++
		}
		for _, proc := range []Procedure{Bonferroni, Holm, Hochberg, Hommel, FixedSequence, Fallback} {
			for _, m := range adjusted(t, of(proc, 0.05, p[:]...))[0].Members {
				if m.Established {
					count[string(proc)]++
					break
				}
			}
		}
	}
	for name, c := range count {
		if c/runs > 0.05+5*0.0015 {
			t.Errorf("%s: error %v", name, c/runs)
		}
	}
	if len(count) != 7 {
		t.Errorf("only %d procedures ever erred", len(count))
	}
}
