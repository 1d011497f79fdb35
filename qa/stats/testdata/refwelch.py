# Two-sided p of Welch's test of 1,000 and 1,000 readings, in 50 digits.
# Made 2026-12-01 with Python 3.11, mpmath:  python3 refwelch.py > welch.txt
#
# The readings are made by both sides from whole numbers, so that they are the same
# float64: twelve terms of Knuth's linear congruential generator (MMIX), 24 bits each,
# less their mean, times a spread, plus a level. p is the incomplete beta function.
import mpmath

mpmath.mp.dps = 50


def readings(seed, n, level, spread):
    state, out = seed, []
    for _ in range(n):
        total = 0
        for _ in range(12):
            state = (state * 6364136223846793005 + 1442695040888963407) % 2**64
            total += state >> 40
        z = (total - 6 * 2**24) / 2**24
        step = spread * z
        out.append(level + step)
    return [mpmath.mpf(v) for v in out]


def summary(x):
    m = mpmath.fsum(x) / len(x)
    return m, mpmath.fsum((v - m) ** 2 for v in x) / (len(x) - 1) / len(x)


print("# seed, level, level of the candidate, spread, spread of the candidate, two-sided p")
for i, (level, shift, s1, s2) in enumerate([
    (25, 0.001, 0.01, 0.01), (25, 0.0005, 0.01, 0.02), (25, 0.003, 0.01, 0.01), (1000, 0.001, 0.01, 0.01),
    (12.004, 0.0003, 0.0077, 0.0089), (1e6, 0.002, 0.01, 0.03), (0, 0.01, 1, 1), (0.05, 0.002, 0.02, 0.03),
    (-25, 0.0012, 0.01, 0.005), (3, 0.2, 1, 1.5), (1e-7, 1e-9, 1e-8, 1e-8), (1e8, 0.1, 1, 1),
]):
    x = readings(2 * i + 1, 1000, float(level), float(s1))
    y = readings(2 * i + 2, 1000, float(level) + float(shift), float(s2))
    (m1, v1), (m2, v2) = summary(x), summary(y)
    t = (m2 - m1) / mpmath.sqrt(v1 + v2)
    df = (v1 + v2) ** 2 / (v1**2 / 999 + v2**2 / 999)
    p = mpmath.betainc(df / 2, mpmath.mpf(1) / 2, 0, df / (df + t * t), regularized=True)
    print(2 * i + 1, repr(float(level)), repr(float(level) + float(shift)), repr(float(s1)), repr(float(s2)), mpmath.nstr(p, 25))
