package effect

import (
	"math"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// crossoverNeeds is the format of a crossover without its columns.
const crossoverNeeds = "a crossover needs value, subject, period and sequence of every row"

// crossover compares two treatments within subjects over two periods and two
// sequences (Hills and Armitage 1979). Half the difference of the periods,
// first minus second, estimates the effect plus the half period difference in
// one sequence and minus the effect plus it in the other; the difference of
// the two means is the effect. On the log scale the differences are those of
// logarithms.
func crossover(word string, scale record.Scale, in Input) (*Inference, *Problem) {
	n := len(in.Value)
	if n == 0 || len(in.Subject) != n || len(in.Period) != n || len(in.Sequence) != n {
		return nil, problem("S104", crossoverNeeds)
	}
	if in.DesignEffect != 1 {
		return nil, problem("S104", notClustered, word)
	}
	y := in.Value
	if scale == record.Log {
		logs, bad := logsOf("the data", y)
		if bad != nil {
			return nil, bad
		}
		y = logs
	}
	halves, dropped := periodHalves(y, in)
	inf, bad := twoMeans(word, scale, sampleOfValues(halves[0], 1), sampleOfValues(halves[1], 1), in)
	if bad != nil {
		return nil, bad
	}
	inf.Checks = append(inf.Checks, check("no-carry-over",
		[]result.Shown{{What: "subjects without both periods", Value: float64(dropped)}}))
	return inf, nil
}

// periodHalves are half the period differences of the subjects in each
// sequence, in the order of first appearance, and how many subjects drop for
// want of exactly one value in each period.
func periodHalves(y []float64, in Input) (halves [2][]float64, dropped int) {
	type subject struct {
		sum      [2]float64
		count    [2]int
		sequence uint8
		mixed    bool
	}
	index := map[int32]int{}
	var all []subject
	for i, id := range in.Subject {
		at, ok := index[id]
		if !ok {
			at = len(all)
			index[id] = at
			all = append(all, subject{sequence: in.Sequence[i]})
		}
		s := &all[at]
		p := in.Period[i] - 1
		if p > 1 || in.Sequence[i] != s.sequence || s.sequence > 1 || math.IsNaN(y[i]) {
			s.mixed = true
			continue
		}
		s.sum[p] += y[i]
		s.count[p]++
	}
	for _, s := range all {
		if s.mixed || s.count != [2]int{1, 1} {
			dropped++
			continue
		}
		halves[s.sequence] = append(halves[s.sequence], (s.sum[0]-s.sum[1])/2)
	}
	for q := range halves {
		if halves[q] == nil {
			halves[q] = []float64{}
		}
	}
	return halves, dropped
}
