package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"steelyard/cmd/internal/issued"
	"steelyard/cmd/internal/term"
	"steelyard/protocol/seal"
)

func (a *app) compareCommand() *cobra.Command {
	var print string
	cmd := &cobra.Command{
		Use:   "compare OLD.pdf NEW.pdf",
		Short: "Say what changed between two issued documents",
		Long: `Compare lists what changed from one issued document to another: verdicts,
numbers, plan, results, and what is wording only. It reads the records and the
numbers that the two carry and takes them at their word; verify checks that.

Exit code 0 whatever changed; 2 when a file cannot be read, or carries nothing
that could be compared.`,
		Example: `  steelyard compare issued/trial-v1.pdf issued/trial-v2.pdf
  steelyard compare --print json old.pdf new.pdf > changes.json`,
		Args: cobra.ExactArgs(2),
		ValidArgsFunction: func(_ *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
			if len(args) > 1 {
				return nil, cobra.ShellCompDirectiveNoFileComp
			}
			return []string{"pdf"}, cobra.ShellCompDirectiveFilterFileExt
		},
		RunE: func(_ *cobra.Command, args []string) error { return a.compare(args[0], args[1], print) },
	}
	cmd.Flags().StringVar(&print, "print", "text", "text or json")
	complete(cmd, "print", []string{"text", "json"})
	return cmd
}

func (a *app) compare(old, now, print string) error {
	if print != "text" && print != "json" {
		return fmt.Errorf("--print %q: allowed are text, json", print)
	}
	var docs [2]*issued.Document
	var files [2][]byte
	for i, path := range []string{old, now} {
		file, err := readPDF(path)
		if err != nil {
			return worldError{err}
		}
		if docs[i], err = issued.Open(file); err != nil {
			return worldError{fmt.Errorf("%s: %w", path, err)}
		}
		if docs[i].Record == nil && docs[i].JSON == nil {
			return worldError{fmt.Errorf("%s: %w", path, issued.ErrNothingInside)}
		}
		files[i] = file
	}
	c, err := issued.Compare(docs[0], docs[1])
	if err != nil {
		return worldError{fmt.Errorf("%s, %s: %w", old, now, err)}
	}
	replaces := c.Replaces(files[0])
	if print == "json" {
		out, err := comparedJSON(old, now, c, replaces)
		if err == nil {
			err = a.say.Print(out)
		}
		if err != nil {
			return worldError{err}
		}
		return nil
	}
	return a.say.Print(comparedReport(old, now, c, replaces, a.say.Width))
}

// comparedReport is the comparison for a reader, gravest first.
func comparedReport(old, now string, c *issued.Comparison, replaces string, width int) []byte {
	b := term.NewBlock(width)
	b.Head("%s → %s", old, now)
	b.Row("old", "%s", documentWords(c.Old))
	b.Row("new", "%s", documentWords(c.New))
	if replaces != "" {
		b.Row("replaces", "%s", replaces)
	}
	list := func(label string, class issued.Class, nothing string) {
		var lines []string
		for _, d := range c.Differences {
			if d.Class == class {
				lines = append(lines, differenceWords(d))
			}
		}
		rows(b, label, lines, nothing)
	}
	var plan, wording []string
	for _, p := range c.Plan {
		line := changeLine(seal.Change{Path: p.Path, Old: p.Old, New: p.New})
		switch {
		case p.Wording:
			wording = append(wording, line)
		case p.Declared:
			plan = append(plan, line+" (declared)")
		default:
			plan = append(plan, line)
		}
	}
	list("file", issued.File, "")
	numbers, records := c.Old.JSON != nil && c.New.JSON != nil, c.Old.Record != nil && c.New.Record != nil
	list("verdicts", issued.Verdict, none(numbers, "none changed"))
	list("numbers", issued.Number, none(numbers, "none changed"))
	rows(b, "plan", plan, none(records, "as it was"))
	list("results", issued.Result, none(records, "as they were"))
	for _, d := range c.Differences {
		if d.Class == issued.Words {
			wording = append(wording, differenceWords(d))
		}
	}
	rows(b, "wording", wording, none(records, "as it was"))
	list("other", issued.Other, "")
	for _, n := range c.Notes {
		b.Row("note", "%s", n)
	}
	return b.Bytes()
}

// none is what to say of a list without entries, where it was looked at.
func none(looked bool, words string) string {
	if looked {
		return words
	}
	return ""
}

// maxCompared bounds how many changes of one kind are listed at a prompt.
const maxCompared = 12

// rows writes lines under one label.
func rows(b *term.Block, label string, lines []string, nothing string) {
	if len(lines) == 0 {
		if nothing != "" {
			b.Row(label, "%s", nothing)
		}
		return
	}
	b.Row(label, "%s", lines[0])
	for i, l := range lines[1:] {
		if i+1 == maxCompared {
			b.Line("and %d more; --print json lists them all", len(lines)-maxCompared)
			return
		}
		b.Line("%s", l)
	}
}

func differenceWords(d issued.Difference) string {
	text := d.What
	if strings.HasPrefix(d.Where, "page") {
		text = d.Where + ", " + d.What
	}
	switch {
	case d.Old == "":
		return text + ": added, " + quoted(d.New)
	case d.New == "":
		return text + ": removed, was " + quoted(d.Old)
	}
	return text + ": " + arrow(d.Old, d.New)
}

// documentWords identifies a document.
func documentWords(d *issued.Document) string {
	var parts []string
	if d.Record != nil {
		parts = append(parts, d.Name, fmt.Sprintf("SHA-256 %.16s…", seal.Digest(d.Record)))
	}
	if d.Engine != "" {
		parts = append(parts, "written by version "+d.Engine)
	}
	if d.Appended > 0 {
		parts = append(parts, term.Count(d.Appended, "byte")+" appended")
	}
	return strings.Join(parts, ", ")
}

func comparedJSON(old, now string, c *issued.Comparison, replaces string) ([]byte, error) {
	type side struct {
		File   string `json:"file"`
		Record string `json:"record,omitempty"`
		SHA256 string `json:"record_sha256,omitempty"`
		Engine string `json:"engine,omitempty"`
	}
	of := func(path string, d *issued.Document) side {
		s := side{File: path, Record: d.Name, Engine: d.Engine}
		if d.Record != nil {
			s.SHA256 = seal.Digest(d.Record)
		}
		return s
	}
	return indented(struct {
		Old         side                `json:"old"`
		New         side                `json:"new"`
		Replaces    string              `json:"replaces,omitempty"`
		Plan        []issued.PlanChange `json:"plan"`
		Differences []issued.Difference `json:"differences"`
		Notes       []string            `json:"notes,omitempty"`
	}{of(old, c.Old), of(now, c.New), replaces, append([]issued.PlanChange{}, c.Plan...), append([]issued.Difference{}, c.Differences...), c.Notes})
}
