package data

import (
	"fmt"
	"strings"

	"steelyard/protocol/diag"
)

// listed is how many faults of one file are listed one by one.
const listed = 10

// faults collects what is wrong inside one file.
type faults struct {
	file   string
	at     diag.Span // where the record names the file
	masked bool      // no cell and no line of the file may be shown
	list   diag.List
	seen   map[seat]bool
}

type seat struct {
	code         string
	line, column int
}

// cell adds an error at a place of the file. One fault that several entries
// meet is counted once; from the eleventh on faults are only counted.
func (f *faults) cell(code string, at diag.Span, line, column int, excerpt, help, message string) {
	if f.seen == nil {
		f.seen = map[seat]bool{}
	}
	s := seat{code, line, column}
	if f.seen[s] {
		return
	}
	f.seen[s] = true
	if len(f.seen) > listed {
		return
	}
	if f.masked {
		excerpt = ""
	}
	d := diag.Error(code, at, "%s", message).In(f.file, line, column, excerpt)
	d.Help = help
	f.list.Add(d)
}

// diagnostics returns the list, with a last line for what is not listed.
func (f *faults) diagnostics() diag.List {
	if more := len(f.seen) - listed; more > 0 {
		f.list.Add(diag.Error("D199", f.at, "%s has %s like these", f.file, plural(more, "more fault", "more faults")))
	}
	return f.list
}

// show quotes a cell, or says only "this cell" where it may not be shown.
func (f *faults) show(cell []byte) string {
	if f.masked {
		return "this cell"
	}
	return quoteText(string(cell))
}

// quoteText quotes what was written, cut to 40 characters.
func quoteText(s string) string {
	if r := []rune(s); len(r) > 40 {
		s = string(r[:39]) + "…"
	}
	return fmt.Sprintf("%q", s)
}

func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// listOf joins names for a message, at most twelve of them.
func listOf(names []string) string {
	rest := ""
	if len(names) > 12 {
		rest = fmt.Sprintf(", and %d more", len(names)-12)
		names = names[:12]
	}
	quoted := make([]string, len(names))
	for i, n := range names {
		quoted[i] = quoteText(n)
	}
	return strings.Join(quoted, ", ") + rest
}

// nearest is the name that differs from s in at most a third of its letters,
// or in case only; "" when none does.
func nearest(s string, names []string) string {
	best, limit := "", len([]rune(s))/3+1
	for _, n := range names {
		if strings.EqualFold(n, s) {
			return n
		}
		if d := distance([]rune(strings.ToLower(s)), []rune(strings.ToLower(n))); d < limit {
			best, limit = n, d
		}
	}
	return best
}

// distance counts insertions, deletions and substitutions (Levenshtein 1966,
// from memory).
func distance(a, b []rune) int {
	if len(a) > 100 || len(b) > 100 {
		return 100
	}
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range a {
		diagonal := row[0]
		row[0] = i + 1
		for j := range b {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, diagonal+1)
		}
	}
	return row[len(b)]
}
