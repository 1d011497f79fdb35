# The work of the rows of `go run ./cmd/dev bench` as one would do it with SciPy and NumPy.
#   python3 bench.py "NAME OF A ROW"
# prints a line a way and run: name, what was used, seconds of processor time a thing. A row that they have nothing for prints nothing.
import re
import subprocess
import sys
import time
import warnings

import numpy as np
from scipy import integrate, optimize, special, stats

warnings.simplefilter("ignore")
row = sys.argv[1]
rng = np.random.default_rng(1)


def out(what, seconds):
    print(row, what, "%.6g" % seconds, sep="\t")


def clock(do, calls=1, now=time.process_time):
    begun = now()
    for _ in range(calls):
        do()
    return (now() - begun) / calls


def timed(what, do, things=1, runs=3):
    do()  # warm
    calls = max(1, min(1000000, int(0.1 / max(clock(do), 1e-9))))
    for _ in range(runs):
        out(what, clock(do, calls) / things)


def once(what, do, things=1):
    out(what, clock(do) / things)


def lot(shape, mean=12, decimals=6):
    return np.round(rng.normal(mean, 0.01, shape), decimals)


points = 240
i = np.arange(points)
df = np.resize([3, 9, 22, 57.3, 198, 1987.4], points)
p = np.resize(np.repeat([0.0005, 0.005, 0.025, 0.05, 0.1, 0.3, 0.7, 0.975], 6), points)
t = 0.1 + (i % 17) / 3


def tost_power(n, sd, shift, margin, alpha=0.05):
    """The exact power of two one-sided tests, by quadrature over the standard deviation."""
    dof = 2 * n - 2
    se = sd * np.sqrt(2 / n)
    crit = special.stdtrit(dof, 1 - alpha)
    lead = np.log(2) + dof / 2 * np.log(dof / 2) - special.gammaln(dof / 2)
    a, b = (margin - shift) / se, (-margin - shift) / se

    def f(s):
        return (special.ndtr(a - crit * s) - special.ndtr(b + crit * s)) * np.exp(lead + (dof - 1) * np.log(s) - dof * s * s / 2)
    return integrate.quad(f, 0, margin / se / crit, epsabs=0, epsrel=1e-10, limit=200)[0]


