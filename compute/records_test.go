package compute

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/seal"
)

// outcome writes an outcome of a plan; more holds further keys.
func outcome(name, measure, more string) string {
	return fmt.Sprintf("[plan.outcome.%s]\nlabel = \"Invented\"\nmeasure = %q\n%s\n", name, measure, more)
}

const why = "why = \"Below this nobody would notice the difference in use.\"\n"

// two are the groups and the direction of most outcomes here.
const two = "groups = [\"new\", \"old\"]\nbetter = \"higher\"\n"

func hypothesis(name, outcome, claim, more string) string {
	return fmt.Sprintf("[plan.hypothesis.%s]\noutcome = %q\nclaim = %q\n%s\n", name, outcome, claim, more)
}

// entryOf writes one result of a study.
func entryOf(study, outcome, more string) string {
	return fmt.Sprintf("[[result]]\nstudy = %q\noutcome = %q\ndate = 2026-03-02\n%s\n", study, outcome, more)
}

func given1(study, outcome string, estimate, se float64) string {
	return entryOf(study, outcome, fmt.Sprintf("effect = { estimate = %v, se = %v }", estimate, se))
}

// folder makes the record's folder from names and contents in turn.
func folder(files ...string) fstest.MapFS {
	fs := fstest.MapFS{}
	for i := 0; i+1 < len(files); i += 2 {
		fs[files[i]] = &fstest.MapFile{Data: []byte(files[i+1])}
	}
	return fs
}

// load reads a record that must have no errors.
func load(t testing.TB, text string, chain []byte, files fstest.MapFS) *protocol.Loaded {
	t.Helper()
	in := protocol.Load("test.toml", []byte(text), chain, files)
	for _, d := range in.Diagnostics {
		if d.Severity == 0 {
			t.Fatalf("%s [%s]\n%s", d.Message, d.Code, text)
		}
	}
	return in
}

// compute runs a record that must have no errors; the result must hold
// together.
func computed(t *testing.T, text string, files ...string) *result.Result {
	t.Helper()
	res := Run(load(t, text, nil, folder(files...)), "test")
	consistent(t, res)
	return res
}

// sealed seals a record as it stands at a time.
func sealed(t *testing.T, text string, at time.Time, files ...string) []byte {
	t.Helper()
	in := load(t, text, nil, folder(files...))
	chain, _, err := seal.Append(nil, seal.New(in.Record, in.Tables, "0.1.0", at))
	if err != nil {
		t.Fatal(err)
	}
	return chain
}

// hyp finds a hypothesis of a result.
func hyp(t *testing.T, res *result.Result, name string) *result.Hypothesis {
	t.Helper()
	for i := range res.Hypotheses {
		if res.Hypotheses[i].Name == name {
			return &res.Hypotheses[i]
		}
	}
	t.Fatalf("no hypothesis %s", name)
	return nil
}

// because finds the alternatives of a hypothesis for one reason.
func because(h *result.Hypothesis, why string) (out []result.Judged) {
	for _, j := range h.Alternatives {
		if j.Because == why {
			out = append(out, j)
		}
	}
	return out
}

func codes(res *result.Result) string {
	var out []string
	for _, d := range res.Diagnostics {
		out = append(out, d.Code)
	}
	return strings.Join(out, " ")
}

// reporter is the part of testing.T that comparisons use.
type reporter interface {
	Helper()
	Errorf(string, ...any)
}

// near compares at a tolerance relative to the larger of 1 and the value
// wanted.
func near(t reporter, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Max(1, math.Abs(want))) {
		t.Errorf("%s = %.12g, want %.12g", what, got, want)
	}
}

func nearOpt(t reporter, what string, got result.Opt, want, tol float64) {
	t.Helper()
	if !got.OK {
		t.Errorf("%s is absent, want %.12g", what, want)
		return
	}
	near(t, what, got.V, want, tol)
}

type counter int

func (c *counter) Helper()               {}
func (c *counter) Errorf(string, ...any) { *c++ }

func TestNearFails(t *testing.T) {
	var c counter
	near(&c, "x", 1, 1.1, 1e-3)
	near(&c, "x", math.NaN(), 1, 1e-3)
	near(&c, "x", 1, 1, 1e-12)
	nearOpt(&c, "x", result.Opt{V: 1}, 1, 1)
	nearOpt(&c, "x", result.Some(2), 1, 1e-3)
	if c != 4 {
		t.Fatalf("%d faults, want 4", c)
	}
}
