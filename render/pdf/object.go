package pdf

import (
	"bytes"
	"compress/zlib"
	"errors"
	"io"
	"strconv"
)

// Values of a PDF being read: nil, float64, pdfName, []byte for strings,
// pdfRef, []any and pdfDict.
type (
	pdfName string
	pdfRef  int
	pdfDict map[pdfName]any
)

// parser reads values from bytes that may be anything. It goes only forward,
// and no deeper than maxDepth.
type parser struct {
	b     []byte
	i     int
	depth int
	left  *int // values that may still be read; nil for no bound
}

const maxDepth = 40

var errSyntax = errors.New("not a PDF value")

func space(c byte) bool {
	return c == ' ' || c == '\n' || c == '\r' || c == '\t' || c == '\f' || c == 0
}

func delimiter(c byte) bool {
	switch c {
	case '(', ')', '<', '>', '[', ']', '{', '}', '/', '%':
		return true
	}
	return space(c)
}

func (p *parser) skip() {
	for p.i < len(p.b) {
		switch c := p.b[p.i]; {
		case space(c):
			p.i++
		case c == '%':
			for p.i < len(p.b) && p.b[p.i] != '\n' && p.b[p.i] != '\r' {
				p.i++
			}
		default:
			return
		}
	}
}

// keyword takes w if it stands here.
func (p *parser) keyword(w string) bool {
	p.skip()
	if len(p.b)-p.i < len(w) || string(p.b[p.i:p.i+len(w)]) != w {
		return false
	}
	p.i += len(w)
	return true
}

func (p *parser) value() (any, error) {
	p.skip()
	if p.i >= len(p.b) {
		return nil, errSyntax
	}
	if p.depth++; p.depth > maxDepth {
		return nil, errSyntax
	}
	if p.left != nil {
		if *p.left--; *p.left < 0 {
			return nil, errSyntax
		}
	}
	defer func() { p.depth-- }()
	switch c := p.b[p.i]; {
	case c == '/':
		p.i++
		return p.name(), nil
	case c == '(':
		return p.literal()
	case c == '<' && p.i+1 < len(p.b) && p.b[p.i+1] == '<':
		p.i += 2
		return p.dict()
	case c == '<':
		return p.hex()
	case c == '[':
		p.i++
		var out []any
		for !p.keyword("]") {
			v, err := p.value()
			if err != nil {
				return nil, err
			}
			out = append(out, v)
		}
		return out, nil
	case c >= '0' && c <= '9' || c == '-' || c == '+' || c == '.':
		return p.number()
	}
	start := p.i
	for p.i < len(p.b) && !delimiter(p.b[p.i]) {
		p.i++
	}
	switch string(p.b[start:p.i]) {
	case "null", "true", "false":
		return nil, nil
	}
	return nil, errSyntax
}

func (p *parser) name() pdfName {
	var out []byte
	for p.i < len(p.b) && !delimiter(p.b[p.i]) {
		c := p.b[p.i]
		if c == '#' && p.i+2 < len(p.b) {
			if v, err := strconv.ParseUint(string(p.b[p.i+1:p.i+3]), 16, 8); err == nil {
				c = byte(v)
				p.i += 2
			}
		}
		out = append(out, c)
		p.i++
	}
	return pdfName(out)
}

// number reads a number, or a reference when "generation R" follows.
func (p *parser) number() (any, error) {
	start := p.i
	for p.i < len(p.b) && !delimiter(p.b[p.i]) {
		p.i++
	}
	v, err := strconv.ParseFloat(string(p.b[start:p.i]), 64)
	if err != nil {
		return nil, errSyntax
	}
	if n := int(v); v >= 0 && v < 1e7 && v == float64(n) {
		at := p.i
		p.skip()
		digits := 0
		for p.i < len(p.b) && p.b[p.i] >= '0' && p.b[p.i] <= '9' && digits < 6 {
			p.i, digits = p.i+1, digits+1
		}
		if digits > 0 && p.keyword("R") && (p.i == len(p.b) || delimiter(p.b[p.i])) {
			return pdfRef(n), nil
		}
		p.i = at
	}
	return v, nil
}

