package seal

import (
	"strings"
	"testing"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// full is a plan with many kinds of keys; it need not be a sensible one.
const full = `[plan]
question = "Q"
level = 0.9
alpha = { one_sided = 0.05, two_sided = 0.1 }
[plan.outcome.a]
label = "A"
measure = "risk-difference"
groups = ["x", "y"]
smallest = [-0.1, 0.1]
cluster = { icc = 0.1, size = 3 }
[plan.outcome.b]
label = "B"
digits = 2
[plan.hypothesis.H]
outcome = "a"
claim = "equivalent"
statement = "S"
margin_basis = { effect = 1, low = 0.5, high = 2, source = "A report" }
adjust = ["age", "site"]
[plan.family.F]
members = ["H"]
transfer = [[0, 1], [1, 0]]
[plan.pooling.a]
independent = "Different lines."
model = "random"
guard = false
[plan.data]
exclude = [ { column = "age", below = 18, why = "Adults." } ]
[plan.rehearsal]
replicates = 1000
scenarios = [ { label = "null", effects = { a = 0 } } ]
`

// Each single value that changes is found at its own path, as wording where
// the key table calls it prose, and is declared by that path alone.
func TestChangesEveryKey(t *testing.T) {
	old := tree(t, full).Get("plan")
	count := 0
	var walk func(path string, pick func(root *record.Node) *record.Node)
	walk = func(path string, pick func(root *record.Node) *record.Node) {
		n := pick(old)
		if n.Kind == record.TableNode {
			for _, e := range n.Entries {
				walk(path+"."+e.Key, func(root *record.Node) *record.Node { return pick(root).Get(e.Key) })
			}
			return
		}
		count++
		now := tree(t, full).Get("plan")
		leaf := pick(now)
		changeFirst(leaf)
		got := Changes(old, now, diag.Span{})
		if len(got) != 1 || got[0].Path != path || got[0].Old != text(n) || got[0].New != text(leaf) || got[0].Span != leaf.Span {
			t.Errorf("%s: %+v", path, got)
			return
		}
		k, _ := record.KeyAt(path)
		if k == nil || got[0].Wording != k.Prose {
			t.Errorf("%s: wording %v", path, got[0].Wording)
		}
		parent := path[:strings.LastIndexByte(path, '.')]
		plain := strings.HasSuffix(parent, ".alpha") || strings.HasSuffix(parent, ".cluster") || strings.HasSuffix(parent, ".margin_basis")
		if !declares(path, path) || declares(parent, path) != plain || declares(path+"x", path) || declares("plan", path) {
			t.Errorf("%s: declared by its table: %v", path, declares(parent, path))
		}
	}
	walk("plan", func(root *record.Node) *record.Node { return root })
	if count < 25 {
		t.Errorf("only %d values", count)
	}
	if got := Changes(old, tree(t, full).Get("plan"), diag.Span{}); len(got) > 0 {
		t.Errorf("a plan differs from itself: %+v", got)
	}
	if got := Changes(nil, nil, diag.Span{}); len(got) > 0 {
		t.Errorf("nothing differs from nothing: %+v", got)
	}
}

// changeFirst changes a value, of an array its first, of a table in an array
// one that is no prose.
func changeFirst(n *record.Node) {
	switch n.Kind {
	case record.StringNode:
		n.Text += "x"
	case record.IntegerNode:
		n.Int++
	case record.FloatNode:
		n.Float *= 2
	case record.BoolNode:
		n.Bool = !n.Bool
	case record.ArrayNode:
		changeFirst(n.Items[0])
	case record.TableNode:
		changeFirst(n.Entries[len(n.Entries)/2].Value)
	default:
		panic("no such value in the plan")
	}
}
