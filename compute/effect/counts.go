package effect

import (
	"math"

	"steelyard/compute/dist"
	"steelyard/compute/result"
)

// counts lists the methods for events among subjects and events per exposure.
var counts = map[string]map[string]analysis{
	"proportion": {
		"exact":  proportionExact,
		"mid-p":  proportionMidP,
		"wilson": proportionWilson,
	},
	"risk-difference": {
		"score":              scoreOf(riskDifference, "score"),
		"farrington-manning": scoreOf(riskDifference, "farrington-manning"),
		"newcombe":           riskDifferenceNewcombe,
		"unconditional":      unconditionalOf(riskDifference, "unconditional"),
		"mantel-haenszel":    mantelHaenszelOf("risk-difference"),
	},
	"risk-ratio": {
		"score":              scoreOf(riskRatio, "score"),
		"farrington-manning": scoreOf(riskRatio, "farrington-manning"),
		"log-delta":          logWaldOf(riskRatio, "log-delta"),
		"unconditional":      unconditionalOf(riskRatio, "unconditional"),
		"mantel-haenszel":    mantelHaenszelOf("risk-ratio"),
	},
	"odds-ratio": {
		"score":           scoreOf(oddsRatio, "score"),
		"exact":           oddsRatioExact,
		"mid-p":           oddsRatioMidP,
		"woolf":           logWaldOf(oddsRatio, "woolf"),
		"boschloo":        unconditionalOf(oddsRatio, "boschloo"),
		"mantel-haenszel": mantelHaenszelOf("odds-ratio"),
	},
	"paired-risk-difference": {
		"tango": pairedTango,
		"exact": pairedExact,
		"mid-p": pairedMidP,
	},
	"rate": {
		"exact": rateExact,
		"mid-p": rateMidP,
		"score": rateScore,
	},
	"rate-difference": {
		"score":           rateDifferenceScore,
		"mantel-haenszel": mantelHaenszelOf("rate-difference"),
	},
	"rate-ratio": {
		"score":           rateRatioScore,
		"exact":           rateRatioExact,
		"mid-p":           rateRatioMidP,
		"mantel-haenszel": mantelHaenszelOf("rate-ratio"),
	},
}

// normalTest is the test of a statistic that is standard normal at the null
// and falls as the null rises.
func normalTest(z float64) Test {
	t := Test{Value: z, Kind: "z"}
	switch {
	case math.IsInf(z, 1):
		t.Up = sureTail.Complement()
	case math.IsInf(z, -1):
		t.Up = sureTail
	default:
		t.Up = dist.NormalUpper(z)
	}
	t.Down = t.Up.Complement()
	return t
}

// noAnswer is the test at a null that is not a number.
func noAnswer(c float64) (Test, bool) {
	if math.IsNaN(c) {
		return normalTest(0), true
	}
	return Test{}, false
}

// midTail is the mid-p tail: the mean of P(X beyond x) and P(X at least as
// far as x), both sides of the pair by sums of positive terms.
func midTail(beyond, atLeast dist.Tail) dist.Tail {
	return dist.Tail{
		P: (beyond.P + atLeast.P) / 2, LnP: lnMean(beyond.LnP, atLeast.LnP),
		Q: (beyond.Q + atLeast.Q) / 2, LnQ: lnMean(beyond.LnQ, atLeast.LnQ),
	}
}

// lnMean is ln((exp a + exp b)/2).
func lnMean(a, b float64) float64 {
	hi, lo := math.Max(a, b), math.Min(a, b)
	if math.IsInf(hi, -1) {
		return hi
	}
	return hi + math.Log1p(math.Exp(lo-hi)) - math.Ln2
}

// midTest turns a mid-p upper tail into a test; its lower tail is the
// complement.
func midTest(up dist.Tail, value float64) Test {
	return Test{Up: up, Down: up.Complement(), Value: value, Kind: "exact"}
}

// unbounded is the method of data that exclude no value at all.
type unbounded struct{ low, high float64 }

// Test implements Method: both p-values are one half everywhere.
func (unbounded) Test(float64) Test { return normalTest(0) }

// Limits implements Method.
func (u unbounded) Limits(float64) (low, high float64) { return u.low, u.high }

// countProblem refuses counts that are no counts: n below 1, events outside
// 0..n. The name is that of the group for the message.
func countProblem(name string, events, n float64) *Problem {
	switch {
	case !(n >= 1) || math.IsInf(n, 0):
		return problem("S101", tooFew, name, n, 1)
	case !(events >= 0 && events <= n):
		return problem("S103", outsideRange, name+": events", events)
	}
	return nil
}

// exposureProblem is countProblem for events per exposure.
func exposureProblem(name string, events, exposure float64) *Problem {
	switch {
	case !(exposure > 0) || math.IsInf(exposure, 0):
		return problem("S103", outsideRange, name+": exposure", exposure)
	case !(events >= 0) || math.IsInf(events, 0):
		return problem("S103", outsideRange, name+": events", events)
	}
	return nil
}

// countsOnly is the problem of methods that need whole, independent
// individuals: a design effect, or counts that are no integers.
func countsOnly(word string, in Input, counts ...float64) *Problem {
	if in.DesignEffect != 1 {
		return problem("S104", notClustered, word)
	}
	for _, x := range counts {
		if x != math.Floor(x) {
			return problem("S103", notWhole, word, x)
		}
	}
	return nil
}

// noSystematic is the problem of methods that are not of the form
// (estimate - c)/se.
func noSystematic(word string, in Input) *Problem {
	if in.SystematicU != 0 {
		return problem("S104", notWithU, word)
	}
	return nil
}

// unstratified is the problem of methods that would ignore the strata.
func unstratified(word string, in Input) *Problem {
	if len(in.Strata) > 0 {
		return problem("S112", ignoresStrata, word)
	}
	return nil
}

// first returns the first problem there is.
func first(ps ...*Problem) *Problem {
	for _, p := range ps {
		if p != nil {
			return p
		}
	}
	return nil
}

// independent is the assumption that every individual counts by itself, with
// the design effect where clusters were allowed for.
func independent(in Input) result.Check {
	if in.DesignEffect == 1 {
		return result.Check{Assumption: "independent-individuals"}
	}
	return shows("independent-individuals", "design effect", in.DesignEffect)
}

// shows is an assumption with one number that bears on it.
func shows(assumption, what string, value float64) result.Check {
	return result.Check{Assumption: assumption, Shows: []result.Shown{{What: what, Value: value}}}
}
