import { binaryScaleOf } from '@/lib/statistics/binary-scale'
import { replicatedCells, type CellSummary, type ReplicatedCell } from '@/lib/statistics/cells'
import { fQuantileUpper, fUpperTail } from '@/lib/statistics/distributions/f'
import { leaveOneOut } from '@/lib/statistics/leave-one-out'
import { NotComputable } from '@/lib/statistics/not-computable'
import { noScatter } from '@/lib/statistics/one-way-precision'
import { placeOfLargest } from '@/lib/statistics/tie-keys'

/**
 * Cochran's test for the largest of several variances, as ISO 5725-2 has it and generalised to unequal cells.
 *
 * Only cells with a standard deviation take part. Both statistics are pure numbers between 0 and 1.
 *
 * Both use Bonferroni's inequality: a critical value of 0.5 or more is exact, a smaller one conservative by under 2 % of
 * alpha.
 *
 * Source: ISO 5725-2:1994, 7.3.3; R. U. E. 't Lam, Anal. Chim. Acta 659 (2010) 68 for the generalisation.
 */
export interface Cochran {
  /** Whose standard deviation is the largest; the first of several. */
  readonly laboratory: string
  /** C = s_max²/Σ s². */
  readonly statistic: number
  /** p′, the number of cells that take part. */
  readonly cells: number
  /** Most frequent degrees of freedom among them, the smallest of several; n - 1 in a one-way layout. */
  readonly df: number
  readonly pValue: number
  /** Whether all cells have the same degrees of freedom. If not, the p-value is only approximate. */
  readonly isBalanced: boolean
}

export interface GeneralisedCochran {
  /** The cell with the smallest p-value. */
  readonly laboratory: string
  /** G = ν_i s_i²/Σ ν s² of that cell. */
  readonly statistic: number
  readonly cells: number
  /** ν_i of that cell. */
  readonly df: number
  /** ν, of all cells. */
  readonly pooledDf: number
  readonly pValue: number
}

/**
 * Cochran's test for the largest variance: is one laboratory's scatter too large beside the others'?
 *
 * Variant: that of ISO 5725-2, on the modal degrees of freedom; where `isBalanced` is false the p-value is only
 * approximate, and {@link generalisedCochran} decides. Takes cells in any unit; the first of equal ones is named.
 *
 * @throws {NotComputable} `too-few-replicated-cells` below 2; `no-scatter` when every standard deviation is 0.
 *
 * Source: ISO 5725-2:1994, 7.3.3 and table 4; P.-Th. Wilrich, AStA Adv. Stat. Anal. 97 (2013) 1.
 */
export function cochran(summaries: readonly CellSummary[]): Cochran {
  const cells = comparableCells(summaries)
  const variances = variancesOf(cells)
  const index = placeOfLargest(variances)
  const largest = variances[index]!
  // The others are summed by themselves: as 1 - C they would lose their digits when one cell has nearly all.
  let others = 0
  for (let at = 0; at < variances.length; at += 1) if (at !== index) others += variances[at]!
  const df = modalDf(cells)
  const f = ((cells.length - 1) * largest) / others
  return {
    laboratory: cells[index]!.laboratory,
    statistic: largest / (largest + others),
    cells: cells.length,
    df,
    pValue: Math.min(1, cells.length * fUpperTail(f, df, (cells.length - 1) * df)),
    isBalanced: cells.every((cell) => cell.df === df),
  }
}

export interface CochranCriticalOf {
  readonly cells: number
  readonly df: number
  readonly alpha: number
}

/**
 * The C that a share alpha exceeds: F/(F + p′ - 1), F the upper alpha/p′ point on (ν, (p′ - 1) ν). A pure number.
 *
 * @throws {NotComputable} `too-few-replicated-cells` below 2 cells.
 *
 * Source: ISO 5725-2:1994, table 4; Wilrich 2013.
 */
export function cochranCritical({ cells, df, alpha }: CochranCriticalOf): number {
  requireTwoCells(cells)
  const f = fQuantileUpper(alpha / cells, df, (cells - 1) * df)
  return 1 / (1 + (cells - 1) / f)
}

/**
 * Cochran's test for cells of any degrees of freedom, G = ν_i s_i²/Σ ν s².
 *
 * The cell with the smallest p-value is the one tested (ties: the larger G, then the order of the cells). In the
 * balanced case it is Cochran's C. Takes cells in any unit.
 *
 * @throws {NotComputable} `too-few-replicated-cells` below 2; `no-scatter` when every standard deviation is 0.
 *
 * Source: R. U. E. 't Lam, Anal. Chim. Acta 659 (2010) 68.
 */
