package watch

import (
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// folders lists the folders in which something could happen: those of the
// records and of the files they depend on, of the files that links lead to,
// and all under the roots. Of a folder that is not there the nearest one
// above it is taken, where its return will show.
func (w *Watcher) folders() []string {
	set := map[string]bool{}
	add := func(path string) {
		set[existing(filepath.Dir(path))] = true
		if real, err := filepath.EvalSymlinks(path); err == nil {
			set[filepath.Dir(real)] = true
		}
	}
	for _, r := range w.records {
		add(r.path)
		for _, path := range r.others {
			add(path)
		}
	}
	for _, root := range w.opt.Roots {
		set[existing(root)] = true
		filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
			if err != nil || !d.IsDir() {
				return nil
			}
			if path != root && hidden(d.Name()) {
				return filepath.SkipDir
			}
			set[path] = true
			return nil
		})
	}
	list := make([]string, 0, len(set))
	for dir := range set {
		list = append(list, dir)
	}
	slices.Sort(list)
	return list
}

// existing is the folder, or the nearest one above it that is there.
func existing(dir string) string {
	for {
		if info, err := os.Stat(dir); err == nil && info.IsDir() {
			return dir
		}
		up := filepath.Dir(dir)
		if up == dir {
			return dir
		}
		dir = up
	}
}

// hidden reports whether any part of a path is hidden.
func hidden(path string) bool {
	for _, part := range strings.Split(filepath.ToSlash(path), "/") {
		if strings.HasPrefix(part, ".") && part != "." && part != ".." {
			return true
		}
	}
	return false
}
