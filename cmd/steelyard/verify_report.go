package main

import (
	"cmp"
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"time"

	"steelyard/cmd/internal/issued"
	"steelyard/cmd/internal/term"
	"steelyard/cmd/internal/version"
	"steelyard/protocol/seal"
	"steelyard/render"
)

// maxShown bounds how many differences of a file are listed at a prompt.
const maxShown = 12

// findingWords is a finding in words.
func findingWords(v *issued.Verified) string {
	switch v.Finding {
	case issued.Reproduced:
		return "reproduced"
	case issued.SameNumbers:
		return "same numbers, other bytes"
	case issued.Differs:
		return "different"
	case issued.NotCheckable:
		return "not checkable"
	}
	panic("verify: unknown finding")
}

// verifiedReport is one block on one file.
func verifiedReport(path string, v *issued.Verified, width int) []byte {
	b := term.NewBlock(width)
	switch {
	case v.Finding == issued.Reproduced && v.Appended > 0:
		b.Head("%s: reproduced byte for byte, with %s appended after it", path, term.Count(v.Appended, "byte"))
	case v.Finding == issued.Reproduced:
		b.Head("%s: reproduced byte for byte", path)
	default:
		b.Head("%s: %s", path, findingWords(v))
	}
	if v.Reason != "" {
		b.Row("why", "%s", v.Reason)
	}
	if v.Help != "" {
		b.Row("help", "%s", v.Help)
	}
	if v.Record != nil {
		b.Row("record", "%s, SHA-256 %.16s…", v.Name, seal.Digest(v.Record))
	}
	inside, pages := split(v.Differences)
	differences(b, inside, "the file → what its record gives")
	if len(inside) > 0 && len(pages) > 0 {
		b.Row("pages", "They print other than the record gives in %s, which --format json lists.", term.Count(len(pages), "place"))
	} else {
		differences(b, pages, "as printed → as its record gives it")
	}
	if v.Engine != "" && v.Engine != version.Version {
		b.Row("version", "It says that version %s wrote it; this is version %s.", v.Engine, version.Version)
	}
	if len(v.Data) > 0 || len(v.Outside) > 0 {
		b.Row("from", "%s", sources(v))
	}
	if c := v.Compiled; c != nil && !c.Diagnostics.HasErrors() {
		standing(b, c.Loaded.Seal)
		for _, w := range c.Result.Seal.Witnesses {
			b.Row("witness", "%s", render.WitnessText(&w))
		}
		if words := verdicts(c.Result); words != "" {
			b.Row("verdicts", "%s", words)
		}
	}
	for _, n := range v.Notes {
		b.Row("note", "%s", n)
	}
	if v.Damaged {
		b.Row("note", "The checksum of a file inside is not that of its bytes.")
	}
	return b.Bytes()
}

// split parts what differs inside from what differs on the pages, which mostly
// follows from it.
func split(list []issued.Difference) (inside, pages []issued.Difference) {
	for _, d := range list {
		if strings.HasPrefix(d.Where, "page") {
			pages = append(pages, d)
		} else {
			inside = append(inside, d)
		}
	}
	return inside, pages
}

// sources says where data and record came from.
func sources(v *issued.Verified) string {
	var inside []string
	for name := range v.Data {
		inside = append(inside, name)
	}
	slices.Sort(inside)
	var parts []string
	if len(inside) > 0 {
		parts = append(parts, "inside: "+strings.Join(inside, ", "))
	}
	if len(v.Outside) > 0 {
		parts = append(parts, "from the folder: "+strings.Join(v.Outside, ", "))
	}
	return strings.Join(parts, "; ")
}

// differences lists what differs, a line each, gravest first.
func differences(b *term.Block, list []issued.Difference, what string) {
	if len(list) == 0 {
		return
	}
	list = slices.Clone(list)
	slices.SortStableFunc(list, func(x, y issued.Difference) int { return cmp.Compare(x.Class, y.Class) })
	b.Row("differs", "%s", what)
	for i, d := range list {
		if i == maxShown {
			b.Row("", "and %d more; --format json lists them all", len(list)-maxShown)
			break
		}
		text := d.What
		if strings.HasPrefix(d.Where, "page") {
			text = d.Where + ", " + d.What
		}
		if d.Old != "" || d.New != "" {
			text += ": " + arrow(d.Old, d.New)
		}
		b.Line("%-8s  %s", d.Class, text)
	}
}

