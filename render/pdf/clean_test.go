package pdf

import (
	"bytes"
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/go-fonts/liberation/liberationserifregular"

	"steelyard/render/page"
)

func paragraph(s string) *page.Document {
	return &page.Document{Title: "t", Language: "en", Paper: "a4", Blocks: []page.Block{
		page.Heading{Level: 1, Text: page.T("Remarks")}, page.Paragraph{Text: page.T(s)}}}
}

// Which characters are missing was read from the faces' character maps.
func TestRefusedRunes(t *testing.T) {
	for _, tt := range []struct {
		text string
		r    rune
		why  string
	}{
		{"the yield ✓ rose", '✓', whyMissing},
		{"a 漢 sign", '漢', whyMissing},
		{"emoji \U0001f600", '\U0001f600', whyMissing},
		{"bell\a", '\a', whyControl},
		{"שלום", 'ש', whyRight},
		{"turned \u202e", 0x202e, whyRight},
		{"bad \xff byte", 0xfffd, whyEncoding},
		{"cut \xe2\x82", 0xfffd, whyEncoding},
	} {
		var b bytes.Buffer
		err := Write(&b, paragraph(tt.text))
		var bad *RuneError
		if !errors.As(err, &bad) || len(bad.Runes) == 0 {
			t.Errorf("%q: %v", tt.text, err)
			continue
		}
		if got := bad.Runes[0]; got.Rune != tt.r || got.Why != tt.why || !strings.Contains(got.Where, "Remarks") || b.Len() != 0 {
			t.Errorf("%q: %+v, %d bytes written", tt.text, got, b.Len())
		}
	}
}

func TestSetRunes(t *testing.T) {
	for _, s := range []string{
		"τ² χ² ≤ ≥ ≠ ≈ ± − √ ∞ ∑", "x\u0304 X\u0302 e\u0301", "10⁻⁹ 2⁺ x₁₂", "non\u2011breaking", "thin\u2009space\u202f%", "soft\u00adhyphen",
		"zero\u200bwidth", "line\nbreak\ttab", "Ελλάδα Киев Łódź", "“quoted” – dash — dash … ‰", "a\u0300\u0301", "\u0304alone",
	} {
		if err := Write(&bytes.Buffer{}, paragraph(s)); err != nil {
			t.Errorf("%q: %v", s, err)
		}
	}
	doc := paragraph("漢")
	doc.Typeface = []byte("not a face")
	if err := Write(&bytes.Buffer{}, doc); err == nil || !strings.Contains(err.Error(), "typeface") {
		t.Error(err)
	}
}

// A face of the user's is asked for what the others lack. The stand-in is a
// built-in face whose character map says that its A is U+6F22.
func TestTypeface(t *testing.T) {
	data := bytes.Clone(liberationserifregular.TTF)
	f, err := openFace(data)
	if err != nil {
		t.Fatal(err)
	}
	// The first segment above the sign becomes one of the sign alone.
	sub := f.cmap4
	n := u16(sub, 6) / 2
	put := func(at, v int) { sub[at], sub[at+1] = byte(v>>8), byte(v) }
	for i := range n {
		if u16(sub, 14+2*i) >= '漢' {
			put(14+2*i, '漢')
			put(16+2*n+2*i, '漢')
			put(16+4*n+2*i, f.gid('A')-'漢')
			put(16+6*n+2*i, 0)
			break
		}
	}
	doc := paragraph("a 漢 sign")
	doc.Typeface = data
	var b bytes.Buffer
	if err := Write(&b, doc); err != nil {
		t.Fatal(err)
	}
	if text, err := run(t, "pdftotext", "-enc", "UTF-8", keep(t, "x.pdf", b.Bytes()), "-"); err != nil || !strings.Contains(text, "a 漢 sign") {
		t.Errorf("%v %q", err, text)
	}
}

func TestFaceRefuses(t *testing.T) {
	good := liberationserifregular.TTF
	for n := 0; n < len(good); n += 1 + n/3 {
		if f, err := openFace(good[:n]); err == nil {
			t.Errorf("a face of %d bytes is opened: %v", n, f.name)
		}
	}
	if f, err := openFace(good); err != nil || f.name != "LiberationSerif" || f.gid('A') == 0 || f.gid('漢') != 0 || f.gid(0x1f600) != 0 {
		t.Error(f, err)
	}
}

// Widths of Liberation Sans in thousandths are those of its metric model, as
// in the Adobe Font Metrics of Helvetica (from memory): A 667, a 556, space
// 278, W 944, digits 556.
func TestAdvance(t *testing.T) {
	f, err := openFace(faceBytes(sans))
	if err != nil {
		t.Fatal(err)
	}
	for r, want := range map[rune]int{'A': 667, 'a': 556, ' ': 278, 'W': 944, '0': 556, '9': 556} {
		if got := f.advance(f.gid(r)); got != want {
			t.Errorf("%q is %d wide, not %d", r, got, want)
		}
	}
}

