package data

import (
	"bytes"
	"encoding/csv"
	"io"
	"strings"
	"testing"
	"testing/iotest"

	"github.com/google/go-cmp/cmp"
)

// readAll returns every record, or the fault that stopped reading.
func readAll(src io.Reader) (rows [][]string, f *fault, err error) {
	c := newReader(src)
	for {
		ok, f := c.next()
		if !ok {
			return rows, f, c.err
		}
		row := make([]string, len(c.fields))
		for i, f := range c.fields {
			row[i] = string(c.text[f.from:f.to])
		}
		rows = append(rows, row)
	}
}

func TestReader(t *testing.T) {
	tests := []struct {
		name, text string
		rows       [][]string
		fault      string // code line:column
	}{
		{name: "empty"},
		{name: "plain", text: "a,b\n1,2\n", rows: [][]string{{"a", "b"}, {"1", "2"}}},
		{name: "no last newline", text: "a,b\n1,2", rows: [][]string{{"a", "b"}, {"1", "2"}}},
		{name: "mark and CRLF", text: "\ufeffa,b\r\n1,2\r\n", rows: [][]string{{"a", "b"}, {"1", "2"}}},
		{name: "mark and quote", text: "\ufeff\"a\",b\n", rows: [][]string{{"a", "b"}}},
		{name: "empty lines", text: "\n\na\n\r\n1\n", rows: [][]string{{"a"}, {"1"}}},
		{name: "empty fields", text: ",\n\"\",\n", rows: [][]string{{"", ""}, {"", ""}}},
		{name: "quotes", text: "\"a \"\"x\"\"\",\"b,c\"\n", rows: [][]string{{`a "x"`, "b,c"}}},
		{name: "newline inside", text: "\"a\r\nb\",2\n3,\"4\n\n5\"\n", rows: [][]string{{"a\nb", "2"}, {"3", "4\n\n5"}}},
		{name: "quoted last", text: "1,\"2\"", rows: [][]string{{"1", "2"}}},
		{name: "other scripts", text: "λ,ß\n", rows: [][]string{{"λ", "ß"}}},
		{name: "bare quote", text: "a,b\nλ1,2\"3\n", rows: [][]string{{"a", "b"}}, fault: "D113 2:5"},
		{name: "after quote", text: "a,b\n1,\"2\"3\n", rows: [][]string{{"a", "b"}}, fault: "D113 2:6"},
		{name: "open quote", text: "a,b\n1,\"2\n3,4\n", rows: [][]string{{"a", "b"}}, fault: "D113 2:3"},
		{name: "latin-1", text: "a\nx\xe9\n", rows: [][]string{{"a"}}, fault: "D106 2:2"},
		{name: "latin-1 in quotes", text: "a\n\"x\ny\xe9\"\n", rows: [][]string{{"a"}}, fault: "D106 3:2"},
		{name: "NUL", text: "a\nxy\x00\n", rows: [][]string{{"a"}}, fault: "D107 2:3"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			for name, src := range map[string]io.Reader{
				"whole": strings.NewReader(tt.text), "byte by byte": iotest.OneByteReader(strings.NewReader(tt.text))} {
				rows, f, err := readAll(src)
				if err != nil {
					t.Fatalf("%s: %v", name, err)
				}
				if d := cmp.Diff(tt.rows, rows); d != "" {
					t.Errorf("%s: rows (-want +got)\n%s", name, d)
				}
				got := ""
				if f != nil {
					got = f.code + " " + strings.Join(strings.SplitN(f.Error(), ":", 3)[:2], ":")
				}
				if got != tt.fault {
					t.Errorf("%s: fault %q, want %q", name, got, tt.fault)
				}
			}
		})
	}
}

func TestReaderSourceFails(t *testing.T) {
	_, f, err := readAll(iotest.TimeoutReader(iotest.OneByteReader(strings.NewReader("a,b\n1,2\n"))))
	if f != nil || err != iotest.ErrTimeout {
		t.Errorf("fault %v, error %v, want the source's error", f, err)
	}
}

func TestReaderLongRecord(t *testing.T) {
	long := strings.Repeat("x", 3*firstBuffer)
	rows, f, err := readAll(strings.NewReader("a,\"" + long + "\"\n1,2\n"))
	if f != nil || err != nil || len(rows) != 2 || rows[0][1] != long {
		t.Errorf("long quoted field: %d rows, fault %v, error %v", len(rows), f, err)
	}
	_, f, _ = readAll(io.MultiReader(strings.NewReader("a,b\n1,\""), io.LimitReader(endless{}, 2*maxRecord)))
	if f == nil || f.code != "D113" || f.line != 2 {
		t.Errorf("an endless field gives %v, want D113 on line 2", f)
	}
}

type endless struct{}

func (endless) Read(b []byte) (int, error) {
	for i := range b {
		b[i] = 'x'
	}
	return len(b), nil
}

func TestReaderPlaces(t *testing.T) {
	c := newReader(strings.NewReader("a,b,c\n\"x\ny\",\"λμ\",3\n"))
	c.next()
	c.next()
	for i, want := range []struct {
		line, column int
		excerpt      string
	}{{2, 1, `"x`}, {3, 4, `y","λμ",3`}, {3, 9, `y","λμ",3`}} {
		line, column, excerpt := c.place(i)
		if line != want.line || column != want.column || excerpt != want.excerpt {
			t.Errorf("field %d at %d:%d %q, want %+v", i, line, column, excerpt, want)
		}
	}
}

// TestReaderAgrees checks the second opinion itself: it must be able to fail.
func TestReaderAgrees(t *testing.T) {
	if agrees([]byte("a,b\n"), [][]string{{"a"}}, nil) {
		t.Error("wrong rows are accepted")
	}
	if agrees([]byte("a,\"b\n"), nil, nil) {
		t.Error("a missed fault is accepted")
	}
}

// agrees compares rows and fault with encoding/csv of the standard library.
func agrees(text []byte, rows [][]string, f *fault) bool {
	r := csv.NewReader(bytes.NewReader(bytes.TrimPrefix(text, []byte("\ufeff"))))
	r.FieldsPerRecord = -1
	want, err := r.ReadAll()
	if f != nil && (f.code == "D106" || f.code == "D107") {
		return true // stricter on purpose
	}
	return (err == nil) == (f == nil) && (err != nil || cmp.Equal(want, rows))
}

func FuzzReader(f *testing.F) {
	for _, s := range []string{"a,b\r\n1,2\r\n", "\ufeff\"a\",\"b\"\"\"\n\n1,\"2\n3\"", "\"", "a\"", "\r", "\r\r\n", "\"\r\n\r\"\r", "a,\r", "\xff", "\x00\""} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		rows, f, err := readAll(bytes.NewReader(text))
		if err != nil {
			t.Fatal(err)
		}
		if !agrees(text, rows, f) {
			t.Fatalf("%q: rows %q, fault %v", text, rows, f)
		}
		if f != nil && (f.line < 1 || f.line > bytes.Count(text, []byte("\n"))+1 || f.column < 1) {
			t.Fatalf("%q: fault outside the text: %v", text, f)
		}
	})
}
