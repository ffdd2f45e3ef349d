// Package text prints a composed page for a reader at a prompt: aligned
// columns, at most 80 of them. It chooses no word and computes nothing.
//
//	err := text.Write(os.Stdout, doc, text.Options{Width: 80})
package text

import (
	"bufio"
	"io"
	"strings"

	"steelyard/render/page"
)

// MaxWidth is how many columns are used at most.
const MaxWidth = 80

// minWidth is the narrowest page that is laid out; narrower terminals wrap.
const minWidth = 40

// Options say what the terminal can do and how much is wanted.
type Options struct {
	Width int  // columns; at most 80 are used; 0: 80
	Color bool // emphasis allowed
	Full  bool // the whole document; else page one, each further hypothesis in short, and the count of diagnostics
}

// Write prints the document.
func Write(w io.Writer, doc *page.Document, opt Options) error {
	p := &printer{out: bufio.NewWriter(w), width: MaxWidth, color: opt.Color}
	if opt.Width > 0 {
		p.width = max(minWidth, min(opt.Width, MaxWidth))
	}
	blocks := doc.Blocks
	if !opt.Full {
		blocks = compact(doc.Blocks)
	}
	if doc.Status != "" {
		p.line(p.bold("["+clean(doc.Status)+"]"), 0)
	}
	p.blocks(blocks, 0)
	return p.out.Flush()
}

// printer lays blocks out in columns.
type printer struct {
	out     *bufio.Writer
	width   int
	color   bool
	started bool // something was printed
}

// line prints one line at an indent, without trailing blanks.
func (p *printer) line(s string, indent int) {
	s = strings.TrimRight(strings.Repeat(" ", indent)+s, " ")
	p.out.WriteString(s)
	p.out.WriteByte('\n')
	p.started = true
}

// gap separates blocks.
func (p *printer) gap() {
	if p.started {
		p.out.WriteByte('\n')
	}
}

// blocks prints blocks, one blank line between them.
func (p *printer) blocks(blocks []page.Block, indent int) {
	for i, b := range blocks {
		if _, ok := b.(page.PageBreak); ok {
			continue
		}
		if i > 0 || p.started {
			if !tight(blocks, i) {
				p.gap()
			}
		}
		p.block(b, indent)
	}
}

// tight reports whether a block follows its heading without a blank line.
func tight(blocks []page.Block, i int) bool {
	if i == 0 {
		return false
	}
	h, ok := blocks[i-1].(page.Heading)
	return ok && h.Level >= 2
}

// block prints one block.
func (p *printer) block(b page.Block, indent int) {
	switch b := b.(type) {
	case page.Heading:
		p.heading(b, indent)
	case page.Paragraph:
		p.paragraph(b, indent)
	case page.List:
		p.list(b, indent)
	case page.Table:
		p.table(b, indent)
	case page.Facts:
		p.facts(b, indent)
	case page.Figure:
		p.figure(b, indent)
	case page.Verdict:
		p.verdict(b, indent)
	case page.Callout:
		p.callout(b, indent)
	case page.Verbatim:
		for _, l := range b.Lines {
			p.hanging("  ", l, indent)
		}
	case page.Signatures:
		p.signatures(b, indent)
	case page.PageBreak:
	default:
		panic("text: block of no known kind")
	}
}

// heading prints a heading with its rule.
func (p *printer) heading(h page.Heading, indent int) {
	for _, l := range wrap(plain(h.Text), p.width-indent) {
		p.line(p.bold(l), indent)
	}
	if h.Level <= 1 {
		sign := "-"
		if h.Level == 0 {
			sign = "="
		}
		n := 0
		for _, l := range wrap(plain(h.Text), p.width-indent) {
			n = max(n, width(l))
		}
		p.line(strings.Repeat(sign, n), indent)
	}
}

// paragraph prints running text; quotes are set in.
func (p *printer) paragraph(b page.Paragraph, indent int) {
	if b.Style == page.Quote {
		for _, l := range wrap(plain(b.Text), p.width-indent-2) {
			p.line("| "+l, indent)
		}
		return
	}
	for _, l := range wrap(plain(b.Text), p.width-indent) {
		p.line(l, indent)
	}
}

// list prints items with hanging indents.
func (p *printer) list(b page.List, indent int) {
	for i, it := range b.Items {
		mark := "- "
		if b.Ordered {
			mark = itoa(i+1) + ". "
		}
		p.hanging(mark, plain(it), indent)
	}
}

// hanging prints a mark and a text whose further lines stand under its start.
func (p *printer) hanging(mark, text string, indent int) {
	n := width(mark)
	for i, l := range wrap(text, p.width-indent-n) {
		if i == 0 {
			p.line(mark+l, indent)
		} else {
			p.line(strings.Repeat(" ", n)+l, indent)
		}
	}
}

