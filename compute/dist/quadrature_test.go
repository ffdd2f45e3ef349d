package dist

import (
	"math"
	"testing"

	"steelyard/compute/numeric"
)

// The trapezoidal rules against adaptive Gauss–Legendre panels laid through
// every place where the integrand can turn: two quadratures that share no
// code but the integrand. 250 random noncentral t, 100 correlations.
func TestTwoQuadratures(t *testing.T) {
	s := numeric.NewStream("test", 1, "quadrature", 0)
	for range 250 {
		nu := max(1, math.Exp(s.Uniform()*18))
		delta := (s.Uniform() - 0.5) * 2 * math.Exp(s.Uniform()*7)
		x := delta + s.Normal()*math.Sqrt(1+delta*delta/nu)*math.Exp(s.Uniform()*3)
		if s.IntN(10) == 0 {
			x = s.Normal() * math.Exp(s.Uniform()*10)
		}
		got := NoncentralTUpper(x, nu, delta)
		if fault := checkTail(got); fault != "" {
			t.Errorf("noncentral t %v %v %v: %s", x, nu, delta, fault)
		}
		want := panelsNoncentralT(x, nu, delta, x >= delta)
		ln := got.LnP
		if x < delta {
			ln = got.LnQ
		}
		if e := math.Abs(ln - want); e > 1e-12*max(1, math.Abs(want)) && want > -2000 {
			t.Errorf("noncentral t %v %v %v: ln %v, by panels %v", x, nu, delta, ln, want)
		}
	}
	for range 100 {
		n := 3 + math.Floor(math.Exp(s.Uniform()*9))
		rho := math.Tanh(s.Normal() * 1.2)
		r := math.Tanh(math.Atanh(rho) + s.Normal()/math.Sqrt(n)*math.Exp(s.Uniform()*3))
		if math.Abs(r) == 1 {
			continue
		}
		got := CorrelationUpper(r, rho, n)
		if fault := checkTail(got); fault != "" {
			t.Errorf("correlation %v %v %v: %s", r, rho, n, fault)
		}
		k := newCorrelation(rho, n)
		z := math.Atanh(r)
		ln, lo, hi := got.LnP, z, math.Inf(1)
		if z < k.zeta {
			ln, lo, hi = got.LnQ, math.Inf(-1), z
		}
		want := lnIntegral(func(v float64) float64 {
			return k.lead - (k.n-1.5)*lnCosh(v-k.zeta) + 0.5*lnCosh(v) + math.Log(k.series(math.Tanh(v)))
		}, lo, hi, k.zeta, 0.3/math.Sqrt(n))
		if e := math.Abs(ln - want); e > 2e-12*max(1, math.Abs(want)/10) && want < -0.1 {
			t.Errorf("correlation %v %v %v: ln %v, by panels %v", r, rho, n, ln, want)
		}
	}
}

// panelsNoncentralT integrates Φ(±(t·u − delta)) over the density of u
// itself, between breakpoints at the peak of the density and the turn of Φ.
func panelsNoncentralT(t, nu, delta float64, upper bool) float64 {
	if upper {
		t, delta = -t, -delta
	}
	lead := 0.5*math.Log(nu/math.Pi) - stirling(nu/2)
	g := func(v float64) float64 {
		h := math.Expm1(2 * v)
		body := 2*v - h
		if math.Abs(h) < 0.4 {
			body = logDeviance(h)
		}
		return lead + 0.5*nu*body + lnNormalLower(t*math.Exp(v)-delta)
	}
	peak, top := climb(g, -300, 300, 0, 0.1)
	var breaks []float64
	add := func(v float64) {
		if v > -300 && v < 8 {
			breaks = append(breaks, v)
		}
	}
	for k := -30.0; k <= 30; k++ {
		add(peak + math.Copysign(k*k, k)*0.05/math.Sqrt(2*nu))
		add(math.Copysign(k*k, k) * 0.1 / math.Sqrt(2*nu))
		add(peak + k*2)
		if q := (delta + k/2) / t; q > 0 {
			add(math.Log(q))
		}
	}
	breaks = sorted(breaks)
	return top + math.Log(numeric.Integrate(func(v float64) float64 { return math.Exp(g(v) - top) }, breaks, 1e-14))
}
