package numeric

import (
	"math"
	"sort"
	"testing"
)

func TestRoot(t *testing.T) {
	inf := math.Inf(1)
	for name, c := range map[string]struct {
		f      func(float64) float64
		lo, hi float64
		want   float64
		ok     bool
	}{
		"cos":        {math.Cos, 1, 2, math.Pi / 2, true},
		"cube":       {func(x float64) float64 { return x*x*x - 2 }, 0, 10, math.Cbrt(2), true},
		"flat":       {func(x float64) float64 { return math.Pow(x-0.3, 9) }, 0, 1, 0.3, true},
		"at the end": {func(x float64) float64 { return x }, 0, 1, 0, true},
		"infinite": {func(x float64) float64 {
			if x < 3 {
				return -inf
			}
			return x - 3.5
		}, 0, 1e6, 3.5, true},
		"step": {func(x float64) float64 {
			if x < 0.7 {
				return -1
			}
			return 1
		}, 0, 1, 0.7, true},
		"same sign": {func(x float64) float64 { return x*x + 1 }, -1, 1, 0, false},
		"nan":       {func(float64) float64 { return math.NaN() }, -1, 1, 0, false},
	} {
		tol := 1e-13
		if name == "flat" {
			tol = 1e-6
		}
		got, ok := Root(c.f, c.lo, c.hi, 1e-14)
		if ok != c.ok || ok && math.Abs(got-c.want) > tol*max(1, math.Abs(c.want)) {
			t.Errorf("%s: %v %v, want %v %v", name, got, ok, c.want, c.ok)
		}
	}
}

func TestInvert(t *testing.T) {
	inf := math.Inf(1)
	for name, c := range map[string]struct {
		h                   func(float64) float64
		start, step, lo, hi float64
		want                float64
		ok                  bool
	}{
		"line up":       {func(c float64) float64 { return c - 5 }, 0, 1, -inf, inf, 5, true},
		"line down":     {func(c float64) float64 { return 3 - 2*c }, 10, 0.1, -inf, inf, 1.5, true},
		"far":           {func(c float64) float64 { return c - 1e12 }, 0, 1, -inf, inf, 1e12, true},
		"narrow":        {func(c float64) float64 { return (c - 1e6) / 1e-6 }, 1e6 + 1e-5, 1e-6, -inf, inf, 1e6, true},
		"bent":          {func(c float64) float64 { return math.Sinh(c) - 100 }, 0, 0.5, -inf, inf, math.Asinh(100), true},
		"never up":      {func(c float64) float64 { return -1 - math.Exp(-c) }, 0, 1, -inf, inf, inf, false},
		"bounded":       {func(c float64) float64 { return c - 5 }, 0, 1, -1, 1, 1, false},
		"bounded below": {func(c float64) float64 { return 5 - c }, 7, 1, 6, 20, 6, false},
		"at start":      {func(c float64) float64 { return c }, 0, 1, -1, 1, 0, true},
		"at the bound":  {func(c float64) float64 { return c - 1 }, 0, 0.3, -1, 1, 1, true},
		"infinite side": {func(c float64) float64 {
			if c <= 0 {
				return -inf
			}
			return math.Log(c)
		}, 0, 0.25, 0, 10, 1, true},
		"infinite at both": {func(c float64) float64 {
			switch {
			case c < -4:
				return inf
			case c > 4:
				return -inf
			}
			return -c - 3
		}, 20, 1, -100, 100, -3, true},
		"nan": {func(float64) float64 { return math.NaN() }, 2, 1, 0, 10, 2, false},
	} {
		got, ok := Invert(c.h, c.start, c.step, c.lo, c.hi)
		if ok != c.ok || !(got == c.want || math.Abs(got-c.want) <= 1e-11*max(1e-3, min(c.step*10, math.Abs(c.want)))+4*eps*math.Abs(c.want)) {
			t.Errorf("%s: %v %v, want %v %v", name, got, ok, c.want, c.ok)
		}
	}
}

// A straight line must not cost many calls.
func TestInvertIsFrugal(t *testing.T) {
	calls := 0
	Invert(func(c float64) float64 { calls++; return 2.1 - c + 0.01*c*c }, 0, 1, math.Inf(-1), math.Inf(1))
	if calls > 10 {
		t.Errorf("%d calls", calls)
	}
}

func TestGolden(t *testing.T) {
	got := Golden(func(x float64) float64 { return (x - 1.25) * (x - 1.25) }, -3, 10, 1e-9)
	if math.Abs(got-1.25) > 1e-7 {
		t.Errorf("minimum at %v", got)
	}
	if got := Golden(func(x float64) float64 { return x }, 2, 5, 1e-9); math.Abs(got-2) > 1e-7 {
		t.Errorf("minimum at the end: %v", got)
	}
}

