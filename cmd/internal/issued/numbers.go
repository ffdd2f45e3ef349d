package issued

import (
	"bytes"
	"cmp"
	"encoding/json"
	"fmt"
	"maps"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Class is what a difference is about, the gravest first.
type Class uint8

// The classes.
const (
	File Class = iota // the file or its record is not what it should be
	Verdict
	Number
	Result
	Plan
	Words
	Other
)

// Classes names the classes.
var Classes = []string{"file", "verdict", "number", "result", "plan", "wording", "other"}

func (c Class) String() string { return Classes[c] }

// MarshalText gives a class to other programs as its word.
func (c Class) MarshalText() ([]byte, error) { return []byte(c.String()), nil }

// Difference is one thing that is not the same. Absent is "".
type Difference struct {
	Class Class  `json:"class"`
	Where string `json:"where"` // page 3, trial.json, …
	What  string `json:"what"`
	Old   string `json:"old"`
	New   string `json:"new"`
}

// compareResults lists what differs from one result's JSON to another, as
// numbers to nine digits: another processor may round the last ones otherwise.
// The version of the engine and the diagnostics are no part of a result.
func compareResults(old, now []byte) ([]Difference, error) {
	was, err := decode(old)
	if err != nil {
		return nil, err
	}
	is, err := decode(now)
	if err != nil {
		return nil, err
	}
	c := &comparer{}
	c.tables(nil, was, is)
	slices.SortStableFunc(c.list, func(a, b found) int {
		return cmp.Or(cmp.Compare(a.Class, b.Class), cmp.Compare(a.depth, b.depth), cmp.Compare(a.rank, b.rank))
	})
	var out []Difference
	for _, f := range c.list {
		out = append(out, f.Difference)
	}
	return out, nil
}

func decode(text []byte) (map[string]any, error) {
	d := json.NewDecoder(bytes.NewReader(text))
	d.UseNumber()
	var root map[string]any
	if err := d.Decode(&root); err != nil {
		return nil, err
	}
	delete(root, "engine")
	delete(root, "diagnostics")
	return root, nil
}

// comparer walks two results at once. What one side lacks as a whole is one
// difference.
type comparer struct{ list []found }

type found struct {
	Difference
	depth, rank int
}

// foremost are the keys that a reader looks for first.
var foremost = []string{"verdict", "sha256", "source_sha256", "estimate", "low", "high", "p", "p_adjusted"}

func (c *comparer) add(path []string, old, now any) {
	rank := slices.Index(foremost, path[len(path)-1])
	if rank < 0 {
		rank = len(foremost)
	}
	c.list = append(c.list, found{differing(path, old, now), len(path), rank})
}

func (c *comparer) tables(path []string, old, now map[string]any) {
	keys := map[string]bool{}
	for k := range old {
		keys[k] = true
	}
	for k := range now {
		keys[k] = true
	}
	for _, k := range slices.Sorted(maps.Keys(keys)) {
		a, ok := old[k]
		b, ok2 := now[k]
		if !ok {
			a = absent{}
		}
		if !ok2 {
			b = absent{}
		}
		c.values(append(slices.Clip(path), k), a, b)
	}
}

func (c *comparer) values(path []string, old, now any) {
	if same(old, now) {
		return
	}
	a, ok := old.(map[string]any)
	b, ok2 := now.(map[string]any)
	if ok && ok2 {
		c.tables(path, a, b)
		return
	}
	x, y := items(old), items(now)
	if x != nil || y != nil {
		c.tables(path, x, y)
		return
	}
	c.add(path, old, now)
}

// items are the entries of a list of tables by what they are known by; nil
// for anything else.
func items(v any) map[string]any {
	list, _ := v.([]any)
	out := map[string]any{}
	for _, item := range list {
		o, ok := item.(map[string]any)
		if !ok {
			return nil
		}
		id := identity(o)
		for n := 2; out[id] != nil; n++ {
			id = identity(o) + " #" + strconv.Itoa(n)
		}
		out[id] = o
	}
	if len(out) == 0 {
		return nil
	}
	return out
}

// absent stands for a value that one side lacks.
type absent struct{}

func differing(path []string, old, now any) Difference {
	d := Difference{Class: classOf(path, old, now), What: strings.Join(path, " "), Old: shown(old), New: shown(now)}
	if d.What = strings.TrimPrefix(d.What, "hypotheses "); d.Old == d.New && strings.HasSuffix(d.Old, " values") {
		d.New = "others"
	} else if d.Old == d.New {
		d.Old, d.New = whole(old), whole(now)
	}
	return d
}

// whole is a value with all its digits.
func whole(v any) string {
	if n, ok := v.(json.Number); ok {
		return n.String()
	}
	out, err := json.Marshal(v)
	if err != nil || v == (absent{}) {
		return shown(v)
	}
	return string(out)
}

func classOf(path []string, old, now any) Class {
	last := path[len(path)-1]
	_, number := old.(json.Number)
	_, number2 := now.(json.Number)
	if last == "sha256" || last == "source_sha256" {
		return File
	}
	switch path[0] {
	case "hypotheses", "families", "sensitivity":
		if last == "verdict" || path[0] == "hypotheses" && len(path) == 2 {
			return Verdict
		}
	case "studies", "files", "flow":
		return Result
	case "outcomes", "choices":
		return Plan
	case "record", "seal", "timeline", "deviations", "decisions":
		return Other
	}
	switch last {
	case "reading_words", "sentence", "statement", "text", "decision", "next_steps", "why", "label", "margin_why":
		return Words
	}
	if _, list := now.([]any); number || number2 || list {
		return Number
	}
	return Other
}

// identities are the keys by which an item of a list is known, tried in this
// order.
var identities = [][]string{
	{"name"}, {"path", "study", "outcome", "set"}, {"hypothesis", "look", "method", "case"}, {"study", "outcome", "set", "look", "group"}, {"because", "set"},
	{"outcome", "set", "model"}, {"at", "kind", "what"}, {"what", "group"}, {"assumption"}, {"set"},
	{"alternative"}, {"margin"}, {"date", "what"},
}

func identity(o map[string]any) string {
	for _, keys := range identities {
		if _, ok := o[keys[0]]; !ok {
			continue
		}
		var parts []string
		for _, k := range keys {
			if v, ok := o[k]; ok {
				parts = append(parts, fmt.Sprint(v))
			}
		}
		return strings.Join(parts, ", ")
	}
	return "entry"
}

// same compares values; numbers to nine digits.
func same(a, b any) bool {
	switch a := a.(type) {
	case json.Number:
		b, ok := b.(json.Number)
		if !ok {
			return false
		}
		x, err := a.Float64()
		y, err2 := b.Float64()
		if err != nil || err2 != nil {
			return a == b
		}
		return x == y || math.Abs(x-y) <= 1e-9*max(math.Abs(x), math.Abs(y))
	case []any:
		b, ok := b.([]any)
		return ok && slices.EqualFunc(a, b, same)
	case map[string]any:
		b, ok := b.(map[string]any)
		if !ok || len(a) != len(b) {
			return false
		}
		for k, v := range a {
			if w, ok := b[k]; !ok || !same(v, w) {
				return false
			}
		}
		return true
	}
	return a == b
}

// shown is a value for a reader.
func shown(v any) string {
	switch v := v.(type) {
	case absent:
		return ""
	case nil:
		return "no limit"
	case json.Number:
		if x, err := v.Float64(); err == nil {
			return strconv.FormatFloat(x, 'g', 6, 64)
		}
		return v.String()
	case string:
		return v
	case map[string]any:
		if verdict, ok := v["verdict"].(string); ok {
			return verdict
		}
		return "present"
	case []any:
		if len(v) > 4 {
			return fmt.Sprintf("%d values", len(v))
		}
		parts := []string{}
		for _, item := range v {
			parts = append(parts, shown(item))
		}
		return "[" + strings.Join(parts, ", ") + "]"
	}
	return fmt.Sprint(v)
}
