package effect

// means are the methods for measures of means.
var means = map[string]map[string]analysis{
	"mean": {
		"t":           meanT,
		"permutation": meanPermutation,
	},
	"mean-difference": {
		"welch":           meanDifferenceWelch,
		"pooled-variance": meanDifferencePooled,
		"permutation":     meanDifferencePermutation,
		"linear":          meanDifferenceLinear,
		"linear-hc3":      meanDifferenceHC3,
	},
	"paired-mean-difference": {
		"t":           pairedT,
		"permutation": pairedPermutation,
	},
	"standardized-mean-difference": {
		"noncentral-t": standardized,
	},
	"ratio-of-means": {
		"fieller":   ratioOfMeansFieller,
		"log-delta": ratioOfMeansDelta,
	},
	"geometric-mean-ratio": {
		"welch":           geometricWelch,
		"pooled-variance": geometricPooled,
		"linear":          geometricLinear,
		"linear-hc3":      geometricHC3,
	},
}
