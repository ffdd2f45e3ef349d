package render_test

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"reflect"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/jsonout"
	"steelyard/render/number"
	"steelyard/render/page"
	"steelyard/render/text"
)

// views are the page, the text and the JSON of one result.
type views struct {
	res  *result.Result
	doc  *page.Document
	text string
	json struct {
		Outcomes   map[string]struct{ Null, Low, High *float64 }
		Hypotheses []jsonClaim
	}
}

type jsonClaim struct {
	Name, Outcome, Verdict, Reading, Sentence string
	Margin                                    []float64
	Limit                                     *float64
	Estimate, Low, High, P                    *float64
	Level                                     float64
}

func viewsOf(t *testing.T, in *protocol.Loaded, res *result.Result) *views {
	t.Helper()
	v := &views{res: res, doc: render.Compose(in, res)}
	var b bytes.Buffer
	if err := text.Write(&b, v.doc, text.Options{Full: true}); err != nil {
		t.Fatal(err)
	}
	v.text = b.String()
	b.Reset()
	if err := jsonout.Write(&b, in, res); err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(b.Bytes(), &v.json); err != nil {
		t.Fatal(err)
	}
	return v
}

var loaders = map[string]func() (*protocol.Loaded, *result.Result){
	"peel": fixture.Peel, "trial": fixture.Trial, "waiting": fixture.Waiting, "masked": fixture.Masked,
}

// words is every character of a block, its figures' labels included.
func words(b page.Block) string {
	var s strings.Builder
	put := func(in []page.Inline) { s.WriteString(page.Plain(in) + "\n") }
	switch b := b.(type) {
	case page.Heading:
		put(b.Text)
	case page.Paragraph:
		put(b.Text)
	case page.List:
		for _, i := range b.Items {
			put(i)
		}
	case page.Table:
		put(b.Caption)
		for _, h := range b.Head {
			put(h)
		}
		for _, r := range b.Rows {
			for _, c := range r.Cells {
				put(c)
			}
		}
		put(b.Notes)
	case page.Facts:
		for _, f := range b.Items {
			put(page.T(f.Label))
			put(f.Value)
		}
	case page.Figure:
		put(b.Caption)
		put(page.T(b.Alt))
	case page.Verdict:
		for _, in := range [][]page.Inline{page.T(b.Word), page.T(b.Qualify), b.Claim, b.Answer, b.Reading, b.Region} {
			put(in)
		}
		if b.Figure != nil {
			put(page.T(b.Figure.Alt))
		}
	case page.Callout:
		for _, x := range b.Blocks {
			s.WriteString(words(x))
		}
	case page.Verbatim:
		put(page.T(strings.Join(b.Lines, "\n")))
	case page.Signatures:
		put(b.Note)
	case page.PageBreak:
	}
	return s.String()
}

// section is all that the page says of one hypothesis.
func section(doc *page.Document, name string) string {
	var s strings.Builder
	inside := false
	for _, b := range doc.Blocks {
		if v, ok := b.(page.Verdict); ok && v.Name == name {
			s.WriteString(words(b))
		}
		if h, ok := b.(page.Heading); ok && h.Level <= 2 {
			inside = h.Anchor == "hypothesis-"+name
		}
		if inside {
			s.WriteString(words(b))
		}
	}
	return s.String()
}

// written finds numbers as the page writes them.
var written = regexp.MustCompile(`−?\d[\d\x{202f}]*(?:\.\d+)?`)

// pool gathers every number that a value holds, curves left out.
func pool(v reflect.Value, into *[]float64) {
	switch v.Kind() {
	case reflect.Float64:
		*into = append(*into, v.Float())
	case reflect.Int:
		*into = append(*into, float64(v.Int()))
	case reflect.Pointer, reflect.Interface:
		if !v.IsNil() {
			pool(v.Elem(), into)
		}
	case reflect.Slice, reflect.Array:
		for i := range v.Len() {
			pool(v.Index(i), into)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if name := v.Type().Field(i).Name; name != "Curve" {
				pool(v.Field(i), into)
			}
		}
	default:
	}
}

// stray names a number on the page that the result does not hold.
func stray(v *views, h *result.Hypothesis) string {
	var o result.Outcome
	for _, x := range v.res.Outcomes {
		if x.Name == h.Outcome {
			o = x
		}
	}
	f := number.Of(&o)
	var raw []float64
	pool(reflect.ValueOf(*h), &raw)
	pool(reflect.ValueOf(o), &raw)
	for _, s := range v.res.Sensitivity {
		if s.Of == h.Name {
			s.Curve = nil
			pool(reflect.ValueOf(s), &raw)
		}
	}
	values := []float64{0, 0.001, 0.999, float64(len(h.Studies))}
	for _, j := range append(append([]result.Judged{h.Judged}, h.BySet...), h.Alternatives...) {
		values = append(values, j.Level*100, h.Descriptive.Level*100, 1-j.Level)
	}
	for _, x := range raw {
		values = append(values, x, f.Show(x))
	}
	all := section(v.doc, h.Name)
	for _, user := range append([]string{o.Why, h.MarginWhy, h.Statement, o.Label, o.Unit, h.Name}, append(h.Studies, o.Groups[:]...)...) {
		if user != "" {
			all = strings.ReplaceAll(all, user, "")
		}
	}
	all = regexp.MustCompile(`\bS\d{3}\b|(?i)plan \d+`).ReplaceAllString(all, "")
	for _, w := range written.FindAllString(all, -1) {
		got, err := strconv.ParseFloat(strings.NewReplacer("−", "-", number.Thin, "").Replace(w), 64)
		if err != nil {
			return w
		}
		d := 0
		if _, frac, ok := strings.Cut(w, "."); ok {
			d = len(frac)
		}
		found := false
		for _, x := range values {
			found = found || math.Abs(x-got) <= 0.5*math.Pow(10, -float64(d))*(1+1e-9)
		}
		if !found {
			return w
		}
	}
	return ""
}

