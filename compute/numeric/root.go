package numeric

import "math"

const eps = 0x1p-52

// Root finds x in [lo, hi] with f(x) = 0 by Brent's method (1973, from
// memory) until the bracket is below tol·|x| (never finer than the spacing of
// the numbers). f(lo) and f(hi) must differ in sign, or one of them be zero;
// otherwise, or when f returns NaN, ok is false. f may be infinite on part of
// the range: it is bisected there.
func Root(f func(float64) float64, lo, hi, tol float64) (x float64, ok bool) {
	return brent(f, lo, hi, f(lo), f(hi), tol, 0)
}

// brent needs the values at the ends; the bracket is narrowed to
// rel·|x| + abs.
func brent(f func(float64) float64, a, b, fa, fb, rel, abs float64) (float64, bool) {
	switch {
	case math.IsNaN(fa) || math.IsNaN(fb) || math.IsInf(a, 0) || math.IsInf(b, 0):
		return math.Max(math.Min(a, b), -math.MaxFloat64), false
	case fa == 0:
		return a, true
	case fb == 0:
		return b, true
	case (fa > 0) == (fb > 0):
		return a, false
	}
	c, fc := a, fa
	d := b - a
	e := d
	for range 400 {
		if (fb > 0) == (fc > 0) {
			c, fc = a, fa
			d = b - a
			e = d
		}
		if math.Abs(fc) < math.Abs(fb) {
			a, b, c = b, c, b
			fa, fb, fc = fb, fc, fb
		}
		tol := 2*eps*math.Abs(b) + 0.5*(rel*math.Abs(b)+abs) + 5e-324
		half := c/2 - b/2
		if math.Abs(half) <= tol || fb == 0 {
			return b, true
		}
		d, e = brentStep(a, b, c, fa, fb, fc, d, e, tol, half)
		a, fa = b, fb
		switch {
		case math.Abs(d) > tol:
			b += d
		case half > 0:
			b += tol
		default:
			b -= tol
		}
		fb = f(b)
		if math.IsNaN(fb) {
			return a, false
		}
	}
	return b, true
}

// brentStep chooses between interpolation and bisection.
func brentStep(a, b, c, fa, fb, fc, d, e, tol, half float64) (float64, float64) {
	bad := math.Abs(e) < tol || math.Abs(fa) <= math.Abs(fb) ||
		math.IsInf(fa, 0) || math.IsInf(fb, 0) || math.IsInf(fc, 0)
	if bad {
		return half, half
	}
	var p, q float64
	s := fb / fa
	if a == c {
		p = 2 * half * s
		q = 1 - s
	} else {
		u, r := fa/fc, fb/fc
		p = s * (2*half*u*(u-r) - (b-a)*(r-1))
		q = (u - 1) * (r - 1) * (s - 1)
	}
	if p > 0 {
		q = -q
	}
	p = math.Abs(p)
	if 2*p < math.Min(3*half*q-math.Abs(tol*q), math.Abs(e*q)) {
		return p / q, d
	}
	return half, half
}

