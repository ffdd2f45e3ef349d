package data

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/google/go-cmp/cmp"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// words is each diagnostic as its code, its place in the data file (else @ and
// the offset in the record) and its message.
func words(list diag.List) (out []string) {
	for _, d := range list {
		place := fmt.Sprintf("@%d", d.Span.Start)
		if d.File != "" {
			place = fmt.Sprintf("%s:%d:%d", d.File, d.Line, d.Column)
		}
		out = append(out, fmt.Sprintf("%s %s %s", d.Code, place, d.Message))
	}
	return out
}

func named(name string) record.Named { return record.Named{Name: name} }

// loadCase is one file read by one entry.
type loadCase struct {
	name    string
	measure string // default mean-difference
	data    record.Data
	change  func(*record.Record)
	csv     string
	want    Vectors  // SHA256 and File are filled in
	faults  []string // in which case there are no vectors
}

func runLoad(t *testing.T, tt loadCase) {
	t.Helper()
	if tt.measure == "" {
		tt.measure = "mean-difference"
	}
	rec := recordOf(tt.measure, &tt.data)
	if tt.change != nil {
		tt.change(rec)
	}
	tables, list := Load(rec, inFile([]byte(tt.csv)))
	if d := cmp.Diff(tt.faults, words(list)); d != "" {
		t.Errorf("faults (-want +got)\n%s", d)
	}
	if list.HasErrors() {
		if len(tables) > 0 {
			t.Errorf("an entry with errors has vectors")
		}
		return
	}
	sum := sha256.Sum256([]byte(tt.csv))
	tt.want.File, tt.want.SHA256 = "lot.csv", hex.EncodeToString(sum[:])
	got := tables[Key{}]
	if got == nil {
		t.Fatal("no vectors")
	}
	if d := cmp.Diff(&tt.want, got); d != "" {
		t.Errorf("vectors (-want +got)\n%s", d)
	}
}

