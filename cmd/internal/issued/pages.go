package issued

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"steelyard/render/pdf"
)

// maxDiff bounds the words of a page that are matched with each other.
const maxDiff = 1500

// comparePages lists where the words of pages differ. Where the blanks stand
// does not matter.
func comparePages(was, now []pdf.Shown) []Difference {
	var out []Difference
	if len(was) != len(now) {
		out = append(out, Difference{Class: Words, Where: "pages", What: "number of pages", Old: fmt.Sprint(len(was)), New: fmt.Sprint(len(now))})
	}
	for i := range max(len(was), len(now)) {
		var a, b string
		if i < len(was) {
			a = was[i].Text
		}
		if i < len(now) {
			b = now[i].Text
		}
		if solid(a) != solid(b) {
			out = append(out, compareWords(fmt.Sprintf("page %d", i+1), strings.Fields(a), strings.Fields(b))...)
		}
	}
	return out
}

// sameDrawing reports whether pages are drawn by the same steps.
func sameDrawing(was, now []pdf.Shown) bool {
	return slices.EqualFunc(was, now, func(a, b pdf.Shown) bool { return a.Drawing == b.Drawing })
}

func solid(s string) string { return strings.Join(strings.Fields(s), "") }

// compareWords matches the words of one page (longest common subsequence) and
// returns the stretches that do not match.
func compareWords(where string, a, b []string) (out []Difference) {
	start := 0
	for start < len(a) && start < len(b) && a[start] == b[start] {
		start++
	}
	before := a[:start]
	a, b = a[start:], b[start:]
	for len(a) > 0 && len(b) > 0 && a[len(a)-1] == b[len(b)-1] {
		a, b = a[:len(a)-1], b[:len(b)-1]
	}
	stretch := func(before, old, now []string) {
		if strings.Join(old, "") == strings.Join(now, "") {
			return
		}
		d := Difference{Class: Words, Where: where, Old: strings.Join(old, " "), New: strings.Join(now, " ")}
		if number.MatchString(d.Old) || number.MatchString(d.New) {
			d.Class = Number
		}
		if n := len(before); n > 0 {
			d.What = "after “" + strings.Join(before[max(0, n-4):], " ") + "”"
		} else {
			d.What = "at its beginning"
		}
		out = append(out, d)
	}
	if len(a) > maxDiff || len(b) > maxDiff {
		stretch(before, a, b)
		return out
	}
	next := longest(a, b)
	i, j, from, fromB := 0, 0, 0, 0
	flush := func() {
		if i > from || j > fromB {
			stretch(append(slices.Clone(before), a[:from]...), a[from:i], b[fromB:j])
		}
	}
	for i < len(a) || j < len(b) {
		switch {
		case i < len(a) && j < len(b) && a[i] == b[j]:
			flush()
			i, j = i+1, j+1
			from, fromB = i, j
		case j == len(b) || i < len(a) && next[i+1][j] >= next[i][j+1]:
			i++
		default:
			j++
		}
	}
	flush()
	return out
}

// longest is, for the rest of a from i and of b from j, how many words match.
func longest(a, b []string) [][]uint16 {
	n := make([][]uint16, len(a)+1)
	n[len(a)] = make([]uint16, len(b)+1)
	for i := len(a) - 1; i >= 0; i-- {
		n[i] = make([]uint16, len(b)+1)
		for j := len(b) - 1; j >= 0; j-- {
			if a[i] == b[j] {
				n[i][j] = n[i+1][j+1] + 1
			} else {
				n[i][j] = max(n[i+1][j], n[i][j+1])
			}
		}
	}
	return n
}

var number = regexp.MustCompile(`[0-9]`)

var numbers = regexp.MustCompile(`[−-]?[0-9]+(?:[.,][0-9]+)*`)

// compareNumbers lists the numbers that one document prints more often than
// the other, whatever the words around them, leaving aside the version of the
// program.
func compareNumbers(was, now []pdf.Shown, versions ...string) []Difference {
	count := func(pages []pdf.Shown) map[string]int {
		n := map[string]int{}
		for _, p := range pages {
			text := strings.ReplaceAll(p.Text, "\n", " ")
			for _, v := range versions {
				if v != "" {
					text = strings.ReplaceAll(text, v, "")
				}
			}
			for _, s := range numbers.FindAllString(text, -1) {
				n[s]++
			}
		}
		return n
	}
	a, b := count(was), count(now)
	var out []Difference
	for s, n := range a {
		if n != b[s] {
			out = append(out, Difference{Number, "pages", "the number " + s, times(n), times(b[s])})
		}
	}
	for s, n := range b {
		if a[s] == 0 {
			out = append(out, Difference{Number, "pages", "the number " + s, times(0), times(n)})
		}
	}
	slices.SortFunc(out, func(x, y Difference) int { return strings.Compare(x.What, y.What) })
	return out
}

func times(n int) string {
	switch n {
	case 0:
		return "not printed"
	case 1:
		return "printed once"
	}
	return fmt.Sprintf("printed %d times", n)
}
