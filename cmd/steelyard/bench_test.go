package main

import (
	"bytes"
	"context"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"runtime/debug"
	"strings"
	"testing"
	"time"

	"steelyard/cmd/internal/pipeline"
	"steelyard/render/text"
)

// example reads one of the examples.
func example(tb testing.TB, name string) pipeline.Input {
	tb.Helper()
	dir := filepath.Join("..", "..", "examples")
	src, err := os.ReadFile(filepath.Join(dir, name))
	if err != nil {
		tb.Fatal(err)
	}
	return pipeline.Input{Name: name, Text: src, Files: os.DirFS(dir)}
}

var examples = []string{"pouch-seal.toml", "wound-dressing.toml"}

// BenchmarkRecordToPDF takes a record from its bytes to the bytes of its PDF.
func BenchmarkRecordToPDF(b *testing.B) {
	for _, name := range examples {
		defer debug.SetGCPercent(debug.SetGCPercent(400)) // as main does
		b.Run(strings.TrimSuffix(name, ".toml"), func(b *testing.B) {
			in, rooms := example(b, name), pipeline.Real()
			b.ReportAllocs()
			for b.Loop() {
				c, err := rooms.Compile(in)
				if err != nil {
					b.Fatal(err)
				}
				if _, err := c.View(pipeline.PDF, text.Options{}); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// BenchmarkRooms shows where the time of one record goes.
func BenchmarkRooms(b *testing.B) {
	in, rooms := example(b, examples[0]), pipeline.Real()
	c, err := rooms.Compile(in)
	if err != nil || c.Page == nil {
		b.Fatal(err, c.Diagnostics)
	}
	var out bytes.Buffer
	for _, room := range []struct {
		name string
		do   func()
	}{
		{"load", func() { rooms.Load(in.Name, in.Text, nil, in.Files) }},
		{"run", func() { rooms.Run(c.Loaded, "bench") }},
		{"compose", func() { rooms.Compose(c.Loaded, c.Result) }},
		{"pdf", func() { rooms.PDF(&out, c.Page) }},
		{"json", func() { rooms.JSON(&out, c.Loaded, c.Result) }},
		{"text", func() { rooms.Text(&out, c.Page, text.Options{Width: 80}) }},
	} {
		b.Run(room.name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				out.Reset()
				room.do()
			}
		})
	}
}

// writer is the least that a Go program can do to leave a file of that size.
const writer = `package main

import (
	"os"
	"strconv"
)

func main() {
	n, _ := strconv.Atoi(os.Args[2])
	if os.WriteFile(os.Args[1], make([]byte, n), 0o666) != nil {
		os.Exit(1)
	}
}
`

// BenchmarkProcess runs the whole program and, in turn, one that only writes
// a file of the same size, and reports how many times as long ours takes, by
// the clock and, for a busy machine, in time of processors.
func BenchmarkProcess(b *testing.B) {
	dir := b.TempDir()
	ours, theirs := filepath.Join(dir, "steelyard"), filepath.Join(dir, "writer")
	if runtime.GOOS == "windows" {
		ours, theirs = ours+".exe", theirs+".exe"
	}
	put := func(name, content string) {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(content), 0o666); err != nil {
			b.Fatal(err)
		}
	}
	put("main.go", writer)
	put("go.mod", "module writer\n\ngo 1.26\n")
	build := func(in, out string) {
		cmd := exec.CommandContext(context.Background(), "go", "build", "-o", out, ".")
		cmd.Dir = in
		if text, err := cmd.CombinedOutput(); err != nil {
			b.Fatalf("%v\n%s", err, text)
		}
	}
	build(".", ours)
	build(dir, theirs)

	pdf := filepath.Join(dir, "out", "pouch-seal.pdf")
	record := filepath.Join("..", "..", "examples", "pouch-seal.toml")
	run := func(name string, args ...string) (wall, cpu time.Duration) {
		cmd := exec.Command(name, args...)
		start := time.Now()
		if text, err := cmd.CombinedOutput(); err != nil {
			b.Fatalf("%v\n%s", err, text)
		}
		return time.Since(start), cmd.ProcessState.UserTime() + cmd.ProcessState.SystemTime()
	}
	run(ours, "compile", record, "--out", filepath.Dir(pdf))
	info, err := os.Stat(pdf)
	if err != nil {
		b.Fatal(err)
	}
	var ourWall, ourCPU, theirWall, theirCPU time.Duration
	for b.Loop() {
		wall, cpu := run(ours, "compile", record, "--out", filepath.Dir(pdf))
		ourWall, ourCPU = ourWall+wall, ourCPU+cpu
		wall, cpu = run(theirs, filepath.Join(dir, "plain"), fmt.Sprint(info.Size()))
		theirWall, theirCPU = theirWall+wall, theirCPU+cpu
	}
	b.ReportMetric(ourWall.Seconds()*1e3/float64(b.N), "ms/compile")
	b.ReportMetric(theirWall.Seconds()*1e3/float64(b.N), "ms/write")
	b.ReportMetric(ourWall.Seconds()/theirWall.Seconds(), "times")
	b.ReportMetric(ourCPU.Seconds()/theirCPU.Seconds(), "times-cpu")
}
