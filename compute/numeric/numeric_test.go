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
