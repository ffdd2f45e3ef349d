package protocol

import "steelyard/protocol/record"

// story is the invented content of a starting record. This file is a table.
type story struct {
	title, setting string
	name, label    string
	unit           string
	thing          string // "the drying time"
	first, second  string // what is compared: "the new varnish"
	groups         [2]string
	better         string
	reference      float64
	spec           string
	smallest, why  string
	below, above   float64 // limits for the claims below and above
	result         []string
}

// storyOf invents a story for a measure.
func storyOf(m *record.Measure) story {
	switch m.Shape {
	case record.TwoGroups:
		return twoGroupStory(m)
	case record.Paired:
		return pairedStory(m)
	case record.OneSample:
		return oneSampleStory(m)
	case record.Given:
		return givenStory(m)
	}
	panic("protocol: a measure of no shape: " + m.Word)
}

func twoGroupStory(m *record.Measure) story {
	s := story{
		title: "Peel strength of pouch seals with a new adhesive", setting: "quality",
		name: "peel", label: "Seal peel strength", unit: "N", thing: "the peel strength",
		first: "the new adhesive", second: "the current one", groups: [2]string{"new", "current"}, better: "higher",
		smallest: "0.8", why: "Below 0.8 N a difference is lost in what lots differ by anyway.",
		below: 0.5, above: -0.5,
		result: []string{
			"groups.new     = { n = 40, mean = 12.31, sd = 1.21 }",
			"groups.current = { n = 40, mean = 11.52, sd = 1.18 }",
		},
	}
	factor := func(why string, below, above float64, result ...string) {
		s.unit, s.smallest, s.why, s.below, s.above = "", "1.25", why, below, above
		if result != nil {
			s.result = result
		}
	}
	switch m.Word {
	case "standardized-mean-difference":
		s.unit, s.smallest, s.why = "", "0.3", "Less than 0.3 of a standard deviation was never seen on the packing line."
	case "ratio-of-means":
		factor("Lots differ by up to a quarter without anybody noticing.", 1.3, 0.8)
	case "geometric-mean-ratio":
		factor("Lots differ by up to a quarter without anybody noticing.", 1.3, 0.8,
			"groups.new     = { n = 40, log_mean = 2.51, log_sd = 0.22 }   # of natural logarithms",
			"groups.current = { n = 40, log_mean = 2.44, log_sd = 0.21 }")
	case "median-shift":
		s.result = []string{"effect  = { estimate = 0.8, low = 0.3, high = 1.3, level = 0.95, n = 80 }"}
	case "superiority-probability":
		s.unit, s.smallest, s.why, s.below, s.above = "", "0.1", "Below 60 in 100 pairs nobody would change the adhesive.", 0.7, 0.4
		s.result = []string{"effect  = { estimate = 0.66, se = 0.06, n = 80 }"}
	case "sd-ratio":
		s.better, s.thing = "lower", "the spread of the peel strength"
		factor("Lots differ in spread by up to a quarter without anybody noticing.", 1.3, 0.7,
			"groups.new     = { n = 40, sd = 1.02 }", "groups.current = { n = 40, sd = 1.18 }")
	case "risk-difference", "risk-ratio", "odds-ratio":
		return countStory(m)
	case "rate-difference", "rate-ratio":
		return rateStory(m)
	case "hazard-ratio", "restricted-mean-difference":
		return timeStory(m)
	}
	return s
}

func countStory(m *record.Measure) story {
	s := story{
		title: "Leaking pouches with a new adhesive", setting: "quality",
		name: "leak", label: "Pouches that leak", thing: "the share of leaking pouches",
		first: "the new adhesive", second: "the current one", groups: [2]string{"new", "current"}, better: "lower",
		smallest: "1.25", why: "The share differs by up to a quarter from month to month.",
		below: 1.2, above: 0.3,
		result: []string{"groups.new     = { n = 400, events = 22 }", "groups.current = { n = 400, events = 45 }"},
	}
	if m.Word == "risk-difference" {
		s.smallest, s.why = "0.02", "Two pouches in a hundred are what the final inspection catches anyway."
		s.below, s.above = 0.02, -0.15
	}
	return s
}

func rateStory(m *record.Measure) story {
	s := story{
		title: "Stops of the packing line with a new film", setting: "field",
		name: "stops", label: "Stops of the line", unit: "per hour", thing: "the rate of stops",
		first: "the new film", second: "the current one", groups: [2]string{"new", "current"}, better: "lower",
		smallest: "1.25", why: "The crews differ by up to a quarter among themselves.",
		below: 1.2, above: 0.3,
		result: []string{"groups.new     = { events = 31, exposure = 620 }   # hours", "groups.current = { events = 58, exposure = 610 }"},
	}
	if m.Word == "rate-difference" {
		s.smallest, s.why = "0.02", "One stop in fifty hours more costs less than a change of film."
		s.below, s.above = 0.02, -0.15
	} else {
		s.unit = ""
	}
	return s
}

func timeStory(m *record.Measure) story {
	s := story{
		title: "Time to the first leak in storage", setting: "laboratory",
		name: "leak_time", label: "Time to the first leak", thing: "the hazard of a first leak",
		first: "the new adhesive", second: "the current one", groups: [2]string{"new", "current"}, better: "lower",
		smallest: "1.25", why: "Storage rooms change the hazard by up to a quarter.",
		below: 1.2, above: 0.3,
		result: []string{"effect  = { estimate = 0.62, low = 0.44, high = 0.87, level = 0.95, n = 240 }"},
	}
	if m.Word == "restricted-mean-difference" {
		s.thing = "the time to the first leak"
		s.unit, s.better, s.smallest, s.why = "days", "higher", "5", "Stock is turned over every five days."
		s.below, s.above = 20, -5
		s.result = []string{"effect  = { estimate = 9.4, se = 2.8, n = 240 }"}
	}
	return s
}

