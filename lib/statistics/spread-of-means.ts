import { binaryScaleOf } from '@/lib/statistics/binary-scale'
import type { CellSummary } from '@/lib/statistics/cells'
import { NotComputable } from '@/lib/statistics/not-computable'

export interface SpreadOfMeans {
  /** The unweighted mean of the cell means. */
  readonly mean: number
  /** Their standard deviation, on p - 1 degrees of freedom. */
  readonly sd: number
  /** Cell mean less `mean`, divided by `scale`, in the order of the cells. */
  readonly centred: Float64Array
  readonly sumOfSquares: number
  /** A power of two in which `centred` and (squared) `sumOfSquares` are expressed. */
  readonly scale: number
}

/**
 * The unweighted mean and spread of cell means, on which Mandel's h and Grubbs' tests rest. Mean and standard deviation in
 * the unit of the cells, `centred` in steps of `scale` and in their order.
 *
 * Means that differ by no more than the rounding of their own computation are equal: a difference of one unit in
 * the last place would otherwise be blown up to an h of any size.
 *
 * @throws {NotComputable} `too-few-laboratories` below `atLeast`; `equal-means`.
 *
 * Source: ASTM E691, section 15.
 */
export function spreadOfMeans(summaries: readonly CellSummary[], atLeast = 2): SpreadOfMeans {
  requireLaboratories(summaries, atLeast)
  const p = summaries.length
  const first = summaries[0]!.mean
  const { largest } = extent(summaries, first)
  if (areMeansEqual(summaries)) throw new NotComputable('equal-means', 'All cell means are equal.')

  const scale = binaryScaleOf(largest)
  const inverse = 1 / scale
  const centred = new Float64Array(p)
  let sum = 0
  for (let at = 0; at < p; at += 1) {
    const shifted = (summaries[at]!.mean - first) * inverse
    centred[at] = shifted
    sum += shifted
  }
  const middle = sum / p
  let sumOfSquares = 0
  for (let at = 0; at < p; at += 1) {
    const distance = centred[at]! - middle
    centred[at] = distance
    sumOfSquares += distance * distance
  }
  const sd = Math.sqrt(sumOfSquares / (p - 1)) * scale
  return { mean: first + middle * scale, sd, centred, sumOfSquares, scale }
}

/** Whether means differ by no more than the rounding of their own computation; those of one laboratory, or none, do not. */
export function areMeansEqual(summaries: readonly CellSummary[]): boolean {
  const { range, reach } = extent(summaries, 0)
  return !(range > 8 * Number.EPSILON * reach)
}

/**
 * Lets pass `atLeast` laboratories with results, or more.
 *
 * @throws {NotComputable} `too-few-laboratories`.
 */
export function requireLaboratories(summaries: readonly CellSummary[], atLeast: number): void {
  if (summaries.length >= atLeast) return
  const words = `${atLeast} laboratories with results are needed; there ${countWords(summaries.length)}.`
  throw new NotComputable('too-few-laboratories', words)
}

function countWords(count: number): string {
  return count === 1 ? 'is 1' : `are ${count}`
}

/** How far the means reach from one another and from the first, and the results of all cells from 0 at most. */
function extent(
  summaries: readonly CellSummary[],
  first: number,
): { range: number; largest: number; reach: number } {
  let least = Infinity
  let most = -Infinity
  let scatter = 0
  let size = 0
  for (const { mean, sd, n } of summaries) {
    if (mean < least) least = mean
    if (mean > most) most = mean
    if (sd !== undefined && sd > scatter) scatter = sd
    if (n > size) size = n
  }
  // No result of a cell lies further from its mean than this; the rounding of a mean is a few units in that last place.
  const reach = Math.max(Math.abs(least), Math.abs(most)) + scatter * Math.sqrt(size)
  return { range: most - least, largest: Math.max(most - first, first - least), reach }
}
