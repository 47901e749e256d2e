import type { CellSummary } from '@/lib/statistics/cells'
import {
  grubbsPairLowerTail,
  grubbsPairQuantileLower,
  largestPairCount,
} from '@/lib/statistics/distributions/grubbs-pair-ratio'
import type { End } from '@/lib/statistics/grubbs-single'
import { NotComputable } from '@/lib/statistics/not-computable'
import { spreadOfMeans } from '@/lib/statistics/spread-of-means'
import { tieKeys } from '@/lib/statistics/tie-keys'

export interface GrubbsPair {
  /** The two, in ascending order of their means. */
  readonly laboratories: readonly [string, string]
  /** Sum of squares of the others about their own mean, over that of all. A small ratio speaks against the pair. */
  readonly statistic: number
  readonly count: number
  readonly pValue: number
}

/**
 * Grubbs' test for the two highest or the two lowest cell means together, on cell means in any unit.
 *
 * Variant: two-sided, as in the table of ISO 5725-2: the p-value is twice the lower tail of the exact null distribution, at
 * most 1, and "5 %" is its lower 2.5 % point. A small ratio is significant. In a nested layout it is approximate when the
 * variances of laboratory means differ.
 *
 * @throws {NotComputable} `too-few-laboratories` below 4; `equal-means`; `too-many-laboratories` above 1000.
 *
 * Source: ISO 5725-2:1994, 7.3.4 and table 5; F. E. Grubbs, Ann. Math. Statist. 21 (1950) 27.
 */
export function grubbsPair(summaries: readonly CellSummary[], end: End): GrubbsPair {
  const { centred, sumOfSquares } = spreadOfMeans(summaries, 4)
  const count = summaries.length
  requireAtMost(count)

  // A stable sort: of equal means the first in the order of the cells counts as the further out.
  const direction = end === 'high' ? -1 : 1
  const keys = tieKeys(centred)
  const outwardsFirst = Array.from(keys, (_, index) => index)
  outwardsFirst.sort((a, b) => direction * ((keys[a] as number) - (keys[b] as number)))
  const [first, second, ...others] = outwardsFirst as [number, number, ...number[]]

  const statistic = squaresAboutMean(others.map((index) => centred[index] as number)) / sumOfSquares
  const pair = end === 'high' ? [second, first] : [first, second]
  return {
    laboratories: pair.map((index) => (summaries[index] as CellSummary).laboratory) as [string, string],
    statistic,
    count,
    pValue: Math.min(1, 2 * grubbsPairLowerTail(statistic, count)),
  }
}

/**
 * The ratio below which a share alpha falls, both ends together: the lower alpha/2 point. A pure number.
 *
 * @throws {NotComputable} `too-few-laboratories` below 4; `too-many-laboratories` above 1000.
 *
 * Source: ISO 5725-2:1994, table 5; Grubbs 1950.
 */
export function grubbsPairCritical(laboratories: number, alpha: number): number {
  if (laboratories < 4) throw new NotComputable('too-few-laboratories', '4 laboratories are needed.')
  requireAtMost(laboratories)
  return grubbsPairQuantileLower(alpha / 2, laboratories)
}

function requireAtMost(laboratories: number): void {
  if (laboratories <= largestPairCount) return
  const words = `The exact distribution behind the pair tests is made for up to ${largestPairCount} laboratories; these are ${laboratories}.`
  throw new NotComputable('too-many-laboratories', words)
}

function squaresAboutMean(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length
  return values.reduce((sum, value) => sum + (value - mean) ** 2, 0)
}
