package pdf

import (
	"fmt"
	"strconv"
	"strings"
	"time"
)

// press writes the parts of the file around the drawing.
type press struct {
	file
	d     *drawer
	opt   options
	when  time.Time
	dated bool

	catalog, pagesRoot, info int
	pages                    []int // object numbers
	resources                string
	annots                   [][]int // per page
	annotOwners              []*elem // by annotation, in the order of their keys
}

// fonts writes each face: Type0 over a CID font whose CIDs are glyph numbers.
func (p *press) fonts(dr *drawn) error {
	var res []string
	p.d.packing.Wait()
	for _, c := range p.d.s.cuts {
		if c == nil || c.file == nil {
			continue
		}
		found := ""
		for _, k := range dr.fonts {
			if strings.HasSuffix(k, " "+c.key) {
				found = k
			}
		}
		if found == "" {
			return errDrawn
		}
		font := p.font(c)
		res = append(res, fmt.Sprintf("/F%s %d 0 R", found[:strings.IndexByte(found, ' ')], font))
	}
	p.resources = "<</Font<<" + strings.Join(res, "") + ">>>>"
	return nil
}

func (p *press) font(c *cut) int {
	f := c.face
	name := c.subsetName(c.file)
	font, cid, desc, prog, uni := p.reserve(), p.reserve(), p.reserve(), p.reserve(), p.reserve()
	p.object(font, fmt.Sprintf("<</Type/Font/Subtype/Type0/BaseFont/%s/Encoding/Identity-H/DescendantFonts[%d 0 R]/ToUnicode %d 0 R>>", name, cid, uni))
	p.object(cid, fmt.Sprintf("<</Type/Font/Subtype/CIDFontType2/BaseFont/%s/CIDSystemInfo<</Registry(Adobe)/Ordering(Identity)/Supplement 0>>"+
		"/FontDescriptor %d 0 R/DW %d/W%s/CIDToGIDMap/Identity>>", name, desc, f.advance(0), c.widths()))
	flags := 4
	if f.fixed {
		flags |= 1
	}
	if f.italicAngle != 0 {
		flags |= 64
	}
	set := ""
	if p.opt.archive1 {
		n := p.reserve()
		p.stream(n, "", c.cidSet())
		set = fmt.Sprintf("/CIDSet %d 0 R", n)
	}
	p.object(desc, fmt.Sprintf("<</Type/FontDescriptor/FontName/%s/Flags %d/FontBBox[%d %d %d %d]/ItalicAngle %s/Ascent %d/Descent %d/CapHeight %d/StemV 80/FontFile2 %d 0 R%s>>",
		name, flags, f.thousand(int(f.bbox[0])), f.thousand(int(f.bbox[1])), f.thousand(int(f.bbox[2])), f.thousand(int(f.bbox[3])),
		strconv.FormatFloat(f.italicAngle, 'f', -1, 64), f.ascent, f.descent, f.capHeight, prog, set))
	p.raw(prog, fmt.Sprintf("/Filter/FlateDecode/Length1 %d", len(c.file)), c.packed)
	p.stream(uni, "", c.toUnicode())
	return font
}

// linkObjects writes an annotation for every place a link stands at.
func (p *press) linkObjects() error {
	p.annots = make([][]int, len(p.pages))
	h := p.d.s.sheet.height
	for _, sp := range p.d.spots {
		act := ""
		if anchor, ok := strings.CutPrefix(sp.el.target, "#"); ok {
			i, ok := p.d.s.anchors[anchor]
			if !ok {
				return fmt.Errorf("pdf: a link points to %q, and no heading has that anchor", sp.el.target)
			}
			pl := p.d.s.places[i]
			act = fmt.Sprintf("/Dest[%d 0 R/XYZ 0 %s null]", p.pages[pl.page-1], short(h-pl.y))
		} else {
			act = "/A<</S/URI/URI" + literal(percent(sp.el.target)) + ">>"
		}
		n := p.reserve()
		key := len(p.pages) + len(p.annotOwners)
		p.annotOwners = append(p.annotOwners, sp.el)
		p.annots[sp.page-1] = append(p.annots[sp.page-1], n)
		sp.el.kids = append(sp.el.kids, kid{annot: n, page: sp.page})
		p.object(n, fmt.Sprintf("<</Type/Annot/Subtype/Link/Rect[%s %s %s %s]/Border[0 0 0]/F 4/Contents%s/StructParent %d%s>>",
			short(sp.x1), short(h-sp.y2), short(sp.x2), short(h-sp.y1), textString(sp.el.alt), key, act))
	}
	return nil
}

// percent writes an address in ASCII.
func percent(s string) string {
	var b strings.Builder
	for i := 0; i < len(s); i++ {
		if c := s[i]; c <= 0x20 || c >= 0x7f || strings.IndexByte(`<>"{}|\^`+"`", c) >= 0 {
			fmt.Fprintf(&b, "%%%02X", c)
		} else {
			b.WriteByte(c)
		}
	}
	return b.String()
}

