package record

import (
	"fmt"
	"reflect"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// kindsOf lists the kinds that a field's Go type can hold.
func kindsOf(t reflect.Type) []Kind {
	switch t {
	case reflect.TypeFor[String]():
		return []Kind{KindString, KindWord}
	case reflect.TypeFor[Strings]():
		return []Kind{KindStrings, KindWords}
	case reflect.TypeFor[Number]():
		return []Kind{KindNumber}
	case reflect.TypeFor[Numbers]():
		return []Kind{KindNumbers}
	case reflect.TypeFor[[]Numbers]():
		return []Kind{KindRows}
	case reflect.TypeFor[Int]():
		return []Kind{KindInt}
	case reflect.TypeFor[Bool]():
		return []Kind{KindBool}
	case reflect.TypeFor[Day]():
		return []Kind{KindDay}
	case reflect.TypeFor[Instant]():
		return []Kind{KindInstant}
	case reflect.TypeFor[Bounds]():
		return []Kind{KindBounds}
	case reflect.TypeFor[Scalar]():
		return []Kind{KindScalar}
	case reflect.TypeFor[Value[[]Scalar]]():
		return []Kind{KindScalars}
	case reflect.TypeFor[Look]():
		return []Kind{KindLook}
	case reflect.TypeFor[[]NamedText]():
		return []Kind{KindNamedStrings}
	case reflect.TypeFor[[]NamedNumber]():
		return []Kind{KindNamedNumbers}
	}
	elem := t
	for elem.Kind() == reflect.Pointer || elem.Kind() == reflect.Slice {
		elem = elem.Elem()
	}
	_, named := elem.FieldByName("Name")
	switch {
	case t.Kind() != reflect.Slice:
		return []Kind{KindTable}
	case named && elem.Field(0).Type == reflect.TypeFor[Named]():
		return []Kind{KindNamedTables}
	}
	return []Kind{KindTables}
}

// walk compares the fields below a struct with the rows of a table of keys.
func walk(t reflect.Type, table string, seen map[string]bool, complain func(string, ...any)) {
	for t.Kind() == reflect.Pointer || t.Kind() == reflect.Slice {
		t = t.Elem()
	}
	for i := range t.NumField() {
		key := t.Field(i).Tag.Get("key")
		if key == "" {
			continue
		}
		path := key
		if table != "" {
			path = table + "." + key
		}
		row := KeyOf(path)
		if row == nil {
			complain("the field %s.%s has no row %q", t.Name(), t.Field(i).Name, path)
			continue
		}
		seen[path] = true
		if kinds := kindsOf(t.Field(i).Type); !slices.Contains(kinds, row.Kind) {
			complain("%q is %v, its field %s.%s is %v", path, row.Kind, t.Name(), t.Field(i).Name, kinds)
			continue
		}
		if row.Kind.IsTable() {
			walk(t.Field(i).Type, row.Below(), seen, complain)
		}
	}
}

func TestKeysAreTheFields(t *testing.T) {
	seen := map[string]bool{}
	walk(reflect.TypeFor[Record](), "", seen, t.Errorf)
	for _, k := range Keys {
		if !seen[k.Path] {
			t.Errorf("the key %q has no field", k.Path)
		}
	}
}

// TestWalkComplains checks that a missing row and a wrong kind are found.
func TestWalkComplains(t *testing.T) {
	type wrong struct {
		Title  Number `key:"title"`
		Absent String `key:"absent"`
		Paper  String `key:"paper"`
	}
	var got []string
	walk(reflect.TypeFor[wrong](), "record", map[string]bool{}, func(f string, a ...any) { got = append(got, fmt.Sprintf(f, a...)) })
	if len(got) != 2 {
		t.Errorf("two faults were planted, found: %q", got)
	}
}

func TestKeysAreWhole(t *testing.T) {
	paths := map[string]bool{}
	snake := regexp.MustCompile(`^[a-z][a-z0-9_]*$`)
	kebab := regexp.MustCompile(`^[a-z0-9]+(-[a-z0-9]+)*$`)
	for _, k := range Keys {
		if paths[k.Path] {
			t.Errorf("%q stands twice", k.Path)
		}
		paths[k.Path] = true
		if p := k.Parent(); p != "" && !paths[strings.TrimSuffix(p, ".NAME")] {
			t.Errorf("%q stands before its table", k.Path)
		}
		if name := k.Name(); name != "sha256" && !snake.MatchString(name) {
			t.Errorf("%q is not written in snake case", k.Path)
		}
		if !strings.HasSuffix(k.Doc, ".") {
			t.Errorf("%q has no sentence: %q", k.Path, k.Doc)
		}
		wordKind := k.Kind == KindWord || k.Kind == KindWords
		if wordKind != (len(k.Words) > 0) {
			t.Errorf("%q has %d words and is %v", k.Path, len(k.Words), k.Kind)
		}
		for _, w := range k.Words {
			if !kebab.MatchString(w) && k.Name() != "relation" {
				t.Errorf("%q: the word %q is not written in kebab case", k.Path, w)
			}
		}
		if k.Required && k.Default != nil {
			t.Errorf("%q is required and has a default", k.Path)
		}
		if s, ok := k.Default.(string); ok && !slices.Contains(k.Words, s) {
			t.Errorf("%q: the default %q is none of its words", k.Path, s)
		}
		if v, ok := k.Default.(float64); ok && k.Range != nil && !k.Range.Contains(v) {
			t.Errorf("%q: the default %v is out of range", k.Path, v)
		}
		for _, w := range k.Later {
			if !slices.Contains(k.Words, w) {
				t.Errorf("%q: %q is not computed, and no word of it", k.Path, w)
			}
		}
	}
}

func TestNotReadyNamesKeys(t *testing.T) {
	for _, p := range NotReady {
		if KeyOf(p) == nil {
			t.Errorf("%q is listed as not computed and is no key", p)
		}
	}
	for p := range NotReadyWords {
		if KeyOf(p) == nil {
			t.Errorf("%q has words that are not computed and is no key", p)
		}
	}
	for _, k := range Keys {
		if p := KeyOf(strings.TrimSuffix(k.Parent(), ".NAME")); p != nil && !p.Ready && k.Ready {
			t.Errorf("%q is ready in a table that is not", k.Path)
		}
	}
}

func TestMeasuresAndClaims(t *testing.T) {
	words := map[string]bool{}
	for _, m := range Measures {
		if words[m.Word] {
			t.Errorf("the measure %q stands twice", m.Word)
		}
		words[m.Word] = true
		if MeasureOf(m.Word) != m || len(m.Methods) == 0 || m.Label == "" {
			t.Errorf("the measure %q is not whole", m.Word)
		}
		for _, s := range append(slices.Clone(m.Summary), m.Data...) {
			for _, key := range strings.Fields(s) {
				at := map[Shape]string{OneSample: "result.sample.", TwoGroups: "result.groups.NAME.", Paired: "result.pairs."}[m.Shape]
				if KeyOf(at+key) == nil && KeyOf("result.data."+key) == nil {
					t.Errorf("the measure %q reads %q, which is no key", m.Word, key)
				}
			}
		}
	}
	for _, c := range Claims {
		if ClaimOf(c.Word) != c || c.Label == "" {
			t.Errorf("the claim %q is not whole", c.Word)
		}
	}
	if MeasureOf("mode") != nil || ClaimOf("better") != nil {
		t.Error("a word of no kind is found")
	}
}

func TestKeyAt(t *testing.T) {
	for path, want := range map[string]string{
		"plan.hypothesis.H1.alpha":           "plan.hypothesis.NAME.alpha",
		"plan.hypothesis.H1.alpha.one_sided": "plan.hypothesis.NAME.alpha.one_sided",
		"plan.hypothesis.H1":                 "plan.hypothesis",
		"plan.hypothesis":                    "plan.hypothesis",
		"plan.alpha":                         "plan.alpha",
		"plan.outcome.smallest":              "plan.outcome",
		"plan.hypothesis.H1.alfa":            "",
		"plan.alpha.one_sided.x":             "",
		"NAME":                               "",
		"plan.hypothesis.NAME":               "plan.hypothesis",
		"":                                   "",
	} {
		k, name := KeyAt(path)
		got := ""
		if k != nil {
			got = k.Path
		}
		if got != want {
			t.Errorf("KeyAt(%q) is %q, not %q", path, got, want)
		}
		if wantName := path == "plan.hypothesis.H1" || path == "plan.outcome.smallest" || path == "plan.hypothesis.NAME"; name != wantName {
			t.Errorf("KeyAt(%q) is a name: %v", path, name)
		}
	}
}

func TestRange(t *testing.T) {
	for _, c := range []struct {
		r       *Range
		in, out float64
		text    string
	}{
		{above(0), 1e-300, 0, "above 0"}, {atLeast(0), 0, -1e-300, "at least 0"}, {between(0, 1), 0.5, 1, "above 0 and below 1"},
		{fromTo(-1, 1), 1, 1.1, "at least -1 and at most 1"}, {fromBelow(0, 1), 0, 1, "at least 0 and below 1"},
	} {
		if !c.r.Contains(c.in) || c.r.Contains(c.out) || c.r.String() != c.text {
			t.Errorf("%v: holds %v: %v, holds %v: %v", c.r, c.in, c.r.Contains(c.in), c.out, c.r.Contains(c.out))
		}
	}
}
