import { binaryScale } from '@/lib/statistics/binary-scale'
import { replicatedCells, type CellSummary, type ReplicatedCell } from '@/lib/statistics/cells'
import { fQuantileUpper, fUpperTail } from '@/lib/statistics/distributions/f'
import { NotComputable } from '@/lib/statistics/not-computable'
import { noScatter } from '@/lib/statistics/one-way-precision'
import { tieKeys } from '@/lib/statistics/tie-keys'

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
  const variances = cells.map((cell) => cell.sd ** 2)
  const keys = tieKeys(variances)
  const index = keys.reduce((best, key, at) => (key > keys[best]! ? at : best), 0)
  const largest = variances[index] as number
  // The others are summed by themselves: as 1 - C they would lose their digits when one cell has nearly all.
  const others = variances.reduce((sum, variance, at) => (at === index ? sum : sum + variance), 0)
  const df = modalDf(cells)
  const f = ((cells.length - 1) * largest) / others
  return {
    laboratory: (cells[index] as ReplicatedCell).laboratory,
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
  const squares = cells.map((cell) => cell.df * cell.sd ** 2)
  const pooledDf = cells.reduce((sum, cell) => sum + cell.df, 0)

  const sumsOfOthers = leaveOneOut(squares)

  const tests = cells.map(({ laboratory, df }, index) => {
    const own = squares[index] as number
    const others = sumsOfOthers[index] as number
    const f = own / df / (others / (pooledDf - df))
    const pValue = Math.min(1, cells.length * fUpperTail(f, df, pooledDf - df))
    return { laboratory, statistic: own / (own + others), cells: cells.length, df, pooledDf, pValue }
  })
  return tests.reduce((best, test) => (isMoreExtreme(test, best) ? test : best))
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

/** The cells that take part, their standard deviations scaled so that they can be squared. */
function comparableCells(summaries: readonly CellSummary[]): ReplicatedCell[] {
  const cells = replicatedCells(summaries)
  requireTwoCells(cells.length)
  if (cells.every((cell) => cell.sd === 0)) throw noScatter()
  const scale = binaryScale(cells.map((cell) => cell.sd))
  return cells.map(({ laboratory, n, mean, sd, df }) => ({ laboratory, n, mean, sd: sd / scale, df }))
}

function requireTwoCells(cells: number): void {
  if (cells >= 2) return
  throw new NotComputable('too-few-replicated-cells', '2 laboratories with replicates are needed.')
}

function modalDf(cells: readonly ReplicatedCell[]): number {
  const counts = new Map<number, number>()
  for (const { df } of cells) counts.set(df, (counts.get(df) ?? 0) + 1)
  const [modal] = [...counts].reduce((best, next) => {
    const isMoreFrequent = next[1] > best[1] || (next[1] === best[1] && next[0] < best[0])
    return isMoreFrequent ? next : best
  })
  return modal
}

/** The sum of all other values, for each of them: of those before and those after, lest digits cancel. */
function leaveOneOut(values: readonly number[]): number[] {
  const after: number[] = new Array(values.length).fill(0)
  for (let at = values.length - 2; at >= 0; at -= 1) after[at] = after[at + 1]! + values[at + 1]!
  let before = 0
  return values.map((value, at) => {
    const others = before + after[at]!
    before += value
    return others
  })
}

/** Ties: the larger statistic, then the order of the cells. Differences of rounding alone are ties. */
function isMoreExtreme(a: GeneralisedCochran, b: GeneralisedCochran): boolean {
  const difference = b.pValue - a.pValue
  if (Math.abs(difference) > 1e-9 * Math.max(a.pValue, b.pValue)) return difference > 0
  return a.statistic > b.statistic * (1 + 1e-12)
}
