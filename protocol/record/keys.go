package record

import (
	"math"
	"slices"
	"strconv"
	"strings"
)

// Kind is what a key of the language holds.
type Kind uint8

// The closed set of kinds.
const (
	KindTable        Kind = iota // one table
	KindNamedTables              // tables under names that the user gives
	KindTables                   // an array of tables, [[…]] or inline
	KindString                   // a text
	KindWord                     // one of a closed list of words
	KindStrings                  // an array of texts
	KindWords                    // an array of words of a closed list
	KindNumber                   // a number
	KindNumbers                  // an array of numbers, or one number where One is set
	KindRows                     // an array of arrays of numbers
	KindInt                      // a whole number
	KindBool                     // true or false
	KindDay                      // a local date
	KindInstant                  // a date and time with an offset
	KindBounds                   // a number, or [low, high]
	KindScalar                   // a text, number or boolean
	KindScalars                  // an array of those
	KindLook                     // a whole number from 1, or "unplanned"
	KindNamedStrings             // a table of texts under names that the user gives
	KindNamedNumbers             // a table of numbers under names that the user gives
)

// String names a kind for readers of messages and of the reference.
func (k Kind) String() string {
	switch k {
	case KindTable:
		return "a table"
	case KindNamedTables:
		return "tables, each under its own name"
	case KindTables:
		return "an array of tables"
	case KindString:
		return "a text in quotes"
	case KindWord:
		return "one word of a list, in quotes"
	case KindStrings:
		return "an array of texts"
	case KindWords:
		return "an array of words of a list"
	case KindNumber:
		return "a number"
	case KindNumbers:
		return "an array of numbers"
	case KindRows:
		return "an array of arrays of numbers"
	case KindInt:
		return "a whole number"
	case KindBool:
		return "true or false"
	case KindDay:
		return "a date such as 2026-04-12, without quotes"
	case KindInstant:
		return "a date and time with an offset, such as 2026-04-12T09:30:00+02:00, without quotes"
	case KindBounds:
		return "a number, or [low, high]"
	case KindScalar:
		return "a text, a number, or true or false"
	case KindScalars:
		return "an array of texts, numbers, or true and false"
	case KindLook:
		return `a whole number from 1, or "unplanned"`
	case KindNamedStrings:
		return "a table of texts"
	case KindNamedNumbers:
		return "a table of numbers"
	}
	panic("record: unknown kind")
}

// IsTable reports whether keys lie below a key of this kind.
func (k Kind) IsTable() bool { return k == KindTable || k == KindNamedTables || k == KindTables }

// Range bounds a number.
type Range struct {
	Low, High         float64
	LowOpen, HighOpen bool // the end itself is excluded
}

// Contains reports whether v lies in the range.
func (r Range) Contains(v float64) bool {
	return (v > r.Low || v == r.Low && !r.LowOpen) && (v < r.High || v == r.High && !r.HighOpen)
}

// String says what is allowed: "above 0 and below 1".
func (r Range) String() string {
	var parts []string
	if !math.IsInf(r.Low, -1) {
		parts = append(parts, pick(r.LowOpen, "above ", "at least ")+FormatNumber(r.Low))
	}
	if !math.IsInf(r.High, 1) {
		parts = append(parts, pick(r.HighOpen, "below ", "at most ")+FormatNumber(r.High))
	}
	if len(parts) == 0 {
		return "finite"
	}
	return strings.Join(parts, " and ")
}

func pick(first bool, a, b string) string {
	if first {
		return a
	}
	return b
}

