// Package pdf sets a composed page as a tagged PDF and reads such files back.
//
// It breaks lines, builds tables, shares the blocks out among pages and draws
// them with fpdf; a second pass writes everything around the drawing: fonts'
// dictionaries, structure tree, metadata, bookmarks, links and attachments.
// Files are built to PDF/A-3b and PDF/UA-1. Equal documents give equal bytes.
//
// It refuses to know what a record is: it chooses no word, rounds no number
// and reads no clock. Its own words are "page n of m", "Signature" and "Date and time".
//
//	var b bytes.Buffer
//	err := pdf.Write(&b, &page.Document{Title: "…", Language: "en", Paper: "a4", Blocks: blocks})
package pdf

import (
	"errors"
	"fmt"
	"io"
	"time"

	"github.com/go-pdf/fpdf"

	"steelyard/render/page"
)

// options are for tests: the twin of the file that an independent checker of
// PDF/A-1b can judge, and plain streams.
type options struct {
	archive1 bool // PDF/A-1b: no attachments, CIDSet
	plain    bool // no compression
}

// Write sets the document and writes it whole, or writes nothing and says
// why. Characters that no typeface has are a *RuneError; the document's own
// Typeface, a TrueType file, is asked before the built-in ones give up.
func Write(w io.Writer, doc *page.Document) error {
	out, err := build(doc, options{})
	if err != nil {
		return err
	}
	_, err = w.Write(out)
	return err
}

func build(doc *page.Document, opt options) ([]byte, error) {
	when, dated, err := instant(doc.Created)
	if err != nil {
		return nil, fmt.Errorf("pdf: date of the document: %w", err)
	}
	s := newSetter(doc)
	if len(doc.Typeface) > 0 {
		s.open(extra)
	}
	sh := s.sheet
	leaves := spread(s.flow(), sh)
	s.where = "the running head or foot"
	status := s.status()
	matter := make([]piece, len(leaves))
	for i := range leaves {
		matter[i] = s.matter(i+1, len(leaves))
	}
	if s.err != nil {
		return nil, s.err
	}
	if len(s.refused) > 0 {
		return nil, &RuneError{s.refused}
	}

	z := &squeezer{plain: opt.plain}
	f := fpdf.NewCustom(&fpdf.InitType{UnitStr: "pt", Size: fpdf.SizeType{Wd: sh.width, Ht: sh.height}})
	f.SetAutoPageBreak(false, 0)
	f.SetMargins(0, 0, 0)
	f.SetCompression(false)
	f.SetCatalogSort(true)
	f.SetCreationDate(time.Unix(0, 0).UTC())
	f.SetModificationDate(time.Unix(0, 0).UTC())
	d := &drawer{f: f, s: s}
	if err := d.fonts(); err != nil {
		return nil, fmt.Errorf("pdf: %w", err)
	}
	for i, l := range leaves {
		d.leaf(l, i+1, status, matter[i])
	}
	raw, err := d.output()
	if err != nil {
		return nil, fmt.Errorf("pdf: %w", err)
	}
	return finish(raw, d, opt, z, when, dated)
}

// instant reads a date or an instant; false for none.
func instant(s string) (time.Time, bool, error) {
	if s == "" {
		return time.Time{}, false, nil
	}
	for _, layout := range [...]string{time.RFC3339Nano, "2006-01-02"} {
		if t, err := time.Parse(layout, s); err == nil {
			return t.UTC().Truncate(time.Second), true, nil
		}
	}
	return time.Time{}, false, errors.New("not a date or instant as in RFC 3339: " + s)
}
