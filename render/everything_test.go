package render_test

import (
	"bytes"
	"fmt"
	"reflect"
	"regexp"
	"slices"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/jsonout"
	"steelyard/render/text"
)

// fixedWords are fields with a closed list of words: one valid word each, so
// that every section has something to say.
var fixedWords = map[string]string{
	"Claim": "noninferior", "Verdict": "open", "Measure": "mean-difference", "Better": "higher", "Evidence": "pooled", "Outcome": "o",
	"Use": "analysed", "Order": "before-results", "State": "changed", "Stage": "interim", "Scale": "identity", "Alternative": "greater",
	"Crossed": "none", "Model": "random", "Role": "secondary", "Setting": "clinical", "At": "2026-01-01", "Of": "H1", "Kind": "margin",
	"Case": "as-reported", "Status": "draft", "From": "plan", "Message": "a note", "Hypothesis": "H1",
}

// mark fills every text of a result with its own word and remembers where.
func mark(v reflect.Value, path, name string, into map[string]string) {
	switch v.Kind() {
	case reflect.Float64:
		v.SetFloat(0.1 + float64(len(into))/1e4)
	case reflect.Int:
		v.SetInt(3)
	case reflect.Bool:
		v.SetBool(true)
	case reflect.String:
		switch w, ok := fixedWords[name]; {
		case ok:
			v.SetString(w)
		case strings.HasSuffix(path, "Outcomes[].Name"):
			v.SetString("o")
		case strings.HasSuffix(path, "Hypotheses[].Name"):
			v.SetString("H1")
		default:
			s := fmt.Sprintf("zz%dzz", len(into))
			v.SetString(s)
			into[s] = path
		}
	case reflect.Struct:
		if d, ok := v.Addr().Interface().(*record.Date); ok {
			*d = record.Date{Year: 2026, Month: 3, Day: 1}
			return
		}
		for i := range v.NumField() {
			if n := v.Type().Field(i).Name; n != "Diagnostics" && n != "Span" {
				mark(v.Field(i), path+"."+n, n, into)
			}
		}
	case reflect.Slice:
		v.Set(reflect.MakeSlice(v.Type(), 1, 1))
		mark(v.Index(0), path+"[]", name, into)
	case reflect.Array:
		for i := range v.Len() {
			mark(v.Index(i), path, name, into)
		}
	case reflect.Pointer:
		v.Set(reflect.New(v.Type().Elem()))
		mark(v.Elem(), path, name, into)
	case reflect.Interface:
		v.Set(reflect.ValueOf("argument"))
	default:
	}
}

// Fields that a view leaves out on purpose.
var (
	notOnPage = []string{
		".Code", ".Because", ".Sort", ".Form", ".File", // codes of notes are printed with diagnostics; the rest is for order or for programs
		".Set", ".Statistic", ".Alternatives[].Analysis.Method", ".Descriptive.Method", ".Pooled[].Analysis.Method", // printed where they differ
		".BySet[].Analysis.Method", ".Cumulative[].Study", // a table or figure of one row says nothing
		".MeasureLabel", ".Unit", // in words of the page's own; ratios have no unit
		".Before.Study", ".After.Study", // the path names each result
		".Broken", ".Hypotheses[].Studies[]", // only of a broken chain; of pooled evidence the sentence names them
		".Removed[].Assumptions[].Assumption", ".Removed[].Assumptions[].Shows[].What", ".Removed[].Assumptions[].Shows[].Group", ".Removed[].Judged.Analysis.Method", // its sentence is printed,
		".Removed[].MarginWhy", ".Removed[].Excludes", ".Removed[].Studies[]", // as it is no claim of the plan now
	}
	notInJSON = []string{
		".Code", ".Because", ".Sort", ".Form", ".MeasureLabel", ".Dropped[].Group", ".Dropped[].Why", ".Changes[].Old", ".Changes[].New",
		".Pooled[].Hypotheses[]", ".Priors[].Why", ".Survival[].Group", ".Totals[].Group", ".Totals[].Set", // not of the contract
	}
)

// leftOut lists the fields whose words are not in a text.
func leftOut(into map[string]string, text string, allowed []string) []string {
	flat := regexp.MustCompile(`\s+`).ReplaceAllString(text, "")
	var out []string
	for word, path := range into {
		if !strings.Contains(flat, word) && !slices.ContainsFunc(allowed, func(a string) bool { return strings.HasSuffix(path, a) }) {
			out = append(out, path)
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// Every text of a result has its place on the page and in the JSON.
func TestEverythingHasAPlace(t *testing.T) {
	in, _ := fixture.Trial()
	res := &result.Result{}
	into := map[string]string{}
	mark(reflect.ValueOf(res).Elem(), "", "", into)
	res.Masked = false
	var page, json bytes.Buffer
	if err := text.Write(&page, render.Compose(in, res), text.Options{Full: true}); err != nil {
		t.Fatal(err)
	}
	if err := jsonout.Write(&json, in, res); err != nil {
		t.Fatal(err)
	}
	for _, p := range leftOut(into, page.String(), notOnPage) {
		t.Errorf("the page leaves out %s", p)
	}
	for _, p := range leftOut(into, json.String(), notInJSON) {
		t.Errorf("the JSON leaves out %s", p)
	}
	if len(leftOut(map[string]string{"never printed": "x.y"}, page.String(), nil)) != 1 {
		t.Error("the check finds nothing")
	}
}
