package read

import (
	"fmt"
	"os"
	"strings"
	"testing"

	"steelyard/protocol/diag"
)

// A case of testdata/faults.txt changes a base record or brings a text of its
// own, and lists every diagnostic that must come, in order, and no other:
//
//	# what it shows
//	- a line of the base record          (deleted)
//	- a line                             (replaced: the next line begins with +)
//	+ its replacement
//	> a line appended
//	| a line of a text of its own
//	= 3:7 error R201 part of the message
type faultCase struct {
	name string
	line int // in faults.txt
	text string
	want []string
}

func readCases(t *testing.T, file, base string) []faultCase {
	t.Helper()
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	var cases []faultCase
	var c *faultCase
	deleted := -1
	for i, line := range strings.Split(string(data), "\n") {
		mark, rest, _ := strings.Cut(line, " ")
		switch mark {
		case "":
		case "#":
			cases = append(cases, faultCase{name: rest, line: i + 1, text: base})
			c = &cases[len(cases)-1]
			deleted = -1
		case "-":
			j := strings.Index(c.text, rest+"\n")
			if j < 0 {
				t.Fatalf("%s:%d: the base has no line %q", file, i+1, rest)
			}
			c.text = c.text[:j] + c.text[j+len(rest)+1:]
			deleted = j
		case "+":
			c.text = c.text[:deleted] + rest + "\n" + c.text[deleted:]
			deleted += len(rest) + 1
		case ">":
			c.text += rest + "\n"
		case "|":
			if c.text == base {
				c.text = ""
			}
			c.text += rest + "\n"
		case "=":
			c.want = append(c.want, rest)
		default:
			t.Fatalf("%s:%d: a line of no kind: %q", file, i+1, line)
		}
	}
	return cases
}

// compareFaults returns what differs, nothing when all is as wanted.
func compareFaults(got, want []string) []string {
	var out []string
	for i := range max(len(got), len(want)) {
		g, w := "nothing", "nothing"
		if i < len(got) {
			g = got[i]
		}
		if i < len(want) {
			w = want[i]
		}
		head, message, _ := cut3(w)
		if i < len(got) && i < len(want) && strings.HasPrefix(g, head+" ") && strings.Contains(g, message) {
			continue
		}
		out = append(out, fmt.Sprintf("got  %s\nwant %s", g, w))
	}
	return out
}

// cut3 splits after the third blank.
func cut3(s string) (head, rest string, ok bool) {
	n := 0
	for i := range len(s) {
		if s[i] == ' ' {
			if n++; n == 3 {
				return s[:i], s[i+1:], true
			}
		}
	}
	return s, "", false
}

func lines(list diag.List, src *diag.Source) []string {
	var out []string
	for _, d := range list {
		line, column := src.Position(d.Span.Start)
		out = append(out, fmt.Sprintf("%d:%d %s %s %s", line, column, d.Severity, d.Code, d.Message))
	}
	return out
}

func TestFaults(t *testing.T) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range readCases(t, "testdata/faults.txt", string(base)) {
		t.Run(c.name, func(t *testing.T) {
			src := diag.NewSource("a.toml", []byte(c.text))
			_, list := readWith(src, true)
			for _, d := range list {
				if d.Span.Start < 0 || d.Span.End < d.Span.Start || d.Span.End > len(c.text) {
					t.Errorf("%v lies outside the text", d.Span)
				}
			}
			for _, diff := range compareFaults(lines(list, src), c.want) {
				t.Errorf("testdata/faults.txt:%d\n%s", c.line, diff)
			}
		})
	}
}

// TestCompareFaults checks that the comparison itself can fail.
func TestCompareFaults(t *testing.T) {
	got := []string{"1:2 error R201 is not a key"}
	for _, want := range [][]string{
		{"1:3 error R201 is not"}, {"1:2 warning R201 is not"}, {"1:2 error R202 is not"}, {"1:2 error R201 other"}, {},
		{"1:2 error R201 is not", "4:5 error R203 more"},
	} {
		if len(compareFaults(got, want)) == 0 {
			t.Errorf("%q passes for %q", got, want)
		}
	}
	if diff := compareFaults(got, []string{"1:2 error R201 not a key"}); len(diff) > 0 {
		t.Error(diff)
	}
}
