#!/usr/bin/env python3
"""Writes the mpmath rows of dist.json: python3 dist_rows.py > rows.json

Every value is computed at 50 or more digits from the exact binary value of
the arguments, by series of positive terms or by quadrature, and printed with
25. Needs mpmath 1.2.1 only. dist_rows.R adds the rows made with R.
"""
import json
import sys
from fractions import Fraction
from math import comb
import mpmath as mp
from mpmath import mpf

mp.mp.dps = 60
GROUPS = []


def group(fn, call, rows):
    GROUPS.append({"fn": fn, "program": "Python 3 with mpmath", "version": mp.__version__,
                   "call": call, "date": "2026-12-01", "digits": 25, "rows": rows})


def s(x):
    return mp.nstr(x, 25)


def row(args, lnp=None, lnq=None, value=None):
    r = {"args": [float(a) for a in args]}
    if lnp is not None:
        r["lnp"] = s(lnp)
    if lnq is not None:
        r["lnq"] = s(lnq)
    if value is not None:
        r["value"] = s(value)
    return r


def lnbeta(a, b):
    return mp.loggamma(a) + mp.loggamma(b) - mp.loggamma(a + b)


def ln_ibeta(x, y, a, b):
    """ln I_x(a,b): x^a y^b/(aB) times the series 1 + (a+b)/(a+1) x + ...; by
    the continued fraction 8.17.22 of the DLMF where that is slow."""
    if a + b > 3000:
        return a * mp.log(x) + b * mp.log(y) - mp.log(a) - lnbeta(a, b) + mp.log(fraction(x, a, b))
    term, total, k = mpf(1), mpf(1), 0
    while term > total * mpf(10) ** -45:
        term = term * (a + b + k) / (a + 1 + k) * x
        total += term
        k += 1
    return a * mp.log(x) + b * mp.log(y) - mp.log(a) - lnbeta(a, b) + mp.log(total)


def fraction(x, a, b):
    """1/(1 + d1/(1 + d2/(1 + ...))), modified Lentz at full precision."""
    tiny = mpf(10) ** -500
    f, c, d, m = mpf(1), mpf(1), mpf(0), 0
    while True:
        for odd in (True, False):
            if odd:
                k = -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1))
            else:
                k = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m))
            d = 1 + k * d
            c = 1 + k / c
            d = 1 / (d or tiny)
            c = c or tiny
            f *= c * d
            if odd:
                m += 1
        if abs(c * d - 1) < mpf(10) ** -48:
            return 1 / f


def ibeta_pair(x, y, a, b):
    """Both tails; the series is run on the smaller side and the larger one
    taken as its complement, at 60 digits and more."""
    if x * (a + b) < a:
        lo = ln_ibeta(x, y, a, b)
        return lo, mp.log1p(-mp.exp(lo))
    up = ln_ibeta(y, x, b, a)
    return mp.log1p(-mp.exp(up)), up


def normal():
    rows = []
    for z in [0, 0.5, 1.96, -1.5, 5, -8.25, 10, 20, 30, 36, 36.5, 37.0471, 38, 45, -50, 100, 1000, 1e6]:
        f = lambda v: mp.log(mp.erfc(mpf(v) / mp.sqrt(2)) / 2)
        rows.append(row([z], f(z), f(-z)))
    group("NormalUpper", "log(erfc(z/sqrt(2))/2)", rows)
    rows = []
    for lnp in [-0.01, -0.5, -1, -5, -50, -600, -690, -700, -1000, -1e5, -1e8]:
        p = mpf(lnp)
        z = mp.sqrt(-2 * p) if lnp < -2 else mpf(-1)
        z = mp.findroot(lambda v: mp.log(mp.erfc(v / mp.sqrt(2)) / 2) - p, z)
        rows.append(row([lnp], value=z))
    group("NormalQuantileLn", "findroot of log(erfc(z/sqrt(2))/2) - lnp", rows)


