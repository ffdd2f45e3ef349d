// Package read turns the text of a record into the typed record: TOML into a
// tree of values with their places, the tree into fields by the one table of
// keys, and then the rules between fields. It collects every fault it can find
// in one run. It opens no file, and knows no data and no number of a result.
//
//	rec, faults := read.Record(diag.NewSource("trial.toml", text))
package read

import (
	"bytes"
	"fmt"
	"unicode/utf8"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// maxDiagnostics bounds how many faults are listed.
const maxDiagnostics = 1000

// Record reads a text. The record is never nil; it is incomplete when there
// are errors. The list is sorted.
func Record(src *diag.Source) (*record.Record, diag.List) {
	return readWith(src, false)
}

// readWith reads; all takes every key and word for computed, for tests of the
// language as a whole.
func readWith(src *diag.Source, all bool) (*record.Record, diag.List) {
	rec := &record.Record{Source: src, Tree: &record.Node{Kind: record.TableNode}}
	text, list := clean(src.Text)
	if text == nil {
		return rec, list
	}
	root, faults, whole := Tree(text)
	for _, f := range faults {
		list.Add(f)
	}
	if root == nil {
		list.Sort()
		return rec, limit(list)
	}
	rec.Tree = root
	b := &binder{all: all, damaged: !whole}
	b.record(rec)
	list = append(list, b.list...)
	if b.versionOK {
		list = append(list, rules(rec, b.damaged || b.hidden, b.refused)...)
	}
	list.Sort()
	return rec, limit(list)
}

// limit cuts a list that nobody would read to its end.
func limit(list diag.List) diag.List {
	if len(list) <= maxDiagnostics {
		return list
	}
	list = list[:maxDiagnostics]
	list.Add(diag.Error("R108", list[maxDiagnostics-1].Span, "more faults follow and are not listed"))
	return list
}

// clean refuses what is no text, and blanks control characters, which TOML
// does not allow, after reporting them. It returns nil where nothing can be
// read.
func clean(text []byte) ([]byte, diag.List) {
	var list diag.List
	if len(text) > maxBytes {
		list.Add(diag.Error("R103", diag.Span{}, "the record is %d bytes long; the most that is read is %d", len(text), maxBytes).
			WithHelp("many values belong in a data file that the record names"))
		return nil, list
	}
	if i := invalidUTF8(text); i >= 0 {
		list.Add(diag.Error("R101", diag.Span{Start: i, End: i + 1}, "the text is not UTF-8: byte 0x%02x", text[i]).
			WithHelp("save the file as UTF-8"))
		return nil, list
	}
	out := text
	for i := 0; i < len(text); i++ {
		c := text[i]
		if c >= 0x20 && c != 0x7f || c == '\t' || c == '\n' || c == '\r' && i+1 < len(text) && text[i+1] == '\n' {
			continue
		}
		at := diag.Span{Start: i, End: i + 1}
		if c == 0 {
			list.Add(diag.Error("R102", at, "the file holds a zero byte and is no text").WithHelp("save the file as UTF-8 text"))
			return nil, list
		}
		if len(list) == 0 {
			out = bytes.Clone(text)
		}
		if len(list) < maxFaults {
			list.Add(diag.Error("R102", at, "the control character %s cannot stand in a record", controlName(c)).WithHelp("delete it"))
		}
		out[i] = ' '
		if c == '\r' {
			out[i] = '\n'
		}
	}
	return out, list
}

func controlName(c byte) string {
	if c == '\r' {
		return "U+000D (a carriage return without a line feed)"
	}
	return fmt.Sprintf("U+%04X", c)
}

// invalidUTF8 is the offset of the first byte that is not UTF-8, or -1.
func invalidUTF8(text []byte) int {
	if utf8.Valid(text) {
		return -1
	}
	for i := 0; i < len(text); {
		r, n := utf8.DecodeRune(text[i:])
		if r == utf8.RuneError && n == 1 {
			return i
		}
		i += n
	}
	return -1
}

// Tree reads a text of TOML into its tree of values with places. Whole is
// false when a fault may have hidden keys, so that what seems to be missing may
// have been written. The tree is nil when nothing could be read.
func Tree(text []byte) (root *record.Node, faults diag.List, whole bool) {
	p := parse(text)
	t := build(p, true)
	before := len(p.faults)
	values := decode(p)
	if len(p.faults) > before {
		t = build(p, false)
	}
	whole = true
	for _, s := range p.statements {
		if s.kind == unreadable || s.kind == unreadTable || s.bad && s.kind != keyValue {
			whole = false
		}
	}
	if values != nil {
		if bad := attach(t.root, values); bad != nil {
			p.faults = append(p.faults, fault{code: "R109", span: bad.Span, message: "this cannot be read without doubt",
				help: "write the table with a head of its own, and each key once"})
			values = nil
		}
	}
	for _, f := range p.faults {
		d := diag.Error(f.code, f.span, "%s", f.message)
		d.Help = f.help
		faults.Add(d)
	}
	if p.more {
		faults.Add(diag.Error("R108", p.faults[len(p.faults)-1].span, "more faults follow and are not listed"))
	}
	if p.stopped {
		at := diag.Span{Start: p.pos, End: p.pos}
		faults.Add(diag.Error("R108", at, "the rest of the record was not read because of the faults before"))
	}
	if values == nil {
		return nil, faults, false
	}
	placeholders(p, t)
	return t.root, faults, whole && !p.stopped
}
