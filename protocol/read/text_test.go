package read

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

var update = flag.Bool("update", false, "write golden files")

// readText reads and returns the lines of the diagnostics.
func readText(text string, all bool) (*record.Record, []string) {
	src := diag.NewSource("a.toml", []byte(text))
	rec, list := readWith(src, all)
	return rec, lines(list, src)
}

func expect(t *testing.T, got []string, want ...string) {
	t.Helper()
	for _, d := range compareFaults(got, want) {
		t.Error(d)
	}
}

func TestTextsThatAreNone(t *testing.T) {
	for _, c := range []struct {
		name, text string
		want       []string
	}{
		{"utf-16", "\xff\xfes\x00t\x00", []string{"1:1 error R101 0xff"}},
		{"latin-1", "steelyard = 1 # Pr\xfcfung", []string{"1:19 error R101 0xfc"}},
		{"zero byte", "steelyard = 1\x00", []string{"1:14 error R102 zero byte"}},
		{"bell", "steelyard = 1 # \x07\n[record]\ntitle = \"a\x0bb\"\nsetting = \"quality\"\n[plan]\nquestion = \"q\"\n", []string{
			"1:17 error R102 U+0007", "3:11 error R102 U+000B",
			"5:1 error R205 [plan.outcome.NAME]", "5:1 error R205 [plan.hypothesis.NAME]"}},
		{"lone carriage return", "steelyard = 1\r[record]\n", []string{"1:14 error R102 carriage return",
			"1:1 error R205 [plan]", "1:15 error R205 title", "1:15 error R205 setting"}},
		{"too long", strings.Repeat("#", maxBytes+1), []string{"1:1 error R103 bytes long"}},
		{"empty", "", []string{"1:1 error R110 does not begin", "1:1 error R205 [record]", "1:1 error R205 [plan]"}},
		{"only a comment", "# nothing\n", []string{"1:1 error R110 does not begin", "1:1 error R205 [record]", "1:1 error R205 [plan]"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, got := readText(c.text, true)
			want := map[string]int{}
			for _, w := range c.want {
				want[w]++
			}
			if len(got) != len(c.want) {
				t.Fatalf("got %q", got)
			}
			for i := range got { // order of equal places is by code and message
				for w := range want {
					if len(compareFaults(got[i:i+1], []string{w})) == 0 {
						want[w]--
					}
				}
			}
			for w, n := range want {
				if n != 0 {
					t.Errorf("want %q in %q", w, got)
				}
			}
		})
	}
}

// TestEndsOfLines checks that a byte-order mark and either end of line leave
// every place where it is.
func TestEndsOfLines(t *testing.T) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		t.Fatal(err)
	}
	bad := strings.Replace(string(base), `"equivalent"`, `"equivalnt"`, 1)
	bad = strings.Replace(bad, `"quality"`, `"qualty"`, 1)
	want := []string{"6:11 error R202 qualty", "22:11 error R202 equivalnt"}
	for _, text := range []string{bad, "\ufeff" + bad, strings.ReplaceAll(bad, "\n", "\r\n"), "\ufeff" + strings.ReplaceAll(bad, "\n", "\r\n"), strings.TrimSuffix(bad, "\n")} {
		_, got := readText(text, true)
		expect(t, got, want...)
	}
	_, got := readText("\ufeffsteelyard = 2", true)
	expect(t, got, "1:13 error R111 version 2")
}

// TestLargeAndHostile checks that size and nesting end in an error and soon.
func TestLargeAndHostile(t *testing.T) {
	for _, c := range []struct{ name, text, code string }{
		{"brackets", "steelyard = 1\nx = " + strings.Repeat("[", 1<<20), "R104"},
		{"braces", "steelyard = 1\nx = " + strings.Repeat("{a=", 1<<20), "R104"},
		{"dots", "steelyard = 1\n" + strings.Repeat("a.", 1<<20) + "a = 1", "R104"},
		{"head of dots", "steelyard = 1\n[" + strings.Repeat("a.", 1<<20) + "a]", "R104"},
		{"one long line", "steelyard = 1\nx = \"" + strings.Repeat("x", 3<<20) + "\"", "R201"},
		{"unclosed", "steelyard = 1\nx = \"\"\"" + strings.Repeat("x = 1\n", 1<<18), "R106"},
		{"bad lines", "steelyard = 1\n" + strings.Repeat("x y\n", 1<<19), "R108"},
		{"the same key", "steelyard = 1\n" + strings.Repeat("x = 1\n", 1<<16), "R107"},
		{"unknown keys", "steelyard = 1\n" + manyKeys(1<<16), "R108"},
		{"bad dates", "steelyard = 1\n" + strings.ReplaceAll(manyKeys(1<<12), "= 1", "= 2026-02-31"), "R108"},
		{"quotes", "steelyard = 1\nx = " + strings.Repeat("\"", 1<<20), "R105"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, got := readText(c.text, true)
			if len(got) > maxDiagnostics+1 {
				t.Errorf("%d diagnostics", len(got))
			}
			for _, line := range got {
				if strings.Contains(line, " "+c.code+" ") {
					return
				}
			}
			t.Errorf("no %s among %d, the first is %q", c.code, len(got), got[:min(3, len(got))])
		})
	}
}

