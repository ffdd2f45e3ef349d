// Package render is the door of the third room: a record and its result in, a
// composed page out. All the record's wording is here; nothing is computed,
// and nothing is printed that the record or the result does not hold.
//
//	doc := render.Compose(in, res)
//	err := pdf.Write(w, doc) // or text.Write
package render

import (
	"path"
	"slices"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/record"
	"steelyard/render/chart"
	"steelyard/render/page"
)

// Compose words and orders the whole document: page one, which decides, then
// every section that has something to say. Page one ends at the first
// page.PageBreak.
func Compose(in *protocol.Loaded, res *result.Result) *page.Document {
	c := &composer{in: in, rec: in.Record, res: res}
	c.pageOne()
	c.add(page.PageBreak{})
	c.plan()
	c.arrived()
	c.analyses()
	c.pooled()
	c.combined()
	c.families()
	c.looks()
	c.beliefs()
	c.next()
	c.timeline()
	c.deviations()
	c.diagnostics()
	c.conclusion()
	c.cautions()
	c.methods()
	c.choices()
	c.reproduce()
	c.signOff()
	return c.document()
}

// composer gathers the blocks of one document.
type composer struct {
	in     *protocol.Loaded
	rec    *record.Record
	res    *result.Result
	blocks []page.Block
	axes   map[string]chart.Axis // one an outcome
}

// document wraps the blocks with what every page carries.
func (c *composer) document() *page.Document {
	r := &c.res.Record
	d := &page.Document{
		Title: r.Title, Subject: c.rec.Plan.Question.V, Language: "en",
		Paper: c.rec.Head.Paper.V, Created: dateText(r.Date), Header: r.Title, Blocks: c.blocks,
	}
	if d.Paper == "" {
		d.Paper = "a4"
	}
	for _, a := range c.rec.Head.Authors {
		d.Authors = append(d.Authors, a.Name.V)
	}
	if r.Status != "effective" && r.Status != "" {
		d.Status = strings.ToUpper(r.Status)
	}
	d.Footer = append(d.Footer, identity(r))
	if r.SourceSHA256 != "" {
		d.Footer = append(d.Footer, "SHA-256 "+short(r.SourceSHA256))
	}
	if s := c.rec.Head.Confidential.V; s != "" {
		d.Footer = append(d.Footer, s)
	}
	d.Keywords = c.keywords()
	if !c.res.Masked && c.attaches("record") && len(c.in.Source.Text) > 0 {
		d.Attachments = append(d.Attachments, page.Attachment{
			Name: path.Base(c.in.Source.Name), Media: "application/toml", Description: "the record this document was made from",
			Relation: "Source", Modified: dateText(r.Date), Bytes: c.in.Source.Text,
		})
	}
	return d
}

// attaches reports whether the record asks for a kind of attachment; the
// record itself is the default.
func (c *composer) attaches(what string) bool {
	if !c.rec.Head.Attach.Stated {
		return what == "record"
	}
	return slices.ContainsFunc(c.rec.Head.Attach.V, func(s record.String) bool { return s.V == what })
}

// keywords are the measures and claims of the record, each once.
func (c *composer) keywords() []string {
	var k []string
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		for _, w := range []string{h.Claim, outcomeOf(c.res, h.Outcome).Measure} {
			if w != "" && !slices.Contains(k, w) {
				k = append(k, w)
			}
		}
	}
	return k
}

// identity is "QR-2026-014, version 2", or the title where there is no number.
func identity(r *result.Record) string {
	var parts []string
	if r.Number != "" {
		parts = append(parts, r.Number)
	} else {
		parts = append(parts, r.Title)
	}
	if r.Version != "" {
		parts = append(parts, "version "+r.Version)
	}
	return strings.Join(parts, ", ")
}

// short is the head of a digest.
func short(digest string) string {
	if len(digest) <= 16 {
		return digest
	}
	return digest[:16] + "…"
}

// dateText is the ISO date, "" for none.
func dateText(d record.Date) string {
	if d.IsZero() {
		return ""
	}
	return d.String()
}
