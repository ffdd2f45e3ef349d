// Package protocol is the door of the first room: bytes and a file system in,
// a typed record with its data and its faults out. It computes no effect and
// opens no file of its own.
//
//	in := protocol.Load("trial.toml", text, sealText, files)
//	if in.Diagnostics.HasErrors() { … }
package protocol

import (
	"io/fs"
	"strings"

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

	// Seal is how the record stands to its chain; nil when the record has
	// errors and its chain has none. Sealed is the same record under the plan that binds it, with its
	// own tables and PlanSHA256: nil where the plan now differs from that one in
	// wording at most, or where Seal.Unreadable says why it cannot be had.
	Seal   *seal.State
	Sealed *Loaded
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
	chain, faults := seal.Parse(strings.TrimSuffix(name, ".toml")+".seal", sealText)
	list = append(list, faults...)
	if len(rec.Tree.Entries) > 0 {
		list = append(list, read.Dated(rec, days(chain)...)...)
	}
	in := &Loaded{Source: src, Record: rec, Diagnostics: list}
	defer func() { in.Diagnostics.Sort() }()
	if chain.Broken != "" {
		in.Seal, _ = seal.Compare(rec, nil, chain)
	}
	if list.HasErrors() {
		return in
	}
	in.PlanSHA256 = seal.PlanDigest(rec)
	in.Tables, faults = data.Load(rec, files)
	in.Diagnostics = append(in.Diagnostics, faults...)
	if faults.HasErrors() {
		return in
	}
	in.Seal, faults = seal.Compare(rec, in.Tables, chain)
	in.Diagnostics = append(in.Diagnostics, faults...)
	in.Diagnostics = append(in.Diagnostics, in.Seal.Witness(rec, files)...)
	if in.Seal.Substantive() {
		in.Sealed = underSeal(rec, in.Seal, files)
	}
	return in
}

// underSeal loads the record under the plan that binds it. What stands in the
// way is a reason in the state, no diagnostic.
func underSeal(rec *record.Record, state *seal.State, files fs.FS) *Loaded {
	sealed, reasons := seal.SealedRecord(rec, state.Binding)
	if sealed == nil {
		state.Unreadable = reasons
		return nil
	}
	tables, faults := data.Load(sealed, files)
	for _, d := range faults {
		if d.Severity == diag.SeverityError {
			state.Unreadable = append(state.Unreadable, d.Message)
		}
	}
	if faults.HasErrors() {
		return nil
	}
	return &Loaded{Source: sealed.Source, Record: sealed, Tables: tables, PlanSHA256: state.Binding.Plan, Seal: state}
}

// days are the dates of the seals, at Greenwich.
func days(c *seal.Chain) (out []record.Date) {
	for _, e := range c.Entries {
		out = append(out, record.DateOf(e.Time))
	}
	return out
}
