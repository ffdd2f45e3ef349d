package pdf

import (
	"crypto/sha256"
	"encoding/binary"
	"fmt"
	"sort"
	"strings"
)

// cut is one face in one document: which glyphs it draws and which runes they
// stand for. Glyph numbers are kept, so that a glyph's number is its CID.
type cut struct {
	face *face
	key  string // family under which fpdf knows it
	used []rune // by glyph number, 0 when unused
	last int    // highest glyph used
	file []byte // the cut face, once made

	packed []byte // the file, compressed; wait for the drawer's packing
}

func newCut(f *face, key string) *cut { return &cut{face: f, key: key, used: make([]rune, f.glyphs)} }

func (c *cut) use(g int, r rune) {
	if c.used[g] == 0 || r < c.used[g] {
		c.used[g] = r
	}
	c.last = max(c.last, g)
}

// gids lists the glyphs drawn, in ascending order.
func (c *cut) gids() []int {
	var out []int
	for g, r := range c.used {
		if r != 0 {
			out = append(out, g)
		}
	}
	return out
}

// components are the glyphs a composite glyph is made of, with the places of
// their numbers in its outline (OpenType glyf table, composite description).
func components(o []byte) []int {
	if len(o) < 10 || i16(o, 0) >= 0 {
		return nil
	}
	var out []int
	for at := 10; at+4 <= len(o); {
		flags := u16(o, at)
		out = append(out, u16(o, at+2))
		at += 4
		if flags&0x0001 != 0 {
			at += 4
		} else {
			at += 2
		}
		switch {
		case flags&0x0008 != 0:
			at += 2
		case flags&0x0040 != 0:
			at += 4
		case flags&0x0080 != 0:
			at += 8
		}
		if flags&0x0020 == 0 {
			break
		}
	}
	return out
}

// closure marks every glyph that must be in the file: those drawn, .notdef,
// and the parts of composites.
func (c *cut) closure() []bool {
	keep := make([]bool, c.face.glyphs)
	stack := append([]int{0}, c.gids()...)
	for len(stack) > 0 {
		g := stack[len(stack)-1]
		stack = stack[:len(stack)-1]
		if g >= len(keep) || keep[g] {
			continue
		}
		keep[g] = true
		stack = append(stack, components(c.face.outline(g))...)
	}
	return keep
}

// sfnt is the face with only the glyphs used and only the tables a PDF reader
// needs (ISO 32000-1, 9.9). Glyphs keep their numbers; the tables end after
// the last one in use.
func (c *cut) sfnt() []byte {
	f, keep := c.face, c.closure()
	n := len(keep)
	for n > 1 && !keep[n-1] {
		n--
	}
	size := 0
	for g, k := range keep[:n] {
		if k {
			size += len(f.outline(g))
		}
	}
	metrics := min(n, f.metrics)
	hmtx := make([]byte, 4*metrics+2*(n-metrics))
	loca := make([]byte, 4*(n+1))
	glyf := make([]byte, 0, size+4*n)
	for g := range n {
		binary.BigEndian.PutUint32(loca[4*g:], uint32(len(glyf)))
		if keep[g] {
			glyf = append(glyf, f.outline(g)...)
			for len(glyf)%4 != 0 {
				glyf = append(glyf, 0)
			}
		}
		switch {
		case g < metrics && (keep[g] || g == metrics-1):
			copy(hmtx[4*g:4*g+4], f.hmtx[4*g:])
		case g >= metrics && keep[g]:
			at := 4*metrics + 2*(g-metrics)
			copy(hmtx[at:at+2], f.hmtx[4*f.metrics+2*(g-f.metrics):])
		}
	}
	binary.BigEndian.PutUint32(loca[4*n:], uint32(len(glyf)))
	head := append([]byte(nil), f.head...)
	binary.BigEndian.PutUint32(head[8:], 0)
	binary.BigEndian.PutUint16(head[50:], 1)
	hhea := append([]byte(nil), f.hhea...)
	binary.BigEndian.PutUint16(hhea[34:], uint16(metrics))
	maxp := append([]byte(nil), f.maxp...)
	binary.BigEndian.PutUint16(maxp[4:], uint16(n))
	return assemble(map[string][]byte{
		"cvt ": f.cvt, "fpgm": f.fpgm, "glyf": glyf, "head": head, "hhea": hhea,
		"hmtx": hmtx, "loca": loca, "maxp": maxp, "prep": f.prep,
	})
}

