package main

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/pipeline"
	"steelyard/cmd/internal/term"
	"steelyard/render/pdf"
	"steelyard/render/text"
)

// compileFlags are the flags of compile; watch has the first three.
type compileFlags struct {
	to     string
	out    string
	strict bool
	print  string
	part   string
	index  bool
}

func (a *app) compileCommand() *cobra.Command {
	var f compileFlags
	cmd := &cobra.Command{
		Use:   "compile PATH…",
		Short: "Compute records and write their documents",
		Long: `Compile computes each record and writes its document beside it. A folder means
every record under it, - a record on standard input. A record with errors
writes nothing and leaves older outputs alone; a PDF that Steelyard did not
write is not overwritten.`,
		Example: `  steelyard compile trial.toml
  steelyard compile trial.toml --to pdf,json,text --out issued
  steelyard compile records/ --strict
  steelyard compile --print text - < trial.toml`,
		Args:              cobra.MinimumNArgs(1),
		ValidArgsFunction: completeRecords,
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.compile(cmd, args, f)
		},
	}
	f.common(cmd)
	cmd.Flags().StringVar(&f.print, "print", "", "write json or text to standard output, and no file")
	cmd.Flags().StringVar(&f.part, "part", "", "I/N: every N-th record, beginning with the I-th")
	cmd.Flags().BoolVar(&f.index, "index", false, "also write index.json: every record with its verdicts and outputs")
	complete(cmd, "print", []string{"json", "text"})
	return cmd
}

// common adds the flags that compile and watch share.
func (f *compileFlags) common(cmd *cobra.Command) {
	cmd.Flags().StringVar(&f.to, "to", "pdf", "what to write: pdf, json, text, separated by commas")
	cmd.Flags().StringVar(&f.out, "out", "", "folder for the outputs, made where it is missing (default: beside each record)")
	cmd.Flags().BoolVar(&f.strict, "strict", false, "warnings count as errors")
	completeList(cmd, "to", pipeline.Forms)
	if err := cmd.MarkFlagDirname("out"); err != nil {
		panic(err)
	}
}

// forms reads --to.
func (f *compileFlags) forms() ([]pipeline.Form, error) {
	var forms []pipeline.Form
	for _, word := range strings.Split(f.to, ",") {
		form, ok := pipeline.FormOf(strings.TrimSpace(word))
		if !ok {
			return nil, fmt.Errorf("--to %q: allowed are %s", word, strings.Join(pipeline.Forms, ", "))
		}
		if !slices.Contains(forms, form) {
			forms = append(forms, form)
		}
	}
	return forms, nil
}

// worker puts the flags into what is done with each record.
func (a *app) worker(f compileFlags) (batch.Worker, error) {
	forms, err := f.forms()
	w := batch.Worker{
		Rooms: a.rooms, Forms: forms, Out: f.out, Strict: f.strict, Stdin: a.in,
		Text: text.Options{Width: a.say.Width}, OwnPDF: pdf.WrittenBySteelyard, Now: a.now,
	}
	return w, err
}

func (a *app) compile(cmd *cobra.Command, args []string, f compileFlags) error {
	w, err := a.worker(f)
	if err != nil {
		return err
	}
	if f.print != "" {
		form, ok := pipeline.FormOf(f.print)
		if !ok || form == pipeline.PDF {
			return fmt.Errorf("--print %q: allowed are json, text", f.print)
		}
		if cmd.Flags().Changed("to") || f.out != "" || f.index {
			return errors.New("--print writes no file: it goes without --to, --out and --index")
		}
		w.Print, w.Forms, w.Text.Color = &form, nil, a.say.OutColor()
	}
	list, err := a.find(args, f.part)
	if err != nil {
		return err
	}
	if w.Print == nil {
		if slices.ContainsFunc(list, func(r batch.Found) bool { return r.Path == batch.Stdin }) {
			return errors.New("a record on standard input has no folder for outputs: use --print json or --print text")
		}
		if err := w.Clash(list); err != nil {
			return fmt.Errorf("%w: compile them apart, or with their folder as the one PATH", err)
		}
	}
	if !f.index {
		return a.each(cmd, w, list, a.showCompiled)
	}
	var x index
	dir := indexFolder(f.out, args)
	if err := indexClash(w, list, dir); err != nil {
		return err
	}
	failed := a.each(cmd, w, list, func(w batch.Worker, r batch.Report) error {
		x.add(dir, r)
		return a.showCompiled(w, r)
	})
	path, err := x.write(dir)
	if err != nil {
		return worldError{err}
	}
	a.say.Sayf("%s: index of %s", path, term.Count(len(x.Records), "record"))
	return failed
}

// find turns arguments and --part into records.
func (a *app) find(args []string, part string) ([]batch.Found, error) {
	i, n := 1, 1
	if part != "" {
		first, second, ok := strings.Cut(part, "/")
		var err1, err2 error
		i, err1 = strconv.Atoi(first)
		n, err2 = strconv.Atoi(second)
		if !ok || err1 != nil || err2 != nil || i < 1 || n < i {
			return nil, fmt.Errorf("--part %q: write I/N with 1 ≤ I ≤ N, as in 2/5", part)
		}
	}
	list, err := batch.Find(args)
	if err != nil {
		return nil, worldError{err}
	}
	return batch.Part(list, i, n), nil
}

// each does the work on every record, several at once, shows the reports in
// order, and returns the highest exit code. What cannot be shown counts as an
// output that cannot be written.
func (a *app) each(cmd *cobra.Command, w batch.Worker, list []batch.Found, show func(batch.Worker, batch.Report) error) error {
	code := batch.ExitDone
	err := batch.Ordered(cmd.Context(), len(list), a.workers,
		func(i int) batch.Report { return w.Do(list[i]) },
		func(i int, r batch.Report) {
			defer a.say.Progress(i+1, len(list))
			code = max(code, r.Exit(w.Strict))
			if err := show(w, r); err != nil {
				a.say.Trouble(err)
				code = batch.ExitWorld
			}
		})
	if err != nil {
		a.say.Noticef("interrupted")
		return exit{batch.ExitWorld}
	}
	if code != batch.ExitDone {
		return exit{code}
	}
	return nil
}

// showCompiled reports on one record: what it prints, or one line.
func (a *app) showCompiled(w batch.Worker, r batch.Report) error {
	if r.Compiled != nil {
		list := r.Compiled.Diagnostics
		a.say.PrintErr(term.Diagnostics(list, r.Compiled.Loaded.Source, shownPath(r.Record), a.say.ErrColor()))
	}
	if r.Printed != nil {
		if err := a.say.Print(r.Printed); err != nil {
			return err
		}
	}
	if r.Err != nil {
		a.trouble(r.Err)
		return nil
	}
	if line := outcome(r, w.Strict, true); w.Print == nil {
		a.say.Sayf("%s: %s", shownPath(r.Record), line)
	} else if a.say.ErrTerminal {
		a.say.Noticef("%s: %s", shownPath(r.Record), line)
	}
	return nil
}

// trouble reports a fault of the world, or of the program with the place
// where it happened.
func (a *app) trouble(err error) {
	a.say.Trouble(err)
	var fault *pipeline.Fault
	if errors.As(err, &fault) && a.getenv("STEELYARD_TRACE") != "" {
		a.say.PrintErr(fault.Stack)
	}
}
