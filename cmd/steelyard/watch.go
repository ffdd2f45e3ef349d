package main

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/term"
	"steelyard/cmd/internal/watch"
)

func (a *app) watchCommand() *cobra.Command {
	var f compileFlags
	var poll bool
	cmd := &cobra.Command{
		Use:   "watch PATH…",
		Short: "Compile records whenever they, their seals or their data change",
		Long: `Watch compiles each record and then again whenever the record, its seal or a data
file changes, and prints one line each time. Under a folder it also finds new
records. While a record has errors they are shown, and its older outputs stay.
Ctrl-C ends it.`,
		Example: `  steelyard watch trial.toml
  steelyard watch records/ --to pdf,json --out issued
  steelyard watch share/records --poll`,
		Args:              cobra.MinimumNArgs(1),
		ValidArgsFunction: completeRecords,
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.watch(cmd, args, f, poll)
		},
	}
	f.common(cmd)
	cmd.Flags().BoolVar(&poll, "poll", false, "look regularly; for network folders, which send no notices of changes")
	return cmd
}

func (a *app) watch(cmd *cobra.Command, args []string, f compileFlags, poll bool) error {
	w, err := a.worker(f)
	if err != nil {
		return err
	}
	h := &handler{app: a, worker: w, found: map[string]batch.Found{}}
	var records []string
	for _, arg := range args {
		if arg == batch.Stdin {
			return fmt.Errorf("standard input cannot be watched")
		}
		info, err := os.Stat(arg)
		if err != nil {
			return worldError{err}
		}
		arg = filepath.Clean(arg)
		if info.IsDir() {
			h.roots = append(h.roots, arg)
			continue
		}
		rec := batch.FoundIn(filepath.Dir(arg), arg)
		h.found[arg] = rec
		records = append(records, arg)
	}
	opt := watch.Options{Roots: h.roots, Poll: poll, Notice: func(err error) {
		a.say.Noticef("no notices of changes here (%v); looking regularly instead", err)
	}}
	a.say.Noticef("watching %s; Ctrl-C ends", strings.Join(args, ", "))
	if err := watch.New(opt, records).Run(cmd.Context(), h); err != nil {
		return worldError{err}
	}
	a.say.Noticef("stopped")
	return nil
}

// handler makes records for a watch.
type handler struct {
	*app
	worker batch.Worker
	roots  []string
	found  map[string]batch.Found
}

// Find lists the records under a folder.
func (h *handler) Find(dir string) []string {
	list, err := batch.Under(dir)
	if err != nil {
		h.say.Trouble(err)
	}
	return list
}

// IsRecord reports whether a new file is a record.
func (h *handler) IsRecord(path string) bool {
	return !batch.Hidden(filepath.Base(path)) && batch.IsRecord(path)
}

// Gone tells of a record that is no longer there.
func (h *handler) Gone(path string) {
	h.line(path, "gone; its outputs stay")
}

func (h *handler) line(path, what string) {
	h.say.Sayf("%s  %s: %s", h.now().Format("15:04:05"), path, what)
}

// Make compiles records and shows one line for each.
func (h *handler) Make(ctx context.Context, paths []string) [][]string {
	others := make([][]string, len(paths))
	list := make([]batch.Found, len(paths))
	for i, path := range paths {
		list[i] = h.record(path)
		others[i] = []string{batch.SealOf(path)}
	}
	work := func(i int) batch.Report {
		if err := h.clash(list[i]); err != nil {
			return batch.Report{Record: list[i], Err: err}
		}
		return h.worker.Do(list[i])
	}
	// That the work was cut short is seen in ctx by the caller.
	_ = batch.Ordered(ctx, len(list), h.workers, work, func(i int, r batch.Report) {
		if r.Compiled != nil {
			for _, name := range r.Compiled.Files() {
				if name = filepath.FromSlash(name); filepath.IsLocal(name) {
					others[i] = append(others[i], filepath.Join(filepath.Dir(paths[i]), name))
				}
			}
		}
		h.show(r)
	})
	return others
}

// show prints the line of one record and its diagnostics below.
func (h *handler) show(r batch.Report) {
	if r.Err != nil {
		h.line(r.Record.Path, "not compiled")
		h.trouble(r.Err)
		return
	}
	h.line(r.Record.Path, outcome(r, h.worker.Strict, false))
	c := r.Compiled
	h.say.PrintErr(term.Diagnostics(c.Diagnostics, c.Loaded.Source, r.Record.Path, h.say.ErrColor()))
}

// record is the record of a path, which may be new under one of the roots.
func (h *handler) record(path string) batch.Found {
	rec, ok := h.found[path]
	if ok {
		return rec
	}
	rec = batch.FoundIn(filepath.Dir(path), path)
	for _, root := range h.roots {
		if rel, err := filepath.Rel(root, path); err == nil && filepath.IsLocal(rel) {
			rec = batch.FoundIn(root, path)
			break
		}
	}
	h.found[path] = rec
	return rec
}

// clash finds another record that writes the same outputs.
func (h *handler) clash(rec batch.Found) error {
	if h.worker.Out == "" {
		return nil // beside the record, and the names of records differ
	}
	for _, other := range h.found {
		if other.Path != rec.Path && other.Rel == rec.Rel {
			return h.worker.Clash([]batch.Found{other, rec})
		}
	}
	return nil
}