def student():
    rows = []
    for nu in [1, 2, 3.7, 10, 45.506534, 300, 1000, 1500, 1e5, 1e6, 1e8]:
        for t in [1e-3, 0.7, 1.5, 2, 3, 8, 20, 30, 37, 100, 1e4, 1e8, 1e30]:
            n, t_ = mpf(nu), mpf(t)
            x, y = n / (n + t_ ** 2), t_ ** 2 / (n + t_ ** 2)
            if nu > 1e4 and t < 3 and t != 1.5:
                continue
            lo, up = ibeta_pair(x, y, n / 2, mpf(1) / 2)
            lnp = lo - mp.log(2)
            if lnp < -1e7:
                continue
            rows.append(row([t, nu], lnp, mp.log1p(-mp.exp(lnp))))
    group("TUpper", "half the incomplete beta series at nu/(nu+t^2), a = nu/2, b = 1/2", rows)


def beta():
    rows = []
    d = 2.0 ** -40
    cases = []
    for a, b in [(0.5, 0.5), (1, 1e6), (2, 3), (0.5, 400), (30, 7), (1000, 1), (5e5, 5e5), (1e6, 3), (1e6, 1e6),
                 (1e5, 9e5), (3e7, 7e7)]:
        m, sd = a / (a + b), (a * b / (a + b) ** 2 / (a + b + 1)) ** 0.5
        for k in [-30, -20, -8, -3, -1, -0.2, 0.3, 2, 5, 15, 36]:
            x = round((m + k * sd) / d) * d
            if 0 < x < 1:
                cases.append((x, a, b))
    for e in [1e-3, 2.0 ** -30, 2.0 ** -60, 2.0 ** -300]:
        cases += [(e, 2, 3), (e, 0.5, 7), (e, 3, 1e6)]
    for x, a, b in cases:
        lo, up = ibeta_pair(mpf(x), 1 - mpf(x), mpf(a), mpf(b))
        if max(-lo, -up) < 1e5:
            rows.append(row([x, 1 - x, a, b], lo, up))
    group("BetaLower", "x^a y^b/(a B) sum of (a+b)_k/(a+1)_k x^k, smaller side", rows)


def fdist():
    rows = []
    for f, d1, d2 in [(0.1, 3, 10), (1, 1, 1), (4, 3, 10), (50, 2, 30), (1e4, 5, 7), (1e9, 2, 68), (1.2, 1000, 1e5),
                      (2, 1e4, 1e4), (1e-20, 4, 9), (1e-60, 10, 9), (30, 40, 400), (1.05, 1e6, 1e6), (1e60, 10, 10)]:
        g = mpf(f)
        y, x = mpf(d2) / (d2 + d1 * g), d1 * g / (d2 + d1 * g)
        lo, up = ibeta_pair(y, x, mpf(d2) / 2, mpf(d1) / 2)
        rows.append(row([f, d1, d2], lo, up))
    group("FUpper", "incomplete beta series at d2/(d2+d1 f)", rows)


def binomial():
    rows = []
    for k, n, p in [(7, 12, 0.25), (0, 10, 0.5), (10, 10, 0.125), (81, 263, 0.25), (1, 1000, 2.0 ** -14),
                    (500000, 1e6, 0.5), (501500, 1e6, 0.5), (515000, 1e6, 0.5), (518000, 1e6, 0.5), (482000, 1e6, 0.5),
                    (60, 1e6, 2.0 ** -16), (250, 1e6, 2.0 ** -16), (990000, 1e6, 0.9921875), (999999, 1e6, 0.9921875)]:
        k, n = int(k), int(n)
        pp, qq = mpf(p), 1 - mpf(p)
        lnpmf = (mp.loggamma(n + 1) - mp.loggamma(k + 1) - mp.loggamma(n - k + 1)
                 + k * mp.log(pp) + (n - k) * mp.log(qq))
        # P(X >= k) and P(X <= k) by adding probabilities outward from k
        def tail(step):
            term, total, j = mpf(1), mpf(1), k
            while True:
                if step > 0:
                    if j == n:
                        break
                    term *= mpf(n - j) / (j + 1) * pp / qq
                else:
                    if j == 0:
                        break
                    term *= mpf(j) / (n - j + 1) * qq / pp
                j += step
                total += term
                if term < total * mpf(10) ** -40:
                    break
            return total
        up, lo = lnpmf + mp.log(tail(1)), lnpmf + mp.log(tail(-1))
        rows.append({"args": [k, n, p, float(1 - p)], "lnp": s(up), "lnq": s(lo), "value": s(lnpmf)})
    group("Binomial", "sums of probabilities outward from k: lnp is P(X >= k), lnq is P(X <= k), value is ln P(X = k)", rows)


