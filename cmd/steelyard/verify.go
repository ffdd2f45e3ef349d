package main

import (
	"crypto/sha256"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/term"
)

func (a *app) verifyCommand() *cobra.Command {
	var data string
	cmd := &cobra.Command{
		Use:   "verify PDF…",
		Short: "Take the record out of its own PDF, compile it again and compare",
		Long: `Verify takes the record and its seal out of each PDF, compiles them again with the
data that the PDF carries, or else with those beside it, and compares the
bytes. What a signature added after the document was written is left aside.
Exit code 1 means that they differ.`,
		Example: `  steelyard verify issued/trial.pdf
  steelyard verify --data records issued/*.pdf`,
		Args: cobra.MinimumNArgs(1),
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return []string{"pdf"}, cobra.ShellCompDirectiveFilterFileExt
		},
		RunE: func(_ *cobra.Command, args []string) error {
			code := batch.ExitDone
			for _, path := range args {
				code = max(code, a.verify(path, data))
			}
			if code != batch.ExitDone {
				return exit{code}
			}
			return nil
		},
	}
	cmd.Flags().StringVar(&data, "data", "", "folder of the data files (default: the folder of the PDF)")
	if err := cmd.MarkFlagDirname("data"); err != nil {
		panic(err)
	}
	return cmd
}

func (a *app) verify(path, data string) (code int) {
	file, err := os.ReadFile(path)
	if err != nil {
		a.say.Trouble(err)
		return batch.ExitWorld
	}
	if data == "" {
		data = filepath.Dir(path)
	}
	var files fs.FS
	root, err := os.OpenRoot(data)
	if err != nil {
		a.say.Trouble(err)
		return batch.ExitWorld
	}
	defer root.Close()
	files = root.FS()
	v, err := a.rooms.Verify(file, files)
	if err != nil {
		a.trouble(fmt.Errorf("%s: %w", path, err))
		return batch.ExitWorld
	}
	signed := ""
	if v.Appended > 0 {
		signed = fmt.Sprintf("; %d bytes were added after it was written", v.Appended)
	}
	if v.Same {
		a.say.Sayf("%s: verified: the record inside compiles to the same bytes, SHA-256 %x%s", path, sha256.Sum256(file), signed)
		return batch.ExitDone
	}
	a.say.Sayf("%s: differs: %s%s", path, v.Differs, signed)
	if v.Compiled.Diagnostics.HasErrors() {
		a.say.PrintErr(term.Diagnostics(v.Compiled.Diagnostics, v.Compiled.Loaded.Source, path+" → "+v.Record, a.say.ErrColor()))
	}
	return batch.ExitRecord
}
