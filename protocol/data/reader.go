package data

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"unicode/utf8"
)

// reader splits a CSV text into records the way RFC 4180 and encoding/csv do:
// comma between fields, quotes doubled inside quotes, lines ended by LF or
// CRLF, empty lines skipped, no lazy quotes. A leading byte-order mark is
// dropped. Beyond that it refuses what is not UTF-8 and what holds NUL. It
// keeps one record in memory.
//
// After next has returned true, fields, line and the place of every field
// describe that record until the following call.
type reader struct {
	src io.Reader
	eof bool
	err error // from src, other than io.EOF

	buf        []byte
	start, end int // unread bytes of buf

	fields []field // of the record; offsets into text
	text   []byte  // raw for a plain record, unquoted otherwise
	raw    []byte  // the record as it stands in the file, line end included
	line   int     // line on which the record starts, from 1
	blank  int     // empty lines skipped right before the record

	lines   int // lines read so far
	scratch []byte
}

// field is one field: its text, and where it starts in the raw record.
type field struct{ from, to, place int }

// maxRecord bounds one record, so that an open quote cannot fill the memory.
const maxRecord = 32 << 20

const firstBuffer = 256 << 10

// fault is a broken record: a code and where it is in the raw record.
type fault struct {
	code    string
	message string
	help    string
	line    int
	column  int
	excerpt string
}

func (f *fault) Error() string { return fmt.Sprintf("%d:%d: %s", f.line, f.column, f.message) }

var errTooLong = errors.New("record too long")

func newReader(src io.Reader) *reader {
	return &reader{src: src, buf: make([]byte, firstBuffer)}
}

// fill reads more behind the unread bytes. It reports whether any came.
func (c *reader) fill() bool {
	if c.eof || c.err != nil {
		return false
	}
	if c.start > 0 {
		copy(c.buf, c.buf[c.start:c.end])
		c.end -= c.start
		c.start = 0
	}
	if c.end == len(c.buf) {
		if len(c.buf) >= maxRecord {
			c.err = errTooLong
			return false
		}
		grown := make([]byte, 2*len(c.buf))
		copy(grown, c.buf[:c.end])
		c.buf = grown
	}
	for range 100 {
		n, err := c.src.Read(c.buf[c.end:])
		c.end += n
		if err == io.EOF {
			c.eof = true
		} else if err != nil {
			c.err = err
		}
		if n > 0 || err != nil {
			return n > 0
		}
	}
	c.err = io.ErrNoProgress
	return false
}

// lineEnd returns the length of the line that starts from bytes into the
// unread text, its end included, and whether there is one.
func (c *reader) lineEnd(from int) (n int, ok bool) {
	seen := from
	for {
		if i := bytes.IndexByte(c.buf[c.start+seen:c.end], '\n'); i >= 0 {
			return seen + i + 1 - from, true
		}
		seen = c.end - c.start
		if !c.fill() {
			return seen - from, seen > from
		}
	}
}

// next reads one record. It returns false at the end of the text or at a
// fault; a fault of the file system is in err.
func (c *reader) next() (bool, *fault) {
	c.blank = 0
	for {
		if c.lines == 0 {
			c.skipMark()
		}
		n, ok := c.lineEnd(0)
		if c.err != nil {
			return false, c.broken()
		}
		if !ok {
			return false, nil
		}
		line := c.buf[c.start : c.start+n]
		c.lines++
		c.line = c.lines
		body := trimEnd(line)
		if len(body) == 0 {
			c.start += n
			c.blank++
			continue
		}
		c.raw = line
		switch plain, ascii := c.split(body); {
		case !plain:
			return c.quoted(n)
		case !ascii:
			if f := c.check(line); f != nil {
				return false, f
			}
		}
		c.text = body
		c.start += n
		return true, nil
	}
}

// broken turns an error of the source into a fault where it is the text's.
func (c *reader) broken() *fault {
	if c.err != errTooLong {
		return nil
	}
	return &fault{code: "D113", line: c.lines + 1, column: 1,
		message: "a row is longer than 32 MiB: a quote that is never closed?"}
}

func (c *reader) skipMark() {
	for c.end-c.start < 3 && c.fill() {
	}
	if bytes.HasPrefix(c.buf[c.start:c.end], []byte("\ufeff")) {
		c.start += 3
	}
}

// trimEnd cuts LF, CRLF, or a last CR.
func trimEnd(line []byte) []byte {
	if n := len(line); n > 0 && line[n-1] == '\n' {
		line = line[:n-1]
	}
	if n := len(line); n > 0 && line[n-1] == '\r' {
		line = line[:n-1]
	}
	return line
}

// split cuts a line at its commas. It reports whether the line is plain, that
// is without quotes, and whether it is ASCII without NUL.
func (c *reader) split(line []byte) (plain, ascii bool) {
	fields, from, ascii := c.fields[:0], 0, true
	for i, b := range line {
		if b > ',' {
			if b >= utf8.RuneSelf {
				ascii = false
			}
			continue
		}
		switch b {
		case ',':
			fields = append(fields, field{from, i, from})
			from = i + 1
		case '"':
			return false, false
		case 0:
			ascii = false
		}
	}
	c.fields = append(fields, field{from, len(line), from})
	return true, ascii
}

