package main

import (
	"slices"
	"strings"

	"github.com/spf13/cobra"
)

// completeRecords offers record files and folders.
func completeRecords(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
	return []string{"toml"}, cobra.ShellCompDirectiveFilterFileExt
}

// complete offers words for a flag.
func complete(cmd *cobra.Command, flag string, words []string) {
	err := cmd.RegisterFlagCompletionFunc(flag, func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
		return words, cobra.ShellCompDirectiveNoFileComp
	})
	if err != nil {
		panic(err) // the flag does not exist
	}
}

// completeList offers words for a flag that takes several, separated by
// commas.
func completeList(cmd *cobra.Command, flag string, words []string) {
	err := cmd.RegisterFlagCompletionFunc(flag, func(_ *cobra.Command, _ []string, typed string) ([]string, cobra.ShellCompDirective) {
		head := ""
		if i := strings.LastIndexByte(typed, ','); i >= 0 {
			head = typed[:i+1]
		}
		var offers []string
		for _, w := range words {
			if !slices.Contains(strings.Split(head, ","), w) {
				offers = append(offers, head+w)
			}
		}
		return offers, cobra.ShellCompDirectiveNoFileComp | cobra.ShellCompDirectiveNoSpace
	})
	if err != nil {
		panic(err) // the flag does not exist
	}
}
