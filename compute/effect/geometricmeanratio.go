package effect

import (
	"fmt"
	"math"

	"steelyard/protocol/record"
)

// logSample reads a group on the natural-log scale: the logarithms of its
// values, or the summary of logarithms that was given.
func logSample(who string, g Group, design float64) (sample, *Problem) {
	if g.Values == nil {
		return summary(g.N, g.LogMean, g.LogSD, design), nil
	}
	logs, bad := logsOf(who, g.Values)
	if bad != nil {
		return sample{}, bad
	}
	return sampleOfValues(logs, design), nil
}

// logsOf takes natural logarithms; a value that has none is problem S103.
func logsOf(who string, x []float64) ([]float64, *Problem) {
	logs := make([]float64, len(x))
	for i, v := range x {
		if !(v > 0) || math.IsInf(v, 0) {
			return nil, problem("S103", outsideRange, fmt.Sprintf("%s's value %d", who, i+1), v)
		}
		logs[i] = math.Log(v)
	}
	return logs, nil
}

func geometricWelch(in Input) (*Inference, *Problem)  { return geometric("welch", in) }
func geometricPooled(in Input) (*Inference, *Problem) { return geometric("pooled-variance", in) }

func geometric(word string, in Input) (*Inference, *Problem) {
	if in.Crossover {
		return crossover(word, record.Log, in)
	}
	s1, bad := logSample("the first group", in.First, in.DesignEffect)
	if bad != nil {
		return nil, bad
	}
	s2, bad := logSample("the second group", in.Second, in.DesignEffect)
	if bad != nil {
		return nil, bad
	}
	return twoMeans(word, record.Log, s1, s2, in)
}