func pairedStory(m *record.Measure) story {
	s := story{
		title: "A new gauge beside the current one", setting: "laboratory",
		name: "reading", label: "Wall thickness", unit: "mm", thing: "the reading",
		first: "the new gauge", second: "the current one", groups: [2]string{"new", "current"}, better: "higher",
		smallest: "0.05", why: "The drawing allows ten times that much for the part.",
		below: 0.1, above: -0.1,
		result: []string{"pairs   = { n = 50, mean = 0.031, sd = 0.082 }   # first minus second, part by part"},
	}
	switch m.Word {
	case "paired-median-shift":
		s.result = []string{"effect  = { estimate = 0.03, low = 0.01, high = 0.05, level = 0.95, n = 50 }"}
	case "paired-risk-difference":
		s.name, s.label, s.unit, s.thing = "found", "Faults found", "", "the share of faults found"
		s.smallest, s.why, s.below, s.above = "0.05", "One fault in twenty is what a second inspection finds anyway.", 0.2, -0.05
		s.result = []string{"pairs   = { both = 61, first_only = 19, second_only = 6, neither = 14 }"}
	case "paired-sd-ratio":
		s.thing = "the spread of readings"
		s.better, s.unit, s.smallest, s.why, s.below, s.above = "lower", "", "1.25", "A quarter more spread still fits the drawing.", 1.3, 0.6
		s.result = []string{"pairs   = { n = 50, first_sd = 0.31, second_sd = 0.36, r = 0.7 }"}
	case "agreement":
		s.thing = "the readings"
		s.better, s.smallest, s.why, s.reference, s.above, s.spec = "higher", "", "", 0.9, 0.9, "[-0.25, 0.25]"
		s.result = []string{"pairs   = { n = 120, mean = 0.011, sd = 0.082 }"}
	}
	return s
}

func oneSampleStory(m *record.Measure) story {
	s := story{
		title: "Fill volume after the service", setting: "quality",
		name: "fill", label: "Fill volume", unit: "ml", thing: "the fill volume",
		first: "the serviced filler", second: "the label says", better: "higher",
		reference: 250, smallest: "1.5", why: "The law allows three times that much on either side.",
		below: 251.5, above: 249,
		result: []string{"sample  = { n = 60, mean = 250.9, sd = 2.4 }"},
	}
	switch m.Word {
	case "proportion":
		s.name, s.label, s.unit, s.thing, s.second = "short", "Bottles filled short", "", "the share of bottles filled short", "before"
		s.better, s.reference, s.smallest, s.why, s.below, s.above = "lower", 0.05, "0.02", "Two bottles in a hundred are what the scales catch anyway.", 0.06, 0.01
		s.result = []string{"sample  = { n = 600, events = 14 }"}
	case "rate":
		s.name, s.label, s.unit, s.thing, s.second = "stops", "Stops of the filler", "per hour", "the rate of stops", "before"
		s.better, s.reference, s.smallest, s.why, s.below, s.above = "lower", 0.1, "0.02", "One stop in fifty hours costs less than a service.", 0.12, 0.01
		s.result = []string{"sample  = { events = 38, exposure = 620 }   # hours"}
	case "correlation", "rank-correlation":
		s.name, s.label, s.unit, s.thing, s.second = "agree", "Volume and weight", "", "the correlation of volume and weight", "zero"
		s.reference, s.smallest, s.why, s.below, s.above = 0, "0.2", "A weaker correlation is of no use for the scales.", 0.9, 0.3
		s.result = []string{"sample  = { n = 60, r = 0.71 }"}
	case "sd":
		s.name, s.label, s.thing, s.second = "spread", "Spread of the fill volume", "the spread of the fill volume", "before"
		s.better, s.reference, s.smallest, s.why, s.below, s.above = "lower", 3, "0.4", "The scales cannot tell less than that.", 3.1, 1.5
		s.result = []string{"sample  = { n = 60, sd = 2.4 }"}
	case "conforming-share":
		s.thing, s.second = "the share of bottles inside the limits", "the contract asks"
		s.reference, s.smallest, s.why, s.above, s.spec = 0.95, "", "", 0.95, "[242, 258]"
		s.result = []string{"sample  = { n = 120, mean = 250.1, sd = 2.4 }"}
	}
	return s
}

func givenStory(m *record.Measure) story {
	s := story{
		title: "Yield after a change of supplier", setting: "field",
		name: "yield", label: "Yield", unit: "kg", thing: "the yield",
		first: "the new supplier", second: "with the current one", better: "higher",
		smallest: "2", why: "Less than 2 kg a batch does not pay for the change.",
		below: 8, above: -2,
		result: []string{"effect  = { estimate = 3.9, se = 1.1 }   # from the model of another program"},
	}
	if m.Word == "ratio-estimate" {
		s.unit, s.smallest, s.why, s.below, s.above = "", "1.1", "A tenth is what the weather does.", 1.5, 0.9
		s.result = []string{"effect  = { estimate = 1.18, low = 1.06, high = 1.31, level = 0.95 }   # ratios"}
	}
	return s
}
