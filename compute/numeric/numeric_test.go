package numeric

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math"
	"math/big"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"testing"
)

const referenceDir = "../../testdata/reference"

// column reads the named column of a file of testdata/reference/data.
func column(t *testing.T, file string) []float64 {
	t.Helper()
	f, err := os.Open(filepath.Join(referenceDir, "data", file))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []float64
	for _, r := range rows[1:] {
		v, err := strconv.ParseFloat(r[len(r)-1], 64)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, v)
	}
	return out
}

func repeat(first float64, n int, pair ...float64) []float64 {
	x := []float64{first}
	for range n {
		x = append(x, pair...)
	}
	return x
}

// The certified values of the NIST Statistical Reference Datasets, univariate
// summary statistics, as testdata/reference/published.json holds them; NumAcc2
// and NumAcc4 from memory. Where the decimal data are not exact in binary
// (NumAcc3, NumAcc4, Mavro) the standard deviation can only be as good as the
// stored numbers; for those the exact value of the stored numbers is checked
// in TestMomentsAgainstExactArithmetic.
func TestMomentsCertified(t *testing.T) {
	for _, c := range []struct {
		id       string
		x        []float64
		mean, sd float64 // when id is not in published.json
		tol      float64 // of the standard deviation, relative
	}{
		{"nist-lew", column(t, "nist_lew.csv"), 0, 0, 4e-15},
		{"nist-mavro", column(t, "nist_mavro.csv"), 0, 0, 1e-12},
		{"nist-pidigits", column(t, "nist_pidigits.csv"), 0, 0, 4e-15},
		{"nist-numacc1", []float64{10000001, 10000003, 10000002}, 0, 0, 1e-16},
		{"nist-numacc2", repeat(1.2, 500, 1.1, 1.3), 1.2, 0.1, 2e-15},
		{"nist-numacc3", repeat(1000000.2, 500, 1000000.1, 1000000.3), 0, 0, 1e-9},
		{"nist-numacc4", repeat(10000000.2, 500, 10000000.1, 10000000.3), 10000000.2, 0.1, 1e-8},
	} {
		want := map[string]float64{"mean": c.mean, "sd": c.sd}
		if c.mean == 0 {
			want = published(t, c.id)
		}
		m := MomentsOf(c.x)
		if e := math.Abs(m.Mean/want["mean"] - 1); e > 3e-16 {
			t.Errorf("%s: mean %v, want %v", c.id, m.Mean, want["mean"])
		}
		if e := math.Abs(m.SD/want["sd"] - 1); e > c.tol {
			t.Errorf("%s: sd %v, want %v, off by %.2g", c.id, m.SD, want["sd"], e)
		}
	}
}

func published(t *testing.T, id string) map[string]float64 {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(referenceDir, "published.json"))
	if err != nil {
		t.Fatal(err)
	}
	var rows []struct {
		ID       string
		Expected map[string]any
	}
	if err := json.Unmarshal(text, &rows); err != nil {
		t.Fatal(err)
	}
	for _, r := range rows {
		if r.ID == id {
			out := map[string]float64{}
			for k, v := range r.Expected {
				out[k], _ = v.(float64)
			}
			return out
		}
	}
	t.Fatalf("published.json has no row %q", id)
	return nil
}

// exactMoments works in rational numbers.
func exactMoments(x []float64) (mean, m2, m3, m4 float64) {
	n := new(big.Rat).SetInt64(int64(len(x)))
	sum := new(big.Rat)
	for _, v := range x {
		sum.Add(sum, new(big.Rat).SetFloat64(v))
	}
	mu := new(big.Rat).Quo(sum, n)
	var s [5]*big.Rat
	for i := range s {
		s[i] = new(big.Rat)
	}
	for _, v := range x {
		d := new(big.Rat).Sub(new(big.Rat).SetFloat64(v), mu)
		p := new(big.Rat).Set(d)
		for i := 2; i <= 4; i++ {
			p.Mul(p, d)
			s[i].Add(s[i], p)
		}
	}
	f := func(r *big.Rat) float64 { v, _ := r.Float64(); return v }
	return f(mu), f(s[2]), f(s[3]), f(s[4])
}

