package pdf

import (
	"encoding/json"
	"fmt"
	"math"
	"strconv"
	"sync"

	"github.com/go-pdf/fpdf"

	"steelyard/render/page"
)

// drawer prints leaves through fpdf, marking every painted thing as content
// of an element or as an artifact.
type drawer struct {
	buf   []byte
	f     *fpdf.Fpdf
	s     *setter
	page  int // from 1
	mcids []int
	owner [][]*elem // per page: the element of each marked content
	spots []spot

	open    bool // a marked-content sequence is open
	current *elem
	layer   string // artifact kind while current is nil

	face    faceID
	size    float64
	fill    colour
	line    colour
	width   float64
	dash    bool
	packing sync.WaitGroup // of the files of the cut faces

	known  bool // the line state of the page is known
	filled bool // and its fill colour
}

// spot is where a link stands on a page.
type spot struct {
	el             *elem
	page           int
	x1, y1, x2, y2 float64 // from the upper left
}

// begin opens the sequence that what follows belongs to.
func (d *drawer) begin(el *elem, layer string) {
	if d.open && d.current == el && (el != nil || d.layer == layer) {
		return
	}
	d.end()
	d.open, d.current, d.layer = true, el, layer
	if el == nil {
		d.f.RawWriteStr("/Artifact " + layer + " BDC")
		return
	}
	el.join()
	id := len(d.owner[d.page-1])
	d.owner[d.page-1] = append(d.owner[d.page-1], el)
	el.kids = append(el.kids, kid{page: d.page, mcid: id})
	b := append(append(append(d.buf[:0], '/'), el.role...), " <</MCID "...)
	b = append(strconv.AppendInt(b, int64(id), 10), ">> BDC"...)
	d.f.RawWriteStr(string(b))
	d.buf = b
}

func (d *drawer) end() {
	if d.open {
		d.f.RawWriteStr("EMC")
		d.open = false
	}
}

const (
	ground     = "<</Type /Layout>>"
	background = "<</Type /Background>>"
	running    = "<</Type /Pagination>>"
	watermark  = "<</Type /Pagination /Subtype /Watermark>>"
)

func (d *drawer) setFill(c colour) {
	if !d.filled || d.fill != c {
		d.f.SetTextColor(int(c.r), int(c.g), int(c.b))
		d.f.SetFillColor(int(c.r), int(c.g), int(c.b))
		d.fill, d.filled = c, true
	}
}

func (d *drawer) setLine(st page.Stroke, scale float64) {
	c, w := ink(st.Ink), st.Width*scale
	if !d.known || d.line != c {
		d.f.SetDrawColor(int(c.r), int(c.g), int(c.b))
		d.line = c
	}
	if !d.known || d.width != w {
		d.f.SetLineWidth(w)
		d.width = w
	}
	if len(st.Dash) > 0 || d.dash {
		dash := make([]float64, len(st.Dash))
		for i := range dash {
			dash[i] = st.Dash[i] * scale
		}
		d.f.SetDashPattern(dash, 0)
		d.dash = len(dash) > 0
	}
	d.known = true
}

// item draws one item of a piece whose upper left is at x, y.
func (d *drawer) item(it *item, x, y float64, layer string) {
	x, y = x+it.x, y+it.y
	switch it.kind {
	case textItem:
		d.begin(it.el, layer)
		d.text(it, x, y)
		if it.el != nil && it.el.role == "Link" {
			d.spot(it, x, y)
		}
	case ruleItem:
		d.begin(nil, layer)
		d.setFill(it.colour)
		d.f.Rect(x, y, it.w, it.h, "F")
	case markItem:
		d.begin(it.el, layer)
		d.mark(it.mark, x, y, it.scale)
	case shapeItem:
		d.begin(nil, layer)
		it.shape(d, x, y, it.scale)
	case attachItem:
		if it.el != nil {
			it.el.join()
			if it.el.boxed {
				it.el.box = [4]float64{x, d.s.sheet.height - y - it.h, x + it.w, d.s.sheet.height - y}
			}
		}
	case destItem:
		p := &d.s.places[it.place]
		p.page, p.y = d.page, y
	}
}

