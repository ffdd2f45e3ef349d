package dist

// To be replaced, one by one, by the real functions in files of their own.
// The names and signatures are the contract with the other packages.

// NoncentralTUpper is P(T > t) with nu degrees of freedom and noncentrality delta.
func NoncentralTUpper(t, nu, delta float64) Tail { panic("dist: not built") }

// NoncentralTDelta is the noncentrality at which P(T > t) = p.
func NoncentralTDelta(p, t, nu float64) float64 { panic("dist: not built") }

// NoncentralChiSquareUpper is P(X > x) with nu degrees of freedom and noncentrality lambda.
func NoncentralChiSquareUpper(x, nu, lambda float64) Tail { panic("dist: not built") }

// CorrelationUpper is P(R > r) for n pairs from a bivariate normal with correlation rho.
func CorrelationUpper(r, rho float64, n float64) Tail { panic("dist: not built") }

// BivariateNormal is P(X <= h, Y <= k) with correlation rho.
func BivariateNormal(h, k, rho float64) float64 { panic("dist: not built") }

// Ei is the exponential integral for t > 0.
func Ei(t float64) float64 { panic("dist: not built") }

// Hypergeometric is Fisher's noncentral hypergeometric distribution of x, the
// first group's events, given n1, n2, s = all events and the odds ratio psi.
type Hypergeometric struct{ N1, N2, S, Psi float64 }

// Upper is P(X >= x); Lower is P(X <= x); Point is P(X = x); Mean is E(X).
func (h Hypergeometric) Upper(x float64) Tail    { panic("dist: not built") }
func (h Hypergeometric) Lower(x float64) Tail    { panic("dist: not built") }
func (h Hypergeometric) Point(x float64) float64 { panic("dist: not built") }
func (h Hypergeometric) Mean() float64           { panic("dist: not built") }

// RankSum is the exact null distribution of the Mann–Whitney U of m and n
// values without ties: P(U <= u) for u = 0..mn as a table of cumulative
// probabilities and, from the other end, upper tails.
type RankSum struct{ M, N int }

// NewRankSum builds the table. Upper is P(U >= u), Lower P(U <= u).
func NewRankSum(m, n int) *RankSum      { panic("dist: not built") }
func (r *RankSum) Upper(u float64) Tail { panic("dist: not built") }
func (r *RankSum) Lower(u float64) Tail { panic("dist: not built") }

// RankSumTies is the exact conditional distribution of the rank sum of the
// first group over doubled midranks (integers), m of them in the first group:
// P(S >= s), P(S <= s).
type RankSumTies struct{}

func NewRankSumTies(doubledMidranks []int, m int) *RankSumTies { panic("dist: not built") }
func (r *RankSumTies) Upper(s int) Tail                        { panic("dist: not built") }
func (r *RankSumTies) Lower(s int) Tail                        { panic("dist: not built") }

// SignedRank is the exact null distribution of the signed-rank sum V of n
// differences without ties or zeros.
type SignedRank struct{ N int }

func NewSignedRank(n int) *SignedRank      { panic("dist: not built") }
func (r *SignedRank) Upper(v float64) Tail { panic("dist: not built") }
func (r *SignedRank) Lower(v float64) Tail { panic("dist: not built") }