def gamma_pair(a, x):
    """ln of lower and upper regularised gamma; the lower by its series at
    enough digits that the complement keeps 40."""
    lead = a * mp.log(x) - x - mp.loggamma(a + 1)
    with mp.workdps(60):
        term, total, k = mpf(1), mpf(1), 1
        while term > total * mpf(10) ** -58:
            term *= x / (a + k)
            total += term
            k += 1
        lo = lead + mp.log(total)
        if x < a:
            return lo, mp.log1p(-mp.exp(lo))
    # upper by Legendre's fraction, from the bottom up with many levels
    n = int(40 + 60 * mp.sqrt(a) / max(1, float((x - a) / mp.sqrt(a)))) if a > 100 else 3000
    f = x + 2 * n + 1 - a
    for j in range(n, 0, -1):
        f = x + 2 * (j - 1) + 1 - a - j * (j - a) / f
    up = a * mp.log(x) - x - mp.loggamma(a) - mp.log(f)
    assert abs(mp.exp(up) + mp.exp(lo) - 1) < mpf(10) ** -25, (a, x)
    return mp.log1p(-mp.exp(up)), up


def chisquare():
    rows = []
    for nu in [0.5, 1, 2, 3, 7, 50, 999, 1e4, 1e6]:
        for k in [-35, -10, -3, -0.5, 0.5, 2, 8, 20, 60, 200]:
            x = nu + k * (2 * nu) ** 0.5
            if x <= 0:
                x = nu * 10.0 ** k
            if nu > 1e5 and abs(k) > 40:
                continue
            lo, up = gamma_pair(mpf(nu) / 2, mpf(x) / 2)
            rows.append(row([x, nu], up, lo))
    group("ChiSquareUpper", "power series of the lower, Legendre fraction of the upper incomplete gamma", rows)


def poisson():
    rows = []
    for x, mu in [(3, 5), (20, 5), (0, 2.5), (300, 20), (3, 700), (1e6, 1e6), (1038000, 1e6), (963000, 1e6), (100, 1e-3),
                  (50, 1e-5)]:
        k, m = int(x), mpf(mu)
        lnpmf = k * mp.log(m) - m - mp.loggamma(k + 1)
        def tail(step):
            term, total, j = mpf(1), mpf(1), k
            while term > total * mpf(10) ** -40:
                if step > 0:
                    term *= m / (j + 1)
                else:
                    if j == 0:
                        break
                    term *= j / m
                j += step
                total += term
            return total
        up, lo = lnpmf + mp.log(tail(1)), lnpmf + mp.log(tail(-1))
        rows.append({"args": [x, mu], "lnp": s(up), "lnq": s(lo), "value": s(lnpmf)})
    group("Poisson", "sums of probabilities outward from x: lnp is P(X >= x), lnq is P(X <= x), value is ln P(X = x)", rows)


def ln_phi(z):
    return mp.log(mp.erfc(-z / mp.sqrt(2)) / 2)


