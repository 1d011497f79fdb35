"""SciPy's answers for generated readings, and definitions written out anew. usage: python3 outside.py LOTS.tsv

Lines in and out as in outside.R. Means and variances are exact fractions, so nothing here is shared with the sums of others.
"""
import math
import sys
from fractions import Fraction

import numpy as np
from scipy import optimize, special, stats


def say(i, quantity, value):
    if value is not None and math.isfinite(value):
        print(i, quantity, "%.17g" % value, sep="\t")


class Lot:
    def __init__(self, x):
        self.x = np.array(x)
        self.n = len(x)
        exact = [Fraction(v) for v in x]
        self.exact_mean = sum(exact) / self.n
        self.squares = sum((v - self.exact_mean) ** 2 for v in exact)
        self.exact_var = self.squares / (self.n - 1)
        self.mean, self.var = float(self.exact_mean), float(self.exact_var)
        self.sd = math.sqrt(self.var)


def t_upper(t, df):
    return special.stdtr(df, -t)


def t_quantile(tail, df):
    """stats.t.ppf holds to about 1e-8 only."""
    high = 2.0
    while t_upper(high, df) > tail:
        high *= 2
    return optimize.brentq(lambda t: math.log(t_upper(t, df) / tail), high / 4, high, xtol=1e-15, rtol=1e-14)


def means(i, name, diff, se, df, m, alpha):
    """diff is a fraction, so that diff +- m has no rounding of its own."""
    if not se > 0:
        return
    t = float(diff) / se
    say(i, name + " difference", float(diff))
    say(i, name + " se", se)
    say(i, name + " df", df)
    say(i, name + " t", t)
    say(i, name + " p two-sided", 2 * t_upper(abs(t), df))
    low, high = float(diff + Fraction(m)) / se, float(diff - Fraction(m)) / se
    say(i, name + " t lower", low)
    say(i, name + " t upper", high)
    say(i, name + " p lower", t_upper(low, df))
    say(i, name + " p upper", t_upper(-high, df))
    for tail, what in ((alpha, "interval"), (alpha / 2, "difference")):
        half = t_quantile(tail, df) * se
        say(i, "%s %s lower" % (name, what), float(diff) - half)
        say(i, "%s %s upper" % (name, what), float(diff) + half)


def welch(i, name, r, c, m, alpha):
    a, b = r.var / r.n, c.var / c.n
    if a + b > 0:
        df = (a + b) ** 2 / ((a * a / (r.n - 1) if r.n > 1 else 0) + (b * b / (c.n - 1) if c.n > 1 else 0))
        means(i, name, c.exact_mean - r.exact_mean, math.sqrt(a + b), df, m, alpha)


def runs(i, side, x):
    middle = np.quantile(x, 0.5)
    signs = [v > middle for v in x if v != middle]
    a, b = sum(signs), len(signs) - sum(signs)
    if a == 0 or b == 0:
        return
    count = 1 + sum(1 for k in range(1, len(signs)) if signs[k] != signs[k - 1])
    ways = lambda n, k: math.comb(n - 1, k - 1) if 1 <= k <= n else 0
    total = math.comb(a + b, a)

    def of(k):
        h = k // 2
        return 2 * ways(a, h) * ways(b, h) if k % 2 == 0 else ways(a, h + 1) * ways(b, h) + ways(a, h) * ways(b, h + 1)
    few = Fraction(sum(of(k) for k in range(2, count + 1)), total)
    many = Fraction(sum(of(k) for k in range(count, a + b + 1)), total)
    say(i, side + " runs", count)
    say(i, side + " runs p", float(min(1, 2 * min(few, many))))


def lag(i, side, lot):
    d = [Fraction(v) - lot.exact_mean for v in lot.x]
    if lot.squares > 0:
        say(i, side + " lag1", float(sum(d[k] * d[k + 1] for k in range(lot.n - 1)) / lot.squares))


