package issued

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"steelyard/protocol"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
	"steelyard/protocol/seal"
)

// ErrNothingInside says that a document carries neither record nor numbers.
var ErrNothingInside = errors.New("it carries neither a record nor numbers: nothing can be compared")

// PlanChange is one difference between the plans of two documents, as their
// records have it.
type PlanChange struct {
	Path     string `json:"path"`
	Old      string `json:"old"`
	New      string `json:"new"`
	Wording  bool   `json:"wording"`  // labels and prose only
	Declared bool   `json:"declared"` // a deviation of the new record names it
}

// Comparison is what changed from one issued document to another.
type Comparison struct {
	Old, New    *Document
	Plan        []PlanChange
	Differences []Difference // verdicts, numbers, results, wording, the rest
	Notes       []string
}

// Compare takes two documents at their word; Verify checks it.
func Compare(old, now *Document) (*Comparison, error) {
	c := &Comparison{Old: old, New: now}
	if (old.Record == nil || now.Record == nil) && (old.JSON == nil || now.JSON == nil) {
		return nil, ErrNothingInside
	}
	for _, d := range []*Document{old, now} {
		if len(d.Record) > maxText || len(d.JSON) > maxText {
			return nil, fmt.Errorf("a record inside, or its numbers, is larger than %d MiB", maxText>>20)
		}
	}
	if old.Replaced || now.Replaced {
		c.Notes = append(c.Notes, "What was appended to one of them takes the place of what it carried; it was read as it was written.")
	}
	if old.Record != nil && now.Record != nil {
		if err := c.records(); err != nil {
			return nil, err
		}
	} else {
		c.Notes = append(c.Notes, "Plans and results were not compared: "+c.lacking(func(d *Document) bool { return d.Record == nil })+" carries no record.")
	}
	if old.JSON != nil && now.JSON != nil {
		list, err := compareResults(old.JSON, now.JSON)
		if err != nil {
			return nil, fmt.Errorf("the numbers inside: %w", err)
		}
		c.Differences = append(c.Differences, slices.DeleteFunc(list, repeated)...)
	} else {
		c.Notes = append(c.Notes, "Numbers and verdicts were not compared: "+c.lacking(func(d *Document) bool { return d.JSON == nil })+" carries none.")
	}
	if len(c.Plan) == 0 && len(c.Differences) == 0 && old.PagesErr == nil && now.PagesErr == nil {
		if list := comparePages(old.Pages, now.Pages); len(list) > 0 {
			c.Differences = list
			c.Notes = append(c.Notes, "Only what the pages print differs, as from one version of the program to another.")
		}
	}
	slices.SortStableFunc(c.Differences, func(a, b Difference) int { return int(a.Class) - int(b.Class) })
	return c, nil
}

// lacking names which of the two documents lacks something.
func (c *Comparison) lacking(lacks func(*Document) bool) string {
	switch {
	case lacks(c.Old) && lacks(c.New):
		return "neither"
	case lacks(c.Old):
		return "the old one"
	}
	return "the new one"
}

// repeated reports whether the records themselves show a difference better, or
// whether it only follows from others.
func repeated(d Difference) bool {
	first, _, _ := strings.Cut(d.What, " ")
	switch first {
	case "record", "timeline", "deviations", "decisions", "choices", "outcomes", "studies", "flow", "conclusion", "cautions":
		return true
	case "seal":
		return d.What != "seal state" && d.What != "seal order"
	}
	return d.Class == Words || strings.HasSuffix(d.What, " curve")
}

// records compares what the records say: the plans key by key, and all else.
func (c *Comparison) records() error {
	old := protocol.Load(c.Old.Name, c.Old.Record, c.Old.Seal, nil).Record
	now := protocol.Load(c.New.Name, c.New.Record, c.New.Seal, nil).Record
	declared := map[string]bool{}
	for _, d := range now.Deviations {
		if d == nil {
			continue
		}
		for _, p := range d.Changes.V {
			declared[p.V] = true
		}
	}
	for _, ch := range seal.Changes(old.Tree.Get("plan"), now.Tree.Get("plan"), diag.Span{}) {
		table := ch.Path[:max(0, strings.LastIndexByte(ch.Path, '.'))]
		c.Plan = append(c.Plan, PlanChange{ch.Path, ch.Old, ch.New, ch.Wording, declared[ch.Path] || declared[table]})
	}
	was, err := besidesPlan(old)
	if err != nil {
		return err
	}
	is, err := besidesPlan(now)
	if err != nil {
		return err
	}
	walk := &comparer{}
	walk.tables(nil, was, is)
	for _, f := range walk.list {
		f.Class = recordClass(f.What)
		c.Differences = append(c.Differences, f.Difference)
	}
	return nil
}

// besidesPlan is a record without its plan, as values.
func besidesPlan(rec *record.Record) (map[string]any, error) {
	text := seal.Canonical(rec.Tree)
	if text == nil {
		return map[string]any{}, nil
	}
	out, err := decode(text)
	delete(out, "plan")
	return out, err
}

// recordClass is what a difference of a record is about.
func recordClass(path string) Class {
	first, rest, _ := strings.Cut(path, " ")
	switch first {
	case "result", "earlier_result", "missing_result":
		return Result
	case "conclusion":
		return Words
	case "record":
		switch word, _, _ := strings.Cut(rest, " "); word {
		case "title", "authors", "references", "funding", "interests", "confidential", "ethics", "registry", "approvals_wanted", "equipment":
			return Words
		}
	}
	return Other
}

// Replaces says how the new record names the one that it supersedes: "" when
// it names none, else in words whether that is the old document.
func (c *Comparison) Replaces(oldFile []byte) string {
	if c.New.Record == nil {
		return ""
	}
	s := protocol.Load(c.New.Name, c.New.Record, nil, nil).Record.Head.Supersedes
	if s == nil || s.SHA256.V == "" {
		return ""
	}
	switch sum := strings.ToLower(s.SHA256.V); {
	case sum == seal.Digest(oldFile):
		return "the new record names the old file, by its SHA-256, as the one it replaces"
	case c.Old.Record != nil && sum == seal.Digest(c.Old.Record):
		return "the new record names the old record, by its SHA-256, as the one it replaces"
	}
	return "the new record names another SHA-256 as that of the one it replaces: neither the old file's nor its record's"
}
