package main

import (
	"github.com/spf13/cobra"

	"steelyard/protocol"
	"steelyard/render/jsonout"
)

func (a *app) schemaCommand() *cobra.Command {
	var output bool
	cmd := &cobra.Command{
		Use:   "schema",
		Short: "Print the JSON Schema of a record, for editors, or of the JSON output",
		Long: `Schema prints the JSON Schema (2020-12) of a record. An editor that knows TOML
uses it for completion and hints when the first line of a record names it:

  #:schema ./steelyard.schema.json

With --output it prints the schema of what compile --to json writes.`,
		Example: `  steelyard schema > steelyard.schema.json
  steelyard schema --output > steelyard-output.schema.json`,
		Args:              cobra.NoArgs,
		ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(*cobra.Command, []string) error {
			if output {
				return a.print(jsonout.OutputSchema())
			}
			return a.print(protocol.Schema())
		},
	}
	cmd.Flags().BoolVar(&output, "output", false, "the schema of the JSON output instead")
	return cmd
}
