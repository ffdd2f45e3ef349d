package dist

import (
	"math"
	"math/big"
	"testing"
)

// The noncentrality solves its own tail, also far out.
func TestNoncentralTDelta(t *testing.T) {
	for _, c := range [][3]float64{{0.025, 2, 10}, {0.975, 2, 10}, {0.05, -3, 4}, {1e-10, 30, 25}, {0.5, 100, 3}, {0.9, 0, 7}, {0.025, 5, 1e6}, {1e-100, 1, 12}} {
		d := NoncentralTDelta(c[0], c[1], c[2])
		if e := relative(NoncentralTUpper(c[1], c[2], d).P, c[0]); e > 1e-10 {
			t.Errorf("delta%v = %v: P off by %.2g", c, d, e)
		}
	}
}

// Tied ranks against full enumeration in whole numbers; with no ties the
// distribution must be the other table.
func TestRankSumTiesByEnumeration(t *testing.T) {
	scores := []int{3, 3, 6, 8, 13, 13, 13, 13, 18, 21, 21}
	for m := 0; m <= len(scores); m++ {
		counts := map[int]int64{}
		var total int64
		for set := 0; set < 1<<len(scores); set++ {
			n, s := 0, 0
			for i, r := range scores {
				if set>>i&1 == 1 {
					n++
					s += r
				}
			}
			if n == m {
				counts[s]++
				total++
			}
		}
		table := NewRankSumTies(scores, m)
		for s := 0; s <= 135; s++ {
			var up int64
			for v, c := range counts {
				if v >= s {
					up += c
				}
			}
			want := float64(up) / float64(total)
			if got := table.Upper(s); math.Abs(got.P-want) > 1e-14*want+0 && want != 0 || (want == 0) != (got.P == 0) {
				t.Errorf("m %d, P(S >= %d) = %v, want %v", m, s, got.P, want)
			}
			if s := checkTail(table.Lower(s)); s != "" {
				t.Error(s)
			}
		}
	}
	plain, ties := NewRankSum(6, 9), NewRankSumTies([]int{2, 4, 6, 8, 10, 12, 14, 16, 18, 20, 22, 24, 26, 28, 30}, 6)
	for u := 0; u <= 54; u++ {
		if a, b := plain.Upper(float64(u)), ties.Upper(2*u+42); relative(a.P, b.P) > 1e-13 {
			t.Errorf("U %d: %v without, %v with the tie table", u, a.P, b.P)
		}
	}
}

// The table of U against the recursion of Mann and Whitney (1947) in big
// rational arithmetic, which adds only positive whole numbers.
func TestRankSumByRecursion(t *testing.T) {
	type key struct{ m, n, u int }
	memo := map[key]*big.Int{}
	var count func(m, n, u int) *big.Int
	count = func(m, n, u int) *big.Int {
		if u < 0 {
			return new(big.Int)
		}
		if m == 0 || n == 0 {
			if u == 0 {
				return big.NewInt(1)
			}
			return new(big.Int)
		}
		k := key{m, n, u}
		if v, ok := memo[k]; ok {
			return v
		}
		v := new(big.Int).Add(count(m-1, n, u-n), count(m, n-1, u))
		memo[k] = v
		return v
	}
	const m, n = 13, 21
	table := NewRankSum(m, n)
	all := new(big.Int).Binomial(m+n, m)
	sum := new(big.Int)
	for u := 0; u <= m*n; u++ {
		sum.Add(sum, count(m, n, u))
		want, _ := new(big.Rat).SetFrac(sum, all).Float64()
		if e := relative(table.Lower(float64(u)).P, want); e > 1e-13 {
			t.Errorf("P(U <= %d) off by %.2g", u, e)
		}
	}
}

func TestTwoSided(t *testing.T) {
	for _, z := range []float64{-40, -1.96, 0, 0.3, 2, 39} {
		up := NormalUpper(z)
		got := TwoSided(up, up.Complement())
		want := ChiSquareUpper(z*z, 1)
		if tailError(got.P, got.LnP, want.LnP) > 1e-11 {
			t.Errorf("z %v: %+v, want %+v", z, got, want)
		}
	}
}

// Worked values computed for the design of the methods with a second
// implementation; SciPy 1.10 (scipy.special.nctdtr, stats.fisher_exact,
// stats.mannwhitneyu) and R 4.2.2 give the same where they reach.
func TestDesignValues(t *testing.T) {
	for _, c := range []struct {
		name              string
		got, want, digits float64
	}{
		{"ln P(T5(30) <= 2)", NoncentralTUpper(2, 5, 30).LnQ, -243.603510006497, 12},
		{"ln P(T30(60) <= 55)", NoncentralTUpper(55, 30, 60).LnQ, -1.51320429684649, 14},
		{"ln P(t > 30), nu 1e5", TUpper(30, 1e5).LnP, -452.303835137226, 12},
		{"one-sided Fisher 7/12 v 1/12", Hypergeometric{12, 12, 8, 1}.Upper(7).P, 0.0135953695, 10},
		{"rank sum U 28 of 5, 6", 2 * NewRankSum(6, 5).Upper(28).P, 0.0173160, 7},
		{"df 45.5, low", TUpper((-0.18+0.8)/math.Sqrt(1.31*1.31/24+1.18*1.18/24), 45.506534).P, 0.04586219337, 11},
		{"conforming share", NoncentralTUpper(math.Sqrt(15)*2.5, 14, math.Sqrt(15)*NormalQuantile(0.05)).P, 0.0607939, 7},
	} {
		if math.Abs(c.got-c.want) > 0.5*math.Pow(10, -c.digits)*1.02 {
			t.Errorf("%s: %v, want %v", c.name, c.got, c.want)
		}
	}
}
