package outfile

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"syscall"
	"testing"
)

// faulty is a disk on which one step fails.
type faulty struct {
	at     string // create, write, short, chmod, sync, close, rename, syncdir
	err    error
	traces *[]string // names of files made beside
}

type faultyFile struct {
	*os.File
	f faulty
}

func (f faulty) create(name string) (file, error) {
	if f.at == "create" {
		return nil, &fs.PathError{Op: "open", Path: name, Err: f.err}
	}
	made, err := os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return nil, err
	}
	*f.traces = append(*f.traces, name)
	return faultyFile{made, f}, nil
}

func (f faultyFile) Write(p []byte) (int, error) {
	switch f.f.at {
	case "write":
		n, _ := f.File.Write(p[:len(p)/2])
		return n, f.f.err
	case "short":
		return f.File.Write(p[:len(p)/2])
	}
	return f.File.Write(p)
}

func (f faultyFile) Chmod(m fs.FileMode) error {
	if f.f.at == "chmod" {
		return f.f.err
	}
	return f.File.Chmod(m)
}

func (f faultyFile) Sync() error {
	if f.f.at == "sync" {
		return f.f.err
	}
	return f.File.Sync()
}

func (f faultyFile) Close() error {
	err := f.File.Close()
	if f.f.at == "close" {
		return f.f.err
	}
	return err
}

func (f faulty) rename(from, to string) error {
	if f.at == "rename" {
		return &os.LinkError{Op: "rename", Old: from, New: to, Err: f.err}
	}
	return os.Rename(from, to)
}

func (f faulty) remove(name string) error { return os.Remove(name) }

func (f faulty) syncDir(string) error {
	if f.at == "syncdir" {
		return f.err
	}
	return nil
}

// holds demands that the folder holds exactly these files.
func holds(t *testing.T, dir string, want map[string]string) {
	t.Helper()
	if err := compare(dir, want); err != nil {
		t.Error(err)
	}
}

func compare(dir string, want map[string]string) error {
	entries, err := os.ReadDir(dir)
	if err != nil {
		return err
	}
	for _, e := range entries {
		got, err := os.ReadFile(filepath.Join(dir, e.Name()))
		if err != nil {
			return err
		}
		if text, ok := want[e.Name()]; !ok {
			return errors.New("left behind: " + e.Name())
		} else if text != string(got) {
			return errors.New(e.Name() + " holds " + string(got))
		}
	}
	if len(entries) != len(want) {
		return errors.New("a file is missing")
	}
	return nil
}

func TestCompareFails(t *testing.T) {
	dir := t.TempDir()
	os.WriteFile(filepath.Join(dir, "a"), []byte("1"), 0o666)
	for _, want := range []map[string]string{{"a": "2"}, {"a": "1", "b": ""}, {}} {
		if compare(dir, want) == nil {
			t.Errorf("%v was accepted", want)
		}
	}
}

func TestEveryFaultKeepsTheOldFile(t *testing.T) {
	for _, at := range []string{"create", "write", "short", "chmod", "sync", "close", "rename"} {
		for _, cause := range []error{syscall.ENOSPC, syscall.EACCES, syscall.EIO} {
			t.Run(at+" "+cause.Error(), func(t *testing.T) {
				dir := t.TempDir()
				path := filepath.Join(dir, "trial.pdf")
				if err := os.WriteFile(path, []byte("old"), 0o644); err != nil {
					t.Fatal(err)
				}
				var traces []string
				err := write(faulty{at, cause, &traces}, path, []byte("new contents"), nil)
				if err == nil {
					t.Fatal("no error")
				}
				if at != "short" && !errors.Is(err, cause) {
					t.Errorf("the cause is lost: %v", err)
				}
				if !strings.HasPrefix(err.Error(), path+": not written: ") || strings.Contains(err.Error(), ".tmp") {
					t.Errorf("the message does not name the file: %v", err)
				}
				holds(t, dir, map[string]string{"trial.pdf": "old"})
			})
		}
	}
}

func TestFolderThatCannotBeSyncedIsNoFault(t *testing.T) {
	dir := t.TempDir()
	var traces []string
	if err := write(faulty{"syncdir", syscall.EINVAL, &traces}, filepath.Join(dir, "a.pdf"), []byte("new"), nil); err != nil {
		t.Fatal(err)
	}
	holds(t, dir, map[string]string{"a.pdf": "new"})
	if len(traces) != 1 || !strings.HasPrefix(filepath.Base(traces[0]), ".") || filepath.Ext(traces[0]) != ".tmp" {
		t.Errorf("written beside as %q", traces)
	}
}

