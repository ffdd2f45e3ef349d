package seal

import (
	"math"
	"strconv"

	"steelyard/protocol/record"
)

// text writes a value as a record would have it, on one line, tables in
// braces with their keys in order.
func text(n *record.Node) string {
	if n == nil {
		return ""
	}
	return string(appendTOML(nil, n))
}

func appendTOML(b []byte, n *record.Node) []byte {
	switch n.Kind {
	case record.TableNode:
		if len(n.Entries) == 0 {
			return append(b, "{}"...)
		}
		b = append(b, "{ "...)
		for i, e := range n.Entries {
			if i > 0 {
				b = append(b, ", "...)
			}
			b = append(appendKey(b, e.Key), " = "...)
			b = appendTOML(b, e.Value)
		}
		return append(b, " }"...)
	case record.ArrayNode:
		b = append(b, '[')
		for i, item := range n.Items {
			if i > 0 {
				b = append(b, ", "...)
			}
			b = appendTOML(b, item)
		}
		return append(b, ']')
	case record.StringNode:
		return appendQuoted(b, n.Text)
	case record.IntegerNode:
		return strconv.AppendInt(b, n.Int, 10)
	case record.FloatNode:
		return appendFloat(b, n.Float)
	case record.BoolNode:
		return strconv.AppendBool(b, n.Bool)
	case record.InstantNode, record.LocalDateTimeNode, record.LocalDateNode, record.LocalTimeNode:
		return append(b, n.Text...)
	case record.UnreadNode:
		return append(b, `""`...)
	}
	panic("seal: unknown kind of node")
}

func appendFloat(b []byte, v float64) []byte {
	switch {
	case math.IsNaN(v):
		return append(b, "nan"...)
	case math.IsInf(v, 1):
		return append(b, "inf"...)
	case math.IsInf(v, -1):
		return append(b, "-inf"...)
	case v == math.Trunc(v) && math.Abs(v) <= 1<<53:
		return strconv.AppendInt(b, int64(v), 10)
	case math.Abs(v) >= 1e15 || math.Abs(v) < 1e-6:
		return strconv.AppendFloat(b, v, 'e', -1, 64) // with its exponent: no integer
	}
	return strconv.AppendFloat(b, v, 'f', -1, 64)
}

func appendKey(b []byte, key string) []byte {
	bare := key != ""
	for i := range len(key) {
		c := key[i]
		bare = bare && (c == '_' || c == '-' || '0' <= c && c <= '9' || 'A' <= c && c <= 'Z' || 'a' <= c && c <= 'z')
	}
	if bare {
		return append(b, key...)
	}
	return appendQuoted(b, key)
}

// appendQuoted writes a basic string of TOML: the escapes of JSON, and one
// for DEL, which TOML does not allow as it is.
func appendQuoted(b []byte, s string) []byte {
	start := len(b)
	b = appendString(b, s)
	for i := start; i < len(b); i++ {
		if b[i] == 0x7f {
			b = append(b[:i], append([]byte(`\u007f`), b[i+1:]...)...)
		}
	}
	return b
}