def peak_integral(g, width, extra):
    """ln of the integral of exp(g) over the line, g unimodal: the peak by
    hill climbing, then Gauss-Legendre between points one width apart, plus
    the extra points, until e^-75."""
    v, step = mpf(0), mpf(1)
    while step > width / 16:
        moved = True
        while moved:
            moved = False
            for d in (step, -step):
                if g(v + d) > g(v):
                    v += d
                    moved = True
        step /= 2
    top = g(v)
    pts = {v}
    for sign in (1, -1):
        a, h, n = v, width, 0
        while g(a) > top - 75:
            a += sign * h
            pts.add(a)
            n += 1
            if n % 4 == 0:
                h *= 2
    lo, hi = min(pts), max(pts)
    pts = sorted(pts | {e for e in extra if lo < e < hi})
    f = lambda t: mp.exp(g(t) - top)
    total = mpf(0)
    for a, b in zip(pts, pts[1:]):
        total += mp.quad(f, [a, b], method="gauss-legendre", maxdegree=5)
    return top + mp.log(total)


def noncentral_t():
    rows = []
    cases = [(2, 5, 30), (55, 30, 60), (2, 5, 1), (-1, 3, 2), (0.5, 1, 4), (1e5, 1, 3), (3, 1, -2), (10, 2.5, 0.7),
             (40, 9, 45), (-3, 12, 5), (1.7, 23, 2.4), (80, 100, 50), (-0.3, 30, 6), (12, 1000, 10), (5, 1e4, 20),
             (30, 1e5, 1e-3), (60, 1e8, 40), (20, 1e8, 45), (-25, 1e6, -3), (1e4, 4, 3), (1e5, 50, 1e5), (1e-3, 8, 20),
             (150, 40, 90), (0.1, 6, -35), (37.5, 15, 38.5)]
    with mp.workdps(40):
        for t, nu, delta in cases:
            tt, n, dd = mpf(t), mpf(nu), mpf(delta)
            lead = mp.log(2) + n / 2 * mp.log(n / 2) - mp.loggamma(n / 2)
            out = []
            for sgn in (-1, 1):
                def g(v):
                    return lead + n * v - n * mp.exp(2 * v) / 2 + ln_phi(sgn * (tt * mp.exp(v) - dd))
                turn = [mp.log((dd + k) / tt) for k in range(-14, 15, 2) if (dd + k) / tt > 0]
                # the product may be narrower than either factor
                w = 1 / mp.sqrt(2 * n)
                if (sgn > 0) != (tt * 1 > dd):
                    w /= 1 + abs(dd - tt) / (1 + mp.sqrt(1 + tt * tt / (2 * n)))
                out.append(peak_integral(g, w, turn))
            assert abs(mp.exp(out[0]) + mp.exp(out[1]) - 1) < mpf(10) ** -20, (t, nu, delta)
            rows.append(row([t, nu, delta], out[0], out[1]))
    group("NoncentralTUpper", "quadrature of Phi(+-(t u - delta)) over u = sqrt(chi2/nu), in ln u, 40 digits", rows)


def noncentral_chisquare():
    rows = []
    for x, nu, lam in [(20, 5, 3), (3.84, 1, 7.85), (0.5, 1, 30), (100, 9, 12), (700, 4, 10), (2, 12, 80), (1500, 30, 900),
                       (1e-6, 3, 2)]:
        up = lo = mpf(0)
        half = mpf(lam) / 2
        for j in range(0, 1500):
            w = mp.exp(-half + j * mp.log(half) - mp.loggamma(j + 1))
            l, u = gamma_pair(mpf(nu) / 2 + j, mpf(x) / 2)
            up += w * mp.exp(u)
            lo += w * mp.exp(l)
        assert abs(up + lo - 1) < mpf(10) ** -25
        rows.append(row([x, nu, lam], mp.log(up), mp.log(lo)))
    group("NoncentralChiSquareUpper", "Poisson mixture of incomplete gamma functions, 1500 terms", rows)


