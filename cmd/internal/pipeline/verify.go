package pipeline

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"strings"

	"steelyard/render/pdf"
	"steelyard/render/text"
)

// Verified is what became of a document's record when it was compiled again.
type Verified struct {
	Record   string // name of the record inside
	Compiled *Compiled
	Same     bool // the same bytes
	Appended int  // bytes after the document as it was written, as a signature adds
	Carried  int  // data files taken from the document itself
	Differs  string
}

// Errors of Verify.
var (
	ErrNotOurs  = errors.New("Steelyard did not write this file")
	ErrNoRecord = errors.New("the file carries no record; compile the record that its digest names and compare")
)

// Verify takes the record out of a PDF, compiles it again with the data that
// the PDF carries, or else with those in files, and compares the bytes.
func (r Rooms) Verify(file []byte, files fs.FS) (*Verified, error) {
	inside, err := pdf.Read(file)
	if err != nil {
		return nil, err
	}
	if !inside.Ours {
		return nil, ErrNotOurs
	}
	v, in := &Verified{Appended: inside.Appended}, Input{}
	carried := carriedFiles{carried: map[string][]byte{}, below: files}
	for _, a := range inside.Attachments {
		switch {
		case a.Relation == "Source" && strings.HasSuffix(a.Name, ".toml"):
			in.Name, in.Text = a.Name, a.Bytes
		case a.Relation == "Data":
			carried.carried[a.Name] = a.Bytes
		}
	}
	if in.Text == nil {
		return nil, ErrNoRecord
	}
	for _, a := range inside.Attachments {
		if a.Name == sealName(in.Name) && a.Relation == "Supplement" {
			in.Seal = a.Bytes
		}
	}
	in.Files, v.Record, v.Carried = carried, in.Name, len(carried.carried)
	if v.Compiled, err = r.Compile(in); err != nil {
		return nil, err
	}
	if v.Compiled.Diagnostics.HasErrors() {
		v.Differs = "the record inside has errors"
		return v, nil
	}
	again, err := v.Compiled.View(PDF, text.Options{})
	if err != nil {
		return nil, err
	}
	original := file
	if inside.Original > 0 && inside.Original <= len(file) {
		original = file[:inside.Original]
	}
	switch {
	case bytes.Equal(original, again):
		v.Same = true
		if inside.Replaced {
			v.Same, v.Differs = false, "what was added after the document was written changes what it carries"
		}
	default:
		v.Differs = fmt.Sprintf("the record inside compiles to another document (%d bytes, this one %d)", len(again), len(original))
	}
	return v, nil
}
