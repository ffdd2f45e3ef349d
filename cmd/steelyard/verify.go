package main

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/issued"
	"steelyard/cmd/internal/term"
	"steelyard/protocol/diag"
)

// verifyFlags are the flags of verify.
type verifyFlags struct {
	data, format string
	limit        time.Duration
}

func (a *app) verifyCommand() *cobra.Command {
	var f verifyFlags
	cmd := &cobra.Command{
		Use:   "verify PATH…",
		Short: "Take the record out of its own PDF, compile it again and compare",
		Long: `Verify takes the record, its seal and its data out of each PDF, compiles them
again in memory with this version, and says one of

  reproduced      the same bytes; bytes appended after it, such as a signature,
                  are counted and checked not to change what the pages show
  same numbers    other bytes, as after saving by another program, but the
                  numbers (to nine digits) and words are those of its record
  different       which numbers, verdicts or words, as the file has them and as
                  the record gives them
  not checkable   why, and how to make it so

Nothing beside the PDF is read, unless --data names a folder for the data, or the
record, that the PDF does not carry. A folder means every PDF under it; those
that Steelyard did not write are passed over. Whether the plan came before the
results is for the seal to say, which is shown; compare its digest with what a
witness has.

Exit codes: 0 all reproduced, or of the same numbers; 1 one differs; 2 one is
not checkable or cannot be read.`,
		Example: `  steelyard verify issued/trial.pdf
  steelyard verify issued/
  steelyard verify --data records issued/trial.pdf
  steelyard verify --format json issued/ > verified.json`,
		Args: cobra.MinimumNArgs(1),
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return []string{"pdf"}, cobra.ShellCompDirectiveFilterFileExt
		},
		RunE: func(cmd *cobra.Command, args []string) error { return a.verify(cmd, args, f) },
	}
	cmd.Flags().StringVar(&f.data, "data", "", "folder of what a PDF does not carry")
	cmd.Flags().StringVar(&f.format, "format", "text", "text or json")
	cmd.Flags().DurationVar(&f.limit, "limit", 2*time.Minute, "longest time for compiling one record")
	complete(cmd, "format", []string{"text", "json"})
	if err := cmd.MarkFlagDirname("data"); err != nil {
		panic(err)
	}
	return cmd
}

// maxPDF bounds what is read as a document.
const maxPDF = 256 << 20

// checked is what became of one file.
type checked struct {
	path string
	v    *issued.Verified // nil when the file could not be read
	err  error
}

func (c checked) exit() int {
	switch {
	case c.err != nil:
		return batch.ExitWorld
	case c.v.Finding == issued.Differs:
		return batch.ExitRecord
	case c.v.Finding == issued.NotCheckable:
		return batch.ExitWorld
	}
	return batch.ExitDone
}

func (a *app) verify(cmd *cobra.Command, args []string, f verifyFlags) error {
	if f.format != "text" && f.format != "json" {
		return fmt.Errorf("--format %q: allowed are text, json", f.format)
	}
	opt := issued.Options{Rooms: a.rooms, Limit: f.limit}
	if f.data != "" {
		root, err := os.OpenRoot(f.data)
		if err != nil {
			return worldError{err}
		}
		defer root.Close()
		opt.Folder = root.FS()
	}
	list, listed, err := findPDFs(args)
	if err != nil {
		return worldError{err}
	}
	var all []checked
	code, passed := batch.ExitDone, 0
	err = batch.Ordered(cmd.Context(), len(list), a.workers,
		func(i int) checked { return verifyFile(list[i], opt) },
		func(i int, c checked) {
			if !listed[i] && errors.Is(c.err, issued.ErrNotOurs) {
				passed++
				return
			}
			code = max(code, c.exit())
			all = append(all, c)
			if f.format == "text" {
				a.showVerified(c, len(all) > 1)
			}
		})
	if err != nil {
		a.say.Noticef("interrupted")
		return exit{batch.ExitWorld}
	}
	if f.format == "json" {
		out, err := verifiedJSON(all)
		if err == nil {
			err = a.say.Print(out)
		}
		if err != nil {
			return worldError{err}
		}
	} else {
		a.sayTotals(all, passed)
	}
	if len(all) == 0 {
		return worldError{fmt.Errorf("%s: no PDF here that Steelyard wrote", strings.Join(args, ", "))}
	}
	if code != batch.ExitDone {
		return exit{code}
	}
	return nil
}

