import { logGammaGain } from '@/lib/statistics/distributions/log-gamma-gain'
import { deviance, stirlingRemainder } from '@/lib/statistics/distributions/saddle-point'
import type { Tails } from '@/lib/statistics/distributions/tails'

/**
 * Both tails of the gamma distribution with shape a and unit scale, P(a, x) and Q(a, x), for a > 0 up to 5e8 and x > 0.
 *
 * The tail on x's own side of the bulk is summed directly, from terms of one sign or by a continued fraction, and keeps
 * its relative accuracy however small it is; the other one is its complement and never small. With a shape below a half the
 * bulk lies near 0, so that the upper tail is small everywhere else, and is never got as a complement. Nothing is refused:
 * callers have checked.
 *
 * Source: Abramowitz & Stegun 6.5.29 (both series) and 6.5.31 (continued fraction, even part); prefix by Loader.
 */
export function incompleteGamma(a: number, x: number, logX?: number): Tails {
  if (x < 1e-280 || (a < 0.5 && x < 1)) return nearZero(a, x, logX ?? Math.log(x))

  // x^a e^-x / Γ(a)
  const exponent = -stirlingRemainder(a) - deviance(a, x)
  const logSlope = exponent + 0.5 * Math.log(a / (2 * Math.PI))
  const slope = Math.exp(exponent) * Math.sqrt(a / (2 * Math.PI))
  const isLow = a >= 0.5 && x < a + 1
  const hazard = isLow ? a / seriesSum(a, x) : 1 / continuedFraction(a, x)
  // Where the slope has lost digits to underflow the tail may still have them.
  const direct = Math.min(1, slope > 1e-290 ? slope / hazard : Math.exp(logSlope - Math.log(hazard)))
  const rest = { slope, logSlope, hazard, bend: a - x }
  return isLow ? { lower: direct, upper: 1 - direct, ...rest } : { lower: 1 - direct, upper: direct, ...rest }
}

/** ln Γ(a + 1): to first order in x the lower tail is x^a over this. */
export function logOfGammaAtLow(a: number): number {
  return logGammaGain(1, a)
}

/** With L = ln(x^a/Γ(a + 1)), the lower tail is e^L (1 + a Σ (-x)^n/(n! (a + n))). */
function nearZero(a: number, x: number, logX: number): Tails {
  const leading = a * logX - logOfGammaAtLow(a)
  const rest = a * alternatingSeries(a, x)
  const factor = Math.exp(leading)
  const logSlope = Math.log(a) + leading - x
  return {
    lower: Math.min(1, factor * (1 + rest)),
    upper: Math.max(0, -Math.expm1(leading) - factor * rest),
    slope: Math.exp(logSlope),
    logSlope,
    hazard: (a * Math.exp(-x)) / (1 + rest),
    bend: a - x,
  }
}

function alternatingSeries(a: number, x: number): number {
  let term = 1
  let sum = 0
  // x is at most 1: the term 1/n! is below the last bit of any sum at n = 25.
  for (let n = 1; n <= 25; n++) {
    term *= -x / n
    sum += term / (a + n)
  }
  return sum
}

function seriesSum(a: number, x: number): number {
  let term = 1
  let sum = 1
  // The terms fall as exp(-n²/2a) at the slowest, where x has reached a + 1.
  const most = 500 + 12 * Math.sqrt(a)
  for (let n = 1; n <= most; n++) {
    term *= x / (a + n)
    const next = sum + term
    if (next === sum) return sum
    sum = next
  }
  throw new Error(`the series of the gamma function has not settled at ${a}, ${x}`)
}

/** 1/(x + 1 - a - 1(1 - a)/(x + 3 - a - 2(2 - a)/(x + 5 - a - …))), as a quotient of two sums that are carried along. */
function continuedFraction(a: number, x: number): number {
  let above = 1
  let aboveBefore = 0
  let under = x + 1 - a
  let underBefore = 1
  let gap = Infinity
  // Slowest where x has just passed a + 1, where the steps grow as the root of a.
  const most = 500 + 12 * Math.sqrt(a)
  for (let n = 1; n <= most; n++) {
    const alpha = n * (a - n)
    const beta = x + 1 - a + 2 * n
    const aboveNext = beta * above + alpha * aboveBefore
    const underNext = beta * under + alpha * underBefore
    // The sums are rounded at each step: near the last bit the gap stops falling before it is none.
    const product = Math.abs(aboveNext * under)
    const difference = Math.abs(aboveNext * under - above * underNext)
    if (difference < 2e-15 * product) {
      const gapBefore = gap
      gap = difference / product
      if (gap < 2e-16 || gap >= gapBefore) return aboveNext / underNext
    }
    aboveBefore = above
    underBefore = under
    above = aboveNext
    under = underNext
    if (under > 1e80 || under < -1e80) {
      const scale = 1 / under
      above *= scale
      aboveBefore *= scale
      underBefore *= scale
      under = 1
    }
  }
  throw new Error(`the continued fraction of the gamma function has not settled at ${a}, ${x}`)
}
