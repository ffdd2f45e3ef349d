package render_test

import (
	"bytes"
	"testing"

	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/pdf"
)

// Every page that is composed can be set: no sign is missing from the faces,
// no table is too wide.
func TestPagesCanBeSet(t *testing.T) {
	for name, load := range loaders {
		in, res := load()
		for _, paper := range []string{"a4", "letter"} {
			doc := render.Compose(in, res)
			doc.Paper = paper
			var b bytes.Buffer
			if err := pdf.Write(&b, doc); err != nil {
				t.Errorf("%s on %s: %v", name, paper, err)
			}
			if !bytes.HasPrefix(b.Bytes(), []byte("%PDF-")) {
				t.Errorf("%s on %s: no PDF", name, paper)
			}
		}
	}
}

// A document that was given no result can be set too.
func TestFaultyPageCanBeSet(t *testing.T) {
	in, res := fixture.Faulty()
	var b bytes.Buffer
	if err := pdf.Write(&b, render.Compose(in, res)); err != nil {
		t.Error(err)
	}
}
