package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"steelyard/cmd/internal/issued"
	"steelyard/cmd/internal/pipeline"
	"steelyard/render/text"
)

// An outsider with nothing but the document checks the token inside it; a
// token that is of something else, or a file that is no token, proves nothing
// and the latter is not carried.
func TestWitnessFromTheDocumentAlone(t *testing.T) {
	dir := filepath.Join("..", "..", "testdata", "witness")
	record, err := os.ReadFile(filepath.Join(dir, "trial.toml"))
	if err != nil {
		t.Fatal(err)
	}
	chain, err := os.ReadFile(filepath.Join(dir, "trial.seal"))
	if err != nil {
		t.Fatal(err)
	}
	for _, tt := range []struct {
		token, ca, outcome string
		proved             bool
		carried            int
		page               string
	}{
		{"rsa.tsr", "ca.pem", "verified", true, 2, "Witnessed by Test stamp rsa, Invented for tests (seal 1, 2026-12-01)."},
		{"rsa.tsr", "other.pem", "refused", false, 2, "Witness not verified: seal 1."},
		{"elsewhere.tsr", "ca.pem", "other-digest", false, 2, "Witness not verified: seal 1."},
		{"make.sh", "ca.pem", "unread", false, 0, "Witness not verified: seal 1."},
	} {
		src := string(record) + "[[witness]]\nseal = 1\nwhat = \"A time stamp.\"\ntoken = \"" + tt.token + "\"\nca = \"" + tt.ca + "\"\n"
		c, err := pipeline.Real().Compile(pipeline.Input{Name: "trial.toml", Text: []byte(src), Seal: chain, Files: os.DirFS(dir)})
		if err != nil {
			t.Fatal(err)
		}
		pdf, err := c.View(pipeline.PDF, text.Options{})
		if err != nil {
			t.Fatal(err)
		}
		v, err := issued.Verify(pdf, issued.Options{Rooms: pipeline.Real()})
		if err != nil || v.Compiled == nil {
			t.Fatal(err, v.Reason)
		}
		s := v.Compiled.Result.Seal
		if s.Witnesses[0].Outcome != tt.outcome || s.OrderProved != tt.proved || len(v.Data) != tt.carried ||
			(v.Finding == issued.Reproduced) != (tt.carried > 0) || tt.carried == 0 && v.Finding != issued.NotCheckable {
			t.Errorf("%s, %s: %+v, %v, %d files, %v", tt.token, tt.ca, s.Witnesses[0], s.OrderProved, len(v.Data), v.Finding)
		}
		page, err := c.View(pipeline.Text, text.Options{Width: 400})
		if err != nil || !strings.Contains(strings.Join(strings.Fields(string(page)), " "), tt.page) {
			t.Errorf("%s, %s: page one does not say %q", tt.token, tt.ca, tt.page)
		}
	}
}
