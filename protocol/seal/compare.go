package seal

import (
	"bytes"
	"slices"
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// Change is one difference between two plans.
type Change struct {
	Path     string    // of the key; of the table where a table was added or removed
	Old, New string    // as a record would have it; "" where the key was absent
	Default  string    // what the program chose where Old is absent, as sealed
	Span     diag.Span // of the new value; where it was removed, of its table
	Wording  bool      // labels and prose only: no number depends on it
	Declared bool      // a deviation names it
	By       int       // that deviation, from 0; -1 where none does
}

// Changes compares two plans, key by key, and returns what differs in the
// order of the paths. Old has no places; at is the place of the present plan.
func Changes(old, now *record.Node, at diag.Span) []Change {
	d := differ{}
	d.table("plan", old, now, at)
	slices.SortStableFunc(d.list, func(a, b Change) int { return strings.Compare(a.Path, b.Path) })
	return d.list
}

type differ struct{ list []Change }

// table compares two tables; either may be nil, which is an empty one.
func (d *differ) table(path string, old, now *record.Node, at diag.Span) {
	if now != nil && !now.Span.IsZero() {
		at = now.Span
	}
	seen := map[string]bool{}
	for _, n := range []*record.Node{now, old} {
		if n == nil {
			continue
		}
		for _, e := range n.Entries {
			if !seen[e.Key] {
				seen[e.Key] = true
				d.value(path+"."+e.Key, old.Get(e.Key), now.Get(e.Key), at)
			}
		}
	}
}

func (d *differ) value(path string, old, now *record.Node, at diag.Span) {
	if bytes.Equal(Canonical(old), Canonical(now)) {
		return
	}
	k, name := record.KeyAt(path)
	both := isTable(old) && isTable(now)
	switch {
	case k != nil && k.Kind == record.KindNamedTables && !name && (old == nil || isTable(old)) && (now == nil || isTable(now)):
		d.table(path, old, now, at)
		return
	case both:
		d.table(path, old, now, at)
		return
	}
	if now != nil && !now.Span.IsZero() {
		at = now.Span
	}
	d.list = append(d.list, Change{Path: path, Old: text(old), New: text(now), Span: at, Wording: wording(path, k, old, now), By: -1})
}

func isTable(n *record.Node) bool { return n != nil && n.Kind == record.TableNode }

// wording reports whether a change is one of labels and prose. A table that
// comes or goes is more than that, but for estimands, which are prose.
func wording(path string, k *record.Key, old, now *record.Node) bool {
	switch {
	case k == nil:
		return false
	case k.Prose:
		return true
	case k.Kind == record.KindNamedTables:
		return strings.HasPrefix(path, "plan.estimand.")
	case k.Kind == record.KindTables && old != nil && now != nil:
		return bytes.Equal(Canonical(withoutProse(k, old)), Canonical(withoutProse(k, now)))
	}
	return false
}

// withoutProse is an array of tables without the keys that are prose.
func withoutProse(k *record.Key, n *record.Node) *record.Node {
	out := &record.Node{Kind: n.Kind}
	for _, item := range n.Items {
		kept := &record.Node{Kind: item.Kind}
		for _, e := range item.Entries {
			if below := record.KeyOf(k.Below() + "." + e.Key); below == nil || !below.Prose {
				kept.Put(e)
			}
		}
		out.Items = append(out.Items, kept)
	}
	return out
}

// declares reports whether the path that a deviation names covers a change:
// it is the very key, or the table of plain values that holds the key, such
// as alpha.
func declares(path, change string) bool {
	if path == change {
		return true
	}
	rest, ok := strings.CutPrefix(change, path+".")
	if !ok || strings.Contains(rest, ".") {
		return false
	}
	k, _ := record.KeyAt(path)
	if k == nil || k.Kind != record.KindTable {
		return false
	}
	for _, below := range record.KeysIn(k.Below()) {
		switch below.Kind {
		case record.KindString, record.KindWord, record.KindNumber, record.KindInt, record.KindBool:
		default:
			return false
		}
	}
	return true
}
