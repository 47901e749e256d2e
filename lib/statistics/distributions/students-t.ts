import {
  requireDegreesOfFreedom,
  requireFraction,
  requireNumber,
} from '@/lib/statistics/distributions/arguments'
import { betaQuantileLogF } from '@/lib/statistics/distributions/beta-quantile'
import { betaShapes, incompleteBeta } from '@/lib/statistics/distributions/incomplete-beta'
import { remembered } from '@/lib/statistics/distributions/remembered'

/**
 * The share of Student's t on any real `df` that lies below t.
 *
 * Own code, because t² on `df` is F on 1 and `df`: the library at hand takes four times as long, and loses itself at the very
 * small shares and degrees of freedom.
 *
 * @throws {RangeError} for `df` outside 1e-300 to 1e9; for NaN.
 *
 * Source: incomplete beta function; see `incomplete-beta.ts`.
 */
export function tLowerTail(t: number, df: number): number {
  return tUpperTail(-t, df)
}

/**
 * The share above t; a small one keeps its digits.
 *
 * @throws {RangeError} for `df` outside 1e-300 to 1e9; for NaN.
 *
 * Source: as for the lower tail.
 */
export function tUpperTail(t: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireNumber(t)
  const beyond = shareBeyond(Math.abs(t), df) / 2
  return t < 0 ? 1 - beyond : beyond
}

/**
 * The t below which a share p lies.
 *
 * @throws {RangeError} for `df` outside 1e-300 to 1e9; for p not strictly between 0 and 1; for a t beyond the largest double, which
 *   less than one degree of freedom can bring about.
 */
export function tQuantileLower(p: number, df: number): number {
  return -tQuantileUpper(p, df) + 0
}

/**
 * The t above which a share alpha lies.
 *
 * @throws {RangeError} for `df` outside 1e-300 to 1e9; for alpha not strictly between 0 and 1; for a t beyond the largest double,
 *   which less than one degree of freedom can bring about.
 */
export function tQuantileUpper(alpha: number, df: number): number {
  requireFraction(alpha)
  requireDegreesOfFreedom(df)
  return alpha <= 0.5 ? upperQuantile(alpha, df, 0) : -upperQuantile(1 - alpha, df, 0)
}

/** The share outside -t to t. */
function shareBeyond(t: number, df: number): number {
  if (t === 0) return 1
  if (t === Infinity) return 0
  const shapes = betaShapes(0.5, df / 2)
  const odds = (t / df) * t
  if (odds > 1e-280 && odds < 1e280) return incompleteBeta(shapes, odds).upper
  // The square is no double, or one that has lost its digits; its logarithm has them.
  const logOdds = 2 * Math.log(t) - Math.log(df)
  return incompleteBeta(shapes, Math.exp(logOdds), logOdds).upper
}

const upperQuantile = remembered((alpha, df) => {
  if (alpha === 0.5) return 0
  // The share between -t and t, where it is the smaller one: near the middle t would lose its digits otherwise.
  const beyond = 2 * alpha
  const logSquare = betaQuantileLogF({
    a: 0.5,
    b: df / 2,
    ...(beyond <= 0.5 ? { side: 'upper', p: beyond } : { side: 'lower', p: 1 - beyond }),
  })
  const t = Math.exp(logSquare / 2)
  if (t === Infinity) throw new RangeError(`the t quantile with tail ${alpha} on ${df} df overflows`)
  return t
})