def figures(k, n):
    """Of each characteristic the main figures of a comparison: means, spread, ranks, normality."""
    x = np.round(rng.normal(100, 2, (k, n)), 3)
    y = np.round(rng.normal(100.5, 2, (k, n)), 3)

    def do():
        for a, b in zip(x, y):
            stats.ttest_ind(b, a, equal_var=False)
            f = b.var(ddof=1) / a.var(ddof=1)
            2 * min(stats.f.cdf(f, n - 1, n - 1), stats.f.sf(f, n - 1, n - 1))
            stats.f.ppf([0.05, 0.95], n - 1, n - 1)
            stats.t.ppf(0.95, 2 * n - 2)
            stats.mannwhitneyu(b, a)
            d = np.subtract.outer(b, a).ravel()
            d.partition([d.size // 2 - 1, d.size // 2])
            stats.shapiro(a)
            stats.shapiro(b)
    return do


def rank_size():
    return int(re.search(r"2 x ([0-9,]+)", row).group(1).replace(",", ""))


def difference(x, y, axis=-1):
    return y.mean(axis=axis) - x.mean(axis=axis)


def medians(x, y, axis=-1):
    return np.median(y, axis=axis) - np.median(x, axis=axis)


if row == "Welch, two-sided p, 1,000 characteristics x 2 x 1,000 readings":
    x, y = lot((1000, 1000)), lot((1000, 1000), 12.001)
    timed("ttest_ind(axis)", lambda: stats.ttest_ind(y, x, axis=1, equal_var=False))
    timed("ttest_ind", lambda: [stats.ttest_ind(b, a, equal_var=False) for a, b in zip(x, y)])
elif row == "Welch, both tests, p and interval, one pair of lots, 2 x 30":
    x, y = lot(30), lot(30, 12.001)
    timed("ttest_ind", lambda: stats.ttest_ind(y, x, equal_var=False))
elif row == "Yuen–Welch, 2 x 1,000":
    x, y = lot(1000), lot(1000, 12.001)
    timed("ttest_ind(trim)", lambda: stats.ttest_ind(y, x, equal_var=False, trim=0.2))
elif row.startswith("Shapiro"):
    x = lot(5000 if "5,000" in row else 100)
    timed("shapiro", lambda: stats.shapiro(x))
elif row == "t CDF":
    timed("stdtr", lambda: special.stdtr(df, -t), points)
elif row == "t quantile":
    timed("stdtrit", lambda: special.stdtrit(df, p), points)
elif row == "F quantile":
    timed("fdtri", lambda: special.fdtri(df, 7 + i, p), points)
elif row == "chi-square quantile":
    timed("gammaincinv", lambda: 2 * special.gammaincinv(df / 2, p), points)
elif row == "noncentral t CDF":
    timed("nct.cdf", lambda: stats.nct.cdf(t, df, 2 + t / 3), points)
elif row == "noncentral t quantile":
    timed("nct.ppf", lambda: stats.nct.ppf(p, df, 2 + t / 3), points)
elif row == "TOST power, 2 x 50":
    timed("quad", lambda: tost_power(50, 0.01, 0.001, 0.006))
elif row == "TOST size, 71 a lot":
    timed("brentq and quad", lambda: np.ceil(optimize.brentq(lambda n: tost_power(n, 0.01, 0.001, 0.006) - 0.9, 5, 1000, xtol=1e-3)))
elif row == "power curve, 200 shifts, 2 x 50":
    timed("quad", lambda: [tost_power(50, 0.01, 0.006 * s / 200, 0.006) for s in range(200)])
elif row == "tolerance factor, two-sided, 30 readings":
    def half(x):
        return optimize.brentq(lambda r: special.ndtr(x + r) - special.ndtr(x - r) - 0.95, 0, 20, xtol=1e-12)

    def sure(k):
        return integrate.quad(lambda z: 2 * np.exp(-z * z / 2) / np.sqrt(2 * np.pi) * special.chdtrc(29, 29 * (half(z / np.sqrt(30)) / k) ** 2), 0, 8, epsrel=1e-8)[0]
    timed("brentq and quad", lambda: optimize.brentq(lambda k: sure(k) - 0.95, 2, 4, xtol=1e-8), runs=1)
elif row.startswith("BCa of means") and "one core" in row:
    x, y = lot(1000), lot(1000, 12.001)
    timed("bootstrap, batch 100", lambda: stats.bootstrap((x, y), difference, n_resamples=10000, batch=100, vectorized=True, confidence_level=0.9, random_state=1))
elif row.startswith("BCa of medians"):
    x, y = lot(1000), lot(1000, 12.001)
    timed("bootstrap, batch 100", lambda: stats.bootstrap((x, y), medians, n_resamples=10000, batch=100, vectorized=True, confidence_level=0.9, random_state=1))
elif row.startswith("permutation"):
    x, y = lot(100), lot(100, 12.001)
    timed("permutation_test, batch 1000", lambda: stats.permutation_test((x, y), difference, n_resamples=100000, batch=1000, vectorized=True, random_state=1))
elif row.startswith("Mann"):
    n = rank_size()
    x, y = lot(n, 12, 15), lot(n, 12.001, 15)
    if n > 2000:
        print(row, "not run", "%.2g GB of differences" % (8e-9 * n * n), sep="\t")
    else:
        def ranks():
            stats.mannwhitneyu(y, x)
            d = np.subtract.outer(y, x).ravel()
            d.partition([d.size // 2 - 1, d.size // 2, int(0.48 * d.size), int(0.52 * d.size)])
        timed("mannwhitneyu and all differences", ranks)
elif row.startswith("exact U"):
    print(row, "not run", "over 90 s", sep="\t")  # mannwhitneyu(method="exact")
elif row.startswith("Compare") and " 200 " in row:
    once("t, F, ranks, Shapiro alone", figures(200, 100))
elif row.startswith("Compare") and " 2,000 " in row:
    once("t, F, ranks, Shapiro alone, of 50, times 40", figures(50, 1000), 1 / 40)
elif row.startswith("start to exit"):
    for _ in range(5):
        out("import scipy.stats", clock(lambda: subprocess.run([sys.executable, "-c", "import scipy.stats"], check=True), now=time.perf_counter))
