package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/outfile"
	"steelyard/cmd/internal/term"
	"steelyard/cmd/internal/version"
	"steelyard/protocol/seal"
)

func (a *app) sealCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "seal FILE",
		Short: "Add an entry to the chain that shows when the plan stood",
		Long: `Seal adds an entry to the chain beside the record: the plan as it stands, the
digests of every result, deviation and data file now known, and the time. The
file is kept with the record and never edited. Sealing again erases nothing.
The time is that of the clock, or of SOURCE_DATE_EPOCH where it is set. A seal
proves an order only as far as the file itself is kept safe.`,
		Example: `  steelyard seal trial.toml      writes trial.seal, or adds to it`,
		Args:    cobra.ExactArgs(1),
		ValidArgsFunction: func(_ *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
			if len(args) > 0 {
				return nil, cobra.ShellCompDirectiveNoFileComp
			}
			return []string{"toml"}, cobra.ShellCompDirectiveFilterFileExt
		},
		RunE: func(_ *cobra.Command, args []string) error { return a.seal(args[0]) },
	}
}

func (a *app) seal(path string) error {
	path = filepath.Clean(path)
	rep := batch.Worker{Rooms: a.rooms, Check: true, Stdin: a.in, Now: a.now}.Do(batch.FoundIn(filepath.Dir(path), path))
	if rep.Err != nil {
		a.trouble(rep.Err)
		return exit{batch.ExitWorld}
	}
	c := rep.Compiled
	if c.Failed(false) {
		a.say.PrintErr(term.Diagnostics(c.Diagnostics, c.Loaded.Source, path, a.say.ErrColor()))
		a.say.Sayf("%s: %s, not sealed", path, term.Summary(c.Diagnostics))
		return exit{batch.ExitRecord}
	}
	now, err := a.today()
	if err != nil {
		return err
	}
	file := batch.SealOf(path)
	chain, err := os.ReadFile(file)
	if err != nil && !errors.Is(err, fs.ErrNotExist) {
		return worldError{err}
	}
	entry := seal.New(c.Loaded.Record, c.Loaded.Tables, version.Version, now)
	longer, made, err := seal.Append(chain, entry)
	if err != nil {
		return worldError{fmt.Errorf("%s: %w", file, err)}
	}
	if err := outfile.Write(file, longer, nil); err != nil {
		return worldError{err}
	}
	a.say.Sayf("%s: seal %d of %s, plan SHA-256 %s", file, made.Number, made.Time.UTC().Format("2006-01-02 15:04:05Z"), made.Plan)
	return nil
}
