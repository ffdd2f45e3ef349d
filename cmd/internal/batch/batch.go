// Package batch takes records from the disk through the pipeline and back:
// it finds them, reads each with its seal and its folder, writes what was
// asked for, and does many at once while reporting them in order. It refuses
// to know how a report is worded, and what a record means.
//
//	list, err := batch.Find([]string{"records/"})
//	worker := batch.Worker{Rooms: pipeline.Real(), Forms: []pipeline.Form{pipeline.PDF}}
//	err = batch.Ordered(ctx, len(list), 2, func(i int) batch.Report { return worker.Do(list[i]) }, show)
package batch

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	"steelyard/cmd/internal/outfile"
	"steelyard/cmd/internal/pipeline"
	"steelyard/render/text"
)

// Worker is what is to be done with each record.
type Worker struct {
	Rooms  pipeline.Rooms
	Check  bool                   // diagnostics only
	Forms  []pipeline.Form        // written to files
	Print  *pipeline.Form         // returned instead of written
	Text   text.Options           // for printed text; files are plain
	Out    string                 // folder for outputs; "" beside the record
	Strict bool                   // warnings count as errors
	Stdin  io.Reader              // the record called "-"
	OwnPDF func(file []byte) bool // did Steelyard write it?
	Now    func() time.Time       // for the time taken
}

// Report is what became of one record.
type Report struct {
	Record   Found
	Compiled *pipeline.Compiled // nil when the record could not be read
	Wrote    []string           // files, as the user would call them
	Printed  []byte
	Err      error // a fault of the world or of this program
	Took     time.Duration
}

// The exit codes of the program.
const (
	ExitDone   = 0
	ExitRecord = 1 // the record has errors
	ExitWorld  = 2 // wrong usage, unreadable record, output that cannot be written
)

// Exit is the exit code of one report.
func (r Report) Exit(strict bool) int {
	switch {
	case r.Err != nil:
		return ExitWorld
	case r.Compiled == nil || r.Compiled.Failed(strict):
		return ExitRecord
	}
	return ExitDone
}

// maxRecord bounds what is read as a record.
const maxRecord = 16 << 20

// Do takes one record all the way.
func (w Worker) Do(rec Found) (rep Report) {
	start := w.Now()
	rep.Record = rec
	defer func() { rep.Took = w.Now().Sub(start) }()

	in, closer, err := w.read(rec)
	if err != nil {
		rep.Err = err
		return rep
	}
	defer closer()
	if w.Check {
		rep.Compiled, err = w.Rooms.Check(in)
	} else {
		rep.Compiled, err = w.Rooms.Compile(in)
	}
	if err != nil {
		rep.Compiled, rep.Err = nil, fmt.Errorf("%s: %w", rec.Path, err)
		return rep
	}
	if w.Check {
		return rep
	}
	failed := rep.Compiled.Failed(w.Strict)
	if w.Print != nil {
		// JSON says what is wrong with a record too; text has nothing to say.
		if !failed || *w.Print == pipeline.JSON {
			rep.Printed, err = rep.Compiled.View(*w.Print, w.Text)
		}
		if err != nil {
			rep.Err = fmt.Errorf("%s: %w", rec.Path, err)
		}
		return rep
	}
	if !failed {
		rep.Wrote, rep.Err = w.write(rec, rep.Compiled)
	}
	return rep
}

// read takes a record, its seal and its folder from the disk.
func (w Worker) read(rec Found) (in pipeline.Input, closer func(), err error) {
	dir := "."
	if rec.Path == Stdin {
		in.Name = "stdin"
		in.Text, err = io.ReadAll(io.LimitReader(w.Stdin, maxRecord+1))
		if err != nil {
			return in, nil, fmt.Errorf("standard input: %w", err)
		}
	} else {
		dir, in.Name = filepath.Dir(rec.Path), filepath.Base(rec.Path)
		if in.Text, err = readFile(rec.Path); err != nil {
			return in, nil, err
		}
		in.Seal, err = readFile(SealOf(rec.Path))
		if err != nil && !errors.Is(err, fs.ErrNotExist) {
			return in, nil, err
		}
	}
	if len(in.Text) > maxRecord {
		return in, nil, fmt.Errorf("%s: larger than %d MiB: not a record", rec.Path, maxRecord>>20)
	}
	root, err := os.OpenRoot(dir)
	if err != nil {
		return in, nil, err
	}
	in.Files = regularFS{root.FS()}
	return in, func() { root.Close() }, nil
}

func readFile(path string) ([]byte, error) {
	f, err := openRegular(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, maxRecord+1))
	if data == nil {
		data = []byte{} // nil means that there is no file
	}
	return data, err
}

// SealOf is the file of the chain beside a record.
func SealOf(path string) string { return trimTOML(path) + ".seal" }

// Outputs names the files that a record's views are written to.
func (w Worker) Outputs(rec Found) []string {
	base := rec.Base
	if w.Out != "" {
		base = filepath.Join(w.Out, rec.Rel)
	}
	var list []string
	for _, form := range w.Forms {
		list = append(list, base+form.Extension())
	}
	return list
}

// write makes all views before it writes the first, so that a view that
// cannot be made leaves every old file alone.
func (w Worker) write(rec Found, c *pipeline.Compiled) (wrote []string, err error) {
	views := make([][]byte, len(w.Forms))
	for i, form := range w.Forms {
		if views[i], err = c.View(form, text.Options{Width: w.Text.Width}); err != nil {
			return nil, fmt.Errorf("%s: %w", rec.Path, err)
		}
	}
	for i, path := range w.Outputs(rec) {
		if dir := filepath.Dir(path); w.Out != "" {
			if err := os.MkdirAll(dir, 0o777); err != nil {
				return wrote, err
			}
		}
		if err := outfile.Write(path, views[i], w.guard(w.Forms[i])); err != nil {
			return wrote, err
		}
		wrote = append(wrote, path)
	}
	return wrote, nil
}

func (w Worker) guard(form pipeline.Form) outfile.Guard {
	switch form {
	case pipeline.PDF:
		if w.OwnPDF == nil {
			return nil
		}
		return outfile.OwnPDF(w.OwnPDF)
	case pipeline.JSON:
		return outfile.StartsWith(`{ "steelyard":`)
	case pipeline.Text:
		return nil
	}
	panic("batch: unknown form")
}

// Clash finds two records that would write the same file.
func (w Worker) Clash(list []Found) error {
	owner := map[string]string{}
	for _, rec := range list {
		for _, path := range w.Outputs(rec) {
			if other, ok := owner[path]; ok {
				return fmt.Errorf("%s and %s would both write %s", other, rec.Path, path)
			}
			owner[path] = rec.Path
		}
	}
	return nil
}
