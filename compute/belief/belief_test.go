package belief

import (
	"math"
	"testing"
)

func near(t interface {
	Helper()
	Errorf(string, ...any)
}, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.10g, want %.10g", what, got, want)
	}
}

type counter int

func (c *counter) Helper()               {}
func (c *counter) Errorf(string, ...any) { *c++ }

func TestNearFails(t *testing.T) {
	var c counter
	near(&c, "x", 1, 2, 0.5)
	near(&c, "x", math.NaN(), 2, 0.5)
	if c != 2 {
		t.Fatal("near did not fail")
	}
}

// Pocock & Spiegelhalter 1992, BMJ 305:1015; Spiegelhalter, Abrams & Myles
// 2004, Example 3.6: 13/163 against 23/148 deaths with 0.5 in every cell,
// prior mean -0.26, sd 0.13 on the log odds ratio.
func TestThrombolysisAtHome(t *testing.T) {
	a, b, c, d := 13.5, 150.5, 23.5, 125.5
	y, v := math.Log(a*d/(b*c)), 1/a+1/b+1/c+1/d
	after := Prior{Mean: -0.26, SD: 0.13}.Update(y, v)
	near(t, "posterior mean", after.Mean, -0.31, 0.005)
	near(t, "posterior sd", after.SD, 0.12, 0.005)
	near(t, "posterior mean", after.Mean, -0.3142990755452767, 1e-12) // SciPy 1.10
	_, _, below := after.Shares(0, 0)
	near(t, "benefit", below, 0.9948950408489686, 1e-12)
}

// Berger & Sellke 1987, JASA 82:112, Table 1: point mass of one half, normal
// prior with the variance of one observation.
func TestPointNull(t *testing.T) {
	for _, c := range []struct{ z, n, want, tol float64 }{
		{1.96, 1, 0.35, 0.005}, {1.96, 10, 0.37, 0.005}, {1.96, 100, 0.60, 0.005}, {1.96, 1000, 0.82, 0.005},
		{3.291, 1, 0.086, 0.0005}, {3.291, 50, 0.034, 0.0005}, {3.291, 1000, 0.124, 0.0005},
		{1.96, 5, 0.3307517591841656, 1e-12}, // SciPy 1.10
	} {
		v := 1 / c.n
		after := Prior{SD: 1, NullShare: 0.5}.Update(c.z*math.Sqrt(v), v)
		near(t, "null share", after.NullShare, c.want, c.tol)
	}
}

func TestShares(t *testing.T) {
	for _, p := range []Prior{{SD: 1}, {Mean: 40, SD: 0.1}, {Mean: -3, SD: 2, NullShare: 0.3}} {
		a, i, b := p.Shares(-0.5, 0.5)
		near(t, "sum", a+i+b, 1, 1e-12)
	}
}

func TestFromLimits(t *testing.T) {
	p := FromLimits(0, -1.959963984540054, 1.959963984540054, 0.95)
	near(t, "sd", p.SD, 1, 1e-12)
}

func TestNormalError(t *testing.T) {
	near(t, "normal", NormalError(2, math.Inf(1), 0.025), 2, 0)
	// t(0.975, 5) = 2.570581836, z = 1.959963985 (R 4.2.2)
	near(t, "t", NormalError(1, 5, 0.025), 2.570581835636314/1.959963984540054, 1e-9)
}

// The drawn density is the normal one: its area, by the trapezoidal rule over
// four standard deviations, is P(|Z| < 4) times what is not on the null, up to
// the factor sqrt(2 pi) that all beliefs share.
func TestDensity(t *testing.T) {
	for _, p := range []Prior{{SD: 1}, {Mean: -3, SD: 0.02}, {Mean: 2, SD: 5, NullShare: 0.25}} {
		y, h := p.Density()
		area := 0.0
		for i := 1; i < len(y); i++ {
			area += (y[i] - y[i-1]) * (h[i] + h[i-1]) / 2
		}
		near(t, "area", area/math.Sqrt(2*math.Pi), (1-p.NullShare)*math.Erf(4/math.Sqrt2), 1e-6)
		near(t, "middle", y[len(y)/2], p.Mean, 1e-12)
	}
}
