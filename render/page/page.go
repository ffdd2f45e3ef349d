// Package page is the composed record before it becomes text or PDF: a closed
// set of blocks and inlines that carry structure, language and alternative
// text. It lays nothing out and chooses no word.
package page

// Document is one composed record.
type Document struct {
	Title    string
	Subject  string
	Authors  []string
	Language string   // BCP 47, "en"
	Paper    string   // "a4" or "letter"
	Created  string   // RFC 3339 date or instant for the file's dates, from the record; "" for undated
	Status   string   // word marked across every page; "" for none
	Header   string   // running head, left
	Footer   []string // running foot: number and version, digest, confidentiality; page n of m is added
	Blocks   []Block

	Attachments []Attachment
	Keywords    []string

	Typeface []byte // a TrueType face asked for characters the built-in ones lack; nil for none
}

// Attachment is a file carried inside the PDF.
type Attachment struct {
	Name, Media, Description string
	Relation                 string // Source, Data, Supplement
	Modified                 string // RFC 3339 or ""
	Bytes                    []byte
}

// Block is one of the types below.
type Block interface{ block() }

// Heading opens a section; levels 1 to 3 without gaps. Headings become the
// bookmarks. Level 0 is the document's title on page one.
type Heading struct {
	Level  int
	Text   []Inline
	Anchor string // "" or a name that links point to
}

// ParagraphStyle is the role of a paragraph.
type ParagraphStyle uint8

// The paragraph styles.
const (
	Body  ParagraphStyle = iota
	Lead                 // the question, the answer in one sentence
	Small                // notes under tables, sources
	Quote                // the user's own words
)

// Paragraph is running text.
type Paragraph struct {
	Text  []Inline
	Style ParagraphStyle
}

// List is a list of short items.
type List struct {
	Ordered bool
	Items   [][]Inline
}

// Align is the alignment of a table column.
type Align uint8

// Alignments. Decimal aligns on the decimal sign.
const (
	Left Align = iota
	Right
	Center
	Decimal
)

// Column describes a table column.
type Column struct {
	Align Align
	Share float64 // of the width; 0: as wide as its cells, the rest shared
}

// Table has one head row and may span pages; its head repeats.
type Table struct {
	Caption []Inline
	Columns []Column
	Head    [][]Inline
	Rows    []Row
	Notes   []Inline
}

// Row is one row. Strong rows are totals; Grey rows are shown, not analysed.
type Row struct {
	Cells  [][]Inline
	Strong bool
	Grey   bool
}

// Facts is a list of labels with their values.
type Facts struct {
	Items   []Fact
	Columns int // 1 or 2 side by side
}

// Fact is one label and value.
type Fact struct {
	Label string
	Value []Inline
}

// Figure is a vector drawing with its alternative text. Plain is the same in
// characters for the terminal; nil prints the alternative text there.
type Figure struct {
	Caption []Inline
	Alt     string
	Drawing *Drawing
	Plain   []string
}

// Tone is how a verdict stands.
type Tone uint8

// The tones. Every tone also has its word and its mark; colour never carries
// the meaning alone.
const (
	Neutral Tone = iota // pending, described, masked
	Established
	Contradicted
	Open
	Suggested // an exploratory claim, at most suggested
)

// Verdict is the page-one block of one hypothesis.
type Verdict struct {
	Name    string // H1
	Word    string // ESTABLISHED, OPEN, …
	Qualify string // "post hoc", "unadjusted", …; "" for none
	Tone    Tone
	Claim   []Inline // what is claimed, in words
	Answer  []Inline // estimate, interval, level
	Reading []Inline
	Region  []Inline // margin or region and why it is that size
	Figure  *Figure  // the beam
}

// Callout is a set-apart box.
type Callout struct {
	Kind   CalloutKind
	Title  string
	Blocks []Block
}

// CalloutKind is the role of a callout.
type CalloutKind uint8

// The kinds of callout.
const (
	Note CalloutKind = iota
	Caution
	Warning
)

// Verbatim is text set as written: source lines, commands, digests.
type Verbatim struct{ Lines []string }

// Signatures is the sign-off block.
type Signatures struct {
	Rows []Signature
	Note []Inline
}

// Signature is one line to sign.
type Signature struct{ Role, Name, Meaning string }

// PageBreak starts a new page.
type PageBreak struct{}

func (Heading) block()    {}
func (Paragraph) block()  {}
func (List) block()       {}
func (Table) block()      {}
func (Facts) block()      {}
func (Figure) block()     {}
func (Verdict) block()    {}
func (Callout) block()    {}
func (Verbatim) block()   {}
func (Signatures) block() {}
func (PageBreak) block()  {}

// Inline is one of the types below.
type Inline interface{ inline() }

// Text is plain text.
type Text string

// Strong is text of weight.
type Strong string

// Emph is stressed text.
type Emph string

// Code is text as typed: keys, digests, commands.
type Code string

// Sub and Sup are small lowered and raised text.
type Sub string

// Sup is raised text.
type Sup string

// Link points to an anchor ("#name") or an address.
type Link struct{ Text, Target string }

func (Text) inline()   {}
func (Strong) inline() {}
func (Emph) inline()   {}
func (Code) inline()   {}
func (Sub) inline()    {}
func (Sup) inline()    {}
func (Link) inline()   {}

// T makes plain inlines.
func T(s string) []Inline { return []Inline{Text(s)} }

// Plain is the characters of inlines.
func Plain(in []Inline) string {
	var b []byte
	for _, i := range in {
		switch i := i.(type) {
		case Text:
			b = append(b, i...)
		case Strong:
			b = append(b, i...)
		case Emph:
			b = append(b, i...)
		case Code:
			b = append(b, i...)
		case Sub:
			b = append(b, i...)
		case Sup:
			b = append(b, i...)
		case Link:
			b = append(b, i.Text...)
		}
	}
	return string(b)
}