func TestLoadForms(t *testing.T) {
	plain := record.Data{Value: str("peel"), Group: str("line")}
	for _, tt := range []loadCase{
		{name: "two groups", data: plain, csv: "unit,line,peel\n1,new,1.5\n2,current,-2e1\n3, new , .5 \n",
			want: Vectors{Rows: 3, Used: 3, Group: []uint8{0, 1, 0}, Value: []float64{1.5, -20, .5}}},
		{name: "mark, CRLF, quotes", data: plain, csv: "\ufeff\"peel\",line,\"a\r\nnote\"\r\n\"1\",new,\"x\r\ny\"\r\n2,\"current\",z\r\n",
			want: Vectors{Rows: 2, Used: 2, Group: []uint8{0, 1}, Value: []float64{1, 2}}},
		{name: "labels beside names", data: record.Data{Value: str("peel"), Group: str("line"),
			Labels: []record.NamedText{{Named: named("A"), Text: str("new")}, {Named: named("2"), Text: str("current")}}},
			csv:  "line,peel\nA,1\n2,2\nnew,3\ncurrent,4\n",
			want: Vectors{Rows: 4, Used: 4, Group: []uint8{0, 1, 0, 1}, Value: []float64{1, 2, 3, 4}}},
		{name: "labels that swap the names", data: record.Data{Value: str("peel"), Group: str("line"),
			Labels: []record.NamedText{{Named: named("new"), Text: str("current")}, {Named: named("current"), Text: str("new")}}},
			csv:  "line,peel\nnew,1\ncurrent,2\n",
			want: Vectors{Rows: 2, Used: 2, Group: []uint8{1, 0}, Value: []float64{1, 2}}},
		{name: "one sample ignores a group column", measure: "mean", data: plain, csv: "line,peel\nodd,1\n,2\n",
			want: Vectors{Rows: 2, Used: 2, Value: []float64{1, 2}}},
		{name: "one column, an empty line is an empty cell", measure: "mean", data: record.Data{Value: str("y")}, csv: "y\n1\n\n3\n\n\n",
			want: Vectors{Rows: 3, Used: 2, Value: []float64{1, 3}, Dropped: []Dropped{{Reason: "value missing", Count: 1}}}},
		{name: "events", measure: "risk-ratio", data: record.Data{Event: str("e"), Group: str("g")}, csv: "g,e\nnew,1\ncurrent,0.0\n",
			want: Vectors{Rows: 2, Used: 2, Group: []uint8{0, 1}, Event: []float64{1, 0}}},
		{name: "rates", measure: "rate-ratio", data: record.Data{Event: str("e"), Exposure: str("t"), Group: str("g")}, csv: "g,e,t\nnew,12,3.5\ncurrent,0,1\n",
			want: Vectors{Rows: 2, Used: 2, Group: []uint8{0, 1}, Event: []float64{12, 0}, Exposure: []float64{3.5, 1}}},
		{name: "times", measure: "hazard-ratio", data: record.Data{Time: str("t"), Event: str("e"), Group: str("g")}, csv: "g,e,t\nnew,1,0\ncurrent,0,7\n",
			want: Vectors{Rows: 2, Used: 2, Group: []uint8{0, 1}, Event: []float64{1, 0}, Time: []float64{0, 7}}},
		{name: "pairs in a row", measure: "paired-mean-difference", data: record.Data{First: str("a"), Second: str("b")}, csv: "a,b\n1,2\n3,NA\n5,6\n",
			want: Vectors{Rows: 3, Used: 2, First: []float64{1, 5}, Second: []float64{2, 6}, Dropped: []Dropped{{Reason: "second missing", Count: 1}}}},
		{name: "two variables", measure: "correlation", data: record.Data{First: str("a"), Second: str("b")}, csv: "a,b\n1,2\n,4\n",
			want: Vectors{Rows: 2, Used: 1, First: []float64{1}, Second: []float64{2}, Dropped: []Dropped{{Reason: "first missing", Count: 1}}}},
		{name: "pairs in two rows", measure: "paired-mean-difference", data: record.Data{Value: str("v"), Group: str("g"), Pair: str("p")},
			csv: "p,g,v\nx,current,1\ny,new,2\nz,new,9\nx,new,3\nw,current,8\ny,current,4\nu,new,\nu,current,5\n",
			want: Vectors{Rows: 8, Used: 2, First: []float64{3, 2}, Second: []float64{1, 4}, Dropped: []Dropped{
				{Reason: "value missing", Group: "new", Count: 1}, {Reason: "pair incomplete", Group: "new", Count: 1},
				{Reason: "pair incomplete", Group: "current", Count: 2}}}},
		{name: "events of pairs", measure: "paired-risk-difference", data: record.Data{Event: str("v"), Group: str("g"), Pair: str("p")},
			csv:  "p,g,v\nx,current,1\nx,new,0\n",
			want: Vectors{Rows: 2, Used: 1, First: []float64{0}, Second: []float64{1}}},
		{name: "clusters", data: record.Data{Value: str("v"), Group: str("g"), Cluster: str("c")}, csv: "g,c,v\nnew,b,1\ncurrent,a,2\nnew,b,3\nnew,,4\n",
			want: Vectors{Rows: 4, Used: 3, Group: []uint8{0, 1, 0}, Value: []float64{1, 2, 3}, Cluster: []int32{0, 1, 0}, Clusters: 2,
				Dropped: []Dropped{{Reason: "cluster missing", Group: "new", Count: 1}}}},
		{name: "clusters of pairs", measure: "paired-mean-difference", data: record.Data{Value: str("v"), Group: str("g"), Pair: str("p"), Cluster: str("c")},
			csv: "p,g,c,v\n1,new,k,1\n2,new,l,2\n3,new,m,3\n3,current,m,4\n2,current,l,5\n",
			want: Vectors{Rows: 5, Used: 2, First: []float64{2, 3}, Second: []float64{5, 4}, Cluster: []int32{0, 1}, Clusters: 2,
				Dropped: []Dropped{{Reason: "pair incomplete", Group: "new", Count: 1}}}},
		{name: "crossover", data: record.Data{Value: str("v"), Subject: str("s"), Period: str("p"), Sequence: str("q"), Group: str("g")},
			change: func(r *record.Record) { r.Plan.Outcomes[0].Design = str("crossover") },
			csv:    "s,p,q,g,v\nk,1,new,new,1\nk,2,new,current,2\nl,1,current,current,3\nm,2,current,new,4\nm,1,current,current,5\n",
			want: Vectors{Rows: 5, Used: 4, Group: []uint8{0, 1, 0, 1}, Value: []float64{1, 2, 4, 5}, Period: []uint8{1, 2, 2, 1},
				Sequence: []uint8{0, 0, 1, 1}, Subject: []int32{0, 0, 1, 1},
				Dropped: []Dropped{{Reason: "subject without both periods", Group: "current", Count: 1}}}},
		{name: "crossover without a group column", data: record.Data{Value: str("v"), Subject: str("s"), Period: str("p"), Sequence: str("q"),
			Labels: []record.NamedText{{Named: named("AB"), Text: str("new")}, {Named: named("BA"), Text: str("current")}}},
			change: func(r *record.Record) { r.Plan.Outcomes[0].Design = str("crossover") },
			csv:    "s,p,q,v\nk,1,AB,1\nk,2,AB,2\nl,1,BA,3\nl,2,BA,NA\n",
			want: Vectors{Rows: 4, Used: 2, Group: []uint8{0, 1}, Value: []float64{1, 2}, Period: []uint8{1, 2}, Sequence: []uint8{0, 0}, Subject: []int32{0, 0},
				Dropped: []Dropped{{Reason: "value missing", Group: "new", Count: 1}, {Reason: "subject without both periods", Group: "current", Count: 1}}}},
		{name: "missing values by reason and group", data: record.Data{Value: str("v"), Group: str("g"), MissingValues: strs("-99", "n/a ")},
			csv: "g,v\nnew,-99\nnew,1\ncurrent, n/a\nn/a,5\ncurrent,-99\n-99,-99\n",
			want: Vectors{Rows: 6, Used: 1, Group: []uint8{0}, Value: []float64{1}, Dropped: []Dropped{
				{Reason: "group missing", Count: 2}, {Reason: "value missing", Group: "new", Count: 1}, {Reason: "value missing", Group: "current", Count: 2}}}},
	} {
		t.Run(tt.name, func(t *testing.T) { runLoad(t, tt) })
	}
}

