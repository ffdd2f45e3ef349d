package pdf

import (
	"crypto/md5"
	"encoding/binary"
	"encoding/xml"
	"fmt"
	"math"
	"sort"
	"strings"
)

// producer names the program in the file.
const producer = "Steelyard"

// marker is the metadata property that says the file is ours, as it stands in
// the file.
const marker = "<steelyard:writtenBy>" + producer + "</steelyard:writtenBy>"

// namespace is that of our metadata property.
const namespace = "urn:steelyard:file:1#"

func escapeXML(s string) string {
	var b strings.Builder
	xml.EscapeText(&b, []byte(s)) // a Builder takes everything
	return b.String()
}

// xmp is the metadata of the file, saying the same as the Info dictionary.
func (p *press) xmp() []byte {
	doc := p.d.s.doc
	var b strings.Builder
	b.WriteString("<?xpacket begin=\"\ufeff\" id=\"W5M0MpCehiHzreSzNTczkc9d\"?>\n<x:xmpmeta xmlns:x=\"adobe:ns:meta/\">\n" +
		"<rdf:RDF xmlns:rdf=\"http://www.w3.org/1999/02/22-rdf-syntax-ns#\">\n<rdf:Description rdf:about=\"\"" +
		" xmlns:pdfaExtension=\"http://www.aiim.org/pdfa/ns/extension/\" xmlns:pdfaSchema=\"http://www.aiim.org/pdfa/ns/schema#\"" +
		" xmlns:pdfaProperty=\"http://www.aiim.org/pdfa/ns/property#\">\n<pdfaExtension:schemas><rdf:Bag>\n")
	schema(&b, "PDF/UA identification schema", "http://www.aiim.org/pdfua/ns/id/", "pdfuaid", "part", "Integer", "part of ISO 14289 the file is built to")
	schema(&b, "Steelyard file schema", namespace, "steelyard", "writtenBy", "Text", "program that wrote the file")
	b.WriteString("</rdf:Bag></pdfaExtension:schemas>\n</rdf:Description>\n<rdf:Description rdf:about=\"\"" +
		" xmlns:dc=\"http://purl.org/dc/elements/1.1/\" xmlns:xmp=\"http://ns.adobe.com/xap/1.0/\" xmlns:pdf=\"http://ns.adobe.com/pdf/1.3/\"" +
		" xmlns:pdfaid=\"http://www.aiim.org/pdfa/ns/id/\" xmlns:pdfuaid=\"http://www.aiim.org/pdfua/ns/id/\" xmlns:steelyard=\"" + namespace + "\">\n")
	alt := func(tag, text string) {
		if text != "" {
			fmt.Fprintf(&b, "<%s><rdf:Alt><rdf:li xml:lang=\"x-default\">%s</rdf:li></rdf:Alt></%s>\n", tag, escapeXML(text), tag)
		}
	}
	part := 3
	if p.opt.archive1 {
		part = 1
	}
	fmt.Fprintf(&b, "<pdfaid:part>%d</pdfaid:part>\n<pdfaid:conformance>B</pdfaid:conformance>\n<pdfuaid:part>1</pdfuaid:part>\n%s\n", part, marker)
	alt("dc:title", doc.Title)
	alt("dc:description", doc.Subject)
	if a := p.authors(); a != "" {
		fmt.Fprintf(&b, "<dc:creator><rdf:Seq><rdf:li>%s</rdf:li></rdf:Seq></dc:creator>\n", escapeXML(a))
	}
	if p.language() != "" {
		fmt.Fprintf(&b, "<dc:language><rdf:Bag><rdf:li>%s</rdf:li></rdf:Bag></dc:language>\n", escapeXML(p.language()))
	}
	if k := strings.Join(doc.Keywords, ", "); k != "" {
		fmt.Fprintf(&b, "<pdf:Keywords>%s</pdf:Keywords>\n", escapeXML(k))
	}
	fmt.Fprintf(&b, "<pdf:Producer>%s</pdf:Producer>\n<xmp:CreatorTool>%s</xmp:CreatorTool>\n", producer, producer)
	if p.dated {
		t := p.when.Format("2006-01-02T15:04:05Z07:00")
		fmt.Fprintf(&b, "<xmp:CreateDate>%s</xmp:CreateDate>\n<xmp:ModifyDate>%s</xmp:ModifyDate>\n", t, t)
	}
	b.WriteString("</rdf:Description>\n</rdf:RDF>\n</x:xmpmeta>\n<?xpacket end=\"r\"?>")
	return []byte(b.String())
}

// schema declares one property, as PDF/A asks for every one it does not know.
func schema(b *strings.Builder, title, uri, prefix, name, kind, about string) {
	fmt.Fprintf(b, "<rdf:li rdf:parseType=\"Resource\"><pdfaSchema:schema>%s</pdfaSchema:schema><pdfaSchema:namespaceURI>%s</pdfaSchema:namespaceURI>"+
		"<pdfaSchema:prefix>%s</pdfaSchema:prefix><pdfaSchema:property><rdf:Seq><rdf:li rdf:parseType=\"Resource\"><pdfaProperty:name>%s</pdfaProperty:name>"+
		"<pdfaProperty:valueType>%s</pdfaProperty:valueType><pdfaProperty:category>internal</pdfaProperty:category><pdfaProperty:description>%s</pdfaProperty:description>"+
		"</rdf:li></rdf:Seq></pdfaSchema:property></rdf:li>\n", title, uri, prefix, name, kind, about)
}

