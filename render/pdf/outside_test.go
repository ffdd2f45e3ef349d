package pdf

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"steelyard/render/page"
)

// outside finds a program that judges files. On a user's machine its absence
// skips the test; where CI is true it fails.
func outside(t *testing.T, program string) string {
	t.Helper()
	path, err := exec.LookPath(program)
	if err != nil {
		absent(t, program+" is not installed")
	}
	return path
}

func absent(t *testing.T, why string) {
	t.Helper()
	if os.Getenv("CI") == "true" {
		t.Fatal(why)
	}
	t.Skip(why)
}

func keep(t *testing.T, name string, b []byte) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, b, 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

func run(t *testing.T, program string, args ...string) (string, error) {
	t.Helper()
	out, err := exec.Command(outside(t, program), args...).CombinedOutput()
	return string(out), err
}

// preflight runs the PDF/A-1b validator of Apache PDFBox (2.0.27 as packaged
// by Debian) over named files and returns what it says of each.
func preflight(t *testing.T, files map[string][]byte) map[string]string {
	t.Helper()
	java := outside(t, "java")
	var jars []string
	for _, name := range []string{"preflight", "pdfbox2", "fontbox2", "xmpbox", "commons-logging", "commons-io", "javax.activation", "jaxb-api"} {
		jar := "/usr/share/java/" + name + ".jar"
		if _, err := os.Stat(jar); err != nil {
			absent(t, "the PDF/A-1b validator is not installed: "+jar)
		}
		jars = append(jars, jar)
	}
	dir := t.TempDir()
	for name, b := range files {
		if err := os.WriteFile(filepath.Join(dir, name+".pdf"), b, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	out, _ := exec.Command(java, "-cp", strings.Join(jars, ":"), "org.apache.pdfbox.preflight.Validator_A1b", "batch", dir).CombinedOutput()
	said := map[string]string{}
	for _, part := range strings.Split(string(out), "The file ")[1:] {
		name, rest, _ := strings.Cut(part, ".pdf is ")
		said[name] = rest
	}
	if len(said) != len(files) {
		t.Fatalf("the validator said:\n%s", out)
	}
	return said
}

// The validator knows only part 1, so it is shown the twin of the file that
// carries no attachments and says part 1; and it must see each damage. Of the
// file itself it may object only to what part 3 allows.
func TestValidatorA1b(t *testing.T) {
	whole, err := build(sample(), options{archive1: true})
	if err != nil {
		t.Fatal(err)
	}
	b, err := build(small(), options{archive1: true, plain: true})
	if err != nil {
		t.Fatal(err)
	}
	files := map[string][]byte{"whole": whole, "small": b, "part3": mustWrite(t)}
	for name, damage := range map[string][2]string{ // of equal length
		"identifier": {"/ID[<", "/IX[<"},
		"unprinted":  {"/F 4/Contents", "/F 0/Contents"},
		"profile":    {"/OutputIntents", "/OutputIntentz"},
		"part":       {"<pdfaid:part>1", "<pdfaid:part>2"},
		"glyphs":     {"/CIDSet", "/CIDSex"},
		"metadata":   {"/Metadata ", "/Metadatx "},
		"title":      {">Small</rdf:li>", ">Smell</rdf:li>"},
		"widths":     {"/W[3 [278]", "/W[3 [478]"},
	} {
		files[name] = bytes.Replace(b, []byte(damage[0]), []byte(damage[1]), 1)
		if bytes.Equal(files[name], b) {
			t.Fatal("nothing damaged: ", name)
		}
	}
	said := preflight(t, files)
	for name, s := range said {
		valid := strings.Contains(s, "a valid PDF/A-1b file") && !strings.Contains(s, "not a valid")
		if good := name == "whole" || name == "small"; valid != good {
			t.Errorf("%s: the validator said: %s", name, s)
		}
	}
	for _, l := range strings.Split(said["part3"], "\n")[1:] {
		allowed := strings.TrimSpace(l) == "" || strings.Contains(l, "EmbeddedFile entry is present") ||
			strings.Contains(l, "CIDSet entry is missing") || strings.Contains(l, "part must be 1")
		if !allowed {
			t.Error("of the file itself: ", l)
		}
	}
}

func TestStructureByQpdf(t *testing.T) {
	b := mustWrite(t)
	if out, err := run(t, "qpdf", "--check", keep(t, "good.pdf", b)); err != nil || strings.Contains(out, "WARNING") {
		t.Fatal(out)
	}
	bad := bytes.Replace(b, []byte("startxref\n"), []byte("startxref\n9"), 1)
	if out, err := run(t, "qpdf", "--check", keep(t, "bad.pdf", bad)); err == nil {
		t.Error("a wrong cross-reference was not seen:", out)
	}
}

func TestTextReadBack(t *testing.T) {
	path := keep(t, "s.pdf", mustWrite(t))
	out, err := run(t, "pdftotext", "-enc", "UTF-8", path, "-")
	if err != nil {
		t.Fatal(out)
	}
	flat := strings.Join(strings.Fields(out), " ")
	for _, want := range []string{
		"All values in the interval lie above zero; values inside the region too small to matter remain compatible with the data.",
		"ESTABLISHED", "−0.6 points (90% confidence interval −2.6 to 4.1 points)", "page 2 of ", "difference in yield, kg", "mean x̄ of the plots", "3·10⁻⁹", "DRAFT",
	} {
		if !strings.Contains(flat, want) {
			t.Errorf("not read back: %q", want)
		}
	}
	if strings.Contains(flat, "not in the document") {
		t.Error("the search finds what is not there")
	}
}

func TestInfoAndStructure(t *testing.T) {
	doc := sample()
	// The tree of many cells takes pdfinfo long: the first part is enough.
	doc.Blocks = append(doc.Blocks[:15:15], page.Heading{Level: 1, Text: page.T("Analysis"), Anchor: "analysis"})
	var whole bytes.Buffer
	if err := Write(&whole, doc); err != nil {
		t.Fatal(err)
	}
	path := keep(t, "s.pdf", whole.Bytes())
	info, err := run(t, "pdfinfo", path)
	if err != nil {
		t.Fatal(info)
	}
	for _, want := range []string{"Tagged:          yes", "Title:           Does coarse mulch", "Producer:        Steelyard", "Metadata Stream: yes", "Encrypted:       no"} {
		if !strings.Contains(info, want) {
			t.Errorf("pdfinfo does not say %q:\n%s", want, info)
		}
	}
	tree, err := run(t, "pdfinfo", "-struct-text", path)
	if err != nil {
		t.Fatal(tree)
	}
	for _, want := range []string{"H1", "H2", "Table", "THead", "TBody", "Figure", "Caption", "Link", "Lbl", "BlockQuote"} {
		if !strings.Contains(tree, want) {
			t.Errorf("no %s in the structure tree", want)
		}
	}
	if strings.Contains(tree, "page 2 of") {
		t.Error("the running foot is in the structure tree")
	}
	plain, err := run(t, "pdfinfo", keep(t, "u.pdf", bytes.Replace(mustWrite(t), []byte("/MarkInfo<</Marked true>>"), []byte("/MarkInfo<</Marked null>>"), 1)))
	if err != nil || !strings.Contains(plain, "Tagged:          no") {
		t.Error("pdfinfo calls a file tagged that does not say so")
	}
}

func TestAttachmentsByPoppler(t *testing.T) {
	doc := sample()
	path := keep(t, "s.pdf", mustWrite(t))
	list, err := run(t, "pdfdetach", "-list", path)
	if err != nil || !strings.Contains(list, "3 embedded files") {
		t.Fatal(list)
	}
	dir := t.TempDir()
	if out, err := run(t, "pdfdetach", "-saveall", "-o", dir, path); err != nil {
		t.Fatal(out)
	}
	for _, a := range doc.Attachments {
		got, err := os.ReadFile(filepath.Join(dir, a.Name))
		if err != nil || !bytes.Equal(got, a.Bytes) {
			t.Errorf("%s: %v, %q", a.Name, err, got)
		}
	}
	none := sample()
	none.Attachments = nil
	var b bytes.Buffer
	if err := Write(&b, none); err != nil {
		t.Fatal(err)
	}
	if list, _ := run(t, "pdfdetach", "-list", keep(t, "n.pdf", b.Bytes())); !strings.Contains(list, "0 embedded files") {
		t.Error("attachments where there are none:", list)
	}
}

// The bookmarks are the headings, in their order and depth, and each leads to
// the page that shows it.
func TestBookmarks(t *testing.T) {
	b := plainSample(t)
	budget := maxUnpacked
	w := scan(b, &budget)
	pages := map[any]int{}
	kids, _ := w.dict(w.catalog()["Pages"])["Kids"].([]any)
	for i, k := range kids {
		pages[k] = i + 1
	}
	type mark struct {
		title string
		level int
		page  int
	}
	var got []mark
	var walk func(item any, level int) int
	walk = func(item any, level int) int {
		n := 0
		for d := w.dict(item); d != nil; d = w.dict(d["Next"]) {
			dest := d["Dest"].([]any)
			got = append(got, mark{w.text(d["Title"]), level, pages[dest[0]]})
			n++
			if below := walk(d["First"], level+1); float64(-below) != d["Count"] && below > 0 {
				t.Errorf("%q counts %v below it, not %d", w.text(d["Title"]), d["Count"], below)
			}
		}
		return n
	}
	root := w.dict(w.catalog()["Outlines"])
	if n := walk(root["First"], 1); root["Count"] != float64(n) {
		t.Errorf("the root counts %v, not %d", root["Count"], n)
	}
	i := 0
	path := keep(t, "s.pdf", b)
	for _, bl := range sample().Blocks {
		h, ok := bl.(page.Heading)
		if !ok || h.Level == 0 {
			continue
		}
		if i == len(got) {
			t.Fatal("bookmarks are missing")
		}
		m := got[i]
		i++
		if m.title != page.Plain(h.Text) || m.level != h.Level {
			t.Errorf("%+v for %q at %d", m, page.Plain(h.Text), h.Level)
		}
		n := itoa(m.page)
		text, err := run(t, "pdftotext", "-f", n, "-l", n, "-enc", "UTF-8", path, "-")
		if err != nil || !strings.Contains(text, m.title) {
			t.Errorf("%q is not on page %d", m.title, m.page)
		}
	}
	if i != len(got) {
		t.Errorf("%d bookmarks for %d headings", len(got), i)
	}
}

// Many attachments keep their names and order.
func TestManyAttachments(t *testing.T) {
	doc := paragraph("x")
	for i := range 23 {
		doc.Attachments = append(doc.Attachments, page.Attachment{Name: "file " + itoa(22-i) + " ⇒.csv", Media: "text/csv", Relation: "Data", Bytes: bytes.Repeat([]byte(itoa(i)), i*50)})
	}
	var b bytes.Buffer
	if err := Write(&b, doc); err != nil {
		t.Fatal(err)
	}
	f, err := Read(b.Bytes())
	if err != nil || len(f.Attachments) != 23 {
		t.Fatal(err, len(f.Attachments))
	}
	for i, a := range f.Attachments {
		if a.Name != doc.Attachments[i].Name || !bytes.Equal(a.Bytes, doc.Attachments[i].Bytes) || a.Sum != "match" {
			t.Errorf("%d: %q", i, a.Name)
		}
	}
	if list, err := run(t, "pdfdetach", "-list", keep(t, "m.pdf", b.Bytes())); err != nil || !strings.Contains(list, "23 embedded files") {
		t.Error(list)
	}
}