func TestIntegrate(t *testing.T) {
	for name, c := range map[string]struct {
		f      func(float64) float64
		breaks []float64
		want   float64
	}{
		"exp":       {math.Exp, []float64{0, 1}, math.E - 1},
		"root":      {math.Sqrt, []float64{0, 1}, 2.0 / 3},
		"peak":      {func(x float64) float64 { return math.Exp(-x * x * 5e7) }, []float64{-10, -0.1, 0.1, 10}, math.Sqrt(math.Pi / 5e7)},
		"oscillate": {func(x float64) float64 { return math.Cos(100 * x) }, []float64{0, 1}, math.Sin(100) / 100},
		"none":      {math.Exp, []float64{1}, 0},
		"repeated":  {math.Exp, []float64{0, 0, 1, 1}, math.E - 1},
	} {
		if got := Integrate(c.f, c.breaks, 1e-13); math.Abs(got-c.want) > 1e-11*math.Abs(c.want) {
			t.Errorf("%s: %v, want %v", name, got, c.want)
		}
	}
}

// Noise above the wanted accuracy must not multiply the work without end.
func TestIntegrateGivesUpOnNoise(t *testing.T) {
	calls := 0
	s := NewStream("test", 6, "noise", 0)
	got := Integrate(func(x float64) float64 { calls++; return 1 + 1e-6*s.Normal() },
		[]float64{0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1}, 1e-14)
	if calls > 250000 || math.Abs(got-1) > 1e-7 {
		t.Errorf("%d calls, integral %v", calls, got)
	}
}

// A rule of n points is exact for polynomials to degree 2n−1; the moments of
// the rules are known in closed form.
func TestQuadratureRules(t *testing.T) {
	moment := func(r []Node, d int) float64 {
		var s Acc
		for _, p := range r {
			s.Add(p.W * math.Pow(p.X, float64(d)))
		}
		return s.Value()
	}
	for name, c := range map[string]struct {
		rule []Node
		n    int
	}{"legendre20": {Legendre20(), 20}, "legendre64": {Legendre64(), 64}} {
		if len(c.rule) != c.n || !sort.SliceIsSorted(c.rule, func(i, j int) bool { return c.rule[i].X < c.rule[j].X }) {
			t.Errorf("%s: %d nodes or out of order", name, len(c.rule))
		}
		for d := 0; d < 2*c.n; d += 2 {
			want := 2 / float64(d+1)
			if got := moment(c.rule, d); math.Abs(got/want-1) > 2e-14 || math.Abs(moment(c.rule, d+1)) > 1e-14 {
				t.Errorf("%s: moment %d is %v, want %v", name, d, got, want)
			}
		}
	}
	want := 1.0 // (d−1)!!
	for d := 0; d < 64; d += 2 {
		if d > 0 {
			want *= float64(d - 1)
		}
		if got := moment(Hermite32(), d); math.Abs(got/want-1) > 1e-12 {
			t.Errorf("hermite32: moment %d is %v, want %v", d, got, want)
		}
	}
}

// Both integrands have a closed form; the second has a wave that single
// halvings can miss.
func TestTrapezoid(t *testing.T) {
	lattice := func(f func(float64) float64) func(first, step float64) float64 {
		return func(first, step float64) float64 {
			s := f(first)
			for k := 1.0; k < 5000; k++ {
				s += f(first+k*step) + f(first-k*step)
			}
			return s
		}
	}
	for name, c := range map[string]struct {
		f     func(float64) float64
		width float64
		want  float64
	}{
		"normal":  {func(x float64) float64 { return math.Exp(-x * x / 2) }, 1.3, math.Sqrt(2 * math.Pi)},
		"shifted": {func(x float64) float64 { return math.Exp(-(x - 0.3) * (x - 0.3) / 2) }, 2, math.Sqrt(2 * math.Pi)},
		"sech":    {func(x float64) float64 { return 1 / math.Cosh(x-0.37) }, 4, math.Pi},
	} {
		got, ok := Trapezoid(lattice(c.f), c.width, 4)
		if !ok || math.Abs(got/c.want-1) > 1e-13 {
			t.Errorf("%s: %v %v, want %v", name, got, ok, c.want)
		}
	}
	spike := func(x float64) float64 { return math.Exp(-x * x * 1e8) }
	if _, ok := Trapezoid(lattice(spike), 1, 3); ok {
		t.Error("a spike between the points is not noticed")
	}
}
