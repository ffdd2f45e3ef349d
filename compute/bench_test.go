package compute

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"steelyard/protocol"
)

// manyStudies is a record of k invented studies of a mean difference.
func manyStudies(k int) string {
	var b strings.Builder
	b.WriteString(head + `
[plan.outcome.y]
label = "Yield"
measure = "mean-difference"
groups = ["new", "old"]
better = "higher"
smallest = 0.3
why = "Below this the gain does not pay for the change of seed."
[plan.pooling.y]
independent = "Each study was grown on a field of its own."
model = "random"
[plan.hypothesis.H1]
outcome = "y"
claim = "superior"
evidence = "pooled"
[plan.hypothesis.H2]
outcome = "y"
claim = "minimum-effect"
evidence = "pooled"
[plan.family.F]
members = ["H1", "H2"]
procedure = "holm"
`)
	rng := rand.New(rand.NewPCG(1, 2))
	for i := range k {
		m := 0.2*rng.NormFloat64() + 0.25
		fmt.Fprintf(&b, "[[result]]\nstudy = \"s%d\"\noutcome = \"y\"\ndate = 2026-01-%02d\ngroups.new = { n = %d, mean = %.4f, sd = 1.1 }\ngroups.old = { n = 30, mean = 10, sd = 0.9 }\n",
			i, 1+i%28, 20+i%30, 10+m+math.Sqrt(1.0/12)*rng.NormFloat64())
	}
	return b.String()
}

// head begins every record of these tests.
const head = `steelyard = 1
[record]
title = "Invented"
setting = "field"
[plan]
question = "Is the invented effect there?"
alpha = { one_sided = 0.05, two_sided = 0.05 }
`

func benchmark(b *testing.B, text string) {
	in := protocol.Load("bench.toml", []byte(text), nil, nil)
	if in.Diagnostics.HasErrors() {
		b.Fatal(in.Diagnostics)
	}
	b.ReportAllocs()
	for b.Loop() {
		Run(in, "bench")
	}
}

func BenchmarkRunTypical(b *testing.B) {
	benchmark(b, head+`
[plan.outcome.peel]
label = "Seal peel strength"
measure = "mean-difference"
groups = ["new", "current"]
smallest = 0.8
why = "Below 0.8 N the difference is lost in the lot-to-lot spread."
[plan.hypothesis.H1]
outcome = "peel"
claim = "equivalent"
[[result]]
study = "Line 3"
outcome = "peel"
date = 2026-04-12
groups.new = { n = 24, mean = 11.92, sd = 1.31 }
groups.current = { n = 24, mean = 12.10, sd = 1.18 }
`)
}

func BenchmarkRun1000Studies(b *testing.B) { benchmark(b, manyStudies(1000)) }
