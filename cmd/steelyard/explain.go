package main

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"steelyard/protocol/card"
)

func (a *app) explainCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "explain WORD [OF]",
		Short: "Explain a diagnostic code, measure, method, claim or procedure",
		Long: `Explain prints what a word of the language, or the code of a diagnostic, means: its
rule or formula, what must hold for it, where it is published, and an example. A word
that several measures or keys have is explained for all of them; OF, a measure, a key or a
kind such as method, chooses one.`,
		Example: `  steelyard explain equivalent
  steelyard explain welch
  steelyard explain exact odds-ratio
  steelyard explain slightly better
  steelyard explain D110`,
		Args: cobra.MinimumNArgs(1),
		ValidArgsFunction: func(_ *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
			if len(args) > 0 {
				return nil, cobra.ShellCompDirectiveNoFileComp
			}
			return words(), cobra.ShellCompDirectiveNoFileComp
		},
		RunE: func(_ *cobra.Command, args []string) error {
			found, err := explained(args)
			if err != nil {
				return err
			}
			var b strings.Builder
			for i, c := range found {
				if i > 0 {
					b.WriteByte('\n')
				}
				writeCard(&b, c, a.say.Width)
			}
			return a.print([]byte(b.String()))
		},
	}
}

// writeCard prints one card for a reader at a prompt.
func writeCard(b *strings.Builder, c card.Card, width int) {
	first := c.Word + " · " + kindName(c.Kind)
	if len(c.Of) > 0 {
		first += " of " + strings.Join(c.Of, ", ")
	}
	fold(b, first, "", width)
	if c.Title != "" {
		fold(b, c.Title, "", width)
	}
	for _, part := range []struct{ name, text string }{
		{"", c.Meaning}, {"Rule", c.Formula}, {"Assumes", c.Assumptions}, {"Repair", c.Repair}, {"Source", c.Source},
	} {
		if part.text == "" {
			continue
		}
		b.WriteByte('\n')
		text := part.text
		if part.name != "" {
			text = part.name + ": " + text
		}
		fold(b, text, "  ", width)
	}
	if c.Example != "" {
		b.WriteString("\n  Example:\n\n")
		for _, line := range strings.Split(strings.TrimRight(c.Example, "\n"), "\n") {
			b.WriteString(strings.TrimRight("    "+line, " ") + "\n")
		}
		writeFiles(b, c.Example)
	}
}

// writeFiles prints the first lines of the data files that an example names.
func writeFiles(b *strings.Builder, example string) {
	const shown = 4
	files := exampleFiles()
	for _, name := range slices.Sorted(maps.Keys(files)) {
		if !strings.Contains(example, `"`+name+`"`) {
			continue
		}
		rows := strings.Split(strings.TrimRight(files[name], "\n"), "\n")
		fmt.Fprintf(b, "\n  %s begins:\n\n", name)
		for _, row := range rows[:min(shown, len(rows))] {
			b.WriteString("    " + row + "\n")
		}
	}
}

// fold breaks a text into lines of at most width characters, each indented;
// the line breaks of the text stay.
func fold(b *strings.Builder, text, indent string, width int) {
	for _, paragraph := range strings.Split(strings.TrimSpace(text), "\n") {
		line := indent
		for _, word := range strings.Fields(paragraph) {
			switch {
			case line == indent:
				line += word
			case len([]rune(line))+1+len([]rune(word)) > width:
				b.WriteString(line + "\n")
				line = indent + word
			default:
				line += " " + word
			}
		}
		b.WriteString(line + "\n")
	}
}
