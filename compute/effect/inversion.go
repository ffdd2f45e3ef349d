package effect

import "steelyard/protocol/record"

// Inversion makes limits from a test, for methods of other packages: Test at
// any c, the measure's scale and range, an estimate to start from (inside or
// at the end of the range), and about one standard error on the scale (0: not
// known). Monotone tests have one crossing a side.
type Inversion struct {
	Test        func(c float64) Test
	Scale       record.Scale
	Low, High   float64
	Start, Step float64
	Monotone    bool
}

// Limits is the interval at one-sided error a; a limit that does not exist is
// the end of the range.
func (v Inversion) Limits(a float64) (low, high float64) { return inversion(v).limits(a) }
