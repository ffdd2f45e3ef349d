package wording

import (
	"strconv"
	"strings"
	"unicode/utf8"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// Places maps byte offsets of a text of the record, as read, to its source:
// the span of text[start:end] where it was written, escapes and line breaks
// reckoned with. Where the two cannot be matched every span is that of the
// whole value.
func Places(src *diag.Source, v record.String) func(start, end int) diag.Span {
	whole := func(int, int) diag.Span { return v.Span }
	if src == nil || v.Span.Start < 0 || v.Span.End > len(src.Text) || v.Span.Start >= v.Span.End {
		return whole
	}
	token := string(src.Text[v.Span.Start:v.Span.End])
	offsets, ok := decode(token, v.V, "\n")
	if !ok {
		offsets, ok = decode(token, v.V, "\r\n")
	}
	if !ok {
		return whole
	}
	return func(start, end int) diag.Span {
		if start < 0 || end > len(v.V) || start >= end {
			return v.Span
		}
		return diag.Span{Start: v.Span.Start + offsets[start], End: v.Span.Start + offsets[end-1] + width(token, offsets[end-1])}
	}
}

// width is how many bytes the character or escape at i of a token takes.
func width(token string, i int) int {
	if token[i] == '\\' && token[0] == '"' {
		if _, n := escape(token[i:]); n > 0 {
			return n
		}
	}
	_, n := utf8.DecodeRuneInString(token[i:])
	return n
}

// decode reads a TOML string and returns, for each byte of its value, where in
// the token it was written. CRLF reads as newline. ok is false where the value
// is another.
func decode(token, value, newline string) (offsets []int, ok bool) {
	quote := ""
	for _, q := range []string{`"""`, `'''`, `"`, `'`} {
		if strings.HasPrefix(token, q) {
			quote = q
			break
		}
	}
	if quote == "" || len(token) < 2*len(quote) || !strings.HasSuffix(token, quote) {
		return nil, false
	}
	i, end := len(quote), len(token)-len(quote)
	if len(quote) == 3 {
		if strings.HasPrefix(token[i:], "\r\n") {
			i += 2
		} else if strings.HasPrefix(token[i:], "\n") {
			i++
		}
	}
	var b strings.Builder
	put := func(s string, at int) {
		for range len(s) {
			offsets = append(offsets, at)
		}
		b.WriteString(s)
	}
	for i < end {
		switch {
		case quote[0] == '"' && token[i] == '\\':
			s, n := escape(token[i:end])
			if n == 0 {
				return nil, false
			}
			put(s, i)
			i += n
		case strings.HasPrefix(token[i:end], "\r\n"):
			put(newline, i)
			i += 2
		default:
			_, n := utf8.DecodeRuneInString(token[i:end])
			for k := range n {
				offsets = append(offsets, i+k)
			}
			b.WriteString(token[i : i+n])
			i += n
		}
	}
	return offsets, b.String() == value
}

// escape reads the escape at the head of s and returns what it stands for and
// how long it is, 0 for none. A backslash before a line break swallows the
// blanks that follow.
func escape(s string) (string, int) {
	if len(s) < 2 {
		return "", 0
	}
	switch s[1] {
	case 'x', 'u', 'U':
		n := 4
		if s[1] == 'u' {
			n = 6
		} else if s[1] == 'U' {
			n = 10
		}
		if len(s) < n {
			return "", 0
		}
		v, err := strconv.ParseUint(s[2:n], 16, 32)
		if err != nil {
			return "", 0
		}
		return string(rune(v)), n
	case '\n', '\r', ' ', '\t':
		n := 1
		for n < len(s) && strings.IndexByte(" \t\r\n", s[n]) >= 0 {
			n++
		}
		return "", n
	case 'e':
		return "\x1b", 2
	}
	if i := strings.IndexByte(`btnfr"\`, s[1]); i >= 0 {
		return "\b\t\n\f\r\"\\"[i : i+1], 2
	}
	return "", 0
}
