package seal

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"steelyard/protocol/data"
	"steelyard/protocol/record"
)

// New prepares the seal of a record as it stands: plan, defaults, and the
// digests of every result, deviation and data file now known. Results under a
// mask are not known and are left out. Append gives it its place in a chain.
func New(rec *record.Record, tables data.Tables, engine string, at time.Time) Entry {
	e := Entry{Time: at, Engine: engine, Defaults: Defaults(rec), Files: files(tables)}
	if rec.Source != nil {
		e.Record = Digest(rec.Source.Text)
	}
	for _, r := range results(rec) {
		if r.res == nil || !rec.Masked(r.res) {
			e.Results = append(e.Results, Sealed{r.Name, r.sum})
		}
	}
	for i, n := range items(rec, "deviation") {
		e.Deviations = append(e.Deviations, Deviation{Digest(Canonical(n)), rec.Deviations[i].Date.V.String()})
	}
	if plan := rec.Tree.Get("plan"); plan != nil {
		e.Canonical = Canonical(plan)
		e.Plan = Digest(e.Canonical)
	}
	return e
}

// known is an entry with results as it stands in the record.
type known struct {
	Name
	sum  string
	node *record.Node
	res  *record.Result // nil for a missing result
}

// results lists results, earlier results and missing results with digests.
func results(rec *record.Record) []known {
	var out []known
	add := func(kind, key string, list []*record.Result) {
		for i, n := range items(rec, key) {
			if i < len(list) {
				r := list[i]
				out = append(out, known{Name{kind, r.Study.V, r.Outcome.V, r.Set.V, lookText(r.Look)}, resultDigest(n), n, r})
			}
		}
	}
	add("result", "result", rec.Results)
	add("earlier", "earlier_result", rec.Earlier)
	for i, n := range items(rec, "missing_result") {
		if i < len(rec.Missing) {
			m := rec.Missing[i]
			out = append(out, known{Name{"missing", m.Study.V, m.Outcome.V, "", ""}, Digest(Canonical(n)), n, nil})
		}
	}
	return out
}

// items are the tables of an array of tables.
func items(rec *record.Record, key string) []*record.Node {
	if n := rec.Tree.Get(key); n != nil {
		return n.Items
	}
	return nil
}

// resultDigest covers everything of an entry but where it is written down,
// who entered and who checked it, which may be added later.
func resultDigest(n *record.Node) string {
	without := &record.Node{Kind: record.TableNode}
	for _, e := range n.Entries {
		switch e.Key {
		case "source", "by", "checked_by":
		default:
			without.Put(e)
		}
	}
	return Digest(Canonical(without))
}

// lookText is a look as a word: "", its number, or "unplanned".
func lookText(l record.Look) string {
	switch {
	case !l.Stated:
		return ""
	case l.Unplanned:
		return "unplanned"
	}
	return strconv.Itoa(l.Number)
}

// files lists the data files that were read, by path.
func files(tables data.Tables) (out []File) {
	for _, v := range tables {
		if f := (File{v.SHA256, v.File}); !slices.Contains(out, f) {
			out = append(out, f)
		}
	}
	slices.SortFunc(out, func(a, b File) int { return strings.Compare(a.Path, b.Path) })
	return out
}

// Defaults lists what a plan leaves to the program: for every table that is
// written the keys that have a default and are not stated, and the method of
// every hypothesis that names none.
func Defaults(rec *record.Record) (out []Default) {
	plan := rec.Tree.Get("plan")
	if plan == nil {
		return nil
	}
	var walk func(path, pattern string, n *record.Node)
	walk = func(path, pattern string, n *record.Node) {
		for _, k := range record.KeysIn(pattern) {
			at := path + "." + k.Name()
			v := n.Get(k.Name())
			switch {
			case k.Kind == record.KindTable && v != nil:
				walk(at, k.Below(), v)
			case k.Kind == record.KindNamedTables && v != nil:
				for _, e := range byKey(v.Entries) {
					walk(at+"."+e.Key, k.Below(), e.Value)
				}
			case v == nil && k.Default != nil && k.Ready:
				out = append(out, Default{at, defaultText(k.Default)})
			}
		}
	}
	walk("plan", "plan", plan)
	for _, h := range rec.Plan.Hypotheses {
		o := rec.OutcomeNamed(h.Outcome.V)
		if o == nil || h.Method.Stated || h.Adjust.Stated || h.Strata.Stated {
			continue
		}
		if m := record.MeasureOf(o.Measure.V); m != nil && len(m.Methods) > 0 {
			out = append(out, Default{"plan.hypothesis." + h.Name + ".method", defaultText(m.Methods[0])})
		}
	}
	slices.SortStableFunc(out, func(a, b Default) int { return strings.Compare(a.Path, b.Path) })
	return out
}

func byKey(entries []record.Entry) []record.Entry {
	entries = slices.Clone(entries)
	slices.SortFunc(entries, func(a, b record.Entry) int { return strings.Compare(a.Key, b.Key) })
	return entries
}

// defaultText writes a default of the key table as a record would.
func defaultText(v any) string {
	switch v := v.(type) {
	case string:
		return string(appendQuoted(nil, v))
	case float64:
		return string(appendFloat(nil, v))
	case int64:
		return strconv.FormatInt(v, 10)
	case bool:
		return strconv.FormatBool(v)
	case []string:
		var b []byte
		for i, s := range v {
			if i > 0 {
				b = append(b, ", "...)
			}
			b = appendQuoted(b, s)
		}
		return "[" + string(b) + "]"
	}
	panic(fmt.Sprintf("seal: a default of type %T", v))
}
