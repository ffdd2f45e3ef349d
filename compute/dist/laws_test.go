package dist

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// law is one family at fixed parameters: its tail in x and, where it has one,
// its upper quantile. All families pass through the same laws.
type law struct {
	name     string
	upper    func(x float64) Tail
	quantile func(p float64) float64
	xs       []float64
	lattice  bool
}

func families() []law {
	var out []law
	add := func(l law) { out = append(out, l) }
	add(law{"normal", NormalUpper, NormalQuantile, grid(-45, 45), false})
	for _, nu := range []float64{0.7, 1, 3, 12.5, 400, 5000, 1e8, math.Inf(1)} {
		add(law{fmt.Sprintf("t(%g)", nu), func(x float64) Tail { return TUpper(x, nu) },
			func(p float64) float64 { return TQuantile(p, nu) }, grid(-40, 40), false})
	}
	for _, nu := range []float64{0.3, 1, 2, 9, 250, 1e5, 1e8} {
		s := math.Sqrt(2 * nu)
		add(law{fmt.Sprintf("chi-square(%g)", nu), func(x float64) Tail { return ChiSquareUpper(x, nu) },
			func(p float64) float64 { return ChiSquareQuantile(p, nu) },
			append(grid(max(nu/50, nu-25*s), nu+25*s), 1e-300, 1e-20), false})
	}
	for _, d := range [][2]float64{{1, 1}, {3, 10}, {40, 7.5}, {500, 1e5}, {4, math.Inf(1)}, {math.Inf(1), 9}} {
		add(law{fmt.Sprintf("F%v", d), func(x float64) Tail { return FUpper(x, d[0], d[1]) },
			func(p float64) float64 { return FQuantile(p, d[0], d[1]) }, grid(0.02, 12), false})
	}
	for _, d := range [][2]float64{{0.5, 0.5}, {2, 9}, {300, 40}, {1e6, 1e6}, {1, 1e8}} {
		m, s := d[0]/(d[0]+d[1]), math.Sqrt(d[0]*d[1]/(d[0]+d[1]+1))/(d[0]+d[1])
		add(law{fmt.Sprintf("beta%v", d), func(x float64) Tail { return BetaLower(x, 1-x, d[0], d[1]).Complement() },
			func(p float64) float64 { _, x := BetaQuantile(p, d[1], d[0]); return x },
			grid(max(1e-12, m-15*s), min(1-1e-12, m+15*s)), false})
	}
	for _, d := range [][2]float64{{1, 2}, {7, -1.5}, {30, 20}, {1e5, 4}} {
		add(law{fmt.Sprintf("noncentral t%v", d), func(x float64) Tail { return NoncentralTUpper(x, d[0], d[1]) },
			nil, grid(-12, 45), false})
	}
	add(law{"noncentral chi-square", func(x float64) Tail { return NoncentralChiSquareUpper(x, 4, 20) }, nil, grid(0.01, 200), false})
	for _, d := range [][2]float64{{0.4, 5}, {-0.9, 12}, {0.3, 300}} {
		add(law{fmt.Sprintf("correlation%v", d), func(x float64) Tail { return CorrelationUpper(x, d[0], d[1]) },
			nil, grid(-0.999, 0.999), false})
	}
	add(law{"binomial", func(x float64) Tail { return BinomialUpper(x, 60, 0.3, 0.7) }, nil, whole(-2, 62), true})
	add(law{"poisson", func(x float64) Tail { return PoissonUpper(x, 7.5) }, nil, whole(-1, 80), true})
	for _, psi := range []float64{1, 0.02, 35} {
		add(law{fmt.Sprintf("hypergeometric psi %g", psi), Hypergeometric{40, 55, 30, psi}.Upper, nil, whole(-1, 32), true})
	}
	add(law{"rank sum", NewRankSum(9, 12).Upper, nil, whole(-1, 110), true})
	add(law{"signed rank", NewSignedRank(14).Upper, nil, whole(-1, 107), true})
	return out
}

func grid(lo, hi float64) []float64 {
	var x []float64
	for i := 0; i <= 60; i++ {
		x = append(x, lo+(hi-lo)*float64(i)/60)
	}
	return x
}

func whole(lo, hi float64) []float64 {
	var x []float64
	for v := lo; v <= hi; v++ {
		x = append(x, v)
	}
	return x
}

