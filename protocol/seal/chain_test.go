package seal

import (
	"bytes"
	"fmt"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"steelyard/protocol/data"
	"steelyard/protocol/diag"
	"steelyard/protocol/read"
	"steelyard/protocol/record"
)

const planned = `steelyard = 1
[record]
title   = "Pouch seal strength with the new adhesive (invented)"
setting = "quality"
[plan]
question = "Is the new adhesive as strong as the current one, to within 0.8 N?"
alpha    = { one_sided = 0.05 }
[plan.outcome.peel]
label    = "Seal peel strength"
unit     = "N"
measure  = "mean-difference"
groups   = ["new", "current"]
smallest = 0.8
why      = "Below 0.8 N the difference is lost in the line's own lot-to-lot spread."
[plan.hypothesis.H1]
outcome = "peel"
claim   = "equivalent"
`

const arrived = `[[result]]
study   = "Lot 0412"
outcome = "peel"
date    = 2026-04-12
source  = "Notebook 3"
groups.new     = { n = 24, mean = 11.92, sd = 1.31 }
groups.current = { n = 24, mean = 12.10, sd = 1.18 }
`

func load(t *testing.T, text string) *record.Record {
	t.Helper()
	rec, list := read.Record(diag.NewSource("a.toml", []byte(text)))
	for _, d := range list {
		if d.Severity == diag.SeverityError && d.Code != "R208" { // sealing asks not what is computed
			t.Fatalf("%v\n%s", d, text)
		}
	}
	return rec
}

func at(s string) time.Time {
	v, err := time.Parse(time.RFC3339, s)
	if err != nil {
		panic(err)
	}
	return v
}

// sealed appends a seal of a record and returns the chain.
func sealed(t *testing.T, chain []byte, text, when string, tables data.Tables) []byte {
	t.Helper()
	chain, _, err := Append(chain, New(load(t, text), tables, "0.1.0", at(when)))
	if err != nil {
		t.Fatal(err)
	}
	return chain
}

// three is a chain of three seals with something of every kind in it.
func three(t *testing.T) []byte {
	t.Helper()
	deviation := "[[deviation]]\ndate = 2026-05-02\nwhat = \"The level was lowered.\"\nwhy = \"On request of the buyer.\"\nresults_known = true\nchanges = [\"plan.alpha.one_sided\"]\n"
	missing := "[[missing_result]]\nstudy = \"Lot \\\"0409\\\"\"\noutcome = \"peel\"\nwhy = \"The pouches were thrown away.\"\n"
	chain := sealed(t, nil, planned, "2026-04-01T08:00:00Z", nil)
	chain = sealed(t, chain, planned+arrived+missing, "2026-04-20T10:30:00+02:00", nil)
	tables := data.Tables{{Entry: 0}: {File: "data/lot 1.csv", SHA256: Digest([]byte("x"))}}
	return sealed(t, chain, strings.Replace(planned, "0.05", "0.025", 1)+arrived+missing+deviation, "2026-05-03T08:00:00.9Z", tables)
}

