package effect

import "math"

// scoreMethod is the score test of two independent proportions: the estimated
// risks under the null are those of maximum likelihood. Miettinen and Nurminen
// (1985) with the factor N/(N-1), Farrington and Manning (1990) without (both
// from memory).
type scoreMethod struct {
	kind   contrast
	t      table
	factor float64 // N/(N-1), or 1
}

// Test implements Method.
func (m scoreMethod) Test(c float64) Test { return normalTest(m.kind.score(m.t, c, m.factor)) }

// Limits implements Method.
func (m scoreMethod) Limits(a float64) (low, high float64) {
	return m.kind.invertTable(m.t, m.Test, true).Limits(a)
}

// invertTable prepares the search for the limits of a test of a table.
func (k contrast) invertTable(t table, test func(c float64) Test, monotone bool) Inversion {
	est, _ := k.estimate(t)
	v := Inversion{Test: test, Scale: k.scale(), Low: k.low(), High: k.high(), Start: est, Monotone: monotone}
	// The step is a standard error with half an event added to every cell.
	u := table{t.x1 + 0.5, t.n1 + 1, t.x2 + 0.5, t.n2 + 1}
	if s, ok := k.variance(u); ok {
		v.Step = math.Sqrt(s)
	}
	return v
}

// score is the score statistic of an effect at the null c.
func (k contrast) score(t table, c, factor float64) float64 {
	switch k {
	case riskDifference:
		return riskDifferenceZ(t, c, factor)
	case riskRatio:
		return riskRatioZ(t, c, factor)
	case oddsRatio:
		return oddsRatioZ(t, c, factor)
	}
	panic("effect: unknown contrast")
}

// riskDifferenceZ is positive when the difference of risks lies above c.
func riskDifferenceZ(t table, c, factor float64) float64 {
	switch {
	case c < 0:
		return -riskDifferenceZ(t.swap(), -c, factor)
	case c > 1:
		return math.Inf(-1)
	case !(c >= 0):
		return 0
	}
	p1, q1, p2, q2 := riskDifferenceNull(t, c)
	return ratio(t.x1/t.n1-t.x2/t.n2-c, math.Sqrt((p1*q1/t.n1+p2*q2/t.n2)*factor))
}

// riskDifferenceNull gives the risks and their complements of maximum
// likelihood with p1 - p2 = c, 0 <= c <= 1. Of p2 and q1, which add up to
// 1 - c, the smaller is solved for, so that neither loses digits.
func riskDifferenceNull(t table, c float64) (p1, q1, p2, q2 float64) {
	w := 1 - c
	if c == 0 {
		p := t.s() / t.size()
		q := (t.y1() + t.y2()) / t.size()
		return p, q, p, q
	}
	if w == 0 {
		return 1, 0, 0, 1
	}
	half := w / 2
	if riskScore(t, c, w, half) <= 0 {
		p2 = riskRoot(t, c, w)
		q1 = w - p2
	} else { // the same with events and non-events exchanged
		q1 = riskRoot(table{t.y2(), t.n2, t.y1(), t.n1}, c, w)
		p2 = w - q1
	}
	return p2 + c, q1, p2, q1 + c
}

// riskScore is the derivative of the log-likelihood at p2 = p, p1 = p + c;
// w = 1 - c. It falls in p.
func riskScore(t table, c, w, p float64) float64 {
	return over(t.x2, p) - over(t.y2(), 1-p) + over(t.x1, p+c) - over(t.y1(), w-p)
}

// over is x/p with 0/0 = 0.
func over(x, p float64) float64 {
	if x == 0 {
		return 0
	}
	return x / p
}

// riskRoot is the root of riskScore in [0, w/2], where the score is not
// positive at w/2. It starts from the trigonometric solution of the cubic
// equation, good to 1e-6 for rare events, and polishes it by Newton's method
// kept inside a shrinking bracket.
func riskRoot(t table, c, w float64) float64 {
	if t.x2 == 0 && riskScore(t, c, w, 0) <= 0 {
		return 0
	}
	lo, hi := 0.0, w/2
	p := riskCubic(t, c)
	if !(p > lo && p < hi) {
		p = hi / 2
	}
	for range 200 {
		f := riskScore(t, c, w, p)
		switch {
		case f > 0:
			lo = p
		case f < 0:
			hi = p
		default:
			return p
		}
		slope := over(t.x2, p*p) + over(t.y2(), (1-p)*(1-p)) + over(t.x1, (p+c)*(p+c)) + over(t.y1(), (w-p)*(w-p))
		next := p + f/slope
		if !(next > lo && next < hi) {
			next = lo + (hi-lo)/2
			if lo == 0 {
				next = hi / 16
			}
		}
		if math.Abs(next-p) <= 0x1p-50*p {
			return next
		}
		p = next
	}
	return p
}

// riskCubic solves the likelihood equation of the risk difference in closed
// form (Farrington and Manning 1990, from memory).
func riskCubic(t table, c float64) float64 {
	n, s := t.size(), t.s()
	l2 := (t.n1+2*t.n2)*c - n - s
	l1 := (t.n2*c-n-2*t.x2)*c + s
	l0 := t.x2 * c * (1 - c)
	b := l2 / (3 * n)
	q := b*b*b - l1*l2/(6*n*n) + l0/(2*n)
	p := math.Sqrt(math.Max(0, b*b-l1/(3*n)))
	if q < 0 {
		p = -p
	}
	if p == 0 {
		return -b
	}
	angle := math.Min(1, math.Max(-1, q/(p*p*p)))
	return 2*p*math.Cos((math.Pi+math.Acos(angle))/3) - b
}

