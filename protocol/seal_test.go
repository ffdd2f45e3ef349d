package protocol

import (
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"steelyard/protocol/seal"
)

// chainOf seals a record as it stands.
func chainOf(t *testing.T, text string, files fstest.MapFS, at time.Time) []byte {
	t.Helper()
	in := Load("a.toml", []byte(text), nil, files)
	if in.Diagnostics.HasErrors() {
		t.Fatal(in.Diagnostics)
	}
	chain, _, err := seal.Append(nil, seal.New(in.Record, in.Tables, "0.1.0", at))
	if err != nil {
		t.Fatal(err)
	}
	return chain
}

func TestLoadSealed(t *testing.T) {
	march, may := time.Date(2026, 3, 1, 8, 0, 0, 0, time.UTC), time.Date(2026, 5, 1, 8, 0, 0, 0, time.UTC)
	plan, _, _ := strings.Cut(smallest, "[[result]]") // a seal that holds a result is no promise about it
	chain := chainOf(t, plan, nil, march)

	in := Load("a.toml", []byte(smallest), chain, nil)
	if in.Seal == nil || in.Seal.State != seal.Kept || in.Seal.Order != seal.BeforeResults || in.Sealed != nil || in.Seal.PlanSHA256() != in.PlanSHA256 || len(in.Diagnostics) > 0 {
		t.Errorf("as sealed: %+v %v", in.Seal, in.Diagnostics)
	}
	if in = Load("a.toml", []byte(smallest), nil, nil); in.Seal == nil || in.Seal.State != seal.Unsealed {
		t.Errorf("unsealed: %+v", in.Seal)
	}

	changed := strings.Replace(smallest, "smallest = 0.8", "smallest = 1.5", 1)
	in = Load("a.toml", []byte(changed), chain, nil)
	if in.Seal.State != seal.Changed || in.Sealed == nil || in.Diagnostics.HasErrors() || len(in.Diagnostics) != 1 || in.Diagnostics[0].Code != "L201" {
		t.Fatalf("changed: %+v %v", in.Seal, in.Diagnostics)
	}
	if s := in.Sealed; s.Record.Plan.Outcomes[0].Smallest.V.Distance != 0.8 || len(s.Record.Results) != 1 || s.PlanSHA256 == in.PlanSHA256 || s.PlanSHA256 != in.Seal.PlanSHA256() {
		t.Errorf("old plan with present results: %+v", s.Record.Plan.Outcomes[0])
	}

	prose := strings.Replace(smallest, "Seal peel strength", "Peel strength", 1)
	if in = Load("a.toml", []byte(prose), chain, nil); in.Sealed != nil || in.Seal.State != seal.Kept {
		t.Errorf("wording: %+v", in.Seal)
	}

	late := chainOf(t, smallest, nil, may)
	if in = Load("a.toml", []byte(smallest), late, nil); in.Seal.Order != seal.AfterResults {
		t.Errorf("order %s", in.Seal.Order)
	}

	torn := strings.Replace(string(chain), "seal 1", "seal 2", 1)
	in = Load("a.toml", []byte(smallest), []byte(torn), nil)
	if !in.Diagnostics.HasErrors() || in.Diagnostics[0].Code != "L103" || in.Diagnostics[0].File != "a.seal" || in.Diagnostics[0].Line != 3 {
		t.Errorf("broken: %v", in.Diagnostics)
	}
	if in.Seal == nil || in.Seal.State != seal.Broken || in.Seal.Broken == "" {
		t.Errorf("broken: %+v", in.Seal)
	}
	// Faults of the chain and of the record come in one run.
	both := strings.Replace(smallest, "equivalent", "equivalnt", 1)
	if in = Load("a.toml", []byte(both), []byte(torn), nil); len(in.Diagnostics) < 2 {
		t.Errorf("one run: %v", in.Diagnostics)
	}
}

// The sealed plan reads the data anew, with its own filters.
func TestLoadSealedData(t *testing.T) {
	const filter = "[[plan.data.exclude]]\ncolumn = \"age\"\nabove = 30\nwhy = \"Stored too long.\"\n"
	text := smallest[:strings.Index(smallest, "groups.new")] + "data = { file = \"lot.csv\", value = \"v\", group = \"g\" }\n"
	files := fstest.MapFS{"lot.csv": {Data: []byte("g,v,age\nnew,11,5\nnew,12,40\ncurrent,12,6\ncurrent,13,7\n")}}
	withFilter := strings.Replace(text, "[[result]]", filter+"[[result]]", 1)
	chain := chainOf(t, text, files, time.Date(2026, 3, 1, 8, 0, 0, 0, time.UTC))
	in := Load("a.toml", []byte(withFilter), chain, files)
	if in.Sealed == nil {
		t.Fatalf("%v %v", in.Diagnostics, in.Seal)
	}
	for _, v := range in.Tables {
		if v.Used != 3 {
			t.Errorf("now: %d rows", v.Used)
		}
	}
	for _, v := range in.Sealed.Tables {
		if v.Used != 4 {
			t.Errorf("sealed: %d rows", v.Used)
		}
	}
	// A column that the old plan needs and the file lacks is a reason.
	chain = chainOf(t, withFilter, files, time.Date(2026, 3, 1, 8, 0, 0, 0, time.UTC))
	files = fstest.MapFS{"lot.csv": {Data: []byte("g,v\nnew,11\nnew,12\ncurrent,12\ncurrent,13\n")}}
	if in = Load("a.toml", []byte(text), chain, files); in.Sealed != nil || len(in.Seal.Unreadable) != 1 || in.Diagnostics.HasErrors() {
		t.Errorf("%v %v", in.Seal.Unreadable, in.Diagnostics)
	}
}
