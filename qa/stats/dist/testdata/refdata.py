# Reference values for package dist, to 60 digits and rounded to 20.
# Made 2026-12-01 with Python 3.11, mpmath 1.2.1:  python3 refdata.py > exact.txt
#
# The incomplete beta function is summed from its definition as a series of
# positive terms, which the package does not use:
#   I_x(a,b) = x^a (1-x)^b / (a B(a,b)) * sum_n prod_k<n (a+b+k)/(a+1+k) x^n
# The normal tail is mpmath's erfc. Inputs are float64, taken as exact.
from mpmath import mp, mpf, exp, log, sqrt, gamma, loggamma, erfc, nstr

mp.dps = 60


def series(a, b, x, y):
    term = total = mpf(1)
    n = 0
    while term > total * mpf(10) ** (-mp.dps):
        term *= (a + b + n) / (a + 1 + n) * x
        total += term
        n += 1
    return exp(a * log(x) + b * log(y) - log(a) - loggamma(a) - loggamma(b) + loggamma(a + b)) * total


def beta_lower(a, b, r):
    """I_x(a,b) for x = r/(1+r), by the series of the end below 1/2."""
    # The tail beyond the mean is about exp(-w). Where it is far below all that is shown or
    # asked for, the series would be long, and a stand-in does.
    w = a * log(a * (1 + r) / ((a + b) * r)) + b * log(b * (1 + r) / (a + b))
    if w > 1500:
        return exp(-w) if b * r < a else mpf(1)
    if r <= 1:
        return series(a, b, r / (1 + r), 1 / (1 + r))
    # The complement, with digits to spare for the subtraction.
    keep = mp.dps
    if b * r < a:
        mp.dps += 10 + int(w / 2.3)
    try:
        return 1 - series(b, a, 1 / (1 + r), r / (1 + r))
    finally:
        mp.dps = keep


def t_upper(t, df):
    if t < 0:
        return 1 - t_upper(-t, df)
    return beta_lower(df / 2, mpf(1) / 2, df / (t * t)) / 2


def t_density(t, df):
    return exp(loggamma((df + 1) / 2) - loggamma(df / 2) - (df + 1) / 2 * log(1 + t * t / df)) / sqrt(df * mp.pi)


def f_lower(f, d1, d2):
    r = d1 * f / d2
    return beta_lower(d1 / 2, d2 / 2, r)


def f_upper(f, d1, d2):
    return f_lower(1 / f, d2, d1)


def f_density(f, d1, d2):
    a, b, r = d1 / 2, d2 / 2, d1 * f / d2
    return exp(loggamma(a + b) - loggamma(a) - loggamma(b) + a * log(r) - (a + b) * log(1 + r)) / f


def root(func, low, high):
    """Root of a rising func over u = log of the answer: halving, then secants."""
    for _ in range(24):
        mid = (low + high) / 2
        if func(mid) < 0:
            low = mid
        else:
            high = mid
    return low, high


def t_quantile(p, df):
    p = mpf(p)
    if p > 0.5:
        return -t_quantile_lower(1 - p, df)
    return t_quantile_lower(p, df)


def t_quantile_lower(p, df):
    low, high = root(lambda u: p - t_upper(exp(u), df), mpf(-46), mpf(705))
    t = exp((low + high) / 2)
    for _ in range(8):
        tail = t_upper(t, df)
        t *= exp(log(tail / p) * tail / (t * t_density(t, df)))
    return -t


def f_quantile(p, d1, d2):
    p = mpf(p)
    if p > 0.5:
        return 1 / f_quantile(1 - p, d2, d1)
    low, high = root(lambda u: f_lower(exp(u), d1, d2) - p, mpf(-720), mpf(60))
    f = exp((low + high) / 2)
    for _ in range(8):
        lower = f_lower(f, d1, d2)
        f *= exp(log(p / lower) * lower / (f * f_density(f, d1, d2)))
    return f


def z_quantile(p):
    p = mpf(p)
    if p > 0.5:
        return -z_quantile(1 - p)
    low, high = root(lambda u: p - erfc(exp(u) / sqrt(2)) / 2, mpf(-40), mpf(4))
    z = exp((low + high) / 2)
    for _ in range(8):
        tail = erfc(z / sqrt(2)) / 2
        z += log(tail / p) * tail * sqrt(2 * mp.pi) * exp(z * z / 2)
    return -z


def show(name, allowed, value, *args):
    if value != 0 and (abs(value) < mpf("1e-305") or abs(value) > mpf("1e300")):
        return
    print(name, *[repr(float(a)) for a in args], nstr(value, 20, min_fixed=0, max_fixed=0), allowed)


