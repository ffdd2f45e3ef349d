package seal

import (
	"math"
	"slices"

	"steelyard/protocol/diag"
	"steelyard/protocol/read"
	"steelyard/protocol/record"
)

// SealedRecord is the record with the plan of a seal in place of its own: old
// plan, present results. It is read like any record, from a text made for the
// purpose, so that its places lead nowhere; its errors are returned as reasons
// why the sealed plan cannot be compiled now, and the record is then nil.
func SealedRecord(rec *record.Record, e *Entry) (*record.Record, []string) {
	if e == nil || e.plan == nil {
		return nil, []string{"the seal holds no plan"}
	}
	var text []byte
	put := func(key string, n *record.Node) {
		text = append(appendKey(text, key), " = "...)
		text = append(appendTOML(text, n), '\n')
	}
	for _, entry := range rec.Tree.Entries {
		switch entry.Key {
		case "plan":
			put("plan", restore("plan", e.plan))
		case "deviation":
			put(entry.Key, withoutChanges(entry.Value))
		default:
			put(entry.Key, entry.Value)
		}
	}
	sealed, list := read.Record(diag.NewSource("sealed plan", text))
	var reasons []string
	for _, d := range list {
		if d.Severity == diag.SeverityError && !slices.Contains(reasons, d.Message) {
			reasons = append(reasons, d.Message)
		}
	}
	if len(reasons) > 0 {
		return nil, reasons
	}
	return sealed, nil
}

// withoutChanges is the deviations without the paths that they changed: some
// of those exist in the present plan only.
func withoutChanges(n *record.Node) *record.Node {
	out := &record.Node{Kind: n.Kind}
	for _, item := range n.Items {
		kept := &record.Node{Kind: item.Kind}
		for _, e := range item.Entries {
			if e.Key != "changes" {
				kept.Put(e)
			}
		}
		out.Items = append(out.Items, kept)
	}
	return out
}

// restore gives the values of a sealed plan their kinds again: JSON has no
// infinity, so that "inf" stands for one wherever the language has a number.
func restore(path string, n *record.Node) *record.Node {
	k, name := record.KeyAt(path)
	switch n.Kind {
	case record.TableNode:
		out := &record.Node{Kind: n.Kind}
		for _, e := range n.Entries {
			out.Put(record.Entry{Key: e.Key, Value: restore(path+"."+e.Key, e.Value)})
		}
		return out
	case record.ArrayNode:
		out := &record.Node{Kind: n.Kind}
		for _, item := range n.Items {
			out.Items = append(out.Items, restore(path, item))
		}
		return out
	case record.StringNode:
		if k == nil || name || !numeric(k.Kind) {
			return n
		}
		switch n.Text {
		case "inf":
			return &record.Node{Kind: record.FloatNode, Float: math.Inf(1)}
		case "-inf":
			return &record.Node{Kind: record.FloatNode, Float: math.Inf(-1)}
		}
	case record.IntegerNode, record.FloatNode, record.BoolNode, record.InstantNode,
		record.LocalDateTimeNode, record.LocalDateNode, record.LocalTimeNode, record.UnreadNode:
	}
	return n
}

func numeric(k record.Kind) bool {
	switch k {
	case record.KindNumber, record.KindNumbers, record.KindRows, record.KindBounds, record.KindNamedNumbers:
		return true
	case record.KindTable, record.KindNamedTables, record.KindTables, record.KindString, record.KindWord,
		record.KindStrings, record.KindWords, record.KindInt, record.KindBool, record.KindDay, record.KindInstant,
		record.KindScalar, record.KindScalars, record.KindLook, record.KindNamedStrings:
		return false
	}
	panic("seal: unknown kind of key")
}
