package issued

import (
	"bytes"
	"io"
	"io/fs"
	"path"
	"time"
)

// carried is a folder made of what a document carries, before what lies in
// another folder.
type carried struct {
	data  map[string][]byte // by path
	below fs.FS             // nil: nothing else
}

func (c carried) Open(name string) (fs.File, error) {
	if text, ok := c.data[name]; ok && fs.ValidPath(name) {
		return &carriedFile{Reader: bytes.NewReader(text), name: path.Base(name)}, nil
	}
	if c.below == nil {
		return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrNotExist}
	}
	return c.below.Open(name)
}

// carriedFile is one file of what a document carries.
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