def fourth(lot):
    cut = int(lot.n / (2 * math.sqrt(lot.n - 4)))
    kept = sorted(lot.x)[cut:lot.n - cut]
    middle = sum(Fraction(v) for v in kept) / len(kept)
    return float(sum((Fraction(v) - middle) ** 4 for v in lot.x) / lot.squares ** 2)


def bonett(i, r, c, alpha):
    """Bonett 2006 as the test of one ratio after another, by a scan and a bracketed root."""
    z = -special.ndtri(alpha)
    if min(r.n, c.n) < 5 or not min(r.sd, c.sd) > 0:
        return
    q = (c.n / (c.n - z)) / (r.n / (r.n - z))
    a, b = fourth(c), fourth(r)  # over the squares of the sums of squares
    w = float(r.squares / c.squares)

    def accept(logrho):
        v = math.exp(2 * logrho) * w  # rho^2 SSr/SSc
        g = (r.n + c.n) * (a + v * v * b) / (1 + v) ** 2
        se2 = (g - (c.n - 3) / c.n) / (c.n - 1) + (g - (r.n - 3) / r.n) / (r.n - 1)
        return abs(math.log(q) + math.log(c.var / r.var) - 2 * logrho) - z * math.sqrt(max(0, se2))
    centre = (math.log(q) + math.log(c.var / r.var)) / 2
    for side, name in ((-1, "lower"), (1, "upper")):
        step, at = 0.002, 0.0
        while accept(centre + side * (at + step)) < 0:
            at += step
            if at > 30:
                break
        else:
            root = optimize.brentq(lambda d: accept(centre + side * d), at, at + step, xtol=1e-15, rtol=1e-14)
            say(i, "bonett " + name, math.exp(centre + side * root))


def null_u(twice_ranks, m):
    """How often each sum of m of the ranks comes up, in whole numbers kept as float64 shares of all choices."""
    total = int(sum(twice_ranks))
    ways = np.zeros((m + 1, total + 1))
    ways[0, 0] = 1.0
    for k, v in enumerate(twice_ranks, 1):
        v = int(v)
        # choose v with probability (j/k): shares instead of counts keep every number in range
        j = np.arange(m + 1)[:, None]
        stay = np.where(j <= k - 1, (k - j) / k, 0.0)
        new = ways * stay
        new[1:, v:] += ways[:-1, :total + 1 - v] * (j[1:] / k)
        ways = new
    return ways[m]


