package main

import (
	"encoding/json"
	"net/url"
	"path/filepath"
	"slices"

	"steelyard/cmd/internal/term"
	"steelyard/cmd/internal/version"
	"steelyard/protocol/diag"
)

// report is the diagnostics of one record, for other programs.
type report struct {
	path string
	src  *diag.Source
	list diag.List
}

// fault is one diagnostic in the form of check --format json.
type fault struct {
	File      string `json:"file"`
	Code      string `json:"code"`
	Severity  string `json:"severity"`
	Line      int    `json:"line"`
	Column    int    `json:"column"`
	EndLine   int    `json:"end_line,omitempty"`
	EndColumn int    `json:"end_column,omitempty"`
	Message   string `json:"message"`
	Help      string `json:"help,omitempty"`
}

func faults(reports []report) []fault {
	list := []fault{}
	for _, r := range reports {
		named := *r.src
		named.Name = r.path
		for _, d := range r.list {
			d = term.Placed(d, r.path)
			f := fault{Code: d.Code, Severity: d.Severity.String(), Message: d.Message, Help: d.Help}
			f.File, f.Line, f.Column = named.Place(d)
			f.File = filepath.ToSlash(f.File)
			if d.File == "" && d.Span.End > d.Span.Start {
				f.EndLine, f.EndColumn = named.Position(d.Span.End)
			}
			list = append(list, f)
		}
	}
	return list
}

func faultsJSON(reports []report) ([]byte, error) { return indented(faults(reports)) }

func indented(v any) ([]byte, error) {
	out, err := json.MarshalIndent(v, "", "  ")
	return append(out, '\n'), err
}

// The parts of SARIF 2.1.0 (OASIS, 2020) that a list of faults needs.
type (
	sarifLog struct {
		Schema  string     `json:"$schema"`
		Version string     `json:"version"`
		Runs    []sarifRun `json:"runs"`
	}
	sarifRun struct {
		Tool       sarifTool     `json:"tool"`
		ColumnKind string        `json:"columnKind"`
		Results    []sarifResult `json:"results"`
	}
	sarifTool struct {
		Driver sarifDriver `json:"driver"`
	}
	sarifDriver struct {
		Name    string      `json:"name"`
		Version string      `json:"version"`
		Rules   []sarifRule `json:"rules"`
	}
	sarifText struct {
		Text string `json:"text"`
	}
	sarifRule struct {
		ID    string     `json:"id"`
		Short *sarifText `json:"shortDescription,omitempty"`
		Full  *sarifText `json:"fullDescription,omitempty"`
		Help  *sarifText `json:"help,omitempty"`
	}
	sarifResult struct {
		RuleID    string          `json:"ruleId"`
		Level     string          `json:"level"`
		Message   sarifText       `json:"message"`
		Locations []sarifLocation `json:"locations"`
	}
	sarifLocation struct {
		Physical sarifPhysical `json:"physicalLocation"`
	}
	sarifPhysical struct {
		Artifact sarifArtifact `json:"artifactLocation"`
		Region   *sarifRegion  `json:"region,omitempty"`
	}
	sarifArtifact struct {
		URI string `json:"uri"`
	}
	sarifRegion struct {
		StartLine   int `json:"startLine"`
		StartColumn int `json:"startColumn,omitempty"`
		EndLine     int `json:"endLine,omitempty"`
		EndColumn   int `json:"endColumn,omitempty"`
	}
)

func faultsSARIF(reports []report) ([]byte, error) {
	run := sarifRun{
		Tool:       sarifTool{sarifDriver{Name: "steelyard", Version: version.Version, Rules: []sarifRule{}}},
		ColumnKind: "unicodeCodePoints",
		Results:    []sarifResult{},
	}
	var codes []string
	for _, f := range faults(reports) {
		if !slices.Contains(codes, f.Code) {
			codes = append(codes, f.Code)
		}
		message := f.Message
		if f.Help != "" {
			message += "\n" + f.Help
		}
		at := sarifPhysical{Artifact: sarifArtifact{uri(f.File)}}
		if f.Line > 0 {
			at.Region = &sarifRegion{f.Line, f.Column, f.EndLine, f.EndColumn}
		}
		run.Results = append(run.Results, sarifResult{
			RuleID: f.Code, Level: f.Severity, Message: sarifText{message},
			Locations: []sarifLocation{{at}},
		})
	}
	slices.Sort(codes)
	for _, code := range codes {
		run.Tool.Driver.Rules = append(run.Tool.Driver.Rules, sarifRuleOf(code))
	}
	return indented(sarifLog{
		Schema:  "https://docs.oasis-open.org/sarif/sarif/v2.1.0/os/schemas/sarif-schema-2.1.0.json",
		Version: "2.1.0",
		Runs:    []sarifRun{run},
	})
}

// sarifRuleOf describes a code from its card.
func sarifRuleOf(code string) sarifRule {
	rule := sarifRule{ID: code}
	for _, c := range cardsOf(code) {
		rule.Short, rule.Full = &sarifText{c.Title}, &sarifText{c.Meaning}
		if c.Repair != "" {
			rule.Help = &sarifText{c.Repair}
		}
	}
	return rule
}

// uri is a path as a relative or file reference.
func uri(path string) string {
	u := url.URL{Path: path}
	if filepath.IsAbs(path) {
		u.Scheme = "file"
	}
	return u.String()
}
