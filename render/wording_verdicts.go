package render

import (
	"fmt"
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

func sprintf(format string, args ...any) string { return fmt.Sprintf(format, args...) }

// Sentence is the one sentence of a claim: its verdict in words, then the
// estimate with the interval that decides it. j is the hypothesis's own
// judgement or one of its alternatives.
func Sentence(res *result.Result, h *result.Hypothesis, j *result.Judged) string {
	v := voiceOf(res, h)
	s := v.verdict(j)
	if e := v.evidence(j); e != "" && j.Verdict != result.Masked && j.Verdict != result.Pending {
		s += "; " + e
	}
	s += "."
	if x := v.aside(j); x != "" {
		s += " " + x
	}
	return s
}

// verdict is the sentence without its numbers and without its full stop.
func (v voice) verdict(j *result.Judged) string {
	switch j.Verdict {
	case result.Established:
		return v.opening() + " show, " + v.atError() + ", that " + v.atLeastOne() + v.claim()
	case result.Suggested:
		return v.opening() + " suggest, " + v.atError() + " and without adjustment for multiplicity (exploratory), that " + v.atLeastOne() + v.claim()
	case result.Contradicted:
		return v.opening() + " show the opposite, " + v.atError() + ": " + v.atLeastOne() + v.opposite(j)
	case result.Open:
		return v.open(j)
	case result.Pending:
		if v.h.Claim == "describe" {
			return "No result has arrived yet; " + v.the() + " is to be described"
		}
		return "No result has arrived yet; whether " + v.question() + " is not judged"
	case result.Masked:
		if v.h.Claim == "describe" {
			return "The results are masked until a planned look; " + v.the() + " is to be described, and only totals are shown"
		}
		return "The results are masked until a planned look; whether " + v.question() + " is not judged, and only totals are shown"
	case result.Described:
		return v.opening() + " describe " + v.the() + " without judging a claim"
	}
	return "Whether " + v.question() + " is not judged"
}

// open words an open claim, with the reason where it could not be decided.
// What stays compatible follows as evidence.
func (v voice) open(j *result.Judged) string {
	if j.Reason != nil {
		return "Whether " + v.question() + " stays open: " + strings.TrimSuffix(noteText(*j.Reason), ".")
	}
	return v.opening() + " leave open, " + v.atError() + ", whether " + v.atLeastOne() + v.question()
}

// opening names the data that speak.
func (v voice) opening() string {
	switch v.h.Evidence {
	case "pooled":
		s := "The data of " + studiesInShort(v.h.Studies) + ", pooled,"
		if v.model() == "random" {
			s = "For the mean over settings, the data of " + studiesInShort(v.h.Studies) + ", pooled under a random-effects model,"
		}
		return s
	case "combined":
		return "The p-values of " + studiesInShort(v.h.Studies) + ", combined,"
	}
	return "The data"
}

// atLeastOne limits a combined claim to what a combination can say.
func (v voice) atLeastOne() string {
	if v.h.Evidence == "combined" {
		return "in at least one study "
	}
	return ""
}

// model is the pooling model that decides this hypothesis.
func (v voice) model() string {
	for i := range v.res.Pooled {
		p := &v.res.Pooled[i]
		if !p.Decides || p.Outcome != v.h.Outcome {
			continue
		}
		if p.Set == v.h.Set {
			return p.Model
		}
	}
	return ""
}

// studyList is "the study A", "the studies A, B and C".
func studyList(names []string) string {
	switch len(names) {
	case 0:
		return "the studies"
	case 1:
		return "the study " + names[0]
	}
	return "the studies " + join(names)
}

// mostNamed is how many studies a sentence names; of more it says the number
// with the first and the last, and the section on them names all.
const mostNamed = 8

// studiesInShort is studyList for a sentence.
func studiesInShort(names []string) string {
	if n := len(names); n > mostNamed {
		return number.Int(n) + number.Hard + "studies (" + names[0] + ", " + names[1] + ", … and " + names[n-1] + ")"
	}
	return studyList(names)
}

// points are what limits must not be rounded onto.
func (v voice) points() []float64 {
	var p []float64
	for _, o := range []result.Opt{v.o.Null, v.h.MarginLow, v.h.MarginHigh, v.h.Limit} {
		if o.OK {
			p = append(p, o.V)
		}
	}
	return p
}

// shown is the judgement's interval as text.
func (v voice) shown(j *result.Judged) number.Shown {
	return v.f.Interval(j.Estimate, j.Low, j.High, v.points()...)
}

// evidence is the estimate with its interval: "estimate −0.18 N, 90 %
// interval −0.78 to 0.42 N"; "" where there is none.
func (v voice) evidence(j *result.Judged) string {
	s := v.shown(j)
	var parts []string
	if s.Estimate != "" {
		parts = append(parts, "estimate "+s.EstimateUnit())
	}
	if r := s.Range(); r != "" {
		text := number.Level(j.Level) + " interval " + r
		if j.Verdict == result.Open {
			text = "still compatible: " + r + " (" + number.Level(j.Level) + " interval"
			if !j.IntervalDecides {
				text += ", shown beside the verdict; it does not decide it"
			}
			text += ")"
		} else if !j.IntervalDecides && judged(j.Verdict) {
			text += " (shown beside the verdict; it does not decide it)"
		}
		parts = append(parts, text)
	}
	return strings.Join(parts, ", ")
}

// judged reports whether a verdict came from a test.
func judged(v result.Verdict) bool {
	switch v {
	case result.Established, result.Suggested, result.Contradicted, result.Open:
		return true
	case result.Pending, result.Described, result.Masked:
		return false
	}
	return false
}

// aside says what a reader would otherwise miss.
func (v voice) aside(j *result.Judged) string {
	var out []string
	s := v.shown(j)
	if judged(j.Verdict) && s.LowEqual != "" {
		out = append(out, "The lower limit is equal to "+v.f.WithUnit(s.LowEqual)+".")
	}
	if judged(j.Verdict) && s.HighEqual != "" {
		out = append(out, "The upper limit is equal to "+v.f.WithUnit(s.HighEqual)+".")
	}
	if j.Verdict == result.Established || j.Verdict == result.Suggested {
		out = append(out, v.aboutEstablished(j)...)
	}
	return strings.Join(out, " ")
}

// aboutEstablished are the two cases in which an established claim is easily
// read as more than it is.
func (v voice) aboutEstablished(j *result.Judged) []string {
	good, bad := j.Reading.Above, j.Reading.Below
	if v.o.Better == "lower" {
		good, bad = bad, good
	}
	switch {
	case !j.Reading.OK || !j.Low.OK && !j.High.OK:
	case v.h.Claim == "noninferior" && bad >= 1 && (bad >= 2 || !j.Reading.HasRegion) && good < 2:
		return []string{"The interval lies wholly on the harmful side: worse than the null, though by less than the margin."}
	case v.h.Claim == "benefit-too-small" && bad >= 2:
		return []string{"The claim does not speak of harm, and the interval lies wholly on the harmful side."}
	case v.h.Claim == "benefit-too-small" && good == 0:
		return []string{"Harm is not excluded: one that matters remains possible."}
	case v.h.Claim == "benefit-too-small":
		return []string{"The claim itself does not speak of harm."}
	case (v.h.Claim == "differs" || v.h.Claim == "superior") && j.Reading.HasRegion && good+bad == 3 && good > 0 && bad > 0:
		return []string{"The whole interval lies inside the region too small to matter."}
	case v.h.Claim == "minimum-effect" || v.h.Claim == "equivalent" || v.h.Claim == "below" || v.h.Claim == "above":
	}
	return nil
}

// VerdictWord is the verdict as it heads a block.
func VerdictWord(v result.Verdict) string { return strings.ToUpper(string(v)) }

// noteText is a note's message with its arguments; numbers among them are
// written as everywhere else.
func noteText(n result.Note) string {
	if len(n.Args) == 0 {
		return signed(strings.ReplaceAll(n.Message, "%%", "%"))
	}
	var b strings.Builder
	arg := 0
	for i := 0; i < len(n.Message); i++ {
		if n.Message[i] != '%' {
			b.WriteByte(n.Message[i])
			continue
		}
		end := i + 1
		for end < len(n.Message) && strings.IndexByte("+-# 0123456789.", n.Message[end]) >= 0 {
			end++
		}
		if end >= len(n.Message) {
			break
		}
		verb := n.Message[i : end+1]
		i = end
		switch {
		case verb == "%%":
			b.WriteByte('%')
		case arg >= len(n.Args):
		default:
			b.WriteString(argText(verb, n.Args[arg]))
			arg++
		}
	}
	return signed(b.String())
}

// NoteText is a note's message with its arguments.
func NoteText(n result.Note) string { return noteText(n) }

// argText writes one argument under its verb; as it is where the verb does
// not suit it.
func argText(verb string, arg any) string {
	if x, ok := arg.(float64); ok {
		return number.Verb(verb, x)
	}
	s := fmt.Sprintf(verb, arg)
	if strings.Contains(s, "%!") {
		return fmt.Sprint(arg)
	}
	return s
}

// signed writes the minus sign before the numbers of a message, where the
// message has a hyphen. Hyphens within dates, names, codes and quotations stay.
func signed(s string) string {
	r := []rune(s)
	quoted := false // as written
	for i, c := range r {
		if strings.ContainsRune("\"`“”", c) {
			quoted = !quoted
		}
		if quoted || c != '-' || i+1 >= len(r) || r[i+1] < '0' || r[i+1] > '9' {
			continue
		}
		if i == 0 || strings.ContainsRune(" (=,;:[", r[i-1]) {
			r[i] = '−'
		}
	}
	return string(r)
}
