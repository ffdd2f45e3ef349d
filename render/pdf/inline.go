package pdf

import (
	"unicode"

	"steelyard/render/page"
)

// look is how one stretch of characters is drawn.
type look struct {
	face   faceID
	size   float64
	rise   float64 // upward, in points
	colour colour
	code   bool
	el     *elem  // the element its text belongs to
	actual string // what the characters stand for, when it is not what they are
}

// char is one glyph to set.
type char struct {
	look   *look
	w      float64 // advance in points
	dx, dy float32 // of marks that stand over the glyph before
	r      rune
	gid    uint16
	kern   int16 // in thousandths, part of w: the next glyph stands so much off
	face   faceID
	after  brk
}

// brk says what may happen between a character and the next.
type brk uint8

const (
	joined  brk = iota
	allowed     // a line may end here
	glue        // a space: a line may end here and the space then takes no room
)

// smaller is the size of raised and lowered text against the text around it.
const smaller = 0.68

// chars turns inlines into glyphs; el is the element the text belongs to.
func (s *setter) chars(in []page.Inline, st textStyle, el *elem) []char {
	n := 0
	for _, i := range in {
		n += width(i)
	}
	out := s.spare[:0]
	if s.spare = nil; cap(out) < n {
		out = make([]char, 0, n)
	}
	for _, i := range in {
		l := look{face: st.family.regular, size: st.size, colour: st.colour, el: el}
		var text string
		switch i := i.(type) {
		case page.Text:
			text = string(i)
		case page.Strong:
			text, l.face = string(i), st.family.bold
		case page.Emph:
			text, l.face = string(i), st.family.italic
		case page.Code:
			text, l.face, l.code = string(i), mono, true
			l.size *= 0.9
		case page.Sub:
			text, l.rise = string(i), -0.17*st.size
			l.size *= smaller
		case page.Sup:
			text, l.rise = string(i), 0.34*st.size
			l.size *= smaller
		case page.Link:
			text, l.colour = i.Text, ink(page.Accent)
			if el != nil {
				l.el = s.link(el, i)
			}
		}
		out = s.run(out, text, l)
	}
	breaks(out)
	return out
}

// width is at least the number of characters of an inline.
func width(i page.Inline) int {
	switch i := i.(type) {
	case page.Text:
		return len(i)
	case page.Strong:
		return len(i)
	case page.Emph:
		return len(i)
	case page.Code:
		return len(i)
	case page.Sub:
		return len(i)
	case page.Sup:
		return len(i)
	case page.Link:
		return len(i.Text)
	}
	return 0
}

// run appends the glyphs of one stretch of text.
func (s *setter) run(out []char, text string, l look) []char {
	text = s.clean(text)
	base := new(look)
	*base = l
	for _, r := range text {
		if r < 0x80 && r >= 0x20 {
			out = s.glyph(out, r, base, text)
			continue
		}
		if r == 0x200b {
			if n := len(out); n > 0 {
				out[n-1].after = allowed
			}
			continue
		}
		sub, raise, actual := mapped(r)
		switch {
		case raise != 0 && l.rise == 0:
			raised := new(look)
			*raised = l
			raised.rise, raised.size = 0.34*l.size, l.size*smaller
			if raise < 0 {
				raised.rise = -0.17 * l.size
			}
			if actual {
				raised.actual = string(r)
			}
			for _, q := range sub {
				out = s.glyph(out, q, raised, text)
			}
		case sub != "":
			for _, q := range sub {
				out = s.glyph(out, q, base, text)
			}
		case r == 0x00ad || r == 0x2060 || r == 0xfeff:
		default:
			out = s.glyph(out, r, base, text)
		}
	}
	return out
}

// glyph appends one glyph, or notes that no face has it.
func (s *setter) glyph(out []char, r rune, l *look, text string) []char {
	id, g := s.find(l.face, r)
	if g == 0 {
		if sub := substitute(r); sub != 0 {
			r = sub
			id, g = s.find(l.face, sub)
		}
	}
	if g == 0 {
		s.bad(r, text, whyMissing)
		return out
	}
	f := s.cuts[id].face
	c := char{r: r, face: id, gid: uint16(g), w: float64(f.advance(g)) * l.size / 1000, look: l}
	if r >= 0x300 && unicode.Is(unicode.Mn, r) {
		c.w = 0
		if n := len(out); n > 0 && out[n-1].face == id {
			dx, dy := over(f, int(out[n-1].gid), g, l.size)
			c.dx, c.dy = float32(dx-out[n-1].w), float32(dy)
		}
	} else if n := len(out); n > 0 && out[n-1].look == l && out[n-1].face == id && !digit(r) && !digit(out[n-1].r) {
		// Figures keep their equal widths, so that columns stand.
		if k := f.kern(int(out[n-1].gid), g); k != 0 {
			out[n-1].kern = int16(k)
			out[n-1].w += float64(k) * l.size / 1000
		}
	}
	return append(out, c)
}

