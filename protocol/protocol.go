// Package protocol is the door of the first room: bytes and a file system in,
// a typed record with its data and its faults out. It computes no effect and
// opens no file of its own.
//
//	in := protocol.Load("trial.toml", text, sealText, files)
//	if in.Diagnostics.HasErrors() { … }
package protocol

import (
	"io/fs"

	"steelyard/protocol/data"
	"steelyard/protocol/diag"
	"steelyard/protocol/read"
	"steelyard/protocol/record"
	"steelyard/protocol/seal"
)

// Loaded is one record, read.
type Loaded struct {
	Source      *diag.Source
	Record      *record.Record // never nil; incomplete when there are errors
	Tables      data.Tables    // vectors of entries with data, by entry and set
	PlanSHA256  string         // digest of the canonical plan as it stands now
	Diagnostics diag.List      // sorted
}

// Load reads a record. Files named by the record are opened in files, whose
// root is the record's folder; nil refuses every file. sealText is the chain
// beside the record, nil when there is none.
//
// Data files are read only for a record without errors of its own: columns
// cannot be judged by a plan that is not understood.
func Load(name string, text, sealText []byte, files fs.FS) *Loaded {
	src := diag.NewSource(name, text)
	rec, list := read.Record(src)
	if len(rec.Tree.Entries) > 0 && sealText == nil { // a seal has a time, and dates the record
		list = append(list, read.Dated(rec)...)
		list.Sort()
	}
	in := &Loaded{Source: src, Record: rec, Diagnostics: list}
	if list.HasErrors() {
		return in
	}
	in.PlanSHA256 = seal.PlanDigest(rec)
	tables, faults := data.Load(rec, files)
	in.Tables = tables
	in.Diagnostics = append(in.Diagnostics, faults...)
	in.Diagnostics.Sort()
	return in
}
