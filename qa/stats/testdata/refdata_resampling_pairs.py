"""Sign flips by every one of them; BCa intervals of pairs and of ratios by SciPy.

Made 2026-12-01 with SciPy 1.10.1, NumPy 1.24.2:
python3 refdata_resampling_pairs.py > resampling_pairs.txt

One line an answer: set, quantity, value, allowed error (of p: absolute; of limits:
as a part of the interval's width). flips: p of the differences less h0 by all 2^n
signs, and the ends by halving where p passes the tail; ratioflips: the same of
candidate - theta reference. The bootstraps draw on both
sides, so they agree within chance; acceleration is by leaving out one at a time.
"""
import numpy as np
from scipy import stats

rng = np.random.default_rng(20261206)


def out(name, what, value, tol):
    print(name, what, repr(float(value)), tol)


def signs(n):
    return 1 - 2 * ((np.arange(2**n)[:, None] >> np.arange(n)) & 1)


def p_above(s, d):
    """The part of all signs with a sum as large as that found."""
    t, found = s @ d, d.sum()
    return np.mean(t >= found - 1e-11 * np.abs(d).sum())


def passes(s, of, low, high, tail):
    """Where p_above rises to the tail, of(e) being the differences less e."""
    for _ in range(60):
        mid = (low + high) / 2
        low, high = (low, mid) if p_above(s, of(mid)) >= tail else (mid, high)
    return high


print("# Made by refdata_resampling_pairs.py (2026-12-01, SciPy, NumPy).\n# set, quantity, value, allowed error")
sets = {}
for name, n, spread in (("EIGHT", 8, 0.4), ("TWELVE", 12, 0.9), ("SIXTEEN", 16, 0.5)):
    part = rng.gamma(6, 1.5, n)
    sets[name] = (np.round(part + rng.normal(0, spread, n), 3), np.round(part * 1.04 + rng.normal(0, spread, n), 3))
sets["TIES"] = (np.array([5, 6, 7, 5, 6, 8, 5.0]), np.array([6, 7, 7, 6, 8, 9, 5.0]))
for name, (r, c) in sets.items():
    print("readings", name, "ref", *r)
    print("readings", name, "cand", *c)
    s = signs(len(r)).astype(float)
    tol = 1e-12 if len(r) < 16 else 0.004  # all of them, or as many drawn as there are
    d = np.round(c - r, 9)
    for h0 in (0.0, 0.25, -0.5, 1.0):
        out(name, f"flips.above.{h0}", p_above(s, d - h0), tol)
        out(name, f"flips.below.{h0}", p_above(s, h0 - d), tol)
    if len(r) <= 12:
        one = stats.permutation_test((d,), lambda x, axis: np.mean(x, axis=axis), permutation_type="samples", n_resamples=np.inf, vectorized=True, alternative="greater")
        out(name, "flips.above.0", one.pvalue, tol)
    for theta in (0.9, 1.0, 1.125):
        out(name, f"ratioflips.above.{theta}", p_above(s, c - theta * r), tol)
        out(name, f"ratioflips.below.{theta}", p_above(s, theta * r - c), tol)
    if len(r) <= 12:
        for level in (0.9, 0.8):
            tail = (1 - level) / 2
            out(name, f"flips.lower.{level}", passes(s, lambda e: d - e, d.min() - 1, d.max() + 1, tail), 1e-9)
            out(name, f"flips.upper.{level}", -passes(s, lambda e: -d - e, -d.max() - 1, -d.min() + 1, tail), 1e-9)
            out(name, f"ratioflips.lower.{level}", passes(s, lambda e: c - e * r, 0.1, 4, tail), 1e-9)
            out(name, f"ratioflips.upper.{level}", -passes(s, lambda e: -c - e * r, -4, -0.1, tail), 1e-9)


def acceleration(samples, f):
    num = den = 0
    for k, x in enumerate(samples):
        n = x.shape[-1]
        j = np.array([f(*[np.delete(y, i, axis=-1) if m == k else y for m, y in enumerate(samples)]) for i in range(n)])
        u = (n - 1) * (j.mean() - j)
        num, den = num + np.sum(u**3) / n**3, den + np.sum(u**2) / n**2
    return num / den**1.5 / 6


def ratio(x, y, axis=-1):
    return np.mean(y, axis=axis) / np.mean(x, axis=axis)


part = rng.gamma(3, 2, 40) + 1
big = {
    "SKEWPAIRS": (np.round(part, 3), np.round(part * rng.gamma(4, 0.27, 40), 3)),
    "PLAINPAIRS": (np.round(rng.normal(10, 1, 25), 3), np.round(rng.normal(10.5, 2, 25), 3)),
    "LOTS": (np.round(rng.exponential(3, 30), 3), np.round(rng.exponential(4, 45), 3)),
}
for name, (r, c) in big.items():
    print("readings", name, "ref", *r)
    print("readings", name, "cand", *c)
    jobs = [("ratio", (r, c), ratio, False)]
    if len(r) == len(c):
        jobs += [("pairedratio", (r, c), ratio, True), ("diff", (np.round(c - r, 9),), lambda x, axis=-1: np.mean(x, axis=axis), False)]
    for what, samples, f, paired in jobs:
        if paired:
            out(name, what + ".0.9.acceleration", acceleration((np.array(samples),), lambda z: ratio(z[0], z[1])), 1e-9)
        else:
            out(name, what + ".0.9.acceleration", acceleration(samples, f), 1e-9)
        for level in (0.9, 0.95):
            i = stats.bootstrap(samples, f, paired=paired, confidence_level=level, n_resamples=200000, batch=2000, method="BCa", random_state=rng).confidence_interval
            out(name, f"{what}.{level}.lower", i.low, 0.01)
            out(name, f"{what}.{level}.upper", i.high, 0.01)
