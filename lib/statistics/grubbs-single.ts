import type { CellSummary } from '@/lib/statistics/cells'
import { tQuantileUpper, tUpperTail } from '@/lib/statistics/distributions/students-t'
import { NotComputable } from '@/lib/statistics/not-computable'
import { type SpreadOfMeans, spreadOfMeans } from '@/lib/statistics/spread-of-means'
import { placeOfLargest, placeOfSmallest } from '@/lib/statistics/tie-keys'

export type End = 'high' | 'low'

export interface GrubbsSingle {
  /** Whose mean lies furthest out; the first of several. */
  readonly laboratory: string
  /** G = |ȳ_extreme - ȳ|/s_ȳ, a pure number. */
  readonly statistic: number
  readonly laboratories: number
  readonly pValue: number
}

/**
 * Grubbs' test for one outlying cell mean, at the high or the low end, on cell means in any unit.
 *
 * Variant: two-sided with Bonferroni's inequality, as in the table of ISO 5725-2, so that p < 0.05 exactly when G is beyond
 * its 5 % value. The p-value is taken from the distance to the mean of the other means in their own standard
 * deviation, which is the same t and keeps its digits when one mean has nearly all of the sum of squares. In a nested
 * layout it is approximate when the variances of laboratory means differ.
 *
 * @throws {NotComputable} `too-few-laboratories` below 3; `equal-means`.
 *
 * Source: ISO 5725-2:1994, 7.3.4 and table 5; F. E. Grubbs, Technometrics 11 (1969) 1.
 */
export function grubbsSingle(
  summaries: readonly CellSummary[],
  end: End,
  { centred, sumOfSquares }: SpreadOfMeans = spreadOfMeans(summaries, 3),
): GrubbsSingle {
  const p = summaries.length
  const index = end === 'high' ? placeOfLargest(centred) : placeOfSmallest(centred)
  return {
    laboratory: summaries[index]!.laboratory,
    statistic: Math.abs(centred[index]!) / Math.sqrt(sumOfSquares / (p - 1)),
    laboratories: p,
    pValue: Math.min(1, 2 * p * tUpperTail(distanceFromOthers(centred, index), p - 2)),
  }
}

/**
 * The G that a share alpha exceeds, both ends together: ((p - 1)/√p) √(t²/(p - 2 + t²)), t the upper alpha/(2p) point.
 *
 * @throws {NotComputable} `too-few-laboratories` below 3.
 *
 * Source: ISO 5725-2:1994, table 5; Wilrich 2013.
 */
export function grubbsSingleCritical(laboratories: number, alpha: number): number {
  if (laboratories < 3) throw new NotComputable('too-few-laboratories', '3 laboratories are needed.')
  const t = tQuantileUpper(alpha / (2 * laboratories), laboratories - 2)
  return (laboratories - 1) / Math.sqrt(laboratories * (1 + (laboratories - 2) / t / t))
}

function distanceFromOthers(values: Float64Array, index: number): number {
  const count = values.length - 1
  let sum = 0
  for (let at = 0; at < values.length; at += 1) if (at !== index) sum += values[at]!
  const mean = sum / count
  let squares = 0
  for (let at = 0; at < values.length; at += 1) if (at !== index) squares += (values[at]! - mean) ** 2
  const distance = Math.abs(values[index]! - mean)
  if (squares === 0) return Infinity
  return distance / Math.sqrt((squares / (count - 1)) * (1 + 1 / count))
}
