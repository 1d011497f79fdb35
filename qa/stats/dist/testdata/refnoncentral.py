# Reference values of the noncentral t distribution, to 50 digits and rounded to 20.
# Made 2026-12-01 with Python 3.11, mpmath 1.2.1:  python3 refnoncentral.py > noncentral.txt
#
# The package integrates over the chi-square variable. Here the same probability is a
# series of incomplete beta functions with Poisson weights (Lenth 1989, AS 243, Applied
# Statistics 38, 185-189, from memory), for t >= 0:
#   P(T <= t) = Phi(-delta) + 1/2 sum_j p_j I_x(j + 1/2, df/2) + q_j I_x(j + 1, df/2)
#   x = t^2/(df + t^2), p_j = exp(-delta^2/2) (delta^2/2)^j / j!,
#   q_j = delta exp(-delta^2/2) (delta^2/2)^j / (sqrt(2) Gamma(j + 3/2))
# and P(T <= -t; delta) = P(T >= t; -delta). The terms cancel where delta < 0 and in the
# upper tail, so all of it is done with digits to spare. Inputs are float64, exact.
import sys
from statistics import NormalDist
from mpmath import mp, mpf, exp, log, sqrt, gamma, loggamma, erfc, nstr, power

mp.dps = 420


def incomplete_beta(a, b, x, y):
    term = total = mpf(1)
    n = 0
    while term > total * mpf(10) ** (-mp.dps):
        term *= (a + b + n) / (a + 1 + n) * x
        total += term
        n += 1
    return exp(a * log(x) + b * log(y) - log(a) - loggamma(a) - loggamma(b) + loggamma(a + b)) * total


def start(a, b, x, y):
    """I_x(a,b) and x^a y^b/(a B(a,b)), the step to a + 1."""
    step = exp(a * log(x) + b * log(y) - log(a) - loggamma(a) - loggamma(b) + loggamma(a + b))
    if x <= y:
        return incomplete_beta(a, b, x, y), step
    return 1 - incomplete_beta(b, a, y, x), step


def lower(t, df, delta):
    """P(T <= t) for t >= 0, to within about 10^-dps."""
    zero = erfc(delta / sqrt(mpf(2))) / 2
    if t == 0:
        return zero
    b = df / 2
    x, y = t * t / (df + t * t), df / (df + t * t)
    one, one_step = start(mpf(1) / 2, b, x, y)
    two, two_step = start(mpf(1), b, x, y)
    half = delta * delta / 2
    # For a large delta the sum begins where the weights are above exp(-(80 sigma)^2/2).
    j = int(max(0, half - 80 * sqrt(half)))
    if j > 0:
        one, one_step = start(mpf(1) / 2 + j, b, x, y)
        two, two_step = start(mpf(1) + j, b, x, y)
    p = exp(j * log(half) - half - loggamma(j + 1)) if j > 0 else exp(-half)
    q = delta * exp(j * log(half) - half - loggamma(j + mpf(3) / 2)) / sqrt(mpf(2)) if j > 0 else delta * exp(-half) / (sqrt(mpf(2)) * gamma(mpf(3) / 2))
    total = mpf(0)
    tiny = mpf(10) ** (-mp.dps + 10)
    while j < half or p * one + abs(q) * two > tiny * (abs(total) + zero):
        total += p * one + q * two
        one -= one_step
        two -= two_step
        one_step *= x * (j + mpf(1) / 2 + b) / (j + mpf(3) / 2)
        two_step *= x * (j + 1 + b) / (j + 2)
        j += 1
        p *= half / j
        q *= half / (j + mpf(1) / 2)
        if one < tiny or two < tiny:
            break
    return zero + total / 2


def tails(t, df, delta):
    if t < 0:
        up, lo = tails(-t, df, -delta)
        return lo, up
    lo = lower(t, df, delta)
    return lo, 1 - lo


def quantile(p, df, delta):
    """By halving and then the secant method on the smaller tail's logarithm."""
    p = mpf(p)
    upper = p > 0.5
    want = log(1 - p if upper else p)

    def off(t):
        lo, up = tails(t, df, delta)
        return want - log(up) if upper else log(lo) - want

    # About normal, for many degrees of freedom.
    width = sqrt(1 + delta * delta / (2 * df)) if df > 20 else mpf(1)
    middle = delta + mpf(NormalDist().inv_cdf(float(p))) * width if df > 20 else delta
    a, b = middle - width / 2, middle + width / 2
    while off(a) > 0:
        a -= width
        width *= 2
    while off(b) < 0:
        b += width
        width *= 2
    for _ in range(2 if df > 20 else 12):
        mid = (a + b) / 2
        if off(mid) < 0:
            a = mid
        else:
            b = mid
    fa, fb = off(a), off(b)
    for _ in range(12):
        c = b - fb * (b - a) / (fb - fa)
        a, fa, b = b, fb, c
        if abs(b - a) < abs(b) * mpf(10) ** -40:
            return b
        fb = off(b)
    sys.exit("no quantile for %s %s %s" % (p, df, delta))


