import { binaryScaleOf } from '@/lib/statistics/binary-scale'

/** The results of one laboratory for one material, already centred exactly on the material's offset. */
export interface Cell {
  readonly laboratory: string
  readonly deviations: readonly number[] | Float64Array
}

/**
 * The cells of one material behind one another in one array: cell i is that of `laboratories[i]` and holds the deviations
 * from `starts[i]` up to, and without, `starts[i + 1]`.
 */
export interface CellTable {
  readonly laboratories: readonly string[]
  readonly starts: Int32Array
  readonly deviations: Float64Array
}

/**
 * What the one-way statistics need of a cell, in the unit of its results.
 *
 * In a nested layout `mean` is the mean of all the laboratory's results, `sd` the pooled innermost standard deviation and
 * `df` its degrees of freedom, which is then less than n - 1.
 */
export interface CellSummary {
  readonly laboratory: string
  readonly n: number
  readonly mean: number
  /** Absent where df is 0: a single result has no scatter. */
  readonly sd: number | undefined
  readonly df: number
}

/** A summary that has a standard deviation. */
export interface ReplicatedCell extends CellSummary {
  readonly sd: number
}

/** Puts cells behind one another, in the order given. */
export function cellTable(cells: readonly Cell[]): CellTable {
  const starts = new Int32Array(cells.length + 1)
  cells.forEach(({ deviations }, index) => (starts[index + 1] = starts[index]! + deviations.length))
  const all = new Float64Array(starts[cells.length]!)
  cells.forEach(({ deviations }, index) => all.set(deviations, starts[index]))
  return { laboratories: cells.map(({ laboratory }) => laboratory), starts, deviations: all }
}

/** For each result the place of its cell. */
export function codesOfCells({ starts, deviations }: CellTable): Int32Array {
  const codes = new Int32Array(deviations.length)
  for (let cell = 0; cell < starts.length - 1; cell += 1) codes.fill(cell, starts[cell], starts[cell + 1])
  return codes
}

/**
 * Number, mean and standard deviation of each cell, in the order given; cells without a result are left out.
 *
 * Deviations in unit u; `mean` comes back as such a deviation and `sd` in u, on n - 1 degrees of freedom. A single
 * result has no standard deviation.
 *
 * Each cell is centred once more on its first result, so that equal results have exactly no scatter, and the sum of
 * squares is corrected for what rounding left in the mean.
 *
 * @throws {RangeError} when a deviation is no finite number.
 *
 * Source: ISO 5725-2:1994, 7.4.
 */
export function summariseCells({ laboratories, starts, deviations }: CellTable): CellSummary[] {
  const summaries: CellSummary[] = []
  for (let index = 0; index < laboratories.length; index += 1) {
    const start = starts[index]!
    const end = starts[index + 1]!
    if (end > start) summaries.push(summarise(laboratories[index]!, deviations, start, end))
  }
  return summaries
}

/** The cells that have a standard deviation of their own, that is ν_i ≥ 1, in their order; it may be none. */
export function replicatedCells(summaries: readonly CellSummary[]): readonly ReplicatedCell[] {
  // Where all have one, as they mostly do, there is nothing to copy.
  return summaries.every(isReplicated)
    ? (summaries as readonly ReplicatedCell[])
    : summaries.filter(isReplicated)
}

function isReplicated(cell: CellSummary): cell is ReplicatedCell {
  return cell.df >= 1 && cell.sd !== undefined
}

function summarise(laboratory: string, deviations: Float64Array, start: number, end: number): CellSummary {
  const n = end - start
  const first = deviations[start]!
  let largest = 0
  for (let at = start; at < end; at += 1) {
    const size = Math.abs(deviations[at]! - first)
    if (!(size < Infinity)) throw new RangeError(`a deviation of ${laboratory} is no finite number`)
    if (size > largest) largest = size
  }
  // Within these bounds squares stay doubles as they are. Of a power of two the inverse is exact, and quicker to apply.
  const scale = largest > 1e-100 && largest < 1e100 ? 1 : binaryScaleOf(largest)
  const inverse = 1 / scale
  let sum = 0
  for (let at = start; at < end; at += 1) sum += (deviations[at]! - first) * inverse
  const middle = sum / n

  let squares = 0
  let left = 0
  for (let at = start; at < end; at += 1) {
    const residual = (deviations[at]! - first) * inverse - middle
    squares += residual * residual
    left += residual
  }
  const mean = first + (middle + left / n) * scale
  const sd = n < 2 ? undefined : Math.sqrt(Math.max(0, squares - (left * left) / n) / (n - 1)) * scale
  return { laboratory, n, mean, sd, df: n - 1 }
}
