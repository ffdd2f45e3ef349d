package main

import (
	"errors"
	"flag"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

var update = flag.Bool("update", false, "write golden files and the comparisons of scripts anew")

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"steelyard": main})
}

// TestScript runs every script in testdata/script against the program itself.
//
// Besides the usual commands a script has
//
//	code N COMMAND…     the exact exit code
//	await FILE REGEXP   until the file holds it, for at most half a minute
//	edit FILE OLD NEW   replace a text, saving in place
//	add SOURCE FILE     add a text at the end of a file
func TestScript(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:           filepath.Join("..", "..", "testdata", "script"),
		UpdateScripts: *update,
		Setup: func(env *testscript.Env) error {
			env.Setenv("SOURCE_DATE_EPOCH", "1767225600") // 2026-01-01
			return nil
		},
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"code": code, "await": await, "edit": edit, "add": add, "tamper": tamper,
		},
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
	})
}

func code(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: code N COMMAND…")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got := 0
	if err := ts.Exec(args[1], args[2:]...); err != nil {
		var exit *exec.ExitError
		if !errors.As(err, &exit) {
			ts.Fatalf("%v", err)
		}
		got = exit.ExitCode()
	}
	if got != want {
		ts.Fatalf("exit code %d, want %d", got, want)
	}
}

func await(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 2 {
		ts.Fatalf("usage: await FILE REGEXP")
	}
	pattern, err := regexp.Compile(`(?m)` + args[1])
	ts.Check(err)
	var text []byte
	for range 3000 {
		if text, err = os.ReadFile(ts.MkAbs(args[0])); err == nil && pattern.Match(text) {
			return
		}
		time.Sleep(10 * time.Millisecond)
	}
	ts.Fatalf("%s never held %s: %v\n%.2000s", args[0], args[1], err, text)
}

func edit(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 3 {
		ts.Fatalf("usage: edit FILE OLD NEW")
	}
	path := ts.MkAbs(args[0])
	text, err := os.ReadFile(path)
	ts.Check(err)
	changed := regexp.MustCompile(regexp.QuoteMeta(args[1])).ReplaceAllLiteral(text, []byte(args[2]))
	if string(changed) == string(text) {
		ts.Fatalf("%s does not hold %q", args[0], args[1])
	}
	ts.Check(os.WriteFile(path, changed, 0o666))
}

func add(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 2 {
		ts.Fatalf("usage: add SOURCE FILE")
	}
	more, err := os.ReadFile(ts.MkAbs(args[0]))
	ts.Check(err)
	text, err := os.ReadFile(ts.MkAbs(args[1]))
	ts.Check(err)
	ts.Check(os.WriteFile(ts.MkAbs(args[1]), append(text, more...), 0o666))
}