func TestLoadFaults(t *testing.T) {
	value := record.String{V: "v", Span: diag.Span{Start: 7, End: 10}, Stated: true}
	group := record.String{V: "g", Span: diag.Span{Start: 5, End: 6}, Stated: true}
	plain := record.Data{Value: value, Group: group}
	pairs := record.Data{Value: value, Group: group, Pair: str("p")}
	periods := record.Data{Value: value, Subject: str("s"), Period: str("p"), Sequence: str("q"), Group: group}
	turn := func(r *record.Record) { r.Plan.Outcomes[0].Design = str("crossover") }
	for _, tt := range []loadCase{
		{name: "empty", data: plain, faults: []string{"D104 @100 lot.csv is empty"}},
		{name: "a mark only", data: plain, csv: "\ufeff\n\n", faults: []string{"D104 @100 lot.csv is empty"}},
		{name: "header only", data: plain, csv: "g,v\n", want: Vectors{}, faults: []string{"D108 @100 lot.csv has a header and no rows"}},
		{name: "semicolons", data: plain, csv: "g;v\nnew;1\n", faults: []string{"D114 @100 lot.csv is separated by semicolons"}},
		{name: "tabs", data: plain, csv: "g\tv\n", faults: []string{"D114 @100 lot.csv is separated by tabs"}},
		{name: "no such column", data: plain, csv: "g,V\n", faults: []string{`D110 @7 column "v" is not in lot.csv`}},
		{name: "column twice", data: plain, csv: "g,v,g\n", faults: []string{`D111 @5 lot.csv has more than one column "g"`}},
		{name: "an unused column twice", data: plain, csv: "g,v,,\nnew,1,,\n", want: Vectors{Rows: 1, Used: 1, Group: []uint8{0}, Value: []float64{1}}},
		{name: "field counts", data: plain, csv: "g,v\nnew\nnew,1,x\nnew,2\n", faults: []string{
			"D112 lot.csv:2:1 this row has 1 field, the header 2", "D112 lot.csv:3:7 this row has 3 fields, the header 2"}},
		{name: "numbers", data: plain, csv: "g,v\nnew,\"12,5\"\nnew,about 3\nnew,1e999\nnew,inf\nnew,0x1p3\n", faults: []string{
			`D120 lot.csv:2:5 column "v": "12,5" is not a number`, `D120 lot.csv:3:5 column "v": "about 3" is not a number`,
			`D121 lot.csv:4:5 column "v": "1e999" is not a finite number`, `D121 lot.csv:5:5 column "v": "inf" is not a finite number`,
			`D120 lot.csv:6:5 column "v": "0x1p3" is not a number`}},
		{name: "two faults in a row", data: plain, csv: "v,g\nx,new\ny,other\n", faults: []string{
			`D122 lot.csv:3:3 column "g": "other" is no group of this outcome`,
			`D120 lot.csv:2:1 column "v": "x" is not a number`, `D120 lot.csv:3:1 column "v": "y" is not a number`}},
		{name: "after a quoted newline", data: plain, csv: "note,g,v\n\"λ\nμ\",new,x\n", faults: []string{`D120 lot.csv:3:8 column "v": "x" is not a number`}},
		{name: "events", measure: "proportion", data: record.Data{Event: str("v")}, csv: "v\n2\n0.5\nyes\n", faults: []string{
			`D123 lot.csv:2:1 column "v": "2" is not an event: 1 (it happened) or 0 (it did not)`,
			`D123 lot.csv:3:1 column "v": "0.5" is not an event: 1 (it happened) or 0 (it did not)`,
			`D120 lot.csv:4:1 column "v": "yes" is not a number`}},
		{name: "counts and exposures", measure: "rate", data: record.Data{Event: str("v"), Exposure: str("t")}, csv: "v,t\n-1,1\n1.5,1\n1,0\n1,-2\n", faults: []string{
			`D123 lot.csv:2:1 column "v": "-1" is not a number of events: 0, 1, 2, …`,
			`D123 lot.csv:3:1 column "v": "1.5" is not a number of events: 0, 1, 2, …`,
			`D124 lot.csv:4:3 column "t": "0" is not an exposure: it must be above 0`,
			`D124 lot.csv:5:3 column "t": "-2" is not an exposure: it must be above 0`}},
		{name: "times", measure: "hazard-ratio", data: record.Data{Time: str("t"), Event: str("v"), Group: group}, csv: "g,v,t\nnew,1,-1\n", faults: []string{
			`D125 lot.csv:2:7 column "t": "-1" is not a time: it must be 0 or above`}},
		{name: "events of pairs in a row", measure: "paired-risk-difference", data: record.Data{First: str("a"), Second: str("b")}, csv: "a,b\n1,3\n", faults: []string{
			`D123 lot.csv:2:3 column "b": "3" is not an event: 1 (it happened) or 0 (it did not)`}},
		{name: "half a pair twice", measure: "paired-mean-difference", data: pairs, csv: "p,g,v\n1,new,1\n1,new,2\n", faults: []string{
			`D127 lot.csv:3:1 column "p": pair "1" has a second row of the same group`}},
		{name: "period", data: periods, change: turn, csv: "s,p,q,g,v\nk,3,new,new,1\n", faults: []string{
			`D126 lot.csv:2:3 column "p": "3" is not a period: 1 or 2`}},
		{name: "period twice", data: periods, change: turn, csv: "s,p,q,g,v\nk,1,new,new,1\nk,1,new,new,1\n", faults: []string{
			`D127 lot.csv:3:1 column "s": subject "k" has a second row of the same period`}},
		{name: "two sequences", data: periods, change: turn, csv: "s,p,q,g,v\nk,1,new,new,1\nk,2,current,new,1\n", faults: []string{
			`D128 lot.csv:3:1 column "s": subject "k" has two sequences`}},
		{name: "group against sequence", data: periods, change: turn, csv: "s,p,q,g,v\nk,2,new,new,1\n", faults: []string{
			`D128 lot.csv:2:9 column "g": "new" contradicts the sequence and period of this row`}},
		{name: "cluster in both groups", data: record.Data{Value: value, Group: group, Cluster: str("c")}, csv: "g,c,v\nnew,1,1\ncurrent,1,1\n", faults: []string{
			`D129 lot.csv:3:9 column "c": cluster "1" has rows in both groups`}},
		{name: "halves in two clusters", measure: "paired-mean-difference", data: record.Data{Value: value, Group: group, Pair: str("p"), Cluster: str("c")},
			csv: "p,c,g,v\n1,1,new,1\n1,2,current,1\n", faults: []string{`D128 lot.csv:3:1 column "p": the halves of pair "1" lie in different clusters`}},
		{name: "not UTF-8", data: plain, csv: "g,v\nnew,1\xb5\n", faults: []string{"D106 lot.csv:2:6 byte 0xB5 is not UTF-8"}},
		{name: "UTF-16", data: plain, csv: "\xff\xfeg\x00", faults: []string{"D107 lot.csv:1:4 the file holds a NUL byte"}},
		{name: "open quote", data: plain, csv: "g,v\nnew,\"1\n", faults: []string{"D113 lot.csv:2:5 this quote is never closed"}},
	} {
		t.Run(tt.name, func(t *testing.T) { runLoad(t, tt) })
	}
}

