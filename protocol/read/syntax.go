package read

import (
	"bytes"
	"fmt"
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// Bounds of what is read. A record never comes near them; a hostile file does.
const (
	maxBytes  = 32 << 20 // of the whole text
	maxDepth  = 24       // of arrays and inline tables inside each other
	maxParts  = 12       // of one dotted key
	maxFaults = 100      // of syntax, before the rest is left unread
)

// statementKind is what one statement of the file is.
type statementKind uint8

const (
	keyValue    statementKind = iota
	tableHead                 // [a.b]
	arrayHead                 // [[a.b]]
	unreadable                // no key could be made out
	unreadTable               // a table head whose name could not be made out
)

// part is one part of a dotted key.
type part struct {
	text string
	span diag.Span
}

// statement is one key with its value, or one table head, with places.
type statement struct {
	kind  statementKind
	span  diag.Span
	key   []part
	value *record.Node // keyValue; its leaves have kind and place, no value yet
	bad   bool         // reported; not handed to the TOML module
	fixed bool         // a head that was reported and is read as it was meant
}

// fault is the first fault of a statement.
type fault struct {
	code    string
	span    diag.Span
	message string
	help    string
}

// parser splits a text into statements. It knows the grammar only so far as
// places need it; whether a text is TOML is decided by the TOML module.
type parser struct {
	text       []byte
	pos        int
	depth      int
	fault      *fault
	statements []statement
	faults     []fault
	stopped    bool  // the rest was left unread
	more       bool  // faults beyond those listed
	newlines   []int // their offsets, once asked for
}

// parse reads all statements. Text must be valid UTF-8 without control
// characters.
func parse(text []byte) *parser {
	p := &parser{text: text}
	if bytes.HasPrefix(text, []byte("\xef\xbb\xbf")) {
		p.pos = 3
	}
	for {
		p.blank(true)
		if p.pos >= len(p.text) {
			return p
		}
		if len(p.faults) >= maxFaults {
			p.stopped = true
			return p
		}
		start := p.pos
		p.fault, p.depth = nil, 0
		var s statement
		if p.text[p.pos] == '[' {
			s = p.head()
		} else {
			s = p.keyValue()
		}
		s.span.Start = start
		if p.fault == nil {
			p.lineEnd(&s)
		}
		if p.fault == nil {
			if s.span.End == 0 {
				s.span.End = p.pos
			}
			p.statements = append(p.statements, s)
			continue
		}
		p.faults = append(p.faults, *p.fault)
		if p.fault.code == "R104" {
			p.stopped = true
			return p
		}
		s.bad = !s.fixed
		p.recover(start)
		s.span.End = p.pos
		if s.value == nil {
			s.value = &record.Node{Kind: record.UnreadNode, Span: p.fault.span}
		} else if s.bad {
			s.value = &record.Node{Kind: record.UnreadNode, Span: s.value.Span}
		}
		p.statements = append(p.statements, s)
	}
}

// fail notes the first fault of the statement.
func (p *parser) fail(code string, start, end int, help, format string, args ...any) {
	if p.fault != nil {
		return
	}
	start = min(start, len(p.text))
	p.fault = &fault{code, diag.Span{Start: start, End: max(end, start)}, fmt.Sprintf(format, args...), help}
}

// recover moves to where the next statement seems to begin: the next line, or,
// when the fault lies inside brackets or a long text, the next line that looks
// like a statement and is indented no deeper than the faulty one.
func (p *parser) recover(start int) {
	indent := start - (bytes.LastIndexByte(p.text[:start], '\n') + 1)
	lines := p.depth > 0
	p.pos = max(p.pos, start)
	// A fault that is found at the end of the text or of a multi-line text is
	// one of its first line.
	if p.fault.code == codeUnclosed {
		p.pos = p.fault.span.Start
		lines = p.depth > 0
	}
	for {
		i := bytes.IndexByte(p.text[p.pos:], '\n')
		if i < 0 {
			p.pos = len(p.text)
			return
		}
		p.pos += i + 1
		if !lines || p.looksLikeStatement(indent) {
			return
		}
	}
}

// looksLikeStatement reports whether a statement seems to begin on the line at
// the position, at most so far to the right as indent.
func (p *parser) looksLikeStatement(indent int) bool {
	i := p.pos
	for i < len(p.text) && (p.text[i] == ' ' || p.text[i] == '\t') {
		i++
	}
	if i-p.pos > indent || i >= len(p.text) {
		return false
	}
	if p.text[i] == '[' {
		j := i + 1
		if j < len(p.text) && p.text[j] == '[' {
			j++
		}
		return j < len(p.text) && (isBare(p.text[j])) && !isDigit(p.text[j]) && p.text[j] != '-'
	}
	j := i
	for j < len(p.text) && (isBare(p.text[j]) || strings.IndexByte(". \t\"'", p.text[j]) >= 0) {
		j++
	}
	return j > i && j < len(p.text) && p.text[j] == '='
}

// blank skips blanks, and with newlines set also line ends and comments.
func (p *parser) blank(newlines bool) {
	for p.pos < len(p.text) {
		switch c := p.text[p.pos]; {
		case c == ' ' || c == '\t':
			p.pos++
		case newlines && (c == '\n' || c == '\r'):
			p.pos++
		case newlines && c == '#':
			p.comment()
		default:
			return
		}
	}
}

func (p *parser) comment() {
	if i := bytes.IndexByte(p.text[p.pos:], '\n'); i >= 0 {
		p.pos += i
	} else {
		p.pos = len(p.text)
	}
}

// lineEnd demands that nothing but a comment follows on the line.
func (p *parser) lineEnd(s *statement) {
	s.span.End = p.pos
	p.blank(false)
	if p.pos >= len(p.text) {
		return
	}
	switch c := p.text[p.pos]; c {
	case '#':
		p.comment()
		return
	case '\n', '\r':
		return
	}
	end := p.pos
	for end < len(p.text) && p.text[end] != '\n' && p.text[end] != '\r' && p.text[end] != '#' {
		end++
	}
	rest := strings.TrimRight(string(p.text[p.pos:end]), " \t")
	help := "each key with its value stands on a line of its own"
	switch {
	case s.kind != keyValue:
		help = "nothing but a comment follows the head of a table"
		s.fixed = true
	case rest[0] == ',' && len(rest) > 1 && isDigit(rest[1]):
		help = "a number is written with a point: " + string(p.text[s.value.Span.Start:s.value.Span.End]) + "." + rest[1:]
	case rest[0] == '%':
		help = "a share is written as a number: 0.05 for 5 %"
	case s.value.Kind == record.StringNode:
		help = `a quotation mark inside a text is written \", or the text stands in '…'`
	}
	p.fail("R105", p.pos, p.pos+len(rest), help, "unexpected %s after the end of the %s", quoteShort(rest), pick(s.kind == keyValue, "value", "table's head"))
}

func pick(first bool, a, b string) string {
	if first {
		return a
	}
	return b
}

// head reads [a.b] or [[a.b]].
func (p *parser) head() statement {
	s := statement{kind: tableHead}
	start := p.pos
	p.pos++
	if p.pos < len(p.text) && p.text[p.pos] == '[' {
		s.kind = arrayHead
		p.pos++
	}
	closing := "]"
	if s.kind == arrayHead {
		closing = "]]"
	}
	p.blank(false)
	s.key = p.dotted()
	if p.fault != nil {
		s.kind, s.key = unreadTable, nil
		return s
	}
	p.blank(false)
	if bytes.HasPrefix(p.text[p.pos:], []byte(closing)) {
		p.pos += len(closing)
		return s
	}
	end := p.pos
	for end < len(p.text) && strings.IndexByte("\r\n#", p.text[end]) < 0 {
		end++
	}
	rest := strings.TrimRight(string(p.text[p.pos:end]), " \t")
	if rest == "" || rest == "]" {
		s.fixed = true
		p.fail("R105", start, p.pos+len(rest), "write "+string(p.text[start:p.pos])+closing, "the head of this table is not closed with %s", closing)
	} else {
		s.kind, s.key = unreadTable, nil
		p.fail("R105", p.pos, p.pos+len(rest), "a table's head is written [record], or [[result]] for one of several", "unexpected %s in the head of a table", quoteShort(rest))
	}
	return s
}

// keyValue reads key = value.
func (p *parser) keyValue() statement {
	s := statement{kind: keyValue}
	s.key = p.dotted()
	if p.fault != nil {
		s.kind = unreadable
		return s
	}
	p.blank(false)
	if p.pos >= len(p.text) || p.text[p.pos] != '=' {
		first, last := s.key[0].span.Start, s.key[len(s.key)-1].span.End
		help := "a key and its value are written key = value"
		if p.pos < len(p.text) && p.text[p.pos] == ':' {
			help = "write = in place of :"
		}
		p.fail("R105", first, last, help, "no = after %s", quoteShort(string(p.text[first:last])))
		return s
	}
	p.pos++
	p.blank(false)
	s.value = p.value(s.key[len(s.key)-1].span)
	return s
}
