package main

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/outfile"
	"steelyard/cmd/internal/version"
	"steelyard/protocol/diag"
)

// index is the list of many records that --index writes: what each is, what
// it came to, and where its documents are.
type index struct {
	Steelyard int            `json:"steelyard"`
	Engine    string         `json:"engine"`
	Records   []indexedEntry `json:"records"`
}

type indexedEntry struct {
	Path     string           `json:"path"`
	Number   string           `json:"number,omitempty"`
	Version  string           `json:"version,omitempty"`
	Title    string           `json:"title"`
	Status   string           `json:"status,omitempty"`
	Stage    string           `json:"stage,omitempty"`
	Date     string           `json:"date,omitempty"`
	Seal     string           `json:"seal,omitempty"`
	Errors   int              `json:"errors"`
	Warnings int              `json:"warnings"`
	Unread   string           `json:"unread,omitempty"` // why it could not be read or written
	Claims   []indexedClaim   `json:"claims"`
	Outputs  []indexedProduct `json:"outputs"`
}

type indexedClaim struct {
	Hypothesis string `json:"hypothesis"`
	Outcome    string `json:"outcome"`
	Claim      string `json:"claim"`
	Role       string `json:"role"`
	Verdict    string `json:"verdict"`
	PostHoc    bool   `json:"post_hoc"`
}

type indexedProduct struct {
	Path   string `json:"path"`
	SHA256 string `json:"sha256"`
}

// add puts one report into the index. Paths are written with slashes, as seen
// from the folder of the index.
func (x *index) add(dir string, r batch.Report) {
	e := indexedEntry{Path: below(dir, r.Record.Path), Claims: []indexedClaim{}, Outputs: []indexedProduct{}}
	if r.Err != nil {
		e.Unread = r.Err.Error()
	}
	if c := r.Compiled; c != nil {
		head := c.Result.Record
		e.Number, e.Version, e.Title, e.Status = head.Number, head.Version, head.Title, head.Status
		e.Errors, e.Warnings = c.Diagnostics.Count(diag.SeverityError), c.Diagnostics.Count(diag.SeverityWarning)
		if e.Errors == 0 {
			e.Stage, e.Seal = string(head.Stage), c.Result.Seal.State
		}
		if !head.Date.IsZero() {
			e.Date = head.Date.String()
		}
		for _, h := range c.Result.Hypotheses {
			e.Claims = append(e.Claims, indexedClaim{h.Name, h.Outcome, h.Claim, h.Role, string(h.Verdict), h.PostHoc})
		}
	}
	for _, path := range r.Wrote {
		text, err := os.ReadFile(path)
		if err != nil {
			e.Unread = err.Error()
			continue
		}
		sum := sha256.Sum256(text)
		e.Outputs = append(e.Outputs, indexedProduct{below(dir, path), hex.EncodeToString(sum[:])})
	}
	x.Records = append(x.Records, e)
}

func below(dir, path string) string {
	from, err1 := filepath.Abs(dir)
	to, err2 := filepath.Abs(path)
	if rel, err := filepath.Rel(from, to); err1 == nil && err2 == nil && err == nil {
		path = rel
	}
	return filepath.ToSlash(path)
}

// write puts the index into a folder as index.json.
func (x *index) write(dir string) (string, error) {
	x.Steelyard, x.Engine = 1, version.Version
	if x.Records == nil {
		x.Records = []indexedEntry{}
	}
	text, err := json.MarshalIndent(x, "", "  ")
	if err != nil {
		return "", err
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return "", err
	}
	path := filepath.Join(dir, "index.json")
	return path, outfile.Write(path, append(text, '\n'), outfile.StartsWith(`{ "steelyard":`))
}

// indexFolder is where the index goes: the folder of the outputs, else the
// one folder that was named, else the present one.
func indexFolder(out string, args []string) string {
	if out != "" {
		return out
	}
	if len(args) == 1 {
		if info, err := os.Stat(args[0]); err == nil && info.IsDir() {
			return args[0]
		}
	}
	return "."
}

// indexClash refuses a record whose own output would be the index.
func indexClash(w batch.Worker, list []batch.Found, dir string) error {
	path := filepath.Join(dir, "index.json")
	for _, rec := range list {
		for _, out := range w.Outputs(rec) {
			if filepath.Clean(out) == path {
				return fmt.Errorf("%s and the index would both write %s", rec.Path, path)
			}
		}
	}
	return nil
}
