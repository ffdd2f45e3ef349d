package pdf

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
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

// preflight is the PDF/A-1b validator of Apache PDFBox (2.0.27 as packaged by
// Debian). It knows no later part, so it is shown the twin of the file that
// carries no attachments and says part 1.
func preflight(t *testing.T, b []byte) string {
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
	out, _ := exec.Command(java, "-cp", strings.Join(jars, ":"), "org.apache.pdfbox.preflight.Validator_A1b", keep(t, "twin.pdf", b)).CombinedOutput()
	return string(out)
}

func twin(t *testing.T) []byte {
	t.Helper()
	b, err := build(sample(), options{archive1: true, plain: true})
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestValidatorA1b(t *testing.T) {
	b := twin(t)
	if out := preflight(t, b); !strings.Contains(out, "is a valid PDF/A-1b file") {
		t.Fatal(out)
	}
	// The validator sees damage: each change keeps the length.
	for name, damage := range map[string][2]string{
		"no identifier":      {"/ID[<", "/IX[<"},
		"link not printed":   {"/F 4/Contents", "/F 0/Contents"},
		"no colour profile":  {"/OutputIntents", "/OutputIntentz"},
		"other part":         {"<pdfaid:part>1", "<pdfaid:part>2"},
		"no character set":   {"/CIDSet", "/CIDSex"},
		"metadata not named": {"/Metadata ", "/Metadatx "},
	} {
		t.Run(name, func(t *testing.T) {
			bad := bytes.Replace(b, []byte(damage[0]), []byte(damage[1]), 1)
			if bytes.Equal(bad, b) {
				t.Fatal("nothing damaged")
			}
			if out := preflight(t, bad); strings.Contains(out, "is a valid PDF/A-1b file") {
				t.Error("the damage was not seen")
			}
		})
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
		"ESTABLISHED", "−0.6 points (90% confidence interval −2.6 to 4.1 points)", "page 2 of ", "difference in yield, kg", "mean x̄ of the plots", "DRAFT",
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
	path := keep(t, "s.pdf", mustWrite(t))
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
