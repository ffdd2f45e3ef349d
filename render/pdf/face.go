package pdf

import (
	"encoding/binary"
	"errors"
	"fmt"
	"math"
)

// face is one TrueType face, read for measuring and cutting. Offsets are
// checked once when it is opened, so that the accessors need no checks of
// their own beyond the glyph number.
type face struct {
	name string // PostScript name
	data []byte

	head, hhea, maxp, hmtx, loca, glyf []byte
	cvt, fpgm, prep                    []byte

	unitsPerEm  float64
	glyphs      int
	metrics     int // entries of hmtx with an advance
	longLoca    bool
	bbox        [4]int16
	ascent      int // of 1000
	descent     int
	capHeight   int
	xHeight     int
	italicAngle float64
	fixed       bool
	restricted  bool // the face forbids embedding

	cmap4, cmap12 []byte
	kerns         []byte // the pairs of a kern subtable of format 0
	ascii         [128]uint16
}

var errFace = errors.New("not a TrueType face with outlines")

func u16(b []byte, i int) int {
	if i < 0 || i+2 > len(b) {
		return 0
	}
	return int(binary.BigEndian.Uint16(b[i:]))
}

func i16(b []byte, i int) int { return int(int16(u16(b, i))) }

func u32(b []byte, i int) int {
	if i < 0 || i+4 > len(b) {
		return 0
	}
	return int(binary.BigEndian.Uint32(b[i:]))
}

// openFace reads the tables of a TrueType face. It errs on anything that has
// no glyf outlines or no Unicode character map.
func openFace(data []byte) (*face, error) {
	if len(data) < 12 {
		return nil, errFace
	}
	if v := u32(data, 0); v != 0x00010000 && v != 0x74727565 {
		return nil, errFace
	}
	tables := map[string][]byte{}
	for i := range u16(data, 4) {
		at := 12 + 16*i
		if at+16 > len(data) {
			return nil, errFace
		}
		off, size := u32(data, at+8), u32(data, at+12)
		if off > len(data) || size > len(data)-off {
			return nil, errFace
		}
		tables[string(data[at:at+4])] = data[off : off+size]
	}
	f := &face{
		data: data,
		head: tables["head"], hhea: tables["hhea"], maxp: tables["maxp"],
		hmtx: tables["hmtx"], loca: tables["loca"], glyf: tables["glyf"],
		cvt: tables["cvt "], fpgm: tables["fpgm"], prep: tables["prep"],
	}
	if len(f.head) < 54 || len(f.hhea) < 36 || len(f.maxp) < 6 || len(f.glyf) == 0 {
		return nil, errFace
	}
	f.unitsPerEm = float64(u16(f.head, 18))
	f.glyphs = u16(f.maxp, 4)
	f.metrics = u16(f.hhea, 34)
	f.longLoca = u16(f.head, 50) != 0
	step := 2
	if f.longLoca {
		step = 4
	}
	if f.unitsPerEm < 16 || f.glyphs == 0 || f.metrics == 0 || f.metrics > f.glyphs ||
		len(f.loca) < step*(f.glyphs+1) || len(f.hmtx) < 4*f.metrics+2*(f.glyphs-f.metrics) {
		return nil, errFace
	}
	f.readHeader(tables)
	if err := f.readCmap(tables["cmap"]); err != nil {
		return nil, err
	}
	for r := range f.ascii {
		f.ascii[r] = uint16(f.lookup(rune(r)))
	}
	return f, nil
}

func (f *face) thousand(v int) int { return int(math.Round(float64(v) * 1000 / f.unitsPerEm)) }

func (f *face) readHeader(tables map[string][]byte) {
	for i := range f.bbox {
		f.bbox[i] = int16(i16(f.head, 36+2*i))
	}
	f.ascent, f.descent = f.thousand(i16(f.hhea, 4)), f.thousand(i16(f.hhea, 6))
	f.capHeight, f.xHeight = f.ascent, f.ascent*2/3
	if os2 := tables["OS/2"]; len(os2) >= 10 {
		fs := u16(os2, 8)
		f.restricted = fs&0x000f == 0x0002 || fs&0x0200 != 0
		if u16(os2, 0) >= 2 && len(os2) >= 90 {
			f.xHeight, f.capHeight = f.thousand(i16(os2, 86)), f.thousand(i16(os2, 88))
		}
	}
	if post := tables["post"]; len(post) >= 16 {
		f.italicAngle = float64(int32(u32(post, 4))) / 65536
		f.fixed = u32(post, 12) != 0
	}
	f.name = postScriptName(tables["name"])
	if k := tables["kern"]; len(k) > 18 && u16(k, 0) == 0 && u16(k, 2) > 0 && u16(k, 8) == 1 {
		f.kerns = k[18:min(len(k), 18+6*u16(k, 10))]
	}
}

