package pdf

import (
	"bytes"
	"crypto/sha256"
	"flag"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"steelyard/render/page"
)

var update = flag.Bool("update", false, "write the golden files anew")

// The same bytes on every run, with one and two processors, and in processes
// of their own.
func TestSameBytes(t *testing.T) {
	want := sha256.Sum256(mustWrite(t))
	if os.Getenv("PDF_HASH") != "" {
		fmt.Printf("hash=%x\n", want)
		return
	}
	for _, procs := range []int{1, 2} {
		old := runtime.GOMAXPROCS(procs)
		for range 3 {
			if got := sha256.Sum256(mustWrite(t)); got != want {
				t.Errorf("other bytes with GOMAXPROCS %d", procs)
			}
		}
		runtime.GOMAXPROCS(old)
		cmd := exec.Command(os.Args[0], "-test.run=^TestSameBytes$")
		cmd.Env = append(os.Environ(), "PDF_HASH=1", fmt.Sprintf("GOMAXPROCS=%d", procs))
		out, err := cmd.CombinedOutput()
		if err != nil {
			t.Fatalf("%v\n%s", err, out)
		}
		if !strings.Contains(string(out), fmt.Sprintf("hash=%x\n", want)) {
			t.Errorf("other bytes in a process with GOMAXPROCS %d:\n%s", procs, out)
		}
	}
	other := sample()
	other.Title += "!"
	var b bytes.Buffer
	if err := Write(&b, other); err != nil {
		t.Fatal(err)
	}
	if sha256.Sum256(b.Bytes()) == want {
		t.Error("another title gives the same bytes")
	}
}

// Documents written at the same time do not disturb one another.
func TestWriteTogether(t *testing.T) {
	want := mustWrite(t)
	var wg sync.WaitGroup
	for range 4 {
		wg.Go(func() {
			var b bytes.Buffer
			if err := Write(&b, sample()); err != nil || !bytes.Equal(b.Bytes(), want) {
				t.Error("other bytes beside others", err)
			}
		})
	}
	wg.Wait()
}

// small is a document with little of everything, for the golden file.
func small() *page.Document {
	return &page.Document{
		Title: "Small", Language: "en", Paper: "letter", Status: "draft", Header: "Small", Footer: []string{"S-1"},
		Blocks: []page.Block{
			page.Heading{Level: 0, Text: page.T("Small")},
			page.Verdict{Name: "H1", Word: "OPEN", Tone: page.Open, Claim: page.T("A claim."), Answer: page.T("1.0 (0.5 to 1.5)")},
			page.Heading{Level: 1, Text: page.T("Part"), Anchor: "p"},
			page.Paragraph{Text: []page.Inline{page.Text("See "), page.Link{Text: "part", Target: "#p"}, page.Text(", 10⁻³.")}},
			page.Table{Columns: []page.Column{{}, {Align: page.Decimal}}, Head: [][]page.Inline{page.T("a"), page.T("b")},
				Rows: []page.Row{{Cells: [][]page.Inline{page.T("x"), page.T("1.5")}}, {Cells: [][]page.Inline{page.T("y"), page.T("−12")}}}},
			page.Figure{Alt: "A line.", Drawing: &page.Drawing{Width: 50, Height: 10, Marks: []page.Mark{page.Line{X2: 50, Y2: 10, Stroke: page.Stroke{Width: 1}}}}},
		},
	}
}

// shown gives the file without compression and without binary data.
func shown(b []byte) string {
	var out strings.Builder
	for _, part := range strings.SplitAfter(string(b), "\n") {
		part = strings.TrimSuffix(part, "\n")
		plain := true
		for i := 0; i < len(part); i++ {
			if part[i] < 0x20 || part[i] > 0x7e {
				plain = false
			}
		}
		switch {
		case plain:
			out.WriteString(part)
		case len(part) < 400 && strings.Contains(part, "Tj"):
			fmt.Fprintf(&out, "%q", part)
		default:
			fmt.Fprintf(&out, "(%d bytes, sha256 %.6x)", len(part), sha256.Sum256([]byte(part)))
		}
		out.WriteByte('\n')
	}
	return out.String()
}

// The golden file holds contents before compression, since compressed bytes
// may differ between releases of Go.
func TestGolden(t *testing.T) {
	b, err := build(small(), options{plain: true})
	if err != nil {
		t.Fatal(err)
	}
	// The font files are compressed in any case: leave them out.
	var kept []byte
	for rest := b; ; {
		i := bytes.Index(rest, []byte("/Length1 "))
		if i < 0 {
			kept = append(kept, rest...)
			break
		}
		j := bytes.Index(rest[i:], []byte("\nendstream"))
		kept = append(append(kept, rest[:i]...), "…"...)
		rest = rest[i+j:]
	}
	if i := bytes.Index(kept, []byte("xref\n0 ")); i > 0 {
		kept = kept[:i] // offsets follow the size of the font files
	}
	got := shown(kept)
	path := filepath.Join("testdata", "small.golden")
	if *update {
		if err := os.MkdirAll("testdata", 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(strings.Split(string(want), "\n"), strings.Split(got, "\n")); diff != "" {
		t.Error(diff)
	}
}

func BenchmarkWrite(b *testing.B) {
	doc := sample()
	b.ReportAllocs()
	for b.Loop() {
		var out bytes.Buffer
		if err := Write(&out, doc); err != nil {
			b.Fatal(err)
		}
		b.SetBytes(int64(out.Len()))
	}
}

func BenchmarkRead(b *testing.B) {
	file := mustWrite(b)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read(file); err != nil {
			b.Fatal(err)
		}
	}
}
