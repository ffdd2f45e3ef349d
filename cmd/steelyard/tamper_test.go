package main

import (
	"bytes"
	"compress/zlib"
	"crypto/md5"
	"fmt"
	"io"
	"os"
	"regexp"

	"github.com/rogpeppe/go-internal/testscript"
)

var streams = regexp.MustCompile(`<<[^\n]*/Length (\d+)[^\n]*>>\nstream\n`)

// tamper changes the streams of a PDF as somebody would who wants it to say
// something else.
//
//	tamper print FILE OLD NEW   the first digits printed on a page, glyph by glyph
//	tamper carry FILE OLD NEW   a text inside an attached file, its checksum too
//	tamper append FILE TEXT     bytes after the end
//	tamper cut FILE N           all but the first N hundredths
func tamper(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 3 {
		ts.Fatalf("usage: tamper print|carry|append|cut FILE …")
	}
	path := ts.MkAbs(args[1])
	file, err := os.ReadFile(path)
	ts.Check(err)
	switch {
	case args[0] == "append":
		file = append(file, args[2]...)
	case args[0] == "cut":
		var n int
		_, err := fmt.Sscan(args[2], &n)
		ts.Check(err)
		file = file[:len(file)*n/100]
	case args[0] == "print" && len(args) == 4:
		file, err = altered(file, glyphs(args[2]), glyphs(args[3]), false)
	case args[0] == "carry" && len(args) == 4:
		file, err = altered(file, []byte(args[2]), []byte(args[3]), true)
	default:
		ts.Fatalf("tamper %q: unknown", args)
	}
	ts.Check(err)
	ts.Check(os.WriteFile(path, file, 0o666))
}

// glyphs are digits and points as the built-in typefaces number them: zero is
// glyph 19, the point 17.
func glyphs(s string) []byte {
	var out []byte
	for _, c := range []byte(s) {
		out = append(out, 0, c-'0'+19)
	}
	return out
}

// altered replaces a text in the first stream that holds it.
func altered(file, old, now []byte, attached bool) ([]byte, error) {
	for _, m := range streams.FindAllSubmatchIndex(file, -1) {
		head, end := file[m[0]:m[1]], bytes.Index(file[m[1]:], []byte("\nendstream"))
		if bytes.Contains(head, []byte("/EmbeddedFile")) != attached || bytes.Contains(head, []byte("/Length1")) || end < 0 {
			continue
		}
		r, err := zlib.NewReader(bytes.NewReader(file[m[1] : m[1]+end]))
		if err != nil {
			continue
		}
		text, err := io.ReadAll(r)
		if err != nil || !bytes.Contains(text, old) {
			continue
		}
		changed := bytes.Replace(text, old, now, 1)
		var packed bytes.Buffer
		z := zlib.NewWriter(&packed)
		z.Write(changed)
		z.Close()
		head = bytes.Replace(head, fmt.Appendf(nil, "/Length %s", file[m[2]:m[3]]), fmt.Appendf(nil, "/Length %d", packed.Len()), 1)
		head = bytes.Replace(head, fmt.Appendf(nil, "%X", md5.Sum(text)), fmt.Appendf(nil, "%X", md5.Sum(changed)), 1)
		return bytes.Join([][]byte{file[:m[0]], head, packed.Bytes(), file[m[1]+end:]}, nil), nil
	}
	return nil, fmt.Errorf("nothing holds %q", old)
}
