"""Recompute a record's main figures from its sheet Readings with SciPy, and hold them against its sheet Results.

Usage: python3 recompute.py RECORD.xlsx. Needs openpyxl and SciPy. Exit code 0 when all agree to 1e-9, else 1.
"""
import math
import sys

import openpyxl
from scipy import stats

book = openpyxl.load_workbook(sys.argv[1], data_only=True)

readings = {}
for row in book["Readings"].iter_rows(min_row=4, values_only=True):
    side, _, name, value, _, _, _, _, _, state = row[:10]
    if side and state == "used":
        readings.setdefault(name, {}).setdefault(side, []).append(value)

# A line a characteristic, under the names of the figures and a line of what they mean.
rows = [r for r in book["Results"].iter_rows(values_only=True)]
top = next(i for i, r in enumerate(rows) if r[0] == "name")
stated = {r[0]: {k: v for k, v in zip(rows[top], r) if v is not None} for r in rows[top + 2 :] if r[0]}

wrong, compared = 0, 0


def hold(name, figure, want):
    global wrong, compared
    got = stated[name].get(figure)
    if got is None:
        print(f"{name}, {figure}: not stated")
        wrong += 1
        return
    compared += 1
    if abs(got - want) > 1e-9 * max(abs(got), abs(want)) + 1e-13:
        print(f"{name}, {figure}: stated {got!r}, SciPy gives {want!r}")
        wrong += 1


def welch(x, y):
    """Estimate, standard error and degrees of freedom of mean(y) - mean(x), from the definitions."""
    vx, vy = stats.tvar(x) / len(x), stats.tvar(y) / len(y)
    df = (vx + vy) ** 2 / (vx**2 / (len(x) - 1) + vy**2 / (len(y) - 1))
    return math.fsum(y) / len(y) - math.fsum(x) / len(x), math.sqrt(vx + vy), df


if not readings:
    print("no readings found")
    sys.exit(1)
for name, sides in readings.items():
    x, y = sides["reference"], sides["candidate"]
    alpha = stated[name]["alpha"]
    d, se, df = welch(x, y)
    test = stats.ttest_ind(y, x, equal_var=False)
    hold(name, "difference.estimate", d)
    hold(name, "difference.se", se)
    hold(name, "difference.df", df)
    hold(name, "difference.t", test.statistic)
    hold(name, "difference.p_two_sided", test.pvalue)
    for prefix, level in (("difference", 1 - alpha), ("equivalence", 1 - 2 * alpha)):
        q = stats.t.ppf((1 + level) / 2, df)
        hold(name, prefix + ".lower", d - q * se)
        hold(name, prefix + ".upper", d + q * se)
    for end, sign in (("lower", 1), ("upper", -1)):
        margin = stated[name].get("equivalence.margin_" + end)
        if margin is not None:
            t = (d - margin) / se
            hold(name, "equivalence.t_" + end, t)
            hold(name, "equivalence.p_" + end, stats.t.sf(sign * t, df))
    ratio = stats.tvar(y) / stats.tvar(x)
    df1, df2 = len(y) - 1, len(x) - 1
    hold(name, "spread.sd_ratio", math.sqrt(ratio))
    hold(name, "spread.lower", math.sqrt(ratio / stats.f.ppf(1 - alpha, df1, df2)))
    hold(name, "spread.upper", math.sqrt(ratio / stats.f.ppf(alpha, df1, df2)))
    hold(name, "spread.f.p", min(1, 2 * min(stats.f.cdf(ratio, df1, df2), stats.f.sf(ratio, df1, df2))))

print(f"{len(readings)} characteristics, {compared} figures compared, {wrong} wrong")
sys.exit(1 if wrong else 0)
