package watch

import (
	"path/filepath"
	"slices"
	"sync"
	"time"

	"github.com/fsnotify/fsnotify"
)

// batch is what happened until it was quiet.
type batch struct {
	paths      []string
	everything bool // too much, or unknown: look everywhere
}

// source tells that something may have changed.
type source interface {
	// follow replaces the folders that are followed; dirs are sorted. It
	// reports whether there are more than before.
	follow(dirs []string) (more bool, err error)
	changes() <-chan batch
	close()
}

// events are the notices of the operating system, gathered until it is quiet.
type events struct {
	notify *fsnotify.Watcher
	out    chan batch
	stop   chan struct{}
	done   sync.WaitGroup
	quiet  time.Duration
	most   time.Duration
}

func newEvents(quiet, most time.Duration) (*events, error) {
	notify, err := fsnotify.NewWatcher()
	if err != nil {
		return nil, err
	}
	e := &events{notify: notify, out: make(chan batch), stop: make(chan struct{}), quiet: quiet, most: most}
	e.done.Go(e.gather)
	return e, nil
}

func (e *events) changes() <-chan batch { return e.out }

func (e *events) close() {
	close(e.stop)
	e.notify.Close()
	e.done.Wait()
}

func (e *events) follow(dirs []string) (more bool, err error) {
	now := e.notify.WatchList()
	for _, dir := range now {
		if _, wanted := slices.BinarySearch(dirs, dir); !wanted {
			e.notify.Remove(dir) // may be gone already
		}
	}
	slices.Sort(now)
	for _, dir := range dirs {
		// Adding again is how a folder that was replaced is followed again.
		if err := e.notify.Add(dir); err != nil && existing(dir) == dir {
			return more, err
		}
		if _, known := slices.BinarySearch(now, dir); !known {
			more = true
		}
	}
	return more, nil
}

// gather collects notices and hands them over when none has come for a while,
// or when waiting has become too long. While the receiver is busy it goes on
// collecting.
func (e *events) gather() {
	var b batch
	seen := map[string]bool{}
	var first time.Time
	timer := time.NewTimer(time.Hour)
	timer.Stop()
	var ready chan batch // nil until it is quiet
	for {
		select {
		case <-e.stop:
			return
		case ev, ok := <-e.notify.Events:
			if !ok {
				return
			}
			if ev.Op == fsnotify.Chmod {
				continue
			}
			if name := filepath.Clean(ev.Name); !seen[name] {
				seen[name] = true
				b.paths = append(b.paths, name)
			}
		case _, ok := <-e.notify.Errors:
			if !ok {
				return
			}
			b.everything = true // notices were lost
		case <-timer.C:
			ready = e.out
			continue
		case ready <- b:
			b, seen, ready, first = batch{}, map[string]bool{}, nil, time.Time{}
			continue
		}
		now := time.Now()
		if first.IsZero() {
			first = now
		}
		ready = nil
		timer.Reset(max(0, min(e.quiet, e.most-now.Sub(first))))
	}
}

// poll looks at everything at regular times.
type poll struct {
	out    chan batch
	ticker *time.Ticker
	stop   chan struct{}
	done   sync.WaitGroup
}

func newPoll(every time.Duration) *poll {
	p := &poll{out: make(chan batch), ticker: time.NewTicker(every), stop: make(chan struct{})}
	p.done.Go(func() {
		for {
			select {
			case <-p.stop:
				return
			case <-p.ticker.C:
			}
			select {
			case <-p.stop:
				return
			case p.out <- batch{everything: true}:
			}
		}
	})
	return p
}

func (p *poll) follow([]string) (more bool, err error) { return false, nil }

func (p *poll) changes() <-chan batch { return p.out }

func (p *poll) close() {
	close(p.stop)
	p.ticker.Stop()
	p.done.Wait()
}
