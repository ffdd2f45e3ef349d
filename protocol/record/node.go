package record

import (
	"time"

	"steelyard/protocol/diag"
)

// NodeKind is what a value of the file is, before the key table looks at it.
type NodeKind uint8

// The kinds of node.
const (
	TableNode         NodeKind = iota // Entries
	ArrayNode                         // Items; arrays of tables too
	StringNode                        // Text
	IntegerNode                       // Int
	FloatNode                         // Float; infinities and not-a-number included
	BoolNode                          // Bool
	InstantNode                       // Time: a date and time with an offset; Text as written
	LocalDateTimeNode                 // Text as written: no offset
	LocalDateNode                     // Date; Text as written
	LocalTimeNode                     // Text as written
	UnreadNode                        // written, but at fault; only in records with errors
)

// Node is one stated value of the file with its place. The tree of nodes holds
// what the user wrote and nothing else: no defaults, nothing normalised.
type Node struct {
	Kind NodeKind
	Span diag.Span // the value as written; for a table its header, or its braces

	Text  string
	Int   int64
	Float float64
	Bool  bool
	Time  time.Time
	Date  Date

	Items   []*Node // of an array, in order
	Entries []Entry // of a table, in order of first appearance
	index   map[string]int
}

// Entry is one key of a table with its value.
type Entry struct {
	Key     string
	KeySpan diag.Span // the key where it first appears
	Value   *Node
}

// indexFrom is the number of keys from which a table keeps an index.
const indexFrom = 12

// Get returns the value under a key of a table, nil when there is none. Get
// of a nil node is nil, so that calls can be chained.
func (n *Node) Get(key string) *Node {
	if e := n.Entry(key); e != nil {
		return e.Value
	}
	return nil
}

// Entry returns the entry under a key of a table, nil when there is none. It
// stays valid until the next Put.
func (n *Node) Entry(key string) *Entry {
	if n == nil {
		return nil
	}
	if n.index != nil {
		if i, ok := n.index[key]; ok {
			return &n.Entries[i]
		}
		return nil
	}
	for i := range n.Entries {
		if n.Entries[i].Key == key {
			return &n.Entries[i]
		}
	}
	return nil
}

// Put appends an entry to a table. The key must be new to it.
func (n *Node) Put(e Entry) {
	n.Entries = append(n.Entries, e)
	if n.index != nil {
		n.index[e.Key] = len(n.Entries) - 1
	} else if len(n.Entries) >= indexFrom {
		n.index = make(map[string]int, 2*indexFrom)
		for i, e := range n.Entries {
			n.index[e.Key] = i
		}
	}
}
