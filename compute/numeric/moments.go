package numeric

import "math"

// Moments are the count, mean and central sums of a column, by two passes
// after subtracting the first value, compensated, in fixed blocks of 4096.
type Moments struct {
	N          float64
	Mean, SD   float64
	M2, M3, M4 float64 // central sums (not divided)
	Min, Max   float64
}

// MomentsOf computes the moments of a column in its own unit. SD has the
// divisor n-1 and is 0 when n < 2; an empty column gives the zero value, so
// callers ask N first. The values must be finite. Two-pass method with the
// correction for the rounded mean: Chan, Golub and LeVeque (1983, from
// memory).
//
// All work is done on values scaled by a power of two to a range near 1, so
// that fourth powers neither overflow nor vanish; M2 to M4 are scaled back at
// the end and may then be 0 or +Inf in extreme units.
func MomentsOf(x []float64) Moments {
	if len(x) == 0 {
		return Moments{}
	}
	n := float64(len(x))
	m := Moments{N: n, Min: x[0], Max: x[0]}
	for _, v := range x {
		m.Min = min(m.Min, v)
		m.Max = max(m.Max, v)
	}
	if m.Min == m.Max {
		m.Mean = x[0]
		return m
	}
	spread := min(m.Max-m.Min, math.MaxFloat64)
	_, exp := math.Frexp(spread)
	exp = max(exp, -1000)
	scale := math.Ldexp(1, -exp)
	if exp > 1022 {
		scale = math.Ldexp(1, -1022)
		exp = 1022
	}
	c := centralSums(x, scale)
	m.Mean = x[0] + math.Ldexp(c.delta, exp)
	if math.IsInf(m.Mean, 0) { // the difference overflowed, the mean did not
		m.Mean = math.Ldexp(x[0]*scale+c.delta, exp)
	}
	m.Mean = min(max(m.Mean, m.Min), m.Max)
	m.SD = math.Ldexp(math.Sqrt(c.m2/(n-1)), exp)
	m.M2 = math.Ldexp(c.m2, 2*exp)
	m.M3 = math.Ldexp(c.m3, 3*exp)
	m.M4 = math.Ldexp(c.m4, 4*exp)
	return m
}

type central struct{ delta, m2, m3, m4 float64 }

// centralSums returns the mean's distance from the first value and the
// central sums, all of scale*x.
func centralSums(x []float64, scale float64) central {
	n := float64(len(x))
	first := x[0] * scale
	var total Acc
	for rest := x; len(rest) > 0; {
		k := min(len(rest), blockLen)
		var part Acc
		for _, v := range rest[:k] {
			part.Add(v*scale - first)
		}
		total.Merge(part)
		rest = rest[k:]
	}
	delta := total.Value() / n
	var t1, t2, t3, t4 Acc
	for rest := x; len(rest) > 0; {
		k := min(len(rest), blockLen)
		var p1, p2, p3, p4 Acc
		for _, v := range rest[:k] {
			d := (v*scale - first) - delta
			d2 := d * d
			p1.Add(d)
			p2.Add(d2)
			p3.Add(d2 * d)
			p4.Add(d2 * d2)
		}
		t1.Merge(p1)
		t2.Merge(p2)
		t3.Merge(p3)
		t4.Merge(p4)
		rest = rest[k:]
	}
	// The mean was rounded; move the sums to the true mean, e away.
	e := t1.Value() / n
	s2, s3, s4 := t2.Value(), t3.Value(), t4.Value()
	return central{
		delta: delta + e,
		m2:    max(s2-n*e*e, 0),
		m3:    s3 - 3*e*s2 + 2*n*e*e*e,
		m4:    max(s4-4*e*s3+6*e*e*s2-3*n*e*e*e*e, 0),
	}
}
