// Command steelyard compiles a record of results into a dated decision
// document: what the results say about an effect, and what not. This package
// reads the command line, chooses streams and exit codes, and leaves the work
// to the rooms; it decides nothing statistical.
//
//	steelyard compile trial.toml
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"
	"time"

	"steelyard/cmd/internal/batch"
	"steelyard/cmd/internal/pipeline"
	"steelyard/cmd/internal/term"
)

func main() {
	// A record is compiled in the time of a few collections. The limit that
	// GOMEMLIMIT sets still holds; GOGC, where it is set, is left alone.
	if os.Getenv("GOGC") == "" {
		debug.SetGCPercent(400)
	}
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	code := run(ctx, theWorld(), os.Args[1:])
	stop()
	os.Exit(code)
}

// world is everything outside that a command may touch, but for the disk.
type world struct {
	in      io.Reader
	out     io.Writer
	err     io.Writer
	getenv  func(string) string
	now     func() time.Time
	workers int
	rooms   pipeline.Rooms
}

func theWorld() world {
	return world{
		in: os.Stdin, out: os.Stdout, err: os.Stderr, getenv: os.Getenv,
		now: time.Now, workers: workers(), rooms: pipeline.Real(),
	}
}

// exit is a command's exit code on its way up; what there was to say has been
// said.
type exit struct{ code int }

func (e exit) Error() string { return fmt.Sprintf("exit code %d", e.code) }

// worldError is a fault outside the record: an unreadable file, an output
// that cannot be written.
type worldError struct{ err error }

func (e worldError) Error() string { return e.err.Error() }
func (e worldError) Unwrap() error { return e.err }

// run is the whole program but for the process around it.
func run(ctx context.Context, w world, args []string) int {
	say := term.New(w.out, w.err, w.getenv)
	root := rootCommand(w, say)
	root.SetArgs(args)
	root.SetIn(w.in)
	root.SetOut(w.out)
	root.SetErr(w.err)
	cmd, err := root.ExecuteContextC(ctx)
	var code exit
	var outside worldError
	switch {
	case err == nil:
		return batch.ExitDone
	case errors.As(err, &code):
		return code.code
	case errors.As(err, &outside):
		say.Trouble(err)
	default: // the command line itself
		say.Trouble(err)
		say.PrintErr([]byte("  help: " + cmd.CommandPath() + " --help\n"))
	}
	return batch.ExitWorld
}
