package protocol

import (
	"bytes"
	"flag"
	"os"
	"strings"
	"testing"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

var update = flag.Bool("update", false, "write README.md")

func TestReference(t *testing.T) {
	got := Reference()
	if *update {
		if err := os.WriteFile("README.md", got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Error("README.md is not current; write it with: go test ./protocol -run TestReference -update")
	}
}

// TestReferenceIsWhole demands every key, measure, claim and word in it.
func TestReferenceIsWhole(t *testing.T) {
	text := string(Reference())
	for _, k := range record.Keys {
		if strings.HasPrefix(k.Path, "earlier_result") || k.Kind.IsTable() || k.Path == "steelyard" { // the head shows it
			continue
		}
		if !strings.Contains(text, k.Name()+"` |") {
			t.Errorf("%q is not in the reference", k.Path)
		}
	}
	for _, m := range record.Measures {
		if !strings.Contains(text, "| `"+m.Word+"` |") {
			t.Errorf("the measure %q is not in the reference", m.Word)
		}
	}
	for _, c := range record.Claims {
		if _, ok := claimTexts[c.Word]; !ok || !strings.Contains(text, "| `"+c.Word+"` |") {
			t.Errorf("the claim %q is not in the reference", c.Word)
		}
	}
}

// TestReferenceExample loads the record that the reference shows.
func TestReferenceExample(t *testing.T) {
	_, rest, ok := strings.Cut(referenceHead, "```toml\n")
	example, _, ok2 := strings.Cut(rest, "```")
	if !ok || !ok2 {
		t.Fatal("the reference shows no record")
	}
	in := Load("example.toml", []byte(example), nil, nil)
	for _, d := range in.Diagnostics {
		t.Error(diag.Format(d, in.Source))
	}
}
