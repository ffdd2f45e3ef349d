package pipeline

import (
	"bytes"
	"io"
	"io/fs"
	"path"
	"slices"
	"strings"
	"time"

	"steelyard/protocol/record"
	"steelyard/render/page"
)

// attach adds what only the bytes at hand can give: the record's seal, which
// goes where the record goes, and data files where the record asks for them.
// Nothing is attached while results are masked.
func (c *Compiled) attach(in Input) error {
	if c.Result.Masked {
		return nil
	}
	add := func(name, media, what, relation string, text []byte) {
		c.Page.Attachments = append(c.Page.Attachments, page.Attachment{
			Name: name, Media: media, Description: what, Relation: relation, Modified: c.Page.Created, Bytes: text,
		})
	}
	head := c.Loaded.Record.Head
	carried := len(c.Page.Attachments) > 0 // the record, attached by composing
	if carried && in.Seal != nil {
		add(sealName(in.Name), "text/plain", "the seals of the record", "Supplement", in.Seal)
	}
	wanted := slices.ContainsFunc(head.Attach.V, func(s record.String) bool { return s.V == "data" })
	if !wanted || in.Files == nil {
		return nil
	}
	for _, name := range c.data() {
		text, err := fs.ReadFile(in.Files, name)
		if err != nil {
			return err
		}
		add(attachedName(name), "text/csv", "data file "+name, "Data", text)
	}
	return nil
}

func sealName(record string) string { return strings.TrimSuffix(record, ".toml") + ".seal" }

// attachedName is the name of a data file inside a document, where folders
// would be taken for a danger.
func attachedName(name string) string { return strings.ReplaceAll(path.Clean(name), "/", "_") }

// carriedFiles is a folder made of what a document carries, before what lies
// in another folder.
type carriedFiles struct {
	carried map[string][]byte // by attached name
	below   fs.FS             // nil: nothing else
}

func (f carriedFiles) Open(name string) (fs.File, error) {
	if text, ok := f.carried[attachedName(name)]; ok && fs.ValidPath(name) {
		return &carriedFile{Reader: bytes.NewReader(text), name: path.Base(name)}, nil
	}
	if f.below == nil {
		return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrNotExist}
	}
	return f.below.Open(name)
}

type carriedFile struct {
	*bytes.Reader
	name string
}

var _ io.ReaderAt = (*carriedFile)(nil)

func (f *carriedFile) Stat() (fs.FileInfo, error) { return f, nil }
func (f *carriedFile) Close() error               { return nil }
func (f *carriedFile) Name() string               { return f.name }
func (f *carriedFile) Mode() fs.FileMode          { return 0o444 }
func (f *carriedFile) ModTime() time.Time         { return time.Time{} }
func (f *carriedFile) IsDir() bool                { return false }
func (f *carriedFile) Sys() any                   { return nil }
