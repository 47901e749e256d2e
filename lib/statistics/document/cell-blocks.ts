import type { CellBlock, ScoresBlock } from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import { type JudgedK, kCriticalBlock, kOfCells } from '@/lib/statistics/document/consistency-blocks'
import { once, required, withReasons } from '@/lib/statistics/document/attempt'
import { mandelH, mandelHPValue, mandelKPValue } from '@/lib/statistics/mandel'
import { NotComputable } from '@/lib/statistics/not-computable'

const ONE_RESULT = 'The laboratory has no second result.'

/**
 * One block a laboratory, in the order given: means and standard deviations in the unit of the results, h, k and G pure
 * numbers. What a cell has not got is `null` with a reason (`no-scatter`, `too-few-replicated-cells` of G by itself).
 *
 * Source: `mandel.ts`, `cochran.ts`; G of a cell in terms of its k.
 */
export function cellBlocks(one: {
  summaries: readonly CellSummary[]
  /** Fails where no two results differ by the replicate alone. */
  requireReplicate: () => void
  restore: (deviation: number) => number
  /** The accepted reference value as a deviation, or a failure saying that none was given. */
  reference: () => number
  /** Of the cell at this place. */
  scoresOf: (summary: CellSummary, index: number) => ScoresBlock
}): CellBlock[] {
  const { summaries, requireReplicate, restore } = one
  const hStatistics = once(() => mandelH(summaries))
  const kStatistics = kOfCells(summaries)
  const pooledDf = summaries.reduce((sum, { df }) => sum + df, 0)
  const replicated = summaries.filter(({ df }) => df >= 1).length
  const pooledSquares = summaries.reduce((sum, { df, sd }) => sum + (sd === undefined ? 0 : df * sd ** 2), 0)

  return summaries.map((summary, index) =>
    withReasons((attempt) => {
      const { laboratory, n, mean, sd, df } = summary
      const hOfCell = () => hStatistics()[index]!
      const sdOfCell = () => {
        requireReplicate()
        return required(sd ?? null, ONE_RESULT)
      }
      const kOfCell = () => {
        requireReplicate()
        return required(kStatistics()[index]!, ONE_RESULT)
      }
      return {
        laboratory,
        n,
        mean: restore(mean),
        sd: attempt('sd', sdOfCell),
        h: attempt('h', hOfCell),
        k: attempt('k', () => kOfCell().k),
        df,
        hPValue: attempt('hPValue', () => mandelHPValue(hOfCell(), summaries.length)),
        kPValue: attempt('kPValue', () => kPValueOf(kOfCell())),
        kCritical: kCriticalBlock(df, pooledDf, requireReplicate),
        bias: attempt('bias', () => mean - one.reference()),
        generalisedCochran: generalisedOf({ df, sdOfCell, kOfCell }, { replicated, pooledSquares }),
        scores: one.scoresOf(summary, index),
      }
    }),
  )
}

/** The generalised Cochran statistic of one cell, with the p-value it would have as the one tested. */
function generalisedOf(
  { df, sdOfCell, kOfCell }: { df: number; sdOfCell: () => number; kOfCell: () => JudgedK },
  all: { replicated: number; pooledSquares: number },
): CellBlock['generalisedCochran'] {
  return withReasons((attempt) => {
    const own = attempt('statistic', () => {
      const square = df * sdOfCell() ** 2
      if (all.pooledSquares === 0) throw new NotComputable('no-scatter', 'All replicates agree exactly.')
      if (all.replicated < 2) {
        throw new NotComputable('too-few-replicated-cells', '2 laboratories with replicates are needed.')
      }
      return square
    })
    if (own === null) return { statistic: null, pValue: null }
    return {
      statistic: own / all.pooledSquares,
      // G and k are one statistic in two forms; only that one cell was picked out of several makes the difference.
      pValue: attempt('pValue', () => Math.min(1, all.replicated * kPValueOf(kOfCell()))),
    }
  })
}

function kPValueOf(own: JudgedK): number {
  return mandelKPValue(own, own.shareOfOthers)
}
