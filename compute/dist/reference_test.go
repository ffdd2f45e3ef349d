package dist

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"strconv"
	"testing"
)

// The rows are made by testdata/reference/dist_rows.py (mpmath at 35 to 60
// digits) and dist_rows.R (base R); see testdata/reference/README.md.
type referenceGroup struct {
	Fn, Program, Version, Call, Date string
	Digits                           int
	Rows                             []struct {
		Args            []float64
		LnP, LnQ, Value string
	}
}

func referenceRows(t testing.TB) []referenceGroup {
	t.Helper()
	text, err := os.ReadFile("../../testdata/reference/dist.json")
	if err != nil {
		t.Fatal(err)
	}
	var groups []referenceGroup
	if err := json.Unmarshal(text, &groups); err != nil {
		t.Fatal(err)
	}
	return groups
}

// tailError is the relative error of a probability given as a logarithm: the
// probability itself while it is a normal float, its logarithm beyond 1e-300.
func tailError(p, lnp, want float64) float64 {
	if want < -690.8 {
		return math.Abs(lnp/want - 1)
	}
	e := math.Abs(math.Expm1(lnp - want))
	if p >= 0x1p-1022 {
		e = max(e, relative(p, math.Exp(want))-4e-16*(1-want))
	}
	if lnp == 0 && want > -1e-15 || math.IsNaN(e) {
		return math.Abs(p - 1)
	}
	return e
}

func relative(got, want float64) float64 {
	if got == want {
		return 0
	}
	return math.Abs(got-want) / math.Abs(want)
}

// tailFunctions maps the name of a group to the function it checks.
var tailFunctions = map[string]func(a []float64) Tail{
	"NormalUpper":              func(a []float64) Tail { return NormalUpper(a[0]) },
	"TUpper":                   func(a []float64) Tail { return TUpper(a[0], a[1]) },
	"BetaLower":                func(a []float64) Tail { return BetaLower(a[0], a[1], a[2], a[3]) },
	"FUpper":                   func(a []float64) Tail { return FUpper(a[0], a[1], a[2]) },
	"ChiSquareUpper":           func(a []float64) Tail { return ChiSquareUpper(a[0], a[1]) },
	"NoncentralTUpper":         func(a []float64) Tail { return NoncentralTUpper(a[0], a[1], a[2]) },
	"NoncentralChiSquareUpper": func(a []float64) Tail { return NoncentralChiSquareUpper(a[0], a[1], a[2]) },
	"CorrelationUpper":         func(a []float64) Tail { return CorrelationUpper(a[0], a[1], a[2]) },
	// Both sides include the point here: lnp is P(X >= x), lnq P(X <= x).
	"Binomial": func(a []float64) Tail {
		u, l := BinomialUpper(a[0], a[1], a[2], a[3]), BinomialLower(a[0], a[1], a[2], a[3])
		return Tail{P: u.P, LnP: u.LnP, Q: l.P, LnQ: l.LnP}
	},
	"Poisson": func(a []float64) Tail {
		u, l := PoissonUpper(a[0], a[1]), PoissonLower(a[0], a[1])
		return Tail{P: u.P, LnP: u.LnP, Q: l.P, LnQ: l.LnP}
	},
	"Hypergeometric": func(a []float64) Tail {
		h := Hypergeometric{a[1], a[2], a[3], a[4]}
		u, l := h.Upper(a[0]), h.Lower(a[0])
		return Tail{P: u.P, LnP: u.LnP, Q: l.P, LnQ: l.LnP}
	},
	"RankSum":    func(a []float64) Tail { return NewRankSum(int(a[0]), int(a[1])).Upper(a[2]) },
	"SignedRank": func(a []float64) Tail { return NewSignedRank(int(a[0])).Upper(a[1]) },
}

