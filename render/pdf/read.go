package pdf

import (
	"bytes"
	"crypto/md5"
	"crypto/sha256"
	"errors"
	"fmt"
	"sort"
	"unicode/utf16"
)

// File is what a PDF carries besides its pages.
type File struct {
	Title, Subject, Author, Producer string

	// Ours says that the metadata call the file written by Steelyard.
	Ours bool

	// Original is the length of the first revision, 0 when it cannot be
	// told; Appended is how many bytes follow it, as a signature adds.
	Original, Appended int
	// Intact says that the first revision's identifier is that of its bytes,
	// which holds for files that we wrote and that were at most appended to.
	Intact bool
	// Replaced says that what was appended changes the attachments.
	Replaced bool

	Attachments []Attachment
	// Recovered says that the file's list of attachments was lost, so that
	// only their bytes were found.
	Recovered bool
}

// Attachment is one file carried inside.
type Attachment struct {
	Name, Media, Description, Relation string
	Bytes                              []byte
	// Sum is "match", "differs" or "none": the checksum beside the bytes.
	Sum string
}

// Errors of Read.
var (
	ErrNotPDF    = errors.New("not a PDF file")
	ErrEncrypted = errors.New("the PDF is encrypted: save it without a password first")
)

// Limits on what a hostile file can make Read do.
const (
	maxUnpacked    = 96 << 20
	maxAttachments = 4096
	maxValues      = 1 << 21 // about what twenty thousand rows of a table give
)

// WrittenBySteelyard reports whether the file says that it was written by
// this program.
func WrittenBySteelyard(file []byte) bool {
	return bytes.HasPrefix(file, []byte("%PDF-")) && bytes.Contains(file, []byte(marker))
}

// Read takes attachments and metadata out of a PDF, one of ours or one saved
// again by another program. It walks the file once from the front, so that a
// damaged cross-reference table does no harm; time and memory are bounded by
// the file's length and maxUnpacked.
func Read(file []byte) (*File, error) {
	head := file[:min(len(file), 1024)]
	if !bytes.Contains(head, []byte("%PDF-")) {
		return nil, ErrNotPDF
	}
	out := &File{}
	out.Original, out.Intact = firstRevision(file)
	if out.Original > 0 {
		out.Appended = len(file) - out.Original
	}
	budget := maxUnpacked
	w := scan(file, &budget)
	if w.encrypted {
		return nil, ErrEncrypted
	}
	if w.left < 0 {
		return nil, errTooMany
	}
	w.metadata(out)
	out.Ours = out.Ours || WrittenBySteelyard(file)
	var err error
	if out.Attachments, out.Recovered, err = w.attachments(); err != nil {
		return nil, err
	}
	if out.Intact && out.Appended > 0 {
		budget := maxUnpacked
		first, _, err := scan(file[:out.Original], &budget).attachments()
		if err != nil {
			return nil, err
		}
		out.Replaced = !sameFiles(first, out.Attachments)
	}
	return out, nil
}

func sameFiles(a, b []Attachment) bool {
	if len(a) != len(b) {
		return false
	}
	for i := range a {
		if a[i].Name != b[i].Name || a[i].Relation != b[i].Relation || !bytes.Equal(a[i].Bytes, b[i].Bytes) {
			return false
		}
	}
	return true
}

// firstRevision finds the end of the first revision: the first trailer whose
// startxref points to a cross-reference table before it. The file is intact
// when the trailer's identifier is the hash of the bytes before that table.
func firstRevision(b []byte) (length int, intact bool) {
	const word = "startxref"
	for at, from := 0, 0; ; from = at + len(word) {
		i := bytes.Index(b[from:], []byte(word))
		if i < 0 {
			return 0, false
		}
		at = from + i
		p := parser{b: b[:min(len(b), at+64)], i: at + len(word)}
		p.skip()
		xref := number(p.b[p.i:])
		if xref <= 0 || xref >= at || !bytes.HasPrefix(b[xref:], []byte("xref")) {
			continue
		}
		i = bytes.Index(p.b[p.i:], []byte("%%EOF"))
		if i < 0 {
			continue
		}
		end := p.i + i + len("%%EOF")
		if bytes.HasPrefix(b[end:], []byte("\r\n")) {
			end += 2
		} else if end < len(b) && (b[end] == '\n' || b[end] == '\r') {
			end++
		}
		sum := sha256.Sum256(b[:xref])
		return end, bytes.Contains(b[xref:at], fmt.Appendf(nil, "/ID[<%X>", sum[:16]))
	}
}

// get follows references, a few at most.
func (w *walked) get(v any) any {
	for range 8 {
		r, ok := v.(pdfRef)
		if !ok {
			return v
		}
		v = w.objects[int(r)]
	}
	return nil
}

func (w *walked) dict(v any) pdfDict {
	d, _ := w.get(v).(pdfDict)
	return d
}

func (w *walked) text(v any) string {
	b, _ := w.get(v).([]byte)
	return decodeText(b)
}