// check refuses NUL and what is not UTF-8.
func (c *reader) check(raw []byte) *fault {
	if i := bytes.IndexByte(raw, 0); i >= 0 {
		f := c.faultAt("D107", raw, i, "the file holds a NUL byte")
		f.help = "save the file as UTF-8 text with commas between the columns"
		return f
	}
	for i := 0; i < len(raw); {
		r, size := utf8.DecodeRune(raw[i:])
		if r == utf8.RuneError && size == 1 {
			f := c.faultAt("D106", raw, i, fmt.Sprintf("byte 0x%02X is not UTF-8", raw[i]))
			f.help = "save the file as UTF-8"
			return f
		}
		i += size
	}
	return nil
}

// quoted reads a record that has quotes. n is the length of its first line.
func (c *reader) quoted(n int) (bool, *fault) {
	fields, out := c.fields[:0], c.scratch[:0]
	at, end := 0, n // both from the start of the record
	for {
		body := len(trimEnd(c.buf[c.start : c.start+end]))
		field := field{from: len(out), place: at}
		if at >= body || c.buf[c.start+at] != '"' {
			stop := bytes.IndexByte(c.buf[c.start+at:c.start+body], ',')
			if stop < 0 {
				stop = body - at
			}
			if q := bytes.IndexByte(c.buf[c.start+at:c.start+at+stop], '"'); q >= 0 {
				f := c.faultAt("D113", c.buf[c.start:c.start+end], at+q, "a quote inside a field that does not start with one")
				f.help = "put the whole field in quotes and double the quotes inside it"
				return false, f
			}
			out = append(out, c.buf[c.start+at:c.start+at+stop]...)
			at += stop
		} else {
			open := at
			at++
			for {
				q := bytes.IndexByte(c.buf[c.start+at:c.start+end], '"')
				if q < 0 {
					line := c.buf[c.start+at : c.start+end]
					body := trimEnd(line)
					out = append(out, body...)
					if bytes.HasSuffix(line, []byte("\n")) {
						out = append(out, '\n')
					}
					at = end
					more, ok := c.lineEnd(end)
					if c.err != nil && c.err != errTooLong {
						return false, nil
					}
					if !ok || c.err != nil {
						return false, c.faultAt("D113", c.buf[c.start:c.start+end], open, "this quote is never closed")
					}
					end += more
					c.lines++
					continue
				}
				out = append(out, c.buf[c.start+at:c.start+at+q]...)
				at += q + 1
				if at < end && c.buf[c.start+at] == '"' {
					out = append(out, '"')
					at++
					continue
				}
				break
			}
			if body = len(trimEnd(c.buf[c.start : c.start+end])); at < body && c.buf[c.start+at] != ',' {
				f := c.faultAt("D113", c.buf[c.start:c.start+end], at, "text after a closing quote")
				f.help = "double the quotes inside a quoted field"
				return false, f
			}
		}
		field.to = len(out)
		fields = append(fields, field)
		if at >= len(trimEnd(c.buf[c.start:c.start+end])) {
			break
		}
		at++ // the comma
	}
	c.fields, c.scratch, c.text = fields, out, out
	c.raw = c.buf[c.start : c.start+end]
	if f := c.check(c.raw); f != nil {
		return false, f
	}
	c.start += end
	return true, nil
}

// cell is field i of the record without the blanks around it.
func (c *reader) cell(i int) []byte {
	f := c.fields[i]
	b := c.text[f.from:f.to]
	for len(b) > 0 && (b[0] == ' ' || b[0] == '\t') {
		b = b[1:]
	}
	for len(b) > 0 && (b[len(b)-1] == ' ' || b[len(b)-1] == '\t') {
		b = b[:len(b)-1]
	}
	return b
}

// place returns line and column of field i in the file, and that line.
func (c *reader) place(i int) (line, column int, excerpt string) {
	return c.placeOf(c.raw, c.fields[i].place)
}

func (c *reader) placeOf(raw []byte, offset int) (line, column int, excerpt string) {
	before := raw[:offset]
	head := bytes.LastIndexByte(before, '\n') + 1
	line = c.line + bytes.Count(before, []byte("\n"))
	text := raw[head:]
	if i := bytes.IndexByte(text, '\n'); i >= 0 {
		text = text[:i]
	}
	return line, utf8.RuneCount(before[head:]) + 1, string(bytes.ToValidUTF8(trimEnd(text), []byte("\ufffd")))
}

func (c *reader) faultAt(code string, raw []byte, offset int, message string) *fault {
	line, column, excerpt := c.placeOf(raw, offset)
	return &fault{code: code, message: message, line: line, column: column, excerpt: excerpt}
}