func (p *parser) dict() (any, error) {
	out := pdfDict{}
	for !p.keyword(">>") {
		if !p.keyword("/") {
			return nil, errSyntax
		}
		key := p.name()
		v, err := p.value()
		if err != nil {
			return nil, err
		}
		out[key] = v
	}
	return out, nil
}

func (p *parser) hex() (any, error) {
	p.i++
	var out []byte
	half, odd := byte(0), false
	for ; p.i < len(p.b); p.i++ {
		c := p.b[p.i]
		switch {
		case c == '>':
			p.i++
			if odd {
				out = append(out, half<<4)
			}
			return out, nil
		case space(c):
			continue
		case c >= '0' && c <= '9':
			c -= '0'
		case c >= 'a' && c <= 'f':
			c -= 'a' - 10
		case c >= 'A' && c <= 'F':
			c -= 'A' - 10
		default:
			return nil, errSyntax
		}
		if odd {
			out = append(out, half<<4|c)
		}
		half, odd = c, !odd
	}
	return nil, errSyntax
}

func (p *parser) literal() (any, error) {
	p.i++
	out := []byte{}
	for depth := 1; p.i < len(p.b); p.i++ {
		c := p.b[p.i]
		switch c {
		case '(':
			depth++
		case ')':
			if depth--; depth == 0 {
				p.i++
				return out, nil
			}
		case '\\':
			if p.i++; p.i >= len(p.b) {
				return nil, errSyntax
			}
			var drop bool
			if c, drop = p.escaped(); drop {
				continue
			}
		}
		out = append(out, c)
	}
	return nil, errSyntax
}

// escaped is the character after a backslash; a line end there is dropped.
func (p *parser) escaped() (c byte, drop bool) {
	switch c = p.b[p.i]; c {
	case 'n':
		return '\n', false
	case 'r':
		return '\r', false
	case 't':
		return '\t', false
	case 'b':
		return '\b', false
	case 'f':
		return '\f', false
	case '\n', '\r':
		return 0, true
	}
	if c < '0' || c > '7' {
		return c, false
	}
	v := 0
	for n := 0; n < 3 && p.i < len(p.b) && p.b[p.i] >= '0' && p.b[p.i] <= '7'; n++ {
		v = v*8 + int(p.b[p.i]-'0')
		p.i++
	}
	p.i--
	return byte(v), false
}

// inflate undoes a stream's filter, taking no more than *budget bytes.
func inflate(d pdfDict, data []byte, budget *int) ([]byte, error) {
	filter := d["Filter"]
	if list, ok := filter.([]any); ok {
		switch len(list) {
		case 0:
			filter = nil
		case 1:
			filter = list[0]
		default:
			return nil, errFilter
		}
	}
	switch filter {
	case nil:
		if n, ok := d["Length"].(float64); ok && n >= 0 && int(n) < len(data) {
			data = data[:int(n)]
		}
		if *budget -= len(data); *budget < 0 {
			return nil, errTooLarge
		}
		return data, nil
	case pdfName("FlateDecode"), pdfName("Fl"):
	default:
		return nil, errFilter
	}
	r, err := zlib.NewReader(bytes.NewReader(data))
	if err != nil {
		return nil, err
	}
	out, err := io.ReadAll(io.LimitReader(r, int64(*budget)+1))
	if *budget -= len(out); *budget < 0 {
		return nil, errTooLarge
	}
	return out, err
}

var (
	errFilter   = errors.New("its stream has a filter other than Flate")
	errTooLarge = errors.New("its streams are too large when unpacked")
	errTooMany  = errors.New("the PDF holds more objects than are looked at")
)
