import cdf from '@stdlib/stats-base-dists-normal-cdf'
import quantile from '@stdlib/stats-base-dists-normal-quantile'
import { requireFraction, requireNumber } from '@/lib/statistics/distributions/arguments'
import { solveTail } from '@/lib/statistics/distributions/solve-tail'
import type { Tails } from '@/lib/statistics/distributions/tails'

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
 * Source: stdlib; below 0.1 Halley's method on its tail.
 */
export function normalQuantile(p: number): number {
  requireFraction(p)
  if (p > 0.1) return quantile(p, 0, 1)
  // The library's quantile goes through 2p - 1, which forgets a small p: eleven digits are left at 1e-5, none at 1e-17.
  const start = p > 1e-5 ? quantile(p, 0, 1) : -Math.sqrt(-2 * Math.log(p))
  return solveTail({ at: tailsAt, side: 'lower', target: p, start, low: -40, high: 0 })
}

function tailsAt(z: number): Tails {
  const lower = cdf(z, 0, 1)
  const logSlope = -0.5 * z * z - 0.5 * Math.log(2 * Math.PI)
  const slope = Math.exp(logSlope)
  // The tail leaves the doubles at -38.6, and its digits some way before.
  const hazard = z < -30 ? farHazard(-z) : slope / lower
  return { lower, upper: 1 - lower, slope, logSlope, hazard, bend: -z }
}

/** Density over tail, by the asymptotic series (Abramowitz & Stegun 26.2.12): eight terms are exact to the last bit from 30 on. */
function farHazard(x: number): number {
  let term = 1
  let sum = 1
  for (let n = 1; n <= 8; n++) {
    term *= -(2 * n - 1) / (x * x)
    sum += term
  }
  return x / sum
}