func TestMomentsAgainstExactArithmetic(t *testing.T) {
	s := NewStream("test", 1, "moments", 0)
	noisy := make([]float64, 9000)
	for i := range noisy {
		noisy[i] = 1e9 + 1e-3*s.Normal()
	}
	for name, x := range map[string][]float64{
		"numacc3": repeat(1000000.2, 500, 1000000.1, 1000000.3),
		"numacc4": repeat(10000000.2, 500, 10000000.1, 10000000.3),
		"mavro":   column(t, "nist_mavro.csv"),
		"noisy":   noisy,
		"skewed":  {1, 1, 1, 1, 1e6},
		"large":   {1e200, 3e200, -2e200},
		"tiny":    {1e-200, 3e-200, 7e-200},
	} {
		m := MomentsOf(x)
		mean, m2, m3, m4 := exactMoments(x)
		rel := func(what string, got, want, tol float64) {
			if math.Abs(got-want) > tol*math.Abs(want) {
				t.Errorf("%s: %s %v, want %v", name, what, got, want)
			}
		}
		rel("mean", m.Mean, mean, 3e-16)
		if !math.IsInf(m2, 0) && m2 != 0 {
			rel("M2", m.M2, m2, 1e-14)
			rel("SD", m.SD, math.Sqrt(m2/(m.N-1)), 1e-14)
		}
		if name != "large" && name != "tiny" {
			rel("M4", m.M4, m4, 1e-13)
			if math.Abs(m.M3-m3) > 1e-13*math.Pow(m4, 0.75) {
				t.Errorf("%s: M3 %v, want %v", name, m.M3, m3)
			}
		}
		if math.IsNaN(m.Mean + m.SD) {
			t.Errorf("%s: NaN", name)
		}
	}
}

func TestMomentsOfFewValues(t *testing.T) {
	for name, c := range map[string]struct {
		x    []float64
		want Moments
	}{
		"none":     {nil, Moments{}},
		"one":      {[]float64{7}, Moments{N: 1, Mean: 7, Min: 7, Max: 7}},
		"constant": {[]float64{0.1, 0.1, 0.1}, Moments{N: 3, Mean: 0.1, Min: 0.1, Max: 0.1}},
		"extremes": {[]float64{math.MaxFloat64, -math.MaxFloat64},
			Moments{N: 2, SD: math.Inf(1), M2: math.Inf(1), M4: math.Inf(1), Min: -math.MaxFloat64, Max: math.MaxFloat64}},
		"smallest": {[]float64{0, 5e-324}, Moments{N: 2, SD: 5e-324, Max: 5e-324}},
	} {
		if got := MomentsOf(c.x); got != c.want {
			t.Errorf("%s: %+v", name, got)
		}
	}
}

func TestSum(t *testing.T) {
	for name, c := range map[string]struct {
		x    []float64
		want float64
	}{
		"empty":    {nil, 0},
		"cancel":   {[]float64{1, 1e100, 1, -1e100}, 2},
		"tenth":    {repeat(0, 10000, 0.1), 1000.0000000000000555},
		"infinite": {[]float64{1, math.Inf(1), 2}, math.Inf(1)},
	} {
		if got := Sum(c.x); got != c.want {
			t.Errorf("%s: %v, want %v", name, got, c.want)
		}
	}
}

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

func TestKthSmallest(t *testing.T) {
	s := NewStream("test", 2, "select", 0)
	for _, n := range []int{1, 2, 5, 13, 100, 3000} {
		for kind := range 4 {
			x := make([]float64, n)
			for i := range x {
				switch kind {
				case 0:
					x[i] = s.Normal()
				case 1:
					x[i] = float64(s.IntN(4))
				case 2:
					x[i] = float64(i)
				default:
					x[i] = float64(-i)
				}
			}
			want := append([]float64(nil), x...)
			sort.Float64s(want)
			for _, k := range []int{1, (n + 1) / 2, n} {
				y := append([]float64(nil), x...)
				if got := KthSmallest(y, k); got != want[k-1] {
					t.Errorf("n %d, kind %d: %d-th is %v, want %v", n, kind, k, got, want[k-1])
				}
			}
		}
	}
}

const streamWords = "2919f49bd8e4d7f8 ad1369f2df120422"

