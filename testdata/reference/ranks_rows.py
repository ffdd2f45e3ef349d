"""Adds SciPy's rows to ranks.json: /usr/bin/python3 ranks_rows.py rows-from-R.json > ranks.json"""
import json
import sys

import numpy as np
import scipy
from scipy import stats

rows = json.load(open(sys.argv[1]))
program = "SciPy " + scipy.__version__
rng = np.random.default_rng(412)


def row(ident, call, given, expected, digits):
    rows.append({"id": ident, "program": program, "call": call, "date": "2026-12-01", "input": given,
                 "expected": {k: float(v) for k, v in expected.items()}, "digits": {"all": digits}})


for i, (n1, n2) in enumerate([(7, 9), (30, 12), (2, 40)]):
    x, y = np.round(rng.normal(0.5, 1, n1), 1), np.round(rng.normal(0, 2, n2), 1)
    up = stats.brunnermunzel(x, y, alternative="greater")  # SciPy's statistic is that of y over x
    down = stats.brunnermunzel(x, y, alternative="less")
    s = (x[:, None] > y).mean() + (x[:, None] == y).mean() / 2
    row(f"area-brunner-munzel-{i + 1}", "brunnermunzel(x, y, alternative)", {"measure": "superiority-probability", "method": "brunner-munzel",
        "first": x.tolist(), "second": y.tolist(), "nulls": [0.5]},
        {"estimate": s, "up1": up.pvalue, "down1": down.pvalue, "statistic1": -up.statistic}, 9)

# Zeros kept in the ranking (Pratt 1959), normal, no continuity correction.
for i, n in enumerate([9, 40]):
    d = np.round(2 * rng.normal(0.4, 1, n)) / 2
    row(f"pairs-normal-zeros-{n}", "wilcoxon(d, zero_method='pratt', correction=False, alternative, mode='approx')",
        {"measure": "paired-median-shift", "method": "signed-rank-normal", "first": d.tolist(), "second": [0.0] * n, "nulls": [0.0]},
        {"up1": stats.wilcoxon(d, zero_method="pratt", correction=False, alternative="greater", mode="approx").pvalue,
         "down1": stats.wilcoxon(d, zero_method="pratt", correction=False, alternative="less", mode="approx").pvalue}, 10)

print("[")
print(",\n".join("  " + json.dumps(r) for r in rows))
print("]")
