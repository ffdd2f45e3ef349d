package seal

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strconv"
	"strings"

	"steelyard/protocol/record"
)

// randomTable is a table of any values.
func randomTable(rng *rand.Rand, depth int) *record.Node {
	n := &record.Node{Kind: record.TableNode}
	for _, i := range rng.Perm(7)[:1+rng.IntN(6)] {
		key := [...]string{"a", "b_1", "c-x", "7", "ö", "with blank", "q\"'"}[i]
		n.Put(record.Entry{Key: key, Value: randomValue(rng, depth)})
	}
	return n
}

func randomValue(rng *rand.Rand, depth int) *record.Node {
	kinds := 7
	if depth == 0 {
		kinds = 4
	}
	switch rng.IntN(kinds) {
	case 0:
		return str([...]string{"", "plain", "two\nlines", "tab\t'q' \"d\" \\", "λ\u007f\U0001f600", "inf"}[rng.IntN(6)])
	case 1:
		return &record.Node{Kind: record.IntegerNode, Int: rng.Int64N(2000) - 1000}
	case 2:
		v := math.Float64frombits(rng.Uint64())
		if math.IsNaN(v) || math.IsInf(v, 0) || rng.IntN(2) == 0 {
			v = rng.NormFloat64()
		}
		return &record.Node{Kind: record.FloatNode, Float: v}
	case 3:
		return &record.Node{Kind: record.BoolNode, Bool: rng.IntN(2) == 0}
	case 4:
		return randomTable(rng, depth-1)
	case 5: // an array of tables
		n := &record.Node{Kind: record.ArrayNode}
		for range 1 + rng.IntN(3) {
			n.Items = append(n.Items, randomTable(rng, depth-1))
		}
		return n
	}
	n := &record.Node{Kind: record.ArrayNode}
	for range rng.IntN(4) {
		n.Items = append(n.Items, randomValue(rng, depth-1))
	}
	return n
}

// scramble writes a table as TOML in an order and manner drawn by chance:
// heads, dotted keys or braces, numbers and strings in several spellings,
// comments and blank lines.
func scramble(rng *rand.Rand, n *record.Node) string {
	s := &scrambler{rng: rng}
	s.block(nil, n)
	return s.b.String()
}

type scrambler struct {
	rng *rand.Rand
	b   strings.Builder
}

func (s *scrambler) key(path ...string) string {
	parts := make([]string, len(path))
	for i, k := range path {
		parts[i] = string(appendKey(nil, k))
		if s.rng.IntN(3) == 0 {
			parts[i] = string(appendQuoted(nil, k))
		}
	}
	return strings.Join(parts, ".")
}

func (s *scrambler) noise() {
	s.b.WriteString([...]string{"", "", "\n", "# a remark\n", "  "}[s.rng.IntN(5)])
}

// block writes the entries of the table whose head has just been written,
// then the tables that get heads of their own.
func (s *scrambler) block(path []string, n *record.Node) {
	var later []func()
	for _, i := range s.rng.Perm(len(n.Entries)) {
		e := n.Entries[i]
		below := append(path[:len(path):len(path)], e.Key)
		switch {
		case e.Value.Kind == record.TableNode && s.rng.IntN(3) == 0:
			later = append(later, func() {
				fmt.Fprintf(&s.b, "[%s]\n", s.key(below...))
				s.block(below, e.Value)
			})
		case e.Value.Kind == record.TableNode && s.rng.IntN(2) == 0:
			s.dotted([]string{e.Key}, e.Value)
		case tables(e.Value) && s.rng.IntN(2) == 0:
			later = append(later, func() {
				for _, item := range e.Value.Items {
					fmt.Fprintf(&s.b, "[[%s]]\n", s.key(below...))
					s.block(below, item)
				}
			})
		default:
			s.statement([]string{e.Key}, e.Value)
		}
	}
	for _, f := range later {
		s.noise()
		f()
	}
}

func tables(n *record.Node) bool {
	for _, item := range n.Items {
		if item.Kind != record.TableNode {
			return false
		}
	}
	return n.Kind == record.ArrayNode && len(n.Items) > 0
}

