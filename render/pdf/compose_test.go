package pdf_test

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/page"
	"steelyard/render/pdf"
)

// Composed records of all stages are set without a fault of tagging, and
// their page one is one page. With PDF_OUT naming a folder they are kept
// there for looking at.
func TestComposed(t *testing.T) {
	for name, make := range map[string]func() (*protocol.Loaded, *result.Result){
		"peel": fixture.Peel, "trial": fixture.Trial, "waiting": fixture.Waiting, "masked": fixture.Masked, "faulty": fixture.Faulty,
	} {
		for _, paper := range []string{"a4", "letter"} {
			doc := render.Compose(make())
			doc.Paper = paper
			var b bytes.Buffer
			if err := pdf.Write(&b, doc); err != nil {
				t.Errorf("%s: %v", name, err)
				continue
			}
			if f := pdf.TagFaults(b.Bytes()); len(f) > 0 {
				t.Errorf("%s: %d faults, first: %s", name, len(f), f[0])
			}
			if n := pdf.PageOne(doc); n != 1 {
				t.Errorf("%s on %s: page one takes %d pages", name, paper, n)
			}
			if dir := os.Getenv("PDF_OUT"); dir != "" {
				if err := os.WriteFile(filepath.Join(dir, name+"-"+paper+".pdf"), b.Bytes(), 0o644); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
	long := &page.Document{Paper: "a4"}
	for range 200 {
		long.Blocks = append(long.Blocks, page.Paragraph{Text: page.T("line")})
	}
	if pdf.PageOne(long) < 2 {
		t.Error("pages are not counted")
	}
}
