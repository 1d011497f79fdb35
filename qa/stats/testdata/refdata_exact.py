"""Powers, sizes and tolerance factors to 20 digits.

Made 2026-12-01 with Python 3.11 and mpmath 1.2.1:  python3 refdata_exact.py > exact.txt

Power of two one-sided tests, standard deviation 1: the chance given the standard
deviation found, integrated over the chi density itself by mpmath's tanh-sinh rule in
pieces, in 30 digits; the critical value by the secant method on the incomplete beta
function. (The program integrates over the logarithm, in equal steps.) Sizes by halving,
in 18 digits. One-sided factors in 25 digits by the secant method on the noncentral t as
an integral over z of the chi-square probability; the program integrates over the
chi-square variable. Inputs are float64, taken as exact.
"""
from mpmath import betainc, erfc, exp, findroot, gammainc, inf, log, loggamma, mp, mpf, pi, quad, sqrt
from statistics import NormalDist

mp.dps = 30


def phi(x):
    return erfc(-x / sqrt(mpf(2))) / 2


def t_upper(t, df):
    return betainc(df / 2, mpf(1) / 2, 0, df / (df + t * t), regularized=True) / 2


def critical(alpha, df):
    """The t with P(T >= t) = alpha."""
    if df > 2000:  # the tail by quadrature; betainc is slow there
        lead = loggamma((df + 1) / 2) - loggamma(df / 2) - log(df * pi) / 2
        tail = lambda t: quad(lambda x: exp(lead - (df + 1) / 2 * log(1 + x * x / df)), [t, t + 2, t + 6, t + 14, t + 30])
    else:
        tail = lambda t: t_upper(t, df)
    z = -mpf(NormalDist().inv_cdf(float(alpha)))
    start = z + (z**3 + z) / (4 * df)
    return findroot(lambda t: log(tail(t) / alpha), (start, start * mpf("1.001")), solver="secant", tol=mpf(10) ** -(mp.dps - 8), verify=False)


def over_s(df, high, f):
    """f(s) over the density of s, df s^2 chi-square, from 0 to high."""
    lead = log(mpf(2)) + df / 2 * log(df / 2) - loggamma(df / 2)
    w = 1 / sqrt(2 * df)
    top = min(high, 1 + 60 * w if df > 30 else 1 + 60 * w + 20 / df)
    ends = [mpf(0)] + [1 + k * w for k in range(-40, 60, 4) if 0 < 1 + k * w < top] + [top]
    return quad(lambda s: exp(lead + (df - 1) * log(s) - df * s * s / 2) * f(s) if s > 0 else mpf(0), ends)


def tost_power(n1, n2, margin, shift, alpha, known={}):
    n1, n2, margin, shift, alpha = mpf(n1), mpf(n2), mpf(margin), mpf(shift), mpf(alpha)
    df, se = n1 + n2 - 2, sqrt(1 / n1 + 1 / n2)
    key = (df, alpha, mp.dps)
    if key not in known:
        known[key] = critical(alpha, df)
    t = known[key]
    above, below = (margin - shift) / se, (margin + shift) / se
    return over_s(df, (below + above) / (2 * t), lambda s: phi(above - t * s) - phi(t * s - below))


def tost_size(margin, shift, alpha, power):
    z = NormalDist().inv_cdf(power if shift else (1 + power) / 2) - NormalDist().inv_cdf(alpha)
    n = max(3, int(2 * (z / (margin - abs(shift))) ** 2))
    below, above = 1, 2 * n + 10  # halving: the power rises with n near the size sought
    enough = lambda k: k > 1 and tost_power(k, k, margin, shift, alpha) >= power
    if not enough(n):
        below = n
        if enough(n + n // 20 + 2):
            above = n + n // 20 + 2
    elif not enough(n - n // 20 - 2):
        below, above = n - n // 20 - 2, n
    while above - below > 1:
        middle = (below + above) // 2
        if enough(middle):
            above = middle
        else:
            below = middle
    return above


def one_sided(n, coverage, confidence):
    """k with P(T <= k sqrt(n)) = confidence, T noncentral t of n-1 freedoms and ncp z sqrt(n)."""
    df, root = mpf(n - 1), sqrt(mpf(n))
    z = findroot(lambda x: phi(x) - mpf(coverage), mpf(NormalDist().inv_cdf(coverage)), tol=mpf(10) ** -(mp.dps - 4))
    delta = z * root

    def lower(k):  # P(T <= t), t above 0: Z + delta <= 0, or S large enough
        t = k * root
        ends = [-delta] + [mpf(c) for c in range(-20, 21, 2) if c > -delta]
        return phi(-delta) + quad(lambda x: exp(-x * x / 2) / sqrt(2 * pi) * gammainc(df / 2, df * ((x + delta) / t) ** 2 / 2, inf, regularized=True), ends)
    start = z + sqrt(1 / mpf(n) + z * z / (2 * df)) * mpf(NormalDist().inv_cdf(confidence))
    return findroot(lambda k: lower(k) - mpf(confidence), (start, start * mpf("1.01")), solver="secant", tol=mpf(10) ** -(mp.dps - 8), verify=False)


def show(name, value, allowed, *args):
    print(name, *[repr(float(a)) for a in args], mp.nstr(mpf(value), 20, min_fixed=0, max_fixed=0), allowed, flush=True)


if __name__ == "__main__":
    print("# Made by refdata_exact.py (2026-12-01, Python 3.11, mpmath 1.2.1, 25 digits and more).")
    print("# function, arguments, value, allowed relative error")
    mp.dps = 30
    for n1, n2 in [(2, 2), (3, 5), (6, 6), (12, 12), (30, 30), (50, 80), (500, 500), (5000, 200), (100000, 100000), (1000000, 1000000)]:
        se = (1 / n1 + 1 / n2) ** 0.5
        for margin in [2, 3.5, 6]:
            for shift in [0, 0.4, 1, -1.25]:
                for alpha in [0.05] if shift else [0.05, 0.001]:
                    m = margin * se * (1 if n1 > 3 else 4)
                    power = tost_power(n1, n2, m, shift * m, alpha)
                    if power > mpf(10) ** -30:
                        show("TOSTPower", power, "1e-12", n1, n2, m, shift * m, alpha)
    mp.dps = 18  # one reading more changes the power in the fifth digit or so
    for margin, shift, alpha, power in [
        (1, 0, 0.05, 0.9), (1, 0.25, 0.05, 0.9), (0.5, 0, 0.05, 0.8), (0.5, 0.25, 0.05, 0.8), (0.6, 0.1, 0.05, 0.9), (2, 0, 0.05, 0.8), (4, 1, 0.05, 0.9),
        (0.1, 0, 0.05, 0.8), (0.06, 0.01, 0.05, 0.9), (0.03, 0.002, 0.05, 0.9), (1, -0.5, 0.01, 0.95), (0.3, 0, 0.025, 0.9), (0.05, 0, 0.001, 0.99), (10, 0, 0.05, 0.8),
    ]:
        show("TOSTSize", tost_size(margin, shift, alpha, power), "0", margin, shift, alpha, power)
    mp.dps = 25
    for n in [2, 3, 5, 10, 30]:
        for coverage, confidence in [(0.9, 0.9), (0.95, 0.95), (0.99, 0.95), (0.999, 0.99), (0.5, 0.6)]:
            show("ToleranceFactorOneSided", one_sided(n, coverage, confidence), "1e-12", n, coverage, confidence)
