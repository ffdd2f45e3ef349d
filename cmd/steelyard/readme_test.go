package main

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"steelyard/cmd/internal/pipeline"
	"steelyard/cmd/internal/term"
)

// TestReadme holds the README against the program: its first record compiles
// without a word of complaint, it names every command and no other, and the
// records of its commands exist.
func TestReadme(t *testing.T) {
	text, err := os.ReadFile(filepath.Join("..", "..", "README.md"))
	if err != nil {
		t.Fatal(err)
	}
	for _, block := range regexp.MustCompile("(?s)```toml\n(.*?)```").FindAllSubmatch(text, -1) {
		c, err := pipeline.Real().Compile(pipeline.Input{Name: "readme.toml", Text: block[1]})
		if err != nil {
			t.Fatal(err)
		}
		if c.Page == nil || len(c.Diagnostics) > 0 {
			t.Errorf("the record of the README has faults:\n%s", term.Diagnostics(c.Diagnostics, c.Loaded.Source, "README.md", false))
		}
	}
	named := map[string]bool{}
	for _, m := range regexp.MustCompile("\\| `steelyard ([a-z-]+)").FindAllSubmatch(text, -1) {
		named[string(m[1])] = true
	}
	w := theWorld()
	for _, cmd := range rootCommand(w, term.New(w.out, w.err, w.getenv)).Commands() {
		if !named[cmd.Name()] {
			t.Errorf("the README does not name the command %s", cmd.Name())
		}
		delete(named, cmd.Name())
	}
	for name := range named {
		t.Errorf("the README names the command %s, which does not exist", name)
	}
	for _, m := range regexp.MustCompile(`(examples/[\w.-]+)|\]\(([\w./-]+)\)`).FindAllSubmatch(text, -1) {
		if _, err := os.Stat(filepath.Join("..", "..", string(m[1])+string(m[2]))); err != nil {
			t.Errorf("the README names a file: %v", err)
		}
	}
}

// TestHelp demands an example, and a first sentence, of every command.
func TestHelp(t *testing.T) {
	for _, cmd := range rootCommand(theWorld(), term.New(os.Stdout, os.Stderr, os.Getenv)).Commands() {
		var out bytes.Buffer
		w := theWorld()
		w.out, w.err = &out, &out
		if code := run(context.Background(), w, []string{cmd.Name(), "--help"}); code != 0 {
			t.Errorf("%s --help: exit code %d", cmd.Name(), code)
		}
		if !strings.Contains(out.String(), "Examples:\n  steelyard "+cmd.Name()) {
			t.Errorf("%s has no example", cmd.Name())
		}
		for _, line := range strings.Split(out.String(), "\n") {
			if n := len([]rune(line)); n > 110 {
				t.Errorf("%s: line of %d characters: %s", cmd.Name(), n, line)
			}
		}
	}
}
