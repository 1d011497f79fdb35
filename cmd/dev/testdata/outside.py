"""SciPy's answer for one file of readings (columns characteristic, lot, value): Welch, from the readings.

usage: python3 outside.py READINGS.csv ; prints characteristic, quantity, value with 17 digits, a tab between.
"""

import csv
import sys

import numpy as np
from scipy import stats

readings = {}
with open(sys.argv[1], newline="", encoding="utf-8") as f:
    for row in csv.DictReader(f):
        readings.setdefault(row["characteristic"], {"reference": [], "candidate": []})[row["lot"]].append(float(row["value"]))

for name, lots in readings.items():
    r, c = np.array(lots["reference"]), np.array(lots["candidate"])
    vr, vc = r.var(ddof=1) / len(r), c.var(ddof=1) / len(c)
    df = (vr + vc) ** 2 / (vr**2 / (len(r) - 1) + vc**2 / (len(c) - 1))
    estimate, se = c.mean() - r.mean(), np.sqrt(vr + vc)
    found = {
        "reference mean": r.mean(),
        "candidate mean": c.mean(),
        "df": df,
        "p two-sided": stats.ttest_ind(c, r, equal_var=False).pvalue,
        "decision lower": estimate - stats.t.ppf(0.95, df) * se,
        "decision upper": estimate + stats.t.ppf(0.95, df) * se,
    }
    for quantity, value in found.items():
        print(name, quantity, "%.17g" % value, sep="\t")
