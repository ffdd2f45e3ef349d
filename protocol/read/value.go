package read

import (
	"bytes"
	"sort"
	"strings"
	"unicode/utf8"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// codeUnclosed is the code of a text, array or table that is never closed; the
// place of such a fault is its beginning.
const codeUnclosed = "R106"

// value reads one value; after is the place of its key, for faults.
func (p *parser) value(after diag.Span) *record.Node {
	if p.pos >= len(p.text) || strings.IndexByte("\r\n#", p.text[p.pos]) >= 0 {
		p.fail("R105", after.Start, after.End, "write a value after =, or delete the line", "no value after %s =", string(p.text[after.Start:after.End]))
		return nil
	}
	start := p.pos
	switch p.text[p.pos] {
	case '"', '\'':
		p.quoted(true)
		if p.fault != nil {
			return nil
		}
		return &record.Node{Kind: record.StringNode, Span: diag.Span{Start: start, End: p.pos}}
	case '[':
		return p.array()
	case '{':
		return p.inline()
	}
	return p.bare()
}

// enter counts a level of nesting.
func (p *parser) enter() bool {
	p.depth++
	if p.depth > maxDepth {
		p.fail("R104", p.pos, p.pos+1, "", "arrays and tables stand more than %d deep inside each other", maxDepth)
		return false
	}
	return true
}

func (p *parser) array() *record.Node {
	start := p.pos
	n := &record.Node{Kind: record.ArrayNode}
	if !p.enter() {
		return nil
	}
	p.pos++
	for {
		p.blank(true)
		if p.pos >= len(p.text) {
			p.fail(codeUnclosed, start, start+1, "close it with ]", "this array is not closed")
			return nil
		}
		switch p.text[p.pos] {
		case ']':
			p.pos++
			p.depth--
			n.Span = diag.Span{Start: start, End: p.pos}
			return n
		case ',':
			p.fail("R105", p.pos, p.pos+1, "", "a comma without a value before it")
			return nil
		}
		item := p.value(diag.Span{Start: start, End: start + 1})
		if p.fault != nil {
			return nil
		}
		n.Items = append(n.Items, item)
		if !p.separator(start, ']', "array") {
			return nil
		}
	}
}

// separator reads the comma between items, or stops before the closing sign.
func (p *parser) separator(start int, closing byte, what string) bool {
	p.blank(true)
	if p.pos >= len(p.text) {
		p.fail(codeUnclosed, start, start+1, "close it with "+string(closing), "this %s is not closed", what)
		return false
	}
	switch p.text[p.pos] {
	case ',':
		p.pos++
		return true
	case closing:
		return true
	}
	if p.looksLikeStatement(len(p.text)) && bytes.IndexByte(p.text[start:p.pos], '\n') >= 0 {
		p.fail(codeUnclosed, start, start+1, "close it with "+string(closing), "this %s is not closed", what)
		return false
	}
	end := p.pos
	for end < len(p.text) && strings.IndexByte(" \t\r\n,]}#", p.text[end]) < 0 {
		end++
	}
	end = max(end, p.pos+1)
	p.fail("R105", p.pos, end, "items are separated by commas", "a comma or %c is missing before %s", closing, quoteShort(string(p.text[p.pos:end])))
	return false
}

func (p *parser) inline() *record.Node {
	start := p.pos
	n := &record.Node{Kind: record.TableNode}
	if !p.enter() {
		return nil
	}
	p.pos++
	for {
		p.blank(true)
		if p.pos >= len(p.text) {
			p.fail(codeUnclosed, start, start+1, "close it with }", "this table is not closed")
			return nil
		}
		switch p.text[p.pos] {
		case '}':
			p.pos++
			p.depth--
			n.Span = diag.Span{Start: start, End: p.pos}
			return n
		case ',':
			p.fail("R105", p.pos, p.pos+1, "", "a comma without a key before it")
			return nil
		}
		key := p.dotted()
		if p.fault != nil {
			return nil
		}
		last := key[len(key)-1].span
		p.blank(false)
		if p.pos >= len(p.text) || p.text[p.pos] != '=' {
			p.fail("R105", key[0].span.Start, last.End, "inside { } a key and its value are written key = value", "no = after %s", quoteShort(string(p.text[key[0].span.Start:last.End])))
			return nil
		}
		p.pos++
		p.blank(false)
		v := p.value(last)
		if p.fault != nil {
			return nil
		}
		if f := put(n, key, v, p.lineOf); f != nil {
			p.fault = f
			return nil
		}
		if !p.separator(start, '}', "table") {
			return nil
		}
	}
}

// lineOf is the line of an offset, for messages that name an earlier one.
func (p *parser) lineOf(offset int) int {
	if p.newlines == nil {
		for i, c := range p.text {
			if c == '\n' {
				p.newlines = append(p.newlines, i)
			}
		}
	}
	return 1 + sort.SearchInts(p.newlines, offset)
}

// quoted moves over a text in quotes; multi allows the forms of three quotes.
func (p *parser) quoted(multi bool) {
	q := p.text[p.pos]
	triple := []byte{q, q, q}
	if multi && bytes.HasPrefix(p.text[p.pos:], triple) {
		p.multiline(q)
		return
	}
	start := p.pos
	p.pos++
	for p.pos < len(p.text) {
		switch c := p.text[p.pos]; {
		case c == q:
			p.pos++
			return
		case c == '\n' || c == '\r':
			p.fail(codeUnclosed, start, p.pos, pick(q == '"', `close it with ", or use """ for a text of several lines`, "close it with ', or use ''' for a text of several lines"), "this text is not closed on its line")
			return
		case c == '\\' && q == '"':
			p.escape(false)
			if p.fault != nil {
				return
			}
		default:
			p.pos++
		}
	}
	p.fail(codeUnclosed, start, p.pos, "close it with "+string(q), "this text is not closed")
}

// multiline moves over a text in three quotes.
func (p *parser) multiline(q byte) {
	start := p.pos
	p.pos += 3
	for p.pos < len(p.text) {
		switch c := p.text[p.pos]; {
		case c == q:
			n := 1
			for p.pos+n < len(p.text) && p.text[p.pos+n] == q {
				n++
			}
			if n > 5 {
				p.fail("R105", p.pos, p.pos+n, "", "too many quotation marks in a row")
				return
			}
			p.pos += n
			if n >= 3 {
				return
			}
		case c == '\\' && q == '"':
			p.escape(true)
			if p.fault != nil {
				return
			}
		default:
			p.pos++
		}
	}
	p.depth++ // so that the search for the next statement passes over prose
	p.fail(codeUnclosed, start, start+3, "close it with "+strings.Repeat(string(q), 3), "this text is not closed")
}

// escape moves over one escape of a text in double quotes.
func (p *parser) escape(multi bool) {
	start := p.pos
	p.pos++
	if p.pos >= len(p.text) {
		return
	}
	c := p.text[p.pos]
	digits := 0
	switch c {
	case 'b', 't', 'n', 'f', 'r', 'e', '"', '\\':
		p.pos++
		return
	case 'x':
		digits = 2
	case 'u':
		digits = 4
	case 'U':
		digits = 8
	case ' ', '\t', '\n', '\r':
		if multi {
			i := p.pos
			for i < len(p.text) && (p.text[i] == ' ' || p.text[i] == '\t') {
				i++
			}
			if i < len(p.text) && (p.text[i] == '\n' || p.text[i] == '\r') {
				p.pos = i + 1
				return
			}
		}
	}
	if digits > 0 && p.pos+digits < len(p.text) && isHex(p.text[p.pos+1:p.pos+1+digits]) {
		p.pos += 1 + digits
		return
	}
	_, n := utf8.DecodeRune(p.text[p.pos:])
	end := p.pos + n
	p.fail("R105", start, end, `a backslash is written \\, or the text stands in '…'`, "%s is no escape that a text can hold", quoteShort(string(p.text[start:end])))
}

func isHex(s []byte) bool {
	for _, c := range s {
		if !isDigit(c) && (c|0x20 < 'a' || c|0x20 > 'f') {
			return false
		}
	}
	return true
}

// bare reads a number, a date, true or false.
func (p *parser) bare() *record.Node {
	start := p.pos
	p.word()
	// A date and a time may be separated by a blank.
	if t := p.text[start:p.pos]; len(t) == 10 && t[4] == '-' && t[7] == '-' && p.pos+1 < len(p.text) &&
		p.text[p.pos] == ' ' && isDigit(p.text[p.pos+1]) {
		p.pos++
		p.word()
	}
	text := string(p.text[start:p.pos])
	if text == "" {
		_, n := utf8.DecodeRune(p.text[start:])
		p.fail("R105", start, start+n, "", "%s cannot begin a value", quoteShort(string(p.text[start:start+n])))
		return nil
	}
	kind, ok := classify(text)
	if !ok && p.depth == 0 && !isDigit(text[0]) {
		// Words without quotes: the fault is the whole of them.
		for p.pos < len(p.text) && strings.IndexByte("\r\n#", p.text[p.pos]) < 0 {
			p.pos++
		}
		text = strings.TrimRight(string(p.text[start:p.pos]), " \t")
		p.pos = start + len(text)
	}
	if !ok {
		p.fail("R105", start, p.pos, helpForBare(text), "%s is no value", quoteShort(text))
		return nil
	}
	return &record.Node{Kind: kind, Text: text, Span: diag.Span{Start: start, End: p.pos}}
}

func (p *parser) word() {
	for p.pos < len(p.text) && strings.IndexByte(" \t\r\n,]}[{#=\"'", p.text[p.pos]) < 0 {
		p.pos++
	}
}
