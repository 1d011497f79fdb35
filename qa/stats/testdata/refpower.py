# Powers of designs with unequal standard deviations, by another way than the package.
# Made 2026-12-01 with Python 3.11, SciPy 1.10.1:  python3 refpower.py > power.txt
#
# The two variances found, each over its number of readings, have gamma densities;
# their product is integrated by adaptive quadrature over v1 = r sin^2 u, v2 = r cos^2 u,
# the chance of the aim given both being a normal one. pooled says that the test is the
# pooled one, else it is Welch's.
import math
from scipy import integrate, special, stats


def power(aim, welch, n1, n2, s1, s2, alpha, low, high, shift):
    d1, d2 = n1 - 1, n2 - 1
    se = math.sqrt(s1 * s1 / n1 + s2 * s2 / n2)
    m1, m2 = s1 * s1 / n1, s2 * s2 / n2  # means of v1, v2
    a1, a2 = d1 / 2, d2 / 2
    b1, b2 = m1 / a1, m2 / a2  # scales
    const = -special.gammaln(a1) - special.gammaln(a2) - a1 * math.log(b1) - a2 * math.log(b2)
    tail = alpha / 2 if aim == "difference" else alpha

    def outer(u):
        s, c = math.sin(u) ** 2, math.cos(u) ** 2
        if s == 0 or c == 0:
            return 0.0
        if welch:
            t = -stats.t.ppf(tail, 1 / (s * s / d1 + c * c / d2))
            per = 1.0  # squared standard error over r
        else:
            t = -stats.t.ppf(tail, d1 + d2)
            per = (d1 * s * n1 + d2 * c * n2) / (d1 + d2) * (1 / n1 + 1 / n2)

        def inner(r):
            half = t * math.sqrt(per * r)
            density = math.exp(const + (a1 - 1) * math.log(r * s) + (a2 - 1) * math.log(r * c) - r * s / b1 - r * c / b2)
            if aim == "within":
                chance = special.ndtr((high - shift - half) / se) - special.ndtr((low - shift + half) / se)
            elif aim == "notlower":
                chance = special.ndtr((shift - low - half) / se)
            else:
                chance = special.ndtr((shift - half) / se) + special.ndtr((-shift - half) / se)
            return density * chance * r
        edge = (m1 + m2) * (1 + 14 * max(1 / math.sqrt(d1), 1 / math.sqrt(d2)) + 60 / min(d1, d2))
        if aim == "within":
            edge = min(edge, ((high - low) / 2 / t) ** 2 / per)
        cuts = [edge * k / 8 for k in range(9)]
        cuts[0] = 1e-300
        total = sum(integrate.quad(inner, a, b, epsabs=1e-13, epsrel=1e-12, limit=200)[0] for a, b in zip(cuts, cuts[1:]))
        return total * math.sin(2 * u)
    cuts = [math.pi / 2 * k / 6 for k in range(7)]
    return sum(integrate.quad(outer, a, b, epsabs=1e-11, epsrel=1e-10, limit=200)[0] for a, b in zip(cuts, cuts[1:]))


print("# Made by refpower.py (2026-12-01, Python 3.11, SciPy 1.10.1).")
print("# aim, test, n reference, n candidate, sd reference, sd candidate, alpha, lower, upper, shift, power, allowed absolute error")
for aim in ["within", "notlower", "difference"]:
    for welch in [True, False]:
        for n1, n2 in [(3, 5), (10, 10), (12, 30), (60, 25)]:
            for s1, s2 in [(1, 1), (1, 2), (1.5, 0.5)]:
                if s1 == s2 and not welch:
                    continue
                for shift in [0, 0.3]:
                    if aim == "difference" and shift == 0:
                        continue
                    m = 8 / math.sqrt(n1)
                    p = power(aim, welch, n1, n2, s1, s2, 0.05, -m, 0.7 * m, shift * m)
                    print(aim, "welch" if welch else "pooled", n1, n2, s1, s2, 0.05, repr(-m), repr(0.7 * m), repr(shift * m), repr(float(p)), "1e-8")
