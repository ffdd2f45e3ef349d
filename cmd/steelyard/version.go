package main

import (
	"fmt"
	"runtime"
	"runtime/debug"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/version"
)

func (a *app) versionCommand() *cobra.Command {
	var licences bool
	cmd := &cobra.Command{
		Use:   "version",
		Short: "Print the version, the build and what it is built from",
		Example: `  steelyard version
  steelyard version --licences`,
		Args:              cobra.NoArgs,
		ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, _ []string) error {
			a.say.Sayf("steelyard %s", version.Version)
			a.say.Sayf("%s, %s/%s%s", runtime.Version(), runtime.GOOS, runtime.GOARCH, revision())
			if info, ok := debug.ReadBuildInfo(); ok {
				for _, m := range info.Deps {
					a.say.Sayf("  %s %s", m.Path, m.Version)
				}
			}
			if licences {
				for _, l := range version.Licences() {
					a.say.Sayf("\n%s\n%s\n\n%s", l.Of, underline(l.Of), l.Text)
				}
			}
			return nil
		},
	}
	cmd.Flags().BoolVar(&licences, "licences", false, "print the licences of everything inside this program")
	return cmd
}

// revision is the commit of the build, where the build knows it.
func revision() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return ""
	}
	var commit, modified string
	for _, s := range info.Settings {
		switch s.Key {
		case "vcs.revision":
			commit = s.Value
		case "vcs.modified":
			if s.Value == "true" {
				modified = ", modified"
			}
		}
	}
	if commit == "" {
		return ""
	}
	return fmt.Sprintf(", commit %.12s%s", commit, modified)
}

func underline(s string) string {
	line := make([]byte, len(s))
	for i := range line {
		line[i] = '-'
	}
	return string(line)
}