func (p *press) authors() string { return strings.Join(p.d.s.doc.Authors, ", ") }

func (p *press) language() string {
	if l := p.d.s.doc.Language; l != "" {
		return l
	}
	return "en"
}

func (p *press) infoDict() string {
	doc := p.d.s.doc
	var b strings.Builder
	b.WriteString("<<")
	put := func(key, v string) {
		if v != "" {
			b.WriteString(key + textString(v))
		}
	}
	put("/Title", doc.Title)
	put("/Author", p.authors())
	put("/Subject", doc.Subject)
	put("/Keywords", strings.Join(doc.Keywords, ", "))
	put("/Creator", producer)
	put("/Producer", producer)
	if p.dated {
		t := p.when.Format("(D:20060102150405Z)")
		b.WriteString("/CreationDate" + t + "/ModDate" + t)
	}
	return b.String() + ">>"
}

func (p *press) writeCatalog(tree, outline int, names, files string, meta, intent int) {
	var b strings.Builder
	fmt.Fprintf(&b, "<</Type/Catalog/Pages %d 0 R/Metadata %d 0 R/OutputIntents[%d 0 R]/StructTreeRoot %d 0 R/MarkInfo<</Marked true>>/Lang%s/ViewerPreferences<</DisplayDocTitle true>>",
		p.pagesRoot, meta, intent, tree, textString(p.language()))
	if outline > 0 {
		fmt.Fprintf(&b, "/Outlines %d 0 R/PageMode/UseOutlines", outline)
	}
	b.WriteString(names + files + ">>")
	p.object(p.catalog, b.String())
}

// outline writes the bookmarks; 0 when there are none. The sections show, the
// headings below them are folded.
func (p *press) outline() int {
	type node struct {
		place
		parent, first, last, prev, next, count, object int
	}
	nodes := []node{{place: place{level: 0}}}
	open := []int{0}
	for _, pl := range p.d.s.places {
		if pl.level == 0 || pl.page == 0 {
			continue
		}
		for len(open) > 1 && nodes[open[len(open)-1]].level >= pl.level {
			open = open[:len(open)-1]
		}
		up := open[len(open)-1]
		i := len(nodes)
		nodes = append(nodes, node{place: pl, parent: up, prev: nodes[up].last})
		if nodes[up].last > 0 {
			nodes[nodes[up].last].next = i
		} else {
			nodes[up].first = i
		}
		nodes[up].last = i
		nodes[up].count++
		open = append(open, i)
	}
	if len(nodes) == 1 {
		return 0
	}
	for i := range nodes {
		nodes[i].object = p.reserve()
	}
	ref := func(key string, i int) string {
		if i == 0 {
			return ""
		}
		return fmt.Sprintf("/%s %d 0 R", key, nodes[i].object)
	}
	p.object(nodes[0].object, fmt.Sprintf("<</Type/Outlines%s%s/Count %d>>", ref("First", nodes[0].first), ref("Last", nodes[0].last), nodes[0].count))
	for _, n := range nodes[1:] {
		kids := ""
		if n.first > 0 {
			kids = ref("First", n.first) + ref("Last", n.last) + fmt.Sprintf("/Count -%d", n.count)
		}
		p.object(n.object, fmt.Sprintf("<</Title%s/Parent %d 0 R%s%s%s/Dest[%d 0 R/XYZ 0 %s null]>>", textString(n.title), nodes[n.parent].object,
			ref("Prev", n.prev), ref("Next", n.next), kids, p.pages[n.page-1], short(p.d.s.sheet.height-n.y)))
	}
	return nodes[0].object
}

