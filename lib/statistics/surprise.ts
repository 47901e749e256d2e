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

/**
 * What all others say, for each laboratory in order: means in u, variances in u², as the cells are in u.
 *
 * Sums of those before and of those after are joined. Taking one laboratory off a sum of all would lose the digits of the
 * others wherever that one has nearly the whole of it.
 *
 * @throws {NotComputable} `too-few-laboratories` below 4 laboratories.
 *
 * Source: our own; the joining is that of Chan, Golub & LeVeque.
 */
export function summariseOthers(cells: readonly CellFigures[]): Others[] {
  if (cells.length < 4) throw new NotComputable('too-few-laboratories', '4 laboratories are needed.')
  const after: Sums[] = [NOTHING]
  for (let index = cells.length - 1; index > 0; index -= 1)
    after.push(joined(after.at(-1)!, sumsOf(cells[index]!)))
  let before = NOTHING
  return cells.map((cell, index) => {
    const others = joined(before, after[cells.length - 1 - index]!)
    before = joined(before, sumsOf(cell))
    return {
      laboratories: others.count,
      mean: others.mean,
      sdOfMeans: Math.sqrt(others.squares / (others.count - 1)),
      repeatabilityVariance: others.df === 0 ? 0 : others.within / others.df,
      repeatabilityDf: others.df,
    }
  })
}

/** Number, mean and sum of squares of some cell means, and their pooled scatter inside. */
type Sums = { count: number; mean: number; squares: number; within: number; df: number }

const NOTHING: Sums = { count: 0, mean: 0, squares: 0, within: 0, df: 0 }

function sumsOf({ mean, sd, df }: CellFigures): Sums {
  return sd === undefined
    ? { count: 1, mean, squares: 0, within: 0, df: 0 }
    : { count: 1, mean, squares: 0, within: df * sd ** 2, df }
}

/** Chan, Golub & LeVeque: two sums of squares about their own means become one about the common mean. */
function joined(one: Sums, other: Sums): Sums {
  if (one.count === 0) return other
  if (other.count === 0) return one
  const count = one.count + other.count
  const apart = other.mean - one.mean
  return {
    count,
    mean: one.mean + (apart * other.count) / count,
    squares: one.squares + other.squares + (apart ** 2 * one.count * other.count) / count,
    within: one.within + other.within,
    df: one.df + other.df,
  }
}

/**
 * How little one cell is to be expected by what the other laboratories say: its mean by Student's t, its scatter by F.
 * Cell and others in one unit; p-values and total are pure numbers.
 *
 * A p-value is 0 where the others do not differ at all and the cell does, and 1 where there is nothing to compare.
 *
 * Source: our own; t and F tests of a further laboratory.
 */
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
