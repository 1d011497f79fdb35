"""Tolerance factors to 17 digits.

Made 2026-12-01 with Python 3.11 and mpmath 1.2.1:  python3 refdata_tolerance.py > tolerance.csv

The integral of the factor's definition in 20 digits by Gauss-Legendre pieces (the
program sums equal steps), the incomplete gamma function by mpmath.
"""
from statistics import NormalDist

from mpmath import erfc, exp, findroot, gammainc, gamma, mp, mpf, pi, quad, sqrt

mp.dps = 20


def upper(x):
    return erfc(x / sqrt(mpf(2))) / 2


def half_width(x, p):
    def f(r):
        return upper(r - x) + upper(r + x) - (1 - p)

    low, high = mpf(0), x + mpf(NormalDist().inv_cdf(float((1 + p) / 2))) * 2 + 1
    for _ in range(30):
        m = (low + high) / 2
        low, high = (m, high) if f(m) > 0 else (low, m)
    r = low
    for _ in range(3):  # Newton from nine digits
        r += f(r) / ((exp(-(r - x) ** 2 / 2) + exp(-(r + x) ** 2 / 2)) / sqrt(2 * pi))
    return r


def table(n, df, p):
    nodes = []
    from mpmath.calculus.quadrature import GaussLegendre
    rule = GaussLegendre(mp).calc_nodes(4, 80)
    pieces = 4 if df <= 4 * n else 16
    for i in range(pieces):
        a, b = mpf(10) * i / pieces, mpf(10) * (i + 1) / pieces
        for x, w in rule:
            y = (a + b) / 2 + (b - a) / 2 * x
            nodes.append((2 * w * (b - a) / 2 * exp(-y * y / 2) / sqrt(2 * pi), half_width(y / sqrt(mpf(n)), p)))
    return [(w, r) for w, r in nodes if w > mpf(10) ** -22]


def doubt(nodes, df, k):
    return sum(w * gammainc(mpf(df) / 2, 0, df * (r / k) ** 2 / 2, regularized=True) for w, r in nodes)


print("# Made by refdata_tolerance.py (2026-12-01, mpmath).")
print("n,df,coverage,confidence,k")
for n, df, p, g, start in ((2, 1, 0.95, 0.95, 36.519), (3, 2, 0.999, 0.999, 114.03), (5, 4, 0.95, 0.95, 5.0769), (10, 9, 0.99, 0.9, 3.96), (30, 29, 0.95, 0.95, 2.5549), (12, 11, 0.5, 0.5, 0.7205), (200, 199, 0.9, 0.99, 1.8), (8, 56, 0.9, 0.99, 2.05)):
    nodes = table(n, df, mpf(str(p)))
    k = findroot(lambda k: doubt(nodes, df, k) - (1 - mpf(str(g))), (mpf(start), mpf(start) * mpf("1.001")), solver="secant", tol=1e-17, verify=False)
    print(f"{n},{df},{p},{g},{mp.nstr(k, 17)}", flush=True)
