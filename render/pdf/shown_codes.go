package pdf

import (
	"bytes"
	"cmp"
	"slices"
	"sort"
	"strings"
	"unicode/utf16"
)

// codes turns the codes of a font into characters.
type codes struct {
	width  int // bytes of a code
	runes  map[uint32]string
	ranges []codeRange
}

type codeRange struct {
	low, high uint32
	to        rune
}

// Bounds of the table of one font.
const (
	maxCodes  = 1 << 16
	maxRanges = 1 << 12
)

func (c *codes) write(out *strings.Builder, b []byte) {
	for len(b) >= c.width {
		code := uint32(0)
		for _, x := range b[:c.width] {
			code = code<<8 | uint32(x)
		}
		b = b[c.width:]
		if s, ok := c.runes[code]; ok {
			out.WriteString(s)
			continue
		}
		i := sort.Search(len(c.ranges), func(i int) bool { return c.ranges[i].high >= code })
		switch {
		case i < len(c.ranges) && c.ranges[i].low <= code:
			out.WriteRune(c.ranges[i].to + rune(code-c.ranges[i].low))
		case c.width == 1 && c.runes == nil:
			out.WriteRune(rune(code))
		default:
			out.WriteRune('\ufffd')
		}
	}
}

// codes reads the table of a font.
func (s *shower) codes(ref any) *codes {
	r, isRef := ref.(pdfRef)
	if c, ok := s.fonts[r]; isRef && ok {
		return c
	}
	d := s.w.dict(ref)
	c := &codes{width: 1}
	if d["Subtype"] == pdfName("Type0") {
		c.width = 2
	}
	if to, ok := d["ToUnicode"].(pdfRef); ok {
		if text, err := inflate(s.w.dict(to), s.w.streams[int(to)], s.w.budget); err == nil {
			c.read(text, s.w.left)
		}
	}
	if isRef {
		s.fonts[r] = c
	}
	return c
}

// read takes the lists of a ToUnicode table (ISO 32000-1, 9.10.3).
func (c *codes) read(text []byte, left int) {
	c.runes = map[uint32]string{}
	for _, kind := range []string{"beginbfchar", "beginbfrange"} {
		for rest := text; ; {
			i := bytes.Index(rest, []byte(kind))
			if i < 0 {
				break
			}
			rest = rest[i+len(kind):]
			p := parser{b: rest, left: &left}
			for len(c.runes) < maxCodes && len(c.ranges) < maxRanges {
				if p.skip(); p.i >= len(p.b) || p.b[p.i] != '<' {
					break
				}
				if !c.entry(&p, kind == "beginbfrange") {
					break
				}
			}
			rest = rest[p.i:]
		}
	}
	slices.SortStableFunc(c.ranges, func(a, b codeRange) int { return cmp.Compare(a.high, b.high) })
}

// entry reads one line of a list.
func (c *codes) entry(p *parser, ranged bool) bool {
	code := func() (uint32, bool) {
		v, err := p.value()
		b, ok := v.([]byte)
		if err != nil || !ok || len(b) == 0 || len(b) > 4 {
			return 0, false
		}
		n := uint32(0)
		for _, x := range b {
			n = n<<8 | uint32(x)
		}
		return n, true
	}
	low, ok := code()
	high, ok2 := low, true
	if ranged {
		high, ok2 = code()
	}
	to, err := p.value()
	if !ok || !ok2 || err != nil || high < low {
		return false
	}
	switch to := to.(type) {
	case []byte:
		s := utf16Text(to)
		if low == high {
			c.runes[low] = s
		} else if r := []rune(s); len(r) == 1 {
			c.ranges = append(c.ranges, codeRange{low, high, r[0]})
		}
	case []any:
		for i, v := range to {
			if b, ok := v.([]byte); ok && uint32(i) <= high-low {
				c.runes[low+uint32(i)] = utf16Text(b)
			}
		}
	}
	return true
}

// utf16Text is what one code stands for, a few characters at most.
func utf16Text(b []byte) string {
	u := make([]uint16, 0, 8)
	for i := 0; i+1 < min(len(b), 16); i += 2 {
		u = append(u, uint16(b[i])<<8|uint16(b[i+1]))
	}
	return string(utf16.Decode(u))
}
