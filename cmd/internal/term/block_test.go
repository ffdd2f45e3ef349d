package term

import "testing"

func TestBlock(t *testing.T) {
	b := NewBlock(40)
	b.Head("%s: %s", "a.pdf", "reproduced")
	b.Row("record", "a text of several words that does not fit into one line")
	b.Row("empty", "")
	b.Line("kept    apart")
	b.Line("one-word-that-is-far-too-long-for-the-line-and-stays-whole")
	b.Row("hostile", "red \x1b[31m and \u202eback\nand\ton")
	want := `a.pdf: reproduced
  record    a text of several words that
            does not fit into one line
  empty
            kept    apart
            one-word-that-is-far-too-long-for-the-line-and-stays-whole
  hostile   red �[31m and �back and on
`
	if got := string(b.Bytes()); got != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestClean(t *testing.T) {
	for in, want := range map[string]string{
		"plain − ± é": "plain − ± é", "a\x00b": "a\ufffdb", "a\x9bb": "a\ufffdb", "a\u009bb": "a\ufffdb", "a\u2028b": "a\ufffdb", "a\r\nb": "a  b",
	} {
		if got := Clean(in); got != want {
			t.Errorf("%q: %q, want %q", in, got, want)
		}
	}
}
