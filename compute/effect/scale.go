package effect

import (
	"math"

	"steelyard/protocol/record"
)

// To maps an effect onto its analysis scale g (methods.md 0). The ends of the
// range map to the infinities.
func To(s record.Scale, x float64) float64 {
	switch s {
	case record.Identity:
		return x
	case record.Log:
		return math.Log(x)
	case record.Logit:
		return math.Log(x) - math.Log1p(-x)
	case record.Atanh:
		return math.Atanh(x)
	}
	panic("effect: unknown scale " + string(s))
}

// From is the inverse of To.
func From(s record.Scale, y float64) float64 {
	switch s {
	case record.Identity:
		return y
	case record.Log:
		return math.Exp(y)
	case record.Logit:
		if y < 0 {
			e := math.Exp(y)
			return e / (1 + e)
		}
		return 1 / (1 + math.Exp(-y))
	case record.Atanh:
		return math.Tanh(y)
	}
	panic("effect: unknown scale " + string(s))
}
