import { fUpperTail } from '@/lib/statistics/distributions/f'
import { tUpperTail } from '@/lib/statistics/distributions/students-t'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * How surprising one laboratory's cell is, judged by the other laboratories
 * alone, so that a cell that stands apart does not blur its own yardstick.
 */
export type CellFigures = {
  n: number
  mean: number
  /** Absent where df is 0. */
  sd: number | undefined
  df: number
}

/** What the other laboratories say of one material. */
export type Others = {
  laboratories: number
  mean: number
  sdOfMeans: number
  repeatabilityVariance: number
  repeatabilityDf: number
}

export type Surprise = {
  /** Two-sided, of the mean; on p − 2 degrees of freedom. */
  pMean: number
  /** Upper tail, of the standard deviation; 1 for a single result. */
  pScatter: number
  /** −log₁₀ of both, each counted to 12 at most. */
  total: number
}

const MOST = 12

/** @throws {NotComputable} `too-few-laboratories` with fewer than 3 others. */
export function summariseOthers(cells: readonly CellFigures[]): Others {
  const laboratories = cells.length
  if (laboratories < 3) throw new NotComputable('too-few-laboratories', '4 laboratories are needed.')
  const mean = cells.reduce((sum, cell) => sum + cell.mean, 0) / laboratories
  const squares = cells.reduce((sum, cell) => sum + (cell.mean - mean) ** 2, 0)
  let within = 0
  let df = 0
  for (const cell of cells) {
    if (cell.sd === undefined) continue
    within += cell.df * cell.sd ** 2
    df += cell.df
  }
  return {
    laboratories,
    mean,
    sdOfMeans: Math.sqrt(squares / (laboratories - 1)),
    repeatabilityVariance: df === 0 ? 0 : within / df,
    repeatabilityDf: df,
  }
}

export function surprise(cell: CellFigures, others: Others): Surprise {
  const pMean = surpriseOfMean(cell, others)
  const pScatter = surpriseOfScatter(cell, others)
  return { pMean, pScatter, total: digits(pMean) + digits(pScatter) }
}

function surpriseOfMean(cell: CellFigures, others: Others): number {
  const distance = Math.abs(cell.mean - others.mean)
  if (distance === 0) return 1
  if (others.sdOfMeans === 0) return 0
  const t = distance / (others.sdOfMeans * Math.sqrt(1 + 1 / others.laboratories))
  return Math.min(1, 2 * tUpperTail(t, others.laboratories - 1))
}

function surpriseOfScatter(cell: CellFigures, others: Others): number {
  if (cell.sd === undefined || cell.sd === 0 || others.repeatabilityDf === 0) return 1
  if (others.repeatabilityVariance === 0) return 0
  return fUpperTail(cell.sd ** 2 / others.repeatabilityVariance, cell.df, others.repeatabilityDf)
}

function digits(p: number): number {
  return p === 0 ? MOST : Math.min(MOST, -Math.log10(p))
}
