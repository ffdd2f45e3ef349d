package compute

import (
	"encoding/csv"
	"encoding/json"
	"os"
	"path/filepath"
	"strconv"
	"testing"
)

// reference holds published cases with their provenance; README.md there says
// how each was verified.
const reference = "../testdata/reference"

// published returns the recomputed numbers of one case of published.json.
func published(t *testing.T, id string) map[string]float64 {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(reference, "published.json"))
	if err != nil {
		t.Fatal(err)
	}
	var rows []struct {
		ID         string                     `json:"id"`
		Recomputed map[string]json.RawMessage `json:"recomputed"`
	}
	if err := json.Unmarshal(text, &rows); err != nil {
		t.Fatal(err)
	}
	for _, r := range rows {
		if r.ID != id {
			continue
		}
		out := map[string]float64{}
		for k, v := range r.Recomputed {
			if x, err := strconv.ParseFloat(string(v), 64); err == nil {
				out[k] = x
			}
		}
		return out
	}
	t.Fatalf("no case %q", id)
	return nil
}

// wanted is one of them, which must be there.
func wanted(t *testing.T, m map[string]float64, key string) float64 {
	t.Helper()
	v, ok := m[key]
	if !ok {
		t.Fatalf("no value %q", key)
	}
	return v
}

// cells are the rows of a data file below its header.
func cells(t *testing.T, name string) [][]string {
	t.Helper()
	f, err := os.Open(filepath.Join(reference, "data", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:]
}

// text is a data file as it is.
func text(t *testing.T, name string) string {
	t.Helper()
	b, err := os.ReadFile(filepath.Join(reference, "data", name))
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}
