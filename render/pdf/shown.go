package pdf

import (
	"crypto/sha256"
	"errors"
	"fmt"
	"hash"
	"math"
	"sort"
	"strconv"
	"strings"
)

// Shown is what one page shows, as far as it can be told without drawing it.
type Shown struct {
	Text string // in the order of drawing, a line end after each text object
	// Drawing is a digest of everything that is drawn with, and how: operators,
	// numbers, fonts, sizes of the page. Two pages with the same text and the
	// same drawing look the same; other programs may draw the same page
	// otherwise.
	Drawing [sha256.Size]byte
	Notes   int // annotations lying on the page: links, comments, signatures
}

// Limits on what a hostile file can make Pages do.
const (
	maxPages  = 1 << 14
	maxNested = 6 // forms drawn by forms
	maxShown  = 8 << 20
)

var errPages = errors.New("its pages cannot be read")

// Pages tells what each page shows. The bounds are those of Read.
func Pages(file []byte) ([]Shown, error) {
	budget := maxUnpacked
	w := scan(file, &budget)
	if w.encrypted {
		return nil, ErrEncrypted
	}
	s := &shower{w: w, fonts: map[pdfRef]*codes{}, sums: map[pdfRef]string{}, left: maxShown}
	var pages []Shown
	if err := s.walk(w.catalog()["Pages"], pdfDict{}, map[pdfRef]bool{}, 0, &pages); err != nil {
		return nil, err
	}
	if len(pages) == 0 || w.left < 0 || s.left < 0 {
		return nil, errPages
	}
	return pages, nil
}

// shower reads pages; fonts and digests are kept by object.
type shower struct {
	w     *walked
	fonts map[pdfRef]*codes
	sums  map[pdfRef]string
	left  int // bytes of text that may still be shown
}

// inherited are the entries that a page takes from the nodes above it.
var inherited = []pdfName{"Resources", "MediaBox", "CropBox", "Rotate"}

// walk goes through the tree of pages.
func (s *shower) walk(v any, above pdfDict, seen map[pdfRef]bool, depth int, out *[]Shown) error {
	if r, ok := v.(pdfRef); ok {
		if seen[r] {
			return errPages
		}
		seen[r] = true
	}
	d := s.w.dict(v)
	if d == nil || depth > maxDepth || len(*out) >= maxPages {
		return errPages
	}
	own := pdfDict{}
	for _, k := range inherited {
		if own[k] = above[k]; d[k] != nil {
			own[k] = d[k]
		}
	}
	kids, ok := s.w.get(d["Kids"]).([]any)
	if !ok {
		p, err := s.page(d, own)
		*out = append(*out, p)
		return err
	}
	for _, k := range kids {
		if err := s.walk(k, own, seen, depth+1, out); err != nil {
			return err
		}
	}
	return nil
}

func (s *shower) page(d, own pdfDict) (Shown, error) {
	var content []byte
	parts, ok := s.w.get(d["Contents"]).([]any)
	if !ok {
		parts = []any{d["Contents"]}
	}
	for _, part := range parts {
		r, ok := part.(pdfRef)
		if !ok {
			continue
		}
		text, err := inflate(s.w.dict(r), s.w.streams[int(r)], s.w.budget)
		if err != nil {
			return Shown{}, fmt.Errorf("a page: %w", err)
		}
		content = append(append(content, text...), '\n')
	}
	sum := sha256.New()
	for _, k := range inherited {
		fmt.Fprintln(sum, k, s.sum(own[k], 0))
	}
	t := &teller{s: s, drawing: sum}
	if err := t.tell(content, s.w.dict(own["Resources"]), 0); err != nil {
		return Shown{}, err
	}
	out := Shown{Text: t.text.String()}
	sum.Sum(out.Drawing[:0])
	notes, _ := s.w.get(d["Annots"]).([]any)
	out.Notes = len(notes)
	return out, nil
}

// sum is a digest of a value with all it refers to, other than pages and what
// tells only how it is stored.
func (s *shower) sum(v any, depth int) string {
	if s.w.left--; depth > maxDepth || s.w.left < 0 {
		return "deep"
	}
	switch v := v.(type) {
	case pdfRef:
		if known, ok := s.sums[v]; ok {
			return known
		}
		s.sums[v] = "round"
		sum := s.sum(s.w.objects[int(v)], depth+1)
		if data, ok := s.w.streams[int(v)]; ok {
			text, err := inflate(s.w.dict(v), data, s.w.budget)
			sum = hexSum(fmt.Appendf(nil, "%s %x %v", sum, sha256.Sum256(text), err != nil))
		}
		s.sums[v] = sum
		return sum
	case pdfDict:
		var keys []string
		for k := range v {
			keys = append(keys, string(k))
		}
		sort.Strings(keys)
		var b []byte
		for _, k := range keys {
			switch k {
			case "Length", "Length1", "Filter", "DecodeParms", "Parent", "P", "StructParent", "StructParents":
				continue
			}
			b = fmt.Appendf(b, "%q %s\n", k, s.sum(v[pdfName(k)], depth+1))
		}
		return hexSum(b)
	case []any:
		var b []byte
		for _, item := range v {
			b = append(append(b, s.sum(item, depth+1)...), '\n')
		}
		return hexSum(b)
	case []byte:
		return hexSum(append([]byte("text "), v...))
	case pdfName:
		return "/" + string(v)
	case float64:
		return rounded(v)
	}
	return "-"
}