def hypergeometric():
    rows = []
    for x, n1, n2, ev, psi in [(7, 12, 12, 8, 1), (7, 12, 12, 8, 13.5), (5, 10, 5, 9, 0.25), (30, 263, 250, 81, 0.7),
                               (100, 1000, 900, 120, 1), (5, 1000, 900, 120, 1), (500500, 1e6, 1e6, 1e6, 1),
                               (510000, 1e6, 1e6, 1e6, 1), (513000, 1e6, 1e6, 1e6, 1), (487000, 1e6, 1e6, 1e6, 1),
                               (560500, 1e6, 1e6, 1e6, 1.5), (40, 1e6, 1e6, 60, 1), (60, 1e6, 1e6, 60, 0.01),
                               (1000, 1e6, 2e6, 1500, 2.5), (3, 1e6, 1e6, 1500, 0.2), (1, 5, 1e6, 4, 1e-9)]:
        x, n1, n2, ev = int(x), int(n1), int(n2), int(ev)
        ps = mpf(psi)
        lo, hi = max(0, ev - n2), min(n1, ev)
        def lnw(j):
            c = lambda n, k: mp.loggamma(n + 1) - mp.loggamma(k + 1) - mp.loggamma(n - k + 1)
            return c(n1, j) + c(n2, ev - j) + j * mp.log(ps)
        def run(j, step):
            term, total = mpf(1), mpf(1)
            while True:
                if step > 0:
                    if j >= hi:
                        break
                    term *= mpf((n1 - j) * (ev - j)) / ((j + 1) * (n2 - ev + j + 1)) * ps
                else:
                    if j <= lo:
                        break
                    term *= mpf(j * (n2 - ev + j)) / ((n1 - j + 1) * (ev - j + 1)) / ps
                j += step
                total += term
                if term < total * mpf(10) ** -40:
                    break
            return total
        base = lnw(x)
        up = base + mp.log(run(x, 1))
        down = base + mp.log(run(x, -1)) if x > lo else base
        with mp.workdps(60):
            whole_terms = mp.exp(up - base) + mp.exp(down - base) - 1
        z = base + mp.log(whole_terms)
        # run() stops where terms are small against the sum from x; when x is
        # not the mode terms first grow, so the sum is never cut too early.
        rows.append({"args": [x, n1, n2, ev, psi], "lnp": s(up - z), "lnq": s(down - z), "value": s(base - z)})
    group("Hypergeometric", "sums of weights outward from x: lnp is P(X >= x), lnq is P(X <= x), value is ln P(X = x)", rows)


def correlation():
    rows = []
    with mp.workdps(35):
        for r, rho, n in [(0.5, 0.3, 10), (0.99, 0.98, 5), (0.2, 0.8, 4), (-0.4, 0.6, 12), (0.9, 0.99, 3), (0.95, -0.5, 20),
                          (0.5, 0.3, 200), (0.7, 0.3, 1000), (0.1, 0.3, 1000), (0.31, 0.3, 20000), (-0.99, 0.99, 30),
                          (0.875, 0.9, 59), (0.875, 0.9, 61), (0.999, 0.9, 40)]:
            rr, rh, n_ = mpf(r), mpf(rho), mpf(n)
            z0, zeta = mp.atanh(rr), mp.atanh(rh)
            c = (mp.log(n_ - 2) + mp.loggamma(n_ - 1) + (n_ - 1) / 2 * mp.log(1 - rh ** 2)
                 - mp.log(2 * mp.pi) / 2 - mp.loggamma(n_ - mpf(1) / 2))
            def dens(z):
                q = mp.tanh(z)
                return mp.exp(c + (n_ - 2) / 2 * mp.log(1 - q ** 2) - (n_ - mpf(3) / 2) * mp.log(1 - rh * q)) \
                    * mp.hyp2f1(0.5, 0.5, n_ - mpf(1) / 2, (1 + rh * q) / 2)
            def far(sign):
                # widening panels, the first over a fall of about e^2,
                # outward from z0 until past the peak and small
                w = 2 / (mp.sqrt(n_) + n_ * mp.tanh(abs(z0 - zeta)))
                total, a, best = mpf(0), z0, mpf(0)
                while True:
                    b = a + sign * w
                    part = mp.quad(dens, [a, b], method="gauss-legendre", maxdegree=5) * sign
                    w = min(w * 1.25, 1 / mp.sqrt(n_))
                    total += part
                    best = max(best, part)
                    if part < best * mpf(10) ** -28 and (b - zeta) * sign > 0:
                        return total
                    if abs(b) > 40:
                        return total
                    a = b
            up, lo = far(1), far(-1)
            assert abs(up + lo - 1) < mpf(10) ** -16, (r, rho, n, up + lo)
            rows.append(row([r, rho, n], mp.log(up), mp.log(lo)))
    group("CorrelationUpper", "quadrature of Hotelling's density in atanh r with hyp2f1, 35 digits", rows)


