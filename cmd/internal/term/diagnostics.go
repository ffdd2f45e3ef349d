package term

import (
	"path/filepath"
	"strings"

	"steelyard/protocol/diag"
)

// Diagnostics is the long form of a list, each fault placed in the file as
// the user called it: path is the record's, and files that the record names
// are shown under the record's folder.
func Diagnostics(list diag.List, src *diag.Source, path string, color bool) []byte {
	named := *src
	named.Name = path
	var b strings.Builder
	for _, d := range list {
		text := diag.Format(Placed(d, path), &named)
		if color {
			text = emphasise(text, d.Severity)
		}
		b.WriteString(text)
	}
	return []byte(b.String())
}

// Placed moves a fault of another file under the folder of the record.
func Placed(d diag.Diagnostic, path string) diag.Diagnostic {
	if d.File != "" {
		d.File = filepath.Join(filepath.Dir(path), filepath.FromSlash(d.File))
	}
	return d
}

// emphasise sets the word of the severity in the first line. The word itself
// carries the meaning; the emphasis only helps to find it.
func emphasise(text string, s diag.Severity) string {
	word := s.String() + ":"
	style := "1"
	switch s {
	case diag.SeverityError:
		style = "1;31"
	case diag.SeverityWarning:
		style = "1;33"
	case diag.SeverityNote:
		style = "1"
	}
	return strings.Replace(text, " "+word+" ", " \x1b["+style+"m"+word+"\x1b[0m ", 1)
}

// Summary is "2 errors, 1 warning", or "no faults".
func Summary(list diag.List) string {
	var parts []string
	for _, s := range []diag.Severity{diag.SeverityError, diag.SeverityWarning, diag.SeverityNote} {
		if n := list.Count(s); n > 0 {
			parts = append(parts, Count(n, s.String()))
		}
	}
	if parts == nil {
		return "no faults"
	}
	return strings.Join(parts, ", ")
}
