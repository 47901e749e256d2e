import cdf from '@stdlib/stats-base-dists-t-cdf'
import quantile from '@stdlib/stats-base-dists-t-quantile'
import {
  requireDegreesOfFreedom,
  requireFraction,
  requireNumber,
} from '@/lib/statistics/distributions/arguments'

/**
 * The share of Student's t on any real `df` that lies below t.
 *
 * @throws {RangeError} for `df` outside 0 to 1e9; for NaN.
 *
 * Source: stdlib.
 */
export function tLowerTail(t: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireNumber(t)
  return cdf(t, df)
}

/**
 * The share above t; taken by symmetry, so that a small one keeps its digits.
 *
 * @throws {RangeError} for `df` outside 0 to 1e9; for NaN.
 *
 * Source: stdlib.
 */
export function tUpperTail(t: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireNumber(t)
  return cdf(-t, df)
}

/**
 * The t below which a share p lies.
 *
 * @throws {RangeError} for `df` outside 0 to 1e9; for p not strictly between 0 and 1.
 *
 * Source: stdlib.
 */
export function tQuantileLower(p: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireFraction(p)
  return quantile(p, df)
}

/**
 * The t above which a share alpha lies, by symmetry.
 *
 * @throws {RangeError} for `df` outside 0 to 1e9; for alpha not strictly between 0 and 1.
 *
 * Source: stdlib.
 */
export function tQuantileUpper(alpha: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireFraction(alpha)
  return -quantile(alpha, df)
}
