"""Tails and quantiles at the ends of the doubles, in hundreds of digits, so that even 1e-300 may be got as one minus its opposite.

Arguments are read as the doubles they are, not as the decimals that name them. The second column is by how many times its own
relative error an error of the argument, or of the point judged, is magnified: no computation in doubles can do better than that.

Usage: python3 extremes.py INPUT OUTPUT; input rows: function,side,argument,df1,df2,the value to be judged.
"""

import sys

from mpmath import exp, expm1, log, log1p, loggamma, mp, mpf

mp.dps = 380


def ratio_series(numerator, denominator, step_up, step_down):
    """1 + r1 + r1 r2 + ..., with rn = (numerator + n step_up)/(denominator + n step_down), all positive."""
    one = 1 << 1300
    term = total = one
    a, b, up, down = (int(part * one) for part in (numerator, denominator, step_up, step_down))
    while term:
        a += up
        b += down
        term = term * a // b
        total += term
    return mpf(total) / one


def alternating_series(a, b, x):
    """a times the sum of (1 - b)...(n - b) x^n/(n! (a + n)); the terms grow to e^(b x) before they fall."""
    one = 1 << (1400 + int(3 * b * x))
    term, total, n = one, 0, 0
    a, b, x = (int(part * one) for part in (a, b, x))
    # A negative number divided down stays at -1.
    while abs(term) > 1:
        n += 1
        term = term * (n * one - b) // one * x // (n * one)
        total += term * one // (a + n * one)
    return mpf(a) / one * mpf(total) / one


def gamma_tails(a, x):
    slope = exp(a * log(x) - x - loggamma(a))
    lower = slope / a * ratio_series(x, a, 0, 1)
    return lower, 1 - lower, slope


def beta_tails(a, b, odds):
    x, y = odds / (1 + odds), 1 / (1 + odds)
    if a * y < b * x:
        upper, lower, slope = beta_tails_from_low(b, a, 1 / odds, y, x)
        return lower, upper, slope
    return beta_tails_from_low(a, b, odds, x, y)


def beta_tails_from_low(a, b, odds, x, y):
    logs = a * (log(odds) - log1p(odds)), b * -log1p(odds)
    scale = loggamma(a + b) - loggamma(a) - loggamma(b)
    slope = exp(scale + logs[0] + logs[1])
    if x < 0.5 and b * x < 20000:
        rest = alternating_series(a, b, x)
        leading = scale + logs[0] - log(a)
        return exp(leading) * (1 + rest), -expm1(leading) - exp(leading) * rest, slope
    if y < 0.5 and a * y < 20000:
        upper, lower, _ = beta_tails_from_low(b, a, 1 / odds, y, x)
        return lower, upper, slope
    lower = slope / a * ratio_series((a + b - 1) * x, a, x, 1)
    return lower, 1 - lower, slope


def tails(of, x, df1, df2):
    """Lower tail, upper tail, and their slope against log x."""
    if of == "chisq":
        return gamma_tails(df1 / 2, x / 2)
    if of == "f":
        return beta_tails(df1 / 2, df2 / 2, df1 * x / df2)
    inside, outside, slope = beta_tails(mpf(1) / 2, df1 / 2, x * x / df1)
    return (1 + inside) / 2, outside / 2, slope


def judge(what, side, at, df1, df2, judged):
    point = at if what[0] == "p" else judged
    lower, upper, slope = tails(what[1:], point, df1, df2)
    share, steep = (lower, slope) if side == "lower" else (upper, -slope)
    if what[0] == "p":
        return share, abs(slope / share)
    return judged * exp(log(at / share) * share / steep), abs(share / slope)


with open(sys.argv[1]) as rows, open(sys.argv[2], "w") as out:
    out.write("value,magnified\n")
    for row in rows:
        what, side, *numbers = row.strip().split(",")
        answer = judge(what, side, *(mpf(float(number)) for number in numbers))
        out.write(",".join(mp.nstr(part, 20) for part in answer) + "\n")
