import type { CellBlock, ScoresBlock } from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import { kByLaboratory, kCriticalBlock } from '@/lib/statistics/document/consistency-blocks'
import { once, required, withReasons } from '@/lib/statistics/document/attempt'
import { fUpperTail } from '@/lib/statistics/distributions/f'
import { mandelH, mandelHPValue, mandelKPValue } from '@/lib/statistics/mandel'
import { NotComputable } from '@/lib/statistics/not-computable'

const ONE_RESULT = 'The laboratory has no second result.'

/** One block a laboratory, in the order given. */
export function cellBlocks(one: {
  summaries: readonly CellSummary[]
  /** Fails where no two results differ by the replicate alone. */
  requireReplicate: () => void
  restore: (deviation: number) => number
  /** The accepted reference value as a deviation, or a failure saying that none was given. */
  reference: () => number
  scoresOf: (summary: CellSummary) => ScoresBlock
}): CellBlock[] {
  const { summaries, requireReplicate, restore } = one
  const hStatistics = once(() => new Map(mandelH(summaries).map(({ laboratory, h }) => [laboratory, h])))
  const kStatistics = kByLaboratory(summaries)
  const pooledDf = summaries.reduce((sum, { df }) => sum + df, 0)
  const pooledSquares = summaries.reduce((sum, { df, sd }) => sum + (sd === undefined ? 0 : df * sd ** 2), 0)

  return summaries.map((summary) =>
    withReasons((attempt) => {
      const { laboratory, n, mean, sd, df } = summary
      const hOfCell = () => hStatistics().get(laboratory)!
      const sdOfCell = () => {
        requireReplicate()
        return required(sd ?? null, ONE_RESULT)
      }
      const kOfCell = () => {
        requireReplicate()
        return required(kStatistics().get(laboratory) ?? null, ONE_RESULT)
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
        kPValue: attempt('kPValue', () => mandelKPValue(kOfCell())),
        kCritical: kCriticalBlock(df, pooledDf, requireReplicate),
        bias: attempt('bias', () => mean - one.reference()),
        generalisedCochran: generalisedOf({ df, sdOfCell }, { cells: summaries, pooledDf, pooledSquares }),
        scores: one.scoresOf(summary),
      }
    }),
  )
}

/** The generalised Cochran statistic of one cell, with the p-value it would have as the one tested. */
function generalisedOf(
  { df, sdOfCell }: { df: number; sdOfCell: () => number },
  all: { cells: readonly CellSummary[]; pooledDf: number; pooledSquares: number },
): CellBlock['generalisedCochran'] {
  return withReasons((attempt) => {
    const own = attempt('statistic', () => {
      const square = df * sdOfCell() ** 2
      if (all.pooledSquares === 0) throw new NotComputable('no-scatter', 'All replicates agree exactly.')
      const others = all.cells.filter((cell) => cell.df >= 1).length
      if (others < 2) {
        throw new NotComputable('too-few-replicated-cells', '2 laboratories with replicates are needed.')
      }
      return { square, cells: others }
    })
    if (own === null) return { statistic: null, pValue: null }
    const otherDf = all.pooledDf - df
    const rest = Math.max(0, all.pooledSquares - own.square)
    const f = own.square / df / (rest / otherDf)
    return {
      statistic: own.square / all.pooledSquares,
      pValue: rest === 0 ? 0 : Math.min(1, own.cells * fUpperTail(f, df, otherDf)),
    }
  })
}