// TestManyNames checks that long lists of names are checked soon.
func TestManyNames(t *testing.T) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		t.Fatal(err)
	}
	list := func(prefix string, n int) string {
		var b strings.Builder
		for i := range n {
			b.WriteString("\"" + prefix + record.FormatNumber(float64(i)) + "\", ")
		}
		return "[" + b.String() + "]"
	}
	const n = 30000
	var b strings.Builder
	b.WriteString(strings.Replace(string(base), "claim   = \"equivalent\"", "claim   = \"equivalent\"\nstudies = "+list("T", n), 1))
	b.WriteString("[plan.family.F]\nprocedure = \"fallback\"\nmembers = " + list("M", n) + "\norder = " + list("O", n) + "\nweights = [1]\n")
	for i := range n {
		b.WriteString("[plan.hypothesis.H" + record.FormatNumber(float64(i+2)) + "]\noutcome = \"pael\"\nclaim = \"differs\"\n")
	}
	if _, got := readText(b.String(), true); len(got) != maxDiagnostics+1 {
		t.Errorf("%d diagnostics", len(got))
	}
}

func manyKeys(n int) string {
	var b strings.Builder
	for i := range n {
		b.WriteString("k" + record.FormatNumber(float64(i)) + " = 1\n")
	}
	return b.String()
}

// TestMany reads a record with as many studies as a combination takes.
func TestMany(t *testing.T) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		t.Fatal(err)
	}
	var b strings.Builder
	b.Write(base)
	for i := range 20000 {
		b.WriteString("[[result]]\nstudy = \"S" + record.FormatNumber(float64(i)) + "\"\noutcome = \"peel\"\ndate = 2026-04-12\neffect = { estimate = 0.1, se = 0.3 }\n")
	}
	rec, got := readText(b.String(), true)
	expect(t, got, "20:1 error S111 20001 studies")
	if len(rec.Results) != 20001 || rec.Results[20000].Study.V != "S19999" {
		t.Errorf("%d results", len(rec.Results))
	}
}

// fieldOf is a field of the plan, as the binder sees it.
func fieldOf(rec *record.Record, name string) reflect.Value {
	return reflect.ValueOf(&rec.Plan).Elem().FieldByName(name)
}

// TestNotComputed checks that what is not computed is refused, once a place.
// It reads the lists themselves, so that it stays right as they shrink.
func TestNotComputed(t *testing.T) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		t.Fatal(err)
	}
	b := &binder{}
	row := *record.KeyOf("plan.estimand")
	row.Ready = false
	root, _, _ := Tree([]byte("[plan.estimand.E1]\npopulation = \"a\"\ntreatment = \"b\"\nvariable = \"c\"\nsummary = \"d\"\n"))
	rec := &record.Record{}
	entry := *root.Get("plan").Entry("estimand")
	b.entry(&row, entry, fieldOf(rec, "Estimands"), "plan.estimand")
	if len(b.list) != 1 || b.list[0].Code != "R208" || b.list[0].Span != entry.KeySpan {
		t.Errorf("a table that is not computed: %v", b.list)
	}
	if len(rec.Plan.Estimands) != 1 {
		t.Error("it is read all the same, so that its own faults are found")
	}

	b = &binder{}
	row = *record.KeyOf("plan.outcome.NAME.better")
	row.Later = []string{"lower"}
	for word, want := range map[string]int{"lower": 1, "higher": 0} {
		b.list = nil
		b.text(&row, &record.Node{Kind: record.StringNode, Text: word})
		if len(b.list) != want {
			t.Errorf("%s: %v", word, b.list)
		}
	}
	for _, m := range record.Measures {
		text := strings.Replace(string(base), `"mean-difference"`, `"`+m.Word+`"`, 1)
		_, got := readText(text, false)
		has := strings.Contains(strings.Join(got, "\n"), "15:12 error R208")
		if has == m.Ready {
			t.Errorf("%s is computed: %v, and refused: %v", m.Word, m.Ready, has)
		}
	}
}

