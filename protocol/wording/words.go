package wording

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// token is one word of a sentence, in lower case, with its place in the text.
// Hyphens part words, "isn't" is two of them.
type token struct {
	text       string
	start, end int
	brk        bool // a new clause begins here
	comma      bool // a comma or bracket stands before it
	quoted     bool // inside quotation marks
}

// sentence is a run of words up to a full stop, question mark or empty line.
type sentence struct {
	tokens   []token
	question bool
	terms    []mention
	kinds    []termSet // of every word
}

// longest is the number of words after which a text without full stops is
// taken apart, so that the work stays proportional to its length.
const longest = 300

// scanner cuts a text into sentences.
type scanner struct {
	text    string
	out     []sentence
	now     sentence
	next    token // what stands before the next word
	quoted  bool
	inQuote int // words since the quotation mark
}

// sentences cuts a text into sentences and these into words.
func sentences(text string) []sentence {
	s := &scanner{text: text}
	for i := 0; i < len(text); {
		r, size := utf8.DecodeRuneInString(text[i:])
		if isLetter(r) {
			i = s.word(i)
			continue
		}
		s.mark(r, i)
		i += size
	}
	s.flush(false)
	return s.out
}

func (s *scanner) flush(question bool) {
	if len(s.now.tokens) > 0 {
		s.now.question = question
		s.now.breaks()
		s.out = append(s.out, s.now)
	}
	s.now, s.next = sentence{}, token{}
}

// word reads the word at i and returns its end.
func (s *scanner) word(i int) int {
	t := s.next
	t.start, t.quoted = i, s.quoted
	t.text, t.end = readWord(s.text, i)
	s.next = token{}
	head, tail := contracted(t.text)
	t.text = head
	end := t.end
	if tail != "" {
		t.end -= len(tail)
		if t.end < t.start || !utf8.RuneStart(s.text[t.end]) { // written with a typographic apostrophe
			t.end = end
		}
	}
	s.now.tokens = append(s.now.tokens, t)
	if tail != "" {
		s.now.tokens = append(s.now.tokens, token{text: "not", start: t.start, end: end, quoted: s.quoted})
		s.now.tokens[len(s.now.tokens)-2].end = end
	}
	if s.quoted {
		if s.inQuote++; s.inQuote > longest {
			s.quoted = false
		}
	}
	if len(s.now.tokens) >= longest {
		s.flush(false)
	}
	return end
}

// contracted splits "isn't", "cannot" and their like into verb and "not".
func contracted(w string) (head, tail string) {
	switch w {
	case "cannot":
		return "can", "not"
	case "can't":
		return "can", "'t"
	case "won't":
		return "will", "n't"
	case "shan't":
		return "shall", "n't"
	}
	if h, ok := strings.CutSuffix(w, "n't"); ok && h != "" {
		return h, "n't"
	}
	for _, end := range []string{"'s", "'re", "'ve", "'ll", "'d"} {
		if h, ok := strings.CutSuffix(w, end); ok && h != "" {
			return h, ""
		}
	}
	return w, ""
}

// mark reads one sign between words.
func (s *scanner) mark(r rune, i int) {
	switch r {
	case ',':
		s.next.comma = true
	case '(', ')', '[', ']':
		s.next.comma = true
	case ';', ':', '—':
		s.next.brk = true
	case '–':
		if strings.HasPrefix(s.text[i+len("–"):], " ") {
			s.next.brk = true
		}
	case '"':
		s.quoted, s.inQuote = !s.quoted, 0
	case '“', '„', '«':
		s.quoted, s.inQuote = true, 0
	case '”', '»':
		s.quoted = false
	case '?':
		s.flush(true)
	case '!', '\u2029':
		s.flush(false)
	case '•':
		s.flush(false)
	case '\n':
		rest := strings.TrimLeft(s.text[i+1:min(len(s.text), i+8)], " \t\r")
		if strings.HasPrefix(rest, "\n") || strings.HasPrefix(rest, "- ") || strings.HasPrefix(rest, "* ") {
			s.flush(false)
		}
	case '.':
		if ends(s.text, i) {
			s.flush(false)
		}
	}
}

