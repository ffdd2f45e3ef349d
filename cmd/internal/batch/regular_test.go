//go:build unix

package batch

import (
	"errors"
	"os"
	"path/filepath"
	"syscall"
	"testing"
)

// A pipe nobody writes to is refused at once, not waited for.
func TestPipesAreRefused(t *testing.T) {
	dir := t.TempDir()
	pipe := filepath.Join(dir, "p.csv")
	if err := syscall.Mkfifo(pipe, 0o600); err != nil {
		t.Skip("no pipes here: ", err)
	}
	if _, err := readFile(pipe); !errors.Is(err, errNotRegular) {
		t.Errorf("reading: %v", err)
	}
	root, err := os.OpenRoot(dir)
	if err != nil {
		t.Fatal(err)
	}
	defer root.Close()
	if _, err := (regularFS{root.FS()}).Open("p.csv"); !errors.Is(err, errNotRegular) {
		t.Errorf("opening: %v", err)
	}
}
