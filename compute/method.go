package compute

import (
	"slices"

	"steelyard/compute/effect"
	"steelyard/compute/result"
)

// method dispatches an analysis to its package.
func (r *run) method(s spec, in effect.Input) (*effect.Inference, *result.Note) {
	return effect.Analyse(s.measure.Word, r.methodWord(s, in), in)
}

// methodWord is the method to ask for: the stated one, or the default, which
// follows covariates, strata and the kind of spread.
func (r *run) methodWord(s spec, in effect.Input) string {
	switch {
	case s.method != "":
		return s.method
	case in.Given != nil:
		return ""
	case len(in.Covariates) > 0:
		return "linear"
	case s.strata != "" && slices.Contains(s.measure.Methods, "mantel-haenszel"):
		return "mantel-haenszel"
	case s.measure.Word == "conforming-share" || s.measure.Word == "agreement":
		if in.AnySpread {
			return "any"
		}
		return "normal"
	}
	return ""
}
