package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"strconv"
	"time"

	"github.com/spf13/cobra"

	"steelyard/protocol"
	"steelyard/protocol/record"
)

func (a *app) newCommand() *cobra.Command {
	var measure, claim string
	cmd := &cobra.Command{
		Use:   "new FILE",
		Short: "Write a commented record to begin with",
		Long: `New writes a record that compiles as it is, with invented contents and a remark
beside each key. It never overwrites a file; - writes to standard output.`,
		Example: `  steelyard new pouch.toml
  steelyard new --measure risk-difference --claim noninferior trial.toml`,
		Args: cobra.ExactArgs(1),
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return []string{"toml"}, cobra.ShellCompDirectiveFilterFileExt
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.writeNew(args[0], measure, claim)
		},
	}
	cmd.Flags().StringVar(&measure, "measure", "mean-difference", "what is compared, and how")
	cmd.Flags().StringVar(&claim, "claim", "", "what the results should show (default: one that suits the measure)")
	complete(cmd, "measure", listed(record.Measures, func(m *record.Measure) string { return m.Word }))
	complete(cmd, "claim", listed(record.Claims, func(c *record.Claim) string { return c.Word }))
	return cmd
}

func (a *app) writeNew(path, measure, claim string) error {
	text, err := protocol.Starter(measure, claim)
	if err != nil {
		return err
	}
	if path == "-" {
		return a.print([]byte(text))
	}
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if errors.Is(err, fs.ErrExist) {
		return worldError{fmt.Errorf("%s: exists already, and is left as it is", path)}
	}
	if err != nil {
		return worldError{err}
	}
	_, err = f.Write(text)
	if err := errors.Join(err, f.Close()); err != nil {
		os.Remove(path)
		return worldError{err}
	}
	a.say.Sayf("%s: written; next: steelyard watch %s", path, path)
	return nil
}

// today is the day on the clock, or the one that SOURCE_DATE_EPOCH names.
func (a *app) today() (time.Time, error) {
	epoch := a.getenv("SOURCE_DATE_EPOCH")
	if epoch == "" {
		return a.now(), nil
	}
	seconds, err := strconv.ParseInt(epoch, 10, 64)
	if err != nil {
		return time.Time{}, fmt.Errorf("SOURCE_DATE_EPOCH %q: not a whole number of seconds", epoch)
	}
	return time.Unix(seconds, 0).UTC(), nil
}

// listed lists the words of a table of the language.
func listed[T any](list []T, word func(T) string) []string {
	out := make([]string, len(list))
	for i, x := range list {
		out[i] = word(x)
	}
	return out
}