export function generalisedCochran(summaries: readonly CellSummary[]): GeneralisedCochran {
  const cells = comparableCells(summaries)
  const squares = variancesOf(cells)
  let pooledDf = 0
  for (let at = 0; at < squares.length; at += 1) {
    squares[at]! *= cells[at]!.df
    pooledDf += cells[at]!.df
  }
  const sumsOfOthers = leaveOneOut(squares)

  return largestOfEachDf(cells, squares, sumsOfOthers)
    .map((index): GeneralisedCochran => {
      const { laboratory, df } = cells[index]!
      const [own, others] = [squares[index]!, sumsOfOthers[index]!]
      const f = own / df / (others / (pooledDf - df))
      const pValue = Math.min(1, cells.length * fUpperTail(f, df, pooledDf - df))
      return { laboratory, statistic: own / (own + others), cells: cells.length, df, pooledDf, pValue }
    })
    .reduce((best, test) => (isMoreExtreme(test, best) ? test : best))
}

export interface GeneralisedCochranCriticalOf extends CochranCriticalOf {
  readonly pooledDf: number
}

/**
 * The G of one cell that a share alpha exceeds: G_c = 1/(1 + (ν/ν_i - 1)/F), F the upper alpha/p′ point on
 * (ν_i, ν - ν_i). A pure number, and another for each ν_i.
 *
 * @throws {NotComputable} `too-few-replicated-cells` below 2 cells.
 *
 * Source: 't Lam 2010.
 */
export function generalisedCochranCritical(of: GeneralisedCochranCriticalOf): number {
  requireTwoCells(of.cells)
  const f = fQuantileUpper(of.alpha / of.cells, of.df, of.pooledDf - of.df)
  return 1 / (1 + (of.pooledDf / of.df - 1) / f)
}

function comparableCells(summaries: readonly CellSummary[]): readonly ReplicatedCell[] {
  const cells = replicatedCells(summaries)
  requireTwoCells(cells.length)
  if (cells.every((cell) => cell.sd === 0)) throw noScatter()
  return cells
}

/** In a unit in which standard deviations of any size can be squared. */
function variancesOf(cells: readonly ReplicatedCell[]): Float64Array {
  let largest = 0
  for (const { sd } of cells) if (sd > largest) largest = sd
  const inverse = 1 / binaryScaleOf(largest)
  const variances = new Float64Array(cells.length)
  for (let at = 0; at < cells.length; at += 1) variances[at] = (cells[at]!.sd * inverse) ** 2
  return variances
}

function requireTwoCells(cells: number): void {
  if (cells >= 2) return
  throw new NotComputable('too-few-replicated-cells', '2 laboratories with replicates are needed.')
}

function modalDf(cells: readonly ReplicatedCell[]): number {
  const [first] = cells
  if (cells.every(({ df }) => df === first!.df)) return first!.df
  const counts = new Map<number, number>()
  for (const { df } of cells) counts.set(df, (counts.get(df) ?? 0) + 1)
  const [modal] = [...counts].reduce((best, next) => {
    const isMoreFrequent = next[1] > best[1] || (next[1] === best[1] && next[0] < best[0])
    return isMoreFrequent ? next : best
  })
  return modal
}

/**
 * For each number of degrees of freedom that occurs, the place of the cell with the largest statistic, in the order of the
 * cells: among cells of equal degrees of freedom that one has the smallest p-value.
 */
function largestOfEachDf(
  cells: readonly ReplicatedCell[],
  squares: Float64Array,
  sumsOfOthers: Float64Array,
): number[] {
  const places = new Map<number, number>()
  let df = 0
  let best = -1
  for (let at = 0; at < cells.length; at += 1) {
    if (cells[at]!.df !== df || best === -1) {
      df = cells[at]!.df
      best = places.get(df) ?? at
      places.set(df, best)
    }
    // Cross-multiplied, as one cell may hold all the scatter; differences of rounding alone are ties.
    if (squares[at]! * sumsOfOthers[best]! > squares[best]! * sumsOfOthers[at]! * (1 + 1e-12)) {
      best = at
      places.set(df, best)
    }
  }
  return [...places.values()].sort((one, other) => one - other)
}

/** Ties: the larger statistic, then the order of the cells. Differences of rounding alone are ties. */
function isMoreExtreme(a: GeneralisedCochran, b: GeneralisedCochran): boolean {
  const difference = b.pValue - a.pValue
  if (Math.abs(difference) > 1e-9 * Math.max(a.pValue, b.pValue)) return difference > 0
  return a.statistic > b.statistic * (1 + 1e-12)
}