// Invert finds c in [lo, hi] with h(c) = 0 for a monotone, nearly linear h,
// rising or falling, such as a test statistic on the normal-deviate scale:
// h(c) = Φ⁻¹(p(c)) − Φ⁻¹(a), with c in the coordinate in which h is nearly
// linear. The search starts at start and walks toward the zero in steps that
// begin at step (about one standard error, > 0) and at least double; then
// Brent's method takes over, until c is known to 1e-12 of the distance over
// which h changes by one.
//
// lo and hi may be infinite, and h may be ±Inf anywhere; only its sign is
// used there. When h keeps one sign on the whole range ok is false and c is
// the end (lo or hi) toward which h falls to zero; when h is flat or infinite
// around start, so that no direction can be told, both are walked. NaN from h,
// or a start that is not finite, gives start and false.
func Invert(h func(c float64) float64, start, step, lo, hi float64) (c float64, ok bool) {
	start = min(max(start, lo), hi)
	if math.IsInf(start, 0) || math.IsNaN(start) || !(step > 0) || math.IsInf(step, 0) {
		return start, false
	}
	h0 := h(start)
	if math.IsNaN(h0) {
		return start, false
	}
	if h0 == 0 {
		return start, true
	}
	up := walker{h: h, sign: h0 > 0, step: step, dir: 1, end: hi, c0: start, h0: h0}
	down := walker{h: h, sign: h0 > 0, step: step, dir: -1, end: lo, c0: start, h0: h0}
	for range 4400 {
		if !up.done && !down.closer() {
			if c, ok, stop := up.walk(); stop {
				return c, ok
			}
		}
		if !down.done && !up.closer() {
			if c, ok, stop := down.walk(); stop {
				return c, ok
			}
		}
		if up.done && (down.done || up.closer()) {
			return up.end, false
		}
		if down.done && (up.done || down.closer()) {
			return down.end, false
		}
	}
	return start, false
}

// walker walks from the start in one direction.
type walker struct {
	h      func(float64) float64
	sign   bool // h > 0 at the start
	step   float64
	dir    float64
	end    float64
	c0, h0 float64 // the last point
	near   bool    // |h| has fallen on the way
	done   bool    // the end was reached
}

// closer says that |h| falls in this direction.
func (w *walker) closer() bool { return w.near }

// walk takes one step; stop says that the search is over.
func (w *walker) walk() (c float64, ok, stop bool) {
	c1 := w.c0 + w.dir*w.step
	if w.dir*(c1-w.end) >= 0 {
		c1 = w.end
	}
	if math.IsInf(c1, 0) || math.Abs(c1) > 1e300 {
		w.done = true
		return 0, false, false
	}
	if c1 == w.c0 && c1 != w.end { // the step is below the spacing of numbers
		w.step *= 2
		return 0, false, false
	}
	h1 := w.h(c1)
	if math.IsNaN(h1) {
		return w.c0, false, true
	}
	if h1 == 0 {
		return c1, true, true
	}
	if (h1 > 0) != w.sign {
		scale := math.Abs(c1-w.c0) / math.Abs(h1-w.h0)
		if math.IsNaN(scale) || scale == 0 || scale > w.step {
			scale = w.step
		}
		c, ok = brent(w.h, w.c0, c1, w.h0, h1, 0, 1e-12*scale)
		return c, ok, true
	}
	if math.Abs(h1) < math.Abs(w.h0) {
		w.near = true
	}
	grow := 2.0
	if w.near { // aim a little beyond the zero of the straight line
		if aim := 1.1 * h1 / (w.h0 - h1); aim > 2 {
			grow = min(aim, 16)
		}
	}
	w.done = c1 == w.end
	w.c0, w.h0 = c1, h1
	w.step *= grow
	return 0, false, false
}

// Golden finds the minimum of a unimodal f on [lo, hi] by golden section
// (Kiefer 1953, from memory), until the bracket is below tol times its first
// width. The position of a smooth minimum is never known better than to about
// 1e-8 relative.
func Golden(f func(float64) float64, lo, hi, tol float64) float64 {
	const g = 0.6180339887498949
	if !(hi > lo) {
		return lo
	}
	stop := tol * (hi - lo)
	x1, x2 := hi-g*(hi-lo), lo+g*(hi-lo)
	f1, f2 := f(x1), f(x2)
	for hi-lo > stop && x1 < x2 {
		if f1 <= f2 {
			hi, x2, f2 = x2, x1, f1
			x1 = hi - g*(hi-lo)
			f1 = f(x1)
		} else {
			lo, x1, f1 = x1, x2, f2
			x2 = lo + g*(hi-lo)
			f2 = f(x2)
		}
	}
	if f1 <= f2 {
		return x1
	}
	return x2
}
