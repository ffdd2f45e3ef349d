package compute

import (
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/record"
)

// noNaN walks a result and reports every number that is none.
func noNaN(t reporter, v reflect.Value, path string) {
	t.Helper()
	switch v.Kind() {
	case reflect.Float64:
		if math.IsNaN(v.Float()) {
			t.Errorf("%s is NaN", path)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			noNaN(t, v.Field(i), path+"."+v.Type().Field(i).Name)
		}
	case reflect.Slice, reflect.Array:
		for i := range v.Len() {
			noNaN(t, v.Index(i), fmt.Sprintf("%s[%d]", path, i))
		}
	case reflect.Pointer:
		if !v.IsNil() {
			noNaN(t, v.Elem(), path)
		}
	case reflect.Interface:
		if !v.IsNil() {
			noNaN(t, v.Elem(), path)
		}
	}
}

func TestNoNaNFails(t *testing.T) {
	var c counter
	noNaN(&c, reflect.ValueOf(&result.Result{Hypotheses: []result.Hypothesis{{Judged: result.Judged{P: result.P{Ln: math.NaN()}}}}}), "")
	if c != 1 {
		t.Fatal("a NaN was not found")
	}
}

// measureKeys are the further keys of an outcome of a measure.
func measureKeys(m *record.Measure) string {
	more := "better = \"higher\"\n"
	if m.Shape == record.TwoGroups || m.Shape == record.Paired {
		more = two
	}
	ref := map[string]string{"mean": "0", "proportion": "0.5", "rate": "1", "sd": "1", "agreement": "0.9", "conforming-share": "0.9"}[m.Word]
	if ref != "" {
		more += "reference = " + ref + "\n"
	}
	if m.Word == "agreement" || m.Word == "conforming-share" {
		more += "spec = [-3, 3]\n"
	}
	if m.Word == "restricted-mean-difference" {
		more += "horizon = 1\n"
	}
	small := "0.2"
	if m.IsRatio() {
		small = "1.3"
	}
	if m.Word == "agreement" || m.Word == "conforming-share" || m.Word == "proportion" {
		small = "0.05"
	}
	return more + "smallest = " + small + "\n" + why
}

// claimsOn writes every claim that makes sense on an outcome.
func claimsOn(m *record.Measure, limit float64) string {
	var b strings.Builder
	for i, c := range protocol.SensibleClaims(m) {
		more := "role = \"secondary\"\n"
		if c == "above" || c == "below" {
			more += fmt.Sprintf("limit = %v\n", limit)
		}
		b.WriteString(hypothesis(fmt.Sprintf("H%d", i), "y", c, more))
	}
	return b.String()
}

func limitOf(m *record.Measure) float64 {
	switch m.Null {
	case record.NullZero, record.NullReferenceOrZero:
		return 0.1
	case record.NullOne:
		return 1.1
	}
	return 0.6
}

