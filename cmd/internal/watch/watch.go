// Package watch notices that records, or the files they depend on, changed on
// the disk, and says which records are to be made again. It watches folders,
// not files, so that editors that save by renaming are seen; waits for quiet,
// so that a burst is one change; and believes the disk, not the events. It
// refuses to know what a record is, how it is compiled, or what is printed.
//
//	w, err := watch.New(watch.Options{Roots: []string{"records"}})
//	err = w.Run(ctx, handler)
package watch

import (
	"context"
	"crypto/sha256"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"time"
)

// Options say what is watched, and how patiently.
type Options struct {
	Roots []string      // folders in which new records are looked for
	Poll  bool          // look regularly instead of waiting for events
	Every time.Duration // between looks; default 300 ms
	Quiet time.Duration // without events before a change is believed; default 30 ms
	Most  time.Duration // longest wait for quiet; default 500 ms
	Doubt time.Duration // before an empty or absent record is believed; default 200 ms

	// Notice is told when events cannot be had and polling takes their place.
	Notice func(err error)
}

// Handler is what the caller does.
type Handler interface {
	// Find lists the records under a folder, passing over what is hidden.
	Find(dir string) []string
	// IsRecord reports whether a new file is a record.
	IsRecord(path string) bool
	// Make makes records and returns, for each, the paths of the other files
	// it depends on.
	Make(ctx context.Context, records []string) [][]string
	// Gone is told, once, of a record that is no longer there. Its outputs
	// stay.
	Gone(record string)
}

// Watcher watches a set of records.
type Watcher struct {
	opt     Options
	records []*record // in the order they were found
}

// record is what is known of one record when it was last made.
type record struct {
	path   string
	others []string // files it depends on
	seen   map[string]state
	absent bool
	doubt  time.Time // since when it is empty or absent; zero: it is not
}

// state is what the disk says of one file. Two writes can bear the same time,
// so that of a file written a moment ago the digest is kept too.
type state struct {
	info fs.FileInfo // nil: absent
	size int64
	sum  [32]byte
}

// New makes a watcher of the records, all of which are taken as changed.
func New(opt Options, records []string) *Watcher {
	set := func(d *time.Duration, to time.Duration) {
		if *d == 0 {
			*d = to
		}
	}
	set(&opt.Every, 300*time.Millisecond)
	set(&opt.Quiet, 30*time.Millisecond)
	set(&opt.Most, 500*time.Millisecond)
	set(&opt.Doubt, 200*time.Millisecond)
	w := &Watcher{opt: opt}
	for _, path := range records {
		w.add(path)
	}
	return w
}

func (w *Watcher) add(path string) {
	path = filepath.Clean(path)
	if !slices.ContainsFunc(w.records, func(r *record) bool { return r.path == path }) {
		w.records = append(w.records, &record{path: path})
	}
}

// Run makes every record and then makes again what changes, until ctx ends,
// which is no error.
func (w *Watcher) Run(ctx context.Context, h Handler) error {
	src := w.source()
	defer func() { src.close() }()
	follow := func() (more bool) {
		more, err := src.follow(w.folders())
		if err != nil {
			if w.opt.Notice != nil {
				w.opt.Notice(err)
			}
			src.close()
			src = newPoll(w.opt.Every)
		}
		return more
	}
	// A folder is followed before it is looked into, so that nothing appears
	// unseen in between.
	follow()
	w.discover(h, batch{everything: true})
	list := slices.Clone(w.records)
	for {
		w.make(ctx, h, list)
		if ctx.Err() != nil {
			return nil
		}
		d, again := w.doubtful()
		if follow() && (!again || w.opt.Quiet < d) {
			d, again = w.opt.Quiet, true // what happened there before it was followed
		}
		var wait <-chan time.Time
		if again {
			wait = time.After(d)
		}
		select {
		case <-ctx.Done():
			return nil
		case b := <-src.changes():
			follow()
			w.discover(h, b)
		case <-wait:
		}
		list = w.changed(h)
	}
}

// source says where changes come from: events, or regular looks.
func (w *Watcher) source() source {
	if !w.opt.Poll {
		src, err := newEvents(w.opt.Quiet, w.opt.Most)
		if err == nil {
			return src
		}
		if w.opt.Notice != nil {
			w.opt.Notice(err)
		}
	}
	return newPoll(w.opt.Every)
}

