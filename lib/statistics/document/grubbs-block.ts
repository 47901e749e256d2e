import type { GrubbsBlock, GrubbsProposal, GrubbsTestBlock } from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import { withReasons } from '@/lib/statistics/document/attempt'
import { outlierLevel } from '@/lib/statistics/document/consistency-blocks'
import { grubbsPair, grubbsPairCritical } from '@/lib/statistics/grubbs-pair'
import { type End, grubbsSingle, grubbsSingleCritical } from '@/lib/statistics/grubbs-single'

/**
 * The four tests on cell means, each with a level of its own, and what they propose in their order.
 *
 * Variant: an end beyond 1 % is set aside in thought before the other is looked at, and pairs are then not consulted.
 * Tests that do not exist are `null` with the reason of `grubbsSingle` or `grubbsPair`.
 *
 * Source: ISO 5725-2:1994, 7.3.4.
 */
export function grubbsBlock(summaries: readonly CellSummary[]): GrubbsBlock {
  const pair = (end: End) =>
    testBlock({
      test: () => {
        const { laboratories, statistic, pValue } = grubbsPair(summaries, end)
        return { laboratories: [...laboratories], statistic, pValue }
      },
      critical: (alpha) => grubbsPairCritical(summaries.length, alpha),
    })
  const [high, low] = [singleBlock(summaries, 'high'), singleBlock(summaries, 'low')]
  const [pairHigh, pairLow] = [pair('high'), pair('low')]
  return { high, low, pairHigh, pairLow, ...inOrder(summaries, { high, low, pairHigh, pairLow }) }
}

function singleBlock(summaries: readonly CellSummary[], end: End): GrubbsTestBlock {
  return testBlock({
    test: () => {
      const { laboratory, statistic, pValue } = grubbsSingle(summaries, end)
      return { laboratories: [laboratory], statistic, pValue }
    },
    critical: (alpha) => grubbsSingleCritical(summaries.length, alpha),
  })
}

/** ISO 5725-2, 7.3.4: an end beyond 1 % is set aside in thought before the other is looked at, and pairs are then no matter. */
function inOrder(
  summaries: readonly CellSummary[],
  tests: Pick<GrubbsBlock, 'high' | 'low' | 'pairHigh' | 'pairLow'>,
): Pick<GrubbsBlock, 'proposed' | 'pairsConsulted'> {
  const { high, low, pairHigh, pairLow } = tests
  const end = furtherEnd(high, low)
  if (end === null) {
    const proposed = [
      ...proposalOf('high', high),
      ...proposalOf('low', low),
      ...proposalOf('pairHigh', pairHigh),
      ...proposalOf('pairLow', pairLow),
    ]
    return { proposed, pairsConsulted: pairHigh.statistic !== null }
  }
  const other = end === 'high' ? 'low' : 'high'
  const [aside] = tests[end].laboratories
  const remaining = summaries.filter(({ laboratory }) => laboratory !== aside)
  return {
    proposed: [...proposalOf(end, tests[end]), ...proposalOf(other, singleBlock(remaining, other))],
    pairsConsulted: false,
  }
}

/** The end beyond 1 %; of two, the one that is further out. */
function furtherEnd(high: GrubbsTestBlock, low: GrubbsTestBlock): End | null {
  if (high.level === 'outlier' && low.level === 'outlier') return low.pValue! < high.pValue! ? 'low' : 'high'
  if (high.level === 'outlier') return 'high'
  return low.level === 'outlier' ? 'low' : null
}

function proposalOf(
  test: GrubbsProposal['test'],
  { laboratories, level }: GrubbsTestBlock,
): GrubbsProposal[] {
  return level === null || level === 'none' ? [] : [{ laboratories, test, level }]
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
