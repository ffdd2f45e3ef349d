package compute

import (
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"slices"
	"strings"
	"testing"

	"steelyard/protocol"
	"steelyard/protocol/record"
)

// columnsOf names the columns of the first form of data that a measure takes.
func columnsOf(m *record.Measure) string {
	var out []string
	for _, c := range strings.Fields(m.Data[0]) {
		name := map[string]string{"value": "v", "group": "g", "first": "a", "second": "b", "event": "e", "time": "t", "exposure": "t"}[c]
		out = append(out, fmt.Sprintf("%s = %q", c, name))
	}
	return strings.Join(out, ", ")
}

// hardFiles are small files at the edges: constant, tied, separated, tiny,
// far from zero, without events, with nothing but events.
func hardFiles() map[string]string {
	write := func(n int, row func(i int) (v, a, b float64, e int, t float64)) string {
		s := "g,v,a,b,e,t\n"
		for i := range n {
			v, a, b, e, t := row(i)
			s += fmt.Sprintf("%s,%.17g,%.17g,%.17g,%d,%.17g\n", []string{"new", "old"}[i%2], v, a, b, e, t)
		}
		return s
	}
	rng := rand.New(rand.NewPCG(21, 22))
	return map[string]string{
		"constant":    write(12, func(int) (float64, float64, float64, int, float64) { return 3, 3, 3, 1, 2 }),
		"one a group": write(2, func(i int) (float64, float64, float64, int, float64) { return float64(i), 1, 2, 1, 2 }),
		"two a group": write(4, func(i int) (float64, float64, float64, int, float64) {
			return float64(i * i), float64(i), float64(3 - i*i), i % 2, float64(i + 1)
		}),
		"separated": write(20, func(i int) (float64, float64, float64, int, float64) {
			return float64(i) + 1000*float64(1-i%2), float64(i), float64(i) + 1e6, 1 - i%2, float64(i+1) + 100*float64(i%2)
		}),
		"ties": write(30, func(i int) (float64, float64, float64, int, float64) {
			return float64(i % 3), float64(i % 2), float64(i % 3), i % 3 / 2, float64(1 + i%2)
		}),
		"far": write(16, func(i int) (float64, float64, float64, int, float64) {
			return 1e15 + float64(i), 1e15 + float64(i%5), 1e15 - float64(i%3), i % 2, 1e12
		}),
		"tiny": write(16, func(i int) (float64, float64, float64, int, float64) {
			return 1e-300 * float64(i+1), 1e-300 * float64(i%5), 1e-300, i % 2, 1e-300
		}),
		"no events": write(10, func(i int) (float64, float64, float64, int, float64) {
			return -float64(i), float64(i), -float64(i), 0, float64(i + 1)
		}),
		"all events": write(10, func(i int) (float64, float64, float64, int, float64) {
			return float64(i), float64(i), 2 * float64(i), 1, float64(i + 1)
		}),
		"many": write(4000, func(i int) (float64, float64, float64, int, float64) {
			x := rng.NormFloat64()
			return x + 0.05*float64(1-i%2), x, x + 0.1*rng.NormFloat64(), int(rng.Uint64() % 2), rng.ExpFloat64() + 1e-9
		}),
		"yes and no": write(20, func(i int) (float64, float64, float64, int, float64) {
			return float64(i % 2), float64(i % 2), float64(i % 3 / 2), i % 3 / 2, 1
		}),
		"only yes and no": write(9, func(i int) (float64, float64, float64, int, float64) { return 1, 1, 0, 1, 1 }),
		"huge": write(8, func(i int) (float64, float64, float64, int, float64) {
			return 1e300 * float64(i-4), 1e300 * float64(i), -1e300 * float64(i), i % 2, 1e300 * float64(i+1)
		}),
	}
}

