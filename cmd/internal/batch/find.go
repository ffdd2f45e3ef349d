package batch

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
)

// Stdin is the argument that means a record on standard input.
const Stdin = "-"

// Found is one record to work on.
type Found struct {
	Path string // as the user would call it; Stdin for standard input
	Base string // where its outputs go without --out: Path without .toml
	Rel  string // the same below the folder it was found in, for --out
}

// FoundIn is the record of a path that was found in a folder.
func FoundIn(dir, path string) Found {
	rel, err := filepath.Rel(dir, path)
	if err != nil {
		rel = filepath.Base(path)
	}
	return Found{Path: path, Base: trimTOML(path), Rel: trimTOML(rel)}
}

// Find turns the arguments into records, in the order of the arguments and
// within a folder by name. A folder means every record under it; hidden
// folders are passed over. The same file is taken once. An argument under
// which there is no record is an error, because silence would look like
// success.
func Find(args []string) ([]Found, error) {
	var list []Found
	seen := map[string]bool{}
	add := func(rec Found) {
		key, err := filepath.Abs(rec.Path)
		if err != nil || rec.Path == Stdin {
			key = rec.Path
		}
		if !seen[key] {
			seen[key] = true
			list = append(list, rec)
		}
	}
	for _, arg := range args {
		if arg == Stdin {
			add(Found{Path: Stdin})
			continue
		}
		info, err := os.Stat(arg)
		if err != nil {
			return nil, err
		}
		if !info.IsDir() {
			add(FoundIn(filepath.Dir(arg), filepath.Clean(arg)))
			continue
		}
		records, err := Under(arg)
		if err != nil {
			return nil, err
		}
		if len(records) == 0 {
			return nil, fmt.Errorf("%s: no record under this folder (a record is a .toml file whose first key is steelyard = 1)", arg)
		}
		for _, path := range records {
			add(FoundIn(arg, path))
		}
	}
	return list, nil
}

// Under lists the records under a folder, by name.
func Under(dir string) ([]string, error) {
	var list []string
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			if errors.Is(err, fs.ErrNotExist) && path != dir {
				return nil // gone since the folder was read
			}
			return err
		}
		if d.IsDir() {
			if path != dir && Hidden(d.Name()) {
				return filepath.SkipDir
			}
			return nil
		}
		if filepath.Ext(path) == ".toml" && !Hidden(d.Name()) && IsRecord(path) {
			list = append(list, path)
		}
		return nil
	})
	slices.Sort(list)
	return list, err
}

// Hidden reports whether a file or folder is passed over in searches.
func Hidden(name string) bool { return strings.HasPrefix(name, ".") && name != "." && name != ".." }

var firstKey = regexp.MustCompile(`^(steelyard|"steelyard"|'steelyard')[ \t]*=`)

// sniffed is how far into a file its first key is looked for.
const sniffed = 1 << 20

// IsRecord reports whether the first key of a file is `steelyard`. Whether
// the rest is a record is for reading to say. A file that may not be read
// counts as one: whoever reads it reports it, so that nothing is passed over.
func IsRecord(path string) bool {
	info, err := os.Stat(path)
	if err != nil || !info.Mode().IsRegular() {
		return false
	}
	f, err := os.Open(path)
	if err != nil {
		return errors.Is(err, fs.ErrPermission)
	}
	defer f.Close()
	return startsRecord(f)
}

func startsRecord(r io.Reader) bool {
	lines := bufio.NewReader(io.LimitReader(r, sniffed))
	for first := true; ; first = false {
		line, err := lines.ReadBytes('\n')
		if first {
			line = bytes.TrimPrefix(line, []byte("\ufeff"))
		}
		line = bytes.TrimLeft(line, " \t\r\n")
		if len(line) > 0 && line[0] != '#' {
			return firstKey.Match(line)
		}
		if err != nil {
			return false
		}
	}
}

func trimTOML(path string) string { return strings.TrimSuffix(path, ".toml") }

// Part keeps every n-th record beginning with the i-th, both from 1: the
// parts 1/n … n/n share the work among machines.
func Part(list []Found, i, n int) []Found {
	var part []Found
	for k := i - 1; k < len(list); k += n {
		part = append(part, list[k])
	}
	return part
}
