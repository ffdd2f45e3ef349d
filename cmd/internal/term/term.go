// Package term states once how the program speaks at a prompt: what goes to
// which stream, how a fault of the world is worded, when there is colour and
// how wide a line may be. It refuses to know records, files or commands.
//
//	say := term.New(os.Stdout, os.Stderr, os.Getenv)
//	say.Trouble(err)            // steelyard: trial.toml: permission denied
//	say.Noticef("interrupted")  // steelyard: interrupted
package term

import (
	"fmt"
	"io"
	"os"
	"strconv"
	"strings"
	"sync"
	"time"

	xterm "golang.org/x/term"
)

// MaxWidth is the widest line written for a reader.
const MaxWidth = 80

// Speaker writes to the two streams. Its methods may be called from several
// goroutines; each call comes out whole.
type Speaker struct {
	mu       sync.Mutex
	out, err io.Writer

	OutTerminal bool // standard output is a terminal
	ErrTerminal bool // the error stream is a terminal
	Color       bool // emphasis is allowed on terminals
	Width       int  // columns, at most MaxWidth

	progress bool // a line of progress stands on the terminal
}

// New looks at the two streams and at the environment (NO_COLOR, TERM,
// COLUMNS) once.
func New(out, err io.Writer, getenv func(string) string) *Speaker {
	s := &Speaker{out: out, err: err, Width: MaxWidth}
	s.OutTerminal, s.ErrTerminal = isTerminal(out), isTerminal(err)
	s.Color = getenv("NO_COLOR") == "" && getenv("TERM") != "dumb"
	width := 0
	if f, ok := out.(*os.File); ok && s.OutTerminal {
		width, _, _ = xterm.GetSize(int(f.Fd()))
	}
	if n, e := strconv.Atoi(getenv("COLUMNS")); e == nil && width == 0 {
		width = n
	}
	if width >= 40 && width < MaxWidth {
		s.Width = width
	}
	return s
}

func isTerminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	return ok && xterm.IsTerminal(int(f.Fd()))
}

// OutColor reports whether standard output may carry emphasis.
func (s *Speaker) OutColor() bool { return s.Color && s.OutTerminal }

// ErrColor reports whether the error stream may carry emphasis.
func (s *Speaker) ErrColor() bool { return s.Color && s.ErrTerminal }

// Print writes what was asked for to standard output, as it is.
func (s *Speaker) Print(text []byte) error {
	s.mu.Lock()
	defer s.mu.Unlock()
	_, err := s.out.Write(text)
	return err
}

// Sayf writes one line to standard output.
func (s *Speaker) Sayf(format string, args ...any) {
	s.mu.Lock()
	defer s.mu.Unlock()
	fmt.Fprintf(s.out, format+"\n", args...)
}

// PrintErr writes to the error stream, as it is.
func (s *Speaker) PrintErr(text []byte) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.clear()
	s.err.Write(text)
}

// Progress shows how far long work has come, on one line that the next message
// replaces. It is shown only where nobody sees the work's own lines: the error
// stream is a terminal and standard output is not.
func (s *Speaker) Progress(done, of int) {
	if !s.ErrTerminal || s.OutTerminal {
		return
	}
	s.mu.Lock()
	defer s.mu.Unlock()
	s.clear()
	if done < of {
		fmt.Fprintf(s.err, "%d of %d", done, of)
		s.progress = true
	}
}

// clear takes the line of progress away.
func (s *Speaker) clear() {
	if s.progress {
		io.WriteString(s.err, "\r\x1b[K")
		s.progress = false
	}
}

// Noticef writes one line about the program's own doings to the error stream.
func (s *Speaker) Noticef(format string, args ...any) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.clear()
	fmt.Fprintf(s.err, "steelyard: "+format+"\n", args...)
}

// Trouble writes a fault of the world, or of the command line, to the error
// stream: who speaks, what it is about, what is wrong.
func (s *Speaker) Trouble(err error) {
	s.Noticef("%s", strings.TrimRight(err.Error(), "\n"))
}

// Count is "1 warning", "2 warnings".
func Count(n int, one string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + one + "s"
}

// Took is a duration for a reader: milliseconds below a second, then seconds.
func Took(d time.Duration) string {
	if d < time.Second {
		return fmt.Sprintf("%d ms", max(1, d.Round(time.Millisecond).Milliseconds()))
	}
	return fmt.Sprintf("%.1f s", d.Seconds())
}
