package jsonout

import (
	"bytes"
	"encoding/json"
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/render/internal/fixture"
)

var update = flag.Bool("update", false, "write golden files anew")

type made struct {
	name string
	in   *protocol.Loaded
	res  *result.Result
}

func fixtures() []made {
	var out []made
	add := func(name string, f func() (*protocol.Loaded, *result.Result)) {
		in, res := f()
		out = append(out, made{name, in, res})
	}
	add("peel", fixture.Peel)
	add("trial", fixture.Trial)
	add("waiting", fixture.Waiting)
	add("masked", fixture.Masked)
	add("faulty", fixture.Faulty)
	return out
}

func written(t *testing.T, m made) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, m.in, m.res); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestGolden(t *testing.T) {
	for _, m := range fixtures() {
		got := written(t, m)
		path := filepath.Join("testdata", m.name+".json")
		if *update {
			if err := os.MkdirAll("testdata", 0o755); err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(path, got, 0o644); err != nil {
				t.Fatal(err)
			}
			continue
		}
		want, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if d := cmp.Diff(strings.Split(string(want), "\n"), strings.Split(string(got), "\n")); d != "" {
			t.Errorf("%s (-old +new):\n%s", m.name, d)
		}
	}
}

// The same result gives the same bytes, and the bytes are JSON.
func TestSteady(t *testing.T) {
	for _, m := range fixtures() {
		a, b := written(t, m), written(t, m)
		if !bytes.Equal(a, b) {
			t.Errorf("%s: two writings differ", m.name)
		}
		if !json.Valid(a) || a[len(a)-1] != '\n' {
			t.Errorf("%s: no JSON object with a last newline", m.name)
		}
	}
}

// Every writing obeys the schema that we publish.
func TestObeysSchema(t *testing.T) {
	var schema any
	if err := json.Unmarshal(OutputSchema(), &schema); err != nil {
		t.Fatal(err)
	}
	for _, m := range fixtures() {
		var doc any
		if err := json.Unmarshal(written(t, m), &doc); err != nil {
			t.Fatal(err)
		}
		if s := disobeys(schema.(map[string]any), doc, m.name); s != "" {
			t.Error(s)
		}
	}
}

// disobeys checks the parts of JSON Schema that the schema uses: type, enum,
// const, properties, required, additionalProperties, items.
func disobeys(s map[string]any, v any, at string) string {
	if c, ok := s["const"]; ok && c != v {
		return fmt.Sprintf("%s is %v, not %v", at, v, c)
	}
	if e, ok := s["enum"].([]any); ok && !slices.Contains(e, v) {
		return fmt.Sprintf("%s is %v, none of %v", at, v, e)
	}
	if !hasType(s["type"], v) {
		return fmt.Sprintf("%s is %T, not %v", at, v, s["type"])
	}
	switch v := v.(type) {
	case []any:
		for i, x := range v {
			if items, ok := s["items"].(map[string]any); ok {
				if m := disobeys(items, x, fmt.Sprintf("%s[%d]", at, i)); m != "" {
					return m
				}
			}
		}
	case map[string]any:
		props, _ := s["properties"].(map[string]any)
		if req, ok := s["required"].([]any); ok {
			for _, k := range req {
				if _, ok := v[k.(string)]; !ok {
					return fmt.Sprintf("%s lacks %v", at, k)
				}
			}
		}
		for k, x := range v {
			sub, ok := props[k].(map[string]any)
			if !ok {
				switch more := s["additionalProperties"].(type) {
				case map[string]any:
					sub = more
				case bool:
					if !more {
						return fmt.Sprintf("%s has the unknown key %s", at, k)
					}
				}
			}
			if sub != nil {
				if m := disobeys(sub, x, at+"."+k); m != "" {
					return m
				}
			}
		}
	}
	return ""
}

func hasType(want, v any) bool {
	one := func(w string) bool {
		switch x := v.(type) {
		case nil:
			return w == "null"
		case bool:
			return w == "boolean"
		case string:
			return w == "string"
		case float64:
			return w == "number" || w == "integer" && x == math.Trunc(x)
		case []any:
			return w == "array"
		case map[string]any:
			return w == "object"
		}
		return false
	}
	switch w := want.(type) {
	case nil:
		return true
	case string:
		return one(w)
	case []any:
		for _, x := range w {
			if one(x.(string)) {
				return true
			}
		}
	}
	return false
}

