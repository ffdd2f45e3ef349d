package main

import (
	"bytes"
	"compress/zlib"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strconv"
)

// inflated shows the contents of a PDF's pages as a person can read them:
// every drawing operator, with text in characters and typefaces by name; the
// distances of kerning are left out.
// Typefaces, colour profile and attachments themselves are left out.
func inflated(file []byte) ([]byte, error) {
	p := parts{}
	for _, m := range objects.FindAllSubmatch(file, -1) {
		p[string(m[1])] = m[2]
	}
	var out bytes.Buffer
	for _, m := range objects.FindAllSubmatch(file, -1) {
		if !bytes.Contains(m[2], []byte("/Type/Page/")) {
			continue
		}
		text, err := p.page(m[2])
		if err != nil {
			return nil, fmt.Errorf("object %s: %w", m[1], err)
		}
		fmt.Fprintf(&out, "== page, object %s\n%s", m[1], text)
	}
	if out.Len() == 0 {
		return nil, fmt.Errorf("no page was found in %d bytes", len(file))
	}
	return out.Bytes(), nil
}

var (
	objects   = regexp.MustCompile(`(?s)(\d+) 0 obj\n?(.*?)\nendobj`)
	contents  = regexp.MustCompile(`/Contents (\d+) 0 R`)
	resources = regexp.MustCompile(`/(F[0-9a-f]{20,}) (\d+) 0 R`)
	base      = regexp.MustCompile(`/BaseFont/[A-Z]{6}\+([A-Za-z-]+)`)
	unicodes  = regexp.MustCompile(`/ToUnicode (\d+) 0 R`)
	pairs     = regexp.MustCompile(`<([0-9A-F]{4})> <([0-9A-F]{4})>\n`)
	literal   = regexp.MustCompile(`(?s)\(((?:\\.|[^\\()])*)\)`)
	shown     = regexp.MustCompile(`(?s)/(F[0-9a-f]{20,}) ([0-9.]+) Tf|\((?:\\.|[^\\()])*\) Tj|\[(?:\((?:\\.|[^\\()])*\)|[-0-9. ]+)*\] TJ`)
	escapes   = regexp.MustCompile(`(?s)\\.`)
)

// parts are the objects of a file by number.
type parts map[string][]byte

// face is a typeface as a page uses it.
type face struct {
	name  string
	runes map[int]rune
}

func (p parts) page(dict []byte) ([]byte, error) {
	faces := map[string]face{}
	for _, m := range resources.FindAllSubmatch(dict, -1) {
		font := p[string(m[2])]
		f := face{runes: map[int]rune{}}
		if name := base.FindSubmatch(font); name != nil {
			f.name = string(name[1])
		}
		if u := unicodes.FindSubmatch(font); u != nil {
			table, err := p.stream(string(u[1]))
			if err != nil {
				return nil, err
			}
			for _, pair := range pairs.FindAllSubmatch(table, -1) {
				code, _ := strconv.ParseInt(string(pair[1]), 16, 32)
				r, _ := strconv.ParseInt(string(pair[2]), 16, 32)
				f.runes[int(code)] = rune(r)
			}
		}
		faces[string(m[1])] = f
	}
	ref := contents.FindSubmatch(dict)
	if ref == nil {
		return nil, errors.New("no contents")
	}
	plain, err := p.stream(string(ref[1]))
	if err != nil {
		return nil, err
	}
	var current face
	return shown.ReplaceAllFunc(plain, func(op []byte) []byte {
		m := shown.FindSubmatch(op)
		if len(m[1]) > 0 {
			current = faces[string(m[1])]
			return fmt.Appendf(nil, "/%s %s Tf", current.name, m[2])
		}
		var text string
		for _, part := range literal.FindAllSubmatch(op, -1) {
			text += current.decode(part[1])
		}
		return fmt.Appendf(nil, "(%s) %s", text, op[len(op)-2:])
	}), nil
}

// stream inflates the stream of an object.
func (p parts) stream(number string) ([]byte, error) {
	_, packed, ok := bytes.Cut(p[number], []byte("stream\n"))
	if !ok {
		return nil, fmt.Errorf("object %s is no stream", number)
	}
	r, err := zlib.NewReader(bytes.NewReader(packed))
	if err != nil {
		return nil, err
	}
	return io.ReadAll(r)
}

// decode turns codes of two bytes into characters; one without a character
// is shown as its number.
func (f face) decode(codes []byte) string {
	codes = escapes.ReplaceAllFunc(codes, func(e []byte) []byte {
		if e[1] == 'r' {
			return []byte{'\r'}
		}
		return e[1:]
	})
	var out bytes.Buffer
	for i := 0; i+1 < len(codes); i += 2 {
		code := int(codes[i])<<8 | int(codes[i+1])
		if r, ok := f.runes[code]; ok {
			out.WriteRune(r)
		} else {
			fmt.Fprintf(&out, "{%d}", code)
		}
	}
	return out.String()
}
