import type { WholeNumbers } from '@/lib/statistics/decimal'
import { normalQuantile } from '@/lib/statistics/distributions/normal'
import {
  type Differences,
  differencesBetween,
  differencesWithin,
  type IntegerCells,
  tooManyPlaces,
} from '@/lib/statistics/pairwise-differences'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The Q method for spread.
 *
 * It reads a quantile off all pairwise differences, so it matters
 * whether two differences are equal. They are taken between integers: results at
 * a common decimal scale, cell means at that scale times the least common
 * multiple of the cell sizes. In floating point equal differences would fall
 * apart by a last bit and the answer would move by per cents.
 *
 * Source: ISO 13528, Annex C.5.
 */

/** Worth of one of the integers in the unit of the results, a power of ten. */
export type DecimalStep = number

/**
 * Q method on the cell means, each counted once: a robust spread that needs no centre. Integers in steps, the answer
 * in the unit of the results.
 *
 * Variant: no small-sample factor; the mean of s* / σ for normal data is 1.15 at 6 laboratories, 1.06 at 12.
 *
 * @throws {NotComputable} `too-few-laboratories` below 3; `all-equal`, also when too many differences are 0 to tell;
 *   `out-of-range` for differences of more than 10^200 steps, or a step that no double holds in full.
 *
 * Source: ISO 13528, Annex C.5.
 */
export function qOfCellMeans(cells: IntegerCells, step: DecimalStep): number {
  const count = cells.starts.length - 1
  if (count < 3) throw new NotComputable('too-few-laboratories', 'The Q method needs three laboratories.')
  const { means, multiple } = wholeCellMeans(cells)
  const differences = differencesBetween({
    units: means,
    starts: Int32Array.from({ length: count + 1 }, (_, at) => at),
  })
  return (spreadFrom(differences, BETWEEN) / Number(multiple)) * requireStep(step)
}

/**
 * Q method for reproducibility on single results: the pairs of different cells, every pair of cells counted alike.
 * Integers in steps, the answer in the unit of the results.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2; `all-equal`, also when too many differences are 0 to tell;
 *   `out-of-range` for differences of more than 10^200 steps, or a step that no double holds in full.
 *
 * Source: ISO 13528, Annex C.5.
 */
export function qReproducibility(cells: IntegerCells, step: DecimalStep): number {
  if (cells.starts.length < 3) throw new NotComputable('too-few-laboratories', 'Two laboratories are needed.')
  return spreadFrom(differencesBetween(cells), BETWEEN) * requireStep(step)
}

/**
 * Q method for repeatability on single results: the pairs inside a cell, every cell of two or more results counted
 * alike. Integers in steps, the answer in the unit of the results.
 *
 * @throws {NotComputable} `no-replication`; `all-equal`, also when too many differences are 0 to tell;
 *   `out-of-range` for differences of more than 10^200 steps, or a step that no double holds in full.
 *
 * Source: ISO 13528, Annex C.5.
 */
export function qRepeatability(cells: IntegerCells, step: DecimalStep): number {
  const replicated = cellsOfTwoOrMore(cells)
  if (replicated.starts.length === 1) throw new NotComputable('no-replication', 'No cell holds two results.')
  return spreadFrom(differencesWithin(replicated), WITHIN) * requireStep(step)
}

/** A double loses digits below 1e-307; the estimate, some of these steps, must not. */
const SMALLEST_STEP = 1e-290

function requireStep(step: DecimalStep): DecimalStep {
  if (!(step >= SMALLEST_STEP)) throw tooManyPlaces()
  return step
}

/** Which quantile of the differences is read, and what it is in a normal distribution. */
type Reading = { share: number; probability: number; probabilityOfTies: number }

const BETWEEN: Reading = { share: 0.25, probability: 0.625, probabilityOfTies: 0.375 }
const WITHIN: Reading = { share: 0.5, probability: 0.75, probabilityOfTies: 0.25 }

function spreadFrom(differences: Differences, reading: Reading): number {
  const { shareOfTies, areAllEqual, crossing } = differences
  if (areAllEqual) throw new NotComputable('all-equal', 'All the values are equal.')
  const target = reading.share + (1 - reading.share) * shareOfTies
  const between = crossing(target)
  // The polygon ends half a step short of 1; with nearly all differences equal
  // to 0 the target lies above its end.
  if (between === null) throw new NotComputable('all-equal', 'Too many of the values are equal.')
  const { from, to } = between
  const size = from.size + ((to.size - from.size) * (target - from.share)) / (to.share - from.share)
  return size / (Math.SQRT2 * normalQuantile(reading.probability + reading.probabilityOfTies * shareOfTies))
}

/** The cell means times the least common multiple of the cell sizes, less what all have in common. */
function wholeCellMeans({ units, starts }: IntegerCells): { means: WholeNumbers; multiple: bigint } {
  let multiple = 1n
  for (const size of new Set(starts.subarray(1).map((end, cell) => end - starts[cell]!)))
    multiple = leastCommonMultiple(multiple, BigInt(size))
  const count = starts.length - 1
  if (units instanceof Float64Array) {
    let [least, most] = [Infinity, -Infinity]
    for (let at = 0; at < units.length; at += 1) {
      least = Math.min(least, units[at]!)
      most = Math.max(most, units[at]!)
    }
    // No sum, which stands for a mean times the multiple, leaves the whole numbers that doubles hold.
    if ((most - least) * Number(multiple) <= Number.MAX_SAFE_INTEGER) {
      const means = new Float64Array(count)
      for (let cell = 0; cell < count; cell += 1) {
        const [start, end] = [starts[cell]!, starts[cell + 1]!]
        let sum = 0
        for (let at = start; at < end; at += 1) sum += units[at]! - least
        means[cell] = sum * (Number(multiple) / (end - start))
      }
      return { means, multiple }
    }
  }
  const means = Array.from({ length: count }, (_, cell) => {
    let sum = 0n
    for (let at = starts[cell]!; at < starts[cell + 1]!; at += 1) sum += BigInt(units[at]!)
    return sum * (multiple / BigInt(starts[cell + 1]! - starts[cell]!))
  })
  return { means, multiple }
}

function leastCommonMultiple(one: bigint, other: bigint): bigint {
  let [a, b] = [one, other]
  while (b !== 0n) [a, b] = [b, a % b]
  return (one / a) * other
}

function cellsOfTwoOrMore(cells: IntegerCells): IntegerCells {
  const { units, starts } = cells
  const sizes = Array.from(starts.subarray(1), (end, cell) => end - starts[cell]!)
  if (sizes.every((size) => size >= 2)) return cells
  const isIn = (_: unknown, at: number): boolean => inCellOfTwo[at] === 1
  const inCellOfTwo = new Uint8Array(units.length)
  const kept = [0]
  sizes.forEach((size, cell) => {
    if (size < 2) return
    inCellOfTwo.fill(1, starts[cell], starts[cell + 1])
    kept.push(kept.at(-1)! + size)
  })
  return {
    units: units instanceof Float64Array ? units.filter(isIn) : units.filter(isIn),
    starts: Int32Array.from(kept),
  }
}