// checkTail returns what is wrong with a Tail on its own: the two sides must
// add to one and agree with their logarithms.
func checkTail(t Tail) string {
	switch {
	case math.IsNaN(t.P+t.Q) || math.IsNaN(t.LnP) || math.IsNaN(t.LnQ):
		return "NaN"
	case t.P < 0 || t.Q < 0 || t.P > 1 || t.Q > 1 || t.LnP > 0 || t.LnQ > 0:
		return "outside [0, 1]"
	case math.Abs(t.P+t.Q-1) > 1e-12:
		return fmt.Sprintf("P+Q-1 = %g", t.P+t.Q-1)
	}
	for _, v := range [2][2]float64{{t.P, t.LnP}, {t.Q, t.LnQ}} {
		if v[0] > 1e-300 && math.Abs(math.Exp(v[1])/v[0]-1) > 2e-13 {
			return fmt.Sprintf("exp(%v) is not %v", v[1], v[0])
		}
		if v[0] == 0 && v[1] > -700 {
			return fmt.Sprintf("0 with logarithm %v", v[1])
		}
	}
	// near 1 the logarithm must come from the small side
	if t.Q < 1e-3 && t.Q > 1e-300 && relative(t.LnP, math.Log1p(-t.Q)) > 1e-12 {
		return fmt.Sprintf("LnP %v with Q %v", t.LnP, t.Q)
	}
	return ""
}

func TestCheckTailSeesFaults(t *testing.T) {
	if s := checkTail(NormalUpper(1)); s != "" {
		t.Errorf("a good tail is refused: %s", s)
	}
	good := NormalUpper(5)
	for name, bad := range map[string]Tail{
		"sum": {P: 0.3, Q: 0.6, LnP: math.Log(0.3), LnQ: math.Log(0.6)},
		"nan": {P: math.NaN()}, "log": {P: 0.25, Q: 0.75, LnP: -1, LnQ: math.Log(0.75)},
		"lost": {P: 0, Q: 1, LnP: -20, LnQ: 0}, "range": {P: -0.1, Q: 1.1},
		"near one": {P: good.Q, Q: good.P, LnP: 0, LnQ: good.LnP},
	} {
		if checkTail(bad) == "" {
			t.Errorf("%s: fault not seen", name)
		}
	}
}

func TestTailsAddUpAndFall(t *testing.T) {
	for _, l := range families() {
		last := Tail{LnP: 0, LnQ: math.Inf(-1)}
		first := true
		for _, x := range sorted(l.xs) {
			got := l.upper(x)
			if s := checkTail(got); s != "" {
				t.Errorf("%s at %v: %s (%+v)", l.name, x, s, got)
			}
			if !first && (got.LnP > last.LnP+1e-12 || got.LnQ < last.LnQ-1e-12) {
				t.Errorf("%s rises at %v: %+v after %+v", l.name, x, got, last)
			}
			last, first = got, false
		}
	}
}

func sorted(x []float64) []float64 {
	y := append([]float64(nil), x...)
	for i := range y {
		for j := i; j > 0 && y[j] < y[j-1]; j-- {
			y[j], y[j-1] = y[j-1], y[j]
		}
	}
	return y
}

func TestQuantileInvertsTail(t *testing.T) {
	ps := []float64{1e-300, 1e-200, 1e-50, 1e-12, 1e-5, 0.025, 0.199, 0.201, 0.4999, 0.5, 0.6, 0.975, 0.999999}
	for _, l := range families() {
		if l.quantile == nil {
			continue
		}
		last := math.Inf(1)
		for _, p := range ps {
			x := l.quantile(p)
			if strings.HasPrefix(l.name, "beta") && x > 1-1e-5 {
				continue // needs y; see TestBetaQuantileBothSides
			}
			if !(x <= last) {
				t.Errorf("%s: quantile rises at %v", l.name, p)
			}
			last = x
			if x > 1e290 || x < 1e-290 && l.xs[0] >= 0 {
				continue // beyond the floats
			}
			// One spacing of x moves P by slack, the best any x can do.
			slack := max(relative(l.upper(math.Nextafter(x, 2*x)).P, l.upper(x).P), relative(l.upper(math.Nextafter(x, 0)).P, l.upper(x).P))
			got := l.upper(x)
			if e := relative(got.P, p); e > 2e-12+slack {
				t.Errorf("%s: P(quantile(%v)) off by %.2g (slack %.2g)", l.name, p, e, slack)
			}
		}
		if lo, hi := l.quantile(1), l.quantile(0); lo >= hi || math.IsNaN(lo+hi) && !math.IsInf(lo, -1) {
			t.Errorf("%s: quantiles of 1 and 0 are %v and %v", l.name, lo, hi)
		}
	}
}

