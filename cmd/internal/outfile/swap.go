package outfile

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"time"
)

// HeldError says that the lock of a file stayed taken.
type HeldError struct {
	Path string // of the file
	Lock string // the file that is the lock
	By   string // what the holder wrote about itself; "" when it cannot be read
}

func (e *HeldError) Error() string {
	by := e.By
	if by == "" {
		by = "another process"
	}
	return fmt.Sprintf("%s: not written: %s is writing it", e.Path, by)
}

// Lock takes the lock of a file, which need not exist, waiting for another
// holder as long as wait, and returns what gives it back. The lock is a file
// beside, made only where there is none, so that it holds on every file system
// and between machines. A process that is killed leaves it; then the error is
// a *HeldError, and removing the lock is for a person to decide. What earlier
// holders left half written beside the file is removed.
func Lock(path string, wait time.Duration) (unlock func(), err error) {
	final, err := target(path)
	if err != nil {
		return nil, err
	}
	dir, base := filepath.Split(final)
	lock := dir + "." + base + ".lock"
	const pause = 10 * time.Millisecond
	for left := wait; ; left -= pause {
		f, err := os.OpenFile(lock, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
		if err == nil {
			_, err = fmt.Fprintf(f, "process %d", os.Getpid())
			if err := errors.Join(err, f.Close()); err != nil {
				os.Remove(lock)
				return nil, about(final, err)
			}
			sweep(dir, base)
			return func() { os.Remove(lock) }, nil
		}
		if !errors.Is(err, fs.ErrExist) {
			return nil, about(final, err)
		}
		if left <= 0 {
			by, _ := os.ReadFile(lock)
			return nil, &HeldError{Path: path, Lock: lock, By: holder(by)}
		}
		time.Sleep(pause)
	}
}

// holder is what a lock says about its holder, if it is as Lock writes it.
func holder(text []byte) string {
	by := strings.TrimSpace(string(text))
	pid, ok := strings.CutPrefix(by, "process ")
	if _, err := strconv.Atoi(pid); !ok || err != nil {
		return ""
	}
	return by
}

// sweep removes what writers of a file left beside it when they were killed.
// Only the holder of the lock may do so.
func sweep(dir, base string) {
	if dir == "" {
		dir = "."
	}
	entries, err := os.ReadDir(dir)
	if err != nil {
		return
	}
	for _, e := range entries {
		rest, ok := strings.CutPrefix(e.Name(), "."+base+".")
		number, ok2 := strings.CutSuffix(rest, ".tmp")
		if ok && ok2 && strings.Trim(number, "0123456789.") == "" {
			os.Remove(filepath.Join(dir, e.Name()))
		}
	}
}

// Swap replaces a file that holds old by one that holds text, as Write does; a
// file that holds anything else by now is left alone. Nil or empty old means
// that there is no file, or an empty one. The caller holds the lock.
func Swap(path string, old, text []byte) error { return swap(disk{}, path, old, text) }

func swap(sys system, path string, old, text []byte) error {
	return write(sys, path, text, func(_ string, there io.ReaderAt, size int64) error {
		now, err := io.ReadAll(io.NewSectionReader(there, 0, size))
		if err != nil {
			return err
		}
		if !bytes.Equal(now, old) {
			return errors.New("it was changed by another program in the meantime")
		}
		return nil
	})
}
