import {
  requireDegreesOfFreedom,
  requireFraction,
  requireNumber,
} from '@/lib/statistics/distributions/arguments'
import { betaQuantileLogF } from '@/lib/statistics/distributions/beta-quantile'
import { betaShapes, FAR, incompleteBeta } from '@/lib/statistics/distributions/incomplete-beta'
import { remembered } from '@/lib/statistics/distributions/remembered'
import type { Side } from '@/lib/statistics/distributions/tails'

/**
 * The share of F that lies below x, on any real degrees of freedom, df1 above and df2 below.
 *
 * Both tails, and both quantiles, are functions of their own: 1 minus a tail near 1 has lost the digits of the other.
 * Relative accuracy is near 1e-12. Own code because the libraries at hand overflow at one degree of freedom below, or keep
 * no more than seven digits in the tails.
 *
 * @throws {RangeError} for degrees of freedom outside 1e-300 to 1e9; for NaN.
 *
 * Source: incomplete beta function; see `incomplete-beta.ts`.
 */
export function fLowerTail(x: number, df1: number, df2: number): number {
  return tails({ x, df1, df2 }).lower
}

/**
 * The share of F that lies above x; keeps its digits where it is small.
 *
 * @throws {RangeError} for degrees of freedom outside 1e-300 to 1e9; for NaN.
 */
export function fUpperTail(x: number, df1: number, df2: number): number {
  return tails({ x, df1, df2 }).upper
}

/**
 * The x below which a share p lies; 0 where x is below the smallest double.
 *
 * @throws {RangeError} for p not strictly between 0 and 1; for degrees of freedom outside 1e-300 to 1e9; for an x beyond the
 *   largest double, which very few degrees of freedom below bring about.
 */
export const fQuantileLower = remembered((p: number, df1: number, df2: number): number => {
  requireFraction(p)
  return p <= 0.5 ? quantile({ side: 'lower', p, df1, df2 }) : quantile({ side: 'upper', p: 1 - p, df1, df2 })
})

/**
 * The x above which a share alpha lies; 0 where x is below the smallest double.
 *
 * @throws {RangeError} for alpha not strictly between 0 and 1; for degrees of freedom outside 1e-300 to 1e9; for an x beyond the
 *   largest double, such as that of alpha 1e-160 on one degree of freedom below.
 */
export const fQuantileUpper = remembered((alpha: number, df1: number, df2: number): number => {
  requireFraction(alpha)
  return alpha <= 0.5
    ? quantile({ side: 'upper', p: alpha, df1, df2 })
    : quantile({ side: 'lower', p: 1 - alpha, df1, df2 })
})

function tails({ x, df1, df2 }: { x: number; df1: number; df2: number }): { lower: number; upper: number } {
  requireDegreesOfFreedom(df1)
  requireDegreesOfFreedom(df2)
  requireNumber(x)
  if (x <= 0) return { lower: 0, upper: 1 }
  if (x === Infinity) return { lower: 1, upper: 0 }
  const shapes = betaShapes(df1 / 2, df2 / 2)
  const odds = (x / df2) * df1
  if (odds > SMALLEST && odds < LARGEST) return incompleteBeta(shapes, odds)
  // No double, or one that has lost its digits on the way; the logarithm has them.
  const logOdds = Math.log(x) + (Math.log(df1) - Math.log(df2))
  return incompleteBeta(shapes, Math.exp(logOdds), logOdds)
}

const SMALLEST = Math.exp(-FAR)
const LARGEST = Math.exp(FAR)

function quantile({ side, p, df1, df2 }: { side: Side; p: number; df1: number; df2: number }): number {
  requireDegreesOfFreedom(df1)
  requireDegreesOfFreedom(df2)
  const x = Math.exp(betaQuantileLogF({ a: df1 / 2, b: df2 / 2, side, p }))
  if (x === Infinity)
    throw new RangeError(`the F quantile with ${side} tail ${p} on ${df1} and ${df2} df overflows`)
  return x
}
