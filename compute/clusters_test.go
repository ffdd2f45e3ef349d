package compute

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// clustered is a file of values in clusters of three.
func clustered(event bool) (file string, first, second []float64) {
	rng := rand.New(rand.NewPCG(3, 3))
	file = "g,c,v\n"
	for i, g := range []string{"new", "old"} {
		for c := range 6 {
			shift := rng.NormFloat64()
			sum := 0.0
			for range 3 {
				v := 5 + shift + rng.NormFloat64() - float64(i)
				if event {
					v = 0
					if rng.Float64() < 0.4+0.1*shift {
						v = 1
					}
				}
				sum += v
				file += fmt.Sprintf("%s,%s%d,%.17g\n", g, g, c, v)
			}
			if i == 0 {
				first = append(first, sum/3)
			} else {
				second = append(second, sum/3)
			}
		}
	}
	return file, first, second
}

func momentsOf(x []float64) (mean, sd float64) {
	for _, v := range x {
		mean += v / float64(len(x))
	}
	for _, v := range x {
		sd += (v - mean) * (v - mean) / float64(len(x)-1)
	}
	return mean, math.Sqrt(sd)
}

// Clusters of a data file are analysed by their means: the record of the
// means as individuals says the same. Risks are compared by welch.
func TestClusterMeans(t *testing.T) {
	for _, measure := range []string{"mean-difference", "risk-difference"} {
		file, x, y := clustered(measure == "risk-difference")
		column := "value"
		if measure == "risk-difference" {
			column = "event"
		}
		h := hyp(t, computed(t, head+outcome("y", measure, two+"cluster = { icc = 0.1, size = 3 }\n")+hypothesis("H1", "y", "superior", "")+
			fromFile("A", "y", column+` = "v", group = "g", cluster = "c"`), "d.csv", file), "H1")
		m1, s1 := momentsOf(x)
		m2, s2 := momentsOf(y)
		means := hyp(t, computed(t, head+outcome("y", "mean-difference", two)+hypothesis("H1", "y", "superior", "")+
			entryOf("A", "y", fmt.Sprintf("groups.new = { n = 6, mean = %.17g, sd = %.17g }\ngroups.old = { n = 6, mean = %.17g, sd = %.17g }", m1, s1, m2, s2))), "H1")
		near(t, measure+" estimate", h.Estimate.V, means.Estimate.V, 1e-12)
		near(t, measure+" p", h.P.P, means.P.P, 1e-10)
		nearOpt(t, measure+" df", h.DF, means.DF.V, 1e-9)
		if h.Method != "welch" || h.N != 12 {
			t.Errorf("%s: %s of %g", measure, h.Method, h.N)
		}
	}
}

// A summary gets the design effect, and methods for individuals are refused.
func TestDesignEffect(t *testing.T) {
	summary := func(cluster, method string) string {
		return head + outcome("y", "mean-difference", two+cluster) + hypothesis("H1", "y", "superior", method) +
			entryOf("A", "y", "groups.new = { n = 60, mean = 5, sd = 2 }\ngroups.old = { n = 60, mean = 4, sd = 2 }")
	}
	h := hyp(t, computed(t, summary("cluster = { icc = 0.1, size = 11 }\n", "")), "H1")
	nearOpt(t, "se", h.SE, 2*math.Sqrt(2.0/30), 1e-12) // design effect 2
	file, _, _ := clustered(false)
	for _, more := range []string{"method = \"linear\"\nadjust = [\"x\"]\n"} {
		h = hyp(t, computed(t, head+outcome("y", "mean-difference", two+"cluster = { icc = 0.1, size = 3 }\n")+hypothesis("H1", "y", "superior", more)+
			fromFile("A", "y", `value = "v", group = "g", cluster = "c"`), "d.csv", withColumn(file)), "H1")
		if h.Reason == nil || h.Reason.Code != "S104" {
			t.Errorf("%s on clusters: %s %v", more, h.Method, h.Reason)
		}
	}
	for _, measure := range []string{"hazard-ratio", "restricted-mean-difference"} {
		h = hyp(t, computed(t, head+outcome("y", measure, two+"horizon = 5\ncluster = { icc = 0.1, size = 3 }\n"[btoi(measure == "hazard-ratio")*len("horizon = 5\n"):])+hypothesis("H1", "y", "superior", "")+
			fromFile("A", "y", `time = "weeks", event = "relapse", group = "arm", labels = { six_mp = "new", placebo = "old" }`), "d.csv", text(t, "leukaemia_6mp.csv")), "H1")
		if h.Reason == nil || h.Reason.Code != "S104" {
			t.Errorf("%s in clusters: %v", measure, h.Reason)
		}
	}
}

func btoi(b bool) int {
	if b {
		return 1
	}
	return 0
}

// withColumn adds a covariate to a file.
func withColumn(file string) string {
	lines := strings.Split(strings.TrimSpace(file), "\n")
	for i := range lines {
		if i == 0 {
			lines[i] += ",x"
		} else {
			lines[i] += fmt.Sprintf(",%d", i*i%7)
		}
	}
	return strings.Join(lines, "\n") + "\n"
}

// Pools and beliefs of cluster data take the analysis of the cluster means.
func TestClustersInAPool(t *testing.T) {
	file, x, y := clustered(true)
	entry := fromFile("A", "y", `event = "v", group = "g", cluster = "c"`)
	res := computed(t, head+outcome("y", "risk-difference", two+"cluster = { icc = 0.1, size = 3 }\n")+hypothesis("H1", "y", "superior", pooled1)+pooling("y", "common", "")+
		entry+strings.Replace(entry, "\"A\"", "\"B\"", 1), "d.csv", file)
	m1, s1 := momentsOf(x)
	m2, s2 := momentsOf(y)
	h := hyp(t, res, "H1")
	nearOpt(t, "estimate", h.Estimate, m1-m2, 1e-12)
	nearOpt(t, "se", h.SE, math.Sqrt((s1*s1+s2*s2)/6/2), 1e-12)
}

// Pairs in clusters are analysed by the means of the clusters' differences,
// and one sample by the means of its clusters.
func TestPairsInClusters(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 4))
	file := "c,a,b\n"
	var means, firsts []float64
	for c := range 7 {
		shift, sum, first := rng.NormFloat64(), 0.0, 0.0
		for range 4 {
			a, b := 5+shift+rng.NormFloat64(), 4+rng.NormFloat64()
			sum, first = sum+a-b, first+a
			file += fmt.Sprintf("c%d,%.17g,%.17g\n", c, a, b)
		}
		means, firsts = append(means, sum/4), append(firsts, first/4)
	}
	for _, c := range []struct {
		measure, keys, columns string
		x                      []float64
	}{{"paired-mean-difference", two, `first = "a", second = "b"`, means}, {"mean", "better = \"higher\"\nreference = 0\n", `value = "a"`, firsts}} {
		h := hyp(t, computed(t, head+outcome("y", c.measure, c.keys+"cluster = { icc = 0.1, size = 4 }\n")+hypothesis("H1", "y", "superior", "")+
			fromFile("A", "y", c.columns+`, cluster = "c"`), "d.csv", file), "H1")
		m, sd := momentsOf(c.x)
		nearOpt(t, c.measure, h.Estimate, m, 1e-12)
		nearOpt(t, c.measure+" se", h.SE, sd/math.Sqrt(7), 1e-10)
		nearOpt(t, c.measure+" df", h.DF, 6, 0)
	}
}
