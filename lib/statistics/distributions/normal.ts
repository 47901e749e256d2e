import cdf from '@stdlib/stats-base-dists-normal-cdf'
import quantile from '@stdlib/stats-base-dists-normal-quantile'
import { requireFraction, requireNumber } from '@/lib/statistics/distributions/arguments'
import { solveTail } from '@/lib/statistics/distributions/solve-tail'

/**
 * The share of the standard normal distribution that lies below z; keeps its digits where it is small.
 *
 * @throws {RangeError} for NaN.
 *
 * Source: stdlib.
 */
export function normalLowerTail(z: number): number {
  requireNumber(z)
  return cdf(z, 0, 1)
}

/**
 * The share above z; keeps its relative accuracy, because it is taken by symmetry.
 *
 * @throws {RangeError} for NaN.
 *
 * Source: stdlib.
 */
export function normalUpperTail(z: number): number {
  requireNumber(z)
  return cdf(-z, 0, 1)
}

/**
 * The z below which a share p lies. For a small upper share, negate the quantile of that share.
 *
 * @throws {RangeError} for p not strictly between 0 and 1.
 *
 * Source: stdlib; below 1e-5 Newton's method on its tail.
 */
export function normalQuantile(p: number): number {
  requireFraction(p)
  if (p > 1e-5) return quantile(p, 0, 1)
  // The library's quantile goes through 2p - 1, which forgets a small p: nine digits are left at 1e-10, none at 1e-17.
  const tailAt = (z: number) => ({
    tail: cdf(z, 0, 1),
    steepness: Math.exp(-0.5 * z * z) / Math.sqrt(2 * Math.PI),
  })
  return solveTail({ tailAt, side: 'lower', target: p, start: -Math.sqrt(-2 * Math.log(p)) })
}
