package data

import (
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/google/go-cmp/cmp"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

func scalar(text string) record.Scalar {
	v, kind := parseNumber([]byte(text))
	return record.Scalar{Text: text, Number: v, IsNumber: kind == aNumber, Stated: true}
}

func TestFilters(t *testing.T) {
	yes, no := record.Bool{V: true, Stated: true}, record.Bool{Stated: true}
	for _, tt := range []struct {
		filter record.Filter
		reason string
		met    string // of the cells below
		faulty string
	}{
		{record.Filter{Above: num(2)}, "x above 2", "2.5 3.0", "two"},
		{record.Filter{AtLeast: num(2)}, "x at least 2", "2 2.0 2.5 3.0", "two"},
		{record.Filter{Below: num(2)}, "x below 2", "-1", "two"},
		{record.Filter{AtMost: num(2)}, "x at most 2", "-1 2 2.0", "two"},
		{record.Filter{AtLeast: num(2), Below: num(3)}, "x at least 2 below 3", "2 2.0 2.5", "two"},
		{record.Filter{Equals: scalar("2")}, "x = 2", "2 2.0", ""},
		{record.Filter{Equals: scalar("two")}, "x = two", "two", ""},
		{record.Filter{OneOf: record.Value[[]record.Scalar]{V: []record.Scalar{scalar("3"), scalar("two")}, Stated: true}}, "x one of 3, two", "3.0 two", ""},
		{record.Filter{Missing: yes}, "x missing", "NA", ""},
		{record.Filter{Missing: no}, "x present", "-1 2 2.0 2.5 3.0 two", ""},
	} {
		tt.filter.Column = str("x")
		if got := reasonOf(&tt.filter, false, nil); got != tt.reason {
			t.Errorf("reason %q, want %q", got, tt.reason)
		}
		if got := reasonOf(&tt.filter, true, nil); got != "not "+tt.reason {
			t.Errorf("reason %q, want %q", got, "not "+tt.reason)
		}
		var met, faulty []string
		for _, cell := range []string{"-1", "2", "2.0", "2.5", "3.0", "two", "NA"} {
			f := filter{src: &tt.filter}
			drop, kind := f.drops([]byte(cell), cell == "NA")
			keep := filter{src: &tt.filter, keep: true}
			if kept, _ := keep.drops([]byte(cell), cell == "NA"); kept == drop {
				t.Errorf("%s: a set and an exclusion with the condition treat %q alike", tt.reason, cell)
			}
			if drop {
				met = append(met, cell)
			}
			if kind != aNumber {
				faulty = append(faulty, cell)
			}
		}
		if strings.Join(met, " ") != tt.met || strings.Join(faulty, " ") != tt.faulty {
			t.Errorf("%s: met by %q, faults %q; want %q, %q", tt.reason, met, faulty, tt.met, tt.faulty)
		}
	}
}

func TestReasonAsWritten(t *testing.T) {
	src := diag.NewSource("r.toml", []byte("below = 18.50"))
	f := record.Filter{Column: str("age"), Below: record.Number{V: 18.5, Span: diag.Span{Start: 8, End: 13}, Stated: true}}
	if got := reasonOf(&f, false, src); got != "age below 18.50" {
		t.Errorf("reason %q", got)
	}
}

func TestLoadSets(t *testing.T) {
	rec := recordOf("mean-difference", &record.Data{Value: str("v"), Group: str("g")})
	rec.Plan.Data.Exclude = []*record.Filter{{Column: str("age"), Below: num(18), Why: str("Adults only.")}}
	rec.Plan.Sets = []*record.Set{
		{Named: named("full")},
		{Named: named("as-planned"), Keep: []*record.Filter{{Column: str("dose"), AtLeast: num(80), Why: str("Dose.")}, {Column: str("site"), OneOf: record.Value[[]record.Scalar]{V: []record.Scalar{scalar("a"), scalar("b")}, Stated: true}}}},
	}
	csv := "g,age,dose,site,v\n" +
		"new,17,10,c,broken\n" + // excluded before its value is read
		"new,18,90,a,1\n" +
		"current,40,79,c,2\n" + // counted by the first filter only
		"current,40,80,c,3\n" +
		"current,40,80,b,4\n" +
		"new,40,80,b,\n" +
		"new,40,,a,5\n" + // an absent dose is not at least 80
		"odd,5,80,b,6\n"
	tables, list := Load(rec, inFile([]byte(csv)))
	if len(list) > 0 {
		t.Fatal(words(list))
	}
	young := []Dropped{{Reason: "age below 18", Why: "Adults only.", Planned: true, Group: "new", Count: 1}, {Reason: "age below 18", Why: "Adults only.", Planned: true, Count: 1}}
	want := map[string]Vectors{
		"full": {Group: []uint8{0, 1, 1, 1, 0}, Value: []float64{1, 2, 3, 4, 5}, Used: 5,
			Dropped: append(young[:2:2], Dropped{Reason: "value missing", Group: "new", Count: 1})},
		"as-planned": {Group: []uint8{0, 1}, Value: []float64{1, 4}, Used: 2,
			Dropped: append(young[:2:2], Dropped{Reason: "not dose at least 80", Why: "Dose.", Planned: true, Group: "new", Count: 1},
				Dropped{Reason: "not dose at least 80", Why: "Dose.", Planned: true, Group: "current", Count: 1},
				Dropped{Reason: "not site one of a, b", Planned: true, Group: "current", Count: 1}, Dropped{Reason: "value missing", Group: "new", Count: 1})},
	}
	for set, w := range want {
		v := *tables[Key{0, set}]
		w.Set, w.Rows, w.File, w.SHA256 = set, 8, "lot.csv", v.SHA256
		if d := cmp.Diff(w, v); d != "" {
			t.Errorf("%s (-want +got)\n%s", set, d)
		}
	}
	rec.Results[0].Set = str("full")
	if tables, _ := Load(rec, inFile([]byte(csv))); len(tables) != 1 || tables[Key{0, "full"}] == nil {
		t.Errorf("an entry of one set has %d tables", len(tables))
	}
	_, list = Load(rec, inFile([]byte("g,age,dose,v\nnew,old,1,1\n")))
	if got := strings.Join(words(list), "; "); got != `D130 lot.csv:2:5 column "age": "old" is not a number, and a filter compares this column with one` {
		t.Errorf("filter on a word: %q", got)
	}
}

func TestLoadCovariates(t *testing.T) {
	rec := recordOf("mean-difference", &record.Data{Value: str("v"), Group: str("g")})
	rec.Plan.Hypotheses = []*record.Hypothesis{
		{Named: named("H1"), Outcome: str("peel"), Adjust: strs("age", "site")},
		{Named: named("H2"), Outcome: str("peel"), Adjust: strs("age"), Strata: str("block")},
		{Named: named("H3"), Outcome: str("other"), Adjust: strs("absent")},
	}
	csv := "g,v,age,site,block\nnew,1,30,b,2\ncurrent,2,41.5,a,10\nnew,3,NA,c,1\nnew,4,7,b,10\n"
	tables, list := Load(rec, inFile([]byte(csv)))
	v := tables[Key{}]
	if len(list) > 0 || v == nil {
		t.Fatal(words(list))
	}
	want := Vectors{File: "lot.csv", SHA256: v.SHA256, Rows: 4, Used: 3, Group: []uint8{0, 1, 0}, Value: []float64{1, 2, 4},
		Numeric: map[string][]float64{"age": {30, 41.5, 7}},
		Factors: map[string]*Factor{"site": {Levels: []string{"a", "b"}, Code: []int32{1, 0, 1}}, "block": {Levels: []string{"10", "2"}, Code: []int32{1, 0, 0}}},
		Dropped: []Dropped{{Reason: "column age missing", Group: "new", Count: 1}}}
	if d := cmp.Diff(want, *v); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
	_, list = Load(rec, inFile([]byte("g,v,age,site,block\nnew,1,30,b,2\ncurrent,2,n.d.,a,10\nnew,2,9,a,10\n")))
	if got := strings.Join(words(list), "; "); got != `D131 lot.csv:3:11 column "age" is read as categories, because "n.d." is not a number` || list.HasErrors() {
		t.Errorf("mixed column: %q", got)
	}
}

// What is masked holds nothing by group and quotes nothing of the file.
func TestLoadMasked(t *testing.T) {
	mask := func(rec *record.Record) *record.Record {
		rec.Plan.Hypotheses = []*record.Hypothesis{{Named: named("H1"), Outcome: str("peel"), Adjust: strs("age")}}
		rec.Plan.Looks = &record.Looks{Masked: record.Bool{V: true}}
		return rec
	}
	rec := mask(recordOf("mean-difference", &record.Data{Value: str("v"), Group: str("g"), Cluster: str("c")}))
	tables, list := Load(rec, inFile([]byte("g,c,age,v\nnew,1,3,1\ncurrent,2,x,2\nnew,1,4,\ncurrent,2,4,\n")))
	v := tables[Key{}]
	if v == nil {
		t.Fatal(words(list))
	}
	want := Vectors{File: "lot.csv", SHA256: v.SHA256, Rows: 4, Used: 2, Value: []float64{1, 2}, Dropped: []Dropped{{Reason: "value missing", Count: 2}}}
	if d := cmp.Diff(want, *v); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
	for _, d := range list {
		if d.Excerpt != "" || strings.Contains(d.Message, `"x"`) {
			t.Errorf("quotes a masked file: %+v", d)
		}
	}

	rec = mask(recordOf("paired-mean-difference", &record.Data{First: str("a"), Second: str("b")}))
	tables, _ = Load(rec, inFile([]byte("a,b\n5,2\n3,4\n")))
	if v = tables[Key{}]; v.First != nil || v.Second != nil || v.Used != 2 || !cmp.Equal(v.Value, []float64{2, 5, 3, 4}) {
		t.Errorf("masked pairs: %+v", v)
	}

	csv := "g,v\nstrange,1\nnew,secret\nnew,1,1\n\"new\"x,1\n"
	rec = mask(recordOf("mean-difference", &record.Data{Value: str("v"), Group: str("g")}))
	rec.Plan.Hypotheses[0].Adjust = record.Strings{}
	for _, masked := range []bool{true, false} {
		if !masked {
			rec.Plan.Looks = nil
		}
		_, list = Load(rec, inFile([]byte(csv)))
		all := strings.Join(words(list), "\n")
		shown := strings.Contains(all, "strange") || strings.Contains(all, "secret")
		for _, d := range list {
			shown = shown || d.Excerpt != "" || strings.Contains(d.Help, "strange")
		}
		if len(list) != 4 || shown == masked {
			t.Errorf("masked %v: %d faults, shown %v\n%s", masked, len(list), shown, all)
		}
	}
}

// countingFS counts how often a file is opened.
type countingFS struct {
	fs.FS
	opened *int
}

func (c countingFS) Open(name string) (fs.File, error) {
	*c.opened++
	return c.FS.Open(name)
}

func TestLoadSeveralEntries(t *testing.T) {
	rec := recordOf("mean-difference", &record.Data{Value: str("v"), Group: str("g")})
	second, earlier := *rec.Results[0].Data, *rec.Results[0].Data
	second.Value, earlier.Value = str("w"), str("w")
	rec.Results = append(rec.Results, &record.Result{Study: str("S2"), Outcome: str("peel"), Data: &second})
	rec.Earlier = append(rec.Earlier, &record.Result{Study: str("S0"), Outcome: str("peel"), Data: &earlier})
	opened := 0
	tables, list := Load(rec, countingFS{inFile([]byte("g,v,w\nnew,1,2\n")), &opened})
	if len(list) > 0 || opened != 1 {
		t.Fatalf("%v, opened %d times", words(list), opened)
	}
	for key, want := range map[Key]float64{{0, ""}: 1, {1, ""}: 2, {-1, ""}: 2} {
		if v := tables[key]; v == nil || v.Value[0] != want {
			t.Errorf("%v: %+v", key, v)
		}
	}
	// One broken cell that two entries meet is one fault.
	_, list = Load(rec, inFile([]byte("g,v,w\nnew,1,x\n")))
	if len(list) != 1 {
		t.Errorf("echoes: %q", words(list))
	}
}

func TestLoadLeavesFolder(t *testing.T) {
	dir := t.TempDir()
	inside := filepath.Join(dir, "record")
	if err := os.Mkdir(inside, 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(dir, "secret.csv"), []byte("v\n1\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	if err := os.Symlink("../secret.csv", filepath.Join(inside, "lot.csv")); err != nil {
		t.Skip("no symbolic links here:", err)
	}
	root, err := os.OpenRoot(inside)
	if err != nil {
		t.Fatal(err)
	}
	defer root.Close()
	tables, list := Load(recordOf("mean", &record.Data{Value: str("v")}), root.FS())
	if got := strings.Join(words(list), "; "); got != `D102 @100 "lot.csv" leads out of the record's folder` || len(tables) > 0 {
		t.Errorf("%q, %d tables", got, len(tables))
	}
}

// Certified values of the NIST Statistical Reference Datasets, as in
// testdata/reference/published.json (nist-lew, nist-mavro, nist-pidigits):
// the mean of what was read, by exact sums of short decimals, and n.
func TestLoadNIST(t *testing.T) {
	files := os.DirFS("../../testdata/reference/data")
	for _, tt := range []struct {
		file string
		n    int
		mean float64
	}{{"nist_lew.csv", 200, -177.435}, {"nist_mavro.csv", 50, 2.001856}, {"nist_pidigits.csv", 5000, 4.5348}} {
		rec := recordOf("mean", &record.Data{File: str(tt.file), Value: str("y")})
		tables, list := Load(rec, files)
		if len(list) > 0 {
			t.Fatal(words(list))
		}
		v, sum := tables[Key{}], 0.0
		for _, x := range v.Value {
			sum += math.Round(x * 1e5) // every value has at most five decimals
		}
		if mean := sum / 1e5 / float64(v.Used); v.Used != tt.n || math.Abs(mean-tt.mean) > 1e-12*math.Abs(tt.mean) {
			t.Errorf("%s: n %d, mean %.15g; certified %d, %v", tt.file, v.Used, mean, tt.n, tt.mean)
		}
	}
	tables, _ := Load(recordOf("mean", &record.Data{File: str("nist_longley.csv"), Value: str("gnp_deflator")}), files)
	if v := tables[Key{}]; v == nil || v.Used != 16 || v.Value[1] != 88.5 {
		t.Errorf("longley: %+v", v)
	}
}

// FuzzLoad feeds any file to entries of several forms: no panic, every place
// inside the file, rows accounted for.
func FuzzLoad(f *testing.F) {
	for _, s := range []string{"g,v,p\nnew,1,a\ncurrent,2,a\n", "g,v,p\nnew,NA,1\nother,2,1\n", "v\n\n1\n", "g,v,p,q,s\nnew,1,1,new,k\ncurrent,2,2,new,k\n", "\"g\",\"v\",\"p\"\n\"new\",\"1\n\",3\n"} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		files := fstest.MapFS{"lot.csv": {Data: text}}
		lines := strings.Split(string(text), "\n")
		for measure, d := range map[string]record.Data{
			"mean-difference":        {Value: str("v"), Group: str("g"), Cluster: str("p")},
			"paired-mean-difference": {Value: str("v"), Group: str("g"), Pair: str("p")},
			"geometric-mean-ratio":   {Value: str("v"), Subject: str("s"), Period: str("p"), Sequence: str("q")},
			"mean":                   {Value: str("v")},
		} {
			rec := recordOf(measure, &d)
			if measure == "geometric-mean-ratio" {
				rec.Plan.Outcomes[0].Design = str("crossover")
			}
			rec.Plan.Hypotheses = []*record.Hypothesis{{Outcome: str("peel"), Adjust: strs("q")}}
			rec.Plan.Data.Exclude = []*record.Filter{{Column: str("v"), Above: num(9)}}
			tables, list := Load(rec, files)
			for _, d := range list {
				if d.File != "" && (d.Line < 1 || d.Line > len(lines) || d.Column < 1 || d.Column > len(lines[d.Line-1])+1) {
					t.Fatalf("place outside the file: %+v", d)
				}
			}
			for _, v := range tables {
				n := v.Used
				if measure == "paired-mean-difference" {
					n *= 2
				}
				for _, d := range v.Dropped {
					n += d.Count
				}
				if n != v.Rows {
					t.Fatalf("%s: %d rows, %d accounted for: %s", measure, v.Rows, n, fmt.Sprint(*v))
				}
			}
		}
	})
}