// riskRatioZ is positive when the ratio of risks lies above c.
func riskRatioZ(t table, c, factor float64) float64 {
	switch {
	case c > 1:
		return -riskRatioZ(t.swap(), 1/c, factor)
	case c < 0:
		return math.Inf(1)
	case !(c >= 0):
		return 0
	}
	p1, q1, p2, q2 := riskRatioNull(t, c)
	return ratio(t.x1/t.n1-c*t.x2/t.n2, math.Sqrt((p1*q1/t.n1+c*c*p2*q2/t.n2)*factor))
}

// riskRatioNull gives the risks of maximum likelihood with p1 = c·p2,
// 0 <= c <= 1. The discriminant of the quadratic and both complements are
// written as sums of positive terms, so that risks near 0 and near 1 keep
// their digits.
func riskRatioNull(t table, c float64) (p1, q1, p2, q2 float64) {
	y1, y2, s := t.y1(), t.y2(), t.s()
	b := t.n1*c + t.x1 + t.n2 + t.x2*c
	d := (1-c)*t.size() - y1 + c*y2
	k := 4 * c * y1 * y2
	r := math.Sqrt(d*d + k)
	up, down := r+d, r-d // r > |d|: rewrite the one that cancels
	switch {
	case d > 0:
		down = k / up
	case d < 0:
		up = k / down
	}
	p2 = 2 * s / (b + r)
	q2 = (2*y2 + down) / (b + r)
	return c * p2, (2*c*y1 + up) / (b + r), p2, q2
}

// oddsRatioZ is positive when the ratio of odds lies above c.
func oddsRatioZ(t table, c, factor float64) float64 {
	switch {
	case c > 1:
		return -oddsRatioZ(t.swap(), 1/c, factor)
	case c < 0:
		return math.Inf(1)
	case !(c >= 0) || t.s() == 0 || t.y1()+t.y2() == 0:
		return 0
	case c == 0:
		if t.x1 > 0 && t.y2() > 0 {
			return math.Inf(1)
		}
		return 0
	}
	p1, q1, p2, q2 := oddsRatioNull(t, c)
	v1, v2 := t.n1*p1*q1, t.n2*p2*q2
	// x1 - n1·p1 in the one of its four equal forms that loses fewest digits.
	excess, least := t.x1-t.n1*p1, t.x1+t.n1*p1
	for _, form := range [...][2]float64{{t.n1 * q1, t.y1()}, {t.n2 * p2, t.x2}, {t.y2(), t.n2 * q2}} {
		if size := form[0] + form[1]; size < least {
			excess, least = form[0]-form[1], size
		}
	}
	return ratio(excess, math.Sqrt(factor*v1/(v1+v2)*v2))
}

// oddsRatioNull gives the risks of maximum likelihood with the odds ratio c,
// 0 < c <= 1, by sums of positive terms as in riskRatioNull.
func oddsRatioNull(t table, c float64) (p1, q1, p2, q2 float64) {
	s, y := t.s(), t.y1()+t.y2()
	b := c*t.n1 + t.n2 + s*(1-c)
	e := t.n2 - s*(1-c)
	cn := c * t.n1
	r := math.Sqrt(cn*cn + 2*cn*(t.n2+s*(1-c)) + e*e)
	f := cn + e - 2*c*s
	up := r + f
	if f < 0 {
		up = 4 * s * c * y / (r - f)
	}
	p2, q2 = 2*s/(b+r), up/(b+r)
	m := q2 + c*p2
	return c * p2 / m, q2 / m, p2, q2
}

// scoreOf makes the score methods: with the factor N/(N-1) or, under the
// name farrington-manning, without.
func scoreOf(k contrast, word string) analysis {
	return func(in Input) (*Inference, *Problem) {
		t, bad := twoProportionsInput(in)
		if bad = first(bad, noSystematic(word, in), unstratified(word, in)); bad != nil {
			return nil, bad
		}
		factor := 1.0
		if word == "score" {
			if !(t.size() > 1) {
				return nil, problem("S101", tooFewOf, "both groups, divided by the design effect,", t.size(), 1)
			}
			factor = t.size() / (t.size() - 1)
		}
		inf := twoProportionsInference(in, k, word, t, scoreMethod{k, t, factor})
		approximates(inf, in, k, t)
		return inf, nil
	}
}

// ScoreZ is the score statistic of methods.md B9 for "risk-difference",
// "risk-ratio" or "odds-ratio" at the null c, with the factor N/(N-1). It does
// not allocate; simulations and exact sums over tables call it. ok is false
// for any other measure.
func ScoreZ(measure string, x1, n1, x2, n2, c float64) (z float64, ok bool) {
	t := table{x1, n1, x2, n2}
	factor := t.size() / (t.size() - 1)
	switch measure {
	case "risk-difference":
		return riskDifferenceZ(t, c, factor), true
	case "risk-ratio":
		return riskRatioZ(t, c, factor), true
	case "odds-ratio":
		return oddsRatioZ(t, c, factor), true
	}
	return 0, false
}