// BetaQuantile must hold both x and y, wherever they are.
func TestBetaQuantileBothSides(t *testing.T) {
	for _, ab := range [][2]float64{{1, 1e6}, {1e6, 1}, {0.5, 0.5}, {3, 5}, {1e8, 1e8}, {1e8, 2}, {2, 1e8}, {20, 1e6}, {1e7, 0.5}} {
		for _, p := range []float64{1e-300, 1e-100, 1e-20, 1e-3, 0.3, 0.5, 0.9, 1 - 1e-12} {
			x, y := BetaQuantile(p, ab[0], ab[1])
			if math.Abs(x+y-1) > 4e-16 {
				t.Errorf("beta%v %v: x+y = %v", ab, p, x+y)
			}
			if x < 1e-300 || y < 1e-300 {
				continue
			}
			// One rounding in x and y is worth this much in p.
			tol := 1e-11 + 4e-16*math.Exp(lnBetaWeight(x, y, ab[0], ab[1])-math.Log(p))
			if e := relative(BetaLower(x, y, ab[0], ab[1]).P, p); e > tol {
				t.Errorf("beta%v %v: off by %.2g", ab, p, e)
			}
			y2, x2 := BetaQuantile(1-p, ab[1], ab[0])
			if p > 1e-15 && p <= 0.5 && (relative(x, x2) > 1e-9/p*1e-4+1e-9 || relative(y, y2) > 1e-9/p*1e-4+1e-9) {
				t.Errorf("beta%v %v: mirrored %v %v against %v %v", ab, p, x, y, x2, y2)
			}
		}
	}
}

func TestSymmetries(t *testing.T) {
	near := func(name string, a, b Tail) {
		t.Helper()
		if tailError(a.P, a.LnP, b.LnP) > 1e-11 || tailError(a.Q, a.LnQ, b.LnQ) > 1e-11 {
			t.Errorf("%s: %+v against %+v", name, a, b)
		}
	}
	for _, x := range []float64{0.1, 1, 3.3, 12, 30} {
		near("normal", NormalUpper(-x), NormalUpper(x).Complement())
		near("t", TUpper(-x, 7), TUpper(x, 7).Complement())
		near("noncentral t", NoncentralTUpper(-x, 9, -2), NoncentralTUpper(x, 9, 2).Complement())
		near("F", FUpper(x, 5, 11), FUpper(1/x, 11, 5).Complement())
		near("F and t", FUpper(x*x, 1, 13), TUpper(x, 13).double())
		near("chi-square and normal", ChiSquareUpper(x*x, 1), NormalUpper(x).double())
		near("noncentral t at 0", NoncentralTUpper(0, 4, x), NormalUpper(-x))
		if got, want := NoncentralChiSquareUpper(9, 1, x*x), NormalUpper(3-x).P+NormalUpper(3+x).P; relative(got.P, want) > 1e-11 {
			t.Errorf("noncentral chi-square, one degree: %v, want %v", got.P, want)
		}
		near("poisson and chi-square", PoissonLower(4, x), ChiSquareUpper(2*x, 10))
		near("correlation", CorrelationUpper(-0.3, -x/40, 9), CorrelationUpper(0.3, x/40, 9).Complement())
	}
	for k := 0.0; k <= 20; k++ {
		near("binomial", BinomialUpper(k, 20, 0.25, 0.75), BinomialLower(20-k, 20, 0.75, 0.25))
		near("binomial steps", BinomialUpper(k, 20, 0.25, 0.75), BinomialLower(k-1, 20, 0.25, 0.75).Complement())
		h := Hypergeometric{25, 30, 20, 2.5}
		near("hypergeometric", h.Upper(k), Hypergeometric{30, 25, 20, 0.4}.Lower(20-k))
		near("rank sum", NewRankSum(4, 6).Upper(k), NewRankSum(6, 4).Lower(24-k))
	}
	// The noncentral t passes into its neighbours.
	near("noncentral t, small delta", NoncentralTUpper(2, 9, 1e-14), TUpper(2, 9))
	near("t, large nu", TUpper(3, 1e300), NormalUpper(3))
}

// Point probabilities add to the tails.
func TestPointsAddToTails(t *testing.T) {
	h := Hypergeometric{30, 22, 25, 3.25}
	bin, poi, hyp := 0.0, 0.0, 0.0
	mean, second := 0.0, 0.0
	for k := 60.0; k >= 0; k-- {
		bin += math.Exp(BinomialLnPMF(k, 60, 0.375, 0.625))
		poi += math.Exp(PoissonLnPMF(k, 6.5))
		p := h.Point(k)
		hyp += p
		mean += k * p
		second += k * k * p
		for name, e := range map[string]float64{
			"binomial":       relative(bin, BinomialUpper(k, 60, 0.375, 0.625).P),
			"hypergeometric": hyp/h.Upper(k).P - 1,
		} {
			if math.Abs(e) > 1e-12 {
				t.Errorf("%s at %v: off by %.2g", name, k, e)
			}
		}
	}
	if math.Abs(poi-1) > 1e-13 {
		t.Errorf("poisson points add to %v", poi)
	}
	if relative(h.Mean(), mean) > 1e-13 || relative(h.Variance(), second-mean*mean) > 1e-11 {
		t.Errorf("hypergeometric mean %v, variance %v; by points %v, %v", h.Mean(), h.Variance(), mean, second-mean*mean)
	}
}