def show(name, allowed, value, *args):
    if value != 0 and (abs(value) < mpf("1e-280") or abs(value) > mpf("1e300")):
        return
    print(name, *[repr(float(a)) for a in args], nstr(value, 20, min_fixed=0, max_fixed=0), allowed)


def allow(p):
    return "2e-13" if p > mpf("1e-25") else "1e-12"


print("# Made by refnoncentral.py (2026-12-01, Python 3.11, mpmath 1.2.1, 50 digits).")
print("# function, arguments, value, allowed relative error")

for df in [0.5, 1, 1.5, 2, 3, 7.03, 11, 21.5630439, 58, 137, 1000, 99998]:
    for delta in [-6, -0.75, 1e-3, 0.3, 1, 3.3, 9, 38]:
        if df > 1e4 and abs(delta) > 10:
            continue
        for ratio in [-3, -0.4, 0, 0.2, 0.6, 0.93, 1, 1.07, 1.6, 4, 30]:
            t, df, delta = mpf(float(ratio * max(abs(delta), 1))), mpf(df), mpf(delta)
            if df > 1e4 and abs(ratio) > 2:
                continue
            lo, up = tails(t, df, delta)
            show("NoncentralTLower", allow(lo), lo, t, df, delta)
            show("NoncentralTUpper", allow(up), up, t, df, delta)

for t, df, delta in [(30, 20, 28), (2, 100000, 3), (1000, 5, 900), (263, 1, 3.3), (77, 999, 73), (65, 999, 73), (1e6, 3, 2), (-1e4, 2, 1), (5, 3, 120), (170, 3, 120)]:
    lo, up = tails(mpf(t), mpf(df), mpf(delta))
    show("NoncentralTLower", allow(lo), lo, t, df, delta)
    show("NoncentralTUpper", allow(up), up, t, df, delta)

# Far regions: many degrees of freedom, and a noncentrality up to the 1000 of the claim. The
# place is so many standard deviations of t from delta.
for df, delta, places in [
    (0.5, 1000, [-1.2, -0.4, 3, 1e4]), (2, 300, [-1.3, -0.9, 0.5, 30]), (10, 1000, [-2.5, -1, 1, 8, 1e3]), (200, 300, [-9, -3, 0, 4, 12]),
    (4001, 100, [-20, -5, -0.5, 2, 25]), (1e5, 0.01, [-30, -2, 1, 30]), (1e5, 38, [-30, -7, 0.1, 7, 30]), (1e6, -3, [-25, -4, 1, 33]),
    (1e6, 12, [-34, -8, 2, 30]), (1e6, 300, [-30, -6, 0, 3, 30]), (1e6, 1000, [-30, -7, 1, 9, 30]), (3.3e7, 5, [-30, -3, 1, 20]), (1e9, 20, [-30, -3, 1, 20]),
]:
    df, delta = mpf(df), mpf(delta)
    for place in places:
        t = mpf(float(delta + place * sqrt(1 + delta * delta / (2 * df))))
        lo, up = tails(t, df, delta)
        show("NoncentralTLower", allow(lo), lo, t, df, delta)
        show("NoncentralTUpper", allow(up), up, t, df, delta)

# Fewer digits are enough where no tail is below 1e-14.
mp.dps = 120
for df in [1, 2, 4, 11, 29, 137, 999]:
    for delta in [-4, 0.1, 1.3, 3.3, 12.7, 73]:
        for p in [1e-12, 0.001, 0.05, 0.5, 0.9, 0.975, 0.9999, 1 - 2.0**-40]:
            if df == 999 and delta < 0 or df == 1 and (p < 1e-6 or p > 0.99999):
                continue
            show("NoncentralTQuantile", "2e-13", quantile(p, mpf(df), mpf(delta)), p, df, delta)
for df, delta, some in [(1e5, 2, 4), (1e6, 10, 4), (1e6, 100, 2)]:
    for p in [1e-10, 0.05, 0.9, 1 - 2.0**-40][:some]:
        show("NoncentralTQuantile", "2e-13", quantile(p, mpf(df), mpf(delta)), p, df, delta)
mp.dps = 420
for df, delta in [(7, 3), (60, -2), (1000, 20)]:
    for p in [1e-250, 1e-100, 1e-30]:
        show("NoncentralTQuantile", "2e-13", quantile(p, mpf(df), mpf(delta)), p, df, delta)