func TestLoadManyFaults(t *testing.T) {
	csv := "v\n" + strings.Repeat("x\n", 1234)
	_, list := Load(recordOf("mean", &record.Data{Value: str("v")}), inFile([]byte(csv)))
	got := words(list)
	if len(got) != 11 || got[10] != "D120 lot.csv:11:1 column \"v\": \"x\" is not a number" || got[0] != "D199 @100 lot.csv has 1224 more faults like these" {
		t.Errorf("got %d: %q", len(got), got)
	}
}

func TestLoadHelp(t *testing.T) {
	d := record.Data{Value: str("peel"), Group: str("line")}
	for _, tt := range []struct{ csv, help string }{
		{"line;peel\nnew;1\n", `save it with commas between the columns, and a point in its numbers`},
		{"line,Peel\n", `did you mean "Peel"?`},
		{"line,weight\n", `the file has the columns "line", "weight"`},
		{"line,peel\nNew,1\n", `did you mean "new"? labels = { "New" = "new" } maps it`},
		{"line,peel\nx,1\n", `the groups are "new", "current"; labels = { "x" = "new" } would map it to the first`},
		{"line,peel\nnew,\"1,5\"\n", `numbers are written with a decimal point`},
		{"line,peel\nnew,n.d.\n", `a code for a missing value belongs into missing_values`},
	} {
		_, list := Load(recordOf("mean-difference", &d), inFile([]byte(tt.csv)))
		if len(list) != 1 || list[0].Help != tt.help {
			t.Errorf("%q: %v, want the help %q", tt.csv, list, tt.help)
		}
	}
}

