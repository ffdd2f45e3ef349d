package starter

import (
	"strings"

	"steelyard/protocol/record"
)

// example is what an invented record of one measure is filled with.
type example struct {
	label, unit, better string
	reference           string
	smallest, why       string
	spec, horizon       string
	below, above        string               // limits for the claims of those names
	numbers             map[string][2]string // summary key → first and second group
}

func (e example) limit(claim string) string {
	if claim == "below" {
		return e.below
	}
	return e.above
}

// summary writes an inline table of the keys for one group.
func (e example) summary(keys []string, group int) string {
	parts := make([]string, len(keys))
	for i, k := range keys {
		v := e.numbers[k]
		if v[group] == "" {
			v[group] = v[0]
		}
		parts[i] = k + " = " + v[group]
	}
	return "{ " + strings.Join(parts, ", ") + " }"
}

// exampleOf invents a record's contents for each measure. It is long because
// it is a table.
func exampleOf(m *record.Measure) example {
	type numbers = map[string][2]string
	strength := example{label: "Seal strength", unit: "N", better: "higher",
		smallest: "0.8", why: "Below 0.8 N the difference is lost in the spread from lot to lot.",
		below: "1", above: "-1",
		numbers: numbers{"n": {"40", "38"}, "mean": {"11.92", "12.10"}, "sd": {"1.31", "1.18"},
			"log_mean": {"2.472", "2.489"}, "log_sd": {"0.110", "0.098"},
			"first_sd": {"1.31"}, "second_sd": {"1.18"}, "r": {"0.62"},
			"estimate": {"-0.18"}, "low": {"-0.74"}, "high": {"0.38"}, "level": {"0.95"}}}
	ratio := strength
	ratio.smallest, ratio.why, ratio.below, ratio.above = "1.25", "A change of less than a quarter changes no setting of the line.", "1.2", "0.8"
	counts := example{label: "Leaking pouches", better: "lower",
		smallest: "0.05", why: "A change of 5 in 100 pouches is what one more inspector would find.",
		below: "0.08", above: "-0.08",
		numbers: numbers{"n": {"200"}, "events": {"11", "14"}, "exposure": {"120.5", "118"},
			"both": {"6"}, "first_only": {"5"}, "second_only": {"8"}, "neither": {"181"},
			"estimate": {"0.97"}, "low": {"0.61"}, "high": {"1.54"}, "level": {"0.95"}}}
	countRatio := counts
	countRatio.smallest, countRatio.why, countRatio.below, countRatio.above = "2", "Fewer than twice as many can be taken out by hand.", "2.5", "0.4"
	spread := example{label: "Fill volume", unit: "mL", better: "lower", reference: "0.5",
		smallest: "1.5", why: "Half as much spread again still keeps the fill inside its limits.",
		below: "0.6", above: "0.2",
		numbers: numbers{"n": {"40", "38"}, "sd": {"0.42", "0.45"}, "first_sd": {"0.42"}, "second_sd": {"0.45"}, "r": {"0.62"}}}

	switch m.Word {
	case "mean":
		e := strength
		e.reference, e.below, e.above = "12", "12.5", "11"
		return e
	case "standardized-mean-difference":
		e := strength
		e.unit, e.smallest, e.why = "", "0.6", "Smaller shifts than 0.6 standard deviations pass unseen at the line."
		return e
	case "ratio-of-means", "geometric-mean-ratio":
		return ratio
	case "superiority-probability":
		e := strength
		e.smallest, e.why = "0.1", "A pair of pouches is then told apart in fewer than six cases of ten."
		e.below, e.above = "0.7", "0.3"
		e.numbers = numbers{"estimate": {"0.47"}, "low": {"0.35"}, "high": {"0.59"}, "level": {"0.95"}}
		return e
	case "proportion":
		e := counts
		e.label, e.better, e.reference, e.below, e.above = "Tight pouches", "higher", "0.9", "0.99", "0.85"
		e.numbers = numbers{"n": {"200"}, "events": {"189"}}
		return e
	case "risk-difference", "paired-risk-difference":
		return counts
	case "risk-ratio", "odds-ratio", "rate-ratio":
		return countRatio
	case "rate":
		e := countRatio
		e.label, e.unit, e.reference, e.below, e.above = "Stops of the line", "per day", "0.1", "0.2", "0.02"
		e.smallest, e.why = "0.08", "Eight stops in a hundred days are what the shift plan has room for."
		return e
	case "rate-difference":
		e := counts
		e.label, e.unit = "Stops of the line", "per day"
		return e
	case "hazard-ratio", "ratio-estimate":
		e := countRatio
		e.label = "Time to the first leak"
		return e
	case "restricted-mean-difference":
		e := strength
		e.label, e.unit, e.horizon = "Days without a leak", "days", "60"
		return e
	case "correlation", "rank-correlation":
		return example{label: "Seal strength with dwell time", better: "higher",
			smallest: "0.3", why: "A weaker relation than 0.3 is of no use for setting the dwell time.",
			below: "0.9", above: "0.3", numbers: numbers{"n": {"60"}, "r": {"0.58"}}}
	case "sd":
		e := spread
		e.smallest, e.why = "0.2", "A spread of 0.2 mL more or less still keeps the fill inside its limits."
		return e
	case "sd-ratio", "paired-sd-ratio":
		e := spread
		e.below, e.above = "1.5", "0.6"
		return e
	case "agreement":
		return example{label: "Difference between two gauges", unit: "mm", better: "higher", reference: "0.9", spec: "[-0.5, 0.5]",
			smallest: "0.05", why: "Five in a hundred readings outside are caught by the second check.",
			below: "0.999", above: "0.9", numbers: numbers{"n": {"60"}, "mean": {"0.02"}, "sd": {"0.16"}}}
	case "conforming-share":
		return example{label: "Fill volume", unit: "mL", better: "higher", reference: "0.9", spec: "[98, 102]",
			smallest: "0.05", why: "Five in a hundred outside are taken out by the checkweigher.",
			below: "0.9999", above: "0.95", numbers: numbers{"n": {"60"}, "mean": {"100.1"}, "sd": {"0.62"}}}
	}
	return strength
}