func TestDatedRecords(t *testing.T) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		t.Fatal(err)
	}
	plan, _, _ := strings.Cut(string(base), "[[result]]")
	effective := strings.Replace(plan, `setting = "quality"`, "setting = \"quality\"\nstatus = \"effective\"", 1)
	dated := strings.Replace(effective, `setting = "quality"`, "setting = \"quality\"\ndate = 2026-01-01", 1)
	day := record.Date{Year: 2026, Month: 1, Day: 1}
	for _, c := range []struct {
		text  string
		seals []record.Date
		want  []string
	}{
		{plan, nil, []string{"3:1 warning R506 undated"}},
		{plan, []record.Date{day}, nil},
		{effective, nil, []string{"7:10 error R505 effective"}},
		{effective, []record.Date{day}, nil},
		{dated, nil, nil},
		{string(base), nil, nil},
	} {
		rec, got := readText(c.text, true)
		expect(t, got)
		expect(t, lines(Dated(rec, c.seals...), rec.Source), c.want...)
	}
}

// TestReadsTwice checks the guard against two readings that differ, which Tree
// reports under the code "R109".
func TestReadsTwice(t *testing.T) {
	p := parse([]byte("a = 1\nb = {c = [1, 2]}\n"))
	root := build(p, true).root
	for _, m := range []map[string]any{
		{"a": int64(1)},
		{"a": int64(1), "b": int64(2)},
		{"a": "x", "b": map[string]any{"c": []any{int64(1), int64(2)}}},
		{"a": int64(1), "b": map[string]any{"c": []any{int64(1)}}},
		{"a": int64(1), "b": map[string]any{"d": []any{int64(1), int64(2)}}},
	} {
		if attach(root, m) == nil {
			t.Errorf("%v passes", m)
		}
	}
	if bad := attach(root, map[string]any{"a": int64(1), "b": map[string]any{"c": []any{int64(1), int64(2)}}}); bad != nil {
		t.Errorf("the right reading is refused at %v", bad.Span)
	}
}

// TestLongForm compares the long form of a list of diagnostics with the golden
// file.
func TestLongForm(t *testing.T) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		t.Fatal(err)
	}
	text := string(base)
	for _, c := range [][2]string{
		{`setting = "quality"`, `setting = "qualty"   # of what?`},
		{"unit     = \"N\"\n", "unit     = newton per 15 mm\n"},
		{`smallest = 0.8`, `smallest = -0.8`},
		{"claim   = \"equivalent\"\n", ""},
		{`{ n = 24, mean = 12.10, sd = 1.18 }`, `{ n = 24, mean = 12.10, events = 25 }`},
	} {
		if !strings.Contains(text, c[0]) {
			t.Fatalf("the base has no %q", c[0])
		}
		text = strings.Replace(text, c[0], c[1], 1)
	}
	src := diag.NewSource("peel.toml", []byte(text))
	_, list := Record(src)
	var b bytes.Buffer
	if err := list.Write(&b, src); err != nil {
		t.Fatal(err)
	}
	golden := filepath.Join("testdata", "long.golden")
	if *update {
		if err := os.WriteFile(golden, b.Bytes(), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(golden)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(b.Bytes(), want) {
		t.Errorf("got\n%s\nwant\n%s", b.Bytes(), want)
	}
}

func TestNearest(t *testing.T) {
	known := []string{"mean-difference", "risk-ratio", "odds-ratio", "sd", "smallest", "paired-mean-difference"}
	for written, want := range map[string]string{
		"mean_difference": "mean-difference", "Risk-Ratio": "risk-ratio", "oddsratio": "odds-ratio", "smalest": "smallest",
		"sallmest": "smallest", "s": "sd", "zebra": "", "": "", "small": "smallest", strings.Repeat("x", 500): "",
	} {
		if got := nearest(written, known); got != want {
			t.Errorf("%q is nearest to %q, not %q", written, want, got)
		}
	}
	if d := editDistance("abcd", "acbd"); d != 1 {
		t.Errorf("a swap counts %d", d)
	}
}

// BenchmarkRead reads a record of about 200 lines.
func BenchmarkRead(b *testing.B) {
	base, err := os.ReadFile("testdata/base.toml")
	if err != nil {
		b.Fatal(err)
	}
	var text bytes.Buffer
	text.Write(base)
	text.WriteString("[plan.pooling.peel]\nindependent = \"different lines with different operators\"\nmodel = \"random\"\n")
	for i := range 28 {
		text.WriteString("\n[[result]]\nstudy   = \"Line " + record.FormatNumber(float64(i)) + "\"\noutcome = \"peel\"\ndate    = 2026-04-12\n" +
			"groups.new     = { n = 24, mean = 11.92, sd = 1.31 }\ngroups.current = { n = 24, mean = 12.10, sd = 1.18 }\n")
	}
	src := diag.NewSource("a.toml", text.Bytes())
	b.SetBytes(int64(text.Len()))
	b.ReportAllocs()
	for b.Loop() {
		if rec, _ := Record(src); len(rec.Results) != 29 {
			b.Fatal("not read")
		}
	}
}
