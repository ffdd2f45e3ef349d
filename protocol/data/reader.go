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
	src  io.Reader
	size int64 // of the whole text as far as known; a guess for making room
	eof  bool
	err  error // from src, other than io.EOF

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
	if utf8.Valid(raw) {
		return nil
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
	q := quotedRecord{c: c, end: n, out: c.scratch[:0]}
	c.fields = c.fields[:0]
	for {
		f := field{from: len(q.out), place: q.at}
		var broken *fault
		if q.at < q.body() && q.raw()[q.at] == '"' {
			broken = q.inQuotes()
		} else {
			broken = q.bare()
		}
		if broken != nil || c.err != nil {
			return false, broken
		}
		f.to = len(q.out)
		c.fields = append(c.fields, f)
		if q.at >= q.body() {
			break
		}
		q.at++ // the comma
	}
	c.scratch, c.text, c.raw = q.out, q.out, q.raw()
	if broken := c.check(c.raw); broken != nil {
		return false, broken
	}
	c.start += q.end
	return true, nil
}

// quotedRecord is a record with quotes while it is read.
type quotedRecord struct {
	c   *reader
	at  int    // from the start of the record: the next byte
	end int    // of the lines read so far
	out []byte // the fields, without their quotes
}

func (q *quotedRecord) raw() []byte { return q.c.buf[q.c.start : q.c.start+q.end] }
func (q *quotedRecord) body() int   { return len(trimEnd(q.raw())) }

// bare reads a field without quotes.
func (q *quotedRecord) bare() *fault {
	text := q.raw()[q.at:q.body()]
	if i := bytes.IndexByte(text, ','); i >= 0 {
		text = text[:i]
	}
	if i := bytes.IndexByte(text, '"'); i >= 0 {
		f := q.c.faultAt("D113", q.raw(), q.at+i, "a quote inside a field that does not start with one")
		f.help = "put the whole field in quotes and double the quotes inside it"
		return f
	}
	q.out = append(q.out, text...)
	q.at += len(text)
	return nil
}

// inQuotes reads a field in quotes, over as many lines as it takes.
func (q *quotedRecord) inQuotes() *fault {
	open := q.at
	q.at++
	for {
		rest := q.raw()[q.at:]
		i := bytes.IndexByte(rest, '"')
		if i < 0 {
			q.out = append(q.out, trimEnd(rest)...)
			if bytes.HasSuffix(rest, []byte("\n")) {
				q.out = append(q.out, '\n')
			}
			q.at = q.end
			more, ok := q.c.lineEnd(q.end)
			if q.c.err != nil && q.c.err != errTooLong {
				return nil
			}
			if !ok || q.c.err != nil {
				return q.c.faultAt("D113", q.raw(), open, "this quote is never closed")
			}
			q.end += more
			q.c.lines++
			continue
		}
		q.out = append(q.out, rest[:i]...)
		q.at += i + 1
		if i+1 < len(rest) && rest[i+1] == '"' {
			q.out = append(q.out, '"')
			q.at++
			continue
		}
		if q.at < q.body() && q.raw()[q.at] != ',' {
			f := q.c.faultAt("D113", q.raw(), q.at, "text after a closing quote")
			f.help = "double the quotes inside a quoted field"
			return f
		}
		return nil
	}
}

// guessRows is about how many rows the whole text has, by the lines of the
// part that is in memory.
func (c *reader) guessRows() int {
	ahead := c.buf[c.start:c.end]
	lines := bytes.Count(ahead, []byte("\n")) + 1
	each := (len(ahead) + len(c.raw)) / lines
	return int(min(c.size, 1<<30))/max(1, each)*33/32 + 8
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
