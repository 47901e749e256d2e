"""The decision where R and we differ, in 50 digits. Tails are series of positive terms; a quantile is the value that is to be
judged, put right by one step of Newton's method: a step of 1e-10 leaves an error of some 1e-20.

Usage: python3 arbiter.py INPUT OUTPUT; input rows: function,side,argument,df1,df2,the value to be judged.
"""

import sys

from mpmath import erfc, exp, log, loggamma, mp, mpf, pi, sqrt

mp.dps = 50
# The series are summed in whole numbers of 2^-BITS, which is many times faster than any other way.
BITS = 240
ONE = 1 << BITS


def series(numerator, denominator, step_up, step_down):
    """1 + r1 + r1 r2 + ..., with rn = (numerator + n step_up)/(denominator + n step_down), until it stands still."""
    term = total = ONE
    a, b = (int(part * ONE) for part in (numerator, denominator))
    up, down = (int(part * ONE) for part in (step_up, step_down))
    while term:
        a += up
        b += down
        term = term * a // b
        total += term
    return mpf(total) / ONE


def gamma_lower(a, x):
    """Lower tail, and its slope against log x."""
    slope = exp(a * log(x) - x - loggamma(a))
    return slope / a * series(x, a, 0, 1), slope


def beta_lower(a, b, odds):
    """The same at odds/(1 + odds), against log odds; the series is that of the nearer end."""
    if odds > 1:
        upper, slope = beta_lower(b, a, 1 / odds)
        return 1 - upper, slope
    x = odds / (1 + odds)
    slope = exp(loggamma(a + b) - loggamma(a) - loggamma(b) + a * log(x) - b * log(1 + odds))
    return slope / a * series((a + b - 1) * x, a, x, 1), slope


def tail(of, side, x, df1, df2):
    """The tail and its slope against log |x|."""
    if of == "norm":
        beyond, slope = erfc(abs(x) / sqrt(2)) / 2, -abs(x) * exp(-x * x / 2) / sqrt(2 * pi)
    elif of == "t":
        beyond, slope = beta_lower(df1 / 2, mpf(1) / 2, df1 / x**2)
        beyond, slope = beyond / 2, -slope
    else:
        lower, slope = gamma_lower(df1 / 2, x / 2) if of == "chisq" else beta_lower(df1 / 2, df2 / 2, df1 * x / df2)
        return (lower, slope) if side == "lower" else (1 - lower, -slope)
    return (beyond, slope) if (x < 0) == (side == "lower") else (1 - beyond, -slope)


def value(what, side, at, df1, df2, judged):
    if what[0] == "p":
        return tail(what[1:], side, at, df1, df2)[0]
    share, slope = tail(what[1:], side, judged, df1, df2)
    return judged * exp(log(at / share) * share / slope)


with open(sys.argv[1]) as rows, open(sys.argv[2], "w") as out:
    out.write("value\n")
    for row in rows:
        what, side, *numbers = row.strip().split(",")
        out.write(mp.nstr(value(what, side, *map(mpf, numbers)), 20) + "\n")