// assemble joins tables into a font file with fresh checksums; empty tables
// are left out.
func assemble(tables map[string][]byte) []byte {
	var names []string
	for name, t := range tables {
		if len(t) > 0 {
			names = append(names, name)
		}
	}
	sort.Strings(names)
	n, pow, log := len(names), 1, 0
	for pow*2 <= n {
		pow, log = pow*2, log+1
	}
	size := 12 + 16*n
	for _, name := range names {
		size += len(tables[name]) + 4
	}
	out := binary.BigEndian.AppendUint32(make([]byte, 0, size), 0x00010000)
	for _, v := range []int{n, pow * 16, log, (n - pow) * 16} {
		out = binary.BigEndian.AppendUint16(out, uint16(v))
	}
	off, headAt := len(out)+16*n, 0
	for _, name := range names {
		t := tables[name]
		if name == "head" {
			headAt = off
		}
		out = append(out, name...)
		for _, v := range []uint32{checksum(t), uint32(off), uint32(len(t))} {
			out = binary.BigEndian.AppendUint32(out, v)
		}
		off += (len(t) + 3) &^ 3
	}
	for _, name := range names {
		out = append(out, tables[name]...)
		for len(out)%4 != 0 {
			out = append(out, 0)
		}
	}
	if headAt > 0 {
		binary.BigEndian.PutUint32(out[headAt+8:], 0xb1b0afba-checksum(out))
	}
	return out
}

func checksum(b []byte) uint32 {
	var s uint32
	for ; len(b) >= 4; b = b[4:] {
		s += binary.BigEndian.Uint32(b)
	}
	if len(b) > 0 {
		var last [4]byte
		copy(last[:], b)
		s += binary.BigEndian.Uint32(last[:])
	}
	return s
}

// subsetName is the PostScript name with the six letters that mark a subset,
// taken from a hash of the file so that equal subsets share them.
func (c *cut) subsetName(sfnt []byte) string {
	h := sha256.Sum256(sfnt)
	tag := make([]byte, 6)
	for i := range tag {
		tag[i] = 'A' + h[i]%26
	}
	return string(tag) + "+" + c.face.name
}

// widths is the /W array of the CID font.
func (c *cut) widths() string {
	var b strings.Builder
	gids := c.gids()
	b.WriteByte('[')
	for i := 0; i < len(gids); {
		fmt.Fprintf(&b, "%d [", gids[i])
		j := i
		for ; j < len(gids) && gids[j] == gids[i]+j-i; j++ {
			if j > i {
				b.WriteByte(' ')
			}
			fmt.Fprintf(&b, "%d", c.face.advance(gids[j]))
		}
		b.WriteByte(']')
		i = j
	}
	b.WriteByte(']')
	return b.String()
}

// toUnicode maps CIDs back to text, one bfchar each, a hundred a block.
func (c *cut) toUnicode() []byte {
	var b strings.Builder
	b.WriteString("/CIDInit /ProcSet findresource begin\n12 dict begin\nbegincmap\n" +
		"/CIDSystemInfo <</Registry (Adobe) /Ordering (UCS) /Supplement 0>> def\n" +
		"/CMapName /Adobe-Identity-UCS def\n/CMapType 2 def\n" +
		"1 begincodespacerange\n<0000> <FFFF>\nendcodespacerange\n")
	gids := c.gids()
	for len(gids) > 0 {
		n := min(100, len(gids))
		fmt.Fprintf(&b, "%d beginbfchar\n", n)
		for _, g := range gids[:n] {
			fmt.Fprintf(&b, "<%04X> <%X>\n", g, utf16BE(string(c.used[g])))
		}
		b.WriteString("endbfchar\n")
		gids = gids[n:]
	}
	b.WriteString("endcmap\nCMapName currentdict /CMap defineresource pop\nend\nend\n")
	return []byte(b.String())
}

// cidSet is the bit string of the glyphs in the file, which only PDF/A-1 asks
// for.
func (c *cut) cidSet() []byte {
	keep := c.closure()
	out := make([]byte, (len(keep)+7)/8)
	for g, k := range keep {
		if k {
			out[g/8] |= 0x80 >> (g % 8)
		}
	}
	return out
}
