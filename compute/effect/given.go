package effect

import (
	"math"
	"slices"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// given are the measures that have no other form than an effect estimated
// elsewhere; without one there is nothing to compute.
var given = map[string]map[string]analysis{
	"estimate":       {"normal": needsGiven, "t": needsGiven},
	"ratio-estimate": {"normal": needsGiven, "t": needsGiven},
}

// The formats of this file.
const (
	noEffect      = "the measure needs an effect estimated elsewhere"
	noError       = "the given effect has neither a standard error nor an interval"
	noLevel       = "the given interval does not say its level"
	tNeedsDF      = "method \"t\" needs the degrees of freedom of the given effect"
	notSymmetric  = "the given estimate lies %.0f %% of the half-width from the middle of its interval on the analysis scale"
	givenTakesOwn = "method %q cannot be recomputed from a given effect; %q is used"
)

func needsGiven(Input) (*Inference, *Problem) { return nil, problem("S113", noEffect) }

// asymmetry is the share of the half-width by which a published estimate may
// lie off the middle of its interval before note S207.
const asymmetry = 0.05

// analyseGiven tests (g(estimate) - g(c))/se with a normal, or a t with the
// degrees of freedom given. The standard error is that of the logarithm for
// ratios; for other measures that are analysed on another scale than their
// own it is carried over by the derivative of g. An interval gives
// se = (g(high) - g(low))/(2 crit).
func analyseGiven(m *record.Measure, method string, in Input) (*Inference, *Problem) {
	e := in.Given
	word, bad := givenMethod(m, method, e)
	if bad != nil {
		return nil, bad
	}
	if !(e.Estimate >= m.Low && e.Estimate <= m.High) {
		return nil, problem("S103", outsideRange, "the given estimate", e.Estimate)
	}
	y := onScale(m.Scale, e.Estimate)
	if !isFinite(y) {
		return nil, problem("S103", outsideRange, "the given estimate", e.Estimate)
	}
	df := math.Inf(1)
	if word == "t" {
		df = e.DF.V
	}
	// slope is dg/dtheta, 1 where the error is already on the scale.
	slope := 1.0
	if !m.IsRatio() {
		slope = derivative(m.Scale, e.Estimate)
	}
	se, notes, bad := givenError(m, e, y, df, slope)
	if bad != nil {
		return nil, bad
	}
	w := Wald{Scale: m.Scale, Y: y, SE: se, DF: df, Low: m.Low, High: m.High}.WithSystematic(in.SystematicU * slope)
	inf := fromWald(word, w, 0)
	inf.Estimate = e.Estimate
	inf.SE = result.Some(w.SE / slope)
	if e.N.OK {
		inf.N = e.N.V
	}
	inf.Notes = notes
	if method != "" && method != word {
		inf.Notes = append(inf.Notes, note("S206", givenTakesOwn, method, word))
	}
	return inf, nil
}

// givenMethod chooses normal or t: as asked, otherwise t where degrees of
// freedom are given.
func givenMethod(m *record.Measure, method string, e *Given) (string, *Problem) {
	if e.DF.OK && !(e.DF.V > 0) {
		return "", problem("S103", outsideRange, "the given effect's df", e.DF.V)
	}
	switch {
	case method == "t" && m.Shape == record.Given && !e.DF.OK:
		return "", problem("S104", tNeedsDF)
	case method == "normal" && m.Shape == record.Given:
		return "normal", nil
	case method != "" && !slices.Contains(m.Methods, method):
		return "", problem("S104", noMethod, method, m.Word, joined(m.Methods))
	case e.DF.OK:
		return "t", nil
	}
	return "normal", nil
}

// givenError is the standard error on the analysis scale: the stated one, or
// the one that the stated interval implies.
func givenError(m *record.Measure, e *Given, y, df, slope float64) (float64, []result.Note, *Problem) {
	var notes []result.Note
	se := 0.0
	if e.Low.OK && e.High.OK {
		lo, hi := onScale(m.Scale, e.Low.V), onScale(m.Scale, e.High.V)
		half := (hi - lo) / 2
		if e.Low.V <= e.Estimate && e.Estimate <= e.High.V && isFinite(half) && half > 0 {
			if off := math.Abs(y-(lo+half)) / half; off > asymmetry {
				notes = append(notes, note("S207", notSymmetric, 100*off))
			}
		}
		if !e.SE.OK {
			switch {
			case !e.Level.OK:
				return 0, nil, problem("S113", noLevel)
			case !(e.Level.V > 0 && e.Level.V < 1):
				return 0, nil, problem("S103", outsideRange, "the given interval's level", e.Level.V)
			case !(e.Low.V <= e.Estimate && e.Estimate <= e.High.V):
				return 0, nil, problem("S103", outsideRange, "the given estimate", e.Estimate)
			}
			se = half / tQuantile((1-e.Level.V)/2, df)
		}
	}
	if e.SE.OK {
		se = e.SE.V * slope
	} else if !e.Low.OK || !e.High.OK {
		return 0, nil, problem("S113", noError)
	}
	if !(se >= 0 && se <= largestNumber) {
		return 0, nil, problem("S103", outsideRange, "the given effect's standard error", se)
	}
	if se < smallestSD {
		return 0, nil, problem("S102", noVariation, "the given effect")
	}
	return se, notes, nil
}

// derivative is dg/dx of a scale, for x inside its range.
func derivative(s record.Scale, x float64) float64 {
	switch s {
	case record.Identity:
		return 1
	case record.Log:
		return 1 / x
	case record.Logit:
		return 1 / (x * (1 - x))
	case record.Atanh:
		return 1 / ((1 - x) * (1 + x))
	}
	panic("effect: unknown scale " + string(s))
}
