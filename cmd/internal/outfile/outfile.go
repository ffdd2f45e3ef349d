// Package outfile puts finished bytes under a name without ever leaving half
// of them there: they are written beside, brought to the disk, and renamed.
// Whatever fails, the file that was there before is still there, whole. It
// refuses to know what the bytes mean; a Guard given by the caller decides
// whether a file that is in the way may go.
//
//	err := outfile.Write("out/trial.pdf", bytes, guard)
package outfile

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
)

// Guard looks at the file that would be replaced and returns why it must not
// be, or nil.
type Guard func(path string, old io.ReaderAt, size int64) error

// Write replaces the file, or makes it. A symbolic link stays and its target
// is replaced; the mode of a replaced file is kept; a file that is not
// regular, or that nobody may write, is refused.
func Write(path string, data []byte, guard Guard) error { return write(disk{}, path, data, guard) }

// system is what Write asks of the disk; tests make each step fail.
type system interface {
	create(name string) (file, error) // new, refusing an existing one
	rename(from, to string) error
	remove(name string) error
	syncDir(dir string) error
}

type file interface {
	io.Writer
	Chmod(fs.FileMode) error
	Sync() error
	Close() error
	Name() string
}

func write(sys system, path string, data []byte, guard Guard) (err error) {
	final, err := target(path)
	if err != nil {
		return err
	}
	old, err := inspect(final, guard)
	if err != nil {
		return err
	}
	f, err := beside(sys, final)
	if err != nil {
		return err
	}
	defer func() {
		if err != nil {
			f.Close()
			sys.remove(f.Name())
		}
	}()
	n, err := f.Write(data)
	if err == nil && n < len(data) {
		err = io.ErrShortWrite
	}
	if err != nil {
		return about(final, err)
	}
	if old != nil {
		if err := f.Chmod(old.Mode().Perm()); err != nil {
			return about(final, err)
		}
	}
	if err := f.Sync(); err != nil {
		return about(final, err)
	}
	if err := f.Close(); err != nil {
		return about(final, err)
	}
	if err := sys.rename(f.Name(), final); err != nil {
		return about(final, err)
	}
	// The new file is in place. Some file systems cannot bring a folder to the
	// disk; then only a power cut now could bring the old file back, whole.
	_ = sys.syncDir(filepath.Dir(final))
	return nil
}

// about names the final file instead of the one beside it, which is gone by
// the time anybody reads the message.
func about(final string, err error) error {
	var pe *fs.PathError
	var le *os.LinkError
	switch {
	case errors.As(err, &pe):
		err = pe.Err
	case errors.As(err, &le):
		err = le.Err
	}
	return fmt.Errorf("%s: not written: %w", final, err)
}

// target follows links to the name that is to be replaced, which need not
// exist.
func target(path string) (string, error) {
	name := path
	for range 40 {
		info, err := os.Lstat(name)
		if err != nil {
			if errors.Is(err, fs.ErrNotExist) {
				return name, nil
			}
			return "", about(path, err)
		}
		if info.Mode()&fs.ModeSymlink == 0 {
			return name, nil
		}
		next, err := os.Readlink(name)
		if err != nil {
			return "", about(path, err)
		}
		if !filepath.IsAbs(next) {
			next = filepath.Join(filepath.Dir(name), next)
		}
		name = next
	}
	return "", fmt.Errorf("%s: not written: links lead in a circle", path)
}

// inspect refuses what must not be replaced. The info is nil when nothing is
// there.
func inspect(path string, guard Guard) (fs.FileInfo, error) {
	info, err := os.Lstat(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, nil
	}
	if err != nil {
		return nil, about(path, err)
	}
	switch {
	case info.IsDir():
		return nil, fmt.Errorf("%s: not written: a folder has this name", path)
	case !info.Mode().IsRegular():
		return nil, fmt.Errorf("%s: not written: not a regular file", path)
	case info.Mode().Perm()&0o222 == 0:
		return nil, fmt.Errorf("%s: not written: the file there is read-only", path)
	}
	f, err := os.OpenFile(path, os.O_RDWR, 0)
	if err != nil {
		return nil, about(path, err)
	}
	defer f.Close()
	if guard != nil {
		if err := guard(path, f, info.Size()); err != nil {
			return nil, fmt.Errorf("%s: not overwritten: %w", path, err)
		}
	}
	return info, nil
}

// beside makes a new file in the folder of final. The name begins with a dot
// and ends in .tmp, so that neither a watch nor a folder search takes it for
// a record.
func beside(sys system, final string) (file, error) {
	dir, base := filepath.Split(final)
	for i := 0; ; i++ {
		f, err := sys.create(dir + "." + base + "." + strconv.Itoa(os.Getpid()) + "." + strconv.Itoa(i) + ".tmp")
		if errors.Is(err, fs.ErrExist) && i < 100 {
			continue
		}
		if err != nil {
			return nil, about(final, err)
		}
		return f, nil
	}
}

type disk struct{}

func (disk) create(name string) (file, error) {
	f, err := os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return nil, err
	}
	return f, nil
}

func (disk) rename(from, to string) error { return os.Rename(from, to) }

func (disk) remove(name string) error { return os.Remove(name) }

func (disk) syncDir(dir string) error {
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer d.Close()
	return d.Sync()
}
