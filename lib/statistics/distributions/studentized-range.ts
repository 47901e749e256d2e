import { requireDegreesOfFreedom, requireNumber } from '@/lib/statistics/distributions/arguments'
import { normalLowerTail } from '@/lib/statistics/distributions/normal'
import { stirlingRemainder } from '@/lib/statistics/distributions/saddle-point'

/**
 * Probability that the studentised range of `means` independent averages exceeds q, the standard deviation being
 * estimated apart on `df` degrees of freedom.
 *
 * The upper tail is integrated as such: the range's own upper tail is written with a difference of powers that
 * is taken before it is lost, and every term is positive. Both integrals run by the trapezoidal rule, which for
 * such smooth integrands that die at both ends converges faster than any power of the step.
 *
 * @throws {RangeError} below 2 means; for `df` outside 0 to 1e9; for NaN.
 *
 * Source: H. L. Harter, Ann. Math. Statist. 31 (1960) 1122; the integrals of its section 2.
 */
export function studentizedRangeUpperTail(q: number, means: number, df: number): number {
  requireDegreesOfFreedom(df)
  requireNumber(q)
  if (!Number.isInteger(means) || means < 2)
    throw new RangeError(`a range needs 2 or more means, got ${means}`)
  if (q <= 0) return 1
  if (q === Infinity) return 0

  // v = ln of the estimated over the true standard deviation; its density peaks at 0 with spread 1/√(2 df).
  const step = Math.min(0.04, 0.4 / Math.sqrt(2 * df))
  const scale = step * Math.sqrt(df / Math.PI) * Math.exp(-stirlingRemainder(df / 2))
  const weight = (v: number) => scale * Math.exp(-0.5 * df * (Math.expm1(2 * v) - 2 * v))

  let sum = 0
  for (let v = 0; ; v += step) {
    const term = weight(v) * rangeUpperTail(q * Math.exp(v), means)
    sum += term
    if (term <= sum * 1e-17) break
  }
  for (let v = -step; ; v -= step) {
    const bound = weight(v)
    if (bound <= sum * 1e-17) break
    sum += bound * rangeUpperTail(q * Math.exp(v), means)
  }
  return Math.min(1, sum)
}

/** A range of normal values beyond this has a chance below every double, however many values there are. */
const WIDEST_RANGE = 60

/** Upper tail of the range of `means` standard normal values, integrated over the position z of the largest. */
function rangeUpperTail(w: number, means: number): number {
  if (w > WIDEST_RANGE) return 0
  const step = 0.125
  let sum = 0
  // Beyond 9 either side of w/2 the integrand is below 1e-35 of its peak.
  for (let z = w / 2 - 9; z <= w / 2 + 9; z += step) {
    const below = normalLowerTail(z)
    if (below === 0) continue
    // All others below z, less all others between z - w and z.
    const ratio = normalLowerTail(z - w) / below
    const excess = -Math.expm1((means - 1) * Math.log1p(-Math.min(1, ratio)))
    sum += Math.exp(-0.5 * z * z) * below ** (means - 1) * excess
  }
  return Math.min(1, (means * step * sum) / Math.sqrt(2 * Math.PI))
}
