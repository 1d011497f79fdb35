# What SciPy gives for the points of a reference table: python3 accuracy.py TABLE
# prints a line a point: a number, or - where SciPy has no such function.
import sys
import warnings

import numpy as np
from scipy import special, stats

warnings.simplefilter("ignore")
np.seterr(all="ignore")
of = {
    "NormalLower": special.ndtr, "NormalUpper": lambda z: special.ndtr(-z), "NormalQuantile": special.ndtri,
    "StudentLower": lambda t, df: special.stdtr(df, t), "StudentUpper": lambda t, df: special.stdtr(df, -t),
    "StudentTwoSided": lambda t, df: 2 * special.stdtr(df, -abs(t)), "StudentQuantile": lambda p, df: special.stdtrit(df, p),
    "FLower": lambda f, a, b: special.fdtr(a, b, f), "FUpper": lambda f, a, b: special.fdtrc(a, b, f), "FQuantile": lambda p, a, b: special.fdtri(a, b, p),
    "ChiSquareLower": lambda x, df: special.gammainc(df / 2, x / 2), "ChiSquareUpper": lambda x, df: special.gammaincc(df / 2, x / 2),
    "ChiSquareQuantile": lambda p, df: 2 * special.gammaincinv(df / 2, p),
    "NoncentralTLower": stats.nct.cdf, "NoncentralTUpper": stats.nct.sf, "NoncentralTQuantile": stats.nct.ppf,
    "ToleranceFactorOneSided": lambda n, p, g: stats.nct.ppf(g, n - 1, special.ndtri(p) * np.sqrt(n)) / np.sqrt(n),
}
points = [line.split() for line in open(sys.argv[1]) if line.strip() and not line.startswith("#")]
values = [None] * len(points)
for name in {p[0] for p in points}:
    where = [i for i, p in enumerate(points) if p[0] == name]
    if name in of:
        found = of[name](*np.array([[float(v) for v in points[i][1:-2]] for i in where]).T)
        for i, v in zip(where, found):
            values[i] = v
for v in values:
    print("-" if v is None else "%.17g" % v)
