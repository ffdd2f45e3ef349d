package read

import (
	"bytes"
	"errors"
	"fmt"
	"sort"
	"strings"
	"time"

	"github.com/BurntSushi/toml"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// moduleBytes bounds how much text the TOML module is given in all, so that a
// long file with many faults ends.
const moduleBytes = 16 << 20

// modulePasses bounds how often it is asked.
const modulePasses = 40

// decode asks the TOML module for the values of the statements that are not
// bad. A statement that it refuses is reported, marked bad, and the rest is
// read again. The values are nil when it never agreed.
func decode(p *parser) map[string]any {
	budget := moduleBytes
	for range modulePasses {
		text, pieces := assemble(p)
		values, err := moduleDecode(text)
		if err == nil {
			return values
		}
		s := refused(p, pieces, err)
		budget -= len(text)
		if s == nil || budget < 0 {
			break
		}
	}
	p.stopped = true
	return nil
}

// moduleDecode is one call of the TOML module. A panic in it is a refusal.
func moduleDecode(text string) (values map[string]any, err error) {
	defer func() {
		if r := recover(); r != nil {
			values, err = nil, fmt.Errorf("this is not TOML")
		}
	}()
	values = make(map[string]any)
	_, err = toml.Decode(text, &values)
	return values, err
}

// piece maps a stretch of the assembled text to the statement it came from.
type piece struct{ out, in, statement int }

// assemble writes the statements that are not bad. Without any fault that is
// the text itself, so that the module judges what the user wrote.
func assemble(p *parser) (string, []piece) {
	var b strings.Builder
	var pieces []piece
	if len(p.faults) == 0 {
		start := 0
		if strings.HasPrefix(string(p.text[:min(3, len(p.text))]), "\ufeff") {
			start = 3
		}
		for i, s := range p.statements {
			pieces = append(pieces, piece{s.span.Start - start, s.span.Start, i})
		}
		return string(p.text[start:]), pieces
	}
	for i, s := range p.statements {
		if s.bad || s.kind == unreadable || s.kind == unreadTable {
			continue
		}
		pieces = append(pieces, piece{b.Len(), s.span.Start, i})
		if s.fixed {
			open, closing := "[", "]"
			if s.kind == arrayHead {
				open, closing = "[[", "]]"
			}
			b.WriteString(open)
			for j, k := range s.key {
				if j > 0 {
					b.WriteByte('.')
				}
				b.Write(p.text[k.span.Start:k.span.End])
			}
			b.WriteString(closing)
		} else {
			b.Write(p.text[s.span.Start:s.span.End])
		}
		b.WriteByte('\n')
	}
	return b.String(), pieces
}

// refused reports what the module refused, at our own place.
func refused(p *parser, pieces []piece, err error) *statement {
	var pe toml.ParseError
	message, start, length := err.Error(), 0, 1
	if errors.As(err, &pe) {
		message, start, length = pe.Message, pe.Position.Start, pe.Position.Len
	}
	i := sort.Search(len(pieces), func(i int) bool { return pieces[i].out > start }) - 1
	if i < 0 {
		if len(pieces) == 0 {
			return nil
		}
		i = 0
	}
	s := &p.statements[pieces[i].statement]
	at := pieces[i].in + max(0, start-pieces[i].out)
	span := diag.Span{Start: at, End: at + length}
	if at >= s.span.End || s.fixed {
		span = s.span
	}
	span.End = min(span.End, s.span.End)
	span.End -= len(p.text[span.Start:span.End]) - len(bytes.TrimRight(p.text[span.Start:span.End], " \t\r\n"))
	if s.kind == keyValue {
		s.value = &record.Node{Kind: record.UnreadNode, Span: s.value.Span}
	}
	s.bad = true
	if strings.HasPrefix(message, "invalid datetime") {
		p.faults = append(p.faults, fault{code: "R105", span: span, message: "there is no such day or time: " + quoteShort(string(p.text[span.Start:span.End])),
			help: "a date is written year-month-day, a time hour:minute:second"})
		return s
	}
	if number, _, found := strings.Cut(message, " is out of range for "); found {
		message = "the number " + number + " is larger than a record can hold"
	}
	if message != "" {
		message = strings.ToLower(message[:1]) + message[1:]
	}
	p.faults = append(p.faults, fault{code: "R105", span: span, message: strings.TrimSuffix(message, ".")})
	return s
}

// attach gives the leaves of the tree the values that the module read. It
// returns the first node on which the two readings differ, nil when they agree.
func attach(n *record.Node, v any) *record.Node {
	switch n.Kind {
	case record.TableNode:
		m, ok := v.(map[string]any)
		if !ok || len(m) != len(n.Entries) {
			return n
		}
		for _, e := range n.Entries {
			child, ok := m[e.Key]
			if !ok {
				return e.Value
			}
			if bad := attach(e.Value, child); bad != nil {
				return bad
			}
		}
		return nil
	case record.ArrayNode:
		return attachItems(n, v)
	case record.StringNode, record.IntegerNode, record.FloatNode, record.BoolNode,
		record.InstantNode, record.LocalDateTimeNode, record.LocalDateNode, record.LocalTimeNode:
		if !attachLeaf(n, v) {
			return n
		}
		return nil
	case record.UnreadNode:
		return nil
	}
	return n
}

func attachItems(n *record.Node, v any) *record.Node {
	switch items := v.(type) {
	case []any:
		return attachEach(n, items)
	case []map[string]any:
		return attachEach(n, items)
	}
	return n
}

func attachEach[T any](n *record.Node, items []T) *record.Node {
	if len(items) != len(n.Items) {
		return n
	}
	for i, child := range n.Items {
		if bad := attach(child, items[i]); bad != nil {
			return bad
		}
	}
	return nil
}

func attachLeaf(n *record.Node, v any) bool {
	switch v := v.(type) {
	case string:
		n.Text = v
		return n.Kind == record.StringNode
	case int64:
		n.Int = v
		return n.Kind == record.IntegerNode
	case float64:
		n.Float = v
		return n.Kind == record.FloatNode
	case bool:
		n.Bool = v
		return n.Kind == record.BoolNode
	case time.Time:
		switch n.Kind {
		case record.InstantNode:
			n.Time = sealZone(v)
			return true
		case record.LocalDateNode:
			n.Date = record.DateOf(v)
			return true
		case record.LocalDateTimeNode, record.LocalTimeNode:
			return true
		}
	}
	return false
}

// sealZone keeps the offset that was written and drops whatever the machine's
// own zone would call it.
func sealZone(t time.Time) time.Time {
	_, offset := t.Zone()
	if offset == 0 {
		return t.UTC()
	}
	return t.In(time.FixedZone("", offset))
}
