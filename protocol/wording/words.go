package wording

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// word is a word of a sentence, in lower case.
type word struct {
	text       string
	start, end int
	breaks     bool // a new clause begins with it
	comma      bool // a comma stands before it
}

// sentence is the words between two full stops.
type sentence struct {
	words    []word
	question bool
}

// sentences cuts a text into sentences and words. Hyphens part words;
// apostrophes do not.
func sentences(text string) (out []sentence) {
	var s sentence
	pending := word{} // what stands before the next word
	flush := func(question bool) {
		if len(s.words) > 0 {
			s.question = question
			out = append(out, s)
		}
		s, pending = sentence{}, word{}
	}
	for i := 0; i < len(text); {
		r, size := utf8.DecodeRuneInString(text[i:])
		if isLetter(r) {
			w := pending
			w.start = i
			w.text, i = readWord(text, i)
			w.end = i
			w.breaks = w.breaks || len(s.words) > 0 && conjunctions[w.text]
			s.words = append(s.words, w)
			pending = word{}
			continue
		}
		switch r {
		case ',', '(', ')', '–', '—':
			pending.comma = true
		case ';', ':':
			pending.breaks = true
		case '?':
			flush(true)
		case '!', '\u2029':
			flush(false)
		case '\n':
			if strings.HasPrefix(strings.TrimLeft(text[i+1:], " \t\r"), "\n") { // an empty line
				flush(false)
			}
		case '.':
			if ends(text, i) {
				flush(false)
			}
		}
		i += size
	}
	flush(false)
	return out
}

// isLetter reports whether a rune belongs to a word: a letter, a digit, or
// the per cent sign behind a number.
func isLetter(r rune) bool { return unicode.IsLetter(r) || unicode.IsDigit(r) || r == '%' }

// readWord reads the word at i and returns it and its end. Numbers keep their
// point, words their apostrophe.
func readWord(text string, i int) (string, int) {
	var b strings.Builder
	for i < len(text) {
		r, size := utf8.DecodeRuneInString(text[i:])
		next, _ := utf8.DecodeRuneInString(text[i+size:])
		switch {
		case isLetter(r):
			b.WriteRune(unicode.ToLower(r))
		case (r == '\'' || r == '’') && unicode.IsLetter(next):
			b.WriteByte('\'')
		case r == '.' && unicode.IsDigit(next) && b.Len() > 0:
			b.WriteByte('.')
		default:
			return b.String(), i
		}
		i += size
	}
	return b.String(), i
}

// ends reports whether the full stop at i ends a sentence: blank and capital,
// or nothing, behind it, and no short form before it.
func ends(text string, i int) bool {
	rest := strings.TrimLeft(text[i+1:], ")\"'”’]")
	trimmed := strings.TrimLeft(rest, " \t\r\n")
	if trimmed == "" {
		return true
	}
	r, _ := utf8.DecodeRuneInString(trimmed)
	if rest == trimmed || !unicode.IsUpper(r) && !unicode.IsDigit(r) {
		return false
	}
	before := text[:i]
	before = strings.ToLower(before[strings.LastIndexAny(before, " \n\t(")+1:])
	return !shortForms[before]
}

var shortForms = map[string]bool{"vs": true, "e.g": true, "i.e": true, "cf": true, "no": true, "fig": true, "approx": true, "dr": true, "al": true, "resp": true}

// conjunctions begin a clause of its own.
var conjunctions = map[string]bool{"but": true, "however": true, "although": true, "though": true, "whereas": true,
	"while": true, "nevertheless": true, "nonetheless": true, "despite": true, "because": true, "since": true, "so": true}
