package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// term is how a measure is spoken of.
type term struct {
	noun  string // "difference of means"
	short string // "difference"
	joint string // between the groups: "minus", "over", "against"; "" for one sample
}

// termOf returns the words of a measure; unknown words speak for themselves.
func termOf(measure string) term {
	switch measure {
	case "mean":
		return term{"mean", "mean", ""}
	case "mean-difference":
		return term{"difference of means", "difference", "minus"}
	case "paired-mean-difference":
		return term{"mean difference within pairs", "difference", "minus"}
	case "standardized-mean-difference":
		return term{"standardized difference of means", "standardized difference", "minus"}
	case "ratio-of-means":
		return term{"ratio of means", "ratio", "over"}
	case "geometric-mean-ratio":
		return term{"ratio of geometric means", "ratio", "over"}
	case "median-shift":
		return term{"shift", "shift", "minus"}
	case "paired-median-shift":
		return term{"shift within pairs", "shift", "minus"}
	case "superiority-probability":
		return term{"share of comparisons in which the first is higher", "share", "against"}
	case "proportion":
		return term{"proportion", "proportion", ""}
	case "risk-difference":
		return term{"risk difference", "difference", "minus"}
	case "risk-ratio":
		return term{"risk ratio", "ratio", "over"}
	case "odds-ratio":
		return term{"odds ratio", "ratio", "over"}
	case "paired-risk-difference":
		return term{"risk difference within pairs", "difference", "minus"}
	case "rate":
		return term{"rate", "rate", ""}
	case "rate-difference":
		return term{"difference of rates", "difference", "minus"}
	case "rate-ratio":
		return term{"ratio of rates", "ratio", "over"}
	case "hazard-ratio":
		return term{"hazard ratio", "ratio", "over"}
	case "restricted-mean-difference":
		return term{"difference of restricted mean times", "difference", "minus"}
	case "correlation":
		return term{"correlation", "correlation", ""}
	case "rank-correlation":
		return term{"rank correlation", "correlation", ""}
	case "sd":
		return term{"standard deviation", "standard deviation", ""}
	case "sd-ratio":
		return term{"ratio of standard deviations", "ratio", "over"}
	case "paired-sd-ratio":
		return term{"ratio of standard deviations within pairs", "ratio", "over"}
	case "agreement":
		return term{"share of paired differences inside the limits", "share", ""}
	case "conforming-share":
		return term{"share of values inside the limits", "share", ""}
	case "estimate":
		return term{"effect", "effect", ""}
	case "ratio-estimate":
		return term{"ratio", "ratio", ""}
	}
	return term{measure, "effect", ""}
}

// voice speaks of one hypothesis.
type voice struct {
	res *result.Result
	o   *result.Outcome
	h   *result.Hypothesis
	f   number.Format
	t   term

	brief bool // without the inequality in brackets, which stands beside it
}

// voiceOf prepares the words for a hypothesis of the result.
func voiceOf(res *result.Result, h *result.Hypothesis) voice {
	o := outcomeOf(res, h.Outcome)
	return voice{res: res, o: o, h: h, f: number.Of(o), t: termOf(o.Measure)}
}

// outcomeOf finds an outcome; a bare one under that name where there is none.
func outcomeOf(res *result.Result, name string) *result.Outcome {
	for i := range res.Outcomes {
		if res.Outcomes[i].Name == name {
			return &res.Outcomes[i]
		}
	}
	return &result.Outcome{Name: name, Label: name, Digits: -1}
}

// grouped reports whether two groups are compared by name.
func (v voice) grouped() bool { return v.o.Groups[0] != "" && v.o.Groups[1] != "" }

func (v voice) a() string { return v.o.Groups[0] }
func (v voice) b() string { return v.o.Groups[1] }

// label is the outcome's label.
func (v voice) label() string {
	if v.o.Label != "" {
		return v.o.Label
	}
	return v.o.Name
}

// effect names the effect in full: "difference of means (new minus current)".
func (v voice) effect() string { return effectName(v.o) }

// effectName names an outcome's effect in full.
func effectName(o *result.Outcome) string {
	t := termOf(o.Measure)
	if t.joint == "" || o.Groups[0] == "" {
		return t.noun
	}
	if o.Measure == "superiority-probability" {
		return "share of comparisons in which " + o.Groups[0] + " is higher than " + o.Groups[1] + " (ties count half)"
	}
	return t.noun + " (" + o.Groups[0] + " " + t.joint + " " + o.Groups[1] + ")"
}

// direction says which way is better: "higher is better"; "" for neither.
func direction(o *result.Outcome) string {
	switch o.Better {
	case "higher":
		return "higher is better"
	case "lower":
		return "lower is better"
	}
	return ""
}

// null is the null with its unit.
func (v voice) null() string {
	if !v.o.Null.OK {
		return "the reference"
	}
	return v.f.PointUnit(v.o.Null.V)
}

// benefit and harm are the points in force on the better and worse side.
func (v voice) benefit() result.Opt {
	if v.o.Better == "lower" {
		return v.h.MarginLow
	}
	return v.h.MarginHigh
}

func (v voice) harm() result.Opt {
	if v.o.Better == "lower" {
		return v.h.MarginHigh
	}
	return v.h.MarginLow
}

// upward reports whether the claim points to higher values of the effect.
func (v voice) upward() bool {
	switch v.h.Claim {
	case "below":
		return false
	case "benefit-too-small":
		return v.o.Better == "lower"
	case "above":
		return true
	}
	return v.o.Better != "lower"
}

// side is "difference above −0.8 N" for a point; "" when it is absent.
func (v voice) side(p result.Opt, above bool) string {
	if !p.OK {
		return ""
	}
	word := " below "
	if above {
		word = " above "
	}
	return v.t.short + word + v.f.PointUnit(p.V)
}

// sided wraps side in brackets after a text.
func (v voice) sided(text string, p result.Opt, above bool) string {
	if v.brief {
		return text
	}
	if s := v.side(p, above); s != "" {
		return text + " (" + s + ")"
	}
	return text
}

// region is "−0.8 to 0.8 N", "" without one.
func (v voice) region() string {
	return regionWords(v.f, v.h.MarginLow, v.h.MarginHigh)
}

func regionWords(f number.Format, low, high result.Opt) string {
	if !low.OK || !high.OK {
		return ""
	}
	return f.Point(low.V) + " to " + f.PointUnit(high.V)
}

// join lists names: "A", "A and B", "A, B and C".
func join(names []string) string {
	switch len(names) {
	case 0:
		return ""
	case 1:
		return names[0]
	}
	return strings.Join(names[:len(names)-1], ", ") + " and " + names[len(names)-1]
}

// capital raises the first letter.
func capital(s string) string {
	if s == "" {
		return ""
	}
	r := []rune(s)
	return strings.ToUpper(string(r[0])) + string(r[1:])
}

// plural is "1 study", "2 studies".
func plural(n int, one, many string) string {
	if n == 1 {
		return "1" + number.Hard + one
	}
	return number.Int(n) + number.Hard + many
}

// Better is an outcome's direction of benefit: higher, lower or neither.
func Better(res *result.Result, outcome string) string {
	return outcomeOf(res, outcome).Better
}