func TestLoadPaths(t *testing.T) {
	files := fstest.MapFS{"lot.csv": {Data: []byte("v\n1\n")}, "data/old.csv": {Data: []byte("v\n2\n")}}
	for _, tt := range []struct{ path, fault string }{
		{"lot.csv", ""}, {"./lot.csv", ""}, {"data/old.csv", ""},
		{"/etc/lot.csv", `D102 @100 "/etc/lot.csv" is not a path relative to the record`},
		{"C:/lot.csv", `D102 @100 "C:/lot.csv" is not a path relative to the record`},
		{`data\old.csv`, `D102 @100 "data\\old.csv" has a backslash; paths use forward slashes`},
		{"../lot.csv", `D102 @100 "../lot.csv" leads out of the record's folder`},
		{"data/../../lot.csv", `D102 @100 "data/../../lot.csv" leads out of the record's folder`},
		{"", `D102 @100 "" names no file`},
		{"lots.csv", `D101 @100 there is no file "lots.csv" beside the record`},
		{"data", `D103 @100 "data" cannot be read: it is a folder`},
	} {
		file := record.String{V: tt.path, Span: diag.Span{Start: 100, End: 109}, Stated: true}
		tables, list := Load(recordOf("mean", &record.Data{File: file, Value: str("v")}), files)
		if got := strings.Join(words(list), "; "); got != tt.fault {
			t.Errorf("%q: %q, want %q", tt.path, got, tt.fault)
		}
		if (len(tables) == 1) != (tt.fault == "") {
			t.Errorf("%q: %d tables", tt.path, len(tables))
		}
		if strings.HasPrefix(tt.fault, "D101") && list[0].Help != `did you mean "lot.csv"?` {
			t.Errorf("%q: help %q", tt.path, list[0].Help)
		}
	}
	_, list := Load(recordOf("mean", &record.Data{Value: str("v")}), nil)
	if got := strings.Join(words(list), "; "); got != `D103 @100 "lot.csv" cannot be read: no files are at hand here` {
		t.Errorf("no files: %q", got)
	}
}

