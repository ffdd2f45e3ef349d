package seal

import (
	"fmt"
	"strconv"
	"strings"
	"time"
)

// read takes the lines of an entry, its last line included.
func (p *chainParser) read(e *Entry, number int) bool {
	n, ok := p.word("seal")
	if !ok {
		return false
	}
	if v, err := strconv.Atoi(n); err != nil || v != number {
		p.fault("L103", p.at, fmt.Sprintf("seal %d should stand here: a seal was removed, added or moved", number), never)
		return false
	}
	e.Number = number
	at, ok := p.word("time")
	if !ok {
		return false
	}
	var err error
	if e.Time, err = time.Parse(time.RFC3339, at); err != nil || !strings.HasSuffix(at, "Z") {
		p.faultAt("L102", p.at, 6, "this is no time in UTC", never)
		return false
	}
	e.Time = e.Time.UTC()
	if e.After, ok = p.word("after"); !ok {
		return false
	}
	if e.After != first && !p.digest(e.After, 7) {
		return false
	}
	engine, ok := p.word("engine")
	if !ok {
		return false
	}
	texts, ok := p.texts(engine, 8, 1)
	if !ok {
		return false
	}
	e.Engine = texts[0]
	if e.Record, ok = p.word("record"); !ok || !p.digest(e.Record, 8) {
		return false
	}
	for p.list == nil {
		switch keyword, rest, _ := strings.Cut(p.peek(), " "); keyword {
		case "default", "result", "earlier", "missing", "deviation", "data":
			p.at++
			if !p.item(e, keyword, rest) {
				return false
			}
		default:
			return p.end(e)
		}
	}
	return false
}

// end takes the plan and the sum.
func (p *chainParser) end(e *Entry) (ok bool) {
	if e.Plan, ok = p.word("plan"); !ok || !p.digest(e.Plan, 6) {
		return false
	}
	e.Canonical = []byte(p.peek())
	p.at++
	if e.Sum, ok = p.word("sum"); !ok || !p.digest(e.Sum, 5) {
		return false
	}
	if p.at == len(p.lines) {
		p.fault("L102", p.at, "the last line does not end", never)
		return false
	}
	return true
}

// item takes one line of the lists of an entry.
func (p *chainParser) item(e *Entry, keyword, rest string) bool {
	column := len(keyword) + 2
	value, more, _ := strings.Cut(rest, " ")
	if keyword == "default" {
		e.Defaults = append(e.Defaults, Default{value, more})
		return true
	}
	if !p.digest(value, column) {
		return false
	}
	column += len(value) + 1
	switch keyword {
	case "deviation":
		e.Deviations = append(e.Deviations, Deviation{value, more})
		return true
	case "data":
		texts, ok := p.texts(more, column, 1)
		if ok {
			e.Files = append(e.Files, File{value, texts[0]})
		}
		return ok
	}
	texts, ok := p.texts(more, column, 4)
	if ok {
		e.Results = append(e.Results, Sealed{Name{keyword, texts[0], texts[1], texts[2], texts[3]}, value})
	}
	return ok
}

// peek is the next line, "" at the end.
func (p *chainParser) peek() string {
	if p.at < len(p.lines) {
		return p.lines[p.at]
	}
	return ""
}

// word takes the next line, which must begin with a keyword.
func (p *chainParser) word(keyword string) (string, bool) {
	rest, ok := strings.CutPrefix(p.peek(), keyword+" ")
	if !ok {
		what := "the chain ends inside a seal"
		if p.at < len(p.lines)-1 || p.peek() != "" {
			what = fmt.Sprintf("a line %q should stand here", keyword+" …")
		}
		p.fault("L102", p.at+1, what, never)
		return "", false
	}
	p.at++
	return rest, true
}

// digest checks that a text has the form of a SHA-256.
func (p *chainParser) digest(s string, column int) bool {
	if len(s) == 64 && strings.Trim(s, "0123456789abcdef") == "" {
		return true
	}
	p.faultAt("L102", p.at, column, "this is no SHA-256", never)
	return false
}

// texts takes so many quoted texts, parted by blanks, to the end of a line.
func (p *chainParser) texts(s string, column, count int) (out []string, ok bool) {
	j := &jsonParser{text: []byte(s)}
	for i := range count {
		if i > 0 && j.next() == ' ' {
			j.pos++
		}
		if j.next() != '"' {
			break
		}
		t, err := j.str()
		if err != nil {
			break
		}
		out = append(out, t)
	}
	if len(out) != count || j.pos != len(s) {
		p.faultAt("L102", p.at, min(column, len([]rune(p.lines[p.at-1]))+1), "quoted texts should stand here", never)
		return nil, false
	}
	return out, true
}
