package effect

// means are the methods for measures of means.
var means = map[string]map[string]analysis{
	"mean": {
		"t": meanT,
	},
	"mean-difference": {
		"welch":           meanDifferenceWelch,
		"pooled-variance": meanDifferencePooled,
	},
	"paired-mean-difference": {
		"t": pairedT,
	},
}
