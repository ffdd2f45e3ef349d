package pdf

import (
	"bytes"
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"steelyard/render/page"
)

func attached(doc *page.Document) []Attachment {
	var out []Attachment
	for _, a := range doc.Attachments {
		out = append(out, Attachment{Name: a.Name, Media: a.Media, Description: a.Description, Relation: a.Relation, Bytes: a.Bytes, Sum: "match"})
	}
	return out
}

func TestReadBack(t *testing.T) {
	b := mustWrite(t)
	f, err := Read(b)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(attached(sample()), f.Attachments); diff != "" {
		t.Error(diff)
	}
	if !f.Ours || !WrittenBySteelyard(b) || f.Original != len(b) || f.Appended != 0 || !f.Intact || f.Recovered || f.Title != sample().Title {
		t.Errorf("%+v", f)
	}
}

func TestReadAppended(t *testing.T) {
	b := mustWrite(t)
	more := []byte("900 0 obj\n<</Type/Sig/Filter/X>>\nendobj\nxref\n900 1\n0000000000 00000 n \ntrailer\n<</Size 901/Root 1 0 R/Info 3 0 R/Prev 5>>\nstartxref\n7\n%%EOF\n")
	f, err := Read(append(bytes.Clone(b), more...))
	if err != nil {
		t.Fatal(err)
	}
	if f.Original != len(b) || f.Appended != len(more) || !f.Intact || f.Replaced {
		t.Errorf("original %d of %d, appended %d of %d, intact %v, replaced %v", f.Original, len(b), f.Appended, len(more), f.Intact, f.Replaced)
	}
	// An appended revision that swaps the attachments is noticed.
	swap := append([]byte("900 0 obj\n<</Type/Catalog/AF[901 0 R]>>\nendobj\n901 0 obj\n<</Type/Filespec/F(x)/EF<</F 902 0 R>>>>\nendobj\n"+
		"902 0 obj\n<</Type/EmbeddedFile/Length 2>>\nstream\nhi\nendstream\nendobj\ntrailer\n<</Root 900 0 R>>\n"), more[len(more)-16:]...)
	f, err = Read(append(bytes.Clone(b), swap...))
	if err != nil || !f.Replaced || len(f.Attachments) != 1 || f.Attachments[0].Name != "x" {
		t.Errorf("%v, %+v", err, f)
	}
	// A changed byte in the first revision is noticed too.
	i := bytes.Index(b, []byte("/Marked true"))
	bad := bytes.Clone(b)
	bad[i+8] = 'T'
	if f, err := Read(bad); err != nil || f.Intact || f.Original != len(b) {
		t.Errorf("%v, %+v", err, f)
	}
}

func TestReadRefuses(t *testing.T) {
	if _, err := Read([]byte("title = \"beans\"")); !errors.Is(err, ErrNotPDF) {
		t.Error(err)
	}
	if WrittenBySteelyard([]byte("%PDF-1.7\n")) || WrittenBySteelyard([]byte(marker)) {
		t.Error("taken for ours")
	}
	b := mustWrite(t)
	locked := bytes.Replace(b, []byte("trailer\n<<"), []byte("trailer\n<</Encrypt 9 0 R"), 1)
	if _, err := Read(locked); !errors.Is(err, ErrEncrypted) {
		t.Error(err)
	}
	flood := []byte("%PDF-1.7\n1 0 obj\n[" + strings.Repeat("1 ", maxValues) + "]\nendobj\n")
	if _, err := Read(flood); !errors.Is(err, errTooMany) {
		t.Error(err)
	}
	// A stream that unpacks to more than the bound.
	z := &squeezer{}
	bomb := z.deflate(make([]byte, maxUnpacked+1))
	file := append([]byte("%PDF-1.7\n1 0 obj\n<</Type/EmbeddedFile/Filter/FlateDecode>>\nstream\n"), bomb...)
	file = append(file, "\nendstream\nendobj\n"...)
	if _, err := Read(file); !errors.Is(err, errTooLarge) {
		t.Error(err)
	}
}

// Values that never end must not be read again from each of their starts.
func TestReadLinear(t *testing.T) {
	for _, part := range []string{"1 0 obj(", "1 0 obj<<", "1 0 obj[1 ", "trailer<<", "1 0 obj<<>>stream\n", "startxref\n5\n", "9 9 9 9 9 9 ", "1 0 obj%"} {
		file := []byte("%PDF-xref" + strings.Repeat(part, 1<<20/len(part)))
		if f, err := Read(file); err == nil && len(f.Attachments) > 0 {
			t.Errorf("%q: attachments out of nothing", part)
		}
	}
}

