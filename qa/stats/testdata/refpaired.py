# Powers of Pitman and Morgan's test of a ratio of standard deviations, by another way
# than the package: the noncentral t given the one lot's sum of squares, integrated
# over its chi-square; and a count of studies drawn.
# Made 2026-12-01 with Python 3.11, SciPy 1.10.1:  python3 refpaired.py > paired.txt
import math

import numpy as np
from scipy import integrate, stats


def power(n, ratio, r, asked, alpha):
    w = ratio / asked
    g = (1 - w * w) / (2 * w * math.sqrt(1 - r * r))
    t = stats.t.ppf(1 - alpha, n - 2)
    chi = stats.chi(n - 1)
    low, high = chi.ppf(1e-15), chi.isf(1e-15)
    value, _ = integrate.quad(lambda a: stats.nct.sf(t, n - 2, g * a) * chi.pdf(a), low, high, epsabs=1e-12, epsrel=1e-11, limit=400)
    return value


def counted(n, ratio, r, asked, alpha, studies=200_000):
    rng = np.random.default_rng(1)
    x = rng.standard_normal((studies, n))
    y = ratio * (r * x + math.sqrt(1 - r * r) * rng.standard_normal((studies, n)))
    d, s = y - asked * x, y + asked * x
    d -= d.mean(axis=1, keepdims=True)
    s -= s.mean(axis=1, keepdims=True)
    c = (d * s).sum(axis=1) / np.sqrt((d * d).sum(axis=1) * (s * s).sum(axis=1))
    t = c * np.sqrt((n - 2) / (1 - c * c))
    return (t < -stats.t.ppf(1 - alpha, n - 2)).mean()


print("# pairs, true ratio, correlation, ratio asked, alpha, power, counted of 200,000")
for case in [
    (3, 1.0, 0.0, 2.0, 0.05), (10, 1.0, 0.5, 1.5, 0.05), (20, 1.0, 0.9, 1.2, 0.05), (30, 1.0, 0.0, 1.5, 0.05),
    (12, 0.8, 0.7, 1.1, 0.025), (50, 1.1, 0.95, 1.2, 0.05), (15, 1.3, 0.3, 1.2, 0.05), (8, 1.0, -0.4, 1.8, 0.1),
]:
    print(*case, "%.13g" % power(*case), counted(*case))
