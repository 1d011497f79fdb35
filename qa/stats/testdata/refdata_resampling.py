"""Permutation p by every rearrangement; BCa intervals by SciPy and NumPy.

Made 2026-12-01 with SciPy 1.10.1, NumPy 1.24.2:  python3 refdata_resampling.py > resampling.txt

One line an answer: set, quantity, value, allowed error (of p: absolute; of limits:
as a part of the interval's width): both sides draw, so they agree within chance.
The p are exact, by all choices; medians are drawn here as whole lots
(of few readings they jump from one difference to the next).
"""
import itertools
import warnings

import numpy as np
from scipy import stats

warnings.simplefilter("ignore")
rng = np.random.default_rng(20261205)
sets = {
    "SIX": ([12.1, 11.8, 12.4, 12.0, 11.7, 12.2], [12.3, 12.9, 11.9, 12.6, 12.8, 12.1]),
    "FIVE7": ([1, 2, 3, 4, 9], [3.5, 4.5, 4, 5.5, 6, 7.5, 20]),
    "NINE4": ([10.2, 10.4, 9.9, 10.1, 10.0, 10.6, 9.7, 10.3, 10.2], [10.9, 9.8, 11.9, 10.5]),
}
big = {
    "D1": ([12.003, 11.994, 12.011, 12.007, 11.998, 12.015, 12.002, 12.009, 11.989, 12.006, 12.012, 12.001],
           [12.008, 12.013, 11.997, 12.019, 12.004, 12.011, 11.992, 12.016, 12.006, 12.001, 12.022, 12.009]),
    "SKEW": (list(np.round(rng.exponential(3, 40), 3)), list(np.round(rng.exponential(5, 25), 3))),
    "EVEN": (list(np.round(rng.normal(5, 1, 30), 3)), list(np.round(rng.normal(5.4, 2, 60), 3))),
}


def out(name, what, value, tol):
    print(name, what, repr(float(value)), tol)


def readings(name, ref, cand):
    print("readings", name, "ref", *ref)
    print("readings", name, "cand", *cand)


def welch(r, c):
    v = np.var(r, ddof=1) / len(r) + np.var(c, ddof=1) / len(c)
    return (np.mean(c) - np.mean(r)) / np.sqrt(v) if v > 0 else np.sign(np.mean(c) - np.mean(r)) * np.inf


print("# Made by refdata_resampling.py (2026-12-01, SciPy, NumPy).\n# set, quantity, value, allowed error")
for name, (r, c) in sets.items():
    readings(name, r, c)
    r, c = np.array(r, float), np.array(c, float)
    for h0 in (0.0, -0.5, 1.0):
        every = np.concatenate([r, c - h0])
        t0 = welch(r, c - h0)
        ts = []
        for pick in itertools.combinations(range(len(every)), len(r)):
            mask = np.zeros(len(every), bool)
            mask[list(pick)] = True
            ts.append(welch(every[mask], every[~mask]))
        ts, near = np.array(ts), 1e-10 * abs(t0)
        out(name, f"above.{h0}", np.mean(ts >= t0 - near), 0.004)
        out(name, f"below.{h0}", np.mean(ts <= t0 + near), 0.004)
        out(name, f"two.{h0}", np.mean(np.abs(ts) >= abs(t0) - near), 0.004)


def bca_medians(r, c, level, draws=400000):
    n, m = len(r), len(c)
    d = np.median(c[rng.integers(0, m, (draws, m))], axis=1) - np.median(r[rng.integers(0, n, (draws, n))], axis=1)
    d, value = np.round(d, 9), np.round(np.median(c) - np.median(r), 9)  # equal differences are equal
    part = (np.mean(d < value) + np.mean(d <= value)) / 2
    z0 = stats.norm.ppf(part)
    num = den = 0
    for x, sign in ((r, -1), (c, 1)):
        j = np.array([np.median(np.delete(x, i)) for i in range(len(x))])
        u = sign * (len(x) - 1) * (j.mean() - j)
        num += np.sum(u**3) / len(x) ** 3
        den += np.sum(u**2) / len(x) ** 2
    a = num / den**1.5 / 6
    ends = []
    for z in (stats.norm.ppf((1 - level) / 2), stats.norm.ppf((1 + level) / 2)):
        ends.append(np.quantile(d, stats.norm.cdf(z0 + (z0 + z) / (1 - a * (z0 + z)))))
    return z0, a, ends


big["FIVE"] = ([0, 0, 0], [0, 1, 3, 7, 20])
big["FOUR"] = ([0, 0, 0], [0, 1, 3, 7])
for name, (r, c) in big.items():
    readings(name, r, c)
    r, c = np.array(r, float), np.array(c, float)
    for level in (0.9, 0.95):
        if name in ("FIVE", "FOUR"):
            out(name, f"median.{level}.bias", bca_medians(r, c, level)[0], 0.01)
            continue
        f = lambda x, y, axis=-1: np.mean(y, axis=axis) - np.mean(x, axis=axis)
        i = stats.bootstrap((r, c), f, confidence_level=level, n_resamples=200000, batch=2000, method="BCa", random_state=rng).confidence_interval
        out(name, f"mean.{level}.lower", i.low, 0.01)
        out(name, f"mean.{level}.upper", i.high, 0.01)
        z0, a, ends = bca_medians(r, c, level)
        out(name, f"median.{level}.lower", ends[0], 0.04)
        out(name, f"median.{level}.upper", ends[1], 0.04)
        out(name, f"median.{level}.bias", z0, 0.01)
        out(name, f"median.{level}.acceleration", a, 1e-9)