// isLetter reports whether a rune belongs to a word: a letter, a mark upon
// one, a digit, or the per cent sign.
func isLetter(r rune) bool {
	return unicode.IsLetter(r) || unicode.IsDigit(r) || unicode.Is(unicode.Mn, r) || r == '%'
}

// readWord reads the word at i and returns it and its end. Numbers keep their
// point, words their apostrophe; a per cent sign is a word of its own.
func readWord(text string, i int) (string, int) {
	if text[i] == '%' {
		return "%", i + 1
	}
	start, plain := i, true
	for i < len(text) {
		r, size := utf8.DecodeRuneInString(text[i:])
		next, _ := utf8.DecodeRuneInString(text[i+size:])
		switch {
		case r == '%':
			return lower(text[start:i], plain), i
		case isLetter(r):
			plain = plain && (r >= 'a' && r <= 'z' || r >= '0' && r <= '9')
		case (r == '\'' || r == '’') && unicode.IsLetter(next):
			plain = plain && r == '\''
		case r == '.' && unicode.IsDigit(next) && i > start && isDigit(text[i-1]):
		default:
			return lower(text[start:i], plain), i
		}
		i += size
	}
	return lower(text[start:i], plain), i
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

func lower(w string, plain bool) string {
	if plain {
		return w
	}
	return strings.ReplaceAll(strings.ToLower(w), "’", "'")
}

// ends reports whether the full stop at i ends a sentence: a blank and a
// capital or a digit, or nothing, behind it, and no short form before it.
func ends(text string, i int) bool {
	rest := strings.TrimLeft(text[i+1:min(len(text), i+16)], ")\"'”’]")
	trimmed := strings.TrimLeft(rest, " \t\r\n")
	if trimmed == "" {
		return true
	}
	r, _ := utf8.DecodeRuneInString(strings.TrimLeft(trimmed, `"“‘'([`))
	if rest == trimmed || !unicode.IsUpper(r) && !unicode.IsDigit(r) {
		return false
	}
	before := text[max(0, i-12):i]
	before = strings.ToLower(before[strings.LastIndexAny(before, " \n\t(")+1:])
	return !oneOf(before, "vs", "e.g", "i.e", "cf", "no", "fig", "approx", "dr", "al", "resp", "ca", "incl", "max", "min") ||
		before == "no" && !isDigit(trimmed[0])
}

// breaks marks where clauses begin: after a semicolon, colon or dash, at words
// that set one clause against another, and at "and" or "so" before a new subject.
func (s *sentence) breaks() {
	t := s.tokens
	for i := range t {
		if i == 0 {
			continue
		}
		switch w := t[i].text; w {
		case "but", "however", "although", "though", "whereas", "nevertheless", "nonetheless", "therefore", "hence", "thus", "because", "since", "yet", "despite":
			t[i].brk = t[i].brk || w != "yet" || t[i].comma || t[i-1].text == "and"
		case "while", "so", "which", "who", "whose", "where":
			t[i].brk = t[i].brk || t[i].comma || t[i-1].text == "and"
		case "as", "for":
			t[i].brk = t[i].brk || t[i].comma && i+2 < len(t) && !oneOf(t[i+1].text, "well", "long", "far", "good", "expected", "planned", "a", "example", "instance")
		case "and", "then":
			if i+1 < len(t) && (oneOf(t[i+1].text, "the", "it", "we", "there", "they", "both", "all", "this", "these", "so", "therefore", "thus", "hence", "its", "i", "our", "neither", "nothing", "no", "says", "say", "is", "was", "are", "were", "does", "did", "has", "have", "will", "can", "should", "must", "may", "might") ||
				w == "and" && t[i].comma && len(t[i+1].text) > 3 && i+2 < len(t) && oneOf(t[i+2].text, "is", "was", "are", "were", "has", "have", "will", "does", "did")) {
				t[i].brk = true
			}
		}
	}
}

// clause is the stretch of words without a break around the words from a to b.
func (s *sentence) clause(a, b int) (first, last int) {
	first, last = a, b
	for first > 0 && !s.tokens[first].brk {
		first--
	}
	for last < len(s.tokens) && !s.tokens[last].brk {
		last++
	}
	return first, last
}

func oneOf(word string, list ...string) bool {
	for _, w := range list {
		if w == word {
			return true
		}
	}
	return false
}