func TestWriteNewAndOld(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.pdf")
	for _, text := range []string{"first", "second and longer", "3", ""} {
		if err := Write(path, []byte(text), nil); err != nil {
			t.Fatal(err)
		}
		holds(t, dir, map[string]string{"a.pdf": text})
	}
}

func TestModeIsKept(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("no such modes")
	}
	path := filepath.Join(t.TempDir(), "a.pdf")
	for _, mode := range []fs.FileMode{0o600, 0o664, 0o640} {
		os.WriteFile(path, nil, 0o666)
		os.Chmod(path, mode)
		if err := Write(path, []byte("x"), nil); err != nil {
			t.Fatal(err)
		}
		info, _ := os.Stat(path)
		if info.Mode().Perm() != mode {
			t.Errorf("mode %v became %v", mode, info.Mode().Perm())
		}
	}
}

func TestReadOnlyIsRefused(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.pdf")
	os.WriteFile(path, []byte("old"), 0o444)
	if err := Write(path, []byte("new"), nil); err == nil || !strings.Contains(err.Error(), "read-only") {
		t.Errorf("error %v", err)
	}
	holds(t, dir, map[string]string{"a.pdf": "old"})
}

func TestLinksStay(t *testing.T) {
	dir := t.TempDir()
	real := filepath.Join(dir, "real")
	if err := os.Mkdir(real, 0o777); err != nil {
		t.Fatal(err)
	}
	link := filepath.Join(dir, "a.pdf")
	if err := os.Symlink(filepath.Join("real", "issued.pdf"), link); err != nil {
		t.Skip("this file system has no symbolic links")
	}
	for _, text := range []string{"made through a link that led nowhere", "replaced"} {
		if err := Write(link, []byte(text), nil); err != nil {
			t.Fatal(err)
		}
		holds(t, real, map[string]string{"issued.pdf": text})
		if to, err := os.Readlink(link); err != nil || to != filepath.Join("real", "issued.pdf") {
			t.Errorf("the link leads to %q, %v", to, err)
		}
	}
	round := filepath.Join(dir, "round")
	os.Symlink("round", round)
	if err := Write(round, nil, nil); err == nil || !strings.Contains(err.Error(), "circle") {
		t.Errorf("error %v", err)
	}
}

func TestWhatIsNoFileIsRefused(t *testing.T) {
	dir := t.TempDir()
	if err := Write(dir, nil, nil); err == nil || !strings.Contains(err.Error(), "a folder has this name") {
		t.Errorf("error %v", err)
	}
	if err := Write(filepath.Join(dir, "none", "a.pdf"), nil, nil); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("error %v", err)
	}
}

func TestGuards(t *testing.T) {
	own := func(b []byte) bool { return bytes.Contains(b, []byte("ours")) }
	for _, tt := range []struct {
		guard Guard
		old   string
		ok    bool
	}{
		{OwnPDF(own), "%PDF ours", true},
		{OwnPDF(own), "", true},
		{OwnPDF(own), "%PDF another's", false},
		{StartsWith(`{ "steelyard":`), "{\n  \"steelyard\": 1,\n", true},
		{StartsWith(`{ "steelyard":`), "{ \"name\": \"a package\" }", false},
		{StartsWith(`{ "steelyard":`), "", true},
		{StartsWith(`{ "steelyard":`), "{", false},
	} {
		dir := t.TempDir()
		path := filepath.Join(dir, "a")
		os.WriteFile(path, []byte(tt.old), 0o666)
		err := Write(path, []byte("new"), tt.guard)
		if tt.ok {
			if err != nil {
				t.Errorf("%q: %v", tt.old, err)
			}
			holds(t, dir, map[string]string{"a": "new"})
			continue
		}
		if err == nil || !strings.Contains(err.Error(), "not overwritten") {
			t.Errorf("%q: error %v", tt.old, err)
		}
		holds(t, dir, map[string]string{"a": tt.old})
	}
}

func TestGuardSeesUnreadableFile(t *testing.T) {
	g := OwnPDF(func([]byte) bool { return true })
	if err := g("a", broken{}, 10); !errors.Is(err, syscall.EIO) {
		t.Errorf("error %v", err)
	}
}

type broken struct{}

func (broken) ReadAt([]byte, int64) (int, error) { return 0, syscall.EIO }

var _ io.ReaderAt = broken{}