// Every number that the page prints for a hypothesis is one of the result's.
func TestPageHoldsOnlyTheResult(t *testing.T) {
	for name, load := range loaders {
		in, res := load()
		v := viewsOf(t, in, res)
		for i := range res.Hypotheses {
			if w := stray(v, &res.Hypotheses[i]); w != "" {
				t.Errorf("%s, %s: the page prints %q, which the result does not hold", name, res.Hypotheses[i].Name, w)
			}
		}
	}
}

// disagreement names a claim whose estimate, interval, verdict or sentence
// differs between JSON, page and text.
func disagreement(v *views) string {
	bare := func(s string) string {
		return strings.Join(strings.Fields(strings.NewReplacer(number.Hard, " ", number.Thin, " ").Replace(s)), " ")
	}
	flat := bare(v.text)
	for i, c := range v.json.Hypotheses {
		h := &v.res.Hypotheses[i]
		o := v.json.Outcomes[c.Outcome]
		part := bare(section(v.doc, c.Name))
		if !strings.Contains(part, bare(c.Sentence)) || !strings.Contains(flat, bare(c.Sentence)) {
			return c.Name + ": sentence"
		}
		if !strings.Contains(strings.ToLower(part), c.Verdict) {
			return c.Name + ": verdict"
		}
		if c.Reading != "" && !strings.Contains(part, c.Reading) {
			return c.Name + ": reading"
		}
		var points []float64
		for _, p := range []*float64{o.Null, c.Limit} {
			if p != nil {
				points = append(points, *p)
			}
		}
		points = append(points, c.Margin...)
		opt := func(p *float64) result.Opt {
			if p == nil {
				return result.Opt{}
			}
			return result.Some(*p)
		}
		f := formatOf(v.res, c.Outcome)
		s := f.Interval(opt(c.Estimate), opt(c.Low), opt(c.High), points...)
		for _, want := range []string{s.EstimateUnit(), s.Range(), levelText(c)} {
			if want != "" && (!strings.Contains(part, bare(want)) || !strings.Contains(flat, bare(want))) {
				return fmt.Sprintf("%s: %q", c.Name, want)
			}
		}
		if c.P != nil && !strings.Contains(part, bare(number.P(result.P{P: *c.P, OK: true}, h.Alpha))) {
			return c.Name + ": p"
		}
	}
	return ""
}

func levelText(c jsonClaim) string {
	if c.Low == nil && c.High == nil {
		return ""
	}
	return number.Level(c.Level) + " interval"
}

func formatOf(res *result.Result, outcome string) number.Format {
	for i := range res.Outcomes {
		if res.Outcomes[i].Name == outcome {
			return number.Of(&res.Outcomes[i])
		}
	}
	return number.Format{}
}

func TestViewsAgree(t *testing.T) {
	for name, load := range loaders {
		in, res := load()
		if d := disagreement(viewsOf(t, in, res)); d != "" {
			t.Errorf("%s: the views disagree on %s", name, d)
		}
	}
}

// Both comparisons find a number that was changed in one view.
func TestComparisonsFind(t *testing.T) {
	in, res := fixture.Trial()
	v := viewsOf(t, in, res)
	*v.json.Hypotheses[0].High = 0.0517
	if disagreement(v) == "" {
		t.Error("a changed limit in the JSON is not found")
	}
	v = viewsOf(t, in, res)
	v.json.Hypotheses[2].Verdict = "contradicted"
	if disagreement(v) == "" {
		t.Error("a changed verdict in the JSON is not found")
	}
	v = viewsOf(t, in, res)
	for i, b := range v.doc.Blocks {
		if x, ok := b.(page.Verdict); ok && x.Name == "H3" {
			x.Answer = page.T("Difference −5.9 mm.")
			v.doc.Blocks[i] = x
		}
	}
	if stray(v, &res.Hypotheses[2]) == "" {
		t.Error("a number on the page that the result does not hold is not found")
	}
}

// While results are masked nothing is attached and no group's number is on
// any page.
func TestMaskedShowsNothing(t *testing.T) {
	in, res := fixture.Masked()
	// Numbers that a careless view could print.
	res.Studies[0].Groups = append(res.Studies[0].Groups, result.GroupNumbers{Name: "new", N: result.Some(24), Mean: result.Some(77.77), SD: result.Some(55.55)})
	v := viewsOf(t, in, res)
	if strings.Contains(v.text, "77.7") || strings.Contains(v.text, "55.5") {
		t.Error("a masked group's numbers are printed")
	}
	if len(v.doc.Attachments) > 0 {
		t.Error("a masked record attaches something")
	}
}

// Composing is a function: the same input gives the same page.
func TestComposeSteady(t *testing.T) {
	for name, load := range loaders {
		in, res := load()
		a, b := render.Compose(in, res), render.Compose(in, res)
		if !reflect.DeepEqual(a, b) {
			t.Errorf("%s: two pages differ", name)
		}
	}
}

// A record that could not be computed still composes.
func TestComposeEmpty(t *testing.T) {
	in, res := fixture.Faulty()
	viewsOf(t, in, res)
}

func BenchmarkCompose(b *testing.B) {
	in, res := fixture.Trial()
	for b.Loop() {
		render.Compose(in, res)
	}
}
