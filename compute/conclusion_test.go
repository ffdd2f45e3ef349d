package compute

import (
	"fmt"
	"os"
	"sort"
	"strconv"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// sentence is one line of the corpus with the result that it is said of.
type sentence struct {
	line    int
	part    string
	codes   []string // any of these; none: nothing may be raised
	text    string
	checker checker
}

// readCorpus reads testdata/wording/corpus.txt; its head says how.
func readCorpus(t testing.TB) (out []sentence) {
	t.Helper()
	raw, err := os.ReadFile("../testdata/wording/corpus.txt")
	if err != nil {
		t.Fatal(err)
	}
	var k checker
	for i, line := range strings.Split(string(raw), "\n") {
		switch {
		case line == "" || line[0] == '#':
		case line[0] == '@':
			k = scene(t, line[1:])
		default:
			head, text, ok := strings.Cut(line, "| ")
			f := strings.Fields(head)
			if !ok || len(f) != 2 || f[0] != "tuned" && f[0] != "heldout" && f[0] != "later" && f[0] != "known" {
				t.Fatalf("corpus.txt:%d: not understood", i+1)
			}
			s := sentence{line: i + 1, part: f[0], text: text, checker: k}
			if f[1] != "pass" {
				s.codes = strings.Split(f[1], ",")
			}
			out = append(out, s)
		}
	}
	return out
}

// scene builds the result of one hypothesis from key=value pairs.
func scene(t testing.TB, line string) checker {
	t.Helper()
	v := pairs(line)
	o := result.Outcome{Name: "O", Label: v["label"], Unit: v["unit"], Better: v["better"]}
	if a, b, ok := strings.Cut(v["groups"], "/"); ok {
		o.Groups = [2]string{a, b}
	}
	h := result.Hypothesis{Name: "H1", Outcome: "O", Claim: v["claim"], Role: v["role"], Evidence: v["evidence"]}
	h.Verdict = result.Verdict(v["verdict"])
	if h.Role == "" {
		h.Role = "primary"
	}
	if a, b, ok := strings.Cut(v["reading"], ","); ok {
		above, err := strconv.Atoi(a)
		if err != nil {
			t.Fatal(err)
		}
		below, err := strconv.Atoi(b)
		if err != nil {
			t.Fatal(err)
		}
		h.Reading = result.Reading{Above: above, Below: below, HasRegion: true, OK: true}
	}
	return checker{res: &result.Result{Outcomes: []result.Outcome{o}, Hypotheses: []result.Hypothesis{h}}}
}

// pairs reads key=value, values with blanks in quotation marks.
func pairs(line string) map[string]string {
	out := map[string]string{}
	for line = strings.TrimSpace(line); line != ""; line = strings.TrimSpace(line) {
		key, rest, _ := strings.Cut(line, "=")
		value := ""
		if strings.HasPrefix(rest, `"`) {
			value, line, _ = strings.Cut(rest[1:], `"`)
		} else {
			value, line, _ = strings.Cut(rest, " ")
		}
		out[key] = value
	}
	return out
}

// outcome of checking one sentence.
func (s *sentence) check() (raised []string, right, coded bool) {
	k := s.checker
	for _, f := range k.check(s.text) {
		raised = append(raised, f.code)
	}
	sort.Strings(raised)
	right = (len(raised) > 0) == (len(s.codes) > 0)
	for _, c := range s.codes {
		for _, r := range raised {
			coded = coded || c == r
		}
	}
	return raised, right, coded || len(s.codes) == 0
}

// confusion counts one part of the corpus.
type confusion struct{ flagged, missed, passed, objected, otherCode int }

func (c confusion) String() string {
	return fmt.Sprintf("to flag: %d flagged (%d under another code), %d missed; to pass: %d passed, %d flagged", c.flagged, c.otherCode, c.missed, c.passed, c.objected)
}

func (c *confusion) count(s *sentence, raised []string, right, coded bool) {
	switch {
	case len(s.codes) > 0 && right:
		c.flagged++
		if !coded {
			c.otherCode++
		}
	case len(s.codes) > 0:
		c.missed++
	case right:
		c.passed++
	default:
		c.objected++
	}
}

// Floors of the parts that the rules were not adjusted on: right of all, in
// per cent. Right at the first run: of "heldout" 186 of 194; of four batches
// written after the rules as these grew, 61 of 72, 54 of 64, 40 of 50 and 47
// of 54. "later" is half of the third batch and the fourth; the others are
// part of "tuned" by now.
const (
	heldoutFloor = 97
	laterFloor   = 83
)

func TestCorpus(t *testing.T) {
	parts := map[string]*confusion{"tuned": {}, "heldout": {}, "later": {}, "known": {}}
	covered := map[string]int{}
	total := 0
	show := os.Getenv("STEELYARD_SHOW") // the name of a part: lists its faults
	for _, s := range readCorpus(t) {
		raised, right, coded := s.check()
		parts[s.part].count(&s, raised, right, coded)
		h := s.checker.res.Hypotheses[0]
		covered[h.Claim+" "+string(h.Verdict)+map[bool]string{true: " flag", false: " pass"}[len(s.codes) > 0]]++
		total++
		if !right || !coded {
			if s.part == "known" {
				continue
			}
			if s.part == "tuned" {
				t.Errorf("corpus.txt:%d: want %v, raised %v: %s", s.line, s.codes, raised, s.text)
			} else if s.part == show {
				t.Logf("corpus.txt:%d: want %v, raised %v: %s", s.line, s.codes, raised, s.text)
			}
		} else if s.part == "known" {
			t.Errorf("corpus.txt:%d: right by now, move it to tuned: %s", s.line, s.text)
		}
	}
	for _, name := range []string{"tuned", "heldout", "later"} {
		t.Logf("%-8s %v", name+":", parts[name])
	}
	for name, floor := range map[string]int{"heldout": heldoutFloor, "later": laterFloor} {
		c := parts[name]
		if all := c.flagged + c.missed + c.passed + c.objected; (c.flagged+c.passed)*100 < floor*all {
			t.Errorf("%s: %d of %d right, the floor is %d %%", name, c.flagged+c.passed, all, floor)
		}
	}
	if total < 320 {
		t.Errorf("only %d sentences", total)
	}
	for _, c := range record.Claims {
		for _, v := range []result.Verdict{result.Established, result.Suggested, result.Contradicted, result.Open, result.Pending, result.Masked, result.Described} {
			possible := c.Judged && v != result.Described && !(c.Word == "differs" && v == result.Contradicted) ||
				!c.Judged && (v == result.Described || v == result.Pending || v == result.Masked)
			for _, kind := range []string{" flag", " pass"} {
				if possible && covered[c.Word+" "+string(v)+kind] == 0 {
					t.Errorf("no sentence for %s %s%s", c.Word, v, kind)
				}
			}
		}
	}
}

// The comparison of wanted and raised must be able to fail both ways.
func TestCorpusCanFail(t *testing.T) {
	k := scene(t, `claim=superior verdict=open label="Pain score" better=lower groups="gel/cream" reading=0,0`)
	for _, s := range []sentence{
		{text: "The gel had no effect.", checker: k},
		{text: "Superiority was not shown.", codes: []string{"W101"}, checker: k},
	} {
		if raised, right, _ := s.check(); right {
			t.Errorf("%q: %v is called right", s.text, raised)
		}
	}
	s := sentence{text: "The gel had no effect.", codes: []string{"W103"}, checker: k}
	if _, _, coded := s.check(); coded {
		t.Error("another code is called right")
	}
}
