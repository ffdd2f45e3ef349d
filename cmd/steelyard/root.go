package main

import (
	"runtime"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/term"
	"steelyard/cmd/internal/version"
)

// app is what every command shares.
type app struct {
	world
	say *term.Speaker
}

func rootCommand(w world, say *term.Speaker) *cobra.Command {
	a := &app{w, say}
	root := &cobra.Command{
		Use:   "steelyard",
		Short: "Compile a record of results into a dated decision document",
		Long: `Steelyard compiles one record, a TOML file beside its data, into a dated
decision document: what the results say about an effect, and what they do not.

Exit codes: 0 done; 1 the record has errors; 2 wrong usage, or a record that
cannot be read, or an output that cannot be written.`,
		Example: `  steelyard new pouch.toml        write a first record
  steelyard compile pouch.toml    make pouch.pdf
  steelyard watch pouch.toml      make it again whenever the record changes`,
		Version:           version.Version,
		SilenceErrors:     true,
		SilenceUsage:      true,
		DisableAutoGenTag: true,
		Args:              cobra.NoArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return cmd.Help()
		},
	}
	root.SetVersionTemplate("steelyard {{.Version}}\n")
	root.AddCommand(
		a.newCommand(), a.checkCommand(), a.compileCommand(), a.watchCommand(), a.schemaCommand(), a.explainCommand(),
		a.sealCommand(), a.verifyCommand(), a.compareCommand(),
		a.versionCommand(),
	)
	return root
}

// workers is how many records are worked on at once.
func workers() int { return runtime.GOMAXPROCS(0) }

// print writes what was asked for to standard output.
func (a *app) print(text []byte) error {
	if err := a.say.Print(text); err != nil {
		return worldError{err}
	}
	return nil
}
