package seal

import (
	"bytes"
	"fmt"
	"math"
	"strconv"
	"unicode/utf16"
	"unicode/utf8"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// maxDepth bounds how deep a sealed plan may nest.
const maxDepth = 64

// jsonError is a fault in a sealed plan, with its offset.
type jsonError struct {
	at      int
	message string
}

func (e *jsonError) Error() string { return fmt.Sprintf("%d: %s", e.at, e.message) }

// parseCanonical reads canonical JSON back into a tree. What is not canonical,
// to the byte, is a fault: one plan has one text.
func parseCanonical(text []byte) (*record.Node, *jsonError) {
	p := &jsonParser{text: text}
	n, err := p.value(0)
	if err != nil {
		return nil, err
	}
	if p.pos < len(text) {
		return nil, p.fail("text after the plan")
	}
	again := Canonical(n)
	if !bytes.Equal(again, text) {
		i := 0
		for i < len(again) && i < len(text) && again[i] == text[i] {
			i++
		}
		return nil, &jsonError{i, "not in canonical form"}
	}
	return n, nil
}

type jsonParser struct {
	text []byte
	pos  int
}

func (p *jsonParser) fail(message string) *jsonError { return &jsonError{p.pos, message} }

// next is the present byte, 0 at the end.
func (p *jsonParser) next() byte {
	if p.pos < len(p.text) {
		return p.text[p.pos]
	}
	return 0
}

func (p *jsonParser) value(depth int) (*record.Node, *jsonError) {
	if depth > maxDepth {
		return nil, p.fail("nested too deep")
	}
	start := p.pos
	n := &record.Node{}
	var err *jsonError
	switch c := p.next(); {
	case c == '{':
		err = p.table(n, depth)
	case c == '[':
		err = p.array(n, depth)
	case c == '"':
		n.Kind = record.StringNode
		n.Text, err = p.str()
	case c == 't' && bytes.HasPrefix(p.text[p.pos:], []byte("true")):
		n.Kind, n.Bool = record.BoolNode, true
		p.pos += 4
	case c == 'f' && bytes.HasPrefix(p.text[p.pos:], []byte("false")):
		n.Kind = record.BoolNode
		p.pos += 5
	case c == '-' || '0' <= c && c <= '9':
		err = p.number(n)
	default:
		err = p.fail("not a value")
	}
	n.Span = diag.Span{Start: start, End: p.pos}
	return n, err
}

func (p *jsonParser) table(n *record.Node, depth int) *jsonError {
	n.Kind = record.TableNode
	p.pos++
	for p.next() != '}' {
		if len(n.Entries) > 0 {
			if p.next() != ',' {
				return p.fail("a comma is missing")
			}
			p.pos++
		}
		if p.next() != '"' {
			return p.fail("a key is missing")
		}
		at := p.pos
		key, err := p.str()
		if err != nil {
			return err
		}
		if n.Get(key) != nil {
			return &jsonError{at, "a key stands twice"}
		}
		if p.next() != ':' {
			return p.fail("a colon is missing")
		}
		p.pos++
		v, err := p.value(depth + 1)
		if err != nil {
			return err
		}
		n.Put(record.Entry{Key: key, KeySpan: diag.Span{Start: at, End: at + len(key) + 2}, Value: v})
	}
	p.pos++
	return nil
}

func (p *jsonParser) array(n *record.Node, depth int) *jsonError {
	n.Kind = record.ArrayNode
	p.pos++
	for p.next() != ']' {
		if len(n.Items) > 0 {
			if p.next() != ',' {
				return p.fail("a comma is missing")
			}
			p.pos++
		}
		v, err := p.value(depth + 1)
		if err != nil {
			return err
		}
		n.Items = append(n.Items, v)
	}
	p.pos++
	return nil
}

func (p *jsonParser) number(n *record.Node) *jsonError {
	end := p.pos
	for end < len(p.text) && bytes.IndexByte([]byte("+-.0123456789eE"), p.text[end]) >= 0 {
		end++
	}
	v, err := strconv.ParseFloat(string(p.text[p.pos:end]), 64)
	if err != nil {
		return p.fail("not a number")
	}
	p.pos = end
	if v == math.Trunc(v) && math.Abs(v) <= 1<<53 {
		n.Kind, n.Int = record.IntegerNode, int64(v)
	} else {
		n.Kind, n.Float = record.FloatNode, v
	}
	return nil
}

func (p *jsonParser) str() (string, *jsonError) {
	var out []byte
	p.pos++
	for {
		c := p.next()
		switch {
		case p.pos >= len(p.text) || c < 0x20:
			return "", p.fail("a string does not end")
		case c == '"':
			p.pos++
			if !utf8.Valid(out) {
				return "", p.fail("a string is not UTF-8")
			}
			return string(out), nil
		case c != '\\':
			out = append(out, c)
			p.pos++
			continue
		}
		p.pos++
		if i := bytes.IndexByte([]byte(`"\/bfnrt`), p.next()); i >= 0 && p.pos < len(p.text) {
			out = append(out, "\"\\/\b\f\n\r\t"[i])
			p.pos++
			continue
		}
		r, err := p.escape()
		if err != nil {
			return "", err
		}
		out = utf8.AppendRune(out, r)
	}
}

// escape reads uXXXX, or two of them for a pair of surrogates.
func (p *jsonParser) escape() (rune, *jsonError) {
	unit := func() (rune, bool) {
		if p.pos+5 > len(p.text) || p.text[p.pos] != 'u' {
			return 0, false
		}
		v, err := strconv.ParseUint(string(p.text[p.pos+1:p.pos+5]), 16, 16)
		p.pos += 5
		return rune(v), err == nil
	}
	r, ok := unit()
	if ok && utf16.IsSurrogate(r) && p.next() == '\\' {
		p.pos++
		low, lowOK := unit()
		r, ok = utf16.DecodeRune(r, low), lowOK
	}
	if !ok || utf16.IsSurrogate(r) {
		return 0, p.fail("not an escape")
	}
	return r, nil
}
