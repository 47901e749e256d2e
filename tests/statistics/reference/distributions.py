"""Golden values of the distributions, with mpmath in 60 digits.

Run: python3 distributions.py > tables/distributions.json (Python 3.11, mpmath 1.3.0, scipy 1.17.1).
Tails come from the regularised incomplete gamma and beta functions; every quantile is not stored as such: the file
holds points and both tails at them, so that a quantile is tested by the point it must give back.
"""

import json
import random

from mpmath import betainc, erfc, gammainc, mp, mpf, sqrt
from scipy.stats import chi2, f, studentized_range, t

mp.dps = 60
random.seed(20261201)
ALPHAS = [0.5, 0.3, 0.1, 0.05, 0.025, 0.01, 0.005, 1e-4, 1e-6, 1e-9, 1e-12]


def text(value):
    return mp.nstr(value, 20)


def points(quantile_lower, quantile_upper):
    for alpha in ALPHAS:
        yield float(f"{quantile_lower(alpha):.12g}")
        yield float(f"{quantile_upper(alpha):.12g}")


def chi_squared():
    rows = []
    for df in [1, 2, 3, 4.7, 8, 19, 60, 400, 2000, 5000, 1e5, 1e6]:
        for x in points(lambda p: chi2.ppf(p, df), lambda p: chi2.isf(p, df)):
            lower = gammainc(mpf(df) / 2, 0, mpf(x) / 2, regularized=True)
            upper = gammainc(mpf(df) / 2, mpf(x) / 2, mp.inf, regularized=True)
            rows.append({"x": x, "df": df, "lower": text(lower), "upper": text(upper)})
    return rows


def f_rows():
    rows = []
    for df1, df2 in [(1, 1), (1, 10), (7, 1), (2, 14), (7, 16), (3.3, 5.9), (1, 1000), (29, 60), (200, 3), (5000, 400), (11, 1e6)]:
        for x in points(lambda p: f.ppf(p, df1, df2), lambda p: f.isf(p, df1, df2)):
            if not 1e-60 < x < 1e60:
                continue
            a, b, ratio = mpf(df1) / 2, mpf(df2) / 2, mpf(df1) * mpf(x) / mpf(df2)
            lower = betainc(a, b, 0, ratio / (1 + ratio), regularized=True)
            upper = betainc(b, a, 0, 1 / (1 + ratio), regularized=True)
            rows.append({"x": x, "df1": df1, "df2": df2, "lower": text(lower), "upper": text(upper)})
    return rows


def t_rows():
    rows = []
    for df in [1, 2, 3.3, 6, 19, 120, 5000, 1e6]:
        for alpha in ALPHAS[1:]:
            x = float(f"{t.isf(alpha, df):.12g}")
            upper = betainc(mpf(df) / 2, mpf(1) / 2, 0, mpf(df) / (df + mpf(x) ** 2), regularized=True) / 2
            rows.append({"x": x, "df": df, "upper": text(upper)})
    return rows


def normal_rows():
    return [{"x": x, "upper": text(erfc(mpf(x) / sqrt(2)) / 2)} for x in [0.1, 0.5, 1, 1.96, 2.5758, 4, 6, 7.03, 9, 20]]


def studentized_range_rows():
    rows = []
    for means, df in [(2, 4), (3, 10), (4, 8), (8, 16), (12, 24), (30, 30), (8, 1000)]:
        for q in [1.0, 3.0, 4.5, 7.0]:
            rows.append({"q": q, "means": means, "df": df, "upper": float(studentized_range.sf(q, means, df))})
    return rows


print(json.dumps({
    "note": "mpmath 1.3.0 in 60 digits; the studentised range by scipy 1.17.1. Made by distributions.py.",
    "chi_squared": chi_squared(),
    "f": f_rows(),
    "t": t_rows(),
    "normal": normal_rows(),
    "studentized_range": studentized_range_rows(),
}, indent=1))
