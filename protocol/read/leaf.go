package read

import (
	"math"
	"reflect"
	"slices"
	"strings"
	"time"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// leaf checks one value by its row and stores it; a value at fault is stored
// as refused.
func (b *binder) leaf(row *record.Key, n *record.Node, f reflect.Value) {
	switch p := f.Addr().Interface().(type) {
	case *record.String:
		store(p, n, b.text(row, n))
	case *record.Strings:
		storeItems(p, n, b.items(row, n, false), func(item *record.Node) (s record.String) {
			store(&s, item, b.text(row, item))
			return s
		})
	case *record.Number:
		store(p, n, b.number(row, n))
	case *record.Numbers:
		storeItems(p, n, b.items(row, n, row.One), func(item *record.Node) (v record.Number) {
			store(&v, item, b.number(row, item))
			return v
		})
	case *[]record.Numbers:
		b.rows(row, n, p)
	case *record.Int:
		store(p, n, b.whole(row, n))
	case *record.Bool:
		store(p, n, b.truth(row, n))
	case *record.Day:
		store(p, n, b.day(row, n))
	case *record.Instant:
		store(p, n, b.instant(row, n))
	case *record.Bounds:
		store(p, n, b.bounds(row, n))
	case *record.Scalar:
		*p = b.scalar(row, n)
	case *record.Value[[]record.Scalar]:
		storeItems(p, n, b.items(row, n, false), func(item *record.Node) record.Scalar { return b.scalar(row, item) })
	case *record.Look:
		*p = b.look(row, n)
	default:
		panic("read: a field of a type that no key has: " + row.Path)
	}
}

// store fills a value; nil refuses it.
func store[T any](p *record.Value[T], n *record.Node, v *T) {
	p.Span = n.Span
	if v != nil {
		p.V, p.Stated = *v, true
	}
}

// storeItems fills an array item by item; nil refuses it.
func storeItems[T any](p *record.Value[[]T], n *record.Node, items []*record.Node, one func(*record.Node) T) {
	p.Span = n.Span
	if items == nil {
		return
	}
	p.Stated = true
	p.V = make([]T, 0, len(items))
	for _, item := range items {
		p.V = append(p.V, one(item))
	}
}

// wrongType reports a value of another kind than the row's.
func (b *binder) wrongType(row *record.Key, n *record.Node) {
	if n.Kind == record.UnreadNode {
		return
	}
	d := diag.Error("R203", n.Span, "%q takes %s, not %s", row.Name(), row.Kind, describe(n))
	switch {
	case row.Kind == record.KindInstant && n.Kind == record.LocalDateTimeNode:
		d = d.WithHelp("add the offset from UTC: %s+02:00, or Z for UTC itself", n.Text)
	case row.Kind == record.KindDay && n.Kind == record.InstantNode && row.Name() == "date" && strings.HasSuffix(row.Parent(), "result"):
		d = d.WithHelp("the moment a result became known goes under the key known")
	case n.Kind == record.StringNode && (row.Kind == record.KindDay || row.Kind == record.KindInstant || row.Kind == record.KindNumber || row.Kind == record.KindInt || row.Kind == record.KindBool || row.Kind == record.KindBounds):
		if kind, ok := classify(n.Text); ok && fits(row.Kind, kind) {
			d = d.WithHelp("write it without quotes: %s", n.Text)
		}
	case row.Kind == record.KindStrings && n.Kind == record.StringNode:
		d = d.WithHelp("write it in brackets: [%s]", quoteShort(n.Text))
	case row.Kind == record.KindString && n.Kind != record.TableNode && n.Kind != record.ArrayNode:
		d = d.WithHelp("write it in quotes")
	case row.Kind == record.KindNamedTables && row.Parent() == "result":
		d = d.WithHelp("write %s.NAME = { … }", row.Name())
	case row.Kind == record.KindNamedTables:
		d = d.WithHelp("write [%s.NAME]", row.Path)
	case row.Kind == record.KindTable && row.Name() == "alpha":
		d = d.WithHelp("write alpha = { one_sided = 0.05 }")
	}
	b.list.Add(d)
}

func fits(kind record.Kind, n record.NodeKind) bool {
	switch kind {
	case record.KindDay:
		return n == record.LocalDateNode
	case record.KindInstant:
		return n == record.InstantNode
	case record.KindNumber, record.KindBounds:
		return n == record.IntegerNode || n == record.FloatNode
	case record.KindInt:
		return n == record.IntegerNode
	case record.KindBool:
		return n == record.BoolNode
	default:
		return false
	}
}

// text checks a text, and its word where the row has a closed list.
func (b *binder) text(row *record.Key, n *record.Node) *string {
	if n.Kind != record.StringNode {
		single := *row
		if row.Kind == record.KindStrings || row.Kind == record.KindWords {
			single.Kind = record.KindString
		}
		b.wrongType(&single, n)
		return nil
	}
	if row.Required && strings.TrimSpace(n.Text) == "" {
		b.list.Add(diag.Error("R210", n.Span, "%q is empty", row.Name()))
		return nil
	}
	if len(row.Words) == 0 {
		return &n.Text
	}
	if !slices.Contains(row.Words, n.Text) {
		d := diag.Error("R202", n.Span, "%s is no value of %q", quoteShort(n.Text), row.Name())
		if near := nearest(n.Text, row.Words); near != "" {
			d = d.WithHelp("did you mean %q?", near)
		} else {
			d = d.WithHelp("%s is one of %s", row.Name(), words(row.Words))
		}
		b.list.Add(d)
		return nil
	}
	b.later(row, n)
	return &n.Text
}

// later reports a word that this version does not compute.
func (b *binder) later(row *record.Key, n *record.Node) {
	unready := slices.Contains(row.Later, n.Text)
	if row.Path == "plan.outcome.NAME.measure" {
		unready = !record.MeasureOf(n.Text).Ready
	}
	if unready && !b.skipReady && !b.all {
		b.list.Add(diag.Error("R208", n.Span, "this version of the program reads %s = %q but does not compute it", row.Name(), n.Text).
			WithHelp("choose another, or use a later version"))
	}
}

// number checks a number.
func (b *binder) number(row *record.Key, n *record.Node) *float64 {
	v := n.Float
	switch n.Kind {
	case record.IntegerNode:
		v = float64(n.Int)
	case record.FloatNode:
	default:
		b.wrongNumber(row, n)
		return nil
	}
	if math.IsNaN(v) || math.IsInf(v, 0) && !row.Infinite {
		b.list.Add(diag.Error("R211", n.Span, "%q must be finite, not %s", row.Name(), record.FormatNumber(v)))
		return nil
	}
	if row.Range != nil && !row.Range.Contains(v) {
		b.outOfRange(row, n, v)
		return nil
	}
	if row.Whole && v != math.Trunc(v) {
		b.list.Add(diag.Error("R209", n.Span, "%q counts and must be whole, not %s", row.Name(), record.FormatNumber(v)))
		return nil
	}
	return &v
}

// wrongNumber reports what stands where a number belongs, item or whole.
func (b *binder) wrongNumber(row *record.Key, n *record.Node) {
	single := *row
	single.Kind = record.KindNumber
	b.wrongType(&single, n)
}

func (b *binder) outOfRange(row *record.Key, n *record.Node, v float64) {
	if row.Path == "result.p.value" || row.Path == "earlier_result.p.value" {
		b.list.Add(diag.Error("R204", n.Span, "a p-value lies between 0 and 1, not at %s", record.FormatNumber(v)))
		return
	}
	d := diag.Error("R204", n.Span, "%q must be %s, not %s", row.Name(), row.Range, record.FormatNumber(v))
	if row.Range.High <= 1 && v > 1 && v <= 100 && v/100 < row.Range.High {
		d = d.WithHelp("a share is written as a number below 1: %s", record.FormatNumber(math.Round(v*1e10)/1e12))
	}
	b.list.Add(d)
}

// whole checks a whole number.
func (b *binder) whole(row *record.Key, n *record.Node) *int64 {
	if n.Kind != record.IntegerNode {
		if n.Kind == record.FloatNode && n.Float == math.Trunc(n.Float) && math.Abs(n.Float) < 1<<53 {
			b.list.Add(diag.Error("R203", n.Span, "%q takes a whole number, written without a point", row.Name()).
				WithHelp("write %s", record.FormatNumber(n.Float)))
		} else {
			b.wrongType(row, n)
		}
		return nil
	}
	if row.Range != nil && !row.Range.Contains(float64(n.Int)) {
		b.outOfRange(row, n, float64(n.Int))
		return nil
	}
	return &n.Int
}

func (b *binder) truth(row *record.Key, n *record.Node) *bool {
	if n.Kind != record.BoolNode {
		b.wrongType(row, n)
		return nil
	}
	return &n.Bool
}

func (b *binder) day(row *record.Key, n *record.Node) *record.Date {
	if n.Kind != record.LocalDateNode {
		b.wrongType(row, n)
		return nil
	}
	return b.year(row, n, n.Date.Year, &n.Date)
}

// year refuses a year that is surely a slip.
func (b *binder) year(row *record.Key, n *record.Node, year int, d *record.Date) *record.Date {
	if year < 1800 || year > 2999 {
		b.list.Add(diag.Error("R204", n.Span, "%q lies in the year %d; years from 1800 to 2999 are read", row.Name(), year))
		return nil
	}
	return d
}

func (b *binder) instant(row *record.Key, n *record.Node) *time.Time {
	if n.Kind != record.InstantNode {
		b.wrongType(row, n)
		return nil
	}
	if b.year(row, n, n.Time.Year(), &record.Date{}) == nil {
		return nil
	}
	return &n.Time
}

// items checks the form and the length of an array; nil refuses it.
func (b *binder) items(row *record.Key, n *record.Node, one bool) []*record.Node {
	if n.Kind != record.ArrayNode {
		if one {
			return []*record.Node{n}
		}
		b.wrongType(row, n)
		return nil
	}
	if len(n.Items) < row.MinLen || row.MaxLen > 0 && len(n.Items) > row.MaxLen {
		want := count(row.MinLen, "item")
		switch {
		case row.MaxLen == 0:
			want = "at least " + want
		case row.MaxLen != row.MinLen:
			want = count(row.MinLen, "item") + " to " + count(row.MaxLen, "item")
		}
		b.list.Add(diag.Error("R212", n.Span, "%q takes %s, not %d", row.Name(), want, len(n.Items)))
		return nil
	}
	if n.Items == nil {
		return []*record.Node{}
	}
	return n.Items
}

func count(n int, what string) string {
	s := record.FormatNumber(float64(n)) + " " + what
	if n != 1 {
		s += "s"
	}
	return s
}

func (b *binder) rows(row *record.Key, n *record.Node, p *[]record.Numbers) {
	for _, item := range b.items(row, n, false) {
		var r record.Numbers
		if item.Kind != record.ArrayNode {
			b.wrongType(row, item)
			r.Span = item.Span
		} else {
			storeItems(&r, item, append([]*record.Node{}, item.Items...), func(cell *record.Node) (v record.Number) {
				store(&v, cell, b.number(row, cell))
				return v
			})
		}
		*p = append(*p, r)
	}
}

// bounds checks `smallest` and `margin`: a number or a pair.
func (b *binder) bounds(row *record.Key, n *record.Node) *record.Region {
	if n.Kind != record.ArrayNode {
		if n.Kind != record.IntegerNode && n.Kind != record.FloatNode {
			b.wrongType(row, n)
			return nil
		}
		v := b.number(row, n)
		if v == nil {
			return nil
		}
		return &record.Region{Distance: *v}
	}
	if len(n.Items) != 2 {
		b.list.Add(diag.Error("R212", n.Span, "%q as an array takes two limits, [low, high], not %d", row.Name(), len(n.Items)))
		return nil
	}
	low, high := b.number(row, n.Items[0]), b.number(row, n.Items[1])
	if low == nil || high == nil {
		return nil
	}
	return &record.Region{IsPair: true, Low: *low, High: *high}
}

func (b *binder) scalar(row *record.Key, n *record.Node) record.Scalar {
	s := record.Scalar{Span: n.Span}
	switch n.Kind {
	case record.StringNode:
		s.Text, s.Stated = n.Text, true
	case record.BoolNode:
		s.Text, s.Stated = map[bool]string{true: "true", false: "false"}[n.Bool], true
	case record.IntegerNode, record.FloatNode:
		if v := b.number(row, n); v != nil {
			s.Number, s.IsNumber, s.Stated = *v, true, true
			s.Text = record.FormatNumber(*v)
		}
	default:
		single := *row
		single.Kind = record.KindScalar
		b.wrongType(&single, n)
	}
	return s
}

func (b *binder) look(row *record.Key, n *record.Node) record.Look {
	l := record.Look{Span: n.Span}
	switch {
	case n.Kind == record.StringNode && n.Text == "unplanned":
		l.Unplanned, l.Stated = true, true
	case n.Kind == record.IntegerNode && n.Int >= 1 && n.Int <= 1000:
		l.Number, l.Stated = int(n.Int), true
	case n.Kind == record.IntegerNode:
		b.list.Add(diag.Error("R204", n.Span, "a look is numbered from 1 to 1000, not %d", n.Int))
	default:
		b.wrongType(row, n)
	}
	return l
}

// setDefault gives a field its default.
func setDefault(f reflect.Value, value any) {
	switch p := f.Addr().Interface().(type) {
	case *record.String:
		p.V = value.(string)
	case *record.Number:
		p.V = value.(float64)
	case *record.Int:
		p.V = value.(int64)
	case *record.Bool:
		p.V = value.(bool)
	case *record.Strings:
		p.V = nil
		for _, s := range value.([]string) {
			p.V = append(p.V, record.String{V: s})
		}
	default:
		panic("read: a default for a field that cannot have one")
	}
}
