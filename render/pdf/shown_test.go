package pdf

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

func mustPages(t *testing.T, file []byte) []Shown {
	t.Helper()
	p, err := Pages(file)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// solid is all the text of a document without its blanks.
func solid(pages []Shown) string {
	var b strings.Builder
	for _, p := range pages {
		b.WriteString(strings.Join(strings.Fields(p.Text), ""))
	}
	return b.String()
}

func TestPages(t *testing.T) {
	b := mustWrite(t)
	pages := mustPages(t, b)
	text := solid(pages)
	if strings.ContainsRune(text, '\ufffd') {
		t.Errorf("signs without a character in %q", text)
	}
	if want := strings.Join(strings.Fields(sample().Title), ""); !strings.Contains(text, want) {
		t.Errorf("no title %q in %.200q", want, text)
	}
	for i, p := range pages {
		if p.Text == "" || p.Drawing == [32]byte{} {
			t.Errorf("page %d shows nothing", i+1)
		}
	}
	again := mustPages(t, b)
	for i := range pages {
		if pages[i] != again[i] {
			t.Errorf("page %d is told otherwise the second time", i+1)
		}
	}
}

// TestPagesAgainstPoppler holds the text against what another program reads.
func TestPagesAgainstPoppler(t *testing.T) {
	b := mustWrite(t)
	out, err := exec.Command(outside(t, "pdftotext"), "-raw", keep(t, "s.pdf", b), "-").Output()
	if err != nil {
		t.Fatal(err)
	}
	count := func(s string) map[rune]int {
		n := map[rune]int{}
		for _, r := range s {
			n[r]++
		}
		return n
	}
	ours := count(solid(mustPages(t, b)))
	// What is raised or lowered is tagged with the sign it stands for.
	plain := strings.NewReplacer("⁹", "9", "²", "2", "⁻", "−", "₂", "2", "₁", "1").Replace(string(out))
	theirs := count(strings.Join(strings.Fields(plain), ""))
	for r, n := range theirs {
		if ours[r] != n && r != '\f' {
			t.Errorf("%q: %d, and %d by pdftotext", r, ours[r], n)
		}
	}
}

// Files saved again by another program draw the same pages.
func TestPagesResaved(t *testing.T) {
	b := mustWrite(t)
	path := keep(t, "s.pdf", b)
	want := mustPages(t, b)
	for _, args := range [][]string{{"--object-streams=generate"}, {"--stream-data=uncompress"}, {"--linearize"}} {
		out := filepath.Join(t.TempDir(), "out.pdf")
		if msg, err := exec.Command(outside(t, "qpdf"), append(args, path, out)...).CombinedOutput(); err != nil {
			t.Fatalf("%s", msg)
		}
		saved, err := os.ReadFile(out)
		if err != nil {
			t.Fatal(err)
		}
		got := mustPages(t, saved)
		if len(got) != len(want) {
			t.Fatalf("%v: %d pages, want %d", args, len(got), len(want))
		}
		for i := range got {
			if got[i].Text != want[i].Text || got[i].Drawing != want[i].Drawing {
				t.Errorf("%v: page %d: text same %v, drawing same %v", args, i+1, got[i].Text == want[i].Text, got[i].Drawing == want[i].Drawing)
			}
		}
	}
}

// one is a small file with one page.
func one(font, content string) []byte {
	return []byte("%PDF-1.4\n1 0 obj<</Type/Catalog/Pages 2 0 R>>endobj\n2 0 obj<</Kids[3 0 R]/MediaBox[0 0 9 9]/Resources<</Font<</F " + font + ">>/XObject<</X 5 0 R>>>>>>endobj\n" +
		"3 0 obj<</Type/Page/Contents 4 0 R>>endobj\n4 0 obj<<>>stream\n" + content + "\nendstream endobj\n" +
		"5 0 obj<</Subtype/Form>>stream\nBT(x)Tj ET /X Do\nendstream endobj\n6 0 obj<<>>stream\nbeginbfrange<0001><0003><0061><0010><0011>[<0041><0042>]endbfrange beginbfchar<0020><00660066>endbfchar\nendstream endobj\n" +
		"trailer<</Root 1 0 R>>")
}

func TestPagesDetails(t *testing.T) {
	type0 := "<</Subtype/Type0/ToUnicode 6 0 R>>"
	for _, tt := range []struct{ font, content, want string }{
		{"null", "BT (a) Tj ET", "a\n"},
		{"<</Subtype/Type1>>", "BT/F 9 Tf[(a)-3(b\\051)]TJ(c)' ET", "ab)c\n"},
		{type0, "BT/F 9 Tf<000100030010001100200099>Tj ET", "acABff\ufffd\n"},
		{type0, "q 1 0 0 1 5 5 cm BT/F 9 Tf<0002>Tj ET Q", "b\n"},
	} {
		p := mustPages(t, one(tt.font, tt.content))
		if len(p) != 1 || p[0].Text != tt.want {
			t.Errorf("%s: %+v, want %q", tt.content, p, tt.want)
		}
	}
	// What is drawn with, and where, is told apart; marks and names are not.
	base := mustPages(t, one(type0, "BT/F 9 Tf 1 2 Td<0002>Tj ET"))[0].Drawing
	for content, same := range map[string]bool{
		"BT /F  9 Tf\n1 2.0 Td <0002>Tj ET":                true,
		"/P<</MCID 0>>BDC BT/F 9 Tf 1 2 Td<0002>Tj ET EMC": true,
		"BT/F 9 Tf 1 3 Td<0002>Tj ET":                      false,
		"BT/F 8 Tf 1 2 Td<0002>Tj ET":                      false,
		"BT/F 9 Tf 1 2 Td<0002>Tj ET 0 0 9 9 re f":         false,
	} {
		if got := mustPages(t, one(type0, content))[0].Drawing == base; got != same {
			t.Errorf("%s: same %v, want %v", content, got, same)
		}
	}
	if mustPages(t, one("<</Subtype/Type0/ToUnicode 6 0 R/BaseFont/Other>>", "BT/F 9 Tf 1 2 Td<0002>Tj ET"))[0].Drawing == base {
		t.Error("another font draws the same")
	}
}

// What never ends is given up; what means nothing is an error, no panic.
func TestPagesHostile(t *testing.T) {
	for name, file := range map[string][]byte{
		"nothing":        []byte("%PDF-1.4\n"),
		"form in itself": one("null", "/X Do"),
		"kids in a ring": []byte("%PDF-1.4\n1 0 obj<</Type/Catalog/Pages 2 0 R>>endobj\n2 0 obj<</Kids[2 0 R]>>endobj\n"),
		"operands":       one("null", strings.Repeat("1 ", 5000)),
	} {
		if p, err := Pages(file); err == nil {
			t.Errorf("%s: %+v", name, p)
		}
	}
	long := one("<</Subtype/Type0/ToUnicode 6 0 R>>", "BT/F 9 Tf<"+strings.Repeat("0020", maxShown)+">Tj ET")
	if _, err := Pages(long); err == nil {
		t.Error("any length of text is taken")
	}
	b := mustWrite(t)
	for i := 0; i < len(b); i += 1499 {
		bad := bytes.Clone(b)
		bad[i] ^= 0x15
		Pages(bad)
		Pages(b[:i])
	}
}

func FuzzPages(f *testing.F) {
	f.Add(one("<</Subtype/Type0/ToUnicode 6 0 R>>", "BT/F 9 Tf<0001>Tj ET /X Do"))
	f.Add(one("null", "q[1(a)]TJ Q"))
	f.Fuzz(func(t *testing.T, file []byte) {
		pages, err := Pages(file)
		if err == nil && len(pages) == 0 {
			t.Error("neither pages nor an error")
		}
	})
}
