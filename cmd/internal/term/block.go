package term

import (
	"bytes"
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Block is a report on one thing: a line that says what became of it, and
// below it rows of a label and what there is to say, aligned and broken at
// blanks. What does not belong at a prompt, such as the signs that steer a
// terminal, is replaced, so that a file cannot speak for the program.
type Block struct {
	width int
	b     bytes.Buffer
}

// labels is the width of the column of labels, with the blanks around it.
const labels = 12

// NewBlock begins a report for a width in columns.
func NewBlock(width int) *Block { return &Block{width: max(width, 40)} }

// Head writes the first line, never broken.
func (b *Block) Head(format string, args ...any) {
	fmt.Fprintln(&b.b, Clean(fmt.Sprintf(format, args...)))
}

// Row writes a label and a text.
func (b *Block) Row(label, format string, args ...any) {
	b.wrap(fmt.Sprintf("  %-*s", labels-2, label), fmt.Sprintf(format, args...), "")
}

// Line writes a text under the texts of the rows; where it is broken, it goes
// on a little further in.
func (b *Block) Line(format string, args ...any) {
	b.wrap(strings.Repeat(" ", labels), fmt.Sprintf(format, args...), "  ")
}

// Bytes is the block, ending in a newline.
func (b *Block) Bytes() []byte { return b.b.Bytes() }

func (b *Block) wrap(head, text, further string) {
	line, used := head, labels
	empty := true
	flush := func() {
		fmt.Fprintln(&b.b, strings.TrimRight(line, " "))
		line, used, empty = strings.Repeat(" ", labels)+further, labels+len(further), true
	}
	for _, word := range words(Clean(text)) {
		if n := utf8.RuneCountInString(strings.TrimRight(word, " ")); !empty && used+n > b.width {
			flush()
		}
		if empty && used > labels {
			word = strings.TrimLeft(word, " ")
		}
		line += word
		used += utf8.RuneCountInString(word)
		empty = false
	}
	flush()
}

// words are the words of a text, each with the blanks after it.
func words(s string) (out []string) {
	for len(s) > 0 {
		i := strings.IndexByte(s, ' ')
		if i < 0 {
			return append(out, s)
		}
		for i < len(s) && s[i] == ' ' {
			i++
		}
		out, s = append(out, s[:i]), s[i:]
	}
	return out
}

// Clean replaces what is not meant to be read: control signs, line ends
// included, invisible marks of direction, and bytes that are no text.
func Clean(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\t' || r == '\n' || r == '\r':
			return ' '
		case r == utf8.RuneError || unicode.IsControl(r) || unicode.Is(unicode.Bidi_Control, r) || unicode.Is(unicode.Zl, r) || unicode.Is(unicode.Zp, r):
			return '�'
		}
		return r
	}, s)
}
