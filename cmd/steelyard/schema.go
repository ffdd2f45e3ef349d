package main

import (
	"github.com/spf13/cobra"

	"steelyard/protocol"
)

func (a *app) schemaCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "schema",
		Short: "Print the JSON Schema of a record, for editors",
		Long: `Schema prints the JSON Schema (2020-12) of a record. An editor that knows TOML
uses it for completion and hints when the first line of a record names it:

  #:schema ./steelyard.schema.json`,
		Example:           `  steelyard schema > steelyard.schema.json`,
		Args:              cobra.NoArgs,
		ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(*cobra.Command, []string) error {
			return a.say.Print(protocol.Schema())
		},
	}
}
