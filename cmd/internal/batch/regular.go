package batch

import (
	"errors"
	"io/fs"
	"os"
)

// errNotRegular refuses devices, pipes and sockets, which may block for ever.
var errNotRegular = errors.New("it is not a regular file")

// regularFS opens regular files and folders alone.
type regularFS struct{ fs.FS }

func (r regularFS) Open(name string) (fs.File, error) {
	info, err := fs.Stat(r.FS, name)
	if err == nil && !info.Mode().IsRegular() && !info.IsDir() {
		return nil, &fs.PathError{Op: "open", Path: name, Err: errNotRegular}
	}
	return r.FS.Open(name)
}

// openRegular opens a file that cannot block.
func openRegular(path string) (*os.File, error) {
	info, err := os.Stat(path)
	if err == nil && !info.Mode().IsRegular() && !info.IsDir() {
		return nil, &fs.PathError{Op: "open", Path: path, Err: errNotRegular}
	}
	return os.Open(path)
}