// decodeText reads a text string: UTF-16 or UTF-8 with a mark, else Latin-1,
// which the PDF encoding follows for all but a few signs.
func decodeText(b []byte) string {
	switch {
	case bytes.HasPrefix(b, []byte{0xfe, 0xff}):
		u := make([]uint16, 0, len(b)/2)
		for i := 2; i+1 < len(b); i += 2 {
			u = append(u, uint16(b[i])<<8|uint16(b[i+1]))
		}
		return string(utf16.Decode(u))
	case bytes.HasPrefix(b, []byte{0xef, 0xbb, 0xbf}):
		return string(bytes.ToValidUTF8(b[3:], []byte("\ufffd")))
	}
	r := make([]rune, len(b))
	for i, c := range b {
		r[i] = rune(c)
	}
	return string(r)
}

// catalog is the document's root: the trailer's, or any found.
func (w *walked) catalog() pdfDict {
	if d := w.dict(w.trailer["Root"]); d != nil {
		return d
	}
	best := -1
	for n, v := range w.objects {
		if d, ok := v.(pdfDict); ok && d["Type"] == pdfName("Catalog") && n > best {
			best = n
		}
	}
	d, _ := w.objects[best].(pdfDict)
	return d
}

func (w *walked) metadata(out *File) {
	info := w.dict(w.trailer["Info"])
	out.Title, out.Subject = w.text(info["Title"]), w.text(info["Subject"])
	out.Author, out.Producer = w.text(info["Author"]), w.text(info["Producer"])
	if r, ok := w.catalog()["Metadata"].(pdfRef); ok {
		if data, ok := w.streams[int(r)]; ok {
			text, _ := inflate(w.dict(r), data, w.budget)
			out.Ours = bytes.Contains(text, []byte(marker))
		}
	}
}

// attachments lists what the catalog names, in its order; failing that, the
// embedded streams themselves.
func (w *walked) attachments() ([]Attachment, bool, error) {
	root := w.catalog()
	var specs []any
	seen := map[pdfRef]bool{}
	if af, ok := w.get(root["AF"]).([]any); ok {
		specs = append(specs, af...)
	}
	w.names(w.dict(root["Names"])["EmbeddedFiles"], seen, 0, &specs)
	var out []Attachment
	done := map[pdfRef]bool{}
	for _, s := range specs {
		if r, ok := s.(pdfRef); ok {
			if done[r] {
				continue
			}
			done[r] = true
		}
		if len(out) == maxAttachments {
			break
		}
		a, ok, err := w.attachment(w.dict(s))
		if err != nil {
			return nil, false, err
		}
		if ok {
			out = append(out, a)
		}
	}
	if len(out) > 0 {
		return out, false, nil
	}
	sort.Ints(w.order)
	for i, n := range w.order {
		if i > 0 && w.order[i-1] == n || len(out) == maxAttachments {
			continue
		}
		a, ok, err := w.embedded(pdfRef(n))
		if err != nil {
			return nil, false, err
		}
		if ok {
			out = append(out, a)
		}
	}
	return out, len(out) > 0, nil
}

// names walks a name tree.
func (w *walked) names(v any, seen map[pdfRef]bool, depth int, out *[]any) {
	if r, ok := v.(pdfRef); ok {
		if seen[r] {
			return
		}
		seen[r] = true
	}
	d := w.dict(v)
	if d == nil || depth > maxDepth || len(*out) > 2*maxAttachments {
		return
	}
	if pairs, ok := w.get(d["Names"]).([]any); ok {
		for i := 1; i < len(pairs); i += 2 {
			*out = append(*out, pairs[i])
		}
	}
	if kids, ok := w.get(d["Kids"]).([]any); ok {
		for _, k := range kids {
			w.names(k, seen, depth+1, out)
		}
	}
}

func (w *walked) attachment(spec pdfDict) (Attachment, bool, error) {
	ef := w.dict(spec["EF"])
	v := ef["UF"]
	if v == nil {
		v = ef["F"]
	}
	r, ok := v.(pdfRef)
	if !ok {
		return Attachment{}, false, nil
	}
	a, ok, err := w.embedded(r)
	if a.Name = w.text(spec["UF"]); a.Name == "" {
		a.Name = w.text(spec["F"])
	}
	a.Description = w.text(spec["Desc"])
	rel, _ := w.get(spec["AFRelationship"]).(pdfName)
	a.Relation = string(rel)
	if err != nil {
		err = fmt.Errorf("the attachment %q: %w", a.Name, err)
	}
	return a, ok, err
}

func (w *walked) embedded(r pdfRef) (Attachment, bool, error) {
	data, ok := w.streams[int(r)]
	if !ok {
		return Attachment{}, false, nil
	}
	d := w.dict(r)
	text, err := inflate(d, data, w.budget)
	if err != nil {
		return Attachment{}, false, err
	}
	media, _ := w.get(d["Subtype"]).(pdfName)
	a := Attachment{Media: string(media), Bytes: text, Sum: "none"}
	if want, ok := w.get(w.dict(d["Params"])["CheckSum"]).([]byte); ok && len(want) == md5.Size {
		a.Sum = "differs"
		if sum := md5.Sum(text); bytes.Equal(sum[:], want) {
			a.Sum = "match"
		}
	}
	return a, true, nil
}
