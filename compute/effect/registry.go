package effect

import (
	"math"
	"slices"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// analysis computes one method of one measure.
type analysis func(in Input) (*Inference, *Problem)

// tables joins the methods of every file: measure word, then method word.
func tables() [5]map[string]map[string]analysis {
	return [...]map[string]map[string]analysis{means, counts, ranks, spread, given}
}

// Analyse computes a measure with one of its methods; "" is the measure's
// default. A given effect goes through normal theory on the measure's
// analysis scale, whatever the measure. A measure or method that does not
// exist here is problem S104, which lists those that do.
func Analyse(measure, method string, in Input) (*Inference, *Problem) {
	m := record.MeasureOf(measure)
	if m == nil {
		return nil, problem("S104", noMeasure, measure)
	}
	in.Scale = func(c float64) float64 { return onScale(m.Scale, c) }
	if in.DesignEffect == 0 {
		in.DesignEffect = 1
	}
	if bad := badInput(&in); bad != nil {
		return nil, bad
	}
	if in.Given != nil {
		if !m.Effect {
			return nil, problem("S104", noGiven, measure)
		}
		return analyseGiven(m, method, in)
	}
	word := method
	if word == "" {
		word = defaultMethod(m, &in)
	}
	var known []string
	for _, table := range tables() {
		if f, ok := table[measure][word]; ok {
			return f(in)
		}
		for w := range table[measure] {
			known = append(known, w)
		}
	}
	if known == nil { // computed elsewhere, from columns that are not here
		return nil, problem("S104", needsData, word)
	}
	slices.SortFunc(known, func(a, b string) int {
		return slices.Index(m.Methods, a) - slices.Index(m.Methods, b)
	})
	return nil, problem("S104", noMethod, word, measure, joined(known))
}

// defaultMethod is the measure's first, or what its design asks for: a
// crossover has one variance, covariates and strata need the linear model.
func defaultMethod(m *record.Measure, in *Input) string {
	switch {
	case in.Crossover && m.HasMethod("pooled-variance"):
		return "pooled-variance"
	case (len(in.Covariates) > 0 || in.Strata != nil) && m.HasMethod("linear"):
		return "linear"
	}
	return m.Methods[0]
}

func joined(words []string) string { return strings.Join(words, ", ") }

// badInput refuses settings that would turn into NaN further on.
func badInput(in *Input) *Problem {
	if !(in.DesignEffect > 0) || math.IsInf(in.DesignEffect, 0) {
		return problem("S103", badSetting, "design effect", in.DesignEffect)
	}
	if !(in.SystematicU >= 0) || math.IsInf(in.SystematicU, 0) {
		return problem("S103", badSetting, "systematic_u", in.SystematicU)
	}
	return nil
}

// onScale is To with values outside the range of the scale moved to its end.
func onScale(s record.Scale, x float64) float64 {
	switch s {
	case record.Identity:
		return x
	case record.Log:
		return To(s, math.Max(x, 0))
	case record.Logit:
		return To(s, math.Min(math.Max(x, 0), 1))
	case record.Atanh:
		return To(s, math.Min(math.Max(x, -1), 1))
	}
	panic("effect: unknown scale " + string(s))
}

// note makes a note; the format is one of the constants beside the cards.
func note(code, message string, args ...any) result.Note {
	return result.Note{Code: code, Message: message, Args: args}
}

// problem is a note that stands in the place of a result.
func problem(code, message string, args ...any) *Problem {
	return &Problem{Code: code, Message: message, Args: args}
}

// The formats of the problems and notes that several measures share.
const (
	noMeasure  = "there is no measure %q"
	noMethod   = "method %q is not one of %s's here: %s"
	noGiven    = "%s cannot be computed from a given effect"
	badSetting = "%s is %v, which is outside its range"

	tooFew        = "%s has too few observations: %v, at least %v are needed"
	tooFewOf      = "%s have too few observations: %v, at least %v are needed" // tooFew of several
	noVariation   = "%s does not vary: no error can be computed"
	neitherVaries = "neither group varies: no error can be computed"
	outsideRange  = "%s is %v, which is outside the measure's range"
	notWithU      = "method %q has no place for systematic_u"
	notClustered  = "method %q needs independent individuals, so it has no design effect"
	needsData     = "method %q needs individual values"
	tooLarge      = "method %q would need %v observations at most; there are %v"
	noAdjustment  = "method %q takes no covariates, strata or crossover"
	infiniteLimit = "the interval has no %s limit at this level"
	oneConstant   = "%s does not vary; its spread enters as 0"
	fallback      = "method %q cannot be used here; %q is used"
)
