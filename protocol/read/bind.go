package read

import (
	"reflect"
	"regexp"
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// A field of the typed record is in one of three states: stated; refused (its
// place is known, the value is not: a fault was reported); absent or default
// (no place). Rules look at stated values only, and call nothing missing that
// was refused.

// binder checks the tree by the table of keys and fills the typed record.
type binder struct {
	list      diag.List
	all       bool // every key and word counts as computed
	damaged   bool // a fault may have hidden keys
	versionOK bool
	hidden    bool               // names may be declared where they were not read
	skipReady bool               // inside a table that was reported as not computed
	refused   map[diag.Span]bool // tables that are at fault as a whole, by place
}

// fieldIndex finds the fields of a struct by key.
type fieldIndex map[string]int

// fields holds the index of every struct of the record. It is made once and
// never changed.
var fields = indexFields(reflect.TypeFor[record.Record](), map[reflect.Type]fieldIndex{})

func indexFields(t reflect.Type, into map[reflect.Type]fieldIndex) map[reflect.Type]fieldIndex {
	for t.Kind() == reflect.Pointer || t.Kind() == reflect.Slice {
		t = t.Elem()
	}
	if t.Kind() != reflect.Struct || into[t] != nil {
		return into
	}
	index := fieldIndex{}
	for i := range t.NumField() {
		if key := t.Field(i).Tag.Get("key"); key != "" {
			index[key] = i
			if into[t] == nil {
				into[t] = index
			}
			indexFields(t.Field(i).Type, into)
		}
	}
	return into
}

var namePattern = regexp.MustCompile(`^[A-Za-z][A-Za-z0-9_-]*$`)

// record binds the whole tree.
func (b *binder) record(rec *record.Record) {
	b.version(rec.Tree)
	if !b.versionOK {
		return
	}
	at := diag.Span{}
	if e := rec.Tree.Entry("steelyard"); e != nil {
		at = e.KeySpan
	}
	b.table(rec.Tree, reflect.ValueOf(rec).Elem(), "", "", at)
}

// version demands the key of the language first of all. Another version is
// another language: nothing else is then said.
func (b *binder) version(root *record.Node) {
	b.versionOK = true
	e := root.Entry("steelyard")
	switch {
	case e == nil:
		if !b.damaged {
			b.list.Add(diag.Error("R110", diag.Span{}, "the record does not begin with the version of its language").
				WithHelp("write steelyard = 1 as the first line"))
		}
		return
	case e.Value.Kind == record.IntegerNode && e.Value.Int != 1:
		b.versionOK = false
		b.list.Add(diag.Error("R111", e.Value.Span, "this record is written in version %d of the language; this program reads version 1", e.Value.Int).
			WithHelp("use a later version of the program, or write steelyard = 1 if the record follows version 1"))
		return
	case e.Value.Kind != record.IntegerNode && e.Value.Kind != record.UnreadNode:
		b.versionOK = false
		b.list.Add(diag.Error("R111", e.Value.Span, "the version of the language is a whole number, not %s", describe(e.Value)).
			WithHelp("write steelyard = 1"))
		return
	}
	if root.Entries[0].Key != "steelyard" {
		b.list.Add(diag.Error("R110", e.KeySpan, "the version of the language must be the first key of the record").
			WithHelp("move steelyard = 1 to the first line"))
	}
}

// table binds one table: v is its struct, path the path of its keys, shown the
// same path with the user's own names.
func (b *binder) table(n *record.Node, v reflect.Value, path, shown string, at diag.Span) {
	if f := v.FieldByName("Table"); f.IsValid() { // not At: entries have a key of that name
		f.Set(reflect.ValueOf(record.Table{At: at}))
	}
	rows := record.KeysIn(path)
	index := fields[v.Type()]
	var meant []string // keys that were probably meant by unknown ones
	for _, e := range n.Entries {
		if len(b.list) > 2*maxDiagnostics {
			return // the list is cut long before
		}
		row := record.KeyOf(join(path, e.Key))
		if row == nil || row.Parent() != path {
			near := b.unknown(e, rows, path, shown)
			if i, ok := index[near]; ok && n.Entry(near) == nil {
				b.hidden = b.hidden || record.KeyOf(join(path, near)).Kind == record.KindNamedTables
				b.refuse(v.Field(i), e.KeySpan)
			}
			meant = append(meant, near)
			continue
		}
		b.entry(row, e, v.Field(index[e.Key]), join(shown, e.Key))
	}
	for _, row := range rows {
		if n.Entry(row.Name()) != nil {
			continue
		}
		if row.Default != nil {
			setDefault(v.Field(index[row.Name()]), row.Default)
		}
		if row.Required && row.Path != "steelyard" && !b.damaged && !contains(meant, row.Name()) {
			b.list.Add(diag.Error("R205", at, "%s is missing%s", missingName(row), in(shown)).WithHelp("%s", missingHelp(row)))
		}
		b.emptyTable(row, v.Field(index[row.Name()]))
	}
}

// emptyTable gives the defaults of a table that is always there but was not
// written.
func (b *binder) emptyTable(row *record.Key, f reflect.Value) {
	if row.Kind != record.KindTable || f.Kind() != reflect.Struct {
		return
	}
	index := fields[f.Type()]
	for _, r := range record.KeysIn(row.Below()) {
		if r.Default != nil {
			setDefault(f.Field(index[r.Name()]), r.Default)
		}
		b.emptyTable(r, f.Field(index[r.Name()]))
	}
}

// entry checks one key and binds its value.
func (b *binder) entry(row *record.Key, e record.Entry, f reflect.Value, shown string) {
	n := e.Value
	if n.Kind == record.UnreadNode {
		b.refuse(f, n.Span)
		return
	}
	if !b.skipReady && !row.Ready && !b.all {
		b.list.Add(diag.Error("R208", e.KeySpan, "this version of the program reads %q but does not compute what it asks for", row.Name()).
			WithHelp("leave it out, or use a later version: a key that could change a number or a verdict is never passed over"))
		b.skipReady = true
		defer func() { b.skipReady = false }()
	}
	switch row.Kind {
	case record.KindTable:
		b.oneTable(row, e, f, shown)
	case record.KindNamedTables:
		b.namedTables(row, e, f, shown)
	case record.KindTables:
		b.tables(row, e, f, shown)
	case record.KindNamedStrings, record.KindNamedNumbers:
		b.namedValues(row, e, f)
	case record.KindString, record.KindWord, record.KindStrings, record.KindWords, record.KindNumber,
		record.KindNumbers, record.KindRows, record.KindInt, record.KindBool, record.KindDay, record.KindInstant,
		record.KindBounds, record.KindScalar, record.KindScalars, record.KindLook:
		b.leaf(row, n, f)
	}
}

func (b *binder) oneTable(row *record.Key, e record.Entry, f reflect.Value, shown string) {
	n := e.Value
	if n.Kind == record.ArrayNode && row.Parent() == "" && len(n.Items) == 1 && n.Items[0].Kind == record.TableNode {
		b.list.Add(diag.Error("R203", n.Span, "there is one %s: its head has one bracket", row.Name()).WithHelp("write [%s]", row.Path))
		n = n.Items[0]
		e.Value = n
	}
	if n.Kind != record.TableNode {
		b.wrongType(row, n)
		b.refuse(f, n.Span)
		return
	}
	if f.Kind() == reflect.Pointer {
		f.Set(reflect.New(f.Type().Elem()))
		f = f.Elem()
	}
	b.table(n, f, row.Below(), shown, headOf(e))
}

// headOf is the place of a table's head.
func headOf(e record.Entry) diag.Span {
	// A table in braces begins after its key; a head begins before it.
	if e.Value.Span.Start > e.KeySpan.Start {
		return e.KeySpan
	}
	return e.Value.Span
}

func (b *binder) namedTables(row *record.Key, e record.Entry, f reflect.Value, shown string) {
	if e.Value.Kind != record.TableNode {
		b.wrongType(row, e.Value)
		b.refuse(f, e.Value.Span)
		return
	}
	if b.nameless(row, e) {
		return
	}
	for _, named := range e.Value.Entries {
		b.name(named)
		elem := reflect.New(f.Type().Elem().Elem())
		elem.Elem().FieldByName("Name").SetString(named.Key)
		f.Set(reflect.Append(f, elem))
		switch named.Value.Kind {
		case record.TableNode:
			b.table(named.Value, elem.Elem(), row.Below(), join(shown, named.Key), headOf(named))
		case record.UnreadNode:
			b.refuse(elem, named.Value.Span)
		default:
			b.notTable(row, named)
			b.refuse(elem, named.Value.Span)
		}
	}
}

// nameless reports a table that holds keys where tables under names belong:
// [plan.outcome] in place of [plan.outcome.NAME]. What it is meant to name is
// then not called unknown.
func (b *binder) nameless(row *record.Key, e record.Entry) bool {
	for _, named := range e.Value.Entries {
		if record.KeyOf(row.Below()+"."+named.Key) != nil && named.Value.Kind != record.TableNode {
			b.hidden = true
			b.list.Add(diag.Error("R203", headOf(e), "this table needs a name of its own").WithHelp("write [%s.NAME], with a name of your choice", row.Path))
			return true
		}
	}
	return false
}

// notTable reports a value where tables under names are expected.
func (b *binder) notTable(row *record.Key, e record.Entry) {
	d := diag.Error("R203", e.Value.Span, "%q in [%s] takes a table, not %s", e.Key, row.Path, describe(e.Value))
	if e.Value.Kind == record.ArrayNode && row.Parent() == "plan" {
		d = d.WithHelp("its head has one bracket: [%s.%s]", row.Path, e.Key)
	}
	b.list.Add(d)
}

// name checks a name that the user gave.
func (b *binder) name(e record.Entry) {
	if !namePattern.MatchString(e.Key) {
		b.list.Add(diag.Error("R206", e.KeySpan, "%s is no name", quoteShort(e.Key)).
			WithHelp("a name begins with a letter a to z and goes on with letters, digits, _ and -"))
	}
}

func (b *binder) tables(row *record.Key, e record.Entry, f reflect.Value, shown string) {
	n := e.Value
	items := n.Items
	switch {
	case n.Kind == record.TableNode && row.Parent() == "":
		b.list.Add(diag.Error("R203", n.Span, "%s is one of several: its head has two brackets", row.Name()).WithHelp("write [[%s]]", row.Path))
		items = []*record.Node{n}
	case n.Kind != record.ArrayNode:
		b.wrongType(row, n)
		return
	}
	for _, item := range items {
		if item.Kind == record.UnreadNode {
			continue
		}
		if item.Kind != record.TableNode {
			b.list.Add(diag.Error("R203", item.Span, "%q takes tables, not %s", row.Name(), describe(item)).
				WithHelp("%s", exampleOf(row)))
			continue
		}
		elem := reflect.New(f.Type().Elem().Elem())
		f.Set(reflect.Append(f, elem))
		b.table(item, elem.Elem(), row.Below(), shown, item.Span)
	}
}

// exampleOf shows an array of inline tables with its first keys.
func exampleOf(row *record.Key) string {
	var keys []string
	for _, k := range record.KeysIn(row.Below()) {
		if k.Required {
			keys = append(keys, k.Name()+" = …")
		}
	}
	if len(keys) == 0 {
		keys = []string{record.KeysIn(row.Below())[0].Name() + " = …"}
	}
	return "write " + row.Name() + " = [ { " + strings.Join(keys, ", ") + " } ]"
}

// namedValues binds a table of texts or numbers under the user's own names.
func (b *binder) namedValues(row *record.Key, e record.Entry, f reflect.Value) {
	if e.Value.Kind != record.TableNode {
		b.wrongType(row, e.Value)
		return
	}
	leaf := record.Key{Path: row.Path + ".NAME", Kind: record.KindString, Ready: true, Range: row.Range}
	if row.Kind == record.KindNamedNumbers {
		leaf.Kind = record.KindNumber
	}
	for _, named := range e.Value.Entries {
		if row.Name() != "labels" { // codes of a data file are what they are
			b.name(named)
		}
		elem := reflect.New(f.Type().Elem()).Elem()
		elem.FieldByName("Name").SetString(named.Key)
		elem.FieldByName("At").Set(reflect.ValueOf(named.KeySpan))
		v := elem.Field(elem.NumField() - 1)
		if named.Value.Kind == record.UnreadNode {
			b.refuse(v, named.Value.Span)
		} else {
			leaf.Path = row.Path + "." + named.Key
			b.leaf(&leaf, named.Value, v)
		}
		f.Set(reflect.Append(f, elem))
	}
}

// refuse marks a field as written and at fault, and remembers the table.
func (b *binder) refuse(f reflect.Value, at diag.Span) {
	if b.refused == nil {
		b.refused = map[diag.Span]bool{}
	}
	b.refused[at] = true
	refuse(f, at)
}

// refuse marks a field as written and at fault: a table is there, every value
// in it gets the place, and none is stated.
func refuse(f reflect.Value, at diag.Span) {
	switch f.Kind() {
	case reflect.Pointer:
		if f.IsNil() {
			f.Set(reflect.New(f.Type().Elem()))
		}
		refuse(f.Elem(), at)
	case reflect.Slice:
		if t := f.Type().Elem(); t.Kind() == reflect.Pointer {
			elem := reflect.New(t.Elem())
			refuse(elem, at)
			f.Set(reflect.Append(f, elem))
		}
	case reflect.Struct:
		if s := f.FieldByName("Span"); s.IsValid() {
			s.Set(reflect.ValueOf(at))
			return
		}
		if s := f.FieldByName("Table"); s.IsValid() {
			s.Set(reflect.ValueOf(record.Table{At: at}))
		}
		for _, i := range fields[f.Type()] {
			if f.Field(i).Kind() == reflect.Struct {
				refuse(f.Field(i), at)
			}
		}
	}
}
