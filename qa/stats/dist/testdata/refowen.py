# Reference values of chi-square and of Owen's integrals, 50 digits rounded to 20.
# Made 2026-12-01 with Python 3.11, mpmath 1.2.1:  python3 refowen.py > owen.txt
#
# Chi-square: for even degrees of freedom the finite Poisson sum, else mpmath's
# incomplete gamma function. Owen's integrals: mpmath's tanh-sinh rule over the chi
# density itself in pieces; the package uses Gauss-Legendre over log s. Inputs are
# float64, exact.
from mpmath import mp, mpf, exp, log, sqrt, gamma, loggamma, gammainc, erfc, quad, inf, nstr

mp.dps = 50


def chi_tails(x, df):
    a, y = df / 2, x / 2
    if a == int(a):
        # The smaller tail from its largest term on; the other one needs no digits more.
        term = exp(a * log(y) - y - loggamma(a + 1))
        total = mpf(0)
        k = 0
        if y < a:
            while term > total * mpf(10) ** -48:
                total += term
                k += 1
                term *= y / (a + k)
            return total, 1 - total
        term *= a / y
        while term > total * mpf(10) ** -48:
            total += term
            k += 1
            term *= (a - k) / y
        return 1 - total, total
    return gammainc(a, 0, y, regularized=True), gammainc(a, y, inf, regularized=True)


def chi_quantile(p, df):
    upper = p > 0.5
    want = log(1 - mpf(p)) if upper else log(mpf(p))

    def off(u):
        low, up = chi_tails(exp(u), df)
        return want - log(up) if upper else log(low) - want

    a, b = log(df) - 1, log(df) + 1
    while off(a) > 0:
        a -= 2
    while off(b) < 0:
        b += 2
    for _ in range(12):
        mid = (a + b) / 2
        if off(mid) < 0:
            a = mid
        else:
            b = mid
    fa, fb = off(a), off(b)
    for _ in range(12):
        c = b - fb * (b - a) / (fb - fa)
        a, fa, b = b, fb, c
        if abs(b - a) < mpf(10) ** -40:
            break
        fb = off(b)
    return exp(b)


def phi(x):
    return erfc(-x / sqrt(mpf(2))) / 2


def pieces(df, low, high):
    """low to high cut where the density of s is nil, in pieces of its width."""
    w = 1 / sqrt(2 * df)
    ends = [low] + [1 + k * w for k in range(-24, 60, 4) if low < 1 + k * w < high] + [high]
    return [e for e in ends if e < 1 + 60 * w or e == low]


def over_s(df, low, high, f):
    lead = log(mpf(2)) + df / 2 * log(df / 2) - loggamma(df / 2)
    ends = pieces(df, low, high)
    g = lambda s: exp(lead + (df - 1) * log(s) - df * s * s / 2) * f(s) if s > 0 else mpf(0)
    top = min(high, 1 + 60 / sqrt(2 * df))
    scale = max(g(low + (top - low) * k / 64) for k in range(64))  # quad's error is absolute
    return scale * quad(lambda s: g(s) / scale, ends) if scale > 0 else mpf(0)


def owen(df, t, delta, low, high):
    root = sqrt(df)
    return over_s(df, low / root, high / root, lambda s: phi(t * s - delta))


def between(t, df, below, above):
    return over_s(df, mpf(0), (below + above) / (2 * t), lambda s: phi(above - t * s) - phi(t * s - below))


def show(name, allowed, value, *args):
    if value != 0 and (abs(value) < mpf("1e-280") or abs(value) > mpf("1e300")):
        return
    print(name, *[repr(float(a)) for a in args], nstr(value, 20, min_fixed=0, max_fixed=0), allowed)


print("# Made by refowen.py (2026-12-01, Python 3.11, mpmath 1.2.1, 50 digits).")
print("# function, arguments, value, allowed relative error")

