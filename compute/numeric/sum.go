package numeric

import "math"

// twoSum returns a+b rounded and the exact rounding error (Knuth 1969).
func twoSum(a, b float64) (s, e float64) {
	s = a + b
	t := s - a
	return s, (a - (s - t)) + (b - t)
}

// Acc is a compensated accumulator; its zero value is an empty sum.
type Acc struct{ hi, lo float64 }

// Add adds x. It is exact to about twice the working precision as long as
// nothing overflows.
func (a *Acc) Add(x float64) {
	s, e := twoSum(a.hi, x)
	a.hi = s
	a.lo += e
}

// Merge adds what b holds.
func (a *Acc) Merge(b Acc) {
	a.Add(b.hi)
	a.lo += b.lo
}

// Value is the sum.
func (a *Acc) Value() float64 {
	if math.IsInf(a.hi, 0) {
		return a.hi
	}
	return a.hi + a.lo
}

// Sum is the compensated sum of x in fixed blocks; 0 when x is empty.
func Sum(x []float64) float64 {
	var total Acc
	for len(x) > 0 {
		n := min(len(x), blockLen)
		var part Acc
		for _, v := range x[:n] {
			part.Add(v)
		}
		total.Merge(part)
		x = x[n:]
	}
	return total.Value()
}
