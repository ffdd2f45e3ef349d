package read

import (
	"fmt"
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// tree is what statements build up.
type tree struct {
	root    *record.Node
	current *record.Node               // table of the last head
	lost    bool                       // the last head could not be read: its keys belong nowhere
	heads   map[*record.Node]diag.Span // tables opened by a head of their own
	arrays  map[*record.Node]bool      // arrays made by [[…]]
	lineOf  func(int) int
}

// build puts the statements together. Statements that contradict an earlier
// one are marked bad and, with report set, reported; those whose table could
// not be read are marked bad and left without a word.
func build(p *parser, report bool) *tree {
	t := &tree{
		root:   &record.Node{Kind: record.TableNode},
		heads:  make(map[*record.Node]diag.Span),
		arrays: make(map[*record.Node]bool),
		lineOf: p.lineOf,
	}
	t.current = t.root
	for i := range p.statements {
		s := &p.statements[i]
		var f *fault
		switch s.kind {
		case keyValue:
			if t.lost {
				s.bad = true
			} else if !s.bad {
				f = put(t.current, s.key, s.value, t.lineOf)
			}
		case tableHead, arrayHead:
			if s.bad {
				t.lost = true
				continue
			}
			f = t.open(s)
			t.lost = f != nil
		case unreadTable:
			t.lost = true
		case unreadable:
		}
		if f != nil && report {
			s.bad = true
			if len(p.faults) < maxFaults {
				p.faults = append(p.faults, *f)
			} else {
				p.more = true
			}
		}
	}
	return t
}

// placeholders marks the keys of bad statements as written, so that nobody
// calls them missing.
func placeholders(p *parser, t *tree) {
	t.current, t.lost = t.root, false
	seen := make(map[*record.Node]int) // how many tables of an array have passed
	for i := range p.statements {
		s := &p.statements[i]
		switch s.kind {
		case keyValue:
			if s.bad && !t.lost && t.current != nil {
				put(t.current, s.key, &record.Node{Kind: record.UnreadNode, Span: s.value.Span}, t.lineOf)
			}
		case tableHead, arrayHead:
			t.lost = s.bad
			if !s.bad {
				t.current = t.find(s, seen)
			}
		case unreadTable:
			t.lost = true
		case unreadable:
		}
	}
}

// find goes again to the table that a head opened.
func (t *tree) find(s *statement, seen map[*record.Node]int) *record.Node {
	n := t.root
	for i, k := range s.key {
		if n = n.Get(k.text); n == nil {
			return nil
		}
		if t.arrays[n] {
			if i == len(s.key)-1 && s.kind == arrayHead {
				seen[n]++
			}
			if at := seen[n] - 1; at >= 0 && at < len(n.Items) {
				n = n.Items[at]
			} else {
				return nil
			}
		}
	}
	return n
}

// open goes to the table that a head names, making it where it is new.
func (t *tree) open(s *statement) *fault {
	n := t.root
	for _, k := range s.key[:len(s.key)-1] {
		e := n.Entry(k.text)
		if e == nil {
			child := &record.Node{Kind: record.TableNode, Span: k.span}
			n.Put(record.Entry{Key: k.text, KeySpan: k.span, Value: child})
			n = child
			continue
		}
		n = e.Value
		if t.arrays[n] {
			n = n.Items[len(n.Items)-1]
		}
		if n.Kind != record.TableNode {
			return conflict(k, e, t.lineOf, "a table")
		}
	}
	last := s.key[len(s.key)-1]
	e := n.Entry(last.text)
	if s.kind == arrayHead {
		return t.openArray(s, n, last, e)
	}
	if e == nil {
		t.current = &record.Node{Kind: record.TableNode, Span: s.span}
		n.Put(record.Entry{Key: last.text, KeySpan: last.span, Value: t.current})
		t.heads[t.current] = s.span
		return nil
	}
	if e.Value.Kind != record.TableNode {
		return conflict(last, e, t.lineOf, "a table")
	}
	if at, ok := t.heads[e.Value]; ok {
		return &fault{"R107", s.span, fmt.Sprintf("the table [%s] is written twice, first on line %d", keyText(s.key), t.lineOf(at.Start)),
			"each name is given once; put the keys together in one table, or choose another name"}
	}
	t.current = e.Value
	t.current.Span = s.span
	t.heads[t.current] = s.span
	return nil
}

func (t *tree) openArray(s *statement, n *record.Node, last part, e *record.Entry) *fault {
	t.current = &record.Node{Kind: record.TableNode, Span: s.span}
	if e == nil {
		a := &record.Node{Kind: record.ArrayNode, Span: s.span, Items: []*record.Node{t.current}}
		t.arrays[a] = true
		n.Put(record.Entry{Key: last.text, KeySpan: last.span, Value: a})
		return nil
	}
	if !t.arrays[e.Value] {
		return conflict(last, e, t.lineOf, "one of several tables")
	}
	e.Value.Items = append(e.Value.Items, t.current)
	return nil
}

func keyText(key []part) string {
	texts := make([]string, len(key))
	for i, k := range key {
		texts[i] = k.text
	}
	return strings.Join(texts, ".")
}

func conflict(k part, first *record.Entry, lineOf func(int) int, what string) *fault {
	is := "a value" // what it says is not known yet
	switch first.Value.Kind {
	case record.TableNode:
		is = "a table"
	case record.ArrayNode:
		is = "an array"
	default:
	}
	return &fault{"R107", k.span, fmt.Sprintf("%q cannot be %s here: it is %s on line %d", k.text, what, is, lineOf(first.KeySpan.Start)), ""}
}

// put stores a value under a dotted key, making the tables between.
func put(n *record.Node, key []part, v *record.Node, lineOf func(int) int) *fault {
	for _, k := range key[:len(key)-1] {
		e := n.Entry(k.text)
		if e == nil {
			child := &record.Node{Kind: record.TableNode, Span: k.span}
			n.Put(record.Entry{Key: k.text, KeySpan: k.span, Value: child})
			n = child
			continue
		}
		if e.Value.Kind != record.TableNode {
			return conflict(k, e, lineOf, "a table")
		}
		n = e.Value
	}
	last := key[len(key)-1]
	if e := n.Entry(last.text); e != nil {
		return &fault{"R107", last.span, fmt.Sprintf("%q is written twice, first on line %d", last.text, lineOf(e.KeySpan.Start)), "delete one of the two"}
	}
	n.Put(record.Entry{Key: last.text, KeySpan: last.span, Value: v})
	return nil
}