// The schema check finds what it looks for.
func TestSchemaCheckFinds(t *testing.T) {
	var schema map[string]any
	if err := json.Unmarshal(OutputSchema(), &schema); err != nil {
		t.Fatal(err)
	}
	for _, change := range []func(map[string]any){
		func(d map[string]any) { d["extra"] = 1.0 },
		func(d map[string]any) { delete(d, "seal") },
		func(d map[string]any) { d["steelyard"] = 2.0 },
		func(d map[string]any) { d["masked"] = "no" },
		func(d map[string]any) { d["hypotheses"].([]any)[0].(map[string]any)["verdict"] = "proven" },
		func(d map[string]any) { d["hypotheses"].([]any)[0].(map[string]any)["estimate"] = "0.1" },
	} {
		var doc map[string]any
		if err := json.Unmarshal(written(t, fixtures()[0]), &doc); err != nil {
			t.Fatal(err)
		}
		change(doc)
		if disobeys(schema, doc, "doc") == "" {
			t.Errorf("a broken document passes")
		}
	}
}

// Absent keys, null limits and small p-values.
func TestNumbers(t *testing.T) {
	in, res := fixture.Peel()
	h := &res.Hypotheses[0]
	h.High = result.Some(math.Inf(1))
	h.DF = result.Opt{}
	h.P = result.P{P: 1e-310, Ln: -713.8, OK: true}
	h.SE = result.Some(math.NaN())
	var b bytes.Buffer
	if err := Write(&b, in, res); err != nil {
		t.Fatal(err)
	}
	var doc struct {
		Hypotheses []map[string]any
		Studies    []map[string]any
	}
	if err := json.Unmarshal(b.Bytes(), &doc); err != nil {
		t.Fatal(err)
	}
	got := doc.Hypotheses[0]
	if v, ok := got["high"]; !ok || v != nil {
		t.Errorf("a limit that does not exist is %v, present %v", v, ok)
	}
	if _, ok := got["df"]; ok {
		t.Error("df that does not apply is there")
	}
	if got["ln_p"] != -713.8 || got["p"] != 1e-310 {
		t.Errorf("p %v, ln_p %v", got["p"], got["ln_p"])
	}
	if v := got["se"]; v != nil {
		t.Errorf("a number that is none is %v", v)
	}
	if got["low"] != -0.7842678 {
		t.Errorf("low lost precision: %v", got["low"])
	}
	if _, ok := doc.Studies[0]["ln_p"]; ok {
		t.Error("ln_p beside an ordinary p")
	}
}

// Pending, masked and described claims carry no p; masked ones no number.
func TestSilent(t *testing.T) {
	for _, m := range fixtures() {
		var doc struct{ Hypotheses []map[string]any }
		if err := json.Unmarshal(written(t, m), &doc); err != nil {
			t.Fatal(err)
		}
		for _, h := range doc.Hypotheses {
			v := h["verdict"]
			_, p := h["p"]
			if (v == "pending" || v == "masked" || v == "described") && p {
				t.Errorf("%s: %v has a p", m.name, v)
			}
			if v == "masked" {
				for _, k := range []string{"estimate", "low", "high", "tests", "curve", "reading"} {
					if _, ok := h[k]; ok {
						t.Errorf("masked has %s", k)
					}
				}
			}
			if strings.ContainsAny(h["sentence"].(string), "\u00a0\u202f") {
				t.Errorf("sentence with blanks that do not break: %q", h["sentence"])
			}
		}
	}
}

// Floats read back to the same bits.
func TestFloatRoundTrip(t *testing.T) {
	for _, v := range []float64{0, 1, -1, 0.1, 1e-7, 1e21, 1e300, 5e-324, math.MaxFloat64, 1.0 / 3, 123456789.123456789} {
		var got float64
		if err := json.Unmarshal(appendFloat(nil, v), &got); err != nil || got != v {
			t.Errorf("%v: %s, %v", v, appendFloat(nil, v), err)
		}
	}
	if s := string(appendFloat(nil, math.Copysign(0, -1))); s != "0" {
		t.Errorf("negative zero is %s", s)
	}
}

func BenchmarkWrite(b *testing.B) {
	in, res := fixture.Trial()
	for b.Loop() {
		if err := Write(&bytes.Buffer{}, in, res); err != nil {
			b.Fatal(err)
		}
	}
}
