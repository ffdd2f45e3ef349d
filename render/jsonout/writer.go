package jsonout

import (
	"encoding/json"
	"io"
	"math"
	"strconv"

	"steelyard/compute/result"
)

// object is a JSON object whose keys keep the order in which they were added.
// Keys that do not apply are never added.
type object struct{ members []member }

type member struct {
	key   string
	value any // string, bool, int, float64, null, *object, []any
}

// null is a value that applies and does not exist, such as a limit.
type null struct{}

func (o *object) put(key string, v any)   { o.members = append(o.members, member{key, v}) }
func (o *object) str(key, v string)       { o.put(key, v) }
func (o *object) flag(key string, v bool) { o.put(key, v) }
func (o *object) integer(key string, v int) {
	o.put(key, v)
}

// text adds a string unless it is empty.
func (o *object) text(key, v string) {
	if v != "" {
		o.put(key, v)
	}
}

// number adds a number that is always there; null when it is not finite.
func (o *object) number(key string, v float64) { o.put(key, finite(v)) }

// opt adds a number where it applies; null when it is not finite.
func (o *object) opt(key string, v result.Opt) {
	if v.OK {
		o.put(key, finite(v.V))
	}
}

// p adds a p-value where it applies, with its logarithm when it is below
// 1e-300.
func (o *object) p(key string, p result.P) {
	if !p.OK {
		return
	}
	o.put(key, finite(p.P))
	if p.P < 1e-300 {
		o.put("ln_"+key, finite(p.Ln))
	}
}

// list adds an array; an empty one too.
func (o *object) list(key string, items []any) {
	if items == nil {
		items = []any{}
	}
	o.put(key, items)
}

// some adds an array unless it is empty.
func (o *object) some(key string, items []any) {
	if len(items) > 0 {
		o.put(key, items)
	}
}

// finite is the number, or null.
func finite(v float64) any {
	if math.IsInf(v, 0) || math.IsNaN(v) {
		return null{}
	}
	return v
}

// words turns strings into array items.
func words(s []string) []any {
	out := make([]any, 0, len(s))
	for _, x := range s {
		out = append(out, x)
	}
	return out
}

// encode writes a value, indented by two blanks a level. Arrays of numbers
// and of pairs of numbers stay on one line each.
func encode(b []byte, v any, indent int) []byte {
	switch v := v.(type) {
	case null:
		return append(b, "null"...)
	case bool:
		return strconv.AppendBool(b, v)
	case int:
		return strconv.AppendInt(b, int64(v), 10)
	case float64:
		return appendFloat(b, v)
	case string:
		return appendString(b, v)
	case *object:
		if len(v.members) == 0 {
			return append(b, "{}"...)
		}
		b = append(b, '{')
		for i, m := range v.members {
			if i > 0 {
				b = append(b, ',')
			}
			b = newline(b, indent+1)
			b = appendString(b, m.key)
			b = append(b, ": "...)
			b = encode(b, m.value, indent+1)
		}
		b = newline(b, indent)
		return append(b, '}')
	case []any:
		return encodeArray(b, v, indent)
	}
	panic("jsonout: value of no known kind")
}

// encodeArray writes an array: flat when it holds only numbers.
func encodeArray(b []byte, v []any, indent int) []byte {
	if flat(v) {
		b = append(b, '[')
		for i, x := range v {
			if i > 0 {
				b = append(b, ", "...)
			}
			b = encode(b, x, indent)
		}
		return append(b, ']')
	}
	b = append(b, '[')
	for i, x := range v {
		if i > 0 {
			b = append(b, ',')
		}
		b = newline(b, indent+1)
		b = encode(b, x, indent+1)
	}
	b = newline(b, indent)
	return append(b, ']')
}

// flat reports whether an array holds no string, array or object.
func flat(v []any) bool {
	for _, x := range v {
		switch x.(type) {
		case float64, int, null, bool:
		default:
			return false
		}
	}
	return true
}

func newline(b []byte, indent int) []byte {
	b = append(b, '\n')
	for range indent {
		b = append(b, "  "...)
	}
	return b
}

// appendFloat writes a finite number in the shortest form that reads back to
// the same bits; what is not finite is null.
func appendFloat(b []byte, v float64) []byte {
	if math.IsInf(v, 0) || math.IsNaN(v) {
		return append(b, "null"...)
	}
	if v == 0 {
		return append(b, '0')
	}
	if a := math.Abs(v); a < 1e-6 || a >= 1e21 {
		return strconv.AppendFloat(b, v, 'e', -1, 64)
	}
	return strconv.AppendFloat(b, v, 'f', -1, 64)
}

// appendString writes a JSON string; bytes that are no UTF-8 become U+FFFD.
func appendString(b []byte, s string) []byte {
	q, err := json.Marshal(s)
	if err != nil {
		panic(err) // a string always marshals
	}
	return append(b, q...)
}

// print writes the value and a newline.
func print(w io.Writer, v any) error {
	_, err := w.Write(append(encode(nil, v, 0), '\n'))
	return err
}
