package numeric

import (
	"crypto/sha256"
	"encoding/binary"
	"math"
	"math/bits"
	"math/rand/v2"

	"gonum.org/v1/gonum/mathext"
)

// Stream is a seeded random stream: the ChaCha8 generator of math/rand/v2
// under a key that is the SHA-256 of what the stream is for. Streams of
// different purposes, scenarios or replicates are unrelated, so any part of a
// simulation can be run anywhere and give the same numbers. A Stream is not
// safe for use by several goroutines at once.
type Stream struct{ src rand.ChaCha8 }

// NewStream makes the stream of one purpose, seed, scenario and replicate.
// The key is SHA-256 of "steelyard/"+purpose+"/1", a zero byte, the seed (8
// bytes, big-endian), the scenario, a zero byte, the replicate (8 bytes,
// big-endian).
func NewStream(purpose string, seed uint64, scenario string, replicate uint64) *Stream {
	s := new(Stream)
	s.Reset(purpose, seed, scenario, replicate)
	return s
}

// Reset makes s the stream NewStream would return.
func (s *Stream) Reset(purpose string, seed uint64, scenario string, replicate uint64) {
	b := make([]byte, 0, 96)
	b = append(b, "steelyard/"...)
	b = append(b, purpose...)
	b = append(b, "/1\x00"...)
	b = binary.BigEndian.AppendUint64(b, seed)
	b = append(b, scenario...)
	b = append(b, 0)
	b = binary.BigEndian.AppendUint64(b, replicate)
	s.src.Seed(sha256.Sum256(b))
}

// Uint64 is the next 64 bits.
func (s *Stream) Uint64() uint64 { return s.src.Uint64() }

// Uniform is (top 53 bits + 1/2)·2^-53: never 0 and never 1.
func (s *Stream) Uniform() float64 {
	return uniform(s.src.Uint64())
}

// uniform keeps the largest value below 1, where adding the half would round
// up to 1.
func uniform(bits uint64) float64 {
	return min((float64(bits>>11)+0.5)*0x1p-53, 1-0x1p-53)
}

// Normal is a standard normal value, the quantile of one Uniform.
func (s *Stream) Normal() float64 { return mathext.NormalQuantile(s.Uniform()) }

// Exponential is a standard exponential value, from one Uniform.
func (s *Stream) Exponential() float64 { return -math.Log(s.Uniform()) }

// IntN is uniform on 0..n-1 without bias (Lemire 2019, from memory). It panics
// unless n > 0.
func (s *Stream) IntN(n int) int {
	if n <= 0 {
		panic("numeric: IntN: n must be positive")
	}
	u := uint64(n)
	hi, lo := bits.Mul64(s.src.Uint64(), u)
	if lo < u {
		for lim := -u % u; lo < lim; {
			hi, lo = bits.Mul64(s.src.Uint64(), u)
		}
	}
	return int(hi)
}

// Gamma is a gamma value with shape a > 0 and scale 1 by the method of
// Marsaglia and Tsang (2000, from memory).
func (s *Stream) Gamma(a float64) float64 {
	boost := 1.0
	if a < 1 {
		boost = math.Pow(s.Uniform(), 1/a)
		a++
	}
	d := a - 1.0/3
	c := 1 / math.Sqrt(9*d)
	for {
		x := s.Normal()
		v := 1 + c*x
		if v <= 0 {
			continue
		}
		v = v * v * v
		u := s.Uniform()
		if math.Log(u) < 0.5*x*x+d-d*v+d*math.Log(v) {
			return boost * d * v
		}
	}
}

// ChiSquare is a chi-square value with nu > 0 degrees of freedom.
func (s *Stream) ChiSquare(nu float64) float64 { return 2 * s.Gamma(nu/2) }

// Choose reorders x so that its first k entries are a random selection of k
// of all (each set of k equally likely, in random order). Starting from the
// same x and stream it always chooses the same. It panics unless
// 0 <= k <= len(x).
func Choose[T any](s *Stream, x []T, k int) {
	if k < 0 || k > len(x) {
		panic("numeric: Choose: k outside the selection")
	}
	for i := range k {
		j := i + s.IntN(len(x)-i)
		x[i], x[j] = x[j], x[i]
	}
}

// Shuffle puts x in random order.
func Shuffle[T any](s *Stream, x []T) { Choose(s, x, max(len(x)-1, 0)) }