func verifyFile(path string, opt issued.Options) checked {
	file, err := readPDF(path)
	if err != nil {
		return checked{path: path, err: err}
	}
	v, err := issued.Verify(file, opt)
	if err != nil {
		err = fmt.Errorf("%s: %w", path, err)
	}
	return checked{path, v, err}
}

// readPDF reads a regular file of bounded size.
func readPDF(path string) ([]byte, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, err
	}
	if !info.Mode().IsRegular() {
		return nil, fmt.Errorf("%s: not a regular file", path)
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	file, err := io.ReadAll(io.LimitReader(f, maxPDF+1))
	if err == nil && len(file) > maxPDF {
		err = fmt.Errorf("%s: larger than %d MiB", path, maxPDF>>20)
	}
	return file, err
}

// findPDFs turns arguments into files: those named, which listed marks, and
// those under a folder, by name. Hidden folders and files are passed over.
func findPDFs(args []string) (list []string, listed []bool, err error) {
	seen := map[string]bool{}
	add := func(path string, named bool) {
		key, err := filepath.Abs(path)
		if err != nil {
			key = path
		}
		if !seen[key] {
			seen[key] = true
			list, listed = append(list, path), append(listed, named)
		}
	}
	for _, arg := range args {
		info, err := os.Stat(arg)
		if err != nil {
			return nil, nil, err
		}
		if !info.IsDir() {
			add(filepath.Clean(arg), true)
			continue
		}
		var under []string
		err = filepath.WalkDir(arg, func(path string, d fs.DirEntry, err error) error {
			switch {
			case err != nil:
				return err
			case path != arg && batch.Hidden(d.Name()):
				if d.IsDir() {
					return filepath.SkipDir
				}
			case !d.IsDir() && strings.EqualFold(filepath.Ext(path), ".pdf"):
				under = append(under, path)
			}
			return nil
		})
		if err != nil {
			return nil, nil, err
		}
		slices.Sort(under)
		for _, path := range under {
			add(path, false)
		}
	}
	return list, listed, nil
}

// showVerified reports on one file.
func (a *app) showVerified(c checked, more bool) {
	if c.err != nil {
		a.trouble(c.err)
		return
	}
	text := verifiedReport(c.path, c.v, a.say.Width)
	if more {
		text = append([]byte("\n"), text...)
	}
	a.say.Print(text)
	if c.v.Finding == issued.Differs && c.v.Compiled != nil && c.v.Compiled.Diagnostics.HasErrors() {
		in := c.v.Compiled
		errors := slices.DeleteFunc(slices.Clone(in.Diagnostics), func(d diag.Diagnostic) bool { return d.Severity != diag.SeverityError })
		list := term.Diagnostics(errors, in.Loaded.Source, c.path+" → "+c.v.Name, false)
		lines := strings.Split(string(list), "\n")
		for i, l := range lines {
			lines[i] = term.Clean(l)
		}
		a.say.PrintErr([]byte(strings.Join(lines, "\n")))
	}
}

// sayTotals counts what became of several files.
func (a *app) sayTotals(all []checked, passed int) {
	if len(all)+passed < 2 {
		return
	}
	counts := map[string]int{}
	var order []string
	for _, c := range all {
		word := "unreadable"
		if c.err == nil {
			word = findingWords(c.v)
		}
		if counts[word]++; counts[word] == 1 {
			order = append(order, word)
		}
	}
	var parts []string
	for _, word := range order {
		parts = append(parts, fmt.Sprintf("%d %s", counts[word], word))
	}
	if passed > 0 {
		parts = append(parts, fmt.Sprintf("%d of other origin passed over", passed))
	}
	a.say.Sayf("\n%s: %s", term.Count(len(all)+passed, "file"), strings.Join(parts, ", "))
}