func (d *drawer) text(it *item, x, y float64) {
	if it.text == "" {
		return
	}
	d.setFill(it.colour)
	if d.face != it.face || d.size != it.size {
		d.f.SetFont(d.s.cuts[it.face].key, "", it.size)
		d.face, d.size = it.face, it.size
	}
	if it.actual != "" && it.el != nil {
		d.f.RawWriteStr(fmt.Sprintf("/Span <</ActualText <FEFF%X>>> BDC", utf16BE(it.actual)))
		defer d.f.RawWriteStr("EMC")
	}
	// What fpdf writes for text, without its detours; it has no operator for
	// kerned text.
	b := append(d.buf[:0], "BT "...)
	b = strconv.AppendFloat(b, x, 'f', 2, 64)
	b = append(b, ' ')
	b = strconv.AppendFloat(b, d.s.sheet.height-y, 'f', 2, 64)
	if len(it.kerns) == 0 {
		b = append(escaped(append(b, " Td ("...), it.text), ") Tj ET"...)
		d.f.RawWriteStr(string(b))
		d.buf = b
		return
	}
	b = append(b, " Td [("...)
	from := 0
	for _, k := range it.kerns {
		if k.at == len(it.text) {
			break
		}
		b = append(escaped(b, it.text[from:k.at]), ") "...)
		b = strconv.AppendInt(b, -int64(k.by), 10)
		b = append(b, " ("...)
		from = k.at
	}
	b = append(escaped(b, it.text[from:]), ")] TJ ET"...)
	d.f.RawWriteStr(string(b))
	d.buf = b
}

// escaped appends the bytes of a string in parentheses.
func escaped(b []byte, s string) []byte {
	for i := 0; i < len(s); i++ {
		switch s[i] {
		case '\\', '(', ')':
			b = append(b, '\\')
		case '\r':
			b = append(b, '\\', 'r')
			continue
		}
		b = append(b, s[i])
	}
	return b
}

// spot notes the place of a link; pieces of one link that touch become one.
func (d *drawer) spot(it *item, x, y float64) {
	sp := spot{el: it.el, page: d.page, x1: x, y1: y - it.size*0.82, x2: x + it.w, y2: y + it.size*0.24}
	if n := len(d.spots); n > 0 {
		if l := &d.spots[n-1]; l.el == sp.el && l.page == sp.page && math.Abs(l.y1-sp.y1) < it.size*0.6 {
			l.x2, l.y1, l.y2 = sp.x2, min(l.y1, sp.y1), max(l.y2, sp.y2)
			return
		}
	}
	d.spots = append(d.spots, sp)
}

// mark draws one mark of a drawing.
func (d *drawer) mark(m page.Mark, x, y, k float64) {
	switch m := m.(type) {
	case page.Line:
		d.setLine(m.Stroke, k)
		d.f.Line(x+m.X1*k, y+m.Y1*k, x+m.X2*k, y+m.Y2*k)
	case page.Polyline:
		n := min(len(m.X), len(m.Y))
		if n < 2 {
			return
		}
		d.setLine(m.Stroke, k)
		d.f.MoveTo(x+m.X[0]*k, y+m.Y[0]*k)
		for i := 1; i < n; i++ {
			d.f.LineTo(x+m.X[i]*k, y+m.Y[i]*k)
		}
		d.f.DrawPath("D")
	case page.Polygon:
		pts := make([]fpdf.PointType, min(len(m.X), len(m.Y)))
		for i := range pts {
			pts[i] = fpdf.PointType{X: x + m.X[i]*k, Y: y + m.Y[i]*k}
		}
		if len(pts) > 2 {
			d.f.Polygon(pts, d.paint(m.Fill, m.Outline, k))
		}
	case page.Rect:
		d.f.Rect(x+m.X*k, y+m.Y*k, m.W*k, m.H*k, d.paint(m.Fill, m.Outline, k))
	case page.Disc:
		d.f.Circle(x+m.X*k, y+m.Y*k, m.R*k, d.paint(m.Fill, m.Outline, k))
	case page.Label: // set as text before
	}
}

