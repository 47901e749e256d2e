import { deviance, stirlingRemainder } from '@/lib/statistics/distributions/saddle-point'

export interface Tails {
  readonly lower: number
  readonly upper: number
  /** Derivative of the lower tail with respect to ln x. */
  readonly slope: number
}

/**
 * Both tails of the gamma distribution with shape a and unit scale, P(a, x) and Q(a, x), for a > 0 and x > 0.
 *
 * The tail on x's own side of the bulk is summed directly, from terms of one sign or by a continued fraction, and keeps
 * its relative accuracy however small it is; the other one is its complement and never small. Nothing is refused: callers
 * have checked.
 *
 * Source: Abramowitz & Stegun 6.5.29 (series) and 6.5.31 (continued fraction, even part); prefix by Loader.
 */
export function incompleteGamma(a: number, x: number): Tails {
  // x^a e^-x / Γ(a + 1)
  const prefix = Math.exp(-stirlingRemainder(a) - deviance(a, x)) / Math.sqrt(2 * Math.PI * a)
  const slope = prefix * a
  if (x < a + 1) {
    const lower = Math.min(1, prefix * seriesSum(a, x))
    return { lower, upper: 1 - lower, slope }
  }
  const upper = Math.min(1, slope * continuedFraction(a, x))
  return { lower: 1 - upper, upper, slope }
}

function seriesSum(a: number, x: number): number {
  let term = 1
  let sum = 1
  for (let n = 1; ; n++) {
    term *= x / (a + n)
    const next = sum + term
    if (next === sum) return sum
    sum = next
  }
}

/** 1/(x + 1 - a - 1(1 - a)/(x + 3 - a - 2(2 - a)/(x + 5 - a - …))), by the modified Lentz recurrence. */
function continuedFraction(a: number, x: number): number {
  let denominator = x + 1 - a
  let c = Infinity
  let d = 1 / denominator
  let value = d
  for (let n = 1; ; n++) {
    const numerator = n * (a - n)
    denominator += 2
    d = 1 / (denominator + numerator * d)
    c = denominator + numerator / c
    const factor = c * d
    value *= factor
    if (Math.abs(factor - 1) < 2e-16) return value
  }
}
