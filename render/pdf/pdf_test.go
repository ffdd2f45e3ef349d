package pdf

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"
)

func mustWrite(t testing.TB) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, sample()); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// The file is kept for looking at in the folder that PDF_OUT names.
func TestWriteSample(t *testing.T) {
	b := mustWrite(t)
	if !bytes.HasPrefix(b, []byte("%PDF-1.7\n")) || !bytes.HasSuffix(b, []byte("%%EOF\n")) {
		t.Error("the file does not begin and end as a PDF")
	}
	if out := os.Getenv("PDF_OUT"); out != "" {
		out = filepath.Join(out, "sample.pdf")
		if err := os.WriteFile(out, b, 0o644); err != nil {
			t.Fatal(err)
		}
	}
}
