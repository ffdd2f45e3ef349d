package seal

import (
	"bytes"
	"math"
	"math/rand/v2"
	"strconv"
	"testing"

	"steelyard/protocol/read"
	"steelyard/protocol/record"
)

// RFC 8785, Appendix B: bits of a float64 and its text. From memory; each text
// is also read back to its bits, so that a slip of memory would show.
func TestNumberRFC8785(t *testing.T) {
	for _, tt := range []struct {
		bits uint64
		want string
	}{
		{0x0000000000000000, "0"}, {0x8000000000000000, "0"},
		{0x0000000000000001, "5e-324"}, {0x8000000000000001, "-5e-324"},
		{0x7fefffffffffffff, "1.7976931348623157e+308"}, {0xffefffffffffffff, "-1.7976931348623157e+308"},
		{0x4340000000000000, "9007199254740992"}, {0xc340000000000000, "-9007199254740992"},
		{0x4430000000000000, "295147905179352830000"},
		{0x44b52d02c7e14af5, "9.999999999999997e+22"}, {0x44b52d02c7e14af6, "1e+23"}, {0x44b52d02c7e14af7, "1.0000000000000001e+23"},
		{0x444b1ae4d6e2ef4e, "999999999999999700000"}, {0x444b1ae4d6e2ef4f, "999999999999999900000"}, {0x444b1ae4d6e2ef50, "1e+21"},
		{0x3eb0c6f7a0b5ed8c, "9.999999999999997e-7"}, {0x3eb0c6f7a0b5ed8d, "0.000001"},
		{0x41b3de4355555553, "333333333.3333332"}, {0x41b3de4355555554, "333333333.33333325"}, {0x41b3de4355555555, "333333333.3333333"},
		{0x41b3de4355555556, "333333333.3333334"}, {0x41b3de4355555557, "333333333.33333343"},
		{0xbecbf647612f3696, "-0.0000033333333333333333"}, {0x43143ff3c1cb0959, "1424953923781206.2"},
	} {
		v := math.Float64frombits(tt.bits)
		if got := string(appendNumber(nil, v)); got != tt.want {
			t.Errorf("%016x: %s, want %s", tt.bits, got, tt.want)
		}
		if back, err := strconv.ParseFloat(tt.want, 64); err != nil || back != v {
			t.Errorf("%016x: the text %s reads back as %v", tt.bits, tt.want, back)
		}
	}
	for v, want := range map[float64]string{math.Inf(1): `"inf"`, math.Inf(-1): `"-inf"`, 1e-7: "1e-7", 1e21: "1e+21", 1e100: "1e+100", 0.05: "0.05", 123456: "123456"} {
		if got := string(appendNumber(nil, v)); got != want {
			t.Errorf("%v: %s, want %s", v, got, want)
		}
	}
}

func str(s string) *record.Node { return &record.Node{Kind: record.StringNode, Text: s} }

func table(keysAndValues ...any) *record.Node {
	n := &record.Node{Kind: record.TableNode}
	for i := 0; i < len(keysAndValues); i += 2 {
		n.Put(record.Entry{Key: keysAndValues[i].(string), Value: keysAndValues[i+1].(*record.Node)})
	}
	return n
}

// RFC 8785, 3.2.2 and 3.2.3: escapes, and keys by UTF-16 code units. From
// memory.
func TestStringsAndOrderRFC8785(t *testing.T) {
	n := table("\u20ac", str("Euro Sign"), "\r", str("Carriage Return"), "\ufb33", str("Hebrew Letter Dalet With Dagesh"),
		"1", str("One"), "\U0001f600", str("Emoji: Grinning Face"), "\u0080", str("Control"), "\u00f6", str("Latin Small Letter O With Diaeresis"))
	want := "{\"\\r\":\"Carriage Return\",\"1\":\"One\",\"\u0080\":\"Control\",\"\u00f6\":\"Latin Small Letter O With Diaeresis\"," +
		"\"\u20ac\":\"Euro Sign\",\"\U0001f600\":\"Emoji: Grinning Face\",\"\ufb33\":\"Hebrew Letter Dalet With Dagesh\"}"
	if got := string(Canonical(n)); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
	if got, want := string(Canonical(str("\u20ac$\u000f\nA'B\"\\\\\"/\u007f"))), "\"\u20ac$\\u000f\\nA'B\\\"\\\\\\\\\\\"/\u007f\""; got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
	if Canonical(nil) != nil {
		t.Error("nil has a canonical form")
	}
}

func tree(t *testing.T, text string) *record.Node {
	t.Helper()
	n, faults, _ := read.Tree([]byte(text))
	if len(faults) > 0 || n == nil {
		t.Fatalf("%v\n%s", faults, text)
	}
	return n
}

