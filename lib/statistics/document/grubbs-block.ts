import type { GrubbsBlock, GrubbsTestBlock } from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import { withReasons } from '@/lib/statistics/document/attempt'
import { outlierLevel } from '@/lib/statistics/document/consistency-blocks'
import { grubbsPair, grubbsPairCritical } from '@/lib/statistics/grubbs-pair'
import { grubbsSingle, grubbsSingleCritical } from '@/lib/statistics/grubbs-single'

/** The four tests on cell means, each with a level of its own; in which order they count is for a person. */
export function grubbsBlock(summaries: readonly CellSummary[]): GrubbsBlock {
  const single = (end: 'high' | 'low') =>
    testBlock({
      test: () => {
        const { laboratory, statistic, pValue } = grubbsSingle(summaries, end)
        return { laboratories: [laboratory], statistic, pValue }
      },
      critical: (alpha) => grubbsSingleCritical(summaries.length, alpha),
    })
  const pair = (end: 'high' | 'low') =>
    testBlock({
      test: () => {
        const { laboratories, statistic, pValue } = grubbsPair(summaries, end)
        return { laboratories: [...laboratories], statistic, pValue }
      },
      critical: (alpha) => grubbsPairCritical(summaries.length, alpha),
    })
  return { high: single('high'), low: single('low'), pairHigh: pair('high'), pairLow: pair('low') }
}

function testBlock(one: {
  test: () => { laboratories: string[]; statistic: number; pValue: number }
  critical: (alpha: number) => number
}): GrubbsTestBlock {
  return withReasons((attempt) => {
    const found = attempt('statistic', one.test)
    return {
      laboratories: found?.laboratories ?? [],
      statistic: found?.statistic ?? null,
      critical: withReasons((inner) => ({
        '0.05': inner('0.05', () => one.critical(0.05)),
        '0.01': inner('0.01', () => one.critical(0.01)),
      })),
      pValue: found?.pValue ?? null,
      level: found === null ? null : outlierLevel(found.pValue),
    }
  })
}