// Pairs of Liberation Serif stand closer as in the metrics of Times Roman
// (from memory: A V -135, T o -80; a half percent of rounding); figures never
// do, so that columns of numbers stand.
func TestKern(t *testing.T) {
	s := newSetter(&page.Document{})
	for _, tt := range []struct {
		text string
		want int16
	}{{"AV", -135}, {"To", -80}, {"11", 0}, {"HH", 0}, {"A1", 0}} {
		cs := s.chars(page.T(tt.text), bodyStyle, nil)
		if got := cs[0].kern; got < tt.want-12 || got > tt.want+12 || got != 0 && tt.want == 0 {
			t.Errorf("%s: %d, not %d", tt.text, got, tt.want)
		}
	}
	// Kerned text takes the room it says: what follows starts where it ends.
	var p piece
	p.put(s, s.chars([]page.Inline{page.Text("AVATAR To "), page.Strong("x")}, bodyStyle, nil), 0, 0)
	whole, _ := natural(s.chars(page.T("AVATAR To "), bodyStyle, nil))
	if d := p.items[1].x - whole; len(p.items) != 2 || d > 1e-9 || d < -1e-9 || len(p.items[0].kerns) == 0 {
		t.Errorf("%+v", p.items)
	}
}

func texts(lines []line) []string {
	var out []string
	for _, l := range lines {
		var b strings.Builder
		for _, c := range l.cs {
			b.WriteRune(c.r)
		}
		out = append(out, b.String())
	}
	return out
}

func TestWrap(t *testing.T) {
	s := newSetter(&page.Document{})
	st := textStyle{family{mono, mono, mono}, 10, 12, colour{}} // 6.0 points a character
	for _, tt := range []struct {
		in   []page.Inline
		n    float64 // characters a line
		want []string
	}{
		{page.T("one two three"), 8, []string{"one two ", "three"}},
		{page.T("one two three"), 7, []string{"one two ", "three"}},
		{page.T("one\u00a0two three"), 6, []string{"one\u00a0tw", "o ", "three"}},
		{page.T("so p = 0.03"), 8, []string{"so ", "p = 0.03"}},
		{page.T("well-known fact"), 6, []string{"well-", "known ", "fact"}},
		{page.T("2026-02-01 x"), 11, []string{"2026-02-01 ", "x"}},
		{page.T("abcdefghij"), 4, []string{"abcd", "efgh", "ij"}},
		{[]page.Inline{page.Text("a"), page.Strong("b"), page.Text("c d")}, 3, []string{"abc ", "d"}},
		{page.T("zero\u200bwidth"), 6, []string{"zero", "width"}},
		{page.T(""), 6, nil},
	} {
		got := texts(wrap(s.chars(tt.in, st, nil), tt.n*6.01))
		if strings.Join(got, "|") != strings.Join(tt.want, "|") {
			t.Errorf("%q at %v: %q, not %q", page.Plain(tt.in), tt.n, got, tt.want)
		}
	}
}

// Luma of neighbours in the palette differs by at least 20 of 255, and text
// inks stand at least 4.5 to 1 against paper (WCAG 2.1 contrast).
func TestPalette(t *testing.T) {
	luma := func(c colour) float64 { return 0.299*float64(c.r) + 0.587*float64(c.g) + 0.114*float64(c.b) }
	linear := func(v uint8) float64 {
		x := float64(v) / 255
		if x <= 0.04045 {
			return x / 12.92
		}
		return math.Pow((x+0.055)/1.055, 2.4)
	}
	contrast := func(c colour) float64 {
		return 1.05 / (0.2126*linear(c.r) + 0.7152*linear(c.g) + 0.0722*linear(c.b) + 0.05)
	}
	inks := []page.Ink{page.Black, page.Slate, page.Mist, page.Paper, page.Band, page.Accent, page.Warn, page.Faint}
	for i, a := range inks {
		for _, b := range inks[:i] {
			if d := math.Abs(luma(ink(a)) - luma(ink(b))); d < 20 {
				t.Errorf("inks %d and %d differ by %.0f in grey print", a, b, d)
			}
		}
	}
	for _, c := range []colour{ink(page.Black), ink(page.Slate), ink(page.Accent), ink(page.Warn), dim} {
		if k := contrast(c); k < 4.5 {
			t.Errorf("%v has a contrast of %.2f", c, k)
		}
	}
	if contrast(ink(page.Faint)) >= 4.5 {
		t.Error("the measure of contrast finds nothing")
	}
}

// The profile's white, the sum of its colours, is D50 as ICC.1 gives it:
// X 0.9642, Y 1, Z 0.8249.
func TestProfile(t *testing.T) {
	p := sRGB()
	if u32(p, 0) != len(p) || string(p[36:40]) != "acsp" {
		t.Fatal("not a profile")
	}
	sum := [3]float64{}
	curves := map[int]bool{}
	for i := range u32(p, 128) {
		at := 132 + 12*i
		name, off, size := string(p[at:at+4]), u32(p, at+4), u32(p, at+8)
		if off+size > len(p) || off%4 != 0 {
			t.Errorf("tag %s lies outside", name)
			continue
		}
		switch name {
		case "rXYZ", "gXYZ", "bXYZ":
			for k := range sum {
				sum[k] += float64(int32(u32(p, off+8+4*k))) / 65536
			}
		case "rTRC", "gTRC", "bTRC":
			curves[off] = true
			// sRGB 0.5 is 0.21404 of linear light (IEC 61966-2-1).
			if v := float64(u16(p, off+12+2*512)) / 65535; math.Abs(v-0.2145) > 0.001 {
				t.Errorf("the curve is %.4f in the middle", v)
			}
		}
	}
	for k, want := range [3]float64{0.9642, 1, 0.8249} {
		if math.Abs(sum[k]-want) > 0.0002 {
			t.Errorf("white: %v", sum)
		}
	}
	if len(curves) != 1 {
		t.Error("the curve is not shared")
	}
}
