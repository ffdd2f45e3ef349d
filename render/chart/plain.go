package chart

import (
	"math"
	"strings"
)

// Plain draws the beam in characters: ticks, the beam with its band (=) and
// its notch (v), and one line an interval. columns is the whole width.
func (b Beam) Plain(columns int) []string {
	names := 0
	for _, r := range b.Rows {
		if b.Names > 0 {
			names = max(names, min(len([]rune(r.Name)), 24))
		}
	}
	lead := 1
	if names > 0 {
		lead = names + 2
	}
	n := max(20, columns-lead-1)
	at := func(v float64) int { return min(n-1, max(0, int(math.Round(b.Axis.At(v)*float64(n-1))))) }

	out := []string{strings.Repeat(" ", lead) + b.plainTicks(n, at)}
	beam := []rune(strings.Repeat("-", n))
	if b.Band.OK && b.Band.High >= b.Axis.Lo && b.Band.Low <= b.Axis.Hi {
		for i := at(b.Band.Low); i <= at(b.Band.High); i++ {
			beam[i] = '='
		}
	}
	if b.Null.OK && b.Axis.Inside(b.Null.V) {
		beam[at(b.Null.V)] = 'v'
	}
	for _, m := range b.Marks { // where a limit stands on the null, the limit is what the claim is about
		if b.Axis.Inside(m.V) {
			beam[at(m.V)] = '^'
		}
	}
	out = append(out, strings.Repeat(" ", lead)+string(beam))
	for _, r := range b.Rows {
		name := ""
		if names > 0 {
			name = clipRunes(r.Name, names)
		}
		out = append(out, strings.TrimRight(padRunes(name, lead)+b.plainRow(r, n, at), " "))
	}
	if b.Axis.Better != "" {
		s := "higher is better ->"
		if b.Axis.Better == "lower" {
			s = "<- lower is better"
			out = append(out, strings.Repeat(" ", lead)+s)
		} else {
			out = append(out, strings.Repeat(" ", lead+max(0, n-len(s)))+s)
		}
	}
	return out
}

// plainTicks writes the tick labels over the beam.
func (b Beam) plainTicks(n int, at func(float64) int) string {
	line := []rune(strings.Repeat(" ", n))
	free := 0
	for _, t := range b.Axis.Ticks(6) {
		text := []rune(t.Text)
		start := min(n-len(text), max(0, at(t.V)-len(text)/2))
		if start < free || start < 0 {
			continue
		}
		copy(line[start:], text)
		free = start + len(text) + 1
	}
	return strings.TrimRight(string(line), " ")
}

// plainRow draws one interval in characters.
func (b Beam) plainRow(r Row, n int, at func(float64) int) string {
	line := []rune(strings.Repeat(" ", n))
	if r.Low.OK || r.High.OK {
		lo, hi := 0, n-1
		openLow, openHigh := true, true
		if r.Low.OK && b.Axis.Inside(r.Low.V) {
			lo, openLow = at(r.Low.V), false
		}
		if r.High.OK && b.Axis.Inside(r.High.V) {
			hi, openHigh = at(r.High.V), false
		}
		for i := lo; i <= hi; i++ {
			line[i] = '-'
		}
		line[lo], line[hi] = '|', '|'
		if openLow {
			line[lo] = '<'
		}
		if openHigh {
			line[hi] = '>'
		}
	}
	if r.Est.OK && b.Axis.Inside(r.Est.V) {
		mark := 'o'
		if r.Grey {
			mark = '.'
		}
		line[at(r.Est.V)] = mark
	}
	return string(line)
}

func clipRunes(s string, n int) string {
	r := []rune(s)
	if len(r) <= n {
		return s
	}
	return string(r[:n])
}

func padRunes(s string, n int) string {
	if k := n - len([]rune(s)); k > 0 {
		return s + strings.Repeat(" ", k)
	}
	return s
}
