package outfile

import (
	"errors"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"

	"steelyard/protocol/diag"
	"steelyard/protocol/read"
	"steelyard/protocol/seal"
)

const plan = `steelyard = 1
record = { title = "T", setting = "quality" }
plan.question = "Q?"
plan.alpha = { two_sided = 0.05 }
plan.outcome.x = { label = "X", measure = "mean" , reference = 1}
plan.hypothesis.H1 = { outcome = "x", claim = "differs" }
`

// longer adds a seal to a chain.
func longer(t *testing.T, chain []byte, engine string) []byte {
	t.Helper()
	rec, _ := read.Record(diag.NewSource("t.toml", []byte(plan)))
	out, _, err := seal.Append(chain, seal.New(rec, nil, engine, time.Unix(1767225600, 0)))
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// whole demands a chain without a fault and with so many seals.
func whole(t *testing.T, path string, seals ...int) {
	t.Helper()
	if err := wholeError(path, seals); err != nil {
		t.Error(err)
	}
}

func wholeError(path string, seals []int) error {
	text, err := os.ReadFile(path)
	if err != nil && !errors.Is(err, fs.ErrNotExist) {
		return err
	}
	c, faults := seal.Parse(path, text)
	if faults.HasErrors() {
		return errors.New(c.Broken)
	}
	for _, n := range seals {
		if n == len(c.Entries) {
			return nil
		}
	}
	return errors.New("another number of seals")
}

func TestWholeFails(t *testing.T) {
	path := filepath.Join(t.TempDir(), "t.seal")
	text := longer(t, nil, "1")
	os.WriteFile(path, text[:len(text)-2], 0o666)
	if wholeError(path, []int{0, 1}) == nil {
		t.Error("half a seal is a whole chain")
	}
	os.WriteFile(path, text, 0o666)
	if wholeError(path, []int{0, 2}) == nil || wholeError(path, []int{1}) != nil {
		t.Error("seals are not counted")
	}
}

// cutoff is a disk that is full, or fails, after so many bytes.
type cutoff struct {
	disk
	after *int
	err   error
}

type cutoffFile struct {
	file
	c cutoff
}

func (c cutoff) create(name string) (file, error) {
	f, err := c.disk.create(name)
	return cutoffFile{f, c}, err
}

func (f cutoffFile) Write(p []byte) (int, error) {
	n, err := f.file.Write(p[:min(len(p), *f.c.after)])
	if *f.c.after -= n; err == nil && n < len(p) {
		err = f.c.err
	}
	return n, err
}

// A disk that is full after any number of bytes leaves the chain as it was.
func TestFullAtAnyByte(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "t.seal")
	first := longer(t, nil, "1")
	second := longer(t, first, "2")
	for _, old := range [][]byte{nil, first} {
		text := first
		if old != nil {
			text = second
			os.WriteFile(path, old, 0o666)
		}
		for n := range len(text) {
			for _, cause := range []error{syscall.ENOSPC, nil}[n%2 : n%2+1] { // full, and short without a word
				after := n
				err := swap(cutoff{after: &after, err: cause}, path, old, text)
				if err == nil || cause != nil && !errors.Is(err, cause) {
					t.Fatalf("after %d bytes: %v", n, err)
				}
				now, _ := os.ReadFile(path)
				if string(now) != string(old) {
					t.Fatalf("after %d bytes the chain holds %q", n, now)
				}
			}
		}
	}
	holds(t, dir, map[string]string{"t.seal": string(first)})
	after := len(second)
	if err := swap(cutoff{after: &after}, path, first, second); err != nil {
		t.Error(err)
	}
	whole(t, path, 2)
}

func TestEveryFaultKeepsTheChain(t *testing.T) {
	first := longer(t, nil, "1")
	for _, at := range []string{"create", "write", "short", "chmod", "sync", "close", "rename"} {
		dir := t.TempDir()
		path := filepath.Join(dir, "t.seal")
		os.WriteFile(path, first, 0o666)
		var traces []string
		if err := swap(faulty{at, syscall.EIO, &traces}, path, first, longer(t, first, "2")); err == nil {
			t.Errorf("%s: no error", at)
		}
		holds(t, dir, map[string]string{"t.seal": string(first)})
	}
}

// mortal is a disk whose user is killed at one step.
type mortal struct {
	disk
	at string
}

type mortalFile struct {
	file
	m mortal
}

func (m mortal) die(at string) {
	if m.at == at {
		p, _ := os.FindProcess(os.Getpid())
		p.Kill()
		select {} // until it is done
	}
}

func (m mortal) create(name string) (file, error) {
	f, err := m.disk.create(name)
	m.die("create")
	return mortalFile{f, m}, err
}

