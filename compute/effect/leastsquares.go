package effect

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// columnKind says how a column of the design makes its numbers.
type columnKind uint8

const (
	intercept columnKind = iota
	numbers              // (value - mean)/size
	factor               // 1 where code = level
	groups               // 1 in the first group, less mean
)

// column is one column of a design matrix, made when it is needed.
type column struct {
	name       string
	kind       columnKind
	values     []float64
	mean, size float64
	code       []int32
	level      int32
	group      []uint8
}

// fill writes rows from … from+len(dst)-1 of the column.
func (c *column) fill(dst []float64, from int) {
	switch c.kind {
	case intercept:
		for i := range dst {
			dst[i] = 1
		}
	case numbers:
		for i, v := range c.values[from : from+len(dst)] {
			dst[i] = (v - c.mean) / c.size
		}
	case factor:
		for i, code := range c.code[from : from+len(dst)] {
			dst[i] = 0
			if code == c.level {
				dst[i] = 1
			}
		}
	case groups:
		for i, g := range c.group[from : from+len(dst)] {
			dst[i] = -c.mean
			if g == 0 {
				dst[i] = 1 - c.mean
			}
		}
	}
}

// blockRows is how many rows are reduced at a time.
const blockRows = 4096

// triangle is the least-squares problem reduced to R b = z.
type triangle struct {
	r [][]float64 // r[j][k], row j, k >= j
	z []float64
}

// leastSquares reduces the design by Householder reflections, block of rows
// by block: each block is stacked under the R so far, whose zeros below the
// diagonal stay zeros, so that a column costs its block and one row (Golub
// and Van Loan, Matrix Computations, block and structured QR; from memory).
// Memory is one block; time 2 n p^2. It is one loop nest because it is the
// kernel.
func leastSquares(y []float64, cols []column) triangle {
	p := len(cols)
	t := triangle{r: make([][]float64, p), z: make([]float64, p)}
	for j := range t.r {
		t.r[j] = make([]float64, p)
	}
	rows := min(blockRows, len(y))
	block := make([][]float64, p+1)
	for j := range block {
		block[j] = make([]float64, rows)
	}
	for from := 0; from < len(y); from += rows {
		m := min(rows, len(y)-from)
		for j := range cols {
			cols[j].fill(block[j][:m], from)
		}
		copy(block[p][:m], y[from:from+m])
		for k := range cols {
			v := block[k][:m]
			norm := hypotOf(t.r[k][k], v)
			if norm == 0 {
				continue
			}
			alpha := -math.Copysign(norm, t.r[k][k])
			v0 := t.r[k][k] - alpha
			t.r[k][k] = alpha
			// H = I - u u'/(v0 * -alpha) with u = (v0, v).
			scale := 1 / (v0 * -alpha)
			for j := k + 1; j <= p; j++ {
				b := block[j][:m]
				top := &t.z[k]
				if j < p {
					top = &t.r[k][j]
				}
				f := (v0**top + floats.Dot(v, b)) * scale
				*top -= f * v0
				floats.AddScaled(b, -f, v)
			}
		}
	}
	return t
}

// hypotOf is the length of (a, v). The columns are of size about 1, so that
// squares neither overflow nor vanish.
func hypotOf(a float64, v []float64) float64 {
	return math.Sqrt(a*a + floats.Dot(v, v))
}

// singular is the first column whose own part is below 1e-10 of the largest,
// or -1.
func (t triangle) singular() int {
	top := 0.0
	for j := range t.r {
		top = max(top, math.Abs(t.r[j][j]))
	}
	for j := range t.r {
		if !(math.Abs(t.r[j][j]) >= 1e-10*top) {
			return j
		}
	}
	return -1
}

// residuals of every row, and the HC3 variance of the last coefficient: with
// v = R'^-1 x the leverage is |v|^2 and the row's weight in the coefficient
// v_p/R_pp. ok is false where a row of full leverage has weight.
func (t triangle) residuals(y []float64, cols []column) (e []float64, hc3 float64, ok bool) {
	p := len(cols)
	e = make([]float64, len(y))
	v := make([]float64, p)
	rows := min(blockRows, len(y))
	block := make([][]float64, p)
	for j := range block {
		block[j] = make([]float64, rows)
	}
	ok = true
	for from := 0; from < len(y); from += rows {
		m := min(rows, len(y)-from)
		for j := range cols {
			cols[j].fill(block[j][:m], from)
		}
		part := 0.0
		for i := range m {
			h, fitted := 0.0, 0.0
			for j := range p {
				s := block[j][i]
				for k := range j {
					s -= t.r[k][j] * v[k]
				}
				v[j] = s / t.r[j][j]
				h += v[j] * v[j]
				fitted += v[j] * t.z[j] // x'b = (R'v)'R^-1 z
			}
			r := y[from+i] - fitted
			e[from+i] = r
			weight := v[p-1] / t.r[p-1][p-1]
			switch free := 1 - h; {
			case free > 1e-10:
				part += weight * weight * r * r / (free * free)
			case math.Abs(weight*t.r[p-1][p-1]) > 1e-7:
				ok = false
			}
		}
		hc3 += part
	}
	return e, hc3, ok
}
