package protocol

import (
	"bytes"
	"encoding/json"
	"math"
	"strings"

	"steelyard/protocol/record"
)

// object is a JSON object that keeps its order.
type object []member

type member struct {
	key   string
	value any
}

// MarshalJSON writes the members in order.
func (o object) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for i, m := range o {
		if i > 0 {
			b.WriteByte(',')
		}
		for j, part := range []any{m.key, m.value} {
			text, err := json.Marshal(part)
			if err != nil {
				return nil, err
			}
			if j == 1 {
				b.WriteByte(':')
			}
			b.Write(text)
		}
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

// namePattern is the grammar of names, as in the schema.
const namePattern = "^[A-Za-z][A-Za-z0-9_-]*$"

// Schema is the JSON Schema (draft 2020-12) of a record, made from the table of
// keys. Editors of TOML use it when the record's first line names it:
//
//	#:schema ./record.schema.json
func Schema() []byte {
	o := object{
		{"$schema", "https://json-schema.org/draft/2020-12/schema"},
		{"title", "Steelyard record, version 1 of the language"},
	}
	o = append(o, tableSchema("")...)
	// Nothing in the table of keys can fail to be written.
	text, err := json.MarshalIndent(o, "", "  ")
	if err != nil {
		panic(err)
	}
	return append(text, '\n')
}

// tableSchema is the schema of the keys of one table.
func tableSchema(table string) object {
	var properties object
	var required []string
	for _, k := range record.KeysIn(table) {
		properties = append(properties, member{k.Name(), keySchema(k)})
		if k.Required {
			required = append(required, k.Name())
		}
	}
	o := object{{"type", "object"}, {"properties", properties}}
	if required != nil {
		o = append(o, member{"required", required})
	}
	return append(o, member{"additionalProperties", false})
}

// keySchema is the schema of one key. It is long because it has a case for each
// kind.
func keySchema(k *record.Key) object {
	o := object{{"description", description(k)}}
	if k.Path == "steelyard" {
		return append(o, member{"const", 1})
	}
	if k.Default != nil {
		o = append(o, member{"default", k.Default})
	}
	number := numberSchema(k)
	text := object{{"type", "string"}}
	truth := object{{"type", "boolean"}}
	if len(k.Words) > 0 {
		text = object{{"enum", k.Words}}
	} else if k.Required {
		text = append(text, member{"minLength", 1})
	}
	array := func(items object) object {
		a := object{{"type", "array"}, {"items", items}}
		if k.MinLen > 0 {
			a = append(a, member{"minItems", k.MinLen})
		}
		if k.MaxLen > 0 {
			a = append(a, member{"maxItems", k.MaxLen})
		}
		return a
	}
	scalar := object{{"type", []string{"string", "number", "boolean"}}}
	switch k.Kind {
	case record.KindTable:
		return append(o, tableSchema(k.Below())...)
	case record.KindNamedTables:
		return append(o, named(tableSchema(k.Below()))...)
	case record.KindTables:
		return append(o, array(tableSchema(k.Below()))...)
	case record.KindString, record.KindWord:
		return append(o, text...)
	case record.KindStrings, record.KindWords:
		return append(o, array(text)...)
	case record.KindNumber, record.KindInt:
		return append(o, number...)
	case record.KindNumbers:
		if k.One {
			return append(o, member{"oneOf", []object{number, array(number)}})
		}
		return append(o, array(number)...)
	case record.KindRows:
		return append(o, array(object{{"type", "array"}, {"items", number}})...)
	case record.KindBool:
		return append(o, truth...)
	case record.KindDay:
		return append(o, member{"type", "string"}, member{"format", "date"})
	case record.KindInstant:
		return append(o, member{"type", "string"}, member{"format", "date-time"})
	case record.KindBounds:
		pair := object{{"type", "array"}, {"items", number}, {"minItems", 2}, {"maxItems", 2}}
		return append(o, member{"oneOf", []object{number, pair}})
	case record.KindScalar:
		return append(o, scalar...)
	case record.KindScalars:
		return append(o, array(scalar)...)
	case record.KindLook:
		return append(o, member{"oneOf", []object{{{"type", "integer"}, {"minimum", 1}}, {{"const", "unplanned"}}}})
	case record.KindNamedStrings:
		if k.Name() == "labels" { // codes of a data file are what they are
			return append(o, member{"type", "object"}, member{"additionalProperties", text})
		}
		return append(o, named(text)...)
	case record.KindNamedNumbers:
		return append(o, named(number)...)
	}
	panic("protocol: a key of no kind: " + k.Path)
}

// named is the schema of values under names that the user gives.
func named(value object) object {
	return object{{"type", "object"}, {"patternProperties", object{{namePattern, value}}}, {"additionalProperties", false}}
}

func numberSchema(k *record.Key) object {
	kind := "number"
	if k.Kind == record.KindInt || k.Whole {
		kind = "integer"
	}
	o := object{{"type", kind}}
	r := k.Range
	if r == nil {
		return o
	}
	if !math.IsInf(r.Low, -1) {
		o = append(o, member{pick(r.LowOpen, "exclusiveMinimum", "minimum"), r.Low})
	}
	if !math.IsInf(r.High, 1) {
		o = append(o, member{pick(r.HighOpen, "exclusiveMaximum", "maximum"), r.High})
	}
	return o
}

func pick(first bool, a, b string) string {
	if first {
		return a
	}
	return b
}

// description is a row's sentence, with a word on what is not computed yet.
func description(k *record.Key) string {
	text := strings.ReplaceAll(k.Doc, "`", "")
	if !k.Ready {
		text += " (This version of the program does not compute it yet and refuses it.)"
	}
	if len(k.Later) > 0 {
		text += " (This version of the program does not compute yet: " + strings.Join(k.Later, ", ") + ".)"
	}
	return text
}
