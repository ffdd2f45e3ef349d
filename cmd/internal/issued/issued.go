// Package issued takes documents apart that were issued, and says whether the
// record inside gives the document again, and what changed from one document
// to another. It trusts nothing that a file says about itself, and refuses to
// open, write or print anything: it is given bytes and folders.
//
//	doc, err := issued.Open(file)
//	v, err := issued.Verify(file, issued.Options{Rooms: pipeline.Real()})
package issued

import (
	"encoding/json"
	"io/fs"
	"path"
	"regexp"
	"strings"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/pipeline"
	"steelyard/protocol/seal"
	"steelyard/render/pdf"
)

// Document is an issued document and what it carries. What it does not carry
// is nil.
type Document struct {
	Size     int
	Original int  // length of the document as it was written; 0 when that cannot be told
	Appended int  // bytes after it, as a signature adds
	Intact   bool // the bytes before are those whose digest they hold
	Replaced bool // what was appended changes what the document carries; the original is read

	Ours      bool // the metadata name Steelyard
	Recovered bool // names and relations of what it carries were lost
	Damaged   bool // a checksum of what it carries is not right

	Name   string // of the record, with .toml
	Record []byte
	Seal   []byte
	JSON   []byte
	Data   map[string][]byte // by path in the record's folder
	Engine string            // version that the JSON names; "" unknown

	Pages    []pdf.Shown // as the file shows them now
	PagesErr error
}

// Open takes a document apart. The error is of package pdf: no PDF, encrypted,
// or larger than is looked at.
func Open(file []byte) (*Document, error) {
	inside, err := pdf.Read(file)
	if err != nil {
		return nil, err
	}
	d := &Document{
		Size: len(file), Original: inside.Original, Appended: inside.Appended, Intact: inside.Intact,
		Replaced: inside.Replaced, Ours: inside.Ours, Recovered: inside.Recovered, Data: map[string][]byte{},
	}
	if inside.Replaced {
		if inside, err = pdf.Read(file[:inside.Original]); err != nil {
			return nil, err
		}
	}
	d.Pages, d.PagesErr = pdf.Pages(file)
	d.take(inside.Attachments)
	d.Engine = engineOf(d.JSON)
	return d, nil
}

// take sorts out what is carried: by relation and name where they are there,
// else by what it is.
func (d *Document) take(list []pdf.Attachment) {
	var unknown [][]byte
	for _, a := range list {
		d.Damaged = d.Damaged || a.Sum == "differs"
		base := plainName(a.Name)
		witness, carried := strings.CutPrefix(a.Description, pipeline.WitnessOf)
		switch {
		case carried:
			d.Data[path.Clean(witness)] = a.Bytes
		case a.Relation == "Source" && d.Record == nil && strings.HasSuffix(base, ".toml"):
			d.Name, d.Record = base, a.Bytes
		case a.Relation == pipeline.RelationSeal && d.Seal == nil && strings.HasSuffix(base, ".seal"):
			d.Seal = a.Bytes
		case a.Relation == pipeline.RelationJSON && d.JSON == nil && strings.HasSuffix(base, ".json"):
			d.JSON = a.Bytes
		case a.Relation == pipeline.RelationData:
			name, ok := strings.CutPrefix(a.Description, pipeline.DataOf)
			if !ok {
				name = a.Name
			}
			d.Data[path.Clean(name)] = a.Bytes
		default:
			unknown = append(unknown, a.Bytes)
		}
	}
	var rest [][]byte
	for _, text := range unknown {
		switch {
		case d.Record == nil && batch.LooksLikeRecord(text):
			d.Record = text
		case d.Seal == nil && strings.HasPrefix(string(text[:min(len(text), 16)]), "steelyard seals "):
			d.Seal = text
		case d.JSON == nil && engineOf(text) != "":
			d.JSON = text
		default:
			rest = append(rest, text)
		}
	}
	sums := dataSums(d.JSON)
	for _, text := range rest {
		for _, name := range sums[seal.Digest(text)] {
			d.Data[name] = text
		}
	}
	if d.Record != nil && d.Name == "" {
		d.Name = d.printedName()
	}
}

// plainName is the last part of a name: where the file lay says nothing.
func plainName(name string) string {
	return path.Base(strings.ReplaceAll(name, `\`, "/"))
}

var printed = regexp.MustCompile(`steelyard verify (\S+)\.pdf takes the record`)

// printedName is the record's name as page one prints it.
func (d *Document) printedName() string {
	if len(d.Pages) > 0 {
		if m := printed.FindStringSubmatch(strings.ReplaceAll(d.Pages[0].Text, "\n", "")); m != nil {
			return plainName(m[1]) + ".toml"
		}
	}
	return "record.toml"
}

// contract is the part of a result's JSON that says what it is of.
type contract struct {
	Steelyard int
	Engine    string
	Record    struct {
		SourceSHA256 string `json:"source_sha256"`
	}
	Files []struct{ Path, SHA256 string }
}

func contractOf(text []byte) (c contract) {
	if len(text) > maxText || json.Unmarshal(text, &c) != nil {
		return contract{}
	}
	return c
}

func engineOf(text []byte) string {
	if c := contractOf(text); c.Steelyard > 0 {
		return c.Engine
	}
	return ""
}

// dataSums are the paths of data files by the digests that a result names.
func dataSums(text []byte) map[string][]string {
	out := map[string][]string{}
	for _, f := range contractOf(text).Files {
		out[f.SHA256] = append(out[f.SHA256], path.Clean(f.Path))
	}
	return out
}

// input is the record as the pipeline takes it: data come from the document,
// and what it does not carry from folder, which may be nil.
func (d *Document) input(folder fs.FS) pipeline.Input {
	return pipeline.Input{Name: d.Name, Text: d.Record, Seal: d.Seal, Files: carried{d.Data, folder}}
}