// FormatNumber writes a number the short way that reads back as itself.
func FormatNumber(v float64) string {
	switch {
	case math.IsInf(v, 1):
		return "inf"
	case math.IsInf(v, -1):
		return "-inf"
	case math.IsNaN(v):
		return "nan"
	case v == math.Trunc(v) && math.Abs(v) <= 1<<53:
		return strconv.FormatFloat(v, 'f', -1, 64)
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

// Key is one row of the one table of keys.
type Key struct {
	// Path is the key with its tables; NAME stands for a name that the user
	// gives: "plan.outcome.NAME.smallest". Arrays of tables add nothing:
	// "result.study".
	Path     string
	Kind     Kind
	Words    []string // closed list, where there is one
	Later    []string // words of that list that this version does not compute
	Range    *Range   // of a number, or of every number of an array
	Whole    bool     // a number must be whole
	Infinite bool     // inf and -inf are numbers here
	One      bool     // an array may be written as its single element
	MinLen   int      // of an array
	MaxLen   int      // of an array; 0: any length
	Required bool     // in every table that is written
	Default  any      // string, float64, int64, bool or []string; nil: none
	Doc      string
	Prose    bool // words for readers only: a change of it changes no number
	Ready    bool // this version computes what it asks for
}

// Name is the last part of the path.
func (k *Key) Name() string { return k.Path[strings.LastIndexByte(k.Path, '.')+1:] }

// Parent is the path of the table that holds the key; "" for the top.
func (k *Key) Parent() string {
	if i := strings.LastIndexByte(k.Path, '.'); i >= 0 {
		return k.Path[:i]
	}
	return ""
}

// Below is the path of the keys inside a table of this key: NAME is added for
// tables under names.
func (k *Key) Below() string {
	if k.Kind == KindNamedTables {
		return k.Path + ".NAME"
	}
	return k.Path
}

// Keys is the one table of keys, in the order of the language reference: the
// order in which a record is best written. It must not be changed.
var Keys = buildKeys()

var keyIndex = indexKeys()

// KeyOf finds the row of a path written with NAME; nil when there is none.
func KeyOf(path string) *Key { return keyIndex[path] }

// KeysIn lists the rows directly in a table, by the path of the table as Below
// gives it, in order.
func KeysIn(table string) []*Key { return tableIndex[table] }

var tableIndex = indexTables()

func indexKeys() map[string]*Key {
	m := make(map[string]*Key, len(Keys))
	for _, k := range Keys {
		m[k.Path] = k
	}
	return m
}

func indexTables() map[string][]*Key {
	m := make(map[string][]*Key)
	for _, k := range Keys {
		m[k.Parent()] = append(m[k.Parent()], k)
	}
	return m
}

// buildKeys joins the groups, gives earlier results the keys of results, and
// marks what is not computed yet.
func buildKeys() []*Key {
	var all []*Key
	add := func(group []Key) {
		for i := range group {
			all = append(all, &group[i])
		}
	}
	add(headKeys())
	add(planKeys())
	add(outcomeKeys())
	add(hypothesisKeys())
	add(familyKeys())
	add(evidenceKeys())
	add(planningKeys())
	results := resultKeys()
	add(results)
	add(earlierKeys(results))
	add(historyKeys())
	for _, k := range all {
		k.Ready = !slices.ContainsFunc(NotReady, func(p string) bool {
			return k.Path == p || strings.HasPrefix(k.Path, p+".")
		})
		k.Later = NotReadyWords[k.Path]
	}
	return all
}

// earlierKeys repeats the keys of [[result]] for [[earlier_result]].
func earlierKeys(results []Key) []Key {
	out := []Key{{Path: "earlier_result", Kind: KindTables,
		Doc: "A result that was known before the plan, with the keys of `[[result]]`. It is shown, and analysed only where the pooling of its outcome says `include_earlier = true`."}}
	for _, k := range results {
		if rest, ok := strings.CutPrefix(k.Path, "result."); ok {
			k.Path = "earlier_result." + rest
			out = append(out, k)
		}
	}
	return out
}

func above(low float64) *Range   { return &Range{Low: low, High: inf, LowOpen: true} }
func atLeast(low float64) *Range { return &Range{Low: low, High: inf} }
func between(low, high float64) *Range {
	return &Range{Low: low, High: high, LowOpen: true, HighOpen: true}
}
func fromTo(low, high float64) *Range    { return &Range{Low: low, High: high} }
func fromBelow(low, high float64) *Range { return &Range{Low: low, High: high, HighOpen: true} }

func measureWords() []string {
	out := make([]string, len(Measures))
	for i, m := range Measures {
		out[i] = m.Word
	}
	return out
}

func claimWords() []string {
	out := make([]string, len(Claims))
	for i, c := range Claims {
		out[i] = c.Word
	}
	return out
}
