package main

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"runtime"
	"runtime/debug"
	"testing"
	"testing/fstest"

	"steelyard/cmd/internal/pipeline"
	"steelyard/render/text"
)

// manyStudies is an invented record that pools n studies of two groups. Zero
// events occur in some.
func manyStudies(n int) []byte {
	r := rand.New(rand.NewPCG(7, 11))
	var b bytes.Buffer
	b.WriteString(`# Invented.
steelyard = 1

[record]
title   = "Leaks in many invented studies"
status  = "draft"
setting = "quality"

[plan]
question = "Do pouches with the new seal leak less often?"
alpha    = { one_sided = 0.025, two_sided = 0.05 }

[plan.outcome.leak]
label    = "Pouch leaks"
measure  = "risk-ratio"
groups   = ["new", "current"]
better   = "lower"
smallest = 1.25
why      = "Invented for a measurement of speed."

[plan.hypothesis.H1]
outcome  = "leak"
claim    = "differs"
evidence = "pooled"

[plan.pooling.leak]
independent = "Separate lots with separate pouches."
model       = "random"
`)
	for i := range n {
		size := 20 + r.IntN(400)
		risk := 0.02 + 0.3*r.Float64()
		events := func(p float64) (k int) {
			for range size {
				if r.Float64() < p {
					k++
				}
			}
			return k
		}
		fmt.Fprintf(&b, `
[[result]]
study   = "Invented study %d"
outcome = "leak"
date    = %d-%02d-%02d
groups.new     = { n = %d, events = %d }
groups.current = { n = %d, events = %d }
`, i+1, 1990+i/336, 1+i/28%12, 1+i%28, size, events(risk*(0.6+0.3*r.Float64())), size, events(risk))
	}
	return b.Bytes()
}

// BenchmarkManyStudies takes pooled records from their bytes to the bytes of
// their PDF, figures included.
func BenchmarkManyStudies(b *testing.B) {
	defer debug.SetGCPercent(debug.SetGCPercent(400)) // as main does
	for _, n := range []int{100, 1000} {
		in, rooms := pipeline.Input{Name: "many.toml", Text: manyStudies(n), Files: fstest.MapFS{}}, pipeline.Real()
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				wholeWay(b, rooms, in)
			}
		})
	}
}

func wholeWay(b *testing.B, rooms pipeline.Rooms, in pipeline.Input) []byte {
	b.Helper()
	c, err := rooms.Compile(in)
	if err != nil {
		b.Fatal(err)
	}
	if c.Page == nil {
		b.Fatal(c.Diagnostics)
	}
	pdf, err := c.View(pipeline.PDF, text.Options{})
	if err != nil {
		b.Fatal(err)
	}
	return pdf
}

// BenchmarkMillionRows compares two groups of half a million rows each, of a
// file with six columns of which two are used. It reports what stays on the
// heap while the record is compiled, at most.
func BenchmarkMillionRows(b *testing.B) {
	defer debug.SetGCPercent(debug.SetGCPercent(400))
	const record = `# Invented.
steelyard = 1

[record]
title   = "A million invented rows"
status  = "draft"
setting = "quality"

[plan]
question = "Does the new adhesive hold as firmly?"
alpha    = { one_sided = 0.025, two_sided = 0.05 }

[plan.outcome.peel]
label    = "Peel force"
unit     = "N"
measure  = "mean-difference"
groups   = ["new", "current"]
better   = "higher"
smallest = 0.5
why      = "Invented for a measurement of speed."

[plan.hypothesis.H1]
outcome = "peel"
claim   = "differs"

[[result]]
study   = "Invented line"
outcome = "peel"
date    = 2026-01-05
data    = { file = "rows.csv", value = "peel", group = "adhesive", labels = { N = "new", C = "current" } }
`
	r := rand.New(rand.NewPCG(3, 5))
	rows := []byte("pouch,adhesive,peel,line,operator,remark\n")
	for i := range 1_000_000 {
		rows = fmt.Appendf(rows, "%d,%c,%.3f,%d,operator %d,nothing of note\n", i, "NC"[i&1], 12+2*r.NormFloat64(), i%7, i%13)
	}
	in := pipeline.Input{Name: "rows.toml", Text: []byte(record), Files: fstest.MapFS{"rows.csv": {Data: rows}}}
	rooms := pipeline.Real()
	b.SetBytes(int64(len(rows)))
	b.ReportAllocs()
	var before, after runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&before)
	for b.Loop() {
		wholeWay(b, rooms, in)
	}
	runtime.ReadMemStats(&after)
	b.ReportMetric(float64(after.TotalAlloc-before.TotalAlloc)/float64(b.N)/1e6, "MB/rows")
}
