import { runningIntegral, subdivide } from '@/lib/statistics/distributions/running-integral'

export interface LargestDeviate {
  /** Descending values, from 1, between which the distribution is smooth; it is 0 below the last. */
  readonly breaks: readonly number[]
  /** Probability that the largest standardised deviate is at most tau. */
  readonly lowerTail: (tau: number) => number
}

/**
 * Null distribution of the largest of `count` normal values, standardised as τ = √(m/(m - 1)) (x_max - x̄)/√SS.
 *
 * By recursion on the sample size m. A given value's τ is the cosine of an angle v with density proportional to sin^(m-3) v,
 * and it is the largest with the probability that the other m - 1 lie below it, whose standardised limit is √(m/(m - 2)) cot v:
 *
 *   1 - P_m(cos v) = m K_m ∫_0^v sin^(m-3) u · P_{m-1}(√(m/(m - 2)) cot u) du,   P_2: always τ = 1.
 *
 * P_m is smooth save where P_{m-1}'s argument meets a break of its own, so that the breaks are carried along. It is built from
 * the top: there a step of the recursion damps the errors, while far below the bulk it multiplies them by up to m, and
 * built from below they would spread upwards (at m = 200 they are larger than the result).
 *
 * @throws {RangeError} below 2 values.
 *
 * Source: F. E. Grubbs, Ann. Math. Statist. 21 (1950) 27, section 3.
 */
export function largestDeviate(count: number): LargestDeviate {
  if (!Number.isInteger(count) || count < 2) throw new RangeError(`2 or more values are needed, got ${count}`)
  let current: LargestDeviate = { breaks: [1], lowerTail: (tau) => (tau < 1 ? 0 : 1) }
  for (let m = 3; m <= count; m++) current = withOneMore(current, m)
  return current
}

function withOneMore(smaller: LargestDeviate, m: number): LargestDeviate {
  const stretch = Math.sqrt(m / (m - 2))
  const constant = m * densityConstant(m)
  // With m the density narrows as 1/√m; a piece much wider than that would be expanded too coarsely.
  const angles = subdivide(breaksFor(m).map(Math.acos), 1.5 / Math.sqrt(m))
  const { upTo } = runningIntegral(angles, (v) => {
    return constant * Math.sin(v) ** (m - 3) * smaller.lowerTail(stretch / Math.tan(v))
  })
  const lowest = Math.cos(angles.at(-1) as number)
  const lowerTail = (tau: number) => {
    if (tau >= 1) return 1
    return tau <= lowest ? 0 : Math.max(0, 1 - upTo(Math.acos(tau)))
  }
  return { breaks: angles.map(Math.cos), lowerTail }
}

/**
 * A break stands where the k largest values are equal and all others too: τ² = (m - k)/(k (m - 1)).
 *
 * The larger k the smoother the function is there. Beyond the eighth, only a few are kept, at growing distances.
 */
function breaksFor(m: number): number[] {
  const breaks: number[] = []
  for (let k = 1; k < m; k = k < 8 ? k + 1 : Math.ceil(k * 1.25))
    breaks.push(Math.sqrt((m - k) / (k * (m - 1))))
  const smallest = 1 / (m - 1)
  if ((breaks.at(-1) as number) > smallest * (1 + 1e-12)) breaks.push(smallest)
  return breaks
}

/** Γ((m - 1)/2)/(√π Γ((m - 2)/2)), from 1/π at m = 3 and 1/2 at m = 4. */
function densityConstant(m: number): number {
  let constant = m % 2 === 1 ? 1 / Math.PI : 0.5
  for (let at = m % 2 === 1 ? 3 : 4; at < m; at += 2) constant *= (at - 1) / (at - 2)
  return constant
}
