package wording

import (
	"testing"

	"steelyard/protocol/diag"
	"steelyard/protocol/read"
	"steelyard/protocol/record"
)

// The span of a phrase is where it was written, however the text is quoted.
func TestPlaces(t *testing.T) {
	const head = "steelyard = 1\n[conclusion]\ntext = "
	for _, tt := range []struct{ token, want string }{
		{`"The gel has no effect."`, "no effect"},
		{`'The gel has no effect.'`, "no effect"},
		{"\"\"\"\nThe gel\nhas no effect.\"\"\"", "no effect"},
		{"'''\r\nThe gel has \"no effect\".\r\n'''", "no effect"},
		{`"The \"gel\" \u03bb\t has no effect."`, "no effect"},
		{`"λ: the gel has no\u0020effect."`, `no\u0020effect`},
		{"\"\"\"The gel has no \\\n   effect.\"\"\"", "no \\\n   effect"},
		{`"\x54he gel has no\x20effect."`, `no\x20effect`},
		{"\"\"\"\"The gel\" has no effect\"\"\"\"", "no effect"},
	} {
		src := diag.NewSource("a.toml", []byte(head+tt.token+"\n"))
		rec, _ := read.Record(src)
		if rec.Conclusion == nil || !rec.Conclusion.Text.Stated {
			t.Fatalf("%s: not read", tt.token)
		}
		text := rec.Conclusion.Text
		found := Find(text.V)
		if len(found) != 1 || found[0].Class != NoEffect {
			t.Fatalf("%s: %v in %q", tt.token, found, text.V)
		}
		at := Places(src, text)(found[0].Start, found[0].End)
		if got := string(src.Text[at.Start:at.End]); got != tt.want {
			t.Errorf("%s: %q, want %q", tt.token, got, tt.want)
		}
		// A value that is not the one written has no places inside.
		text.V += "x"
		if at := Places(src, text)(0, 1); at != text.Span {
			t.Errorf("%s: %v, want the whole value", tt.token, at)
		}
	}
	if at := Places(nil, record.String{V: "x"})(0, 1); !at.IsZero() {
		t.Errorf("no source: %v", at)
	}
}
