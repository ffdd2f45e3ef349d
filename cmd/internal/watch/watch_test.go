package watch

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"
)

// bench is a watch over a temporary folder. A record here is a text whose
// first word is "record"; the other words are files it depends on.
type bench struct {
	t    *testing.T
	dir  string
	says chan string // one message for each record made, or gone
	mu   sync.Mutex
	slow time.Duration // how long making takes
}

func (b *bench) Find(dir string) (list []string) {
	filepath.WalkDir(dir, func(path string, d os.DirEntry, err error) error {
		if err == nil && !d.IsDir() && filepath.Ext(path) == ".toml" && !hidden(b.name(path)) && b.IsRecord(path) {
			list = append(list, path)
		}
		return nil
	})
	return list
}

func (b *bench) IsRecord(path string) bool {
	text, _ := os.ReadFile(path)
	return strings.HasPrefix(string(text), "record")
}

func (b *bench) Make(_ context.Context, records []string) (others [][]string) {
	b.mu.Lock()
	slow := b.slow
	b.mu.Unlock()
	for _, path := range records {
		text, err := os.ReadFile(path)
		if err != nil {
			text = []byte("unreadable")
		}
		time.Sleep(slow)
		var deps []string
		for _, name := range strings.Fields(string(text))[min(1, len(strings.Fields(string(text)))):] {
			deps = append(deps, filepath.Join(filepath.Dir(path), name))
		}
		others = append(others, deps)
		b.says <- "made " + b.name(path) + ": " + string(text)
	}
	return others
}

func (b *bench) Gone(path string) { b.says <- "gone " + b.name(path) }

func (b *bench) name(path string) string {
	rel, err := filepath.Rel(b.dir, path)
	if err != nil {
		return path
	}
	return filepath.ToSlash(rel)
}

func (b *bench) put(name, text string) {
	b.t.Helper()
	path := filepath.Join(b.dir, name)
	if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
		b.t.Fatal(err)
	}
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		b.t.Fatal(err)
	}
}

func (b *bench) must(err error) {
	b.t.Helper()
	if err != nil {
		b.t.Fatal(err)
	}
}

// want waits for the messages, in any order.
func (b *bench) want(wanted ...string) {
	b.t.Helper()
	if err := await(b.says, 10*time.Second, wanted...); err != nil {
		b.t.Fatal(err)
	}
}

// quiet demands that nothing is said for a while.
func (b *bench) quiet() {
	b.t.Helper()
	select {
	case got := <-b.says:
		b.t.Fatalf("unexpected: %s", got)
	case <-time.After(300 * time.Millisecond):
	}
}

func await(says <-chan string, patience time.Duration, wanted ...string) error {
	for len(wanted) > 0 {
		select {
		case got := <-says:
			i := slices.Index(wanted, got)
			if i < 0 {
				return fmt.Errorf("got %q, want one of %q", got, wanted)
			}
			wanted = slices.Delete(wanted, i, i+1)
		case <-time.After(patience):
			return fmt.Errorf("still waiting for %q", wanted)
		}
	}
	return nil
}

func TestAwaitFails(t *testing.T) {
	says := make(chan string, 1)
	if await(says, time.Millisecond, "made a") == nil {
		t.Error("silence was taken for the message")
	}
	says <- "made b"
	if await(says, time.Second, "made a") == nil {
		t.Error("another message was taken for the one wanted")
	}
}

// start watches the folder as a root, or only the records named.
func start(t *testing.T, opt Options, b *bench, records ...string) {
	t.Helper()
	for i, name := range records {
		records[i] = filepath.Join(b.dir, name)
	}
	if records == nil {
		opt.Roots = []string{b.dir}
	}
	opt.Notice = func(err error) { t.Logf("notice: %v", err) }
	time.Sleep(2 * tick) // the files are older than the watch
	ctx, cancel := context.WithCancel(context.Background())
	ended := make(chan error)
	go func() { ended <- New(opt, records).Run(ctx, b) }()
	t.Cleanup(func() {
		cancel()
		go func() {
			for range b.says { // let a last message go
			}
		}()
		select {
		case err := <-ended:
			if err != nil {
				t.Errorf("the watch ended with %v", err)
			}
		case <-time.After(10 * time.Second):
			t.Error("the watch did not end")
		}
		close(b.says)
	})
}

func bothWays(t *testing.T, test func(t *testing.T, opt Options, b *bench)) {
	for _, poll := range []bool{false, true} {
		t.Run(fmt.Sprintf("poll=%v", poll), func(t *testing.T) {
			t.Parallel()
			b := &bench{t: t, dir: t.TempDir(), says: make(chan string, 100)}
			test(t, Options{Poll: poll, Every: 50 * time.Millisecond}, b)
		})
	}
}

func TestSaves(t *testing.T) {
	bothWays(t, func(t *testing.T, opt Options, b *bench) {
		b.put("a.toml", "record data.csv")
		b.put("data.csv", "1")
		start(t, opt, b, "a.toml")
		b.want("made a.toml: record data.csv")

		b.put("a.toml", "record data.csv more.csv") // saved in place
		b.want("made a.toml: record data.csv more.csv")

		b.put(".a.toml.swp", "record other.csv") // saved by renaming
		b.must(os.Rename(filepath.Join(b.dir, ".a.toml.swp"), filepath.Join(b.dir, "a.toml")))
		b.want("made a.toml: record other.csv")

		b.must(os.Rename(filepath.Join(b.dir, "a.toml"), filepath.Join(b.dir, "a.toml~"))) // moved away, written anew
		b.put("a.toml", "record data.csv")
		b.want("made a.toml: record data.csv")

		b.put("data.csv", "2") // its data
		b.want("made a.toml: record data.csv")

		b.put("other.csv", "not named any more")
		b.put("a.pdf", "an output")
		b.put("b.toml", "record of another")
		b.quiet()
	})
}

