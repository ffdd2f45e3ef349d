#!/usr/bin/env python3
"""Writes combine.json: python3 combine_rows.py > combine.json

Combined p-values by routes other than the program's: exact rational sums for
edgington, Fourier inversion on the real line (Gil-Pelaez) for logit, the
closed law for the rest, the cut integral at 60 and more digits for harmonic.
Needs mpmath 1.2.1 only.
"""
import json
import sys
from fractions import Fraction
import mpmath as mp
from mpmath import mpf

mp.mp.dps = 60


def expand(p, times):
    return [mpf(v) for v in p] * times


def gamma_upper(k, x):
    """chi-square tail with 2k degrees of freedom at 2x: Poisson sum"""
    term = total = mp.exp(-x)
    for j in range(1, k):
        term *= x / j
        total += term
    return total


def fisher(p):
    return gamma_upper(len(p), -mp.fsum(mp.log(v) for v in p))


def pearson_q(p):
    """1 - P: the upper tail of the mirrored fisher"""
    return gamma_upper(len(p), -mp.fsum(mp.log(1 - v) for v in p))


def stouffer(p):
    z = mp.fsum(zscore(v) for v in p) / mp.sqrt(len(p))
    return mp.erfc(z / mp.sqrt(2)) / 2


def zscore(v):
    if v > mpf(1) / 2:
        return -zscore(1 - v)
    if v == mpf(1) / 2:
        return mpf(0)
    l = -2 * mp.log(v)
    z = mp.sqrt(max(l - mp.log(2 * mp.pi * l), mpf("0.1")))
    for _ in range(200):
        f = mp.log(mp.erfc(z / mp.sqrt(2)) / 2) - mp.log(v)
        d = f * mp.erfc(z / mp.sqrt(2)) / 2 / mp.npdf(z)
        z += d
        if abs(d) < mpf(10) ** -50:
            break
    return z


def tippett(p):
    return -mp.expm1(len(p) * mp.log1p(-min(p)))


def edgington(p):
    k = len(p)
    x = sum(Fraction(int(v * mpf(2) ** 1200)) / Fraction(2 ** 1200) for v in p)
    total, c = Fraction(0), Fraction(1)
    for j in range(k + 1):
        if x <= j:
            break
        total += (-1) ** j * c * (x - j) ** k
        c = c * (k - j) / (j + 1)
    num = mpf(total.numerator) / mpf(total.denominator)
    return num / mp.factorial(k)


def logit(p, extra):
    x, k = mp.fsum(mp.log((1 - v) / v) for v in p), len(p)
    with mp.workdps(60 + extra):
        f = lambda t: mp.sin(t * x) / t * (mp.pi * t / mp.sinh(mp.pi * t)) ** k
        top = (60 + extra) * mp.log(10) / k + 2
        n = int(abs(x) * top / 6) + 24
        pts = [top * mpf(i) / n for i in range(n + 1)]
        s = mp.quad(f, pts, method="gauss-legendre", maxdegree=6)
        return mpf(1) / 2 - s / mp.pi


def cauchy(p):
    t = mp.fsum(mp.cot(mp.pi * v) for v in p) / len(p)
    return mp.atan(1 / t) / mp.pi if t > 0 else 1 - mp.atan(-1 / t) / mp.pi


def harmonic(p, extra):
    k = len(p)
    excess = mp.fsum((1 - v) / v for v in p)
    if k == 1:
        return p[0]
    with mp.workdps(60 + extra):
        f = lambda v: (mp.exp(-mp.exp(v) * excess)
                       * mp.im((1 - mp.exp(v) * mp.exp(-mp.exp(v)) * mp.ei(mp.exp(v))
                                + 1j * mp.pi * mp.exp(v - mp.exp(v))) ** k))
        mid = -mp.log(k + excess)
        pts = [mid + i * mpf(1) / 2 for i in range(-240, 25)]
        return mp.quad(f, [v for v in pts if v < 6], method="gauss-legendre", maxdegree=5) / mp.pi