func short(v float64) string { return strconv.FormatFloat(v, 'f', 2, 64) }

func (p *press) writePages(dr *drawn) {
	var kids strings.Builder
	box := fmt.Sprintf("[0 0 %s %s]", short(p.d.s.sheet.width), short(p.d.s.sheet.height))
	for i, n := range p.pages {
		fmt.Fprintf(&kids, "%d 0 R ", n)
		content := p.reserve()
		annots := ""
		if len(p.annots[i]) > 0 {
			annots = "/Annots" + refs(p.annots[i])
		}
		p.object(n, fmt.Sprintf("<</Type/Page/Parent %d 0 R/MediaBox%s/Resources%s/Contents %d 0 R/StructParents %d/Tabs/S%s>>",
			p.pagesRoot, box, p.resources, content, i, annots))
		p.stream(content, "", dr.contents[i])
	}
	p.object(p.pagesRoot, fmt.Sprintf("<</Type/Pages/Kids[%s]/Count %d>>", strings.TrimSpace(kids.String()), len(p.pages)))
}

func refs(ns []int) string {
	b := []byte{'['}
	for i, n := range ns {
		if i > 0 {
			b = append(b, ' ')
		}
		b = strconv.AppendInt(b, int64(n), 10)
		b = append(b, " 0 R"...)
	}
	return string(append(b, ']'))
}

// structure writes the structure tree and its way back from pages and
// annotations; the tree keeps the order of the pages.
func (p *press) structure() int {
	root, parents := p.reserve(), p.reserve()
	p.number(p.d.s.root)
	p.element(p.d.s.root, root)
	p.object(root, fmt.Sprintf("<</Type/StructTreeRoot/K %d 0 R/ParentTree %d 0 R/ParentTreeNextKey %d>>",
		p.d.s.root.object, parents, len(p.pages)+len(p.annotOwners)))
	p.begin(parents)
	p.b = append(p.b, "<</Nums["...)
	for i, owners := range p.d.owner {
		ns := make([]int, len(owners))
		for j, e := range owners {
			ns[j] = e.object
		}
		p.b = fmt.Appendf(p.b, "%d %s\n", i, refs(ns))
	}
	for i, e := range p.annotOwners {
		p.b = fmt.Appendf(p.b, "%d %d 0 R\n", len(p.pages)+i, e.object)
	}
	p.b = append(p.b, "]>>\nendobj\n"...)
	return root
}

func (p *press) number(e *elem) {
	e.object = p.reserve()
	for _, k := range e.kids {
		if k.el != nil {
			p.number(k.el)
		}
	}
}

func (p *press) element(e *elem, parent int) {
	p.begin(e.object)
	p.b = fmt.Appendf(p.b, "<</S/%s/P %d 0 R", e.role, parent)
	if e.attrs != "" || e.boxed {
		p.b = append(p.b, "/A<<"...)
		p.b = append(p.b, e.attrs...)
		if e.boxed {
			p.b = fmt.Appendf(p.b, "/O/Layout/Placement/Block/BBox[%s %s %s %s]", short(e.box[0]), short(e.box[1]), short(e.box[2]), short(e.box[3]))
		}
		p.b = append(p.b, ">>"...)
	}
	if e.alt != "" && e.role == "Figure" {
		p.b = append(append(p.b, "/Alt"...), textString(e.alt)...)
	}
	home := 0
	for _, k := range e.kids {
		if k.page > 0 {
			home = k.page
			break
		}
	}
	if home > 0 {
		p.b = fmt.Appendf(p.b, "/Pg %d 0 R", p.pages[home-1])
	}
	if len(e.kids) > 0 {
		p.b = append(p.b, "/K["...)
		for i, k := range e.kids {
			if i > 0 {
				p.b = append(p.b, ' ')
			}
			switch {
			case k.el != nil:
				p.b = fmt.Appendf(p.b, "%d 0 R", k.el.object)
			case k.annot != 0:
				p.b = fmt.Appendf(p.b, "<</Type/OBJR/Obj %d 0 R/Pg %d 0 R>>", k.annot, p.pages[k.page-1])
			case k.page == home:
				p.b = strconv.AppendInt(p.b, int64(k.mcid), 10)
			default:
				p.b = fmt.Appendf(p.b, "<</Type/MCR/Pg %d 0 R/MCID %d>>", p.pages[k.page-1], k.mcid)
			}
		}
		p.b = append(p.b, ']')
	}
	p.b = append(p.b, ">>\nendobj\n"...)
	for _, k := range e.kids {
		if k.el != nil {
			p.element(k.el, e.object)
		}
	}
}