// The key and the first numbers, worked out apart from this package: the
// SHA-256 with sha256sum of coreutils 9.1, the first ChaCha8 words with
// math/rand/v2 seeded by that key.
func TestStreamIsFixed(t *testing.T) {
	s := NewStream("rehearsal", 20261201, "null", 7)
	got := fmt.Sprintf("%016x %016x", s.Uint64(), s.Uint64())
	if got != streamWords {
		t.Errorf("words %s, want %s", got, streamWords)
	}
	a, b := NewStream("x", 1, "a", 0), NewStream("x", 1, "a", 1)
	if a.Uint64() == b.Uint64() {
		t.Error("two replicates share numbers")
	}
	a.Reset("x", 1, "a", 1)
	b.Reset("x", 1, "a", 1)
	for range 1000 {
		if a.Uint64() != b.Uint64() {
			t.Fatal("the same stream differs")
		}
	}
}

func TestStreamDistributions(t *testing.T) {
	if uniform(0) != 0x1p-54 || uniform(math.MaxUint64) >= 1 {
		t.Errorf("ends of uniform: %v, %v", uniform(0), uniform(math.MaxUint64))
	}
	const n = 200000
	s := NewStream("test", 3, "shape", 0)
	draw := func(f func() float64) Moments {
		x := make([]float64, n)
		for i := range x {
			x[i] = f()
		}
		return MomentsOf(x)
	}
	for name, c := range map[string]struct {
		f        func() float64
		mean, sd float64
	}{
		"uniform":     {s.Uniform, 0.5, math.Sqrt(1.0 / 12)},
		"normal":      {s.Normal, 0, 1},
		"exponential": {s.Exponential, 1, 1},
		"gamma 0.4":   {func() float64 { return s.Gamma(0.4) }, 0.4, math.Sqrt(0.4)},
		"gamma 6":     {func() float64 { return s.Gamma(6) }, 6, math.Sqrt(6)},
		"chi-square":  {func() float64 { return s.ChiSquare(3) }, 3, math.Sqrt(6)},
		"IntN":        {func() float64 { return float64(s.IntN(7)) }, 3, 2},
	} {
		m := draw(c.f)
		// five standard errors; the seed is fixed, so this cannot flicker
		if math.Abs(m.Mean-c.mean) > 5*c.sd/math.Sqrt(n) {
			t.Errorf("%s: mean %v, want %v", name, m.Mean, c.mean)
		}
		if se := math.Sqrt(m.M4/n-m.M2/n*m.M2/n) / math.Sqrt(n) / (2 * c.sd); math.Abs(m.SD-c.sd) > 5*se {
			t.Errorf("%s: sd %v, want %v", name, m.SD, c.sd)
		}
	}
}

// Each of the ten sets of 2 out of 5 must come equally often.
func TestChooseIsFair(t *testing.T) {
	s := NewStream("test", 4, "choose", 0)
	counts := map[[2]int]int{}
	x := []int{0, 1, 2, 3, 4}
	const n = 100000
	for range n {
		Choose(s, x, 2)
		counts[[2]int{min(x[0], x[1]), max(x[0], x[1])}]++
	}
	chi := 0.0
	for _, c := range counts {
		d := float64(c) - n/10
		chi += d * d / (n / 10)
	}
	if len(counts) != 10 || chi > 27.88 { // upper 0.001 point of chi-square(9), R qchisq
		t.Errorf("%d sets, chi-square %v", len(counts), chi)
	}
	y := []string{"a", "b", "c"}
	Shuffle(s, y)
	sort.Strings(y)
	if y[0] != "a" || y[2] != "c" {
		t.Error("shuffle lost something")
	}
}

var sink float64

func BenchmarkMoments(b *testing.B) {
	x := make([]float64, 1_000_000)
	s := NewStream("bench", 1, "", 0)
	for i := range x {
		x[i] = s.Normal()
	}
	b.ReportAllocs()
	for b.Loop() {
		sink = MomentsOf(x).SD
	}
}

func BenchmarkKthSmallest(b *testing.B) {
	x := make([]float64, 1_000_000)
	s := NewStream("bench", 1, "", 0)
	for i := range x {
		x[i] = s.Normal()
	}
	y := make([]float64, len(x))
	b.ReportAllocs()
	for b.Loop() {
		copy(y, x)
		sink = KthSmallest(y, len(y)/2)
	}
}

func BenchmarkStream(b *testing.B) {
	s := NewStream("bench", 1, "", 0)
	b.Run("Normal", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			sink = s.Normal()
		}
	})
	b.Run("ChiSquare", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			sink = s.ChiSquare(12)
		}
	})
	b.Run("Reset", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			s.Reset("bench", 1, "null", 3)
		}
	})
}
