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
	"steelyard/protocol/record"
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
func Load(name string, text, sealText []byte, files fs.FS) *Loaded {
	src := diag.NewSource(name, text)
	return &Loaded{Source: src, Record: &record.Record{Source: src}}
}