func TestPlanDigest(t *testing.T) {
	digest := func(text string) string { return PlanDigest(&record.Record{Tree: tree(t, text)}) }
	one := digest("steelyard = 1\n[plan]\nquestion = \"Q\" # why\nalpha = { one_sided = 0.05, two_sided = 0.1 }\n[[plan.data.exclude]]\ncolumn = \"a\"\n")
	same := digest("[plan.alpha]\none_sided = 5.0e-2\ntwo_sided = 1e-1\n[record]\ntitle = \"x\"\n[plan]\nquestion = \"\\u0051\"\ndata.exclude = [ { 'column' = '''a''' } ]\n")
	if one != same || len(one) != 64 {
		t.Errorf("one meaning, two digests: %s %s", one, same)
	}
	if want := Digest([]byte(`{"alpha":{"one_sided":0.05,"two_sided":0.1},"data":{"exclude":[{"column":"a"}]},"question":"Q"}`)); one != want {
		t.Errorf("digest %s, want %s", one, want)
	}
	if PlanDigest(&record.Record{}) != "" || PlanDigest(&record.Record{Tree: table()}) != "" {
		t.Error("a record without a plan has a digest")
	}
}

func TestSeed(t *testing.T) {
	d := Digest(nil) // e3b0c442 98fc1c14 …, the SHA-256 of nothing
	if got := Seed(d); got != 0xe3b0c44298fc1c14>>11 || got >= 1<<53 {
		t.Errorf("seed %x", got)
	}
	if Seed("") != Seed(d) || Seed("x") == Seed("y") {
		t.Error("what is no digest must be hashed")
	}
}

// Any way of writing a plan keeps its canonical form, which reads back as
// itself; any change of a value breaks it.
func TestCanonicalProperties(t *testing.T) {
	rng := rand.New(rand.NewPCG(8785, 1))
	doubtful := 0
	for range 400 {
		n := randomTable(rng, 3)
		want := Canonical(n)
		text := scramble(rng, n)
		// A key that is a value in one table of an array and dotted in the next
		// is refused by reading (R109); no key of the language is both.
		if _, faults, _ := read.Tree([]byte(text)); len(faults) == 1 && faults[0].Code == "R109" {
			doubtful++
			continue
		}
		if got := Canonical(tree(t, text)); !bytes.Equal(got, want) {
			t.Fatalf("written as\n%s\ngives %s\nwant  %s", text, got, want)
		}
		back, err := parseCanonical(want)
		if err != nil {
			t.Fatalf("%s: %v", want, err)
		}
		if got := Canonical(tree(t, "x = "+string(appendTOML(nil, back))).Get("x")); !bytes.Equal(got, want) {
			t.Fatalf("through TOML %s\nwant %s", got, want)
		}
		if change(rng, n); bytes.Equal(Canonical(n), want) {
			t.Fatalf("a change keeps %s", want)
		}
	}
	if doubtful > 40 {
		t.Errorf("%d of 400 plans were not compared", doubtful)
	}
}

func TestParseCanonicalRefuses(t *testing.T) {
	for _, tt := range []struct {
		text string
		at   int
	}{
		{"", 0}, {"{", 1}, {`{"a":1`, 6}, {`{"a":1}x`, 7}, {`{"b":1,"a":2}`, 2}, {`{"a":1,"a":2}`, 7}, {`{"a": 1}`, 5},
		{`{"a":1.0}`, 6}, {`{"a":01}`, 5}, {`{"a":1e999}`, 5}, {`{"a":null}`, 5}, {`{"a":"\u0041"}`, 6}, {`{"a":"\ud800"}`, 12},
		{`{"a":"x`, 7}, {"{\"a\":\"\x80\"}", 8}, {`[1,]`, 3}, {`[1 2]`, 2}, {`{"a":tru}`, 5}, {`"\`, 2},
	} {
		n, err := parseCanonical([]byte(tt.text))
		if err == nil {
			t.Errorf("%q is accepted as %s", tt.text, text(n))
		} else if err.at != tt.at {
			t.Errorf("%q: fault at %d, want %d (%s)", tt.text, err.at, tt.at, err.message)
		}
	}
	deep := append(bytes.Repeat([]byte("["), 100), bytes.Repeat([]byte("]"), 100)...)
	if _, err := parseCanonical(deep); err == nil {
		t.Error("any depth is accepted")
	}
}

func FuzzParseCanonical(f *testing.F) {
	for _, s := range []string{`{"a":[1,"x",true,0.5,-3e-9],"b":{}}`, `"\ud83d\ude00"`, `{"a":"\n"}`, `[[[`, `-`} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		n, err := parseCanonical(text)
		if err != nil {
			if err.at < 0 || err.at > len(text) {
				t.Fatalf("%q: fault outside: %v", text, err)
			}
			return
		}
		if got := Canonical(n); !bytes.Equal(got, text) {
			t.Fatalf("%q reads back as %q", text, got)
		}
	})
}
