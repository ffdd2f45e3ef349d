package outfile

import (
	"bytes"
	"errors"
	"io"
)

// OwnPDF guards PDF files: only one for which own says yes is replaced.
func OwnPDF(own func(file []byte) bool) Guard {
	return func(_ string, old io.ReaderAt, size int64) error {
		if size == 0 {
			return nil
		}
		if size > 256<<20 {
			return errors.New("a large PDF that Steelyard did not write; move it, or choose another folder with --out")
		}
		text := make([]byte, size)
		if _, err := old.ReadAt(text, 0); err != nil && err != io.EOF {
			return err
		}
		if !own(text) {
			return errors.New("a file that Steelyard did not write; move it, or choose another folder with --out")
		}
		return nil
	}
}

// StartsWith guards text files: only one whose head, blanks aside, has the
// prefix is replaced.
func StartsWith(prefix string) Guard {
	strip := func(b []byte) []byte { return bytes.Join(bytes.Fields(b), nil) }
	return func(_ string, old io.ReaderAt, size int64) error {
		head := make([]byte, min(size, int64(4*len(prefix)+64)))
		if _, err := old.ReadAt(head, 0); err != nil && err != io.EOF {
			return err
		}
		if len(strip(head)) > 0 && !bytes.HasPrefix(strip(head), strip([]byte(prefix))) {
			return errors.New("a file that Steelyard did not write; move it, or choose another folder with --out")
		}
		return nil
	}
}
