package pdf

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf16"
	"unicode/utf8"

	"golang.org/x/text/unicode/norm"
)

// A RuneError says that the document holds characters that cannot be set.
type RuneError struct {
	Runes []BadRune // in order of appearance, each rune once
}

// BadRune is one character that cannot be set and where it first stood.
type BadRune struct {
	Rune  rune
	Where string // the heading above it, or the part of the document
	Text  string // the words around it
	Why   string
}

func (e *RuneError) Error() string {
	var b strings.Builder
	for i, r := range e.Runes {
		if i > 0 {
			b.WriteString("; ")
		}
		if unicode.IsGraphic(r.Rune) {
			fmt.Fprintf(&b, "%U %q %s, in %s: %q", r.Rune, r.Rune, r.Why, r.Where, r.Text)
		} else {
			fmt.Fprintf(&b, "%U %s, in %s: %q", r.Rune, r.Why, r.Where, r.Text)
		}
	}
	return b.String()
}

// Reasons a rune cannot be set.
const (
	whyMissing  = "is in none of the typefaces"
	whyControl  = "is a control character"
	whyRight    = "belongs to a script written from right to left, which is not set"
	whyEncoding = "is not valid UTF-8"
)

// mapped gives what is set in place of a rune. actual reports that the text
// read back must still be the rune, so that it is kept as actual text.
func mapped(r rune) (s string, raise int, actual bool) {
	switch r {
	case '\n', '\t':
		return " ", 0, false
	case 0x00ad, 0x2060, 0xfeff:
		return "", 0, false // soft hyphen, word joiner, byte order mark
	case 0x2010, 0x2011:
		return "-", 0, false
	case '⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹':
		return string(superDigit(r)), 1, true
	case '⁺':
		return "+", 1, true
	case '⁻':
		return "−", 1, true
	case '₀', '₁', '₂', '₃', '₄', '₅', '₆', '₇', '₈', '₉':
		return string('0' + r - '₀'), -1, true
	}
	return "", 0, false
}

func superDigit(r rune) rune {
	switch r {
	case '¹':
		return '1'
	case '²', '³':
		return '2' + r - '²'
	}
	return '0' + r - '⁰'
}

// substitute is tried when no face has the rune. It holds only signs of the
// same meaning; everything else is refused.
func substitute(r rune) rune {
	switch r {
	case 0x2000, 0x2001, 0x2002, 0x2003, 0x2004, 0x2005, 0x2006, 0x2007, 0x2008, 0x2009, 0x200a, 0x202f, 0x205f:
		return 0x00a0
	case '∼':
		return '~'
	case '⋅':
		return '·'
	case '‐':
		return '-'
	}
	return 0
}

// clean brings text to composed form and reports bytes that are no UTF-8 and
// characters that no left-to-right line can hold.
func (s *setter) clean(text string) string {
	plain := true
	for i := 0; i < len(text); i++ {
		if text[i] < 0x20 || text[i] >= 0x7f {
			plain = false
			break
		}
	}
	if plain {
		return text
	}
	if !utf8.ValidString(text) {
		s.bad(utf8.RuneError, text, whyEncoding)
		text = strings.ToValidUTF8(text, "?")
	}
	text = norm.NFC.String(strings.ReplaceAll(text, "\r\n", "\n"))
	for _, r := range text {
		switch {
		case r == '\n' || r == '\t' || r == 0x200b:
		case unicode.IsControl(r) || r == 0x2028 || r == 0x2029:
			s.bad(r, text, whyControl)
		case rightToLeft(r):
			s.bad(r, text, whyRight)
		}
	}
	return text
}

func rightToLeft(r rune) bool {
	return r >= 0x0590 && r <= 0x08ff || r >= 0xfb1d && r <= 0xfdff || r >= 0xfe70 && r <= 0xfefe ||
		r >= 0x10800 && r <= 0x10fff || r >= 0x1e800 && r <= 0x1efff ||
		r == 0x200e || r == 0x200f || r >= 0x202a && r <= 0x202e || r >= 0x2066 && r <= 0x2069
}

// bad notes a rune that cannot be set; the document is then refused.
func (s *setter) bad(r rune, text, why string) {
	for _, b := range s.refused {
		if b.Rune == r {
			return
		}
	}
	at := strings.IndexRune(text, r)
	from, to := max(0, at-24), min(len(text), at+24)
	for from > 0 && !utf8.RuneStart(text[from]) {
		from--
	}
	for to < len(text) && !utf8.RuneStart(text[to]) {
		to++
	}
	s.refused = append(s.refused, BadRune{Rune: r, Where: s.where, Text: text[from:to], Why: why})
}

// open is the face, read once per document; nil for a user face not given.
func (s *setter) open(id faceID) *cut {
	if c := s.cuts[id]; c != nil {
		return c
	}
	data := faceBytes(id)
	if id == extra {
		data = s.doc.Typeface
	}
	if len(data) == 0 {
		return nil
	}
	f, err := openFace(data)
	if err == nil && f.restricted {
		err = fmt.Errorf("the typeface %s forbids embedding", f.name)
	}
	if err != nil {
		if s.err == nil {
			s.err = fmt.Errorf("pdf: typeface: %w", err)
		}
		return nil
	}
	s.cuts[id] = newCut(f, fmt.Sprintf("face%d", id))
	return s.cuts[id]
}

// find is the face that has the rune: the wanted one, the user's, then the
// upright text faces.
func (s *setter) find(id faceID, r rune) (faceID, int) {
	if c := s.open(id); c != nil {
		if g := c.face.gid(r); g != 0 {
			return id, g
		}
	}
	if r < 0x80 {
		return id, 0
	}
	for _, other := range [...]faceID{extra, sans, serif, mono} {
		if c := s.open(other); c != nil {
			if g := c.face.gid(r); g != 0 {
				return other, g
			}
		}
	}
	return id, 0
}

// utf16BE is text as big-endian UTF-16 without a mark.
func utf16BE(s string) []byte {
	var b []byte
	for _, u := range utf16.Encode([]rune(s)) {
		b = append(b, byte(u>>8), byte(u))
	}
	return b
}
