package pdf

import (
	"bytes"
	"compress/zlib"
	"crypto/sha256"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"
)

// squeezer is one deflate writer used for all streams: making one allocates
// more than everything else.
type squeezer struct {
	w     *zlib.Writer
	b     bytes.Buffer
	plain bool
}

// deflate returns the compressed bytes, at the fastest level.
func (z *squeezer) deflate(data []byte) []byte {
	z.b.Reset()
	if z.w == nil {
		z.w, _ = zlib.NewWriterLevel(&z.b, zlib.BestSpeed) // the level is valid
	} else {
		z.w.Reset(&z.b)
	}
	z.w.Write(data) // a bytes.Buffer takes everything
	z.w.Close()
	return bytes.Clone(z.b.Bytes())
}

// drawn is what fpdf made: page contents, and what it calls the faces.
type drawn struct {
	contents [][]byte
	fonts    []string // fpdf's name, a blank, the key the face was added under; sorted
}

var errDrawn = errors.New("pdf: the drawn file is not as expected")

// drawnTable finds the objects of a file through its cross-reference table.
type drawnTable struct {
	b, rows []byte
	count   int
}

func openDrawn(b []byte) (*drawnTable, error) {
	at := bytes.LastIndex(b, []byte("startxref\n"))
	if at < 0 {
		return nil, errDrawn
	}
	start := number(b[at+len("startxref\n"):])
	if start <= 0 || start >= at {
		return nil, errDrawn
	}
	lines := bytes.SplitN(b[start:at], []byte("\n"), 3)
	if len(lines) < 3 {
		return nil, errDrawn
	}
	return &drawnTable{b, lines[2], number(lines[1][bytes.IndexByte(lines[1], ' ')+1:])}, nil
}

// object is what follows "n 0 obj"; nil when there is no such object.
func (t *drawnTable) object(n int) []byte {
	if n <= 0 || n >= t.count || len(t.rows) < 20*(n+1) {
		return nil
	}
	off := number(t.rows[20*n:])
	if off < 0 || off >= len(t.b) {
		return nil
	}
	_, o, _ := bytes.Cut(t.b[off:], []byte(" obj\n"))
	return o
}

// parseDrawn takes apart the file fpdf wrote: pages, whose list is object 1,
// and fonts, which object 2 names. The file is our own, so its layout is
// known.
func parseDrawn(b []byte) (*drawn, error) {
	t, err := openDrawn(b)
	if err != nil {
		return nil, err
	}
	out := &drawn{}
	kids := t.object(1)
	from, to := bytes.IndexByte(kids, '['), bytes.IndexByte(kids, ']')
	if from < 0 || to < from {
		return nil, errDrawn
	}
	for _, ref := range strings.Split(string(kids[from+1:to]), " 0 R") {
		if ref = strings.TrimSpace(ref); ref == "" {
			continue
		}
		n, _ := strconv.Atoi(ref)
		content := streamOf(t.object(reference(t.object(n), "/Contents ")))
		if content == nil {
			return nil, errDrawn
		}
		out.contents = append(out.contents, content)
	}
	res, _, _ := bytes.Cut(t.object(2), []byte("endobj"))
	for _, f := range bytes.Split(res, []byte("/F"))[1:] {
		i := bytes.IndexByte(f, ' ')
		if i < 0 || bytes.HasPrefix(f, []byte("ont")) {
			continue
		}
		font := t.object(number(f[i+1:]))
		name := word(font, "/BaseFont /")
		if name == "" {
			return nil, errDrawn
		}
		out.fonts = append(out.fonts, string(f[:i])+" "+name)
	}
	slices.Sort(out.fonts)
	return out, nil
}

// number reads the digits at the start, -1 when there are none.
func number(b []byte) int {
	n, i := 0, 0
	for i < len(b) && i < 12 && b[i] >= '0' && b[i] <= '9' {
		n = n*10 + int(b[i]-'0')
		i++
	}
	if i == 0 {
		return -1
	}
	return n
}

func reference(o []byte, key string) int {
	if end := bytes.Index(o, []byte("endobj")); end >= 0 {
		o = o[:end]
	}
	i := bytes.Index(o, []byte(key))
	if i < 0 {
		return -1
	}
	return number(o[i+len(key):])
}

func word(o []byte, key string) string {
	i := bytes.Index(o, []byte(key))
	if i < 0 {
		return ""
	}
	o = o[i+len(key):]
	if j := bytes.IndexAny(o, " \n/>"); j >= 0 {
		return string(o[:j])
	}
	return ""
}

