import {
  requireDegreesOfFreedom,
  requireFraction,
  requireNumber,
} from '@/lib/statistics/distributions/arguments'
import { incompleteGamma, logOfGammaAtLow } from '@/lib/statistics/distributions/incomplete-gamma'
import { normalQuantile } from '@/lib/statistics/distributions/normal'
import { remembered } from '@/lib/statistics/distributions/remembered'
import { solveTail } from '@/lib/statistics/distributions/solve-tail'
import type { Side } from '@/lib/statistics/distributions/tails'

/**
 * The share of chi-squared on any real `df` that lies below x.
 *
 * Both tails, and both quantiles, are functions of their own: 1 minus a tail near 1 has lost the digits of the other.
 * Relative accuracy is near 1e-13 from 1 to a million degrees of freedom. Own code because the libraries at hand lose it
 * above some 2,000 (a relative error of 1e-2 at 5,000).
 *
 * @throws {RangeError} for `df` outside 1e-300 to 1e9; for NaN.
 *
 * Source: incomplete gamma function; see `incomplete-gamma.ts`.
 */
export function chiSquaredLowerTail(x: number, df: number): number {
  return tails(x, df).lower
}

/**
 * The share of chi-squared on `df` that lies above x; keeps its digits where it is small.
 *
 * @throws {RangeError} for `df` outside 1e-300 to 1e9; for NaN.
 */
export function chiSquaredUpperTail(x: number, df: number): number {
  return tails(x, df).upper
}

/**
 * The x below which a share p lies; 0 where x is below the smallest double.
 *
 * @throws {RangeError} for p not strictly between 0 and 1; for `df` outside 1e-300 to 1e9.
 */
export function chiSquaredQuantileLower(p: number, df: number): number {
  return lowerQuantile(p, df, 0)
}

/**
 * The x above which a share alpha lies; 0 where x is below the smallest double.
 *
 * @throws {RangeError} for alpha not strictly between 0 and 1; for `df` outside 1e-300 to 1e9.
 */
export function chiSquaredQuantileUpper(alpha: number, df: number): number {
  return upperQuantile(alpha, df, 0)
}

const lowerQuantile = remembered((p, df) => {
  requireFraction(p)
  return p <= 0.5 ? quantile({ side: 'lower', p, df }) : quantile({ side: 'upper', p: 1 - p, df })
})

const upperQuantile = remembered((alpha, df) => {
  requireFraction(alpha)
  return alpha <= 0.5
    ? quantile({ side: 'upper', p: alpha, df })
    : quantile({ side: 'lower', p: 1 - alpha, df })
})

function tails(x: number, df: number): { lower: number; upper: number } {
  requireDegreesOfFreedom(df)
  requireNumber(x)
  if (x <= 0) return { lower: 0, upper: 1 }
  // Half the smallest double is none; halving is the same as taking ln 2 from the logarithm.
  return x < 1e-300 ? incompleteGamma(df / 2, x / 2, Math.log(x) - Math.LN2) : farOrNear(x, df)
}

function farOrNear(x: number, df: number): { lower: number; upper: number } {
  // The upper tail left the doubles long before: at 1e9 degrees of freedom at 1.0006e9.
  return x > 1e11 ? { lower: 1, upper: 0 } : incompleteGamma(df / 2, x / 2)
}

function quantile({ side, p, df }: { side: Side; p: number; df: number }): number {
  requireDegreesOfFreedom(df)
  const a = df / 2
  // With a small shape a share lies so near to 0 that the lower tail is a power of x, and solved at once.
  const logLower = side === 'lower' ? Math.log(p) : Math.log1p(-p)
  if (logLower < -FAR_SHARE * a) {
    const u = (logLower + logOfGammaAtLow(a)) / a
    if (u < -FAR) return Math.exp(u + Math.LN2)
  }
  // Wilson and Hilferty: the cube root of a chi-squared variable is nearly normal.
  const z = side === 'lower' ? normalQuantile(p) : -normalQuantile(p)
  const spread = 2 / (9 * df)
  const root = 1 - spread + z * Math.sqrt(spread)
  const start = root > 0.3 ? 3 * Math.log(root) : (logLower + logOfGammaAtLow(a)) / a - Math.log(a)
  // Over the logarithm of x/df, about which the bulk lies at 0: that of x would be rounded more coarsely.
  const logA = Math.log(a)
  const at = (u: number) => incompleteGamma(a, a * Math.exp(u), u + logA)
  return df * Math.exp(solveTail({ at, side, target: p, start, low: -FAR - 1 - logA, high: 25 - logA }))
}

/** Below e^-650 the next term of the lower tail is no matter; ln Γ(a + 1)/a is above -0.6. */
const FAR = 650
const FAR_SHARE = FAR - 50