// attachments writes the files carried along and returns the entries of the
// catalog that name them.
func (p *press) attachments() (names, files string) {
	atts := p.d.s.doc.Attachments
	if len(atts) == 0 || p.opt.archive1 {
		return "", ""
	}
	specs := make([]int, len(atts))
	order := make([]int, len(atts))
	for i, a := range atts {
		order[i] = i
		spec, stream := p.reserve(), p.reserve()
		specs[i] = spec
		date := ""
		if t, ok, err := instant(a.Modified); ok && err == nil {
			date = t.Format("/ModDate(D:20060102150405Z)")
		} else if p.dated {
			date = p.when.Format("/ModDate(D:20060102150405Z)")
		}
		media := a.Media
		if media == "" {
			media = "application/octet-stream"
		}
		sum := md5.Sum(a.Bytes)
		p.stream(stream, fmt.Sprintf("/Type/EmbeddedFile/Subtype/%s/Params<</Size %d/CheckSum<%X>%s>>", nameOf(media), len(a.Bytes), sum, date), a.Bytes)
		rel := a.Relation
		switch rel {
		case "Source", "Data", "Supplement", "Alternative":
		default:
			rel = "Unspecified"
		}
		desc := ""
		if a.Description != "" {
			desc = "/Desc" + textString(a.Description)
		}
		p.object(spec, fmt.Sprintf("<</Type/Filespec/F%s/UF%s%s/AFRelationship/%s/EF<</F %d 0 R/UF %d 0 R>>>>",
			literal(asciiName(a.Name)), textString(a.Name), desc, rel, stream, stream))
	}
	sort.SliceStable(order, func(i, j int) bool { return atts[order[i]].Name < atts[order[j]].Name })
	var b strings.Builder
	b.WriteString("/Names<</EmbeddedFiles<</Names[")
	for i, o := range order {
		fmt.Fprintf(&b, "(f%04d)%d 0 R ", i, specs[o])
	}
	b.WriteString("]>>>>")
	return b.String(), "/AF" + refs(specs)
}

// nameOf is a PDF name, with everything that may not stand plainly in one
// written as its code.
func nameOf(s string) string {
	var b strings.Builder
	for i := 0; i < len(s); i++ {
		c := s[i]
		if c >= '0' && c <= '9' || c >= 'A' && c <= 'Z' || c >= 'a' && c <= 'z' || strings.IndexByte("-+._", c) >= 0 {
			b.WriteByte(c)
		} else {
			fmt.Fprintf(&b, "#%02X", c)
		}
	}
	return b.String()
}

func asciiName(s string) string {
	return strings.Map(func(r rune) rune {
		if r < 0x20 || r > 0x7e {
			return '_'
		}
		return r
	}, s)
}

// intent writes the colour profile and says that colours are meant in it.
func (p *press) intent() int {
	profile, intent := p.reserve(), p.reserve()
	p.stream(profile, "/N 3", sRGB())
	p.object(intent, fmt.Sprintf("<</Type/OutputIntent/S/GTS_PDFA1/OutputConditionIdentifier(sRGB)/Info(sRGB)/DestOutputProfile %d 0 R>>", profile))
	return intent
}

// sRGB is an ICC v2 display profile made from the numbers of IEC 61966-2-1:
// primaries (0.64, 0.33), (0.30, 0.60), (0.15, 0.06), white D65, adapted to
// D50 by Bradford, and the transfer curve at 1024 points.
func sRGB() []byte {
	be := binary.BigEndian
	xyz := func(x, y, z float64) []byte {
		out := append([]byte("XYZ "), 0, 0, 0, 0)
		for _, v := range []float64{x, y, z} {
			out = be.AppendUint32(out, uint32(int32(math.Round(v*65536))))
		}
		return out
	}
	about := "sRGB"
	desc := append([]byte("desc"), 0, 0, 0, 0)
	desc = be.AppendUint32(desc, uint32(len(about)+1))
	desc = append(append(desc, about...), 0)
	desc = append(desc, make([]byte, 8+3+67)...)
	text := append([]byte("text\x00\x00\x00\x00"), "No copyright\x00"...)
	curve := append([]byte("curv"), 0, 0, 0, 0)
	curve = be.AppendUint32(curve, 1024)
	for i := range 1024 {
		v := float64(i) / 1023
		if v <= 0.04045 {
			v /= 12.92
		} else {
			v = math.Pow((v+0.055)/1.055, 2.4)
		}
		curve = be.AppendUint16(curve, uint16(math.Round(v*65535)))
	}
	tags := []struct {
		name string
		data []byte
	}{
		{"desc", desc}, {"cprt", text}, {"wtpt", xyz(0.9642, 1, 0.8249)},
		{"rXYZ", xyz(0.43604, 0.22248, 0.01392)}, {"gXYZ", xyz(0.38511, 0.71691, 0.09707)}, {"bXYZ", xyz(0.14305, 0.06061, 0.71391)},
		{"rTRC", curve}, {"gTRC", nil}, {"bTRC", nil}, // one curve for all three
	}
	table := be.AppendUint32(nil, uint32(len(tags)))
	var body []byte
	off, size := 0, 0
	for _, t := range tags {
		if t.data != nil {
			off, size = 128+4+12*len(tags)+len(body), len(t.data)
			body = append(body, t.data...)
			for len(body)%4 != 0 {
				body = append(body, 0)
			}
		}
		table = append(table, t.name...)
		table = be.AppendUint32(be.AppendUint32(table, uint32(off)), uint32(size))
	}
	head := make([]byte, 128)
	be.PutUint32(head, uint32(128+len(table)+len(body)))
	be.PutUint32(head[8:], 0x02100000)
	copy(head[12:], "mntrRGB XYZ ")
	for i, v := range []uint16{2026, 1, 1, 0, 0, 0} {
		be.PutUint16(head[24+2*i:], v)
	}
	copy(head[36:], "acsp")
	copy(head[68:], xyz(0.9642, 1, 0.8249)[8:])
	return append(append(head, table...), body...)
}
