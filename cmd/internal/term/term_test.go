package term

import (
	"errors"
	"os"
	"strings"
	"testing"
	"time"

	"steelyard/protocol/diag"
)

func TestWhoSpeaksWhere(t *testing.T) {
	var out, errs strings.Builder
	s := New(&out, &errs, func(string) string { return "" })
	s.Sayf("said %d", 1)
	s.Print([]byte("printed\n"))
	s.Noticef("noticed")
	s.Trouble(errors.New("a.toml: no such file\n"))
	if got, want := out.String(), "said 1\nprinted\n"; got != want {
		t.Errorf("standard output %q, want %q", got, want)
	}
	if got, want := errs.String(), "steelyard: noticed\nsteelyard: a.toml: no such file\n"; got != want {
		t.Errorf("error stream %q, want %q", got, want)
	}
	if s.OutColor() || s.ErrColor() || s.Width != MaxWidth {
		t.Errorf("what is no terminal: %+v", s)
	}
}

func TestColorIsForTerminals(t *testing.T) {
	for _, tt := range []struct {
		env  map[string]string
		want bool
	}{
		{nil, true},
		{map[string]string{"NO_COLOR": "1"}, false},
		{map[string]string{"TERM": "dumb"}, false},
		{map[string]string{"NO_COLOR": ""}, true},
	} {
		s := New(os.Stdout, os.Stderr, func(k string) string { return tt.env[k] })
		s.OutTerminal, s.ErrTerminal = true, false
		if s.OutColor() != tt.want || s.ErrColor() {
			t.Errorf("%v: %v, %v", tt.env, s.OutColor(), s.ErrColor())
		}
	}
}

func TestWidth(t *testing.T) {
	var out, errs strings.Builder
	for columns, want := range map[string]int{"": 80, "60": 60, "200": 80, "10": 80, "wide": 80} {
		if s := New(&out, &errs, func(k string) string { return map[string]string{"COLUMNS": columns}[k] }); s.Width != want {
			t.Errorf("COLUMNS=%s: %d, want %d", columns, s.Width, want)
		}
	}
}

func TestDiagnosticsArePlacedAsTheUserCallsTheFile(t *testing.T) {
	src := diag.NewSource("a.toml", []byte("one\ntwo three\n"))
	list := diag.List{
		diag.Error("R1", diag.Span{Start: 8, End: 13}, "wrong").WithHelp("write four"),
		diag.Warning("D1", diag.Span{}, "doubtful").In("data/x.csv", 7, 2, "1,2"),
	}
	got := string(Diagnostics(list, src, "dir/a.toml", false))
	want := "dir/a.toml:2:5: error: wrong [R1]\n    two three\n        ^^^^^\n  help: write four\n" +
		"dir/data/x.csv:7:2: warning: doubtful [D1]\n    1,2\n     ^\n"
	if strings.ReplaceAll(got, `\`, "/") != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
	if src.Name != "a.toml" {
		t.Error("the source was renamed for everybody")
	}
	colored := string(Diagnostics(list, src, "a.toml", true))
	if !strings.Contains(colored, "\x1b[1;31merror:\x1b[0m wrong") || !strings.Contains(colored, "\x1b[1;33mwarning:\x1b[0m") {
		t.Errorf("no emphasis in %q", colored)
	}
}

func TestSmallWords(t *testing.T) {
	for _, tt := range [][2]string{
		{Count(1, "warning"), "1 warning"}, {Count(0, "warning"), "0 warnings"}, {Count(2, "error"), "2 errors"},
		{Took(0), "1 ms"}, {Took(31*time.Millisecond + 400*time.Microsecond), "31 ms"}, {Took(1540 * time.Millisecond), "1.5 s"},
		{Summary(nil), "no faults"},
		{Summary(diag.List{diag.Error("", diag.Span{}, ""), diag.Note("", diag.Span{}, ""), diag.Error("", diag.Span{}, "x")}), "2 errors, 1 note"},
	} {
		if tt[0] != tt[1] {
			t.Errorf("%q, want %q", tt[0], tt[1])
		}
	}
}

func TestProgress(t *testing.T) {
	var out, errs strings.Builder
	s := New(&out, &errs, func(string) string { return "" })
	s.Progress(1, 3)
	if errs.Len() > 0 {
		t.Errorf("progress where there is no terminal: %q", errs.String())
	}
	s.ErrTerminal = true
	s.Progress(1, 3)
	s.Noticef("slow")
	s.Progress(2, 3)
	s.Progress(3, 3)
	if got, want := errs.String(), "1 of 3\r\x1b[Ksteelyard: slow\n2 of 3\r\x1b[K"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
	errs.Reset()
	s.OutTerminal = true
	s.Progress(1, 3)
	if errs.Len() > 0 || out.Len() > 0 {
		t.Errorf("progress beside the work's own lines: %q", errs.String())
	}
}