// kern is by how much a pair of glyphs stands closer (negative) or wider than
// their advances, in thousandths.
func (f *face) kern(left, right int) int {
	pair := left<<16 | right
	lo, hi := 0, len(f.kerns)/6
	for lo < hi {
		if m := (lo + hi) / 2; u32(f.kerns, 6*m) < pair {
			lo = m + 1
		} else {
			hi = m
		}
	}
	if lo < len(f.kerns)/6 && u32(f.kerns, 6*lo) == pair {
		return f.thousand(i16(f.kerns, 6*lo+4))
	}
	return 0
}

// postScriptName is name 6 of the name table, cut to the characters a PDF
// name may show plainly.
func postScriptName(name []byte) string {
	strs := u16(name, 4)
	for i := range u16(name, 2) {
		at := 6 + 12*i
		if u16(name, at+6) != 6 {
			continue
		}
		off, size := strs+u16(name, at+10), u16(name, at+8)
		if off+size > len(name) {
			continue
		}
		var out []byte
		for _, c := range name[off : off+size] {
			if c >= '0' && c <= '9' || c >= 'A' && c <= 'Z' || c >= 'a' && c <= 'z' || c == '-' {
				out = append(out, c)
			}
		}
		if len(out) > 0 {
			return string(out)
		}
	}
	return "Face"
}

// readCmap keeps the Unicode subtables of formats 4 and 12.
func (f *face) readCmap(cmap []byte) error {
	for i := range u16(cmap, 2) {
		at := 4 + 8*i
		platform, encoding, off := u16(cmap, at), u16(cmap, at+2), u32(cmap, at+4)
		if off >= len(cmap) || !(platform == 0 || platform == 3 && (encoding == 1 || encoding == 10)) {
			continue
		}
		sub := cmap[off:]
		switch u16(sub, 0) {
		case 4:
			f.cmap4 = sub
		case 12:
			f.cmap12 = sub
		}
	}
	if f.cmap4 == nil && f.cmap12 == nil {
		return fmt.Errorf("%w: no Unicode character map", errFace)
	}
	return nil
}

// gid is the glyph of a rune, 0 where the face has none.
func (f *face) gid(r rune) int {
	if r >= 0 && r < 128 {
		return int(f.ascii[r])
	}
	return f.lookup(r)
}

func (f *face) lookup(r rune) int {
	g := 0
	if f.cmap12 != nil {
		g = lookup12(f.cmap12, int(r))
	} else if r <= 0xffff {
		g = lookup4(f.cmap4, int(r))
	}
	if g >= f.glyphs {
		return 0
	}
	return g
}

func lookup4(t []byte, r int) int {
	n := u16(t, 6) / 2
	lo, hi := 0, n
	for lo < hi {
		m := (lo + hi) / 2
		if u16(t, 14+2*m) < r {
			lo = m + 1
		} else {
			hi = m
		}
	}
	start := u16(t, 16+2*n+2*lo)
	if lo >= n || start > r {
		return 0
	}
	delta, at := u16(t, 16+4*n+2*lo), 16+6*n+2*lo
	if off := u16(t, at); off != 0 {
		g := u16(t, at+off+2*(r-start))
		if g == 0 {
			return 0
		}
		return (g + delta) & 0xffff
	}
	return (r + delta) & 0xffff
}

func lookup12(t []byte, r int) int {
	lo, hi := 0, min(u32(t, 12), len(t)/12)
	for lo < hi {
		m := (lo + hi) / 2
		if u32(t, 16+12*m+4) < r {
			lo = m + 1
		} else {
			hi = m
		}
	}
	if start := u32(t, 16+12*lo); 16+12*lo+12 <= len(t) && start <= r && r <= u32(t, 16+12*lo+4) {
		return u32(t, 16+12*lo+8) + r - start
	}
	return 0
}

// advance is the width of a glyph in thousandths of the size. The same
// rounded number is printed in the file, so that measured and drawn text end
// at the same place.
func (f *face) advance(g int) int {
	return f.thousand(u16(f.hmtx, 4*min(g, f.metrics-1)))
}

// outline is the glyf entry of a glyph; empty for blanks.
func (f *face) outline(g int) []byte {
	var from, to int
	if f.longLoca {
		from, to = u32(f.loca, 4*g), u32(f.loca, 4*g+4)
	} else {
		from, to = 2*u16(f.loca, 2*g), 2*u16(f.loca, 2*g+2)
	}
	if from >= to || to > len(f.glyf) {
		return nil
	}
	return f.glyf[from:to]
}

// extent is the box of a glyph's ink in thousandths; ok is false for blanks.
func (f *face) extent(g int) (x1, y1, x2, y2 int, ok bool) {
	o := f.outline(g)
	if len(o) < 10 {
		return
	}
	return f.thousand(i16(o, 2)), f.thousand(i16(o, 4)), f.thousand(i16(o, 6)), f.thousand(i16(o, 8)), true
}