// hardSummaries are entries of one measure at its edges.
func hardSummaries(m *record.Measure) []string {
	group := func(n, mean, sd float64) string { return fmt.Sprintf("{ n = %v, mean = %v, sd = %v }", n, mean, sd) }
	count := func(n, x int) string { return fmt.Sprintf("{ n = %d, events = %d }", n, x) }
	rate := func(x int, t float64) string { return fmt.Sprintf("{ events = %d, exposure = %v }", x, t) }
	pair := func(a, b string) string { return "groups.new = " + a + "\ngroups.old = " + b }
	switch m.Word {
	case "mean-difference", "standardized-mean-difference", "ratio-of-means":
		return []string{pair(group(2, 5, 1), group(2, 4, 1)), pair(group(1e6, 5.01, 1), group(1e6, 5, 1)), pair(group(30, 1e9, 1), group(30, 1, 1)),
			pair(group(30, 5, 0), group(30, 4, 1)), pair(group(30, 5, 0), group(30, 4, 0)), pair(group(2, 1e-9, 1e-12), group(3, 2e-9, 1e-12)), pair(group(5, 0.001, 1), group(5, 0.001, 1))}
	case "geometric-mean-ratio":
		log := func(n, mean, sd float64) string {
			return fmt.Sprintf("{ n = %v, log_mean = %v, log_sd = %v }", n, mean, sd)
		}
		return []string{pair(log(2, 1, 1), log(2, 0, 1)), pair(log(1e6, 1, 1), log(1e6, 1.001, 1)), pair(log(20, 300, 0.001), log(20, -300, 0.001)), pair(log(9, 1, 0), log(9, 1, 0))}
	case "risk-difference", "risk-ratio", "odds-ratio":
		return []string{pair(count(10, 0), count(10, 0)), pair(count(10, 10), count(10, 10)), pair(count(10, 0), count(10, 10)), pair(count(10, 10), count(10, 0)), pair(count(1, 0), count(1, 1)),
			pair(count(1000000, 500), count(1000000, 400)), pair(count(1000000, 0), count(1000000, 30)), pair(count(1000000, 990000), count(1000000, 10)), pair(count(5, 2), count(100000, 40000))}
	case "rate-difference", "rate-ratio":
		return []string{pair(rate(0, 10), rate(0, 10)), pair(rate(0, 10), rate(8, 10)), pair(rate(8, 10), rate(0, 10)), pair(rate(1000000, 1e6), rate(999000, 1e6)), pair(rate(100000, 1e-3), rate(1, 1e9)), pair(rate(1, 1e-9), rate(1, 1e9))}
	case "mean":
		return []string{"sample = " + group(2, 5, 1), "sample = " + group(1e6, 0.01, 1), "sample = " + group(30, 1e9, 1), "sample = " + group(30, 5, 0)}
	case "proportion":
		return []string{"sample = " + count(10, 0), "sample = " + count(10, 10), "sample = " + count(1, 1), "sample = " + count(1000000, 500000), "sample = " + count(1000000, 0), "sample = " + count(1000000, 999999)}
	case "rate":
		return []string{"sample = " + rate(0, 10), "sample = " + rate(1000000, 1), "sample = " + rate(1, 1e12), "sample = " + rate(1000000, 1e6)}
	case "sd":
		return []string{"sample = { n = 2, sd = 1 }", "sample = { n = 1000000, sd = 1.01 }", "sample = { n = 20, sd = 1e9 }", "sample = { n = 20, sd = 0 }", "sample = { n = 20, sd = 1e-9 }"}
	case "sd-ratio":
		sd := func(n, s float64) string { return fmt.Sprintf("{ n = %v, sd = %v }", n, s) }
		return []string{pair(sd(2, 1), sd(2, 2)), pair(sd(1e6, 1), sd(1e6, 1.01)), pair(sd(9, 0), sd(9, 1)), pair(sd(9, 1), sd(9, 0)), pair(sd(9, 1e9), sd(9, 1e-9))}
	case "correlation", "rank-correlation":
		return []string{"sample = { n = 4, r = 0.5 }", "sample = { n = 1000000, r = 0.01 }", "sample = { n = 20, r = 1 }", "sample = { n = 20, r = -1 }", "sample = { n = 20, r = 0.999999999 }", "sample = { n = 3, r = 0.2 }"}
	case "paired-mean-difference":
		return []string{"pairs = " + group(2, 5, 1), "pairs = " + group(1e6, 0.001, 1), "pairs = " + group(9, 5, 0),
			"pairs = { n = 10, first_mean = 5, second_mean = 4, first_sd = 1, second_sd = 1, r = 1 }", "pairs = { n = 10, first_mean = 5, second_mean = 4, first_sd = 1, second_sd = 2, r = -1 }"}
	case "agreement":
		return []string{"pairs = " + group(2, 0.1, 1), "pairs = " + group(100000, 0.1, 1), "pairs = " + group(9, 0.5, 0), "pairs = " + group(9, 12, 1)}
	case "conforming-share":
		return []string{"sample = " + group(2, 0.1, 1), "sample = " + group(9, 0.5, 0), "sample = " + group(9, 12, 1), "sample = " + group(9, 0, 1e-9)}
	case "paired-sd-ratio":
		p := func(n, a, b, r float64) string {
			return fmt.Sprintf("pairs = { n = %v, first_sd = %v, second_sd = %v, r = %v }", n, a, b, r)
		}
		return []string{p(3, 1, 2, 0.5), p(1e6, 1, 1.01, 0.5), p(10, 1, 2, 1), p(10, 1, 2, -0.999999999), p(10, 0, 1, 0), p(2, 1, 1, 0)}
	case "paired-risk-difference":
		p := func(a, b, c, d int) string {
			return fmt.Sprintf("pairs = { both = %d, first_only = %d, second_only = %d, neither = %d }", a, b, c, d)
		}
		return []string{p(0, 0, 0, 10), p(10, 0, 0, 0), p(0, 10, 0, 0), p(0, 0, 10, 0), p(1, 0, 0, 0), p(500000, 500, 400, 499100), p(0, 1, 1, 0)}
	}
	return nil
}

// hardEffects are given effects at the edges.
func hardEffects(m *record.Measure) []string {
	if !m.Effect {
		return nil
	}
	y := map[record.Scale]string{record.Identity: "0.3", record.Log: "1.2", record.Logit: "0.6", record.Atanh: "0.3"}[m.Scale]
	list := []string{y + ", se = 1e-9", y + ", se = 0.008", y + ", se = 1e9", y + ", se = 0.1, df = 1", y + ", se = 0.1, df = 1e9"}
	if m.Scale == record.Identity && m.High > 1 {
		list = append(list, "1e9, se = 1", "-1e9, se = 1", "1e300, se = 1e-300")
	}
	for i := range list {
		list[i] = "effect = { estimate = " + list[i] + " }"
	}
	return list
}