func TestLimits(t *testing.T) {
	inf := math.Inf(1)
	for name, c := range map[string]struct{ got, want Tail }{
		"normal +inf":       {NormalUpper(inf), impossible},
		"normal -inf":       {NormalUpper(-inf), sure},
		"t +inf":            {TUpper(inf, 3), impossible},
		"t -inf":            {TUpper(-inf, 3), sure},
		"F 0":               {FUpper(0, 2, 3), sure},
		"F inf":             {FUpper(inf, 2, 3), impossible},
		"chi 0":             {ChiSquareUpper(0, 3), sure},
		"chi inf":           {ChiSquareUpper(inf, 3), impossible},
		"beta 0":            {BetaLower(0, 1, 2, 3), impossible},
		"beta 1":            {BetaLower(1, 0, 2, 3), sure},
		"binomial p 0":      {BinomialUpper(1, 5, 0, 1), impossible},
		"binomial p 1":      {BinomialUpper(5, 5, 1, 0), sure},
		"binomial n 0":      {BinomialLower(0, 0, 0.5, 0.5), sure},
		"poisson mu 0":      {PoissonUpper(1, 0), impossible},
		"poisson mu inf":    {PoissonUpper(9, inf), sure},
		"nct t inf":         {NoncentralTUpper(inf, 3, 1), impossible},
		"nct delta inf":     {NoncentralTUpper(2, 3, inf), sure},
		"ncx 0":             {NoncentralChiSquareUpper(0, 3, 1), sure},
		"correlation 1":     {CorrelationUpper(1, 0.5, 9), impossible},
		"correlation -1":    {CorrelationUpper(-1, 0.5, 9), sure},
		"correlation rho1":  {CorrelationUpper(0.5, 1, 9), sure},
		"hyper psi 0":       {Hypergeometric{5, 6, 4, 0}.Upper(1), impossible},
		"hyper psi inf":     {Hypergeometric{5, 6, 4, inf}.Upper(4), sure},
		"hyper one point":   {Hypergeometric{5, 0, 4, 2}.Lower(3), impossible},
		"rank sum empty":    {NewRankSum(0, 4).Upper(0), sure},
		"rank sum ties all": {NewRankSumTies([]int{2, 4}, 2).Upper(6), sure},
	} {
		if c.got != c.want {
			t.Errorf("%s: %+v", name, c.got)
		}
	}
	for name, c := range map[string][2]float64{
		"ei 0":             {Ei(0), -inf},
		"bivariate rho 1":  {BivariateNormal(0, 1, 1), 0.5},
		"bivariate rho -1": {BivariateNormal(0, 0, -1), 0},
		"bivariate inf":    {BivariateNormal(inf, 0, 0.3), 0.5},
		"delta p 0":        {NoncentralTDelta(0, 1, 5), -inf},
		"delta p 1":        {NoncentralTDelta(1, 1, 5), inf},
		"quantile ln 0":    {NormalQuantileLn(0), -inf},
		"quantile ln inf":  {NormalQuantileLn(-inf), inf},
		"binomial pmf":     {BinomialLnPMF(0, 7, 0, 1), 0},
		"poisson pmf":      {PoissonLnPMF(0, 0), 0},
		"zero tail":        {impossible.Normal(), inf},
	} {
		if c[0] != c[1] {
			t.Errorf("%s: %v, want %v", name, c[0], c[1])
		}
	}
}

func TestFaultsOfTheCallerPanic(t *testing.T) {
	for name, f := range map[string]func(){
		"nan":        func() { NormalUpper(math.NaN()) },
		"nu":         func() { TUpper(1, 0) },
		"p":          func() { NormalQuantile(1.5) },
		"shape":      func() { BetaLower(0.5, 0.5, -1, 1) },
		"ln p":       func() { NormalQuantileLn(0.1) },
		"rho":        func() { BivariateNormal(0, 0, 2) },
		"pairs":      func() { CorrelationUpper(0, 0, 2) },
		"events":     func() { Hypergeometric{3, 3, 9, 1}.Upper(1) },
		"trials":     func() { BinomialUpper(1, -1, 0.5, 0.5) },
		"mean":       func() { PoissonUpper(1, -1) },
		"group size": func() { NewRankSumTies([]int{2, 4}, 3) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s: no panic", name)
				}
			}()
			f()
		}()
	}
}