var valueFunctions = map[string]func(a []float64) float64{
	"NormalQuantileLn":  func(a []float64) float64 { return NormalQuantileLn(a[0]) },
	"BivariateNormal":   func(a []float64) float64 { return BivariateNormal(a[0], a[1], a[2]) },
	"Ei":                func(a []float64) float64 { return Ei(a[0]) },
	"Binomial":          func(a []float64) float64 { return BinomialLnPMF(a[0], a[1], a[2], a[3]) },
	"Poisson":           func(a []float64) float64 { return PoissonLnPMF(a[0], a[1]) },
	"Hypergeometric":    func(a []float64) float64 { return Hypergeometric{a[1], a[2], a[3], a[4]}.LnPoint(a[0]) },
	"TQuantile":         func(a []float64) float64 { return TQuantile(a[0], a[1]) },
	"ChiSquareQuantile": func(a []float64) float64 { return ChiSquareQuantile(a[0], a[1]) },
	"FQuantile":         func(a []float64) float64 { return FQuantile(a[0], a[1], a[2]) },
	"BetaQuantile":      func(a []float64) float64 { x, _ := BetaQuantile(a[0], a[1], a[2]); return x },
	"TUpperLn":          func(a []float64) float64 { return TUpper(a[0], a[1]).LnP },
	"BinomialUpperLn":   func(a []float64) float64 { return BinomialUpper(a[0], a[1], a[2], 1-a[2]).LnP },
	"PoissonUpperLn":    func(a []float64) float64 { return PoissonUpper(a[0], a[1]).LnP },
	"RankSumUpper":      func(a []float64) float64 { return NewRankSum(int(a[0]), int(a[1])).Upper(a[2]).P },
	"SignedRankUpper":   func(a []float64) float64 { return NewSignedRank(int(a[0])).Upper(a[1]).P },
	"NoncentralTUpper": func(a []float64) float64 {
		return NoncentralTUpper(a[0], a[1], a[2]).P
	},
	"NoncentralChiSquareUpper": func(a []float64) float64 {
		return NoncentralChiSquareUpper(a[0], a[1], a[2]).P
	},
}

func parseValue(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func TestReferenceRows(t *testing.T) {
	seen := map[string]int{}
	for _, g := range referenceRows(t) {
		tol := max(1e-11, 2*math.Pow10(-g.Digits))
		worst := 0.0
		for _, r := range g.Rows {
			id := fmt.Sprintf("%s%v (%s)", g.Fn, r.Args, g.Program)
			check := func(side string, e float64) {
				worst = max(worst, e)
				if !(e <= tol) {
					t.Errorf("%s: %s off by %.2g", id, side, e)
				}
			}
			if r.LnP != "" {
				got := tailFunctions[g.Fn](r.Args)
				check("P", tailError(got.P, got.LnP, parseValue(t, r.LnP)))
				if r.LnQ != "" {
					check("Q", tailError(got.Q, got.LnQ, parseValue(t, r.LnQ)))
				}
			}
			if r.Value != "" {
				want := parseValue(t, r.Value)
				got := valueFunctions[g.Fn](r.Args)
				e := relative(got, want)
				if g.Fn == "BivariateNormal" && r.Args[2] < 0 {
					e = math.Abs(got - want) // the form is absolute there
				}
				check("value", e)
			}
			seen[g.Fn]++
		}
		t.Logf("%s (%s): %d rows, worst %.1e", g.Fn, g.Program, len(g.Rows), worst)
	}
	for fn := range tailFunctions {
		if seen[fn] == 0 {
			t.Errorf("no reference row for %s", fn)
		}
	}
	for fn := range valueFunctions {
		if seen[fn] == 0 {
			t.Errorf("no reference row for %s", fn)
		}
	}
}

// The comparison itself must be able to fail.
func TestTailErrorSeesErrors(t *testing.T) {
	cases := []struct {
		p, lnp, want float64
		bad          bool
	}{
		{0.25, math.Log(0.25), math.Log(0.25), false},
		{0.25 * (1 + 1e-10), math.Log(0.25), math.Log(0.25), true},
		{0.25, math.Log(0.25) + 1e-10, math.Log(0.25), true},
		{0, -1000, -1000, false},
		{0, -1000 - 1e-7, -1000, true},
		{1e-300, math.Log(1e-300) * (1 + 1e-12), math.Log(1e-300), true},
		{math.NaN(), math.NaN(), -1, true},
	}
	for _, c := range cases {
		if bad := !(tailError(c.p, c.lnp, c.want) <= 1e-11); bad != c.bad {
			t.Errorf("tailError(%v, %v, %v): flagged %v", c.p, c.lnp, c.want, bad)
		}
	}
}
