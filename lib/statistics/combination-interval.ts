import { binaryScaleOf } from '@/lib/statistics/binary-scale'
import { chiSquaredQuantileLower, chiSquaredQuantileUpper } from '@/lib/statistics/distributions/chi-squared'
import { fQuantileLower, fQuantileUpper } from '@/lib/statistics/distributions/f'
import { NotComputable } from '@/lib/statistics/not-computable'

/** One term w · M of a combination; M is a mean square with `df` degrees of freedom. */
export type WeightedMeanSquare = { weight: number; ms: number; df: number }

/** Limits of a variance, not yet cut at 0. */
export type CombinationInterval = { estimate: number; lower: number; upper: number }

/** Without limits on next to no degrees of freedom. */
export type SatterthwaiteLimits = { df: number; lower: number | null; upper: number | null }

/** Each tail of a 95 % interval. */
const TAIL = 0.025

/** Below this the limits are astronomically far out, beyond any double in the end, and say nothing. */
const SMALLEST_USEFUL_DF = 0.05

/**
 * 95 % interval of a sum and difference of independent mean squares by the modified large-sample method: exact
 * when one term stands alone, close in all other cases.
 *
 * Units: mean squares in u²; the estimate and both limits in u². The lower limit may be negative: nothing is cut
 * at 0 here.
 *
 * @throws {RangeError} for degrees of freedom that are not above 0.
 *
 * Source: Ting et al. 1990; Burdick & Graybill 1992, section 3.3; without negative terms it is Graybill & Wang 1980.
 */
export function combinationInterval(terms: readonly WeightedMeanSquare[]): CombinationInterval {
  const scale = scaleOf(terms)
  const positive: Term[] = []
  const negative: Term[] = []
  for (const { weight, ms, df } of terms) {
    if (weight > 0) positive.push(limitFactors(weight * (ms / scale), df))
    if (weight < 0) negative.push(limitFactors(-weight * (ms / scale), df))
  }
  const { estimate, lower, upper } = intervalOf(positive, negative)
  return { estimate: estimate * scale, lower: lower * scale, upper: upper * scale }
}

/** A unit in which the mean squares can be squared once more. */
function scaleOf(terms: readonly WeightedMeanSquare[]): number {
  let largest = 0
  for (const { weight, ms } of terms) largest = Math.max(largest, Math.abs(weight * ms))
  return binaryScaleOf(largest)
}

function intervalOf(positive: readonly Term[], negative: readonly Term[]): CombinationInterval {
  let estimate = 0
  let below = 0
  let above = 0
  for (const { part, g, h } of positive) {
    estimate += part
    below += (g * part) ** 2
    above += (h * part) ** 2
  }
  for (const { part, g, h } of negative) {
    estimate -= part
    below += (h * part) ** 2
    above += (g * part) ** 2
  }
  for (const plus of positive) {
    for (const minus of negative) {
      below += lowerCross(plus, minus) * plus.part * minus.part
      above += upperCross(plus, minus) * plus.part * minus.part
    }
  }
  if (positive.length > 0 && negative.length > 0) {
    below += sameSign(positive)
    above += sameSign(negative)
  }

  return {
    estimate,
    lower: estimate - Math.sqrt(Math.max(0, below)),
    upper: estimate + Math.sqrt(Math.max(0, above)),
  }
}

/**
 * Satterthwaite's 95 % interval, a second opinion: the combination is treated as one mean square whose degrees
 * of freedom, (Σ w M)²/Σ((w M)²/n), give it the right variance.
 *
 * Units: mean squares and limits in u². On fewer than 0.05 degrees of freedom the limits are `null`.
 *
 * @throws {NotComputable} `not-positive` when the combination is not above 0.
 *
 * Source: Burdick & Graybill 1992.
 */
export function satterthwaiteInterval(terms: readonly WeightedMeanSquare[]): SatterthwaiteLimits {
  const scale = scaleOf(terms)
  let estimate = 0
  let spread = 0
  for (const { weight, ms, df } of terms) {
    const part = weight * (ms / scale)
    estimate += part
    spread += part ** 2 / df
  }
  if (!(estimate > 0)) {
    throw new NotComputable('not-positive', 'The estimated variance is not above 0.')
  }
  const df = estimate ** 2 / spread
  if (df < SMALLEST_USEFUL_DF) return { df, lower: null, upper: null }
  return {
    df,
    lower: ((df * estimate) / chiSquaredQuantileUpper(TAIL, df)) * scale,
    upper: ((df * estimate) / chiSquaredQuantileLower(TAIL, df)) * scale,
  }
}

type Term = { part: number; df: number; g: number; h: number }

function limitFactors(part: number, df: number): Term {
  return { part, df, g: upperShare(df), h: df / chiSquaredQuantileLower(TAIL, df) - 1 }
}

function upperShare(df: number): number {
  return 1 - df / chiSquaredQuantileUpper(TAIL, df)
}

function lowerCross(plus: Term, minus: Term): number {
  const f = fQuantileUpper(TAIL, plus.df, minus.df)
  return ((f - 1) ** 2 - plus.g ** 2 * f ** 2 - minus.h ** 2) / f
}

function upperCross(plus: Term, minus: Term): number {
  const f = fQuantileLower(TAIL, plus.df, minus.df)
  return ((1 - f) ** 2 - plus.h ** 2 * f ** 2 - minus.g ** 2) / f
}

/** The terms of one sign taken two by two; nothing when there is only one. */
function sameSign(terms: readonly Term[]): number {
  let sum = 0
  terms.forEach((first, index) => {
    for (const second of terms.slice(index + 1)) {
      const together = first.df + second.df
      const factor =
        (upperShare(together) ** 2 * together ** 2) / (first.df * second.df) -
        (first.g ** 2 * first.df) / second.df -
        (second.g ** 2 * second.df) / first.df
      sum += (factor / (terms.length - 1)) * first.part * second.part
    }
  })
  return sum
}
