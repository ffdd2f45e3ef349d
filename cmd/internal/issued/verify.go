package issued

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"path"
	"strings"
	"time"

	"steelyard/cmd/internal/pipeline"
	"steelyard/cmd/internal/version"
	"steelyard/protocol/seal"
	"steelyard/render/pdf"
	"steelyard/render/text"
)

// ErrNotOurs says that a file neither is nor carries anything of ours.
var ErrNotOurs = errors.New("Steelyard did not write this file")

// maxText bounds a record, its seal and its numbers inside a document.
const maxText = 16 << 20

// Finding is what verifying came to.
type Finding uint8

// The findings.
const (
	Reproduced   Finding = iota // byte for byte
	SameNumbers                 // other bytes, the same numbers and words
	Differs                     // something is not what the record gives
	NotCheckable                // the record could not be compiled again
)

// Findings names the findings for other programs.
var Findings = []string{"reproduced", "same-numbers", "different", "not-checkable"}

func (f Finding) String() string { return Findings[f] }

// Options are what Verify works with.
type Options struct {
	Rooms  pipeline.Rooms
	Folder fs.FS         // for data, and the record, that the document lacks; nil for none
	Limit  time.Duration // for compiling the record again; 0 for none
}

// Verified is what became of a document's record when it was compiled again.
type Verified struct {
	*Document
	Finding     Finding
	Differences []Difference       // old is what the file says, new what its record gives
	Notes       []string           // what else a reader should know
	Reason      string             // why it is not checkable
	Help        string             // and how to make it so
	Compiled    *pipeline.Compiled // nil when it did not come to that
	Outside     []string           // files taken from the folder
}

// Verify compiles the record that a document carries with this engine, in
// memory, and compares. Data that the document lacks are taken from the
// options' folder only. The error is one of a file that cannot be read, or a
// fault of this program.
func Verify(file []byte, opt Options) (*Verified, error) {
	d, err := Open(file)
	if err != nil {
		return nil, err
	}
	v := &Verified{Document: d}
	if d.Record == nil && !d.Ours {
		return nil, ErrNotOurs
	}
	if d.Record == nil && !v.fetch(opt.Folder) {
		return v, nil
	}
	if len(d.Record) > maxText || len(d.Seal) > maxText || len(d.JSON) > maxText {
		return nil, fmt.Errorf("its record, or what goes with it, is larger than %d MiB", maxText>>20)
	}
	again, err := v.compile(opt)
	if err != nil || v.Compiled == nil {
		return v, err
	}
	if again == nil {
		v.failed(opt.Folder)
		return v, nil
	}
	first := file
	if d.Original > 0 && d.Intact {
		first = file[:d.Original]
	}
	if bytes.Equal(first, again) {
		v.appended(first)
		return v, nil
	}
	if missing := v.witnessFiles(opt.Folder); len(missing) > 0 {
		v.Finding = NotCheckable
		v.Reason = "files of its witnesses are not inside: " + strings.Join(missing, ", ")
		v.Help = "put them into a folder, with the data that are not inside, and name it with --data"
		return v, nil
	}
	return v, v.compare(again)
}

// witnessFiles are the files that witnesses name and that are nowhere: a
// document carries those only that could be read as what they should be.
func (v *Verified) witnessFiles(folder fs.FS) (missing []string) {
	for _, w := range v.Compiled.Loaded.Record.Witnesses {
		for _, name := range []string{w.Token.V, w.CA.V} {
			if name == "" {
				continue
			}
			f, err := (carried{v.Data, folder}).Open(path.Clean(name))
			if err != nil {
				missing = append(missing, name)
				continue
			}
			f.Close()
		}
	}
	return missing
}

// fetch looks in a folder for the record that page one names by its digest.
func (v *Verified) fetch(folder fs.FS) bool {
	v.Finding = NotCheckable
	v.Reason = "it carries no record: its results were masked, or attach leaves the record out"
	v.Help = "name a folder that holds the record, its seal and its data with --data; page one prints the first digits of the record's SHA-256"
	if folder == nil || len(v.Pages) == 0 {
		return false
	}
	list, _ := fs.Glob(folder, "*.toml")
	for _, name := range list[:min(len(list), 500)] {
		info, err := fs.Stat(folder, name)
		if err != nil || !info.Mode().IsRegular() || info.Size() > maxText {
			continue
		}
		text, err := fs.ReadFile(folder, name)
		if err != nil || !strings.Contains(solid(v.Pages[0].Text), seal.Digest(text)[:16]) {
			continue
		}
		v.Name, v.Record, v.Finding = name, text, Reproduced
		v.Outside = append(v.Outside, name)
		chain := strings.TrimSuffix(name, ".toml") + ".seal"
		if v.Seal, err = fs.ReadFile(folder, chain); err == nil {
			v.Outside = append(v.Outside, chain)
		}
		return true
	}
	v.Reason += "; no record in the folder has the digest that page one names"
	return false
}

// made is a record compiled again.
type made struct {
	compiled *pipeline.Compiled
	pdf      []byte // nil when the record has errors
	err      error
}

func compileAgain(in pipeline.Input, rooms pipeline.Rooms) (m made) {
	if m.compiled, m.err = rooms.Compile(in); m.err != nil || m.compiled.Diagnostics.HasErrors() {
		return m
	}
	m.pdf, m.err = m.compiled.View(pipeline.PDF, text.Options{})
	return m
}

