package read

import (
	"strconv"
	"strings"
	"unicode/utf8"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

func missingName(row *record.Key) string {
	if row.Kind == record.KindNamedTables {
		return "a table [" + row.Path + ".NAME]"
	}
	if row.Kind == record.KindTable {
		return "the table [" + row.Path + "]"
	}
	return strconv.Quote(row.Name())
}

func missingHelp(row *record.Key) string {
	switch {
	case row.Kind.IsTable():
		return strings.ReplaceAll(row.Doc, "`", "")
	case len(row.Words) > 0 && len(row.Words) <= 12:
		return row.Name() + " is one of " + words(row.Words)
	}
	return "it takes " + row.Kind.String()
}

func in(path string) string {
	if path == "" {
		return ""
	}
	return " in [" + path + "]"
}

func join(path, key string) string {
	if path == "" {
		return key
	}
	return path + "." + key
}

func contains(list []string, s string) bool {
	for _, x := range list {
		if x == s {
			return true
		}
	}
	return false
}

// unknown reports an unknown key and returns the key that was probably meant.
func (b *binder) unknown(e record.Entry, rows []*record.Key, path, shown string) string {
	known := make([]string, len(rows))
	for i, r := range rows {
		known[i] = r.Name()
	}
	if e.Value.Kind == record.UnreadNode {
		return nearest(e.Key, known) // the statement was reported
	}
	d := diag.Error("R201", e.KeySpan, "%s is not a key%s", quoteShort(e.Key), in(shown))
	near := nearest(e.Key, known)
	switch {
	case near != "":
		d = d.WithHelp("did you mean %q?", near)
	case elsewhere(e.Key, path) != "":
		d = d.WithHelp("%q belongs in %s", e.Key, elsewhere(e.Key, path))
	case len(known) > 0 && len(known) <= 14:
		d = d.WithHelp("the keys here are %s", words(known))
	}
	b.list.Add(d)
	return near
}

// tablesOf lists, by the name of a key, the tables that have it. It is made
// once and never changed.
var tablesOf = indexTables()

func indexTables() map[string][]string {
	m := map[string][]string{}
	for _, k := range record.Keys {
		if !strings.HasPrefix(k.Path, "earlier_result.") {
			m[k.Name()] = append(m[k.Name()], k.Parent())
		}
	}
	return m
}

// elsewhere finds the one other table that has a key of this name.
func elsewhere(key, path string) string {
	found := ""
	for _, table := range tablesOf[key] {
		switch {
		case table == path:
		case found != "":
			return ""
		default:
			found = "[" + table + "]"
		}
	}
	return found
}

// describe says what a value is, quoting it.
func describe(n *record.Node) string {
	switch n.Kind {
	case record.TableNode:
		return "a table"
	case record.ArrayNode:
		return "an array"
	case record.StringNode:
		if utf8.RuneCountInString(n.Text) == 0 {
			return "an empty text"
		}
		return "the text " + quoteShort(n.Text)
	case record.IntegerNode:
		return "the number " + strconv.FormatInt(n.Int, 10)
	case record.FloatNode:
		return "the number " + record.FormatNumber(n.Float)
	case record.BoolNode:
		return strconv.FormatBool(n.Bool)
	case record.InstantNode:
		return "the date and time " + n.Text
	case record.LocalDateTimeNode:
		return "the date and time " + n.Text + " without an offset"
	case record.LocalDateNode:
		return "the date " + n.Text
	case record.LocalTimeNode:
		return "the time " + n.Text
	case record.UnreadNode:
		return "a value at fault"
	}
	return "a value"
}

// words lists words for a sentence, not too many.
func words(list []string) string {
	const most = 40
	if len(list) > most {
		return strings.Join(list[:most], ", ") + " and " + strconv.Itoa(len(list)-most) + " more"
	}
	return strings.Join(list, ", ")
}
