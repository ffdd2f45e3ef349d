package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"reflect"
	"time"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/outfile"
	"steelyard/cmd/internal/pipeline"
	"steelyard/cmd/internal/stamp"
	"steelyard/cmd/internal/term"
	"steelyard/cmd/internal/version"
	"steelyard/protocol/seal"
)

// sealWait is how long a seal waits for another one of the same record.
const sealWait = 2 * time.Second

func (a *app) sealCommand() *cobra.Command {
	var request string
	cmd := &cobra.Command{
		Use:   "seal FILE",
		Short: "Seal the plan of a record, with the results known so far",
		Long: `Seal adds an entry to the chain beside the record, NAME.seal: the plan as it
stands, the digests of every result, deviation and data file now known, and the
time. Comments, order and layout of the record do not matter to it. Sealing
again erases nothing: what changed stays listed, and every compile compares the
record with the chain. Keep the chain with the record and never edit it.

The time is that of the clock, or of SOURCE_DATE_EPOCH where it is set. A seal
shows what was promised; when it was promised shows only somebody outside who
saw its digest: see [[witness]] in a record. --request writes the request that a
time-stamping authority answers (RFC 3161) to a file. Nothing is sent anywhere.

Exit codes: 0 sealed, or nothing had changed; 1 the record or its chain has
errors; 2 it cannot be read or written.`,
		Example: `  steelyard seal trial.toml                       writes or extends trial.seal
  steelyard seal trial.toml --request trial.tsq   for a time-stamping authority`,
		Args: cobra.ExactArgs(1),
		ValidArgsFunction: func(_ *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
			if len(args) > 0 {
				return nil, cobra.ShellCompDirectiveNoFileComp
			}
			return []string{"toml"}, cobra.ShellCompDirectiveFilterFileExt
		},
		RunE: func(_ *cobra.Command, args []string) error { return a.seal(args[0], request) },
	}
	cmd.Flags().StringVar(&request, "request", "", "write an RFC 3161 request for the seal to this file")
	if err := cmd.MarkFlagFilename("request", "tsq"); err != nil {
		panic(err)
	}
	return cmd
}

func (a *app) seal(path, request string) error {
	if path == batch.Stdin {
		return errors.New("a record on standard input has no chain beside it: name a file")
	}
	path = filepath.Clean(path)
	if info, err := os.Stat(path); err != nil {
		return worldError{err}
	} else if info.IsDir() {
		return fmt.Errorf("%s: a folder; seal takes one record at a time", path)
	}
	now, err := a.today()
	if err != nil {
		return err
	}
	if err := requestFree(request); err != nil {
		return worldError{err}
	}
	file := batch.SealOf(path)
	unlock, err := outfile.Lock(file, sealWait)
	if held := (*outfile.HeldError)(nil); errors.As(err, &held) {
		a.say.Trouble(held)
		a.say.PrintErr([]byte("  help: wait for it; if none is running, an earlier one was cut short and the\n" +
			"        chain is as it was before or after it: remove " + held.Lock + "\n        and seal again\n"))
		return exit{batch.ExitWorld}
	}
	if err != nil {
		return worldError{err}
	}
	defer unlock()
	made, err := a.sealLocked(path, file, now)
	if err != nil {
		return err
	}
	a.say.Print(sealReport(made, a.say.Width))
	return a.writeRequest(request, made.entry, file)
}

// sealed is what sealing came to.
type sealed struct {
	path, file string
	compiled   *pipeline.Compiled
	entry      *seal.Entry // new, or the last one where nothing had changed
	before     *seal.Entry // the one before it; nil for the first
	state      *seal.State // of the record with the new chain
	unchanged  bool
}

// sealLocked reads record and chain, checks both and writes the longer chain.
func (a *app) sealLocked(path, file string, now time.Time) (*sealed, error) {
	in, done, err := batch.Worker{Stdin: a.in}.Open(batch.FoundIn(filepath.Dir(path), path))
	if err != nil {
		return nil, worldError{err}
	}
	defer done()
	c, err := a.rooms.Check(in)
	if err != nil {
		a.trouble(fmt.Errorf("%s: %w", path, err))
		return nil, exit{batch.ExitWorld}
	}
	if c.Failed(false) {
		a.say.PrintErr(term.Diagnostics(c.Diagnostics, c.Loaded.Source, path, a.say.ErrColor()))
		a.say.Sayf("%s: %s, not sealed", path, term.Summary(c.Diagnostics))
		return nil, exit{batch.ExitRecord}
	}
	rec, tables := c.Loaded.Record, c.Loaded.Tables
	made := &sealed{path: path, file: file, compiled: c}
	chain, _ := seal.Parse(filepath.Base(file), in.Seal) // faults are among those of the check
	entry := seal.New(rec, tables, version.Version, now)
	if last := chain.Last(); last != nil && sameSeal(*last, entry) {
		made.entry, made.state, made.unchanged = last, c.Loaded.Seal, true
		return made, nil
	}
	longer, added, err := seal.Append(in.Seal, entry)
	if err != nil {
		return nil, worldError{fmt.Errorf("%s: not sealed: %w", file, err)}
	}
	if err := outfile.Swap(file, in.Seal, longer); err != nil {
		return nil, worldError{fmt.Errorf("%w; the chain is as it was", err)}
	}
	made.entry, made.before = added, chain.Last()
	chain, _ = seal.Parse(filepath.Base(file), longer)
	made.state, _ = seal.Compare(rec, tables, chain)
	return made, nil
}

// sameSeal reports whether a new entry would say nothing that the last one
// does not.
func sameSeal(last, entry seal.Entry) bool {
	same := func(a, b any) bool {
		x, y := reflect.ValueOf(a), reflect.ValueOf(b)
		return x.Len() == 0 && y.Len() == 0 || reflect.DeepEqual(a, b)
	}
	return last.Engine == entry.Engine && last.Record == entry.Record && last.Plan == entry.Plan &&
		same(last.Defaults, entry.Defaults) && same(last.Results, entry.Results) &&
		same(last.Deviations, entry.Deviations) && same(last.Files, entry.Files)
}

// requestFree refuses to write a request over anything but an older request.
func requestFree(path string) error {
	if path == "" {
		return nil
	}
	if _, err := os.Stat(filepath.Dir(path)); err != nil {
		return err
	}
	f, err := os.Open(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return err
	}
	defer f.Close()
	der, err := io.ReadAll(io.LimitReader(f, 1<<10))
	if err != nil {
		return err
	}
	if len(bytes.TrimSpace(der)) > 0 && !stamp.IsRequest(der) {
		return fmt.Errorf("%s: not overwritten: a file that is no request; move it, or choose another name", path)
	}
	return nil
}

func (a *app) writeRequest(path string, e *seal.Entry, file string) error {
	if path == "" {
		return nil
	}
	der, err := stamp.Request(e.Sum)
	if err == nil {
		err = outfile.Write(path, der, nil)
	}
	if err != nil {
		return worldError{fmt.Errorf("seal %d stands in %s, but its request does not: %w; run the same command again", e.Number, file, err)}
	}
	a.say.Sayf("%s: request for the digest of seal %d; send it yourself, keep the reply as\n  token = \"…\" of the [[witness]]", path, e.Number)
	return nil
}