var digest = regexp.MustCompile(`^[0-9a-f]{64}$`)

func quoted(s string) string {
	if s == "" {
		return "nothing"
	}
	if digest.MatchString(s) {
		s = s[:16] + "…"
	}
	if _, err := strconv.ParseFloat(s, 64); err == nil {
		return s
	}
	return "“" + shorter(s) + "”"
}

// arrow is old and new, each quoted.
func arrow(old, now string) string {
	old, now = apart(old, now)
	return quoted(old) + " → " + quoted(now)
}

// apart cuts what two long texts have in common at their beginning, so that
// what differs is not cut off instead.
func apart(a, b string) (string, string) {
	x, y := []rune(a), []rune(b)
	n := 0
	for n < len(x) && n < len(y) && x[n] == y[n] {
		n++
	}
	if n -= 12; n < 20 || len(x) <= 60 && len(y) <= 60 {
		return a, b
	}
	return "…" + string(x[n:]), "…" + string(y[n:])
}

// standing says how the record stands to its seal.
func standing(b *term.Block, s *seal.State) {
	if s == nil {
		return
	}
	if len(s.Entries) == 0 {
		b.Row("seal", "none: nothing shows that the plan came before the results")
		return
	}
	last := s.Entries[len(s.Entries)-1]
	order := map[string]string{
		seal.BeforeResults: "sealed before results", seal.SameDay: "same day, order unproven", seal.AfterResults: "sealed after results",
	}[s.Order]
	if len(s.Binds) == 0 {
		order = "no results yet"
	}
	b.Row("seal", "%s, the last of %s; %s", term.Count(len(s.Entries), "seal"), last.Time.UTC().Format(time.RFC3339), order)
	b.Line("%s", last.Sum)
	for _, c := range s.Changes {
		if kind := changeKind(c, true); !c.Wording {
			b.Line("%s  %s", kind, changeLine(c))
		}
	}
	for _, e := range s.Edited {
		kind, what := "undeclared", "was edited after seal "+fmt.Sprint(e.Seal)
		if e.Declared {
			kind = "declared  "
		}
		switch {
		case e.Removed:
			what = "was removed after seal " + fmt.Sprint(e.Seal)
		case e.File != "":
			what = "rests on other data than in seal " + fmt.Sprint(e.Seal)
		}
		b.Line("%s  %s %s", kind, resultName(e.Name), what)
	}
	for _, x := range s.Vanished {
		b.Line("undeclared  the deviation of %s was changed or removed after seal %d", x.Date, x.Seal)
	}
}

// verifiedFile is one file in the form of verify --format json.
type verifiedFile struct {
	File        string              `json:"file"`
	Finding     string              `json:"finding"`
	Record      string              `json:"record,omitempty"`
	SHA256      string              `json:"record_sha256,omitempty"`
	Engine      string              `json:"engine,omitempty"`
	Appended    int                 `json:"appended"`
	SealState   string              `json:"seal_state,omitempty"` // as in the JSON of a result
	SealOrder   string              `json:"seal_order,omitempty"`
	SealSHA256  string              `json:"seal_sha256,omitempty"` // of the last entry
	Differences []issued.Difference `json:"differences"`
	Notes       []string            `json:"notes,omitempty"`
	Reason      string              `json:"reason,omitempty"`
	Help        string              `json:"help,omitempty"`
}

func verifiedJSON(all []checked) ([]byte, error) {
	list := []verifiedFile{}
	for _, c := range all {
		if c.err != nil {
			list = append(list, verifiedFile{File: c.path, Finding: "unreadable", Reason: c.err.Error(), Differences: []issued.Difference{}})
			continue
		}
		f := verifiedFile{
			File: c.path, Finding: c.v.Finding.String(), Record: c.v.Name, Engine: c.v.Engine, Appended: c.v.Appended,
			Differences: append([]issued.Difference{}, c.v.Differences...), Notes: c.v.Notes, Reason: c.v.Reason, Help: c.v.Help,
		}
		if c.v.Record != nil {
			f.SHA256 = seal.Digest(c.v.Record)
		}
		if c.v.Compiled != nil && c.v.Compiled.Loaded.Seal != nil {
			s := c.v.Compiled.Loaded.Seal
			f.SealState, f.SealOrder = s.State, s.Order
			if n := len(s.Entries); n > 0 {
				f.SealSHA256 = s.Entries[n-1].Sum
			}
		}
		list = append(list, f)
	}
	return indented(list)
}