DF = [0.5, 1, 2, 3, 7.03, 10, 29, 100.25, 500, 2001]
for df in DF:
    for r in [1e-6, 0.05, 0.3, 0.7, 0.95, 1, 1.05, 1.4, 2.5, 8]:
        x = mpf(float(df * r))
        low, up = chi_tails(x, mpf(df))
        show("ChiSquareLower", "5e-14" if low > 1e-25 else "3e-13", low, x, df)
        show("ChiSquareUpper", "5e-14" if up > 1e-25 else "3e-13", up, x, df)
    for p in [1e-10, 0.001, 0.025, 0.05, 0.3, 0.5, 0.9, 0.975, 0.9999, 1 - 2.0**-40]:
        show("ChiSquareQuantile", "5e-14", chi_quantile(p, mpf(df)), p, df)

# Far regions: many degrees of freedom, and tails down to 1e-300.
for df, places in [
    (2, [1300]), (4, [1e-9, 1e-100, 1400]), (10, [1e-50, 1500]), (100, [1e-5, 1700]), (2000, [200, 6000]),
    (1e5, [-38, -12, -3, -0.1, 0.1, 3, 12, 38]), (1e6, [-37, -8, -1, 1, 8, 37]), (3.3e7, [-20, -2, 2, 20]), (1e9, [-20, -2, 2, 20]),
]:
    for place in places:
        x = mpf(float(df + place * sqrt(2 * mpf(df)) if df > 9999 else place))
        low, up = chi_tails(x, mpf(df))
        show("ChiSquareLower", "5e-14" if low > 1e-25 and df <= 1e6 else "1e-12", low, x, df)
        show("ChiSquareUpper", "5e-14" if up > 1e-25 and df <= 1e6 else "1e-12", up, x, df)
for df in [2, 10, 1000, 1e5, 1e6]:
    for p in [1e-300, 1e-100, 1e-30] if df < 1e6 else [1e-100, 0.05, 0.999]:
        show("ChiSquareQuantile", "5e-14", chi_quantile(p, mpf(df)), p, df)

mp.dps = 30
for df, t in [(1e5, 1.7), (1e6, 1.7), (1e6, 3.1), (5, 2.1), (200, 1.7)]:
    for below, above in [(2, 2), (0.3, 0.4), (5, 1), (30, 30), (200, 150), (1000, 990), (-2, 9), (4.5, 1e5)]:
        v = between(mpf(t), mpf(df), mpf(below), mpf(above))
        if v > mpf(10) ** -60:
            show("StudentBetween", "2e-13", v, t, df, below, above)
for df, t, below, above in [(60, 1.7, 0.4, 0.5), (200, 1.7, 0.9, 1), (200, 1.7, 0.5, 0.7), (1000, 1.65, 1.1, 1.2), (30, 2.5, 0.02, 0.02), (58, 3.4, 0.1, 0.4)]:
    show("StudentBetween", "1e-12", between(mpf(t), mpf(df), mpf(below), mpf(above)), t, df, below, above)
for df in [1, 2, 3, 5.5, 18, 58, 398, 10000]:
    for t in [0.7, 1.7, 6.3]:
        for below, above in [(1, 1), (0.1, 0.1), (3, 3), (2.5, 7), (9, 4), (30, 2), (6, -0.5), (-1, 5), (40, 40)]:
            v = between(mpf(t), mpf(df), mpf(below), mpf(above))
            if v > mpf(10) ** -60:
                show("StudentBetween", "2e-13", v, t, df, below, above)
for df in [1, 2, 7, 30, 200, 5000, 1e6]:
    for t in [-1, 0.5, 3]:
        for delta in [-1, 0, 2] if df < 1000 else [-1, 2, 40]:
            for r in [0.5, 2, 6, 14] if df < 1000 else [float(sqrt(df)) * k for k in (0.9, 0.99, 0.9999, 1.01)]:
                q1 = owen(mpf(df), mpf(t), mpf(delta), mpf(0), mpf(r))
                q2 = owen(mpf(df), mpf(t), mpf(delta), mpf(r), mpf(inf))
                if q1 > mpf(10) ** -14:
                    show("OwenQ1", "1e-13", q1, df, t, delta, r)
                if q2 > mpf(10) ** -14:
                    show("OwenQ2", "1e-13", q2, df, t, delta, r)
