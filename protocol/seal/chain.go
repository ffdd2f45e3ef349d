package seal

import (
	"bytes"
	"errors"
	"fmt"
	"strings"
	"time"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// head is the first line of every chain. The number is the version of the
// format.
const head = "steelyard seals 1"

// first stands where the first entry would name the entry before it.
const first = "-"

// Entry is one seal.
type Entry struct {
	Number     int
	Time       time.Time // UTC, whole seconds
	After      string    // Sum of the entry before; "-" in the first
	Engine     string    // version of the program that sealed
	Record     string    // SHA-256 of the whole record
	Defaults   []Default // what the plan left to the program, by path
	Results    []Sealed  // every entry with results that was known
	Deviations []Deviation
	Files      []File
	Plan       string // SHA-256 of Canonical
	Canonical  []byte // the plan, RFC 8785
	Sum        string // SHA-256 of all lines of the entry before this one

	Line int          // of its head in the chain, from 1
	plan *record.Node // Canonical, read
}

// Default is a value that the program chose for a key the plan left out, as a
// record would have it.
type Default struct{ Path, Value string }

// Name names an entry with results.
type Name struct {
	Kind    string // result, earlier, missing
	Study   string
	Outcome string
	Set     string
	Look    string // "", a number, "unplanned"
}

// Sealed is the digest of an entry with results.
type Sealed struct {
	Name
	SHA256 string
}

// Deviation is the digest of a declared deviation.
type Deviation struct{ SHA256, Date string }

// File is the digest of a data file.
type File struct{ SHA256, Path string }

// Chain is a chain as read: whole, or up to the entry that breaks it.
type Chain struct {
	Entries []Entry
	Broken  string // which entry, and how; "" when whole
}

// Last is the last entry; nil when there is none.
func (c *Chain) Last() *Entry {
	if c == nil || len(c.Entries) == 0 {
		return nil
	}
	return &c.Entries[len(c.Entries)-1]
}

// lines writes an entry without its last line.
func (e *Entry) lines() []byte {
	var b []byte
	line := func(format string, args ...any) { b = fmt.Appendf(b, format+"\n", args...) }
	quote := func(s string) string { return string(appendString(nil, s)) }
	line("seal %d", e.Number)
	line("time %s", e.Time.UTC().Format(time.RFC3339))
	line("after %s", e.After)
	line("engine %s", quote(e.Engine))
	line("record %s", e.Record)
	for _, d := range e.Defaults {
		line("default %s %s", d.Path, d.Value)
	}
	for _, r := range e.Results {
		line("%s %s %s %s %s %s", r.Kind, r.SHA256, quote(r.Study), quote(r.Outcome), quote(r.Set), quote(r.Look))
	}
	for _, d := range e.Deviations {
		line("deviation %s %s", d.SHA256, d.Date)
	}
	for _, f := range e.Files {
		line("data %s %s", f.SHA256, quote(f.Path))
	}
	line("plan %s", e.Plan)
	return append(append(b, e.Canonical...), '\n')
}

// Append adds an entry to a chain, which may be empty, and returns the new
// chain; its number, its link and its digests are filled in. The bytes that
// were there stay as they are. A chain with a fault, or a time before that of
// the last entry, is an error: then nothing may be written.
func Append(chain []byte, e Entry) ([]byte, *Entry, error) {
	c, faults := Parse("chain", chain)
	if faults.HasErrors() {
		return nil, nil, fmt.Errorf("the chain is broken: %s", c.Broken)
	}
	e.Time = e.Time.UTC().Truncate(time.Second)
	e.Number, e.After = 1, first
	if last := c.Last(); last != nil {
		e.Number, e.After = last.Number+1, last.Sum
		if e.Time.Before(last.Time) {
			return nil, nil, fmt.Errorf("the clock says %s, before seal %d of %s", e.Time.Format(time.RFC3339), last.Number, last.Time.Format(time.RFC3339))
		}
	}
	if len(e.Canonical) == 0 {
		return nil, nil, errors.New("there is no plan to seal")
	}
	e.Plan = Digest(e.Canonical)
	text := e.lines()
	e.Sum = Digest(text)
	out := append([]byte{}, chain...)
	if len(c.Entries) == 0 {
		out = []byte(head + "\n")
	}
	out = append(out, '\n')
	out = append(out, text...)
	out = fmt.Appendf(out, "sum %s\n", e.Sum)
	if _, faults := Parse("chain", out); faults.HasErrors() {
		return nil, nil, fmt.Errorf("the seal would not read back: %s", faults[0].Message)
	}
	return out, &e, nil
}

// Parse reads a chain strictly: every line is as the program writes it, every
// digest is computed again. Line ends of either kind are the same to it, so
// that a chain survives being checked out. It stops at the first entry that
// breaks; faults name file, line and column. An empty text is an empty chain.
func Parse(name string, text []byte) (*Chain, diag.List) {
	p := &chainParser{name: name, lines: strings.Split(string(bytes.ReplaceAll(text, []byte("\r\n"), []byte("\n"))), "\n")}
	c := &Chain{}
	if len(bytes.TrimSpace(text)) == 0 {
		return c, nil
	}
	if p.lines[0] != head {
		c.Broken = "it is no chain of seals"
		p.fault("L101", 1, "this is no chain of seals that this program can read", fmt.Sprintf("its first line is %q", head))
		return c, p.list
	}
	p.at = 1
	for p.at < len(p.lines) {
		if p.at == len(p.lines)-1 && p.lines[p.at] == "" {
			break
		}
		e := p.entry(c.Last())
		if e == nil {
			c.Broken = fmt.Sprintf("seal %d: %s", len(c.Entries)+1, p.list[len(p.list)-1].Message)
			break
		}
		c.Entries = append(c.Entries, *e)
	}
	return c, p.list
}

// chainParser reads a chain line by line.
type chainParser struct {
	name  string
	lines []string
	at    int // index of the next line
	list  diag.List
}

// fault adds an error at the beginning of a line, counted from 1.
func (p *chainParser) fault(code string, line int, message, help string) {
	p.faultAt(code, line, 1, message, help)
}

func (p *chainParser) faultAt(code string, line, column int, message, help string) {
	line = max(1, min(line, len(p.lines)))
	d := diag.Error(code, diag.Span{}, "%s", message).In(p.name, line, column, strings.ToValidUTF8(p.lines[line-1], "\ufffd"))
	d.Help = help
	p.list.Add(d)
}

const never = "a chain is never edited; take the file back from where it was kept"

// entry reads the next entry and checks it against the one before; nil when
// it breaks.
func (p *chainParser) entry(last *Entry) *Entry {
	number := 1
	if last != nil {
		number = last.Number + 1
	}
	if p.lines[p.at] != "" {
		p.fault("L102", p.at+1, "an empty line should part the seals", never)
		return nil
	}
	p.at++
	start := p.at
	e := &Entry{Line: start + 1, After: first}
	if !p.read(e, number) {
		return nil
	}
	// One entry has one text: what was read is written again and compared.
	body := p.lines[start : p.at-1]
	again := strings.Split(strings.TrimSuffix(string(e.lines()), "\n"), "\n")
	for i, line := range body {
		if i >= len(again) || line != again[i] {
			p.fault("L102", start+i+1, "this line is not as the program writes it", never)
			return nil
		}
	}
	after := first
	if last != nil {
		after = last.Sum
	}
	switch {
	case e.After != after:
		p.fault("L105", start+3, fmt.Sprintf("seal %d does not follow the one before it: that one was changed, replaced or removed", number), never)
		return nil
	case Digest(e.Canonical) != e.Plan:
		p.fault("L106", p.at-1, fmt.Sprintf("the plan in seal %d is not the plan that was sealed: its digest differs", number), never)
		return nil
	case Digest(e.lines()) != e.Sum:
		p.fault("L104", start+1, fmt.Sprintf("seal %d was changed after it was made: its digest differs", number), never)
		return nil
	case last != nil && e.Time.Before(last.Time):
		p.fault("L107", start+2, fmt.Sprintf("seal %d is older than the seal before it", number), "the clock was wrong when one of them was made")
		return nil
	}
	plan, err := parseCanonical(e.Canonical)
	if err != nil || plan.Kind != record.TableNode {
		at, what := 0, "not a table"
		if err != nil {
			at, what = err.at, err.message
		}
		p.faultAt("L106", p.at-1, len([]rune(strings.ToValidUTF8(string(e.Canonical[:at]), "\ufffd")))+1,
			fmt.Sprintf("the plan in seal %d cannot be read: %s", number, what), never)
		return nil
	}
	e.plan = plan
	return e
}