func TestBurstIsOneChange(t *testing.T) {
	b := &bench{t: t, dir: t.TempDir(), says: make(chan string, 100)}
	b.put("a.toml", "record")
	start(t, Options{Quiet: time.Second, Most: time.Minute}, b, "a.toml")
	b.want("made a.toml: record")
	for i := range 20 {
		b.put("a.toml", fmt.Sprint("record ", i))
		time.Sleep(2 * time.Millisecond)
	}
	b.want("made a.toml: record 19") // and none of those before
	b.quiet()
}

func TestBurstWithoutEndIsSeen(t *testing.T) {
	b := &bench{t: t, dir: t.TempDir(), says: make(chan string, 1000)}
	b.put("a.toml", "record")
	start(t, Options{Quiet: 50 * time.Millisecond, Most: 200 * time.Millisecond}, b, "a.toml")
	b.want("made a.toml: record")
	deadline := time.Now().Add(10 * time.Second)
	for i := 0; len(b.says) == 0; i++ {
		if time.Now().After(deadline) {
			t.Fatal("a file that is written all the time is never made")
		}
		b.put("a.toml", fmt.Sprint("record ", i))
		time.Sleep(5 * time.Millisecond)
	}
	for len(b.says) > 0 {
		<-b.says
	}
}

func TestEmptyWhileSaved(t *testing.T) {
	b := &bench{t: t, dir: t.TempDir(), says: make(chan string, 100)}
	b.put("a.toml", "record 1")
	start(t, Options{Doubt: 2 * time.Second}, b, "a.toml")
	b.want("made a.toml: record 1")
	b.put("a.toml", "")
	time.Sleep(150 * time.Millisecond)
	b.put("a.toml", "record 2")
	b.want("made a.toml: record 2")
}

func TestEmptyInTheEnd(t *testing.T) {
	bothWays(t, func(t *testing.T, opt Options, b *bench) {
		b.put("a.toml", "record 1")
		start(t, opt, b, "a.toml")
		b.want("made a.toml: record 1")
		b.put("a.toml", "")
		b.want("made a.toml: ")
	})
}

func TestGoneAndBack(t *testing.T) {
	bothWays(t, func(t *testing.T, opt Options, b *bench) {
		b.put("a.toml", "record")
		start(t, opt, b, "a.toml")
		b.want("made a.toml: record")
		b.must(os.Remove(filepath.Join(b.dir, "a.toml")))
		b.want("gone a.toml")
		b.quiet()
		b.put("a.toml", "record again")
		b.want("made a.toml: record again")
	})
}

func TestNewRecordsUnderARoot(t *testing.T) {
	bothWays(t, func(t *testing.T, opt Options, b *bench) {
		b.put("a.toml", "record")
		start(t, opt, b)
		b.want("made a.toml: record")
		b.put("b.toml", "record b")
		b.want("made b.toml: record b")
		b.put("new/deep/c.toml", "record c")
		b.want("made new/deep/c.toml: record c")
		b.put("new/deep/c.toml", "broken")
		b.want("made new/deep/c.toml: broken")
		b.put("settings.toml", "no record")
		b.put(".hidden/d.toml", "record d")
		b.quiet()
	})
}

func TestFolderReplaced(t *testing.T) {
	bothWays(t, func(t *testing.T, opt Options, b *bench) {
		b.put("a.toml", "record data/x.csv")
		start(t, opt, b, "a.toml")
		b.want("made a.toml: record data/x.csv")
		b.put("data/x.csv", "1") // the folder did not exist
		b.want("made a.toml: record data/x.csv")
		b.must(os.RemoveAll(filepath.Join(b.dir, "data")))
		b.want("made a.toml: record data/x.csv")
		b.put("data/x.csv", "2")
		b.want("made a.toml: record data/x.csv")
		b.put("data/x.csv", "3") // is the new folder followed?
		b.want("made a.toml: record data/x.csv")
	})
}

func TestLinkedData(t *testing.T) {
	bothWays(t, func(t *testing.T, opt Options, b *bench) {
		b.put("store/x.csv", "1")
		b.put("records/a.toml", "record x.csv")
		if err := os.Symlink(filepath.Join("..", "store", "x.csv"), filepath.Join(b.dir, "records", "x.csv")); err != nil {
			t.Skip("this file system has no symbolic links")
		}
		start(t, opt, b, "records/a.toml")
		b.want("made records/a.toml: record x.csv")
		b.put("store/x.csv", "22")
		b.want("made records/a.toml: record x.csv")
	})
}

func TestChangeWhileMade(t *testing.T) {
	b := &bench{t: t, dir: t.TempDir(), says: make(chan string, 100), slow: 200 * time.Millisecond}
	b.put("a.toml", "record 1")
	start(t, Options{}, b, "a.toml")
	time.Sleep(100 * time.Millisecond)
	b.put("a.toml", "record 2")
	b.want("made a.toml: record 1", "made a.toml: record 2")
	b.quiet()
}
