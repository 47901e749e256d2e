import {
  requireDegreesOfFreedom,
  requireFraction,
  requireNumber,
} from '@/lib/statistics/distributions/arguments'
import { incompleteBeta } from '@/lib/statistics/distributions/incomplete-beta'
import { remembered } from '@/lib/statistics/distributions/remembered'
import { solveTail } from '@/lib/statistics/distributions/solve-tail'

/**
 * The share of F that lies below x, on any real degrees of freedom, df1 above and df2 below.
 *
 * Both tails, and both quantiles, are functions of their own: 1 minus a tail near 1 has lost the digits of the other.
 * Relative accuracy is near 1e-12. Own code because the libraries at hand overflow at one degree of freedom below, or keep
 * no more than seven digits in the tails.
 *
 * @throws {RangeError} for degrees of freedom outside 0 to 1e9; for NaN.
 *
 * Source: incomplete beta function; see `incomplete-beta.ts`.
 */
export function fLowerTail(x: number, df1: number, df2: number): number {
  return tails({ x, df1, df2 }).lower
}

/**
 * The share of F that lies above x; keeps its digits where it is small.
 *
 * @throws {RangeError} for degrees of freedom outside 0 to 1e9; for NaN.
 */
export function fUpperTail(x: number, df1: number, df2: number): number {
  return tails({ x, df1, df2 }).upper
}

/**
 * The x below which a share p lies.
 *
 * The answer and its odds must be doubles: see {@link fQuantileUpper}.
 *
 * @throws {RangeError} for p not strictly between 0 and 1; for degrees of freedom outside 0 to 1e9.
 */
export const fQuantileLower = remembered((p: number, df1: number, df2: number): number => {
  requireFraction(p)
  return p <= 0.5 ? quantile({ side: 'lower', p, df1, df2 }) : quantile({ side: 'upper', p: 1 - p, df1, df2 })
})

/**
 * The x above which a share alpha lies.
 *
 * The answer and its odds must be doubles, as they are at every level a test asks for. Where the odds are none (alpha of
 * 1e-160 on one degree of freedom below) the search finds no end.
 *
 * @throws {RangeError} for alpha not strictly between 0 and 1; for degrees of freedom outside 0 to 1e9; for an x that is
 *   no double although its odds are one.
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
  const odds = (x / df2) * df1
  if (odds <= 0) return { lower: 0, upper: 1 }
  if (odds === Infinity) return { lower: 1, upper: 0 }
  return incompleteBeta(df1 / 2, df2 / 2, odds)
}

interface QuantileOf {
  side: 'lower' | 'upper'
  p: number
  df1: number
  df2: number
}

function quantile({ side, p, df1, df2 }: QuantileOf): number {
  requireDegreesOfFreedom(df1)
  requireDegreesOfFreedom(df2)
  const tailAt = (u: number) => {
    const at = incompleteBeta(df1 / 2, df2 / 2, Math.exp(u))
    return { tail: at[side], steepness: at.slope }
  }
  // The median of F lies near 1, whose odds are df1/df2.
  const u = solveTail({ tailAt, side, target: p, start: Math.log(df1) - Math.log(df2) })
  const x = Math.exp(u + (Math.log(df2) - Math.log(df1)))
  if (x === Infinity)
    throw new RangeError(`the F quantile with ${side} tail ${p} on ${df1} and ${df2} df overflows`)
  return x
}
