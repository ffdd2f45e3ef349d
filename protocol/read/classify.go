package read

import (
	"strings"

	"steelyard/protocol/record"
)

// classify says what a bare word is, by its form.
func classify(s string) (record.NodeKind, bool) {
	switch s {
	case "true", "false":
		return record.BoolNode, true
	case "inf", "+inf", "-inf", "nan", "+nan", "-nan":
		return record.FloatNode, true
	}
	if len(s) > 4 && s[4] == '-' && isDigit(s[0]) && isDigit(s[3]) {
		return classifyDate(s)
	}
	if strings.IndexByte(s, ':') >= 0 {
		return record.LocalTimeNode, isDigit(s[0])
	}
	return classifyNumber(s)
}

// classifyDate tells the forms of dates apart; the TOML module checks the rest.
func classifyDate(s string) (record.NodeKind, bool) {
	for i := range len(s) {
		if !isDigit(s[i]) && strings.IndexByte("-:TtZz.+ ", s[i]) < 0 {
			return 0, false
		}
	}
	colon := strings.IndexByte(s, ':')
	switch {
	case len(s) < 10:
		return 0, false
	case colon < 0:
		return record.LocalDateNode, len(s) == 10
	case strings.ContainsAny(s[colon:], "zZ+-"):
		return record.InstantNode, true
	}
	return record.LocalDateTimeNode, true
}

// classifyNumber checks the form of a number.
func classifyNumber(s string) (record.NodeKind, bool) {
	body := strings.TrimLeft(s, "+-")
	if len(s)-len(body) > 1 || body == "" || !isDigit(body[0]) {
		return 0, false
	}
	if len(body) > 1 && body[0] == '0' && strings.IndexByte("xob", body[1]) >= 0 {
		return record.IntegerNode, len(body) == len(s) && basedDigits(body[1], body[2:])
	}
	rest, ok := digits(body)
	if !ok || len(body)-len(rest) > 1 && body[0] == '0' {
		return 0, false
	}
	if rest == "" {
		return record.IntegerNode, true
	}
	if rest[0] == '.' {
		if rest, ok = digits(rest[1:]); !ok {
			return 0, false
		}
	}
	if rest != "" && rest[0]|0x20 == 'e' {
		rest = rest[1:]
		if rest != "" && (rest[0] == '+' || rest[0] == '-') {
			rest = rest[1:]
		}
		if rest, ok = digits(rest); !ok {
			return 0, false
		}
	}
	return record.FloatNode, rest == ""
}

// digits takes digits with single underscores between them off the front.
func digits(s string) (rest string, ok bool) {
	i := 0
	for i < len(s) && (isDigit(s[i]) || s[i] == '_' && i > 0 && s[i-1] != '_') {
		i++
	}
	return s[i:], i > 0 && s[i-1] != '_'
}

func basedDigits(base byte, s string) bool {
	if s == "" || s[0] == '_' || s[len(s)-1] == '_' || strings.Contains(s, "__") {
		return false
	}
	for i := range len(s) {
		c := s[i]
		switch {
		case c == '_':
		case base == 'x' && isHex([]byte{c}):
		case base == 'o' && c >= '0' && c <= '7':
		case base == 'b' && (c == '0' || c == '1'):
		default:
			return false
		}
	}
	return true
}

// helpForBare guesses what was meant.
func helpForBare(s string) string {
	switch {
	case strings.ContainsAny(s, "“”„‟″‘’«»"):
		return "quotation marks are straight: \"" + strings.Trim(s, "“”„‟″‘’«»") + "\""
	case s[0] == '.' && len(s) > 1 && isDigit(s[1]):
		return "write the zero before the point: 0" + s
	case strings.HasSuffix(s, "%"):
		return "a share is written as a number: 0.05 for 5 %"
	case strings.EqualFold(s, "true") || strings.EqualFold(s, "yes") || strings.EqualFold(s, "on"):
		return "write true"
	case strings.EqualFold(s, "false") || strings.EqualFold(s, "no") || strings.EqualFold(s, "off"):
		return "write false"
	case isDigit(s[0]) && strings.Count(s, ".") == 2 || strings.Count(s, "/") == 2 || isDigit(s[0]) && strings.Count(s, "-") == 2:
		return "a date is written year-month-day with two digits for month and day: 2026-04-12"
	case s[0] == '0' && len(s) > 1 && isDigit(s[1]):
		return "a number has no zeros in front"
	case isDigit(s[0]) && s[len(s)-1] == '.':
		return "write a digit after the point"
	}
	return "a text stands in quotes: " + quoteShort(s)
}