// facts prints labels in one column and values in the next.
func (p *printer) facts(b page.Facts, indent int) {
	n := 0
	for _, f := range b.Items {
		if w := width(f.Label); w <= 28 {
			n = max(n, w)
		}
	}
	for _, f := range b.Items {
		value := plain(f.Value)
		label := clean(f.Label)
		if width(label) > n {
			for _, l := range wrap(label, p.width-indent) {
				p.line(l, indent)
			}
			label = ""
		}
		p.hanging(pad(label, n)+"  ", value, indent)
	}
}

// figure prints a figure in characters, or what it shows in words.
func (p *printer) figure(b page.Figure, indent int) {
	if len(b.Plain) == 0 {
		if c := plain(b.Caption); c != "" {
			p.hanging("Figure: ", c, indent)
		}
		p.paragraph(page.Paragraph{Text: page.T(b.Alt)}, indent+2)
		return
	}
	if c := plain(b.Caption); c != "" {
		p.hanging("Figure: ", c, indent)
	}
	for _, l := range b.Plain {
		p.line(clip(clean(l), p.width-indent), indent)
	}
}

// verdict prints the block of one hypothesis.
func (p *printer) verdict(b page.Verdict, indent int) {
	head := b.Name + "  " + b.Word
	if b.Qualify != "" {
		head += "  (" + clean(b.Qualify) + ")"
	}
	if width(head) <= p.width-indent {
		p.line(strings.Replace(head, "  "+b.Word, "  "+p.tone(b.Word, b.Tone), 1), indent)
	} else {
		p.line(b.Name+"  "+p.tone(b.Word, b.Tone), indent)
		p.hanging("  ", "("+b.Qualify+")", indent)
	}
	for _, in := range [][]page.Inline{b.Claim, b.Answer, b.Reading, b.Region} {
		if s := plain(in); s != "" {
			for _, l := range wrap(s, p.width-indent-2) {
				p.line(l, indent+2)
			}
		}
	}
	if b.Figure != nil {
		p.figure(page.Figure{Plain: b.Figure.Plain, Alt: b.Figure.Alt}, indent+2)
	}
}

// callout prints a box as a titled, set-in block.
func (p *printer) callout(b page.Callout, indent int) {
	title := b.Title
	if title == "" {
		title = calloutWord(b.Kind)
	}
	p.line(p.bold(clean(title)), indent)
	started := p.started
	p.started = false
	p.blocks(b.Blocks, indent+2)
	p.started = started
}

// plain is the characters of inlines; raised and lowered digits keep their
// place.
func plain(in []page.Inline) string {
	var b strings.Builder
	for _, i := range in {
		switch i := i.(type) {
		case page.Sup:
			b.WriteString(shifted(string(i), "⁰¹²³⁴⁵⁶⁷⁸⁹", "^"))
		case page.Sub:
			b.WriteString(shifted(string(i), "₀₁₂₃₄₅₆₇₈₉", "_"))
		default:
			b.WriteString(page.Plain([]page.Inline{i}))
		}
	}
	return b.String()
}

// shifted writes digits by their small forms, anything else behind a sign.
func shifted(s, digits, sign string) string {
	small := []rune(digits)
	var b strings.Builder
	for _, r := range s {
		if r < '0' || r > '9' {
			return sign + s
		}
		b.WriteRune(small[r-'0'])
	}
	return b.String()
}

// calloutWord is the title of a box that has none.
func calloutWord(k page.CalloutKind) string {
	switch k {
	case page.Note:
		return "Note"
	case page.Caution:
		return "Caution"
	case page.Warning:
		return "Warning"
	}
	panic("text: callout of no known kind")
}

// signatures prints the lines to sign.
func (p *printer) signatures(b page.Signatures, indent int) {
	for _, s := range b.Rows {
		text := s.Role
		if s.Name != "" {
			text += ", " + s.Name
		}
		if s.Meaning != "" {
			text += " (" + s.Meaning + ")"
		}
		p.hanging("", text, indent)
		for _, what := range []string{"signature", "date and time"} {
			p.line("  "+pad(what, 15)+strings.Repeat("_", min(40, p.width-indent-18)), indent)
		}
	}
	if s := plain(b.Note); s != "" {
		p.paragraph(page.Paragraph{Text: b.Note}, indent)
	}
}

// bold emphasises where the terminal allows it.
func (p *printer) bold(s string) string {
	if !p.color {
		return s
	}
	return "\x1b[1m" + s + "\x1b[0m"
}

// tone emphasises a verdict's word; the word alone carries the meaning.
func (p *printer) tone(word string, t page.Tone) string {
	if !p.color {
		return word
	}
	code := "1"
	switch t {
	case page.Neutral:
	case page.Established:
		code = "1;36"
	case page.Contradicted:
		code = "1;35"
	case page.Open:
		code = "1;33"
	case page.Suggested:
		code = "36"
	}
	return "\x1b[" + code + "m" + word + "\x1b[0m"
}