func (f mortalFile) Write(p []byte) (int, error) {
	if f.m.at == "write" {
		f.file.Write(p[:len(p)/2])
	}
	f.m.die("write")
	return f.file.Write(p)
}

func (f mortalFile) Sync() error {
	f.m.die("sync")
	return f.file.Sync()
}

func (f mortalFile) Close() error {
	err := f.file.Close()
	f.m.die("close")
	return err
}

func (m mortal) rename(from, to string) error {
	err := m.disk.rename(from, to)
	m.die("rename")
	return err
}

func (m mortal) syncDir(dir string) error {
	m.die("syncdir")
	return m.disk.syncDir(dir)
}

// A process killed between any two steps leaves the old chain or the new one,
// and a lock that names it; once that is removed all goes on, and what it left
// half written is gone.
func TestKilledBetweenSteps(t *testing.T) {
	if at := os.Getenv("OUTFILE_DIES_AT"); at != "" {
		path := os.Getenv("OUTFILE_PATH")
		old, _ := os.ReadFile(path)
		unlock, err := Lock(path, 0)
		if err != nil {
			t.Fatal(err)
		}
		defer unlock()
		swap(mortal{at: at}, path, old, longer(t, old, "2"))
		return
	}
	for _, at := range []string{"create", "write", "sync", "close", "rename", "syncdir"} {
		dir := t.TempDir()
		path := filepath.Join(dir, "t.seal")
		first := longer(t, nil, "1")
		os.WriteFile(path, first, 0o666)
		cmd := exec.Command(os.Args[0], "-test.run=^TestKilledBetweenSteps$")
		cmd.Env = append(os.Environ(), "OUTFILE_DIES_AT="+at, "OUTFILE_PATH="+path)
		if err := cmd.Run(); err == nil {
			t.Fatalf("%s: it lived", at)
		}
		want := 1
		if at == "rename" || at == "syncdir" {
			want = 2
		}
		whole(t, path, want)
		var held *HeldError
		if _, err := Lock(path, 0); !errors.As(err, &held) || !strings.HasPrefix(held.By, "process ") {
			t.Fatalf("%s: the lock: %v", at, err)
		}
		os.Remove(held.Lock)
		unlock, err := Lock(path, 0)
		if err != nil {
			t.Fatal(err)
		}
		now, _ := os.ReadFile(path)
		if err := Swap(path, now, longer(t, now, "3")); err != nil {
			t.Error(err)
		}
		unlock()
		whole(t, path, want+1)
		if entries, _ := os.ReadDir(dir); len(entries) != 1 {
			t.Errorf("%s: %d files are left", at, len(entries))
		}
	}
}

// Many at once take turns: no seal is lost and none is torn.
func TestManyAtOnce(t *testing.T) {
	path := filepath.Join(t.TempDir(), "t.seal")
	var all sync.WaitGroup
	for range 12 {
		all.Go(func() {
			unlock, err := Lock(path, time.Minute)
			if err != nil {
				t.Error(err)
				return
			}
			defer unlock()
			old, _ := os.ReadFile(path)
			if err := Swap(path, old, longer(t, old, "1")); err != nil {
				t.Error(err)
			}
		})
	}
	all.Wait()
	whole(t, path, 12)
}

func TestSwapSeesOtherPrograms(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "t.seal")
	os.WriteFile(path, []byte("theirs"), 0o666)
	for _, old := range []string{"", "ours"} {
		if err := Swap(path, []byte(old), []byte("new")); err == nil || !strings.Contains(err.Error(), "changed by another program") {
			t.Errorf("%q: %v", old, err)
		}
	}
	holds(t, dir, map[string]string{"t.seal": "theirs"})
}

func TestLockIsForgottenAndStrangersStay(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "t.seal")
	for _, name := range []string{".t.seal.12.0.tmp", ".t.seal.mine.tmp", ".u.seal.12.0.tmp", ".t.seal.12.0"} {
		os.WriteFile(filepath.Join(dir, name), nil, 0o666)
	}
	unlock, err := Lock(path, 0)
	if err != nil {
		t.Fatal(err)
	}
	unlock()
	holds(t, dir, map[string]string{".t.seal.mine.tmp": "", ".u.seal.12.0.tmp": "", ".t.seal.12.0": ""})
	os.WriteFile(filepath.Join(dir, ".t.seal.lock"), []byte("\x1b[31m"), 0o666)
	var held *HeldError
	if _, err := Lock(path, 20*time.Millisecond); !errors.As(err, &held) || held.By != "" {
		t.Errorf("%v", err)
	}
	if _, err := Lock(filepath.Join(dir, "none", "t.seal"), 0); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("%v", err)
	}
}
