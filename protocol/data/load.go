package data

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"path"
	"slices"
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// Load reads the columns that the result entries of a record name, one pass
// over each file. Entries whose file or cells have faults are absent from the
// tables; the faults are in the list, at most ten cells of a file one by one.
//
// An entry without a set is read once for every declared set, through the
// set's filters; without declared sets its key has Set "". Masked entries
// come without labels and their faults without the line they stand on.
// Nil files refuses every file.
func Load(rec *record.Record, files fs.FS) (Tables, diag.List) {
	tables, list := Tables{}, diag.List{}
	var names []string
	byFile := map[string][]*entry{}
	add := func(key int, res *record.Result) {
		if res == nil {
			return
		}
		e := newEntry(rec, key, res)
		if e == nil {
			return
		}
		name, ok := clean(e, &list)
		if !ok {
			return
		}
		if byFile[name] == nil {
			names = append(names, name)
		}
		byFile[name] = append(byFile[name], e)
	}
	for i, r := range rec.Results {
		add(i, r)
	}
	for i, r := range rec.Earlier {
		add(-1-i, r)
	}
	for _, name := range names {
		list.Add(load(name, byFile[name], files, tables)...)
	}
	list.Sort()
	return tables, list
}

// clean checks that a path is relative, uses forward slashes and stays in
// the record's folder.
func clean(e *entry, list *diag.List) (string, bool) {
	file := e.data.File
	bad := func(why string) (string, bool) {
		list.Add(diag.Error("D102", file.Span, "%s %s", quoteText(file.V), why).
			WithHelp("keep data files in the record's folder or below it and name them from there, as in \"data/lot.csv\""))
		return "", false
	}
	drive := len(file.V) > 1 && file.V[1] == ':'
	switch {
	case strings.TrimSpace(file.V) == "":
		return bad("names no file")
	case strings.Contains(file.V, `\`):
		return bad("has a backslash; paths use forward slashes")
	case strings.HasPrefix(file.V, "/") || drive:
		return bad("is not a path relative to the record")
	case slices.Contains(strings.Split(file.V, "/"), ".."):
		return bad("leads out of the record's folder")
	case strings.ContainsRune(file.V, 0):
		return bad("holds a NUL byte")
	}
	return path.Clean(file.V), true
}

// load reads one file for all its entries.
func load(name string, entries []*entry, files fs.FS, tables Tables) (list diag.List) {
	masked := slices.ContainsFunc(entries, func(e *entry) bool { return e.masked })
	for pass := 1; ; pass++ {
		list = nil
		f := &faults{file: name, at: entries[0].data.File.Span, masked: masked}
		for _, e := range entries {
			e.faults = f
			e.begin()
		}
		read, sum, ok := readFile(name, entries, files, f, &list)
		list.Add(f.diagnostics()...)
		if !ok {
			return list
		}
		if pass == 1 && len(f.list) == 0 && turnToFactors(entries) {
			continue
		}
		for _, e := range entries {
			list.Add(e.check(sum)...)
			list.Add(e.mixed(masked)...)
			if len(f.list) > 0 {
				continue
			}
			for _, s := range e.sets {
				tables[Key{e.key, s.name}] = e.vectors(s, read, sum)
			}
		}
		if read == 0 {
			list.Add(diag.Warning("D108", f.at, "%s has a header and no rows", name))
		}
		return list
	}
}

// turnToFactors marks the covariates in which a cell was no number.
func turnToFactors(entries []*entry) (any bool) {
	for _, e := range entries {
		for _, c := range e.covs {
			if !c.factor && c.words > 0 {
				c.factor, any = true, true
			}
		}
	}
	return any
}

// mixed warns of a covariate that is read as categories although most of its
// cells are numbers.
func (e *entry) mixed(masked bool) (list diag.List) {
	for _, c := range e.covs {
		if c.words == 0 || c.numbers < c.words {
			continue
		}
		at := c.at
		if at.IsZero() {
			at = e.data.File.Span
		}
		what, excerpt := quoteText(c.first.cell), c.first.excerpt
		if masked {
			what, excerpt = "this cell", ""
		}
		list.Add(diag.Warning("D131", at, "column %s is read as categories, because %s is not a number", quoteText(c.name), what).
			In(e.data.File.V, c.first.line, c.first.column, excerpt).
			WithHelp("if it is a code for a missing value, name it in missing_values"))
	}
	return list
}

// check compares the digest with the one stated.
func (e *entry) check(sum string) (list diag.List) {
	if s := e.data.SHA256; s.Stated && !strings.EqualFold(s.V, sum) {
		list.Add(diag.Error("D105", s.Span, "%s has another SHA-256: %s", e.data.File.V, sum).
			WithHelp("the file is not the one this digest was taken of"))
	}
	return list
}

// readFile passes every record of a file to the entries. ok says that the
// whole file was read; what is wrong is in list and f.
func readFile(name string, entries []*entry, files fs.FS, f *faults, list *diag.List) (read int, sum string, ok bool) {
	file, size, err := open(name, files)
	if err != nil {
		for _, e := range entries {
			list.Add(cannotOpen(e, name, files, err))
		}
		return 0, "", false
	}
	defer file.Close()
	hash := sha256.New()
	c := newReader(io.TeeReader(file, hash))
	c.size = size
	stop := func(broken *fault) (int, string, bool) {
		if broken != nil {
			f.cell(broken.code, f.at, broken.line, broken.column, broken.excerpt, broken.help, broken.message)
		} else if c.err != nil {
			list.Add(diag.Error("D103", f.at, "%s cannot be read: %s", name, reasonText(c.err)))
		}
		return 0, "", false
	}
	header, broken := columns(c, name, entries, f, list)
	if header == 0 {
		return stop(broken)
	}
	for {
		more, broken := c.next()
		if broken != nil || c.err != nil {
			return stop(broken)
		}
		if !more {
			break
		}
		if header == 1 && c.blank > 0 {
			read += c.emptyRows(entries)
		}
		if len(c.fields) != header {
			line, column, excerpt := c.place(min(len(c.fields)-1, header))
			f.cell("D112", f.at, line, column, excerpt, "",
				fmt.Sprintf("this row has %s, the header %d", plural(len(c.fields), "field", "fields"), header))
			continue
		}
		read++
		for _, e := range entries {
			e.row(c)
		}
	}
	return read, hex.EncodeToString(hash.Sum(nil)), true
}

// columns reads the header and finds the columns of every entry in it. It
// returns how many columns there are, 0 where the file cannot be used.
func columns(c *reader, name string, entries []*entry, f *faults, list *diag.List) (int, *fault) {
	more, broken := c.next()
	if broken != nil || c.err != nil {
		return 0, broken
	}
	if !more {
		list.Add(diag.Error("D104", f.at, "%s is empty", name).WithHelp("a data file starts with a line of column names"))
		return 0, nil
	}
	header := make([]string, len(c.fields))
	for i := range header {
		header[i] = string(c.cell(i))
	}
	if d, bad := separated(name, header, f.at); bad {
		list.Add(d)
		return 0, nil
	}
	found := true
	for _, e := range entries {
		found = e.find(header, list) && found
	}
	if !found {
		return 0, nil
	}
	return len(header), nil
}

// separated finds a file whose columns are separated by something else.
func separated(name string, header []string, at diag.Span) (diag.Diagnostic, bool) {
	if len(header) == 1 {
		for _, s := range [...][2]string{{";", "semicolons"}, {"\t", "tabs"}} {
			if strings.Contains(header[0], s[0]) {
				return diag.Error("D114", at, "%s is separated by %s", name, s[1]).
					WithHelp("save it with commas between the columns, and a point in its numbers"), true
			}
		}
	}
	return diag.Diagnostic{}, false
}

// emptyRows counts the empty lines before a row of a file with one column:
// there an empty line is an empty cell.
func (c *reader) emptyRows(entries []*entry) int {
	kept := *c
	c.text, c.raw, c.fields = nil, nil, []field{{}}
	for i := range c.blank {
		c.line = kept.line - c.blank + i
		for _, e := range entries {
			e.row(c)
		}
	}
	*c = kept
	return c.blank
}

var (
	errNoFiles   = errors.New("no files are at hand here")
	errDirectory = errors.New("it is a folder")
	errSpecial   = errors.New("it is not a regular file")
)

func open(name string, files fs.FS) (fs.File, int64, error) {
	if files == nil {
		return nil, 0, errNoFiles
	}
	file, err := files.Open(name)
	if err != nil {
		return nil, 0, err
	}
	info, err := file.Stat()
	switch {
	case err != nil:
	case info.IsDir():
		err = errDirectory
	case !info.Mode().IsRegular():
		err = errSpecial
	}
	if err != nil {
		file.Close()
		return nil, 0, err
	}
	return file, info.Size(), nil
}

// reasonText is an error of the file system without operation and path.
func reasonText(err error) string {
	var p *fs.PathError
	if errors.As(err, &p) {
		err = p.Err
	}
	return err.Error()
}

func cannotOpen(e *entry, name string, files fs.FS, err error) diag.Diagnostic {
	at := e.data.File.Span
	switch {
	case errors.Is(err, fs.ErrNotExist):
		d := diag.Error("D101", at, "there is no file %s beside the record", quoteText(name))
		if near := nearest(path.Base(name), siblings(name, files)); near != "" {
			d.Help = "did you mean " + quoteText(path.Join(path.Dir(name), near)) + "?"
		}
		return d
	case strings.Contains(reasonText(err), "escapes"):
		return diag.Error("D102", at, "%s leads out of the record's folder", quoteText(name)).
			WithHelp("copy the file into the record's folder")
	}
	return diag.Error("D103", at, "%s cannot be read: %s", quoteText(name), reasonText(err))
}

// siblings are the files in the same folder, in order.
func siblings(name string, files fs.FS) (names []string) {
	list, err := fs.ReadDir(files, path.Dir(name))
	if err != nil {
		return nil
	}
	for _, f := range list {
		if !f.IsDir() {
			names = append(names, f.Name())
		}
	}
	return names
}
