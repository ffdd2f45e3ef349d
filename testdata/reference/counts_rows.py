"""Values for counts.json: python3 counts_rows.py rows-from-R.json > counts.json

Score statistics are recomputed in 40 digits with mpmath, the restricted risks
by bisection of the derivative of the log-likelihood (no closed form), and the
limits by bisection of z. SciPy supplies Boschloo's test and
statsmodels a second implementation of Newcombe's limits.
"""
import json
import sys
from fractions import Fraction

import mpmath as mp
import numpy as np
import scipy
import statsmodels
from scipy import stats
from statsmodels.stats.proportion import confint_proportions_2indep

mp.mp.dps = 40
DATE = "2026-12-01"
rows = json.load(open(sys.argv[1]))


def row(ident, program, call, given, expected, digits):
    rows.append({"id": ident, "program": program, "call": call, "date": DATE, "input": given,
                 "expected": {k: float(v) for k, v in expected.items()}, "digits": digits})


def bisect(f, lo, hi):
    """f falls from lo to hi; the root, or the end toward which it points."""
    lo, hi = mp.mpf(lo), mp.mpf(hi)
    for _ in range(200):
        m = (lo + hi) / 2
        if f(m) > 0:
            lo = m
        else:
            hi = m
    return (lo + hi) / 2


def first_of(kind, p, c):
    return {"rd": lambda: p + c, "rr": lambda: c * p, "or": lambda: p * c / (1 + p * (c - 1))}[kind]()


def slope_of(kind, p, c):
    return {"rd": lambda: mp.mpf(1), "rr": lambda: c, "or": lambda: c / (1 + p * (c - 1)) ** 2}[kind]()


def z_of(kind, x1, n1, x2, n2, c):
    c = mp.mpf(c)
    tiny = mp.mpf(10) ** -36
    lo, hi = tiny, 1 - tiny
    if kind == "rd":
        lo, hi = max(lo, -c + tiny), min(hi, 1 - c - tiny)
    if kind == "rr":
        hi = min(hi, 1 / c - tiny)

    def score(p):
        q = first_of(kind, p, c)
        return x2 / p - (n2 - x2) / (1 - p) + slope_of(kind, p, c) * (x1 / q - (n1 - x1) / (1 - q))

    p2 = bisect(score, lo, hi)
    p1 = first_of(kind, p2, c)
    f = mp.mpf(n1 + n2) / (n1 + n2 - 1)
    h1, h2 = mp.mpf(x1) / n1, mp.mpf(x2) / n2
    if kind == "rd":
        return (h1 - h2 - c) / mp.sqrt((p1 * (1 - p1) / n1 + p2 * (1 - p2) / n2) * f)
    if kind == "rr":
        return (h1 - c * h2) / mp.sqrt((p1 * (1 - p1) / n1 + c * c * p2 * (1 - p2) / n2) * f)
    return n1 * (h1 - p1) * mp.sqrt((1 / (n1 * p1 * (1 - p1)) + 1 / (n2 * p2 * (1 - p2))) / f)


TABLES = [(7, 12, 1, 12), (56, 70, 48, 80), (9, 10, 3, 10), (3, 4000, 19, 5000), (24, 73, 53, 65),
          (9997, 10000, 9980, 10000), (0, 15, 4, 20), (15, 15, 9, 20)]
NULLS = {"rd": [-0.35, -0.02, 0, 0.001, 0.25, 0.9], "rr": [0.05, 0.8, 1, 1.3, 6], "or": [0.01, 0.5, 1, 2.5, 80]}
for t in TABLES:
    expected = {"%s_z_%g" % (k, c): z_of(k, *t, c) for k in NULLS for c in NULLS[k]}
    row("score-z-%d-%d-%d-%d" % t, "mpmath " + mp.__version__, "z_of() of counts_rows.py, 40 digits",
        dict(zip(("x1", "n1", "x2", "n2"), t)), expected, {"all": 12})
LIMIT_TABLES = TABLES[:4]
za = mp.sqrt(2) * mp.erfinv(mp.mpf("0.95"))
for t in LIMIT_TABLES:
    expected = {}
    for k in NULLS:
        lo, hi = {"rd": ("-0.9999", "0.9999"), "rr": ("0.001", "1000"), "or": ("0.001", "100000")}[k]
        expected[k + "_low"] = bisect(lambda c: z_of(k, *t, c) - za, lo, hi)
        expected[k + "_high"] = bisect(lambda c: z_of(k, *t, c) + za, lo, hi)
    row("score-limits-%d-%d-%d-%d" % t, "mpmath " + mp.__version__,
        "bisection of z_of() = -+1.95996 of counts_rows.py, 40 digits",
        dict(zip(("x1", "n1", "x2", "n2"), t)), expected, {"all": 9})