def bivariate():
    rows = []
    with mp.workdps(30):
        for h, k, rho in [(1, -0.5, 0.7), (0, 0, 0.5), (0, 0, -0.5), (-2, -2.5, 0.9), (1.5, 1, -0.8), (-6, -7, 0.5),
                          (2, 2.25, 0.999), (-1, 0.5, 0.96), (-1, -1.5, -0.3), (0.25, 3, -0.95)]:
            r = mpf(rho)
            f = lambda x: mp.npdf(x) * mp.ncdf((k - r * x) / mp.sqrt(1 - r * r))
            cut = k / r if rho else 0
            pts = sorted(p for p in {mpf(-40), mpf(-12), mpf(-9), mpf(-7), mpf(-5), mpf(-3), mpf(-2), mpf(-1), mpf(0),
                                     mpf(1), mpf(2), mpf(cut) - 0.2, mpf(cut), mpf(cut) + 0.2} if p < h) + [mpf(h)]
            rows.append(row([h, k, rho], value=mp.quad(f, pts, maxdegree=9)))
    group("BivariateNormal", "quadrature of phi(x) Phi((k - rho x)/sqrt(1-rho^2)), 30 digits", rows)


def special():
    group("Ei", "ei(t)", [row([t], value=mp.ei(mpf(t))) for t in [1e-8, 0.1, 0.5, 1, 5, 20, 39.99, 40, 41, 60, 200, 700]])


def ranks():
    def counts(n, m):
        """number of m-subsets of 1..n+m by rank sum less its minimum"""
        g = [1] + [0] * (n * m)
        for i in range(1, m + 1):
            for u in range(n * m, n + i - 1, -1):
                g[u] -= g[u - n - i]
            for u in range(i, n * m + 1):
                g[u] += g[u - i]
        assert sum(g) == comb(n + m, m)
        return g
    rows = []
    for m, n, us in [(5, 6, [28, 15, 0, 30]), (1, 7, [3, 7]), (10, 10, [90, 51, 100]), (50, 50, [1250, 1600, 2200, 2499, 2500]),
                     (30, 45, [500, 675, 1300]), (150, 200, [15000, 20000, 29000])]:
        g = counts(n, m)
        for u in us:
            rows.append(row([m, n, u], mp.log(mp.mpf(sum(g[u:])) / comb(n + m, m)), None))
    group("RankSum", "exact integer counts (Gaussian binomial), P(U >= u)", rows)
    rows = []
    for n, vs in [(5, [15, 8, 0]), (10, [45, 30]), (50, [638, 900, 1275]), (200, [12000, 20000])]:
        g = [1]
        for i in range(1, n + 1):
            h = [0] * (len(g) + i)
            for v, c in enumerate(g):
                h[v] += c
                h[v + i] += c
            g = h
        for v in vs:
            rows.append(row([n, v], mp.log(mpf(sum(g[v:])) / 2 ** n), None))
    group("SignedRank", "exact integer counts, P(V >= v)", rows)


MAKERS = [normal, student, beta, fdist, binomial, chisquare, poisson, noncentral_t, noncentral_chisquare, hypergeometric,
          correlation, bivariate, special, ranks]
for make in [m for m in MAKERS if len(sys.argv) < 2 or m.__name__ in sys.argv[1:]]:
    print(make.__name__, file=sys.stderr)
    make()
json.dump(GROUPS, sys.stdout, indent=0)