// make makes records. Their state is taken before, so that a change while
// they are made is not lost. The state of a file that is named for the first
// time can only be taken afterwards; one written meanwhile counts as changed.
func (w *Watcher) make(ctx context.Context, h Handler, list []*record) {
	if len(list) == 0 {
		return
	}
	start := time.Now().Add(-tick)
	paths := make([]string, len(list))
	for i, r := range list {
		paths[i] = r.path
		r.seen = r.look()
	}
	for i, others := range h.Make(ctx, paths) {
		r := list[i]
		r.others = others
		for _, path := range others {
			if _, known := r.seen[path]; known {
				continue
			}
			if s := look(path, state{}); s.info == nil || s.info.ModTime().Before(start) {
				r.seen[path] = s
			}
		}
	}
}

// look is the present state of all that the record depends on.
func (r *record) look() map[string]state {
	now := map[string]state{r.path: look(r.path, r.seen[r.path])}
	for _, path := range r.others {
		now[path] = look(path, r.seen[path])
	}
	return now
}

// Times of files are trusted when they are older than coarse; of a younger
// file, unless it is huge, the contents are compared. A file may bear a time
// that lies up to a tick before it was written.
const (
	coarse = 3 * time.Second
	huge   = 64 << 20
	tick   = 10 * time.Millisecond
)

// look is the present state of a file, whose contents are not read again when
// its time alone shows that it is as before.
func look(path string, before state) state {
	info, err := os.Stat(path)
	if err != nil || info.IsDir() {
		return state{}
	}
	s := state{info: info, size: info.Size(), sum: before.sum}
	if !info.Mode().IsRegular() || info.Size() > huge || same(s, before) && time.Since(info.ModTime()) > coarse {
		return s
	}
	f, err := os.Open(path)
	if err != nil {
		return s
	}
	defer f.Close()
	sum := sha256.New()
	n, err := io.Copy(sum, f)
	if err != nil {
		return s
	}
	s.size, s.sum = n, [32]byte(sum.Sum(nil)) // as read: it may just have been cut
	return s
}

func same(a, b state) bool {
	if a.info == nil || b.info == nil {
		return a.info == nil && b.info == nil
	}
	return os.SameFile(a.info, b.info) && a.size == b.size &&
		a.info.ModTime().Equal(b.info.ModTime()) && a.sum == b.sum
}

// changed lists the records to be made again. One that is suddenly empty or
// absent is in the middle of being saved, perhaps: it is doubted for a while.
func (w *Watcher) changed(h Handler) (list []*record) {
	for _, r := range w.records {
		now := r.look()
		differs := false
		for path, s := range now {
			differs = differs || !same(s, r.seen[path])
		}
		self := now[r.path]
		blank := self.info == nil || self.size == 0
		switch {
		case !blank:
			r.doubt = time.Time{}
		case !differs || r.absent && self.info == nil:
			continue
		case r.doubt.IsZero():
			r.doubt = time.Now()
			continue
		case time.Since(r.doubt) < w.opt.Doubt:
			continue
		}
		switch {
		case self.info == nil:
			r.doubt, r.absent, r.seen = time.Time{}, true, now
			h.Gone(r.path)
		case differs || r.absent:
			r.doubt, r.absent = time.Time{}, false
			list = append(list, r)
		}
	}
	return list
}

// doubtful is how long until the first doubt ends.
func (w *Watcher) doubtful() (d time.Duration, any bool) {
	for _, r := range w.records {
		if r.doubt.IsZero() {
			continue
		}
		left := max(0, w.opt.Doubt-time.Since(r.doubt)) + time.Millisecond
		if !any || left < d {
			d, any = left, true
		}
	}
	return d, any
}

// discover adds records that are new under the roots.
func (w *Watcher) discover(h Handler, b batch) {
	if b.everything {
		for _, root := range w.opt.Roots {
			w.scan(h, root)
		}
		return
	}
	for _, path := range b.paths {
		if !w.under(path) {
			continue
		}
		info, err := os.Stat(path)
		switch {
		case err != nil:
		case info.IsDir():
			w.scan(h, path)
		case filepath.Ext(path) == ".toml" && h.IsRecord(path):
			w.add(path)
		}
	}
}

func (w *Watcher) scan(h Handler, dir string) {
	for _, path := range h.Find(dir) {
		w.add(path)
	}
}

// under reports whether a path lies under a root, in no hidden folder.
func (w *Watcher) under(path string) bool {
	for _, root := range w.opt.Roots {
		rel, err := filepath.Rel(root, path)
		if err == nil && filepath.IsLocal(rel) && !hidden(rel) {
			return true
		}
	}
	return false
}
