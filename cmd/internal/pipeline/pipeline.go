// Package pipeline takes one record through the rooms: bytes become
// diagnostics, a result, a page, and then any of the views. It is pure: it is
// given the record's folder as an fs.FS and returns bytes, and refuses to
// know where either lies on a disk, or what day it is.
//
//	c, err := pipeline.Real().Compile(pipeline.Input{Name: "trial.toml", Text: text, Files: folder})
//	pdf, err := c.View(pipeline.PDF, text.Options{})
package pipeline

import (
	"bytes"
	"fmt"
	"io"
	"io/fs"
	"runtime/debug"
	"slices"

	"steelyard/cmd/internal/version"
	"steelyard/compute"
	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
	"steelyard/render"
	"steelyard/render/jsonout"
	"steelyard/render/page"
	"steelyard/render/pdf"
	"steelyard/render/text"
)

// Form is one of the views of a record.
type Form uint8

// The views.
const (
	PDF Form = iota
	JSON
	Text
)

// Forms lists the views by the words of --to, in the order they are written.
var Forms = []string{"pdf", "json", "text"}

// FormOf finds a view by its word.
func FormOf(word string) (Form, bool) {
	for i, w := range Forms {
		if w == word {
			return Form(i), true
		}
	}
	return 0, false
}

func (f Form) String() string { return Forms[f] }

// Extension is the ending of the file a view is written to.
func (f Form) Extension() string {
	switch f {
	case PDF:
		return ".pdf"
	case JSON:
		return ".json"
	case Text:
		return ".txt"
	}
	panic("pipeline: unknown form")
}

// Input is one record as bytes. Name is the file's own name without folders,
// so that the views do not depend on where the record lies.
type Input struct {
	Name  string
	Text  []byte
	Seal  []byte // the chain beside the record; nil when there is none
	Files fs.FS  // the record's folder; nil refuses every file
}

// Rooms are the doors a record passes. Tests put their own in.
type Rooms struct {
	Load    func(name string, text, seal []byte, files fs.FS) *protocol.Loaded
	Run     func(in *protocol.Loaded, engine string) *result.Result
	Compose func(in *protocol.Loaded, res *result.Result) *page.Document
	PDF     func(w io.Writer, doc *page.Document) error
	JSON    func(w io.Writer, in *protocol.Loaded, res *result.Result) error
	Text    func(w io.Writer, doc *page.Document, opt text.Options) error
}

// Real are the doors of this program.
func Real() Rooms {
	return Rooms{
		Load: protocol.Load, Run: compute.Run, Compose: render.Compose,
		PDF: pdf.Write, JSON: jsonout.Write, Text: text.Write,
	}
}

// Compiled is a record on its way. Result is never nil; Page is nil when the
// record has errors, or was only checked.
type Compiled struct {
	rooms       Rooms
	Loaded      *protocol.Loaded
	Result      *result.Result
	Page        *page.Document
	Diagnostics diag.List
}

// Fault is a fault of this program itself while it worked on a record.
type Fault struct {
	What  any
	Stack []byte
}

func (f *Fault) Error() string {
	return fmt.Sprintf("a fault of this program, not of the record: %v", f.What)
}

// contain turns a panic into a Fault, so that one record cannot take the
// others of a run, or a watch, down with it.
func contain(err *error) {
	if p := recover(); p != nil {
		*err = &Fault{What: p, Stack: debug.Stack()}
	}
}

// Check reads and computes, so that every diagnostic is there, and composes
// nothing.
func (r Rooms) Check(in Input) (c *Compiled, err error) {
	defer contain(&err)
	c = &Compiled{rooms: r, Loaded: r.Load(in.Name, in.Text, in.Seal, in.Files)}
	c.Result = r.Run(c.Loaded, version.Version)
	c.Diagnostics = c.Result.Diagnostics
	return c, nil
}

// Compile reads, computes and composes.
func (r Rooms) Compile(in Input) (c *Compiled, err error) {
	defer contain(&err)
	if c, err = r.Check(in); err != nil || c.Diagnostics.HasErrors() {
		return c, err
	}
	c.Page = r.Compose(c.Loaded, c.Result)
	if face := c.Loaded.Record.Head.Typeface; face.Stated && in.Files != nil {
		if c.Page.Typeface, err = fs.ReadFile(in.Files, face.V); err != nil {
			return c, fmt.Errorf("record.typeface: %w", err)
		}
	}
	return c, c.attach(in)
}

// View prints one view. A record with errors has only its JSON.
func (c *Compiled) View(form Form, opt text.Options) (out []byte, err error) {
	defer contain(&err)
	if c.Page == nil && form != JSON {
		return nil, fmt.Errorf("a record with errors has no %s", form)
	}
	var b bytes.Buffer
	switch form {
	case PDF:
		err = c.rooms.PDF(&b, c.Page)
	case JSON:
		err = c.rooms.JSON(&b, c.Loaded, c.Result)
	case Text:
		err = c.rooms.Text(&b, c.Page, opt)
	}
	if err != nil {
		return nil, fmt.Errorf("%s: %w", form, err)
	}
	return b.Bytes(), nil
}

// Failed reports whether the record writes no files: it has errors, or, when
// strict, warnings.
func (c *Compiled) Failed(strict bool) bool {
	return c.Diagnostics.HasErrors() || strict && c.Diagnostics.Count(diag.SeverityWarning) > 0
}

// Files lists the files that the record names, as it names them: data,
// typeface, tokens of witnesses. The record need not be free of errors.
func (c *Compiled) Files() []string {
	rec := c.Loaded.Record
	seen, list := map[string]bool{}, []string(nil)
	add := func(name string) {
		if name != "" && !seen[name] {
			seen[name] = true
			list = append(list, name)
		}
	}
	for _, name := range c.Data() {
		add(name)
	}
	add(rec.Head.Typeface.V)
	for _, w := range rec.Witnesses {
		if w != nil {
			add(w.Token.V)
			add(w.CA.V)
		}
	}
	return list
}

// Data lists the data files that the record names, each once.
func (c *Compiled) Data() (list []string) {
	for _, results := range [][]*record.Result{c.Loaded.Record.Results, c.Loaded.Record.Earlier} {
		for _, r := range results {
			if r != nil && r.Data != nil && r.Data.File.V != "" && !slices.Contains(list, r.Data.File.V) {
				list = append(list, r.Data.File.V)
			}
		}
	}
	return list
}
