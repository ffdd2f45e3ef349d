package main

import (
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"steelyard/cmd/internal/pipeline"
	"steelyard/render/text"
)

// TestGolden compares every view of the examples with the committed one. The
// PDF is compared by its inflated page contents, since compressed bytes may differ
// between releases of Go; numbers of the JSON to ten digits.
func TestGolden(t *testing.T) {
	for _, name := range examples {
		c, err := pipeline.Real().Compile(example(t, name))
		if err != nil {
			t.Fatal(err)
		}
		if c.Page == nil {
			t.Fatalf("%s has errors: %v", name, c.Diagnostics)
		}
		for _, form := range []pipeline.Form{pipeline.PDF, pipeline.JSON, pipeline.Text} {
			t.Run(name+" "+form.String(), func(t *testing.T) {
				got, err := c.View(form, text.Options{Width: 80})
				if err != nil {
					t.Fatal(err)
				}
				switch form {
				case pipeline.PDF:
					if got, err = inflated(got); err != nil {
						t.Fatal(err)
					}
				case pipeline.JSON:
					got = rounded(got)
				case pipeline.Text:
				}
				golden(t, strings.TrimSuffix(name, ".toml")+"."+form.String()+".golden", got)
			})
		}
	}
}

// golden compares with a file of testdata/golden, or writes it.
func golden(t *testing.T, name string, got []byte) {
	t.Helper()
	path := filepath.Join("..", "..", "testdata", "golden", name)
	if *update {
		if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, got, 0o666); err != nil {
			t.Fatal(err)
		}
		return
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if err := sameText(want, got); err != nil {
		t.Errorf("%s: %v", path, err)
	}
}

// sameText compares line by line; a text out of a clone with other line ends
// is the same.
func sameText(want, got []byte) error {
	lines := func(b []byte) []string {
		return strings.Split(strings.ReplaceAll(string(b), "\r\n", "\n"), "\n")
	}
	if diff := cmp.Diff(lines(want), lines(got)); diff != "" {
		if len(diff) > 4000 {
			diff = diff[:4000] + "\n…"
		}
		return fmt.Errorf("differs (-want +got):\n%s", diff)
	}
	return nil
}

var long = regexp.MustCompile(`-?\d+\.\d{9,}(e-?\d+)?`)

// rounded keeps ten digits of every long number: the last ones of a double may
// differ between processor types.
func rounded(text []byte) []byte {
	return long.ReplaceAllFunc(text, func(n []byte) []byte {
		v, err := strconv.ParseFloat(string(n), 64)
		if err != nil {
			return n
		}
		return strconv.AppendFloat(nil, v, 'g', 10, 64)
	})
}

func TestRounded(t *testing.T) {
	got := string(rounded([]byte(`{"a": -0.13630671387359072, "b": 1.234567890123e-12, "c": 0.05, "d": "caeb4c30132db30b"}`)))
	if want := `{"a": -0.1363067139, "b": 1.23456789e-12, "c": 0.05, "d": "caeb4c30132db30b"}`; got != want {
		t.Errorf("got %s", got)
	}
}

func TestSameTextFails(t *testing.T) {
	for _, got := range []string{"a\nc\n", "a\n", "a\nb\n\n", ""} {
		if sameText([]byte("a\nb\n"), []byte(got)) == nil {
			t.Errorf("%q was accepted", got)
		}
	}
	if err := sameText([]byte("a\r\nb\r\n"), []byte("a\nb\n")); err != nil {
		t.Error(err)
	}
}

func TestInflatedFails(t *testing.T) {
	if _, err := inflated([]byte("%PDF-1.7\n1 0 obj\n<< /Type /Catalog >>\nendobj\n")); err == nil {
		t.Error("a PDF without pages was accepted")
	}
}
