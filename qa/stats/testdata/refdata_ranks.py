"""Ranks counted out in whole numbers, shifts by sorting every difference.

Made 2026-12-01 with Python 3.11:  python3 refdata_ranks.py > ranks.txt

Another way than the program's: whole-number counts by the sum of all midranks of
a choice (dictionaries over every reading), fractions, and every difference and
Walsh average sorted as decimals. One line an answer: set, quantity, value,
allowed relative error.
"""
import random
from decimal import Decimal
from fractions import Fraction
from itertools import combinations_with_replacement
from math import comb


def midranks2(values):  # twice the midranks
    s = sorted(values)
    first = {}
    for i, v in enumerate(s):
        first.setdefault(v, i)
    count = {}
    for v in s:
        count[v] = count.get(v, 0) + 1
    return {v: 2 * first[v] + 1 + count[v] for v in first}


def u_table(scores, n):  # choices of n of the scores by their sum
    table = [{} for _ in range(n + 1)]
    table[0][0] = 1
    for s in scores:
        for j in range(n, 0, -1):
            for k, c in table[j - 1].items():
                table[j][k + s] = table[j].get(k + s, 0) + c
    return table[n]


def v_table(scores):
    table = {0: 1}
    for s in scores:
        new = dict(table)
        for k, c in table.items():
            new[k + s] = new.get(k + s, 0) + c
        table = new
    return table


def two_sided(table, at):
    total = sum(table.values())
    low = sum(c for k, c in table.items() if k <= at)
    high = sum(c for k, c in table.items() if k >= at)
    return min(Fraction(1), Fraction(2 * min(low, high), total))


def last_rank(table, half_pairs, offset=0):  # largest k with 2 P(statistic <= k-1) <= 1/10
    total = sum(table.values())
    keys = sorted(table)
    k, i, low = 0, 0, 0
    while True:
        while i < len(keys) and keys[i] - offset <= 2 * k:  # twice the statistic at most 2k
            low += table[keys[i]]
            i += 1
        if Fraction(2 * low, total) > Fraction(1, 10) or k + 1 > half_pairs:
            return k
        k += 1


def out(name, what, value, tol="1e-13"):
    print(name, what, repr(float(value)), tol)


def pick(name, what, diffs, k):
    diffs = sorted(diffs)
    m = len(diffs)
    out(name, what + ".shift", (diffs[(m - 1) // 2] + diffs[m // 2]) / 2, "1e-15")
    if k >= 1:
        out(name, what + ".lower", diffs[k - 1], "1e-15")
        out(name, what + ".upper", diffs[m - k], "1e-15")


def lots(name, ref, cand):
    print("readings", name, "ref", *[str(v) for v in ref])
    print("readings", name, "cand", *[str(v) for v in cand])
    r2 = midranks2(ref + cand)
    n = len(cand)
    table = u_table(sorted(r2[v] for v in ref + cand), n)
    at = sum(r2[v] for v in cand)
    out(name, "u.u", Fraction(at - n * (n + 1), 2))
    out(name, "u.p", two_sided(table, at))
    k = last_rank(table, (len(ref) * n + 1) // 2, n * (n + 1))
    pick(name, "u", [c - r for r in ref for c in cand], k)
    if len(ref) == len(cand):
        d = [c - r for r, c in zip(ref, cand)]
        some = [v for v in d if v != 0]
        if len(set(d)) > 1 and some:
            r2 = midranks2([abs(v) for v in some])
            at = sum(r2[abs(v)] for v in some if v > 0)
            out(name, "v.v", Fraction(at, 2))
            out(name, "v.p", two_sided(v_table([r2[abs(v)] for v in some]), at))
            r2 = midranks2([abs(v) for v in d])
            m = len(d) * (len(d) + 1) // 2
            k = last_rank(v_table([r2[abs(v)] for v in d]), (m + 1) // 2)
            pick(name, "v", [(a + b) / 2 for a, b in combinations_with_replacement(d, 2)], k)


random.seed(20261201)
print("# Made by refdata_ranks.py (2026-12-01, Python). Readings have 3 decimals.\n# set, quantity, value, allowed relative error")
sizes = [(2, 2), (2, 5), (3, 3), (4, 4), (5, 9), (7, 7), (10, 12), (15, 15), (20, 20), (12, 40), (30, 30), (50, 50)]
for i, (m, n) in enumerate(sizes):
    for grid in (1, 4, 40):  # thousandths: nearly no ties; coarse: many
        centre = random.choice([0, 12, 250])
        def draw(mean, sd):
            return Decimal(round((centre + random.gauss(mean, sd)) * 1000 / grid) * grid).scaleb(-3)
        shift = random.choice([0, 0.01, 0.05])
        ref = [draw(0, 0.05) for _ in range(m)]
        cand = [draw(shift, 0.08) for _ in range(n)]
        if len(set(ref + cand)) > 1:
            lots(f"S{i}.{grid}", ref, cand)


def gaussian(m, n):  # U without ties, by the recursion of positive terms only
    table = [[1] for _ in range(n + 1)]  # table[j]: m = 0
    for i in range(1, m + 1):
        row = [[1]]
        for j in range(1, n + 1):
            a, b = table[j], row[j - 1]  # the largest is of the first lot, or of the second
            c = [0] * (i * j + 1)
            for k, v in enumerate(b):
                c[k] += v
            for k, v in enumerate(a):
                c[k + j] += v
            row.append(c)
        table = row
    return table[n]


for m, n in ((60, 60), (70, 40)):  # untied and larger: readings 1..m+n in a shuffled order
    order = list(range(1, m + n + 1))
    random.shuffle(order)
    counts = gaussian(m, n)
    ref, cand = order[:m], order[m:]
    name = f"G{m}.{n}"
    print("readings", name, "ref", *ref)
    print("readings", name, "cand", *cand)
    u = sum(c > r for c in cand for r in ref)
    low, high = sum(counts[: u + 1]), sum(counts[u:])
    out(name, "u.u", u)
    out(name, "u.p", min(Fraction(1), Fraction(2 * min(low, high), comb(m + n, m))))
    k, low = 0, 0
    while Fraction(2 * (low + counts[k]), comb(m + n, m)) <= Fraction(1, 10):
        low += counts[k]
        k += 1
    pick(name, "u", [c - r for r in ref for c in cand], k)
