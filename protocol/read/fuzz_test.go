package read

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// FuzzRead feeds texts to the reader: no panic, every place inside the text,
// and the same opinion as the TOML module on what is valid and what it says.
func FuzzRead(f *testing.F) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		f.Fatal(err)
	}
	f.Add(base)
	files, _ := filepath.Glob("testdata/toml/*.toml")
	for _, name := range files {
		text, err := os.ReadFile(name)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(text)
	}
	for _, s := range []string{
		"", "\ufeffa = 1", "a = 1\r\nb = 2\r\n", "a.b.c = 1\n[a.d]\ne = 2", "[[a]]\n[[a.b]]\nc=1\n[[a.b]]\n[[a]]\n",
		"a = {b = 1, c.d = [1, {e = 2}]}", "a = \"\"\"\nx\\\n  y\"\"\"\"\"", "a = '''x''y'''", "a = 1979-05-27 07:32:00Z",
		"a = 07:32:00", "a = [1, 2.5, 'x', true,]", "a = 0x1F_F\nb = 1_000.5e-3", "\"a b\".'c' = inf", "a = {\n b = 1,\n # c\n}",
		"a = {b.c = 1}\na.b.d = 2", "[a]\nb.c = 1\n[a.b]\n", "a = -nan", "[a]\n[a]", "a = 1\na = 2", "a = \"\\u00e9\\x41\\e\"",
	} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		if len(text) > 1<<16 {
			return
		}
		checkRead(t, text)
	})
}

// checkRead is one round of FuzzRead.
func checkRead(t *testing.T, text []byte) {
	src := diag.NewSource("a.toml", text)
	rec, list := readWith(src, true)
	for _, d := range list {
		if d.Span.Start < 0 || d.Span.End < d.Span.Start || d.Span.End > len(text) {
			t.Fatalf("%s lies at %v, outside of %d bytes", d.Code, d.Span, len(text))
		}
		_ = diag.Format(d, src)
	}
	inside(t, rec.Tree, len(text))

	clean, faults := clean(text)
	if clean == nil || len(faults) > 0 {
		return
	}
	root, faults, _ := Tree(clean)
	values, err := moduleDecode(strings.TrimPrefix(string(clean), "\ufeff"))
	for _, d := range faults {
		if d.Code == "R104" {
			return // deeper than a record is read
		}
	}
	switch {
	case err != nil && !faults.HasErrors():
		t.Fatalf("the module refuses what was accepted: %v", err)
	case err == nil && faults.HasErrors():
		t.Fatalf("the module accepts what was refused: %s at %v", faults[0].Message, faults[0].Span)
	case err == nil:
		if d := differs(root, values); d != "" {
			t.Fatalf("the two readings differ: %s", d)
		}
	}
}

// inside checks the places of a tree.
func inside(t *testing.T, n *record.Node, size int) {
	if n.Span.Start < 0 || n.Span.End < n.Span.Start || n.Span.End > size {
		t.Fatalf("a value lies at %v, outside of %d bytes", n.Span, size)
	}
	for _, i := range n.Items {
		inside(t, i, size)
	}
	for _, e := range n.Entries {
		if e.KeySpan.Start < 0 || e.KeySpan.End <= e.KeySpan.Start || e.KeySpan.End > size {
			t.Fatalf("the key %q lies at %v", e.Key, e.KeySpan)
		}
		inside(t, e.Value, size)
	}
}

// differs compares a tree with the module's values; "" when they agree.
func differs(n *record.Node, v any) string {
	switch v := v.(type) {
	case map[string]any:
		if n.Kind != record.TableNode || len(n.Entries) != len(v) {
			return "a table"
		}
		for _, e := range n.Entries {
			child, ok := v[e.Key]
			if !ok {
				return "the key " + e.Key
			}
			if d := differs(e.Value, child); d != "" {
				return e.Key + "." + d
			}
		}
		return ""
	case []map[string]any:
		items := make([]any, len(v))
		for i, m := range v {
			items[i] = m
		}
		return differs(n, items)
	case []any:
		if n.Kind != record.ArrayNode || len(n.Items) != len(v) {
			return "an array"
		}
		for i, item := range v {
			if d := differs(n.Items[i], item); d != "" {
				return d
			}
		}
		return ""
	case string:
		if n.Kind != record.StringNode || n.Text != v {
			return "a text"
		}
	case int64:
		if n.Kind != record.IntegerNode || n.Int != v {
			return "a whole number"
		}
	case float64:
		if n.Kind != record.FloatNode || math.Float64bits(n.Float) != math.Float64bits(v) {
			return "a number"
		}
	case bool:
		if n.Kind != record.BoolNode || n.Bool != v {
			return "a truth"
		}
	case time.Time:
		switch n.Kind {
		case record.InstantNode:
			if !n.Time.Equal(v) {
				return "an instant"
			}
		case record.LocalDateNode:
			if n.Date != record.DateOf(v) {
				return "a date"
			}
		case record.LocalDateTimeNode, record.LocalTimeNode:
		default:
			return "a time"
		}
	default:
		return "a value of no kind"
	}
	return ""
}

// TestDiffers checks that the comparison can fail.
func TestDiffers(t *testing.T) {
	root, faults, _ := Tree([]byte("a = 1\nb = [1.5, 'x']\nc = {d = true}\ne = 2026-01-02\n"))
	if faults.HasErrors() {
		t.Fatal(faults)
	}
	day := time.Date(2026, 1, 2, 0, 0, 0, 0, time.UTC)
	right := func() map[string]any {
		return map[string]any{"a": int64(1), "b": []any{1.5, "x"}, "c": map[string]any{"d": true}, "e": day}
	}
	if d := differs(root, right()); d != "" {
		t.Fatal(d)
	}
	for key, wrong := range map[string]any{"a": int64(2), "b": []any{1.5, "y"}, "c": map[string]any{"d": false}, "e": day.AddDate(0, 0, 1)} {
		m := right()
		m[key] = wrong
		if differs(root, m) == "" {
			t.Errorf("a wrong %s passes", key)
		}
	}
	if differs(root, map[string]any{"a": int64(1)}) == "" {
		t.Error("missing keys pass")
	}
}
