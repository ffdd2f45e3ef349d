package effect

import (
	"math"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// contrast is what two independent proportions are compared by.
type contrast uint8

const (
	riskDifference contrast = iota
	riskRatio
	oddsRatio
)

// table is a fourfold table: events and subjects of two groups. Counts may be
// fractions after division by a design effect.
type table struct{ x1, n1, x2, n2 float64 }

func (t table) swap() table   { return table{t.x2, t.n2, t.x1, t.n1} }
func (t table) y1() float64   { return t.n1 - t.x1 }
func (t table) y2() float64   { return t.n2 - t.x2 }
func (t table) s() float64    { return t.x1 + t.x2 }
func (t table) size() float64 { return t.n1 + t.n2 }

// pooledExpected is the smallest expected count of the table at no effect.
func (t table) pooledExpected() float64 {
	p := t.s() / t.size()
	q := (t.y1() + t.y2()) / t.size()
	return math.Min(t.n1, t.n2) * math.Min(p, q)
}

// low, high and scale are the range of the effect and the coordinate in which
// its tests are nearly linear.
func (k contrast) low() float64 {
	if k == riskDifference {
		return -1
	}
	return 0
}

func (k contrast) high() float64 {
	if k == riskDifference {
		return 1
	}
	return math.Inf(1)
}

func (k contrast) scale() record.Scale {
	if k == riskDifference {
		return record.Atanh
	}
	return record.Log
}

// null is the effect of two equal risks.
func (k contrast) null() float64 {
	if k == riskDifference {
		return 0
	}
	return 1
}

// exactWord is the exact method that a note recommends.
func (k contrast) exactWord() string {
	if k == oddsRatio {
		return "exact"
	}
	return "unconditional"
}

// estimate is the sample effect; defined is false for 0/0, where no value is
// better supported than another.
func (k contrast) estimate(t table) (est float64, defined bool) {
	var over, under float64
	switch k {
	case riskDifference:
		return t.x1/t.n1 - t.x2/t.n2, true
	case riskRatio:
		over, under = t.x1/t.n1, t.x2/t.n2
	case oddsRatio:
		over, under = t.x1*t.y2(), t.x2*t.y1()
	}
	if over == 0 && under == 0 {
		return k.null(), false
	}
	return over / under, true
}

// variance is that of the estimate on the analysis scale; it does not exist
// with the zero cells that make it infinite, nor when it is 0.
func (k contrast) variance(t table) (v float64, defined bool) {
	switch k {
	case riskDifference:
		v = t.x1*t.y1()/(t.n1*t.n1*t.n1) + t.x2*t.y2()/(t.n2*t.n2*t.n2)
	case riskRatio:
		v = t.y1()/(t.x1*t.n1) + t.y2()/(t.x2*t.n2)
	case oddsRatio:
		v = 1/t.x1 + 1/t.y1() + 1/t.x2 + 1/t.y2()
	}
	return v, v > 0 && !math.IsInf(v, 0)
}

// twoProportionsInput checks two groups and divides their counts by the
// design effect.
func twoProportionsInput(in Input) (table, *Problem) {
	bad := first(countProblem("the first group", in.First.Events, in.First.N),
		countProblem("the second group", in.Second.Events, in.Second.N))
	if bad != nil {
		return table{}, bad
	}
	d := in.DesignEffect
	return table{in.First.Events / d, in.First.N / d, in.Second.Events / d, in.Second.N / d}, nil
}

// twoProportionsInference fills what all methods for two independent
// proportions share.
func twoProportionsInference(in Input, k contrast, word string, t table, m Method) *Inference {
	inf := &Inference{Method: m, Word: word, N: in.First.N + in.Second.N,
		Events: result.Some(in.First.Events + in.Second.Events)}
	est, defined := k.estimate(t)
	inf.Estimate, inf.NoEstimate = est, !defined
	if v, ok := k.variance(t); ok {
		inf.SE, inf.V = result.Some(math.Sqrt(v)), result.Some(v)
		y := est
		if k != riskDifference {
			y = math.Log(est)
		}
		inf.Y = result.Some(y)
	}
	if k != riskDifference && (!defined || math.IsInf(est, 1)) {
		inf.Notes = append(inf.Notes, note("S201", infiniteLimit, "upper"))
	}
	inf.Checks = append(inf.Checks, independent(in))
	return inf
}

// approximates notes how far the normal approximation can be trusted.
func approximates(inf *Inference, in Input, k contrast, t table) {
	e := t.pooledExpected()
	inf.Checks = append(inf.Checks, shows("normal-approximation", "smallest expected count", e))
	if e >= 5 {
		return
	}
	possible := in.DesignEffect == 1 && (k == oddsRatio || t.n1*t.n2 <= unconditionalLimit)
	if possible {
		inf.Notes = append(inf.Notes, note("S202", fewExpected, e, k.exactWord()))
	} else {
		inf.Notes = append(inf.Notes, note("S202", fewExpectedOnly, e))
	}
}
