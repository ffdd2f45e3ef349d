package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/term"
)

func (a *app) checkCommand() *cobra.Command {
	var format string
	var strict bool
	cmd := &cobra.Command{
		Use:   "check PATH…",
		Short: "Report every fault of records, and write nothing",
		Long: `Check reads and computes each record and prints every error, warning and note on
standard output, each at its place in the file. A folder means every record
under it, - a record on standard input.`,
		Example: `  steelyard check trial.toml
  steelyard check records/ --strict
  steelyard check records/ --format sarif > faults.sarif`,
		Args:              cobra.MinimumNArgs(1),
		ValidArgsFunction: completeRecords,
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.check(cmd, args, format, strict)
		},
	}
	cmd.Flags().StringVar(&format, "format", "text", "text, json or sarif")
	cmd.Flags().BoolVar(&strict, "strict", false, "warnings count as errors")
	complete(cmd, "format", []string{"text", "json", "sarif"})
	return cmd
}

func (a *app) check(cmd *cobra.Command, args []string, format string, strict bool) error {
	var collect func([]report) ([]byte, error)
	switch format {
	case "text":
	case "json":
		collect = faultsJSON
	case "sarif":
		collect = faultsSARIF
	default:
		return fmt.Errorf("--format %q: allowed are text, json, sarif", format)
	}
	list, err := a.find(args, "")
	if err != nil {
		return err
	}
	w := batch.Worker{Rooms: a.rooms, Check: true, Strict: strict, Stdin: a.in, Now: a.now}
	var reports []report
	failed := a.each(cmd, w, list, func(_ batch.Worker, r batch.Report) error {
		if r.Err != nil {
			a.trouble(r.Err)
			return nil
		}
		c, path := r.Compiled, shownPath(r.Record)
		if collect != nil {
			reports = append(reports, report{path, c.Loaded.Source, c.Diagnostics})
			return nil
		}
		a.say.PrintErr([]byte(path + ": " + term.Summary(c.Diagnostics) + "\n"))
		return a.say.Print(term.Diagnostics(c.Diagnostics, c.Loaded.Source, path, a.say.OutColor()))
	})
	if collect != nil {
		out, err := collect(reports)
		if err != nil {
			return worldError{err}
		}
		if err := a.say.Print(out); err != nil {
			return worldError{err}
		}
	}
	return failed
}