// Data at the edges come to a number or to a reason, for every measure and
// every method that it has.
func TestHardData(t *testing.T) {
	for name, file := range hardFiles() {
		for _, m := range record.Measures {
			if m.Data == nil || name == "many" && (m.Word == "conforming-share" || m.Word == "agreement") {
				continue
			}
			for _, method := range m.Methods {
				if name == "many" && slices.Contains(costly, method) {
					continue
				}
				more := fmt.Sprintf("method = %q\nrole = \"secondary\"\n", method)
				switch method {
				case "linear", "linear-hc3":
					more += "adjust = [\"t\"]\n"
				case "mantel-haenszel":
					more += "strata = \"b\"\n"
				case "any", "normal":
					more = "role = \"secondary\"\n"
				}
				if m.Word == "hazard-ratio" && method == "score" {
					more += "strata = \"a\"\n"
				}
				claims := ""
				for i, c := range protocol.SensibleClaims(m) {
					limit := ""
					if c == "above" || c == "below" {
						limit = fmt.Sprintf("limit = %v\n", limitOf(m))
					}
					claims += hypothesis(fmt.Sprintf("H%d", i), "y", c, more+limit)
				}
				text := head + outcome("y", m.Word, measureKeys(m)) + claims + fromFile("A", "y", columnsOf(m))
				in := protocol.Load("test.toml", []byte(text), nil, folder("d.csv", file))
				if in.Diagnostics.HasErrors() {
					for _, d := range in.Diagnostics {
						if d.Severity == 0 && d.Code[0] != 'D' { // the file itself may be refused
							t.Errorf("%s of %s by %s: %s [%s]", name, m.Word, method, d.Message, d.Code)
						}
					}
					continue
				}
				r := newRun(in, "test")
				r.plain = true
				r.describe()
				r.studies()
				r.totals()
				r.decide()
				checked(t, fmt.Sprintf("%s %s %s", name, m.Word, method), r.res)
			}
		}
	}
}

// Pools and combinations of random and of hard results hold together too.
func TestHardPools(t *testing.T) {
	for _, m := range record.Measures {
		entries := append(hardSummaries(m), hardEffects(m)...)
		if m.Word == "conforming-share" || m.Word == "agreement" {
			continue
		}
		for _, how := range []string{"common", "random", "combined"} {
			for i := range entries {
				text := head + outcome("y", m.Word, measureKeys(m))
				evidence, claims := "evidence = \"pooled\"\nrole = \"secondary\"\n", protocol.SensibleClaims(m)
				if how == "combined" {
					evidence, claims = "evidence = \"combined\"\nrole = \"secondary\"\n", []string{"superior", "differs"}
					text += fmt.Sprintf("[plan.combination.y]\nmethod = %q\n", []string{"fisher", "stouffer", "cauchy", "edgington", "harmonic", "logit", "pearson", "tippett"}[i%8])
				} else {
					text += pooling("y", how, "")
				}
				for k, c := range claims {
					limit := ""
					if c == "above" || c == "below" {
						limit = fmt.Sprintf("limit = %v\n", limitOf(m))
					}
					text += hypothesis(fmt.Sprintf("H%d", k), "y", c, evidence+limit)
				}
				text += entryOf("A", "y", entries[i]) + entryOf("B", "y", entries[(i+1)%len(entries)]) + entryOf("C", "y", entries[(i+3)%len(entries)])
				if m.Scale == record.Identity || m.Scale == record.Log {
					text += prior("P", "y", "mean = 0.1\nsd = 0.5\nnull_share = 0.3")
				}
				res := Run(load(t, text, nil, nil), "test")
				checked(t, fmt.Sprintf("%s %s %d", how, m.Word, i), res)
				for _, q := range res.Pooled {
					sum := 0.0
					for _, w := range q.Share {
						sum += w
					}
					if math.Abs(sum-1) > 1e-9 {
						t.Errorf("%s %s: weights add to %g", how, m.Word, sum)
					}
				}
			}
		}
	}
}

// A record computed twice says the same: no method writes to what it reads.
func TestRunTwice(t *testing.T) {
	files := folder("d.csv", hardFiles()["two a group"]+hardFiles()["ties"][len("g,v,a,b,e,t\n"):])
	for _, m := range record.Measures {
		if m.Data == nil || m.Word == "conforming-share" || m.Word == "agreement" || m.Word == "paired-risk-difference" {
			continue
		}
		text := head + outcome("y", m.Word, measureKeys(m)) + claimsOn(m, limitOf(m)) + fromFile("A", "y", columnsOf(m))
		in := load(t, text, nil, files)
		first := Run(in, "test")
		if second := Run(in, "test"); !reflect.DeepEqual(first, second) {
			t.Errorf("%s: two runs of one record differ", m.Word)
		}
	}
}
