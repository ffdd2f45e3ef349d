package dist

// To be replaced, one by one, by the real functions in files of their own.
// The names and signatures are the contract with the other packages.

// NormalUpper is P(Z > z).
func NormalUpper(z float64) Tail { panic("dist: not built") }

// NormalQuantile is z with P(Z > z) = p.
func NormalQuantile(p float64) float64 { panic("dist: not built") }

// NormalQuantileLn is z with ln P(Z > z) = lnp.
func NormalQuantileLn(lnp float64) float64 { panic("dist: not built") }

// TUpper is P(T > t) with nu degrees of freedom; nu may be +Inf (normal).
func TUpper(t, nu float64) Tail { panic("dist: not built") }

// TQuantile is t with P(T > t) = p.
func TQuantile(p, nu float64) float64 { panic("dist: not built") }

// FUpper is P(F > f) with d1 and d2 degrees of freedom.
func FUpper(f, d1, d2 float64) Tail { panic("dist: not built") }

// FQuantile is f with P(F > f) = p.
func FQuantile(p, d1, d2 float64) float64 { panic("dist: not built") }

// ChiSquareUpper is P(X > x) with nu degrees of freedom.
func ChiSquareUpper(x, nu float64) Tail { panic("dist: not built") }

// ChiSquareQuantile is x with P(X > x) = p.
func ChiSquareQuantile(p, nu float64) float64 { panic("dist: not built") }

// BetaLower is I_x(a, b) with y = 1-x given separately.
func BetaLower(x, y, a, b float64) Tail { panic("dist: not built") }

// BetaQuantile is x, and y = 1-x, with I_x(a, b) = p.
func BetaQuantile(p, a, b float64) (x, y float64) { panic("dist: not built") }

// BinomialLower is P(X <= k) for n trials at probability p, q = 1-p.
func BinomialLower(k, n, p, q float64) Tail { panic("dist: not built") }

// BinomialUpper is P(X >= k).
func BinomialUpper(k, n, p, q float64) Tail { panic("dist: not built") }

// BinomialLnPMF is ln P(X = k) (Loader's form).
func BinomialLnPMF(k, n, p, q float64) float64 { panic("dist: not built") }

// PoissonLower is P(X <= x) at mean mu.
func PoissonLower(x, mu float64) Tail { panic("dist: not built") }

// PoissonUpper is P(X >= x) at mean mu.
func PoissonUpper(x, mu float64) Tail { panic("dist: not built") }

// PoissonLnPMF is ln P(X = x).
func PoissonLnPMF(x, mu float64) float64 { panic("dist: not built") }

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