func hexSum(b []byte) string { return fmt.Sprintf("%x", sha256.Sum256(b)) }

// rounded is a number as drawn: to a thousandth of a point.
func rounded(v float64) string {
	if v = math.Round(v*1000) / 1000; v == 0 {
		v = 0 // no sign
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

// teller follows the operators of one page.
type teller struct {
	s       *shower
	text    strings.Builder
	drawing hash.Hash
	font    *codes
}

// tell takes a stream of operators, with the resources they name.
func (t *teller) tell(content []byte, resources pdfDict, depth int) error {
	p := parser{b: content, left: &t.s.w.left}
	var operands []any
	for {
		p.skip()
		if p.i >= len(p.b) {
			return nil
		}
		if *p.left < 0 {
			return errTooMany
		}
		if v, err, ok := operand(&p); ok {
			if err != nil {
				return errPages
			}
			if operands = append(operands, v); len(operands) > 4096 {
				return errPages
			}
			continue
		}
		start := p.i
		for p.i < len(p.b) && !delimiter(p.b[p.i]) {
			p.i++
		}
		if p.i == start {
			p.i++ // a stray delimiter
			continue
		}
		*p.left--
		if err := t.operator(string(p.b[start:p.i]), operands, resources, depth); err != nil {
			return err
		}
		operands = operands[:0]
	}
}

// operand reads a value where one begins.
func operand(p *parser) (any, error, bool) {
	c := p.b[p.i]
	if c >= '0' && c <= '9' || strings.IndexByte("+-./(<[", c) >= 0 {
		v, err := p.value()
		return v, err, true
	}
	return nil, nil, false
}

func (t *teller) operator(op string, operands []any, resources pdfDict, depth int) error {
	switch op {
	case "BDC", "BMC", "EMC", "DP", "MP": // marks draw nothing
		return nil
	case "Tj", "'", "\"":
		if n := len(operands); n > 0 {
			t.show(operands[n-1])
		}
	case "TJ":
		if n := len(operands); n > 0 {
			list, _ := operands[n-1].([]any)
			for _, v := range list {
				t.show(v)
			}
		}
	case "ET":
		t.text.WriteByte('\n')
	case "Tf":
		t.font = nil
		if name, ok := first(operands).(pdfName); ok {
			ref := t.s.w.dict(resources["Font"])[name]
			t.font = t.s.codes(ref)
			fmt.Fprintln(t.drawing, t.s.sum(ref, 0))
		}
	case "Do", "gs", "sh", "cs", "CS", "scn", "SCN":
		name, _ := first(operands).(pdfName)
		for _, kind := range []pdfName{"XObject", "ExtGState", "Shading", "ColorSpace", "Pattern"} {
			if v, ok := t.s.w.dict(resources[kind])[name]; ok {
				fmt.Fprintln(t.drawing, kind, t.s.sum(v, 0))
			}
		}
		if op == "Do" {
			if err := t.form(t.s.w.dict(resources["XObject"])[name], resources, depth); err != nil {
				return err
			}
		}
	}
	fmt.Fprint(t.drawing, op)
	t.measure(operands)
	fmt.Fprintln(t.drawing)
	return nil
}

func first(list []any) any {
	if len(list) == 0 {
		return nil
	}
	return list[0]
}

// measure adds the numbers of an operator to the digest; texts are compared
// as texts and names mean nothing outside their file.
func (t *teller) measure(operands []any) {
	for _, v := range operands {
		switch v := v.(type) {
		case float64:
			fmt.Fprint(t.drawing, " ", rounded(v))
		case []any:
			t.measure(v)
		}
	}
}

// form follows what a drawing kept apart shows.
func (t *teller) form(v any, resources pdfDict, depth int) error {
	r, ok := v.(pdfRef)
	d := t.s.w.dict(v)
	if !ok || d["Subtype"] != pdfName("Form") {
		return nil
	}
	if depth >= maxNested {
		return errPages
	}
	text, err := inflate(d, t.s.w.streams[int(r)], t.s.w.budget)
	if err != nil {
		return errPages
	}
	own := t.s.w.dict(d["Resources"])
	if own == nil {
		own = resources
	}
	font := t.font
	defer func() { t.font = font }()
	return t.tell(text, own, depth+1)
}

// show adds a text in the present font.
func (t *teller) show(v any) {
	b, ok := v.([]byte)
	if !ok {
		return
	}
	if t.s.left -= len(b); t.s.left < 0 {
		return
	}
	if t.font == nil {
		t.text.WriteString(decodeText(b))
		return
	}
	t.font.write(&t.text, b)
}