func (d *drawer) paint(fill page.Ink, outline *page.Stroke, k float64) string {
	d.setFill(ink(fill))
	if outline == nil {
		return "F"
	}
	d.setLine(*outline, k)
	return "FD"
}

// leaf draws one page: the status word, grounds, content, running head and
// foot.
func (d *drawer) leaf(l leaf, n int, status, matter piece) {
	d.f.AddPage()
	d.page, d.known, d.filled = n, false, false // fpdf takes the dash over to the new page
	d.face, d.size = faceCount, 0
	d.owner = append(d.owner, nil)
	d.status(status)
	for i, p := range l.pieces {
		for _, b := range p.back {
			top, h := l.tops[i], p.height
			if !b.first {
				top, h = top-l.gaps[i], h+l.gaps[i]
			}
			d.begin(nil, background)
			d.setFill(b.colour)
			d.f.Rect(b.x, top, b.w, h+0.05, "F")
		}
	}
	for i := range l.pieces {
		for j := range l.pieces[i].items {
			d.item(&l.pieces[i].items[j], 0, l.tops[i], ground)
		}
	}
	for i := range matter.items {
		d.item(&matter.items[i], 0, 0, running)
	}
	d.end()
}

// rising is the angle of the status word: the diagonal of the sheet.
func (s sheet) rising() float64 { return math.Atan2(s.height, s.width) }

// status draws the status word along the diagonal, under everything else.
func (d *drawer) status(p piece) {
	if len(p.items) == 0 {
		return
	}
	sh := d.s.sheet
	c, s := math.Cos(sh.rising()), math.Sin(sh.rising())
	d.begin(nil, watermark)
	d.f.RawWriteStr(fmt.Sprintf("q %.4f %.4f %.4f %.4f %.2f %.2f cm", c, s, -s, c, sh.width/2, sh.height/2))
	for i := range p.items {
		d.text(&p.items[i], p.items[i].x, p.items[i].y)
	}
	d.f.RawWriteStr("Q")
	d.filled = false
	d.face, d.size = faceCount, 0
	d.end()
}

// fonts names the cut faces to fpdf, which draws with them. It takes the text
// as bytes; the dictionaries that say how the bytes are read, and the files,
// which are compressed while the pages are drawn, are written afterwards.
func (d *drawer) fonts() error {
	var used []*cut
	for _, c := range d.s.cuts {
		if c == nil || len(c.gids()) == 0 {
			continue
		}
		c.file = c.sfnt()
		used = append(used, c)
		def := map[string]any{
			"Tp": "TrueType", "Name": c.key, "Cw": make([]int, 256), "File": c.key + ".z", "OriginalSize": len(c.file),
		}
		js, err := json.Marshal(def)
		if err != nil {
			return err
		}
		d.f.AddFontFromBytes(c.key, "", js, []byte("later"))
	}
	d.packing.Go(func() {
		var z squeezer
		for _, c := range used {
			c.packed = z.deflate(c.file)
		}
	})
	return d.f.Error()
}

// output is the file as fpdf writes it.
func (d *drawer) output() ([]byte, error) {
	var t taken
	err := d.f.Output(&t)
	return t.b, err
}

// taken keeps what is written. Of the first write, which is all of the file,
// no copy is made: fpdf is not used afterwards.
type taken struct{ b []byte }

func (t *taken) Write(p []byte) (int, error) {
	if t.b == nil {
		t.b = p[:len(p):len(p)]
	} else {
		t.b = append(t.b, p...)
	}
	return len(p), nil
}