// Files that others have saved again, or that were cut off.
func TestReadResaved(t *testing.T) {
	b := mustWrite(t)
	cut := b[:bytes.LastIndex(b, []byte("/Type/Catalog"))-10]
	if i := bytes.Index(cut, []byte("1 0 obj\n<</Type/Catalog")); i >= 0 {
		cut = cut[:i]
	}
	f, err := Read(cut)
	if err != nil || !f.Recovered || len(f.Attachments) != 3 || !bytes.Equal(f.Attachments[0].Bytes, sample().Attachments[0].Bytes) {
		t.Errorf("cut file: %v, %+v", err, f)
	}
	path := keep(t, "s.pdf", b)
	for _, args := range [][]string{
		{"--object-streams=generate"}, {"--object-streams=disable", "--stream-data=uncompress"}, {"--linearize"}, {"--qdf"},
	} {
		out := filepath.Join(t.TempDir(), "out.pdf")
		if msg, err := exec.Command(outside(t, "qpdf"), append(args, path, out)...).CombinedOutput(); err != nil {
			t.Fatalf("%s", msg)
		}
		saved, err := os.ReadFile(out)
		if err != nil {
			t.Fatal(err)
		}
		f, err := Read(saved)
		if err != nil {
			t.Fatalf("%v: %v", args, err)
		}
		if diff := cmp.Diff(attached(sample()), f.Attachments); diff != "" || f.Intact || !f.Ours {
			t.Errorf("%v: ours %v, intact %v\n%s", args, f.Ours, f.Intact, diff)
		}
	}
	out := filepath.Join(t.TempDir(), "locked.pdf")
	if msg, err := exec.Command(outside(t, "qpdf"), "--encrypt", "u", "o", "256", "--", path, out).CombinedOutput(); err != nil {
		t.Fatalf("%s", msg)
	}
	if locked, err := os.ReadFile(out); err != nil {
		t.Fatal(err)
	} else if _, err := Read(locked); !errors.Is(err, ErrEncrypted) {
		t.Error(err)
	}
}

func TestTextStrings(t *testing.T) {
	for _, s := range []string{"plain (with) \\ signs", "Ernte-Übersicht", "x\u0304 = 4,2 \U0001d49c", "line\nend"} {
		p := parser{b: []byte(textString(s))}
		v, err := p.value()
		if err != nil || decodeText(v.([]byte)) != s {
			t.Errorf("%q became %q, %v", s, v, err)
		}
	}
}

func FuzzRead(f *testing.F) {
	doc := &page.Document{Title: "t", Paper: "a4", Blocks: []page.Block{page.Paragraph{Text: page.T("x")}},
		Attachments: []page.Attachment{{Name: "a", Media: "text/plain", Relation: "Data", Bytes: []byte("b")}}}
	var b bytes.Buffer
	if err := Write(&b, doc); err != nil {
		f.Fatal(err)
	}
	small := b.String()
	f.Add([]byte(small[:400]))
	f.Add([]byte(small[strings.Index(small, "/Type/EmbeddedFile")-20:]))
	f.Add([]byte("%PDF-1.7\n1 0 obj\n<</Type/EmbeddedFile/Length 2>>\nstream\nhi\nendstream\nendobj\ntrailer\n<</Root 2 0 R>>\nstartxref\n9\n%%EOF\n"))
	f.Add([]byte("%PDF-1.7\n1 0 obj\n<</Type/ObjStm/N 1/First 4/Length 20>>\nstream\n2 0 <</Type/Catalog/AF[3 0 R]/Names<</EmbeddedFiles<</Kids[2 0 R]>>>>>>\nendstream"))
	f.Add([]byte("%PDF-[[[[[[(((\\7<<<</A#4"))
	f.Fuzz(func(t *testing.T, file []byte) {
		if len(file) > 1<<20 {
			t.Skip()
		}
		got, err := Read(file)
		if err == nil && got.Original+got.Appended > len(file) {
			t.Errorf("lengths beyond the file: %d + %d of %d", got.Original, got.Appended, len(file))
		}
		again, err2 := Read(file)
		if (err == nil) != (err2 == nil) {
			t.Error("read differently the second time")
		} else if err == nil {
			if diff := cmp.Diff(got, again); diff != "" {
				t.Error(diff)
			}
		}
	})
}