func TestLoadDigest(t *testing.T) {
	text := "v\n1\n"
	sum := sha256.Sum256([]byte(text))
	good := hex.EncodeToString(sum[:])
	for _, tt := range []struct {
		stated string
		faults int
	}{{good, 0}, {strings.ToUpper(good), 0}, {strings.Replace(good, good[:1], "x", 1), 1}} {
		d := record.Data{Value: str("v"), SHA256: record.String{V: tt.stated, Span: diag.Span{Start: 40, End: 50}, Stated: true}}
		_, list := Load(recordOf("mean", &d), inFile([]byte(text)))
		if len(list) != tt.faults || tt.faults == 1 && (list[0].Code != "D105" || list[0].Span.Start != 40 || !strings.Contains(list[0].Message, good)) {
			t.Errorf("%s: %v", tt.stated, list)
		}
	}
}

// An incomplete record, as reading leaves it behind after faults, is no fault
// of the data and must not stop the program.
func TestLoadIncomplete(t *testing.T) {
	files := inFile([]byte("g,v\nnew,1\n"))
	for name, change := range map[string]func(*record.Record){
		"no outcome":      func(r *record.Record) { r.Plan.Outcomes = nil },
		"unknown measure": func(r *record.Record) { r.Plan.Outcomes[0].Measure.V = "x" },
		"one group":       func(r *record.Record) { r.Plan.Outcomes[0].Groups = strs("new") },
		"no data":         func(r *record.Record) { r.Results[0].Data = nil },
		"no file":         func(r *record.Record) { r.Results[0].Data.File = record.String{} },
		"no column":       func(r *record.Record) { r.Results[0].Data.Value = record.String{} },
		"nil entry":       func(r *record.Record) { r.Results[0] = nil },
		"unknown set": func(r *record.Record) {
			r.Results[0].Set = str("x")
			r.Plan.Sets = []*record.Set{{Named: named("full")}}
		},
	} {
		rec := recordOf("mean-difference", &record.Data{Value: str("v"), Group: str("g")})
		change(rec)
		if tables, list := Load(rec, files); len(tables) > 0 || len(list) > 0 {
			t.Errorf("%s: %v %v", name, tables, list)
		}
	}
}
