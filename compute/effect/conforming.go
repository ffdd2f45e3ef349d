package effect

import (
	"math"
	"slices"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// conformingOne is the kernel of the share of a normal population on the right
// side of one limit: K = distance of the mean from the limit in standard
// deviations, inward. It is exact: the dual of the one-sided tolerance limit.
type conformingOne struct{ N, K float64 }

// Test implements Method.
func (m conformingOne) Test(c float64) Test {
	root := math.Sqrt(m.N)
	out := Test{Value: m.K, DF: m.N - 1, Kind: "t"}
	switch {
	case c <= 0:
		out.Up = sureTail.Complement()
	case c >= 1:
		out.Up = sureTail
	default:
		out.Up = dist.NoncentralTUpper(root*m.K, m.N-1, -root*dist.NormalQuantile(c))
	}
	out.Down = out.Up.Complement()
	return out
}

// Limits implements Method.
func (m conformingOne) Limits(a float64) (low, high float64) {
	switch {
	case !(a > 0):
		return 0, 1
	case a >= 1:
		return 1, 0
	}
	root, nu := math.Sqrt(m.N), m.N-1
	return dist.NormalUpper(-dist.NoncentralTDelta(a, root*m.K, nu) / root).P,
		dist.NormalUpper(dist.NoncentralTDelta(a, -root*m.K, nu) / root).P
}

// conformingBoth is the kernel of the share between two limits, in units of
// the standard deviation: Half the width and the distance Off of the mean from
// the middle. The lower side is a generalised pivot (Weerahandi 1993, from
// memory), which is safe; the upper is bounded by the one-sided shares.
type conformingBoth struct {
	N, Half, Off float64
	left, right  conformingOne
}

// Test implements Method.
func (m conformingBoth) Test(c float64) Test {
	out := Test{Value: m.Off, DF: m.N - 1, Kind: "exact"}
	switch {
	case c <= 0:
		out.Up, out.Down = sureTail.Complement(), sureTail
		return out
	case c >= 1:
		out.Up, out.Down = sureTail, sureTail.Complement()
		return out
	}
	l, r := m.left.Test(c), m.right.Test(c)
	out.Down = dist.TwoSided(l.Down, r.Down)
	// The share is at most that inside either limit alone, so its p is at
	// least either's.
	if math.Min(l.Up.Q, r.Up.Q) < 1e-17 {
		out.Up = sureTail
		return out
	}
	out.Up = dist.TailOf(math.Min(1, m.up(c)))
	return out
}

// down is the downward half of Test, which costs little of the whole.
func (m conformingBoth) down(c float64) Test {
	if c <= 0 || c >= 1 {
		return m.Test(c)
	}
	return Test{Down: dist.TwoSided(m.left.Test(c).Down, m.right.Test(c).Down), Kind: "exact"}
}

// up is the probability, over the pivots of mean and spread, that the share
// is at most c: 1 where even a centred population falls short of it.
func (m conformingBoth) up(c float64) float64 {
	nu := m.N - 1
	c = math.Max(c, leastShare) // p rises with c, so that less is never claimed; below, squares underflow
	q := 1 - c
	z := dist.NormalQuantile(q / 2)
	if c < smallShare { // 1 - c would lose the digits of a small share
		z = math.Sqrt2 * math.Erfinv(c)
	}
	if m.Half == 0 || math.IsInf(z/m.Half, 1) {
		return 1 // no room between the limits at all
	}
	v0 := z / m.Half // below this V = s/sigma the spread alone is too large
	short := dist.ChiSquareUpper(nu*v0*v0, nu).Q
	root := math.Sqrt(m.N)
	ln0 := math.Log(nu)/2 - math.Log(math.Pi)/2 - stirlingRest(nu/2)
	zq := dist.NormalQuantile(q)
	f := func(v float64) float64 {
		d := 0.0
		if c < smallShare {
			d = spareOfShare(m.Half*v, c)
		} else {
			d = spare(m.Half*v, q, zq)
		}
		inside := upper((m.left.K*v-d)*root) + upper((m.right.K*v-d)*root)
		h := v*v - 1
		ln := math.Log1p(h)
		if math.Abs(h) > 0.5 { // where h has lost the digits of v
			ln = 2 * math.Log(v)
		}
		return inside * math.Exp(ln0+nu*(ln-h)/2) // times v, for dv = v ds²
	}
	v0 = math.Max(v0, 1e-300)
	// In s = √ln(v/v0) the integrand is smooth where the room vanishes.
	return short + numeric.Integrate(func(s float64) float64 { return 2 * s * f(v0*math.Exp(s*s)) }, m.breaks(v0, nu), 1e-11)
}

// breaks are where panels of the integral in s = √ln(V/v0) begin, to where
// both V and its tails are done: evenly spaced, and around the bulk of V.
func (m conformingBoth) breaks(v0, nu float64) []float64 {
	at := func(v float64) float64 { return math.Sqrt(math.Log(v / v0)) }
	top := at(math.Max(v0, 1) + 45/math.Sqrt(nu))
	points := []float64{0, top}
	for s := 0.25; s < top; s += math.Max(0.25, top/40) {
		points = append(points, s)
	}
	for _, k := range []float64{-8, -4, -2, -1, 0, 1, 2, 4, 8} {
		if v := 1 + k/math.Sqrt(2*nu); v > v0 && at(v) < top {
			points = append(points, at(v))
		}
	}
	slices.Sort(points)
	return points
}

// spare is d <= a with P(Z > d) + P(Z > 2a-d) = q: how near to a limit, in
// standard deviations, the mean may come when the limits are 2a apart. zq is
// the normal deviate of q, where the search starts.
func spare(a, q, zq float64) float64 {
	if far := 2*a - zq; far > 0 && upper(far) < 1e-17*q {
		return zq // the far side weighs nothing
	}
	if zq > a {
		return a
	}
	lo, hi := zq, a // the far side only asks for more distance
	// Near the middle the share falls with the square of the distance from it.
	d := math.Max(zq, a-math.Sqrt(math.Max(0, q-2*upper(a))/(a*density(a))))
	for range 60 {
		out := upper(d) + upper(2*a-d) - q
		if out > 0 {
			lo = d
		} else {
			hi = d
		}
		next := d + out/(density(d)-density(2*a-d))
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		if math.Abs(next-d) <= 1e-14*(1+math.Abs(d)) {
			return next
		}
		d = next
	}
	return d
}

// leastShare is the least share that up tells from a smaller one.
const leastShare = 1e-150

// smallShare is where 1 - c begins to lose the digits of c.
const smallShare = 1e-3

// spareOfShare is spare for a small share c: the distance left of the nearer
// limit when the mean lies h from the middle and P(h-a < Z < h+a) = c. The
// search is by Newton's steps in h², in which ln of that probability is nearly
// straight, between 0 and where the nearer limit alone would leave c.
func spareOfShare(a, c float64) float64 {
	flat := -2 * math.Log(c/(2*a*density(0))) // h² where a is nothing
	if a < 1e-4 {
		u := flat
		for range 4 {
			u = flat + 2*math.Log1p(a*a*(u-1)/6+a*a*a*a*(u*u-6*u+3)/120)
		}
		return a - math.Sqrt(math.Max(0, u))
	}
	z := a - math.Log(2*c) // beyond the normal quantile of c
	lo, hi := 0.0, z*z
	u := flat
	if !(u > lo && u < hi) || a > 1 {
		u = square(math.Max(0, a+dist.NormalQuantile(c)))
	}
	for range 100 {
		h := math.Sqrt(u)
		p := around(h, a)
		f := math.Log(p / c)
		if f > 0 {
			lo = u
		} else {
			hi = u
		}
		slope := a * density(a) // at h = 0
		if h > 0 {
			slope = (density(h-a) - density(h+a)) / (2 * h)
		}
		next := u + f*p/slope
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		if math.Abs(next-u) <= 1e-14*next+1e-16 {
			u = next
			break
		}
		u = next
	}
	return a - math.Sqrt(u)
}

// around is P(h-a < Z < h+a), h >= 0, without loss where a is small.
func around(h, a float64) float64 {
	switch {
	case a > 1 && h < a:
		return 1 - upper(h+a) - upper(a-h)
	case a > 1:
		return upper(h-a) - upper(h+a)
	}
	sum := 0.0
	for _, n := range legendre {
		sum += n.W * density(h+n.X*a)
	}
	return sum * a
}

var legendre = numeric.Legendre20()

// upper is P(Z > z) alone, for integrands.
func upper(z float64) float64 { return math.Erfc(z/math.Sqrt2) / 2 }

func density(z float64) float64 { return math.Exp(-z*z/2) / math.Sqrt(2*math.Pi) }

// stirlingRest is ln Gamma(u) less Stirling's leading terms.
func stirlingRest(u float64) float64 {
	if u >= 10 {
		r := 1 / (u * u)
		return (1./12 - r*(1./360-r*(1./1260-r*(1./1680-r/1188)))) / u
	}
	g, _ := math.Lgamma(u)
	return g - (u-0.5)*math.Log(u) + u - math.Log(2*math.Pi)/2
}

// Limits implements Method by inversion. At levels of a half and more the
// limits enclose the estimate; where the search has run out of digits they are
// moved to it.
func (m conformingBoth) Limits(a float64) (low, high float64) {
	start := shareBetween(m.left.K, m.right.K)
	v := Inversion{Test: m.Test, Scale: record.Logit, Low: 0, High: 1, Start: math.Min(math.Max(start, 1e-300), 1-1e-16), Step: 0.5, Monotone: true}
	encloses := a <= 0.25
	if !encloses || start >= leastShare { // below, up does not tell shares apart
		low = v.side(a, -1)
	}
	v.Test = m.down
	if high = v.side(a, +1); high <= math.SmallestNonzeroFloat64 {
		high = 0
	}
	if encloses {
		return math.Min(low, start), math.Max(high, start)
	}
	if a < 0.5 {
		low = math.Min(low, high)
	}
	return low, high
}

// shareBetween is P(-lo < Z < hi) from the tails on the side away from the
// nearer limit, where a small share keeps its digits.
func shareBetween(lo, hi float64) float64 {
	near, far := math.Min(lo, hi), math.Max(lo, hi)
	return math.Max(0, dist.NormalUpper(-near).P-dist.NormalUpper(far).P)
}

func conformingNormal(in Input) (*Inference, *Problem) {
	return conforming(in, sampleOf(in.Sample, 1), "the sample")
}

// conforming judges the share of a normal population inside the limits.
func conforming(in Input, s sample, who string) (*Inference, *Problem) {
	if bad := spreadOnly(in, s, who, "normal"); bad != nil {
		return nil, bad
	}
	lo, hi := (s.mean-in.Spec[0])/s.sd, (in.Spec[1]-s.mean)/s.sd // room on each side
	if math.IsInf(lo, 1) && math.IsInf(hi, 1) {
		return nil, problem("S103", outsideRange, "spec", "infinite on both sides")
	}
	inf := &Inference{Word: "normal", N: s.n, DF: result.Some(s.n - 1), Notes: []result.Note{note("S221", needsNormal, "a share outside limits")}}
	switch {
	case math.IsInf(lo, 1):
		inf.Method = conformingOne{s.n, hi}
	case math.IsInf(hi, 1):
		inf.Method = conformingOne{s.n, lo}
	default:
		inf.Method = conformingBoth{N: s.n, Half: (lo + hi) / 2, Off: (lo - hi) / 2, left: conformingOne{s.n, lo}, right: conformingOne{s.n, hi}}
		inf.Costly = true
	}
	inf.Estimate = shareBetween(lo, hi)
	shareVariance(inf)
	inf.Checks = []result.Check{check("normal-values", s.shows(""))}
	return inf, nil
}

// shareVariance takes estimate and variance on the logit scale from the 95 %
// interval (methods.md 0).
func shareVariance(inf *Inference) {
	low, high := inf.Method.Limits(0.025)
	l, u := To(record.Logit, low), To(record.Logit, high)
	y := To(record.Logit, inf.Estimate)
	if math.IsInf(l, 0) || math.IsInf(u, 0) || math.IsInf(y, 0) {
		return
	}
	se := (u - l) / (2 * dist.NormalQuantile(0.025))
	inf.Y, inf.V = result.Some(y), result.Some(se*se)
}

func conformingAny(in Input) (*Inference, *Problem) {
	return conformingCount(in, in.Sample.Values)
}

// conformingCount judges the share by the count of values inside: no shape is
// assumed.
func conformingCount(in Input, values []float64) (*Inference, *Problem) {
	if values == nil {
		return nil, problem("S104", needsData, "any")
	}
	inside := 0.0
	for _, x := range values {
		if in.Spec[0] <= x && x <= in.Spec[1] {
			inside++
		}
	}
	in.Sample.N, in.Sample.Events = float64(len(values)), inside
	inf, bad := counts["proportion"]["exact"](in)
	if bad != nil {
		return nil, bad
	}
	inf.Word = "any"
	return inf, nil
}

// agreementNormal judges the share of paired differences inside the limits,
// and shows the limits of agreement: mean ± 1.96 sd with exact limits of
// their own.
func agreementNormal(in Input) (*Inference, *Problem) {
	s := summary(in.Pairs.N, in.Pairs.Mean, in.Pairs.SD, 1)
	if d := differences(in.Pairs); d != nil {
		s = sampleOfValues(d, 1)
	}
	inf, bad := conforming(in, s, "the difference within pairs")
	if bad != nil {
		return nil, bad
	}
	inf.Checks = append(inf.Checks, limitsOfAgreement(s))
	return inf, nil
}

func agreementAny(in Input) (*Inference, *Problem) {
	return conformingCount(in, differences(in.Pairs))
}

// agreementSpread is how many standard deviations the limits of agreement lie
// from the mean difference.
const agreementSpread = 1.96

// limitsOfAgreement are mean ± 1.96 sd, each with exact 95 % limits from the
// noncentral t distribution.
func limitsOfAgreement(s sample) result.Check {
	root := math.Sqrt(s.n)
	near, far := s.sd*noncentralT(0.975, s.n-1, agreementSpread*root)/root, s.sd*noncentralT(0.025, s.n-1, agreementSpread*root)/root
	show := func(what string, v float64) result.Shown { return result.Shown{What: what, Value: v} }
	return result.Check{Assumption: "limits-of-agreement", Shows: []result.Shown{
		show("lower limit of agreement", s.mean-agreementSpread*s.sd), show("its 95 % interval, low", s.mean-far), show("its 95 % interval, high", s.mean-near),
		show("upper limit of agreement", s.mean+agreementSpread*s.sd), show("its 95 % interval, low", s.mean+near), show("its 95 % interval, high", s.mean+far)}}
}

// noncentralT is t with P(T > t) = p for noncentrality delta >= 0.
func noncentralT(p, nu, delta float64) float64 {
	h := func(t float64) float64 {
		return deviate(dist.NoncentralTUpper(t, nu, delta)) - dist.NormalQuantile(p)
	}
	t, _ := numeric.Invert(h, delta, 1+delta/math.Sqrt(2*nu), math.Inf(-1), math.Inf(1))
	return t
}
