package read

import (
	"strconv"
	"strings"
	"unicode/utf8"

	"steelyard/protocol/diag"
)

// dotted reads a key of one or several parts.
func (p *parser) dotted() []part {
	var key []part
	for {
		p.blank(false)
		k, ok := p.keyPart()
		if !ok {
			return nil
		}
		key = append(key, k)
		if len(key) > maxParts {
			p.fail("R104", key[0].span.Start, k.span.End, "", "a key has more than %d parts", maxParts)
			return nil
		}
		save := p.pos
		p.blank(false)
		if p.pos >= len(p.text) || p.text[p.pos] != '.' {
			p.pos = save
			return key
		}
		p.pos++
	}
}

func (p *parser) keyPart() (part, bool) {
	start := p.pos
	if start < len(p.text) && (p.text[start] == '"' || p.text[start] == '\'') {
		p.quoted(false)
		if p.fault != nil {
			return part{}, false
		}
		raw := string(p.text[start+1 : p.pos-1])
		if p.text[start] == '"' {
			raw = unescape(raw)
		}
		return part{raw, diag.Span{Start: start, End: p.pos}}, true
	}
	for p.pos < len(p.text) && isBare(p.text[p.pos]) {
		p.pos++
	}
	if p.pos > start {
		return part{string(p.text[start:p.pos]), diag.Span{Start: start, End: p.pos}}, true
	}
	if p.pos >= len(p.text) || p.text[p.pos] == '\n' || p.text[p.pos] == '\r' {
		p.fail("R105", start, start, "", "a key is missing here")
		return part{}, false
	}
	_, n := utf8.DecodeRune(p.text[start:])
	p.fail("R105", start, start+n, "keys are made of the letters a to z, digits, _ and -", "%s cannot be part of a key", quoteShort(string(p.text[start:start+n])))
	return part{}, false
}

func isBare(c byte) bool {
	return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || isDigit(c) || c == '_' || c == '-'
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// unescape resolves the escapes of a key in double quotes, which are known to
// be well formed.
func unescape(s string) string {
	if strings.IndexByte(s, '\\') < 0 {
		return s
	}
	var b strings.Builder
	for i := 0; i < len(s); i++ {
		if s[i] != '\\' || i+1 >= len(s) {
			b.WriteByte(s[i])
			continue
		}
		i++
		digits := 0
		switch s[i] {
		case 'b':
			b.WriteByte('\b')
		case 't':
			b.WriteByte('\t')
		case 'n':
			b.WriteByte('\n')
		case 'f':
			b.WriteByte('\f')
		case 'r':
			b.WriteByte('\r')
		case 'e':
			b.WriteByte(0x1b)
		case 'x':
			digits = 2
		case 'u':
			digits = 4
		case 'U':
			digits = 8
		default:
			b.WriteByte(s[i])
		}
		if digits > 0 && i+digits < len(s) {
			n, _ := strconv.ParseUint(s[i+1:i+1+digits], 16, 32)
			b.WriteRune(rune(n))
			i += digits
		}
	}
	return b.String()
}

// quoteShort quotes what was written, cut to a readable length.
func quoteShort(s string) string {
	const most = 40
	if utf8.RuneCountInString(s) > most {
		s = string([]rune(s)[:most]) + "…"
	}
	if q := strconv.Quote(s); strings.ReplaceAll(q, "\\\\", "\\") != `"`+s+`"` {
		return q
	}
	return `"` + s + `"` // a backslash is shown as it was written
}
