import type { AlgorithmA } from '@/lib/statistics/algorithm-a'
import { algorithmS } from '@/lib/statistics/algorithm-s'
import type { RobustBlock } from '@/lib/statistics/analysis-document'
import { notComputable, required, withReasons } from '@/lib/statistics/document/attempt'
import { hampelLocation } from '@/lib/statistics/hampel-location'
import type { IntegerCells } from '@/lib/statistics/pairwise-differences'
import { qOfCellMeans, qRepeatability, qReproducibility } from '@/lib/statistics/q-method'

/** What the robust estimates are made from: one entry a laboratory, all in the same order. */
export type RobustInput = {
  cellMeans: readonly number[]
  /** Algorithm A of the cell means. */
  algorithmA: () => AlgorithmA
  cellSpreads: readonly { sd: number; df: number }[]
  integers: IntegerCells
  /** The results that differ by the replicate alone: the cells, or in a nested layout their innermost groups. */
  replicates: IntegerCells
  isNested: boolean
  /** Fails where no two results differ by the replicate alone. */
  requireReplicate: () => void
  /** The value of one unit of `integers`. */
  step: number
  harmonicCellSize: number
  restore: (deviation: number) => number
}

/**
 * The robust estimates of one material, all in the unit of the results.
 *
 * Variant: s_R² = max(0, s*² − w²/n_h) + w² from Algorithms A and S; refused (`nested`) in a nested layout, whose cell
 * means hold a part of every inner level. The Q method on single results stands apart.
 *
 * Source: ISO 13528, Annex C; ISO 5725-5.
 */
export function robustBlock(input: RobustInput): RobustBlock {
  const a = algorithmABlock(input)
  const s = withReasons((attempt) => {
    const found = attempt('sd', () => {
      input.requireReplicate()
      return algorithmS(input.cellSpreads)
    })
    return { sd: found?.sd ?? null, generalised: found?.generalised ?? null }
  })
  return {
    algorithmA: a,
    algorithmS: s,
    qHampel: withReasons((attempt) => {
      const sd = attempt('sd', () => qOfCellMeans(input.integers, input.step))
      const mean = attempt('mean', () =>
        hampelLocation(input.cellMeans, required(sd, 'The spread of the Q method could not be computed.')),
      )
      return { mean: mean === null ? null : input.restore(mean), sd }
    }),
    reproducibility: robustReproducibility(a.sd, s.sd, input),
    qMethod: {
      reproducibility: withReasons((attempt) => ({
        sd: attempt('sd', () => qReproducibility(input.integers, input.step)),
      })),
      repeatability: withReasons((attempt) => ({
        sd: attempt('sd', () => {
          input.requireReplicate()
          return qRepeatability(input.replicates, input.step)
        }),
      })),
    },
  }
}

function algorithmABlock({ algorithmA, restore }: RobustInput): RobustBlock['algorithmA'] {
  return withReasons((attempt) => {
    const found = attempt('sd', algorithmA)
    return {
      mean: found === null ? null : restore(found.mean),
      sd: found?.sd ?? null,
      meanStandardError: found?.meanStandardError ?? null,
    }
  })
}

/**
 * The spread of unweighted cell means holds the within part divided by the
 * harmonic mean of the cell sizes; the ordinary n̄ would leave too much. In a
 * nested layout it holds a part of every inner level besides, of which
 * Algorithm S says nothing.
 */
function robustReproducibility(
  meansSd: number | null,
  pooledSd: number | null,
  { harmonicCellSize, isNested }: RobustInput,
): RobustBlock['reproducibility'] {
  const words = 'It needs Algorithm A and Algorithm S.'
  const between = (): number => {
    if (isNested) {
      notComputable(
        'nested',
        'In a nested layout the laboratories cannot be told from the levels inside them this way.',
      )
    }
    const variance = required(meansSd, words) ** 2 - required(pooledSd, words) ** 2 / harmonicCellSize
    return Math.max(0, variance)
  }
  return withReasons((attempt) => ({
    sd: attempt('sd', () => Math.sqrt(between() + required(pooledSd, words) ** 2)),
    betweenLaboratory: withReasons((inner) => ({ sd: inner('sd', () => Math.sqrt(between())) })),
  }))
}