func digit(r rune) bool { return r >= '0' && r <= '9' }

// over is the shift that centres a mark on the ink of its base and lifts it
// above bases taller than a small letter, from the origin of the base.
func over(f *face, base, mark int, size float64) (dx, dy float64) {
	b1, _, b2, top, ok := f.extent(base)
	m1, low, m2, _, ok2 := f.extent(mark)
	if !ok || !ok2 {
		return 0, 0
	}
	dx = float64(b1+b2-m1-m2) / 2
	if gap := top + 60 - low; low > 0 && gap > 0 {
		dy = float64(gap)
	}
	return dx * size / 1000, dy * size / 1000
}

// breaks marks where lines may end.
func breaks(cs []char) {
	for i := range cs {
		c := &cs[i]
		var prev, next rune
		if i > 0 {
			prev = cs[i-1].r
		}
		if i+1 < len(cs) {
			next = cs[i+1].r
		}
		switch {
		case c.r == ' ':
			if c.after != allowed && !relation(prev) && !relation(next) {
				c.after = glue
			}
		case c.r == '-' && (unicode.IsLetter(prev) || c.look.code) && unicode.IsLetter(next),
			c.r == '—', c.r == '/' && unicode.IsLetter(prev) && unicode.IsLetter(next),
			c.look.code && (c.r == '/' || c.r == '_' || c.r == '=' || c.r == ','),
			wide(c.r) && !closing(next):
			c.after = allowed
		}
	}
}

// relation holds for signs that stay with the words on both their sides.
func relation(r rune) bool {
	switch r {
	case '=', '<', '>', '≤', '≥', '≠', '≈', '±', '×', '−':
		return true
	}
	return false
}

// wide holds for scripts that break between characters.
func wide(r rune) bool {
	return r >= 0x2e80 && r <= 0xffef && !(r >= 0xfb00 && r <= 0xfeff) || r >= 0x20000
}

func closing(r rune) bool {
	switch r {
	case '。', '、', '，', '．', '：', '；', '？', '！', '）', '」', '』', '】', ')', '.', ',':
		return true
	}
	return false
}

// line is a stretch of characters on one line; width leaves out the spaces at
// its end, which are drawn so that the text does not run together when read
// back.
type line struct {
	cs    []char
	width float64
}

// wrap breaks characters into lines no wider than width. A word wider than a
// whole line is broken where it must be.
func wrap(cs []char, width float64) []line {
	var out []line
	for start := 0; start < len(cs); {
		x, solid := 0.0, 0.0 // solid: without trailing spaces
		best, bestW := -1, 0.0
		i := start
		for ; i < len(cs); i++ {
			c := &cs[i]
			space := c.after == glue
			if !space && x+c.w > width+0.01 && i > start && c.w > 0 {
				break
			}
			x += c.w
			if !space {
				solid = x
			}
			if c.after != joined {
				best, bestW = i+1, solid
			}
		}
		switch {
		case i == len(cs):
			best, bestW = i, solid
		case best < 0 || width-bestW > 40 && long(cs[best:], width):
			best, bestW = i, solid // a word that fits on no line is begun here
		}
		out = append(out, line{cs[start:best], bestW})
		start = best
	}
	return out
}

// settle wraps and then evens the lines out without adding one. Headings are
// balanced; running text only gives its last line company when a short word
// stands there alone.
func settle(cs []char, width float64, balance bool) []line {
	ls := wrap(cs, width)
	n := len(ls)
	if n < 2 || !balance && ls[n-1].width > 0.13*width || balance && n > 4 {
		return ls
	}
	for k := 0.97; k > 0.55; k -= 0.03 {
		try := wrap(cs, width*k)
		if len(try) > n {
			break
		}
		ls = try
		if !balance && ls[n-1].width > 0.2*width {
			break
		}
	}
	return ls
}

// long reports whether the first word is wider than a line.
func long(cs []char, width float64) bool {
	x := 0.0
	for i := range cs {
		if x += cs[i].w; x > width {
			return true
		}
		if cs[i].after != joined {
			return false
		}
	}
	return false
}

// natural is the width on one line; word is that of the widest part that must
// stay together.
func natural(cs []char) (whole, word float64) {
	part := 0.0
	for i := range cs {
		whole += cs[i].w
		if cs[i].after == glue {
			word = max(word, part)
			part = 0
			continue
		}
		part += cs[i].w
		if cs[i].after == allowed {
			word = max(word, part)
			part = 0
		}
	}
	return whole, max(word, part)
}
