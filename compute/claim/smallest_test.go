package claim

import (
	"math"
	"math/rand/v2"
	"steelyard/compute/effect"
	"steelyard/compute/result"
	"steelyard/protocol/record"
	"testing"
)

// At its smallest margin a claim stands on the edge: with a little more it is
// established, with a little less it is not.
func TestSmallestMarginsFlip(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 2))
	checked := map[string]int{}
	for _, s := range scales {
		for _, word := range []string{"minimum-effect", "noninferior", "equivalent", "benefit-too-small"} {
			for _, better := range []string{"higher", "lower"} {
				for range 40 {
					q := at(word, better, s.scale, s.null, s.margin)
					inf := wald(s.scale, effect.To(s.scale, s.null)+0.3*rng.NormFloat64(), 0.15*math.Exp(rng.NormFloat64()/2))
					a := Assess(inf, q)
					zero := 0.0
					if q.Ratio() {
						zero = 1
					}
					if !a.SmallestMargin.OK || a.SmallestMargin.V <= zero {
						continue
					}
					m := a.SmallestMargin.V
					tiny := 1e-7 * (m - zero)
					verdict := func(margin float64) bool {
						v := at(word, better, s.scale, s.null, margin)
						j := Judge(inf, v)
						return j.Verdict(j.P.P, j.Against.P, v.Alpha, false) == result.Established
					}
					wider := true
					if word == "minimum-effect" {
						wider = false
					}
					if verdict(m+tiny) != wider || verdict(m-tiny) == wider {
						t.Errorf("%s %s %s: no step at the margin %g", s.scale, word, better, m)
					}
					checked[word]++
				}
			}
		}
	}
	for word, n := range checked {
		if n < 20 {
			t.Errorf("%s: only %d margins", word, n)
		}
	}
	if len(checked) != 4 {
		t.Errorf("checked %v", checked)
	}
}

// A region given as two limits widens k-fold on the analysis scale.
func TestSmallestRegionOfAPair(t *testing.T) {
	q := at("equivalent", "neither", record.Identity, 0, 1)
	q.Low, q.High = -0.5, 1
	inf := wald(record.Identity, 0.2, 0.3)
	a := Assess(inf, q)
	if a.SmallestMargin.OK || !a.SmallestLow.OK || !a.SmallestLimit.OK {
		t.Fatalf("%+v", a)
	}
	for _, c := range []struct {
		k    float64
		want result.Verdict
	}{{1 + 1e-8, result.Established}, {1 - 1e-8, result.Open}} {
		v := q
		v.Low, v.High = c.k*a.SmallestLow.V, c.k*a.SmallestLimit.V
		j := Judge(inf, v)
		if got := j.Verdict(j.P.P, j.Against.P, v.Alpha, false); got != c.want {
			t.Errorf("%g times the smallest region: %s", c.k, got)
		}
	}
}

// The smallest limits of below and above are the limits themselves, and a
// limit that does not exist is no margin.
func TestSmallestLimits(t *testing.T) {
	inf := wald(record.Log, 0.1, 0.2)
	for _, word := range []string{"below", "above"} {
		q := at(word, "neither", record.Log, 1, 2)
		q.Limit = 1
		a := Assess(inf, q)
		want := a.High
		if word == "above" {
			want = a.Low
		}
		if a.SmallestLimit.V != want || a.SmallestMargin.OK {
			t.Errorf("%s: %+v", word, a)
		}
	}
	none := wald(record.Log, math.Inf(1), 1)
	if a := Assess(none, at("noninferior", "lower", record.Log, 1, 2)); a.SmallestLimit.OK || a.SmallestMargin.OK {
		t.Errorf("a margin without a limit: %+v", a)
	}
}