def harmonic_q(p):
    """1 - P for many p-values near 1: Bromwich integral right of the cut"""
    k = len(p)
    excess = mp.fsum((1 - v) / v for v in p)
    phi = lambda z: 1 - z * mp.exp(z) * mp.e1(z)
    g = lambda z: excess * z + k * mp.log(phi(z)) - mp.log(z)
    lo, hi = mpf(10) ** -6, mpf(10) ** 6
    while hi / lo > 1 + mpf(10) ** -6:  # any c near the saddle will do
        c = mp.sqrt(lo * hi)
        if mp.diff(g, c) > 0:
            hi = c
        else:
            lo = c
    sd = 1 / mp.sqrt(mp.diff(g, c, 2))
    top = g(c)
    f = lambda y: mp.re(mp.exp(g(mp.mpc(c, y)) - top))
    pts, y = [mpf(0)], mpf(0)
    while abs(mp.exp(g(mp.mpc(c, y)) - top)) > mpf(10) ** -40:
        y += sd
        pts.append(y)
    return mp.exp(top) * mp.quad(f, pts, method="gauss-legendre", maxdegree=5) / mp.pi


def pearson_p(p):
    """the lower tail by its own series"""
    k, x = len(p), -mp.fsum(mp.log(1 - v) for v in p)
    term = mp.exp(-x + k * mp.log(x) - mp.loggamma(k + 1))
    total, j = term, k
    while term > total * mpf(10) ** -45:
        j += 1
        term *= x / j
        total += term
    return total


def ln(v):
    return mp.nstr(mp.log(v), 25)


SETS = [([0.01, 0.2, 0.3, 0.04], 1), ([0.145, 0.263, 0.087], 1), ([0.5], 6), ([0.9], 1), ([1e-300, 1e-300], 1),
        ([1e-300, 0.5], 1), ([1e-200], 5), ([1 - 1e-10, 0.3], 1), ([0.99, 0.999], 1), ([0.9], 50), ([0.7], 200),
        ([0.05, 0.9, 0.35, 0.6], 30), ([0.4, 0.5, 0.6, 0.45], 75), ([1e-6, 0.8, 0.9], 1), ([0.03], 20)]
rows = []
for p, times in SETS:
    v = expand(p, times)
    row = {"p": p, "times": times, "lnp": {}, "lnq": {}}
    tiny = min(v) < 1e-100
    for name, f in [("fisher", fisher), ("stouffer", stouffer), ("tippett", tippett), ("edgington", edgington),
                    ("cauchy", cauchy)]:
        if name == "edgington" and tiny and len(v) > 2:
            continue
        with mp.workdps(700 if tiny else 120):
            w = expand(p, times)
            r = f(w)
            row["lnp"][name] = ln(r)
            row["lnq"][name] = ln(1 - r)
    with mp.workdps(700 if tiny else 120):
        q = pearson_q(expand(p, times))
        row["lnq"]["pearson"] = ln(q)
        row["lnp"]["pearson"] = ln(pearson_p(expand(p, times)))
    if not tiny:
        r = logit(v, 60)
        row["lnp"]["logit"], row["lnq"]["logit"] = ln(r), ln(1 - r)
        r = harmonic(v, 60)
        q = 1 - r
        if len(v) > 30 and q < mpf(10) ** -15:
            q = harmonic_q(v)
            r = 1 - q
        row["lnp"]["harmonic"], row["lnq"]["harmonic"] = ln(r), ln(q)
    rows.append(row)
    print(p, times, file=sys.stderr)
out = {"program": "Python 3 with mpmath", "version": mp.__version__, "call": "combine_rows.py", "date": "2026-12-01",
       "digits": 25, "rows": rows}
print("{" + json.dumps(out)[1:].split('"rows"')[0] + '"rows": [')
print(",\n".join(json.dumps(r) for r in rows))
print("]}")
