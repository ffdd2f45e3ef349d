package text

import (
	"strconv"
	"strings"
	"unicode"
)

func itoa(n int) string { return strconv.Itoa(n) }

// clean makes a text safe and copyable at a prompt: controls and the blanks
// that hold numbers together become plain blanks.
func clean(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\u00a0' || r == '\u202f' || r == '\u2009':
			return ' '
		case unicode.IsControl(r):
			return ' '
		}
		return r
	}, s)
}

// width is how many columns a text takes: none for combining marks, two for
// wide characters of East Asian scripts.
func width(s string) int {
	n := 0
	for _, r := range s {
		n += runeWidth(r)
	}
	return n
}

func runeWidth(r rune) int {
	switch {
	case unicode.Is(unicode.Mn, r) || unicode.Is(unicode.Me, r) || unicode.Is(unicode.Cf, r):
		return 0
	case r >= 0x1100 && r <= 0x115f, r >= 0x2e80 && r <= 0xa4cf, r >= 0xac00 && r <= 0xd7a3,
		r >= 0xf900 && r <= 0xfaff, r >= 0xfe30 && r <= 0xfe6f, r >= 0xff00 && r <= 0xff60, r >= 0xffe0 && r <= 0xffe6,
		r >= 0x1f300 && r <= 0x1faff, r >= 0x20000 && r <= 0x3fffd:
		return 2
	}
	return 1
}

// wrap breaks a text into lines of at most n columns, at blanks that may
// break; a word longer than a line is cut. The lines are clean.
func wrap(s string, n int) []string {
	n = max(1, n)
	var lines []string
	var line strings.Builder
	used := 0
	flush := func() {
		lines = append(lines, clean(line.String()))
		line.Reset()
		used = 0
	}
	for _, word := range words(s) {
		w := width(word)
		if used > 0 && used+1+w > n {
			flush()
		}
		for w > n {
			head, rest := cut(word, n)
			line.WriteString(head)
			flush()
			word, w = rest, width(rest)
		}
		if used > 0 {
			line.WriteByte(' ')
			used++
		}
		line.WriteString(word)
		used += w
	}
	if used > 0 || len(lines) == 0 {
		flush()
	}
	return lines
}

// words splits at breaking blanks only.
func words(s string) []string {
	return strings.FieldsFunc(s, func(r rune) bool {
		return r == ' ' || r == '\n' || r == '\t' || r == '\r'
	})
}

// cut splits a word after at most n columns, and after at least one rune.
func cut(s string, n int) (head, rest string) {
	used := 0
	for i, r := range s {
		w := runeWidth(r)
		if used+w > n && i > 0 {
			return s[:i], s[i:]
		}
		used += w
	}
	return s, ""
}

// clip cuts a line that is too long.
func clip(s string, n int) string {
	if width(s) <= n {
		return s
	}
	head, _ := cut(s, n)
	return head
}

// pad fills up to n columns on the right.
func pad(s string, n int) string {
	if w := width(s); w < n {
		return s + strings.Repeat(" ", n-w)
	}
	return s
}

// padLeft fills up to n columns on the left.
func padLeft(s string, n int) string {
	if w := width(s); w < n {
		return strings.Repeat(" ", n-w) + s
	}
	return s
}