def tango(b, c, n, d):
    """Restricted trinomial likelihood by bisection over the second-only risk."""
    d = mp.mpf(d)
    tiny = mp.mpf(10) ** -36
    lo, hi = max(tiny, -d + tiny), (1 - d) / 2 - tiny

    def score(q):
        return b / (q + d) + c / q - 2 * (n - b - c) / (1 - 2 * q - d)

    q = bisect(score, lo, hi)
    return (b - c - n * d) / mp.sqrt(n * (2 * q + d - d * d))


for (b, c, n) in [(10, 3, 50), (12, 2, 50), (0, 1, 44), (150, 86, 1600)]:
    expected = {"z_%g" % d: tango(b, c, n, d) for d in (-0.1, 0, 0.05, 0.3)}
    expected["low"] = bisect(lambda d: tango(b, c, n, d) - za, "-0.99", "0.99")
    expected["high"] = bisect(lambda d: tango(b, c, n, d) + za, "-0.99", "0.99")
    row("tango-%d-%d-%d" % (b, c, n), "mpmath " + mp.__version__, "tango() of counts_rows.py, 40 digits",
        {"b": b, "c": c, "n": n}, expected, {"all": 10})


def rate_z(x1, e1, x2, e2, d):
    """Restricted Poisson likelihood by bisection over the second rate."""
    d = mp.mpf(d)
    tiny = mp.mpf(10) ** -36
    r = bisect(lambda r: x1 / (r + d) - e1 + x2 / r - e2, max(tiny, tiny - d), 1000)
    return (mp.mpf(x1) / e1 - mp.mpf(x2) / e2 - d) / mp.sqrt((r + d) / e1 + r / e2)


for v in [(12, 100, 5, 90), (11, 800, 21, 3011), (3, 50, 1, 70)]:
    expected = {"z_%g" % d: rate_z(*v, d) for d in (-0.05, -0.001, 0, 0.002, 0.1)}
    expected["low"] = bisect(lambda d: rate_z(*v, d) - za, -2, 2)
    expected["high"] = bisect(lambda d: rate_z(*v, d) + za, -2, 2)
    row("rate-difference-%d-%d" % (v[0], v[2]), "mpmath " + mp.__version__, "rate_z() of counts_rows.py, 40 digits",
        dict(zip(("x1", "e1", "x2", "e2"), v)), expected, {"all": 10})

def barnard(x1, n1, x2, n2, sign):
    """Largest probability of tables as extreme by the pooled z, ties decided in
    rational arithmetic (scipy.stats.barnard_exact loses some of them to
    rounding), over 20001 values of the common risk."""
    def order(a, b):
        s, n = a + b, n1 + n2
        if s in (0, n):
            return Fraction(0)
        d = Fraction(a, n1) - Fraction(b, n2)
        v = Fraction(s, n) * (1 - Fraction(s, n)) * (Fraction(1, n1) + Fraction(1, n2))
        return sign * (d * d if d > 0 else -d * d) / v

    seen = order(x1, x2)
    region = np.array([(a, b) for a in range(n1 + 1) for b in range(n2 + 1) if order(a, b) >= seen])
    return max((stats.binom.pmf(region[:, 0], n1, p) * stats.binom.pmf(region[:, 1], n2, p)).sum()
               for p in np.linspace(0, 1, 20001))


UNCONDITIONAL = [(7, 12, 1, 12), (56, 70, 48, 80), (9, 10, 3, 10), (12, 100, 5, 90), (7, 15, 12, 15), (0, 15, 4, 20)]
for t in UNCONDITIONAL:
    m = [[t[0], t[2]], [t[1] - t[0], t[3] - t[2]]]
    expected = {"boschloo_" + side: stats.boschloo_exact(m, alternative=side, n=256).pvalue
                for side in ("greater", "less")}
    row("boschloo-%d-%d-%d-%d" % t, "SciPy " + scipy.__version__, "boschloo_exact(m, alternative, n=256)",
        dict(zip(("x1", "n1", "x2", "n2"), t)), expected, {"all": 6})
for t in UNCONDITIONAL[:1] + UNCONDITIONAL[2:3] + UNCONDITIONAL[4:]:
    expected = {"greater": barnard(*t, 1), "less": barnard(*t, -1)}
    row("barnard-%d-%d-%d-%d" % t, "Python fractions, SciPy %s binom.pmf" % scipy.__version__,
        "barnard() of counts_rows.py", dict(zip(("x1", "n1", "x2", "n2"), t)), expected, {"all": 6})

for t in [(7, 12, 1, 12), (56, 70, 48, 80), (3, 4000, 19, 5000), (0, 15, 4, 20)]:
    lo, hi = confint_proportions_2indep(*t, compare="diff", method="newcomb")
    row("newcombe-%d-%d-%d-%d" % t, "statsmodels " + statsmodels.__version__,
        "confint_proportions_2indep(x1, n1, x2, n2, compare='diff', method='newcomb')",
        dict(zip(("x1", "n1", "x2", "n2"), t)), {"low": lo, "high": hi}, {"all": 10})

print(json.dumps(rows, indent=1))