// compile makes the record's document again, within the limit. It is nil
// where the record has errors or the limit was reached.
func (v *Verified) compile(opt Options) ([]byte, error) {
	in := v.input(opt.Folder)
	done := make(chan made, 1)
	go func() { done <- compileAgain(in, opt.Rooms) }()
	var late <-chan time.Time // for ever
	if opt.Limit > 0 {
		late = time.After(opt.Limit)
	}
	var m made
	select {
	case m = <-done:
	case <-late:
		v.Finding = NotCheckable
		v.Reason = fmt.Sprintf("compiling its record takes longer than %v", opt.Limit)
		v.Help = "allow more with --limit"
		return nil, nil
	}
	if m.err != nil {
		return nil, m.err
	}
	v.Compiled = m.compiled
	for _, name := range v.Compiled.Data() {
		if _, inside := v.Data[path.Clean(name)]; !inside && opt.Folder != nil {
			if _, err := fs.Stat(opt.Folder, name); err == nil {
				v.Outside = append(v.Outside, name)
			}
		}
	}
	return m.pdf, nil
}

// failed judges a record that does not compile.
func (v *Verified) failed(folder fs.FS) {
	var missing []string
	for _, name := range v.Compiled.Data() {
		f, err := (carried{v.Data, folder}).Open(name)
		if err != nil {
			missing = append(missing, name)
			continue
		}
		f.Close()
	}
	switch {
	case len(missing) > 0:
		v.Finding = NotCheckable
		v.Reason = "its data are not inside: " + strings.Join(missing, ", ")
		v.Help = "put the data into a folder and name it with --data; attach = [\"record\", \"data\"] in the record puts them inside"
	case v.otherEngine():
		v.Finding = NotCheckable
		v.Reason = fmt.Sprintf("version %s wrote it, and version %s finds errors in its record", v.Engine, version.Version)
		v.Help = "verify it with version " + v.Engine
	default:
		v.Finding = Differs
		v.Differences = []Difference{{Class: File, Where: v.Name, What: "the record inside has errors: no document can come of it"}}
	}
}

// otherEngine reports whether another version wrote the document, as far as it
// says so.
func (v *Verified) otherEngine() bool { return v.Engine != "" && v.Engine != version.Version }

// appended judges what follows a document that is reproduced to the byte.
func (v *Verified) appended(first []byte) {
	if v.Appended == 0 || v.Original == 0 || !v.Intact {
		return
	}
	if v.Replaced {
		v.Finding = Differs
		v.Differences = append(v.Differences, Difference{Class: File, What: "what was appended takes the place of the record, or of another file that the document carried"})
	}
	was, err := pdf.Pages(first)
	if err != nil || v.PagesErr != nil {
		v.Finding = Differs
		v.Differences = append(v.Differences, Difference{Class: File, What: "what was appended leaves pages that cannot be read"})
		return
	}
	if list := comparePages(v.Pages, was); len(list) > 0 || !sameDrawing(v.Pages, was) {
		v.Finding = Differs
		v.Differences = append(v.Differences, list...)
		v.Differences = append(v.Differences, Difference{Class: File, What: "what was appended draws the pages otherwise"})
	}
	notes := 0
	for i := range min(len(was), len(v.Pages)) {
		notes += max(0, v.Pages[i].Notes-was[i].Notes)
	}
	if notes > 0 {
		v.Notes = append(v.Notes, fmt.Sprintf("What was appended lays %d signatures, comments or links over the pages; they can hide what is printed. The first %d bytes alone are the document as it was written.", notes, v.Original))
	}
}

// compare judges a document whose bytes are not those of the record inside.
func (v *Verified) compare(again []byte) error {
	v.Finding = SameNumbers
	d := v.Document
	base := strings.TrimSuffix(d.Name, ".toml")
	checked := false
	if d.JSON != nil {
		fresh, err := v.Compiled.View(pipeline.JSON, text.Options{})
		if err != nil {
			return err
		}
		list, err := compareResults(d.JSON, fresh)
		if err != nil {
			list = []Difference{{Class: File, What: "is no result: " + err.Error()}}
		}
		for _, x := range list {
			x.Where = base + ".json"
			v.Differences = append(v.Differences, x)
		}
		checked = true
	}
	now, err := pdf.Pages(again)
	if err != nil {
		return fmt.Errorf("the document made again: %w", err)
	}
	v.comparePages(now, &checked)
	if len(v.Differences) > 0 {
		v.Finding = Differs
	} else if !checked {
		v.Finding, v.Reason = NotCheckable, "its pages cannot be read, and it carries no numbers"
		v.Help = "verify the file as it was issued"
	}
	return nil
}

// comparePages holds what the file prints against what the record gives. Of
// another version only the numbers can be expected to be the same.
func (v *Verified) comparePages(now []pdf.Shown, checked *bool) {
	switch {
	case v.PagesErr != nil:
		v.Notes = append(v.Notes, "Its pages cannot be read, so that only the numbers it carries were compared: do not rely on what it prints.")
		return
	case v.otherEngine():
		v.Differences = append(v.Differences, compareNumbers(v.Pages, now, v.Engine, version.Version)...)
		v.Notes = append(v.Notes, fmt.Sprintf("The words around the numbers were not compared, since another version may choose others. Verify it with version %s to be certain.", v.Engine))
	default:
		v.Differences = append(v.Differences, comparePages(v.Pages, now)...)
		if len(v.Differences) > 0 {
			break
		}
		if sameDrawing(v.Pages, now) {
			v.Notes = append(v.Notes, "Its pages are drawn by the same steps with the same fonts.")
		} else {
			v.Notes = append(v.Notes, "Its pages are drawn by other steps, as after saving by another program: the words were compared, figures and layout were not.")
		}
	}
	*checked = true
}