func (s *scrambler) dotted(path []string, n *record.Node) {
	for _, i := range s.rng.Perm(len(n.Entries)) {
		e := n.Entries[i]
		below := append(path[:len(path):len(path)], e.Key)
		if e.Value.Kind == record.TableNode {
			s.dotted(below, e.Value)
		} else {
			s.statement(below, e.Value)
		}
	}
}

func (s *scrambler) statement(path []string, v *record.Node) {
	s.noise()
	s.b.WriteString(s.key(path...))
	s.b.WriteString([...]string{"=", " = ", "   =\t"}[s.rng.IntN(3)])
	s.value(v, true)
	s.b.WriteString([...]string{"\n", " # a remark\n", "\n\n"}[s.rng.IntN(3)])
}

func (s *scrambler) value(n *record.Node, lines bool) {
	switch n.Kind {
	case record.TableNode:
		s.b.WriteString("{ ")
		for k, i := range s.rng.Perm(len(n.Entries)) {
			if k > 0 {
				s.b.WriteString(", ")
			}
			s.b.WriteString(s.key(n.Entries[i].Key) + " = ")
			s.value(n.Entries[i].Value, false)
		}
		s.b.WriteString(" }")
	case record.ArrayNode:
		s.b.WriteString("[")
		for i, item := range n.Items {
			if i > 0 {
				s.b.WriteString(",")
			}
			if lines && s.rng.IntN(3) == 0 {
				s.b.WriteString("\n\t")
			}
			s.value(item, lines)
		}
		s.b.WriteString("]")
	case record.StringNode:
		s.b.WriteString(s.quote(n.Text, lines))
	case record.IntegerNode:
		s.b.WriteString([...]string{strconv.FormatInt(n.Int, 10), strconv.FormatFloat(float64(n.Int), 'f', 2, 64),
			strconv.FormatFloat(float64(n.Int), 'e', 5, 64)}[s.rng.IntN(3)])
	case record.FloatNode:
		if s.rng.IntN(2) == 0 {
			s.b.WriteString(strconv.FormatFloat(n.Float, 'e', 20, 64))
		} else {
			s.b.WriteString(string(appendFloat(nil, n.Float)))
		}
	default:
		s.b.WriteString(text(n))
	}
}

func (s *scrambler) quote(v string, lines bool) string {
	plain := !strings.ContainsAny(v, "'\n\t\u007f")
	switch s.rng.IntN(3) {
	case 0:
		if plain {
			return "'" + v + "'"
		}
	case 1:
		if lines && !strings.ContainsAny(v, "\"\\\u007f") {
			return "\"\"\"\n" + v + "\"\"\""
		}
	}
	return string(appendQuoted(nil, v))
}

// change alters one value somewhere in a table, takes one away or adds one.
func change(rng *rand.Rand, n *record.Node) {
	for {
		i := rng.IntN(len(n.Entries))
		v := n.Entries[i].Value
		switch rng.IntN(6) {
		case 0:
			n.Entries[i].Key += "x"
			return
		case 1:
			if len(n.Entries) > 1 {
				n.Entries = append(n.Entries[:i:i], n.Entries[i+1:]...)
				return
			}
		case 2:
			n.Entries = append(n.Entries, record.Entry{Key: "new", Value: str("")})
			return
		default:
			if v.Kind == record.TableNode {
				n = v
				continue
			}
			changeValue(rng, v)
			return
		}
	}
}

func changeValue(rng *rand.Rand, v *record.Node) {
	switch v.Kind {
	case record.StringNode:
		v.Text += " "
	case record.IntegerNode:
		v.Int++
	case record.FloatNode:
		v.Float = math.Nextafter(v.Float, 0)
		if v.Float == 0 {
			v.Float = 1
		}
	case record.BoolNode:
		v.Bool = !v.Bool
	case record.ArrayNode:
		if len(v.Items) > 0 && rng.IntN(2) == 0 {
			v.Items = v.Items[:len(v.Items)-1]
		} else {
			v.Items = append(v.Items, str("more"))
		}
	default:
		*v = *str("another kind")
	}
}