func TestChainText(t *testing.T) {
	chain := three(t)
	c, faults := Parse("a.seal", chain)
	if len(faults) > 0 || len(c.Entries) != 3 || c.Broken != "" {
		t.Fatal(faults)
	}
	lines := strings.Split(string(chain), "\n")
	e := c.Entries[2]
	digest := func(s string) string { return Digest([]byte(s)) }
	want := []string{
		"seal 3", "time 2026-05-03T08:00:00Z", "after " + c.Entries[1].Sum, `engine "0.1.0"`, "record " + e.Record,
		`default plan.hypothesis.H1.method "welch"`, `default plan.hypothesis.H1.role "primary"`, `default plan.level 0.95`,
		`default plan.outcome.peel.better "neither"`, `default plan.outcome.peel.design "independent"`, `default plan.outcome.peel.distribution "normal"`,
		"result " + digest(`{"date":"2026-04-12","groups":{"current":{"mean":12.1,"n":24,"sd":1.18},"new":{"mean":11.92,"n":24,"sd":1.31}},"outcome":"peel","study":"Lot 0412"}`) + ` "Lot 0412" "peel" "" ""`,
		"missing " + digest(`{"outcome":"peel","study":"Lot \"0409\"","why":"The pouches were thrown away."}`) + ` "Lot \"0409\"" "peel" "" ""`,
		"deviation " + e.Deviations[0].SHA256 + " 2026-05-02",
		"data " + digest("x") + ` "data/lot 1.csv"`,
		"plan " + e.Plan, string(e.Canonical), "sum " + e.Sum, "",
	}
	got := lines[e.Line-1:]
	if !strings.Contains(string(e.Canonical), `"alpha":{"one_sided":0.025}`) || e.Plan != digest(string(e.Canonical)) {
		t.Errorf("plan %s", e.Canonical)
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
	if c.Entries[0].After != "-" || c.Entries[1].After != c.Entries[0].Sum || c.Entries[1].Time != at("2026-04-20T08:30:00Z") {
		t.Errorf("%+v", c.Entries[1])
	}
	// Line ends are the checkout's, not the chain's.
	if c2, faults := Parse("a.seal", bytes.ReplaceAll(chain, []byte("\n"), []byte("\r\n"))); len(faults) > 0 || len(c2.Entries) != 3 {
		t.Errorf("CRLF: %v", faults)
	}
	if c, faults := Parse("a.seal", []byte(" \n")); len(faults) > 0 || len(c.Entries) != 0 {
		t.Errorf("empty chain: %v", faults)
	}
}

// Any byte that is changed, added or taken away breaks the chain, at a line
// of the entry it stands in or of the one behind; earlier entries stay.
func TestChainEveryByte(t *testing.T) {
	chain := three(t)
	whole, _ := Parse("a.seal", chain)
	lineOf := func(i int) int { return bytes.Count(chain[:i], []byte("\n")) + 1 }
	check := func(i int, text []byte, what string) {
		c, faults := Parse("a.seal", text)
		if !faults.HasErrors() || c.Broken == "" {
			t.Fatalf("byte %d (line %d) %s: not noticed", i, lineOf(i), what)
		}
		before := 0
		for _, e := range whole.Entries {
			if e.Line <= lineOf(i)-20 {
				before++
			}
		}
		if f := faults[0]; f.Line < 1 || f.Line > bytes.Count(text, []byte("\n"))+1 || f.Column < 1 || len(c.Entries) < before-1 {
			t.Fatalf("byte %d %s: %+v, %d entries", i, what, f, len(c.Entries))
		}
	}
	for i := range chain {
		changed := bytes.Clone(chain)
		changed[i] ^= 1
		check(i, changed, "changed")
		check(i, append(append(bytes.Clone(chain[:i]), 'a'), chain[i:]...), "added")
		check(i, append(bytes.Clone(chain[:i]), chain[i+1:]...), "taken away")
	}
}

func TestChainBroken(t *testing.T) {
	chain := string(three(t))
	c, _ := Parse("a.seal", []byte(chain))
	blocks := strings.SplitAfter(chain, "\n\n")
	line := func(e, n int) int { return c.Entries[e].Line + n }
	lastLine := strings.Count(chain, "\n")
	resum := func(text string, e int) string { // changes an entry and makes its own sum right again
		old := string(c.Entries[e].lines())
		return strings.Replace(strings.Replace(chain, old, text, 1), "sum "+c.Entries[e].Sum, "sum "+Digest([]byte(text)), 1)
	}
	second := string(c.Entries[1].lines())
	for _, tt := range []struct {
		name, text, code string
		line             int
		broken           string
	}{
		{"another file", "hello\n", "L101", 1, "it is no chain of seals"},
		{"a later format", strings.Replace(chain, "seals 1", "seals 2", 1), "L101", 1, "it is no chain of seals"},
		{"second removed", blocks[0] + blocks[1] + blocks[3], "L103", line(1, 0), "seal 2: seal 2 should stand here: a seal was removed, added or moved"},
		{"order", blocks[0] + blocks[2] + blocks[1] + blocks[3], "L103", line(0, 0), "seal 1: seal 1 should stand here: a seal was removed, added or moved"},
		{"a number", strings.Replace(chain, "time 2026-04-20T08", "time 2026-04-20T07", 1), "L104", line(1, 0), "seal 2: seal 2 was changed after it was made: its digest differs"},
		{"time zone", strings.Replace(chain, "08:30:00Z", "10:30:00+02:00", 1), "L102", line(1, 1), "seal 2: this is no time in UTC"},
		{"changed with its sum", resum(strings.Replace(second, "T08:30", "T08:31", 1), 1), "L105", line(2, 2), "seal 3: seal 3 does not follow the one before it: that one was changed, replaced or removed"},
		{"plan", strings.Replace(chain, `"one_sided":0.05`, `"one_sided":0.04`, 1), "L106", line(0, 12), "seal 1: the plan in seal 1 is not the plan that was sealed: its digest differs"},
		{"cut", chain[:len(chain)-80], "L102", lastLine - 1, "seal 3: the chain ends inside a seal"},
		{"last newline", chain[:len(chain)-1], "L102", lastLine, "seal 3: the last line does not end"},
	} {
		got, faults := Parse("a.seal", []byte(tt.text))
		if len(faults) != 1 || faults[0].Code != tt.code || faults[0].Line != tt.line || got.Broken != tt.broken || faults[0].Severity != diag.SeverityError {
			t.Errorf("%s: %v, broken %q; want %s on line %d, %q", tt.name, faults, got.Broken, tt.code, tt.line, tt.broken)
		}
	}
}

// What only a whole entry made anew can carry is still looked at.
func TestChainForged(t *testing.T) {
	forge := func(change func(*Entry)) diag.List {
		c, _ := Parse("a.seal", three(t))
		e := c.Entries[0]
		change(&e)
		text := e.lines()
		_, faults := Parse("a.seal", fmt.Appendf(nil, "%s\n\n%ssum %s\n", head, text, Digest(text)))
		return faults
	}
	if faults := forge(func(*Entry) {}); len(faults) > 0 {
		t.Fatal(faults)
	}
	for name, tt := range map[string]struct {
		change func(*Entry)
		code   string
	}{
		"plan is no table":      {func(e *Entry) { e.Canonical = []byte("[]"); e.Plan = Digest(e.Canonical) }, "L106"},
		"plan is not canonical": {func(e *Entry) { e.Canonical = []byte(`{"b":1,"a":1}`); e.Plan = Digest(e.Canonical) }, "L106"},
		"link of the first":     {func(e *Entry) { e.After = e.Sum }, "L105"},
		"digest":                {func(e *Entry) { e.Record = "x" }, "L102"},
		"plan digest":           {func(e *Entry) { e.Plan = Digest(nil) }, "L106"},
	} {
		if faults := forge(tt.change); len(faults) != 1 || faults[0].Code != tt.code {
			t.Errorf("%s: %v, want %s", name, faults, tt.code)
		}
	}
	c, _ := Parse("a.seal", three(t))
	chain := []byte(head + "\n")
	for i, when := range []string{"2026-04-02T00:00:00Z", "2026-04-01T00:00:00Z"} {
		e := c.Entries[0]
		e.Number, e.Time = i+1, at(when)
		if i > 0 {
			e.After = lastSum(chain)
		}
		text := e.lines()
		chain = fmt.Appendf(append(append(chain, '\n'), text...), "sum %s\n", Digest(text))
	}
	if _, faults := Parse("a.seal", chain); len(faults) != 1 || faults[0].Code != "L107" {
		t.Errorf("time runs backwards: %v", faults)
	}
}

func lastSum(chain []byte) string {
	return string(chain[bytes.LastIndex(chain, []byte("sum "))+4 : len(chain)-1])
}

func TestAppend(t *testing.T) {
	chain := three(t)
	e := New(load(t, planned), nil, "0.2.0", at("2026-06-01T00:00:00Z"))
	longer, made, err := Append(chain, e)
	if err != nil || !bytes.HasPrefix(longer, chain) || made.Number != 4 || made.Sum != lastSum(longer) {
		t.Fatalf("%v %+v", err, made)
	}
	e.Time = at("2026-05-03T07:59:59Z")
	if _, _, err := Append(chain, e); err == nil || !strings.Contains(err.Error(), "before seal 3") {
		t.Errorf("a clock that went back: %v", err)
	}
	if _, _, err := Append(chain[:len(chain)-1], e); err == nil {
		t.Error("a broken chain grows")
	}
	if _, _, err := Append(nil, Entry{}); err == nil {
		t.Error("a seal without a plan")
	}
}

func FuzzParse(f *testing.F) {
	chain := sealedOnce()
	f.Add(chain)
	f.Add([]byte(head + "\n\nseal 1\ntime 2026-04-01T08:00:00Z\nafter -\nengine \"\"\n"))
	f.Add([]byte(strings.ReplaceAll(string(chain), "\n", "\r\n")))
	f.Fuzz(func(t *testing.T, text []byte) {
		c, faults := Parse("a.seal", text)
		lines := bytes.Count(text, []byte("\n")) + 1
		for _, d := range faults {
			if d.Line < 1 || d.Line > lines || d.Column < 1 || d.Column > len(text)+1 {
				t.Fatalf("place outside: %+v", d)
			}
		}
		if (c.Broken != "") != faults.HasErrors() {
			t.Fatalf("broken %q, faults %v", c.Broken, faults)
		}
		if len(faults) == 0 && len(c.Entries) > 0 {
			again := []byte(head + "\n")
			for _, e := range c.Entries {
				again = fmt.Appendf(append(append(again, '\n'), e.lines()...), "sum %s\n", e.Sum)
			}
			if !bytes.Equal(again, bytes.ReplaceAll(text, []byte("\r\n"), []byte("\n"))) {
				t.Fatalf("accepted, and written otherwise:\n%s", text)
			}
		}
	})
}

// sealedOnce is a chain of one seal.
func sealedOnce() []byte {
	rec, _ := read.Record(diag.NewSource("a.toml", []byte(planned)))
	chain, _, err := Append(nil, New(rec, nil, "0.1.0", at("2026-04-01T08:00:00Z")))
	if err != nil {
		panic(err)
	}
	return chain
}
