package render_test

import (
	"bytes"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/jsonout"
	"steelyard/render/page"
	"steelyard/render/text"
)

// words that a field of the result can hold, by its name.
var choices = map[string][]string{
	"Claim":       {"differs", "superior", "minimum-effect", "noninferior", "equivalent", "benefit-too-small", "below", "above", "describe"},
	"Verdict":     {"established", "suggested", "contradicted", "open", "pending", "described", "masked"},
	"Measure":     {"mean", "risk-difference", "hazard-ratio", "rate", "correlation", "superiority-probability"},
	"Better":      {"higher", "lower", "neither"},
	"Evidence":    {"single", "pooled", "combined", "none"},
	"Outcome":     {"o", "p"},
	"Name":        {"o", "p", "H1"},
	"Use":         {"analysed", "left-out", "earlier", "superseded", "masked", "missing", "not-computed"},
	"Order":       {"before-results", "same-day", "after-results", "unsealed", "unproven", ""},
	"State":       {"unsealed", "sealed", "changed", "broken"},
	"Stage":       {"plan-only", "interim", "complete"},
	"Scale":       {"identity", "log", "logit", "atanh"},
	"Alternative": {"greater", "less", "two-sided"},
	"Crossed":     {"none", "efficacy", "futility"},
	"Model":       {"common", "random"},
	"Role":        {"primary", "secondary", "exploratory"},
	"Setting":     {"clinical", "safety", "quality", "other"},
	"At":          {"2026-01-01", "2026-01-01T10:00:00Z", "soon"},
	"Of":          {"H1", "o"},
	"Message":     {"plain", "with %g and %s", "100%%"},
}

// odd fills a value with awkward but well-formed content.
func odd(r *rand.Rand, v reflect.Value, name string) {
	switch v.Kind() {
	case reflect.Float64:
		v.SetFloat([]float64{0, 1, -1, 0.05, 0.95, 1e-320, 1e300, -1e300, math.Inf(1), math.Inf(-1), math.NaN(), 12345.678, 0.5}[r.IntN(13)])
	case reflect.Int:
		v.SetInt(int64(r.IntN(5)))
	case reflect.Bool:
		v.SetBool(r.IntN(2) == 0)
	case reflect.String:
		if c := choices[name]; c != nil {
			v.SetString(c[r.IntN(len(c))])
			return
		}
		v.SetString([]string{"", "x", "two words", "ein sehr langes Wort ohne Ende"}[r.IntN(4)])
	case reflect.Struct:
		if d, ok := v.Addr().Interface().(*record.Date); ok {
			if r.IntN(3) > 0 {
				*d = record.Date{Year: 2026, Month: 3, Day: 1 + r.IntN(28)}
			}
			return
		}
		for i := range v.NumField() {
			if f := v.Field(i); f.CanSet() && v.Type().Field(i).Name != "Diagnostics" && v.Type().Field(i).Name != "Span" {
				odd(r, f, v.Type().Field(i).Name)
			}
		}
	case reflect.Slice:
		n := r.IntN(4)
		v.Set(reflect.MakeSlice(v.Type(), n, n))
		for i := range n {
			odd(r, v.Index(i), name)
		}
	case reflect.Array:
		for i := range v.Len() {
			odd(r, v.Index(i), name)
		}
	case reflect.Pointer:
		if r.IntN(2) == 0 {
			v.Set(reflect.New(v.Type().Elem()))
			odd(r, v.Elem(), name)
		}
	case reflect.Interface:
		v.Set(reflect.ValueOf([]any{1.5, "s", 3, math.NaN()}[r.IntN(4)]))
	default:
	}
}

// Whatever a result holds, no view panics, prints NaN, or draws outside.
func TestOddResults(t *testing.T) {
	in, _ := fixture.Trial()
	for seed := range uint64(120) {
		r := rand.New(rand.NewPCG(seed, 7))
		res := &result.Result{}
		odd(r, reflect.ValueOf(res).Elem(), "")
		doc := render.Compose(in, res)
		var b bytes.Buffer
		if err := text.Write(&b, doc, text.Options{Full: true}); err != nil {
			t.Fatal(err)
		}
		if i := strings.Index(b.String(), "NaN"); i >= 0 {
			t.Fatalf("seed %d: the text prints NaN: …%s", seed, b.String()[max(0, i-80):i+10])
		}
		if i := strings.Index(b.String(), "%!"); i >= 0 {
			t.Fatalf("seed %d: a format went wrong: …%s", seed, b.String()[max(0, i-80):i+10])
		}
		for _, x := range doc.Blocks {
			if m := strayMark(x); m != nil {
				t.Fatalf("seed %d: %#v", seed, m)
			}
		}
		b.Reset()
		if err := jsonout.Write(&b, in, res); err != nil {
			t.Fatal(err)
		}
	}
}

// strayMark finds a mark of a figure that has no place.
func strayMark(b page.Block) page.Mark {
	var d *page.Drawing
	switch b := b.(type) {
	case page.Figure:
		d = b.Drawing
	case page.Verdict:
		if b.Figure != nil {
			d = b.Figure.Drawing
		}
	}
	if d == nil {
		return nil
	}
	bad := func(v ...float64) bool {
		for _, x := range v {
			if math.IsNaN(x) || x < -0.01 || x > max(d.Width, d.Height)+0.01 {
				return true
			}
		}
		return false
	}
	for _, m := range d.Marks {
		switch m := m.(type) {
		case page.Line:
			if bad(m.X1, m.X2, m.Y1, m.Y2) {
				return m
			}
		case page.Polyline:
			if bad(append(append([]float64(nil), m.X...), m.Y...)...) {
				return m
			}
		case page.Rect:
			if bad(m.X, m.Y, m.W, m.H) {
				return m
			}
		case page.Disc:
			if bad(m.X, m.Y, m.R) {
				return m
			}
		case page.Polygon:
			if bad(append(append([]float64(nil), m.X...), m.Y...)...) {
				return m
			}
		case page.Label:
			if bad(m.Y) {
				return m
			}
		}
	}
	return nil
}
