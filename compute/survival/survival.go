// Package survival analyses times to an event in two groups: the hazard ratio
// of the proportional-hazards model, the difference of restricted mean times,
// the log-rank test and the Kaplan–Meier curves. It takes columns of numbers
// and knows no record, claim or verdict.
//
//	inf, problem := survival.HazardRatio("wald", survival.Input{Time: t, Event: e, Group: g})
package survival

import (
	"math"
	"slices"

	"steelyard/compute/result"
)

// Input holds one row a subject: time >= 0, event 1 or 0 (censored), group 0
// for the first and 1 for the second; the effect is first over, or minus,
// second. Strata is the stratum of each row, nil for none.
type Input struct {
	Time, Event []float64
	Group       []uint8
	Strata      []int32
	Horizon     float64 // restricted means
}

// The formats of this package's problems and notes.
const (
	noEvents       = "no event was observed in either group"
	noInformation  = "the events say nothing about the groups: at every event only one group was at risk"
	emptyGroup     = "a group has no subjects"
	infiniteRatio  = "the hazard ratio has no finite estimate, because one group has no events while the other is at risk; likelihood-ratio limits are given"
	notProportion  = "the hazards do not look proportional over time (p = %.3g); one ratio may not describe the effect"
	beyondFollowUp = "the horizon %g lies beyond the follow-up of a group (%g)"
	noSpread       = "neither group has an event before the horizon: no error can be computed"
	fewSubjects    = "fewer than 30 subjects in a group (%g): the normal interval of a restricted mean is doubtful"
)

func note(code, message string, args ...any) result.Note {
	return result.Note{Code: code, Message: message, Args: args}
}

func problem(code, message string, args ...any) *result.Note {
	n := note(code, message, args...)
	return &n
}

// row is one subject, ordered for counting down the numbers at risk.
type row struct {
	time    float64
	stratum int32
	first   bool
	event   bool
}

// step is one distinct event time of one stratum: at risk and events, in the
// second (0) and first (1) group. Subjects censored at the time are at risk.
type step struct {
	time           float64
	n0, n1, d0, d1 float64
}

// ordered sorts the subjects by stratum, then time.
func (in Input) ordered() []row {
	rows := make([]row, len(in.Time))
	for i := range rows {
		rows[i] = row{time: in.Time[i], first: in.Group[i] == 0, event: in.Event[i] == 1}
		if in.Strata != nil {
			rows[i].stratum = in.Strata[i]
		}
	}
	slices.SortFunc(rows, func(a, b row) int {
		switch {
		case a.stratum != b.stratum:
			return int(a.stratum) - int(b.stratum)
		case a.time < b.time:
			return -1
		case a.time > b.time:
			return 1
		}
		return 0
	})
	return rows
}

// steps counts at risk and events at every event time, stratum by stratum.
func steps(rows []row) []step {
	var out []step
	for start := 0; start < len(rows); {
		end := start
		var n0, n1 float64
		for end < len(rows) && rows[end].stratum == rows[start].stratum {
			if rows[end].first {
				n1++
			} else {
				n0++
			}
			end++
		}
		for i := start; i < end; {
			s := step{time: rows[i].time, n0: n0, n1: n1}
			j := i
			for ; j < end && rows[j].time == s.time; j++ {
				switch r := rows[j]; {
				case r.first && r.event:
					s.d1++
				case r.event:
					s.d0++
				}
				if rows[j].first {
					n1--
				} else {
					n0--
				}
			}
			if s.d0+s.d1 > 0 {
				out = append(out, s)
			}
			i = j
		}
		start = end
	}
	return out
}

// LogRank is the (stratified) log-rank statistic: the first group's events
// less those expected, over the hypergeometric standard error. Mantel (1966,
// from memory). ok is false without variation.
func LogRank(in Input) (z float64, ok bool) { return logRank(steps(in.ordered())) }

func logRank(all []step) (float64, bool) {
	var oe, v float64
	for _, s := range all {
		n, d := s.n0+s.n1, s.d0+s.d1
		oe += s.d1 - d*s.n1/n
		if n > 1 {
			v += d * s.n0 * s.n1 * (n - d) / (n * n * (n - 1))
		}
	}
	if !(v > 0) {
		return 0, false
	}
	return oe / math.Sqrt(v), true
}