def ranks(i, r, c, alpha, decimals):
    both = np.concatenate([c.x, r.x])
    if len(set(both)) == 1:
        return
    twice = np.rint(2 * stats.rankdata(both)).astype(int)
    u2 = int(twice[:c.n].sum()) - c.n * (c.n + 1)
    pairs = r.n * c.n
    ties = len(set(both)) < len(both)
    say(i, "ranks u", u2 / 2)
    differences = np.subtract.outer(c.x, r.x).ravel()
    if decimals <= 12:
        differences = np.array([round(v, decimals) for v in differences])
    differences.sort()
    middle = (differences[(pairs - 1) // 2] + differences[pairs // 2]) / 2
    say(i, "ranks shift", middle)
    if r.n + c.n <= 100:
        share = null_u(sorted(twice), c.n)
        below = np.cumsum(share)
        above = np.cumsum(share[::-1])[::-1]
        at = u2 + c.n * (c.n + 1)
        say(i, "ranks p", min(1.0, 2 * min(below[at], above[at])))
        k = 0
        while k + 1 <= (pairs + 1) // 2 and below[2 * k + c.n * (c.n + 1)] <= alpha * (1 + 1e-10):
            k += 1
    elif ties:
        _, counts = np.unique(both, return_counts=True)
        n = r.n + c.n
        sd = math.sqrt(pairs / 12 * (n + 1 - float((counts.astype(float) ** 3 - counts).sum()) / (n * (n - 1))))
        say(i, "ranks p", min(1.0, 2 * special.ndtr(-max(0.0, abs(u2 / 2 - pairs / 2) - 0.5) / sd)))
        k = math.floor(pairs / 2 + special.ndtri(alpha) * sd)
    else:
        return
    if k >= 1:
        say(i, "ranks lower", differences[k - 1])
        say(i, "ranks upper", differences[pairs - k])


nodes, weights = np.polynomial.legendre.leggauss(400)
known = {}


def tolerance(n, two, coverage, confidence):
    key = (n, two, coverage, confidence)
    if key in known:
        return known[key]
    y = 9 * nodes
    density = 9 * weights * np.exp(-y * y / 2) / math.sqrt(2 * math.pi)
    at = y / math.sqrt(n)
    if two:
        r = np.full_like(at, -special.ndtri((1 - coverage) / 2)) + np.abs(at) * 0.5
        for _ in range(60):
            f = special.ndtr(at + r) - special.ndtr(at - r) - coverage
            slope = (np.exp(-(at + r) ** 2 / 2) + np.exp(-(at - r) ** 2 / 2)) / math.sqrt(2 * math.pi)
            r = np.maximum(r - f / slope, r / 2)
    else:
        r = special.ndtri(coverage) - at

    def held(k):
        p = special.chdtrc(n - 1, (n - 1) * (r / k) ** 2)
        return float((density * np.where(r > 0, p, 1.0)).sum()) - confidence
    if n < 12:  # one-sided: the corner at r = 0 is not smooth for few freedoms
        if not two:
            edge = special.ndtri(coverage) * math.sqrt(n)
            yy = (nodes + 1) / 2 * (min(edge, 9) + 9) - 9
            ww = weights * (min(edge, 9) + 9) / 2 * np.exp(-yy * yy / 2) / math.sqrt(2 * math.pi)
            rr = special.ndtri(coverage) - yy / math.sqrt(n)
            held = lambda k: float((ww * special.chdtrc(n - 1, (n - 1) * (np.maximum(rr, 0) / k) ** 2)).sum()) + special.ndtr(-edge) - confidence
    high = 4.0
    while held(high) < 0:
        high *= 2
    known[key] = optimize.brentq(held, 1e-3, high, xtol=1e-14, rtol=1e-14)
    return known[key]


def performance(i, side, lot, lower, upper, confidence=0.95, coverage=0.95):
    if not lot.sd > 0:
        return
    z = []
    if lower is not None:
        z.append(float(lot.exact_mean - Fraction(lower)) / lot.sd)
    if upper is not None:
        z.append(float(Fraction(upper) - lot.exact_mean) / lot.sd)
    if not z:
        return
    ppk = min(z) / 3
    say(i, side + " ppk", ppk)
    half = -special.ndtri((1 - confidence) / 2) * math.sqrt(1 / (9 * lot.n) + ppk ** 2 / (2 * (lot.n - 1)))
    say(i, side + " ppk lower", ppk - half)
    say(i, side + " ppk upper", ppk + half)
    if len(z) == 2:
        say(i, side + " pp", float(Fraction(upper) - Fraction(lower)) / lot.sd / 6)
    say(i, side + " outside estimated", sum(special.ndtr(-v) for v in z))
    if lot.n >= 3:
        say(i, side + " k", tolerance(lot.n, len(z) == 2, coverage, confidence))


def likeliest(x, n, y, m, d):
    """The reference's fraction at the maximum of the likelihood, by bisection of its slope."""
    low, high = max(0.0, -d), min(1.0, 1 - d)

    def slope(p):
        q = p + d
        s = 0.0
        s += x / p - (n - x) / (1 - p) if 0 < p < 1 else 0
        s += y / q - (m - y) / (1 - q) if 0 < q < 1 else 0
        return s
    a, b = low + 1e-15 * (high - low), high - 1e-15 * (high - low)
    for _ in range(120):
        middle = (a + b) / 2
        if slope(middle) > 0:
            a = middle
        else:
            b = middle
    return (a + b) / 2


def score(x, n, y, m, d):
    p = likeliest(x, n, y, m, d)
    q = min(1, max(0, p + d))
    v = (q * (1 - q) / m + p * (1 - p) / n) * (n + m) / (n + m - 1)
    return (y / m - x / n - d) / math.sqrt(v) if v > 0 else math.copysign(math.inf, y / m - x / n - d)


def attribute(i, r, c, m, alpha):
    (n, x), (k, y) = [(int(v[0]), int(v[1])) for v in (r, c)]
    if 0 < x + y < n + k:
        say(i, "score p two-sided", min(1, 2 * special.ndtr(-abs(score(x, n, y, k, 0.0)))))
        # where nothing or all of a lot failed a maximum at the edge is not found by the slope
    if 0 < x < n and 0 < y < k:
        if m < 1:
            say(i, "score p lower", special.ndtr(-score(x, n, y, k, -m)))
            say(i, "score p upper", special.ndtr(score(x, n, y, k, m)))
        for tail, what in ((alpha, "interval"), (alpha / 2, "difference")):
            z = -special.ndtri(tail)
            d = y / k - x / n
            f = lambda s, side: score(x, n, y, k, s) - side * z
            for end, side, name in ((-1 + 1e-9, 1, "lower"), (1 - 1e-9, -1, "upper")):
                a, b = (end, d) if side == 1 else (d, end)
                if f(a, side) * f(b, side) < 0:
                    say(i, "score %s %s" % (what, name), optimize.brentq(lambda s: f(s, side), a, b, xtol=1e-15, rtol=1e-14))
    table = [[x, n - x], [y, k - y]]
    say(i, "fisher", stats.fisher_exact(table)[1])
    z = -special.ndtri(alpha)

    def wilson(v, size):
        centre, half = 2 * v + z * z, z * math.sqrt(z * z + 4 * v * (1 - v / size))
        return (centre - half) / (2 * (size + z * z)), (centre + half) / (2 * (size + z * z))
    (l1, u1), (l2, u2) = wilson(x, n), wilson(y, k)
    p, q = x / n, y / k
    say(i, "newcombe lower", q - p - math.hypot(q - l2, u1 - p))
    say(i, "newcombe upper", q - p + math.hypot(u2 - q, p - l1))


for line in open(sys.argv[1]):
    f = line.rstrip("\n").split("\t")
    i, kind, decimals, m, alpha = f[0], f[1], int(f[2]), float(f[5]), float(f[6])
    lower, upper = [None if v == "-" else float(v) for v in f[3:5]]
    r, c = [[float(v) for v in g.split(" ")] for g in f[7:9]]
    if kind == "attribute":
        attribute(i, r, c, m, alpha)
        continue
    r, c = Lot(r), Lot(c)
    for side, lot in (("reference", r), ("candidate", c)):
        say(i, side + " mean", lot.mean)
        say(i, side + " sd", lot.sd if lot.sd > 0 else None)
        runs(i, side, lot.x)
        lag(i, side, lot)
        performance(i, side, lot, lower, upper)
    welch(i, "welch", r, c, m, alpha)
    pooled = float(r.squares + c.squares) / (r.n + c.n - 2) * (1 / r.n + 1 / c.n)
    means(i, "pooled", c.exact_mean - r.exact_mean, math.sqrt(pooled), r.n + c.n - 2, m, alpha)
    if r.n == c.n and decimals > 12:
        d = Lot([b - a for a, b in zip(r.x, c.x)])
        means(i, "paired", d.exact_mean, d.sd / math.sqrt(d.n), d.n - 1, m, alpha)
    if r.sd > 0 and c.sd > 0:
        v = c.var / r.var
        say(i, "spread ratio", math.sqrt(v))
        tail = min(special.fdtr(c.n - 1, r.n - 1, v), special.fdtrc(c.n - 1, r.n - 1, v))
        say(i, "spread p", min(1, 2 * tail))
    bonett(i, r, c, alpha)
    ranks(i, r, c, alpha, decimals)
