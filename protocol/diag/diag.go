// Package diag holds faults with their places: a source text, byte spans into
// it, diagnostics, and the two forms in which they are printed. It knows
// neither the record nor any number.
//
//	src := diag.NewSource("trial.toml", text)
//	list.Add(diag.Error("R210", key.Span, "unknown key %q", name).WithHelp("did you mean %q?", near))
//	list.Write(os.Stderr, src)
package diag

import (
	"fmt"
	"io"
	"sort"
	"strings"
	"unicode/utf8"
)

// Span is a half-open range of byte offsets in a source text.
type Span struct{ Start, End int }

// IsZero reports whether the span names no place.
func (s Span) IsZero() bool { return s == Span{} }

// Severity orders diagnostics by weight.
type Severity uint8

// The three severities.
const (
	SeverityError Severity = iota
	SeverityWarning
	SeverityNote
)

func (s Severity) String() string {
	switch s {
	case SeverityError:
		return "error"
	case SeverityWarning:
		return "warning"
	case SeverityNote:
		return "note"
	}
	panic("diag: unknown severity")
}

// Diagnostic is one fault, warning or note.
//
// Span points into the record. A fault of another file (a CSV column, a seal)
// names that File with its own Line and Column and may quote its Excerpt;
// Span then still points at the value of the record that named the file.
type Diagnostic struct {
	Code     string // permanent: R record, D data, S statistics, L seal, W wording
	Severity Severity
	Span     Span
	Message  string
	Help     string

	File    string // another file, relative to the record; "" for the record itself
	Line    int    // in File, from 1
	Column  int    // in File, characters from 1
	Excerpt string // that line, where it may be shown
}

// Error makes an error.
func Error(code string, at Span, format string, args ...any) Diagnostic {
	return Diagnostic{Code: code, Severity: SeverityError, Span: at, Message: fmt.Sprintf(format, args...)}
}

// Warning makes a warning.
func Warning(code string, at Span, format string, args ...any) Diagnostic {
	return Diagnostic{Code: code, Severity: SeverityWarning, Span: at, Message: fmt.Sprintf(format, args...)}
}

// Note makes a note.
func Note(code string, at Span, format string, args ...any) Diagnostic {
	return Diagnostic{Code: code, Severity: SeverityNote, Span: at, Message: fmt.Sprintf(format, args...)}
}

// WithHelp adds the repair.
func (d Diagnostic) WithHelp(format string, args ...any) Diagnostic {
	d.Help = fmt.Sprintf(format, args...)
	return d
}

// In places the diagnostic in another file.
func (d Diagnostic) In(file string, line, column int, excerpt string) Diagnostic {
	d.File, d.Line, d.Column, d.Excerpt = file, line, column, excerpt
	return d
}

// List collects diagnostics.
type List []Diagnostic

// Add appends diagnostics.
func (l *List) Add(d ...Diagnostic) { *l = append(*l, d...) }

// Count returns how many have the severity.
func (l List) Count(s Severity) int {
	n := 0
	for _, d := range l {
		if d.Severity == s {
			n++
		}
	}
	return n
}

// HasErrors reports whether any is an error.
func (l List) HasErrors() bool { return l.Count(SeverityError) > 0 }

// Sort orders by place in the record, then severity, then code and message,
// and removes exact repetitions.
func (l *List) Sort() {
	s := *l
	sort.SliceStable(s, func(i, j int) bool {
		a, b := s[i], s[j]
		if a.Span.Start != b.Span.Start {
			return a.Span.Start < b.Span.Start
		}
		if a.File != b.File {
			return a.File < b.File
		}
		if a.Line != b.Line {
			return a.Line < b.Line
		}
		if a.Column != b.Column {
			return a.Column < b.Column
		}
		if a.Severity != b.Severity {
			return a.Severity < b.Severity
		}
		if a.Code != b.Code {
			return a.Code < b.Code
		}
		return a.Message < b.Message
	})
	out := s[:0]
	for i, d := range s {
		if i > 0 && d == s[i-1] {
			continue
		}
		out = append(out, d)
	}
	*l = out
}

// Source is a text with its name, able to turn offsets into lines and columns.
type Source struct {
	Name  string
	Text  []byte
	lines []int // offset of the start of each line
}

