import { requireDegreesOfFreedom, requireNumber } from '@/lib/statistics/distributions/arguments'
import { incompleteGamma } from '@/lib/statistics/distributions/incomplete-gamma'
import { normalLowerTail, normalQuantile } from '@/lib/statistics/distributions/normal'
import { stirlingRemainder } from '@/lib/statistics/distributions/saddle-point'

/**
 * Probability that the studentised range of `means` independent averages exceeds q, the standard deviation being
 * estimated apart on `df` degrees of freedom.
 *
 * The upper tail is integrated as such: the range's own upper tail is written with a difference of powers that
 * is taken before it is lost, and every term is positive. All integrals run by the trapezoidal rule, which for
 * such smooth integrands that die at both ends converges faster than any power of the step.
 *
 * @throws {RangeError} below 2 means or above 1e9; for `df` outside 1e-300 to 1e9; for NaN.
 *
 * Source: H. L. Harter, Ann. Math. Statist. 31 (1960) 1122; the integrals of its section 2.
 */
export function studentizedRangeUpperTail(q: number, means: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireNumber(q)
  if (!Number.isInteger(means) || means < 2 || means > 1e9)
    throw new RangeError(`a range needs 2 to 1e9 means, got ${means}`)
  if (q <= 0) return 1
  if (q === Infinity) return 0
  return Math.min(1, df >= 1 ? overDeviation(q, means, df) : overRange(q, means, df))
}

/** Over v, the logarithm of the estimated over the true standard deviation; its density peaks at 0 with spread 1/√(2 df). */
function overDeviation(q: number, means: number, df: number): number {
  // The more means, the more sudden the range's own tail: at 300 it falls within an eighth of v.
  const step = Math.min(Math.max(0.02, 0.25 / Math.cbrt(means)), 0.13, 0.45 / Math.sqrt(2 * df))
  const scale = Math.sqrt(df / Math.PI) * Math.exp(-stirlingRemainder(df / 2))
  // Where the integrand of a far range is largest, its own tail being as e^(-w²/4): a start at 0 would find nothing there.
  const logSquares = 2 * Math.log(q) - Math.log(2 * df)
  const start = -0.5 * (logSquares > 40 ? logSquares : Math.log1p(Math.exp(logSquares)))
  return bothWays(start, step, (v) => {
    const weight = scale * Math.exp(-0.5 * df * (Math.expm1(2 * v) - 2 * v))
    return weight === 0 ? 0 : weight * rangeUpperTail(q * Math.exp(v), means)
  })
}

/**
 * By parts, over the logarithm y of the range: below one degree of freedom the other integral would go on for hundreds of
 * units of v, where this one dies with the density of the range.
 */
function overRange(q: number, means: number, df: number): number {
  const spread = Math.sqrt(2 * Math.log(means))
  return bothWays(Math.log(2 * spread), 0.12 / spread, (y) => {
    const w = Math.exp(y)
    // Half of chi-squared, by its logarithm, because the square of w/q may be no double.
    const logHalf = 2 * (y - Math.log(q)) + Math.log(df) - Math.LN2
    const exceeded = logHalf > 30 ? 1 : incompleteGamma(df / 2, Math.exp(logHalf), logHalf).lower
    return w * rangeDensity(w, means) * exceeded
  })
}

/** The trapezoidal sum of a positive integrand with one peak, from a point near it until nothing is added. */
function bothWays(start: number, step: number, integrand: (at: number) => number): number {
  let sum = 0
  for (const [direction, first] of [
    [1, 0],
    [-1, 1],
  ] as const) {
    // On one degree of freedom it falls slowest, as e^v below the peak: by 1e17 within 40 units, or 2,000 of the least steps.
    for (let turn = first; turn < 4000; turn++) {
      const term = integrand(start + direction * turn * step)
      sum += term
      if (term <= sum * 1e-17) break
    }
  }
  return sum * step
}

/** Upper tail of the range of `means` standard normal values, integrated over the position z of the largest. */
function rangeUpperTail(w: number, means: number): number {
  const step = stepFor(means)
  let sum = 0
  // The integrand peaks at w/2 or, of a narrow range, where the largest is to be expected, and 7 further it is below 1e-20
  // of that; nor is there any density beyond 39, the last double of its tail.
  const end = Math.min(39, 7 + Math.max(w / 2, Math.sqrt(2 * Math.log(means))))
  for (let z = Math.max(w / 2 - 7, leastLargest(means)); z <= end; z += step) {
    const beyond = z > 0 ? normalLowerTail(-z) : 1
    const below = z > 0 ? 1 - beyond : normalLowerTail(z)
    if (below === 0) continue
    // A thousand million means make much of what a share near 1 has lost.
    const logBelow = z > 0 ? Math.log1p(-beyond) : Math.log(below)
    // All others below z, less all others between z - w and z.
    const ratio = normalLowerTail(z - w) / below
    const excess = -Math.expm1((means - 1) * Math.log1p(-Math.min(1, ratio)))
    sum += Math.exp((means - 1) * logBelow - 0.5 * z * z) * excess
  }
  return Math.min(1, (means * step * sum) / Math.sqrt(2 * Math.PI))
}

/** Below this the largest lies with a chance under 1e-70, beside which every tail of so low a position is large. */
function leastLargest(means: number): number {
  return means < 4 ? -Infinity : normalQuantile(Math.exp(-160 / (means - 1)))
}

/** Density of the same range, over the position z of the largest, which is as likely as far above w/2 as below it. */
function rangeDensity(w: number, means: number): number {
  const step = stepFor(means)
  let sum = 0
  for (let z = w / 2; z >= w / 2 - 9; z -= step) {
    const outside = z > 0 ? normalLowerTail(-z) + normalLowerTail(z - w) : 1
    const logInside = z > 0 ? Math.log1p(-outside) : Math.log(normalLowerTail(z) - normalLowerTail(z - w))
    // Of two means none need lie between, and 0 times the logarithm of 0 is no number.
    const ofOthers = means === 2 ? 0 : (means - 2) * logInside
    const height = Math.exp(ofOthers - 0.5 * (z * z + (z - w) * (z - w)))
    sum += z === w / 2 ? 0.5 * height : height
  }
  return (means * (means - 1) * step * sum) / Math.PI
}

/** The more means, the narrower the distribution of the largest. */
function stepFor(means: number): number {
  return Math.min(0.2, Math.max(0.01, 1.2 / Math.sqrt(means)))
}
