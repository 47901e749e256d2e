import {
  requireDegreesOfFreedom,
  requireFraction,
  requireNumber,
} from '@/lib/statistics/distributions/arguments'
import { incompleteGamma } from '@/lib/statistics/distributions/incomplete-gamma'
import { normalQuantile } from '@/lib/statistics/distributions/normal'
import { remembered } from '@/lib/statistics/distributions/remembered'
import { solveTail } from '@/lib/statistics/distributions/solve-tail'

/**
 * The share of chi-squared on any real `df` that lies below x.
 *
 * Both tails, and both quantiles, are functions of their own: 1 minus a tail near 1 has lost the digits of the other.
 * Relative accuracy is near 1e-13 from 1 to a million degrees of freedom. Own code because the libraries at hand lose it
 * above some 2,000 (a relative error of 1e-2 at 5,000).
 *
 * @throws {RangeError} for `df` outside 0 to 1e9; for NaN.
 *
 * Source: incomplete gamma function; see `incomplete-gamma.ts`.
 */
export function chiSquaredLowerTail(x: number, df: number): number {
  return tails(x, df).lower
}

/**
 * The share of chi-squared on `df` that lies above x; keeps its digits where it is small.
 *
 * @throws {RangeError} for `df` outside 0 to 1e9; for NaN.
 */
export function chiSquaredUpperTail(x: number, df: number): number {
  return tails(x, df).upper
}

/**
 * The x below which a share p lies.
 *
 * @throws {RangeError} for p not strictly between 0 and 1; for `df` outside 0 to 1e9.
 */
export function chiSquaredQuantileLower(p: number, df: number): number {
  return lowerQuantile(p, df, 0)
}

/**
 * The x above which a share alpha lies.
 *
 * @throws {RangeError} for alpha not strictly between 0 and 1; for `df` outside 0 to 1e9.
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
  if (x === Infinity) return { lower: 1, upper: 0 }
  return incompleteGamma(df / 2, x / 2)
}

function quantile({ side, p, df }: { side: 'lower' | 'upper'; p: number; df: number }): number {
  requireDegreesOfFreedom(df)
  const a = df / 2
  const tailAt = (u: number) => {
    const at = incompleteGamma(a, Math.exp(u))
    return { tail: at[side], steepness: at.slope }
  }
  // Wilson and Hilferty: the cube root of a chi-squared variable is nearly normal.
  const z = side === 'lower' ? normalQuantile(p) : -normalQuantile(p)
  const spread = 2 / (9 * df)
  const start = Math.log(a) + 3 * Math.log(Math.max(0.05, 1 - spread + z * Math.sqrt(spread)))
  return 2 * Math.exp(solveTail({ tailAt, side, target: p, start }))
}