print("# Made by refdata.py (2026-12-01, Python 3.11, mpmath 1.2.1, 60 digits).")
print("# function, arguments, value, allowed relative error")

DF = [0.5, 1, 1.5, 2, 3, 7.03, 11, 21.5630439, 30, 100.25, 137, 1000, 9999.5, 1e5, 1e6, 2e6 - 2, 3.3e7, 1e9]
T = [1e-100, 1e-9, 1e-6, 1e-3, 0.1, 0.5, 0.9, 1, 1.1, 1.7, 2.5, 5, 8, 12, 20, 30, 37, 40, 300, 1e4, 1e9, 1e30, 1e99, 1e150]
for df in DF:
    for t in T:
        t, df = mpf(t), mpf(df)
        # The tail falls like exp(-w), w = df/2 log(1+t^2/df): w roundings.
        w = df / 2 * log(1 + t * t / df)
        p = t_upper(t, df)
        allowed = "3e-14" if w < 50 else "1e-13" if w < 500 else "2e-13"
        show("StudentUpper", allowed, p, t, df)
        show("StudentLower", allowed, p, -t, df)
        show("StudentLower", "1e-14", 1 - p, t, df)
        show("StudentTwoSided", allowed, 2 * p, -t, df)

P = [1e-300, 1e-200, 1e-100, 1e-25, 1e-10, 1e-6, 1e-3, 0.005, 0.025, 0.05, 0.1, 0.2, 0.3, 0.4, 0.49, 0.499999, 0.5 + 2.0**-30, 0.7, 0.95, 0.975, 0.9999, 1 - 2.0**-53]
for df in DF:
    for p in P:
        if float(p) == 1e-300 and df < 1:
            continue
        show("StudentQuantile", "5e-14", t_quantile(p, mpf(df)), p, df)


def allow(p):
    return "5e-14" if p > 1e-100 else "2e-13"


FD = [(1, 1), (1, 7.5), (0.5, 0.5), (1000, 0.5), (2, 3), (11, 11), (8, 10), (10, 8), (239, 239), (1, 1e5), (1e5, 3), (99, 12345.5), (1e5, 1e5), (1e6, 1e6), (0.5, 1e6), (19, 1e9), (1e9, 2)]
for d1, d2 in FD:
    for f in [1e-12, 1e-3, 0.1, 0.461201089, 0.8, 0.99, 1, 1.01, 1.12303752331, 1.8, 3.6, 12, 100, 1e6]:
        f, d1, d2 = mpf(f), mpf(d1), mpf(d2)
        lo, up = f_lower(f, d1, d2), f_upper(f, d1, d2)
        show("FLower", allow(lo), lo, f, d1, d2)
        show("FUpper", allow(up), up, f, d1, d2)
    for p in [1e-300, 1e-200, 1e-100, 1e-10, 0.001, 0.025, 0.05, 0.25, 0.499, 0.5, 0.51, 0.9, 0.95, 0.975, 0.9999]:
        if min(d1, d2) > 1e5 and not (p < 1e-9 or p in (0.001, 0.025, 0.95)):
            continue  # each takes a minute
        show("FQuantile", "1e-13", f_quantile(p, mpf(d1), mpf(d2)), p, d1, d2)

for f, d1, d2 in [(350, 4, 1e5), (55, 30, 3000), (500, 7.5, 500), (900, 7.5, 500), (3e13, 2, 50), (1.18, 1e5, 1e5), (1e20, 3, 29), (8, 200, 5000)]:  # tails down to 1e-300
    for v, a, b in [(mpf(f), mpf(d1), mpf(d2)), (mpf(float(1 / mpf(f))), mpf(d2), mpf(d1))]:
        lo, up = f_lower(v, a, b), f_upper(v, a, b)
        show("FLower", allow(lo), lo, v, a, b)
        show("FUpper", allow(up), up, v, a, b)

for z in [1e-12, 1e-6, 0.01, 0.3, 0.67, 1, 1.5, 2, 2.5, 3, 4, 5, 6.5, 8, 10, 15, 20, 30, 35, 37]:
    z = mpf(z)
    p = erfc(z / sqrt(2)) / 2
    show("NormalUpper", "2e-15", p, z)
    show("NormalLower", "2e-15", p, -z)
    show("NormalLower", "1e-15", 1 - p, z)
for p in P:
    show("NormalQuantile", "2e-15", z_quantile(p), p)