// NewSource indexes a text.
func NewSource(name string, text []byte) *Source {
	s := &Source{Name: name, Text: text, lines: []int{0}}
	for i, b := range text {
		if b == '\n' {
			s.lines = append(s.lines, i+1)
		}
	}
	return s
}

// Position returns the line and the column, in characters, both from 1. A
// byte-order mark at the head of the text counts as no character. Offsets
// outside the text are moved to its nearest end.
func (s *Source) Position(offset int) (line, column int) {
	offset = max(0, min(offset, len(s.Text)))
	i := sort.SearchInts(s.lines, offset+1) - 1
	start := s.lines[i]
	column = utf8.RuneCount(s.Text[start:offset]) + 1
	if i == 0 && offset > 0 && strings.HasPrefix(string(s.Text[:min(3, len(s.Text))]), "\ufeff") && offset >= 3 {
		column--
	}
	return i + 1, column
}

// Line returns the text of a line from 1, without its end.
func (s *Source) Line(n int) string {
	if n < 1 || n > len(s.lines) {
		return ""
	}
	start, end := s.lines[n-1], len(s.Text)
	if n < len(s.lines) {
		end = s.lines[n] - 1
	}
	return strings.TrimPrefix(strings.TrimSuffix(string(s.Text[start:end]), "\r"), "\ufeff")
}

// Place returns file, line and column of a diagnostic of this source.
func (s *Source) Place(d Diagnostic) (file string, line, column int) {
	if d.File != "" {
		return d.File, d.Line, d.Column
	}
	line, column = s.Position(d.Span.Start)
	return s.Name, line, column
}

// Write prints every diagnostic in the long form: the one-line form, the
// source line with the place underlined, and the help.
func (l List) Write(w io.Writer, src *Source) error {
	for _, d := range l {
		if _, err := io.WriteString(w, Format(d, src)); err != nil {
			return err
		}
	}
	return nil
}

// OneLine is FILE:LINE:COLUMN: severity: MESSAGE [CODE].
func OneLine(d Diagnostic, src *Source) string {
	file, line, column := src.Place(d)
	place := file
	if line > 0 {
		place = fmt.Sprintf("%s:%d:%d", file, line, column)
	}
	return fmt.Sprintf("%s: %s: %s [%s]", place, d.Severity, d.Message, d.Code)
}

// Format is the long form of one diagnostic, ending in a newline.
func Format(d Diagnostic, src *Source) string {
	var b strings.Builder
	b.WriteString(OneLine(d, src))
	b.WriteByte('\n')
	_, line, column := src.Place(d)
	text, width := d.Excerpt, 1
	if d.File == "" {
		text = src.Line(line)
		end := min(d.Span.End, len(src.Text))
		if end > d.Span.Start {
			if endLine, endColumn := src.Position(end); endLine == line {
				width = endColumn - column
			} else {
				width = utf8.RuneCountInString(text) - column + 1
			}
		}
	}
	if text != "" {
		excerpt(&b, text, column, max(1, width))
	}
	if d.Help != "" {
		fmt.Fprintf(&b, "  help: %s\n", d.Help)
	}
	return b.String()
}

// excerptWidth is how many characters of a source line are shown at most.
const excerptWidth = 100

// excerpt prints the source line, cut to a window around the place, and the
// underline. Tabs become one blank so that the underline stands right.
func excerpt(b *strings.Builder, text string, column, width int) {
	runes := []rune(text)
	for i, r := range runes {
		if r < 0x20 || r == 0x7f {
			runes[i] = ' '
		}
	}
	at := min(max(0, column-1), len(runes))
	start, end := 0, len(runes)
	prefix, suffix := "", ""
	if len(runes) > excerptWidth {
		start = max(0, min(at-excerptWidth/3, len(runes)-excerptWidth))
		end = min(len(runes), start+excerptWidth)
		if start > 0 {
			prefix = "…"
		}
		if end < len(runes) {
			suffix = "…"
		}
	}
	fmt.Fprintf(b, "    %s%s%s\n", prefix, strings.TrimRight(string(runes[start:end]), " "), suffix)
	width = max(1, min(width, end-at))
	pad := strings.Repeat(" ", len([]rune(prefix))+at-start)
	fmt.Fprintf(b, "    %s%s\n", pad, strings.Repeat("^", width))
}
