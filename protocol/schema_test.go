package protocol

import (
	"encoding/json"
	"fmt"
	"math"
	"reflect"
	"regexp"
	"slices"
	"strings"
	"testing"

	"steelyard/protocol/diag"
	"steelyard/protocol/read"
	"steelyard/protocol/record"
)

// validate is a validator of the few words of JSON Schema that the schema
// uses; a word it does not know is a fault. It returns the first fault.
func validate(schema map[string]any, v any, at string) string {
	for word := range schema {
		switch word {
		case "$schema", "title", "description", "default", "format", "type", "properties", "required", "additionalProperties",
			"patternProperties", "items", "minItems", "maxItems", "enum", "const", "oneOf", "minLength",
			"minimum", "maximum", "exclusiveMinimum", "exclusiveMaximum":
		default:
			return at + ": the schema uses the word " + word
		}
	}
	if c, ok := schema["const"]; ok && !reflect.DeepEqual(c, v) {
		return fmt.Sprintf("%s: %v is not %v", at, v, c)
	}
	if e, ok := schema["enum"].([]any); ok && !slices.Contains(e, v) {
		return fmt.Sprintf("%s: %v is none of %v", at, v, e)
	}
	if of, ok := schema["oneOf"].([]any); ok {
		matches := 0
		for _, s := range of {
			if validate(s.(map[string]any), v, at) == "" {
				matches++
			}
		}
		if matches != 1 {
			return fmt.Sprintf("%s: %d of the alternatives match", at, matches)
		}
	}
	if t, ok := schema["type"]; ok && !hasType(t, v) {
		return fmt.Sprintf("%s: %v is no %v", at, v, t)
	}
	switch v := v.(type) {
	case map[string]any:
		return validateObject(schema, v, at)
	case []any:
		if n, ok := schema["minItems"].(float64); ok && len(v) < int(n) {
			return at + ": too few items"
		}
		if n, ok := schema["maxItems"].(float64); ok && len(v) > int(n) {
			return at + ": too many items"
		}
		for i, item := range v {
			if s, ok := schema["items"].(map[string]any); ok {
				if f := validate(s, item, fmt.Sprintf("%s[%d]", at, i)); f != "" {
					return f
				}
			}
		}
	case float64:
		for word, bad := range map[string]func(float64) bool{
			"minimum": func(x float64) bool { return v < x }, "maximum": func(x float64) bool { return v > x },
			"exclusiveMinimum": func(x float64) bool { return v <= x }, "exclusiveMaximum": func(x float64) bool { return v >= x },
		} {
			if x, ok := schema[word].(float64); ok && bad(x) {
				return fmt.Sprintf("%s: %v breaks %s %v", at, v, word, x)
			}
		}
	case string:
		if n, ok := schema["minLength"].(float64); ok && len(v) < int(n) {
			return at + ": too short"
		}
	}
	return ""
}

func validateObject(schema, v map[string]any, at string) string {
	if required, ok := schema["required"].([]any); ok {
		for _, r := range required {
			if _, ok := v[r.(string)]; !ok {
				return at + ": " + r.(string) + " is missing"
			}
		}
	}
	properties, _ := schema["properties"].(map[string]any)
	patterns, _ := schema["patternProperties"].(map[string]any)
	for key, child := range v {
		below := at + "." + key
		if s, ok := properties[key].(map[string]any); ok {
			if f := validate(s, child, below); f != "" {
				return f
			}
			continue
		}
		matched := false
		for pattern, s := range patterns {
			if regexp.MustCompile(pattern).MatchString(key) {
				matched = true
				if f := validate(s.(map[string]any), child, below); f != "" {
					return f
				}
			}
		}
		if matched {
			continue
		}
		switch more := schema["additionalProperties"].(type) {
		case bool:
			if !more {
				return below + " is not allowed"
			}
		case map[string]any:
			if f := validate(more, child, below); f != "" {
				return f
			}
		}
	}
	return ""
}

func hasType(t, v any) bool {
	if list, ok := t.([]any); ok {
		return slices.ContainsFunc(list, func(t any) bool { return hasType(t, v) })
	}
	switch v := v.(type) {
	case map[string]any:
		return t == "object"
	case []any:
		return t == "array"
	case string:
		return t == "string"
	case bool:
		return t == "boolean"
	case float64:
		return t == "number" || t == "integer" && v == math.Trunc(v)
	}
	return false
}

// plain turns the tree of a record into what a validator of JSON sees.
func plain(n *record.Node) any {
	switch n.Kind {
	case record.TableNode:
		m := map[string]any{}
		for _, e := range n.Entries {
			m[e.Key] = plain(e.Value)
		}
		return m
	case record.ArrayNode:
		list := []any{}
		for _, i := range n.Items {
			list = append(list, plain(i))
		}
		return list
	case record.IntegerNode:
		return float64(n.Int)
	case record.FloatNode:
		return n.Float
	case record.BoolNode:
		return n.Bool
	default:
		return n.Text
	}
}

func parsedSchema(t *testing.T) map[string]any {
	t.Helper()
	var schema map[string]any
	if err := json.Unmarshal(Schema(), &schema); err != nil {
		t.Fatal(err)
	}
	return schema
}

func TestSchemaHasEveryKey(t *testing.T) {
	schema := parsedSchema(t)
	for _, k := range record.Keys {
		s := schema
		for _, part := range strings.Split(k.Path, ".") {
			if items, ok := s["items"].(map[string]any); ok {
				s = items
			}
			var next any
			if part == "NAME" {
				next = s["patternProperties"].(map[string]any)[namePattern]
			} else if p, ok := s["properties"].(map[string]any); ok {
				next = p[part]
			}
			s, _ = next.(map[string]any)
		}
		if s == nil {
			t.Errorf("%q is not in the schema", k.Path)
			continue
		}
		if text, _ := s["description"].(string); text == "" {
			t.Errorf("%q has no description", k.Path)
		}
	}
}

func TestSchemaAcceptsAndRefuses(t *testing.T) {
	schema := parsedSchema(t)
	tree := func(text string) any {
		rec, _ := read.Record(diag.NewSource("a.toml", []byte(text)))
		return plain(rec.Tree)
	}
	if f := validate(schema, tree(smallest), ""); f != "" {
		t.Errorf("the smallest record is refused: %s", f)
	}
	for _, c := range [][2]string{
		{`steelyard = 1`, `steelyard = 2`},
		{`setting = "quality"`, `setting = "qualty"`},
		{`smallest = 0.8`, `smallest = "0.8"`},
		{`smallest = 0.8`, `smallest = [1, 2, 3]`},
		{`one_sided = 0.05`, `one_sided = 0.5`},
		{`unit     = "N"`, `units     = "N"`},
		{`[plan.outcome.peel]`, `[plan.outcome."peel strength"]`},
		{`claim   = "equivalent"`, ``},
		{`n = 24, mean = 11.92`, `n = 24.5, mean = 11.92`},
		{`groups   = ["new", "current"]`, `groups   = ["new"]`},
		{`date    = 2026-04-12`, `look = 0`},
	} {
		bad := strings.Replace(smallest, c[0], c[1], 1)
		if bad == smallest {
			t.Fatalf("the smallest record has no %q", c[0])
		}
		if validate(schema, tree(bad), "") == "" {
			t.Errorf("%q in place of %q is accepted", c[1], c[0])
		}
	}
}