// At the edges of every measure every claim comes to a number or to a reason:
// no NaN, and test and interval on the same side.
func TestHardInputs(t *testing.T) {
	for _, m := range record.Measures {
		entries := append(hardSummaries(m), hardEffects(m)...)
		if m.Summary != nil && len(entries) == 0 {
			t.Errorf("%s has no hard inputs", m.Word)
		}
		for _, e := range entries {
			text := head + outcome("y", m.Word, measureKeys(m)) + claimsOn(m, limitOf(m)) + entryOf("A", "y", e)
			in := protocol.Load("test.toml", []byte(text), nil, nil)
			if in.Diagnostics.HasErrors() {
				t.Errorf("%s, %s: %v", m.Word, e, in.Diagnostics[0].Message)
				continue
			}
			r := newRun(in, "test")
			r.plain = m.Word == "conforming-share" || m.Word == "agreement" // their curves are costly
			r.describe()
			r.studies()
			r.decide()
			checked(t, m.Word+", "+e, r.res)
		}
	}
}

// checked holds a result together and names the record where it does not.
func checked(t *testing.T, name string, res *result.Result) {
	t.Helper()
	ok := t.Run(name, func(t *testing.T) {
		consistent(t, res)
		noNaN(t, reflect.ValueOf(res), "")
		for i := range res.Hypotheses {
			agreeing(t, res, &res.Hypotheses[i])
		}
	})
	_ = ok
}

// randomRecord is a record of one outcome with random numbers.
func randomRecord(rng *rand.Rand) (string, *record.Measure) {
	m := record.Measures[rng.IntN(len(record.Measures))]
	for m.Summary == nil || m.Word == "agreement" || m.Word == "conforming-share" {
		m = record.Measures[rng.IntN(len(record.Measures))]
	}
	n := func() int { return 2 + int(math.Exp(5*rng.Float64())) }
	x := func() float64 { return 3 + 0.3*rng.NormFloat64() }
	s := func() float64 { return 0.2 + rng.Float64() }
	entry := ""
	g := func() string {
		k := n()
		switch m.Summary[0] {
		case "n mean sd":
			return fmt.Sprintf("{ n = %d, mean = %.4f, sd = %.4f }", k, x(), s())
		case "n log_mean log_sd":
			return fmt.Sprintf("{ n = %d, log_mean = %.4f, log_sd = %.4f }", k, x(), s())
		case "n events":
			return fmt.Sprintf("{ n = %d, events = %d }", k, rng.IntN(k+1))
		case "events exposure":
			return fmt.Sprintf("{ events = %d, exposure = %.3f }", rng.IntN(20), 1+20*rng.Float64())
		case "n sd":
			return fmt.Sprintf("{ n = %d, sd = %.4f }", k, s())
		case "n r":
			return fmt.Sprintf("{ n = %d, r = %.4f }", k+2, 1.8*rng.Float64()-0.9)
		case "n first_sd second_sd r":
			return fmt.Sprintf("{ n = %d, first_sd = %.4f, second_sd = %.4f, r = %.4f }", k+2, s(), s(), 1.8*rng.Float64()-0.9)
		case "both first_only second_only neither":
			return fmt.Sprintf("{ both = %d, first_only = %d, second_only = %d, neither = %d }", rng.IntN(20), rng.IntN(9), rng.IntN(9), 1+rng.IntN(20))
		}
		panic(m.Summary[0])
	}
	switch m.Shape {
	case record.TwoGroups:
		entry = "groups.new = " + g() + "\ngroups.old = " + g()
	case record.Paired:
		entry = "pairs = " + g()
	default:
		entry = "sample = " + g()
	}
	keys := measureKeys(m)
	if rng.IntN(2) == 0 {
		keys = strings.Replace(keys, "better = \"higher\"", "better = \"lower\"", 1)
	}
	return head + outcome("y", m.Word, keys) + claimsOn(m, limitOf(m)) + entryOf("A", "y", entry), m
}

// Random records hold together, whatever they say.
func TestRandomRecords(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	verdicts := map[result.Verdict]int{}
	for i := range 250 {
		text, m := randomRecord(rng)
		in := load(t, text, nil, nil)
		r := newRun(in, "test")
		r.plain = i%5 > 0 // the rest with all that stands beside
		r.describe()
		r.studies()
		r.decide()
		checked(t, fmt.Sprintf("%d %s", i, m.Word), r.res)
		for _, h := range r.res.Hypotheses {
			verdicts[h.Verdict]++
		}
		if t.Failed() {
			t.Fatal(text)
		}
	}
	for _, v := range []result.Verdict{result.Established, result.Contradicted, result.Open} {
		if verdicts[v] < 100 {
			t.Errorf("only %d claims are %s", verdicts[v], v)
		}
	}
}

// p-values below what a number holds keep their logarithm.
func TestSmallestP(t *testing.T) {
	h := hyp(t, computed(t, head+outcome("e", "estimate", "better = \"higher\"\n")+hypothesis("H1", "e", "superior", "")+given1("A", "e", 50, 1)), "H1")
	// ln of the upper normal tail at 50, R 4.2.2: pnorm(50, lower.tail = FALSE, log.p = TRUE)
	near(t, "ln p", h.P.Ln, -1254.83136113942, 1e-12)
	if h.P.P != 0 && h.P.P > 1e-300 || h.Verdict != result.Established {
		t.Errorf("%+v %s", h.P, h.Verdict)
	}
	nearOpt(t, "s-value", h.SValue, 1254.83136113942/math.Ln2, 1e-12)
}