// streamOf is the data of a stream object with a direct /Length.
func streamOf(o []byte) []byte {
	i := bytes.Index(o, []byte("stream\n"))
	if i < 0 {
		return nil
	}
	j := bytes.Index(o[:i], []byte("/Length "))
	if j < 0 {
		return nil
	}
	n := number(o[j+8:])
	o = o[i+7:]
	if n < 0 || n > len(o) {
		return nil
	}
	return o[:n]
}

// file is the PDF being written.
type file struct {
	b       []byte
	offsets []int // by object number; 0 while unwritten
	z       *squeezer
}

// reserve gives the next object number.
func (f *file) reserve() int {
	f.offsets = append(f.offsets, 0)
	return len(f.offsets) - 1
}

func (f *file) begin(n int) {
	f.offsets[n] = len(f.b)
	f.b = strconv.AppendInt(f.b, int64(n), 10)
	f.b = append(f.b, " 0 obj\n"...)
}

// object writes an object that is no stream.
func (f *file) object(n int, body string) {
	f.begin(n)
	f.b = append(f.b, body...)
	f.b = append(f.b, "\nendobj\n"...)
}

// stream writes a stream; dict holds the entries besides length and filter.
func (f *file) stream(n int, dict string, data []byte) {
	if f.z.plain {
		f.raw(n, dict, data)
		return
	}
	f.raw(n, dict+"/Filter/FlateDecode", f.z.deflate(data))
}

// raw writes a stream as it is.
func (f *file) raw(n int, dict string, data []byte) {
	f.begin(n)
	f.b = fmt.Appendf(f.b, "<<%s/Length %d>>\nstream\n", dict, len(data))
	f.b = append(f.b, data...)
	f.b = append(f.b, "\nendstream\nendobj\n"...)
}

// finish writes the whole file around what fpdf drew.
func finish(raw []byte, d *drawer, opt options, z *squeezer, when time.Time, dated bool) ([]byte, error) {
	dr, err := parseDrawn(raw)
	if err != nil {
		return nil, err
	}
	p := &press{file: file{z: z, offsets: []int{0}}, d: d, opt: opt, when: when, dated: dated}
	p.b = make([]byte, 0, len(raw)+1<<15)
	version := "1.7"
	if opt.archive1 {
		version = "1.4"
	}
	p.b = append(p.b, "%PDF-"+version+"\n%\xe2\xe3\xcf\xd3\n"...)
	p.catalog, p.pagesRoot, p.info = p.reserve(), p.reserve(), p.reserve()
	p.pages = make([]int, len(dr.contents))
	for i := range p.pages {
		p.pages[i] = p.reserve()
	}
	if err := p.fonts(dr); err != nil {
		return nil, err
	}
	if err := p.linkObjects(); err != nil {
		return nil, err
	}
	p.writePages(dr)
	tree := p.structure()
	outline := p.outline()
	names, files := p.attachments()
	meta := p.reserve()
	p.raw(meta, "/Type/Metadata/Subtype/XML", p.xmp())
	intent := p.intent()
	p.writeCatalog(tree, outline, names, files, meta, intent)
	p.object(p.info, p.infoDict())
	return p.close(), nil
}

// close writes the cross-reference table and the trailer. The identifier is
// taken from the bytes before them.
func (p *press) close() []byte {
	sum := sha256.Sum256(p.b)
	at := len(p.b)
	p.b = fmt.Appendf(p.b, "xref\n0 %d\n0000000000 65535 f \n", len(p.offsets))
	for _, off := range p.offsets[1:] {
		p.b = fmt.Appendf(p.b, "%010d 00000 n \n", off)
	}
	p.b = fmt.Appendf(p.b, "trailer\n<</Size %d/Root %d 0 R/Info %d 0 R/ID[<%X><%X>]>>\nstartxref\n%d\n%%%%EOF\n",
		len(p.offsets), p.catalog, p.info, sum[:16], sum[:16], at)
	return p.b
}

// textString is a PDF text string: plain where it is ASCII, UTF-16 otherwise.
func textString(s string) string {
	for i := 0; i < len(s); i++ {
		if s[i] < 0x20 || s[i] > 0x7e {
			return fmt.Sprintf("<FEFF%X>", utf16BE(s))
		}
	}
	return literal(s)
}

// literal is an ASCII string in parentheses.
func literal(s string) string {
	b := make([]byte, 0, len(s)+8)
	b = append(b, '(')
	for i := 0; i < len(s); i++ {
		switch s[i] {
		case '\\', '(', ')':
			b = append(b, '\\', s[i])
		case '\r':
			b = append(b, '\\', 'r')
		case '\n':
			b = append(b, '\\', 'n')
		default:
			b = append(b, s[i])
		}
	}
	return string(append(b, ')'))
}
