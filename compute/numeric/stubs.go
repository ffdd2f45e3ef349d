// Package numeric holds the numerical tools that the methods share: stable
// sums, bracketed roots, golden section, adaptive quadrature, seeded random
// streams. It knows no distribution and no record.
package numeric

// Moments are the count, mean and central sums of a column, by two passes
// after subtracting the first value, compensated, in fixed blocks of 4096.
type Moments struct {
	N          float64
	Mean, SD   float64
	M2, M3, M4 float64 // central sums (not divided)
	Min, Max   float64
}

// MomentsOf computes the moments of a column.
func MomentsOf(x []float64) Moments { panic("numeric: not built") }

// Sum is the compensated sum in fixed blocks.
func Sum(x []float64) float64 { panic("numeric: not built") }

// Root finds x in [lo, hi] with f(x) = 0 by Brent's method to a relative
// tolerance; f(lo) and f(hi) must differ in sign (ok false otherwise).
func Root(f func(float64) float64, lo, hi, tol float64) (x float64, ok bool) {
	panic("numeric: not built")
}

// Golden finds the minimum of a unimodal f on [lo, hi].
func Golden(f func(float64) float64, lo, hi, tol float64) float64 { panic("numeric: not built") }

// Integrate adds 20-point Gauss–Legendre panels between the breakpoints,
// halving until the change is below rel of the total.
func Integrate(f func(float64) float64, breaks []float64, rel float64) float64 {
	panic("numeric: not built")
}

// Stream is a seeded random stream: ChaCha8 keyed as methods.md I says.
type Stream struct{}

// NewStream makes the stream of one purpose, seed, scenario and replicate.
func NewStream(purpose string, seed uint64, scenario string, replicate uint64) *Stream {
	panic("numeric: not built")
}

// Uniform is (top 53 bits + 1/2)·2^-53.
func (s *Stream) Uniform() float64 { panic("numeric: not built") }

// IntN is uniform on 0..n-1 without bias.
func (s *Stream) IntN(n int) int { panic("numeric: not built") }

// KthSmallest returns the k-th smallest (from 1) of x, reordering x.
func KthSmallest(x []float64, k int) float64 { panic("numeric: not built") }
