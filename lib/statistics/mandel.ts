import { type CellSummary, replicatedCells, type ReplicatedCell } from '@/lib/statistics/cells'
import { fQuantileUpper, fUpperTail } from '@/lib/statistics/distributions/f'
import { tQuantileUpper, tUpperTail } from '@/lib/statistics/distributions/students-t'
import { leaveOneOut } from '@/lib/statistics/leave-one-out'
import { NotComputable } from '@/lib/statistics/not-computable'
import { noScatter, pooledSquares } from '@/lib/statistics/one-way-precision'
import { type SpreadOfMeans, spreadOfMeans } from '@/lib/statistics/spread-of-means'

/**
 * Mandel's consistency statistics, h between and k within laboratories.
 *
 * Variant: h is signed and two-sided, centred on the unweighted mean of the cell means. k is the cell's standard deviation
 * over the repeatability standard deviation pooled by degrees of freedom; ISO 5725-2 divides by the unweighted root mean
 * square instead, but only with the pooled one is the critical value exact for unequal cells. They are equal when balanced.
 *
 * Both are pure numbers and come in the order of the cells.
 *
 * Source: ASTM E691, section 15; P.-Th. Wilrich, AStA Adv. Stat. Anal. 97 (2013) 1.
 */
export interface MandelK {
  /** The cells that have a standard deviation, in their order. */
  readonly cells: readonly ReplicatedCell[]
  /** k of each of them. */
  readonly k: Float64Array
  /** ν, degrees of freedom of all of them together. */
  readonly pooledDf: number
}

/**
 * h of every laboratory, its distance from the others' level: (ȳ_i - ȳ)/s_ȳ with the unweighted mean and standard
 * deviation of the cell means. Signed, a pure number, in the order of the cells.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2; `equal-means`.
 *
 * Source: ASTM E691, section 15.
 */
export function mandelH(
  summaries: readonly CellSummary[],
  { centred, sumOfSquares }: SpreadOfMeans = spreadOfMeans(summaries),
): Float64Array {
  const sd = Math.sqrt(sumOfSquares / (summaries.length - 1))
  return centred.map((distance) => distance / sd)
}

/**
 * The |h| that a share alpha exceeds, h_c = (p - 1) t/√(p (t² + p - 2)), t the upper alpha/2 point on p - 2 df. Exact.
 *
 * @throws {NotComputable} `too-few-laboratories` below 3.
 *
 * Source: P.-Th. Wilrich, AStA Adv. Stat. Anal. 97 (2013) 1; ASTM E691, section 15.
 */
export function mandelHCritical(laboratories: number, alpha: number): number {
  requireThree(laboratories)
  const t = tQuantileUpper(alpha / 2, laboratories - 2)
  // Divided through by t, which is beyond 1e15 for a small alpha on one degree of freedom.
  return (laboratories - 1) / Math.sqrt(laboratories * (1 + (laboratories - 2) / t / t))
}

/**
 * Two-sided p-value, from t² = p h² (p - 2)/((p - 1)² - p h²); 0 when |h| is at its bound (p - 1)/√p.
 *
 * @throws {NotComputable} `too-few-laboratories` below 3.
 *
 * Source: Wilrich 2013.
 */
export function mandelHPValue(h: number, laboratories: number): number {
  requireThree(laboratories)
  const p = laboratories
  // h at its bound (p - 1)/√p: all other laboratories agree exactly.
  const room = (p - 1) ** 2 - p * h * h
  if (room <= 8 * Number.EPSILON * (p - 1) ** 2) return 0
  return Math.min(1, 2 * tUpperTail(Math.sqrt((p * h * h * (p - 2)) / room), p - 2))
}

/**
 * k of every cell that has a standard deviation, in their order; the others are left out. A pure number:
 * s_i over the s_r pooled by degrees of freedom (see above where sources differ).
 *
 * @throws {NotComputable} `no-replicates`; `no-scatter` when all replicates agree exactly.
 *
 * Source: ASTM E691, section 15.
 */
export function mandelK(summaries: readonly CellSummary[]): MandelK {
  const cells = replicatedCells(summaries)
  const { sumOfSquares, df: pooledDf, scale } = pooledSquares(cells)
  if (pooledDf === 0) throw new NotComputable('no-replicates', 'No laboratory has a second result.')
  if (sumOfSquares === 0) throw noScatter()
  const inverse = 1 / scale
  const pooled = Math.sqrt(sumOfSquares / pooledDf)
  const k = new Float64Array(cells.length)
  for (let at = 0; at < k.length; at += 1) k[at] = (cells[at]!.sd * inverse) / pooled
  return { cells, k, pooledDf }
}

export interface KOf {
  readonly df: number
  readonly pooledDf: number
}

/**
 * Of the pooled sum of squares, the share that all other cells hold, for each cell that {@link mandelK} gives and in its
 * order: pure numbers from 0 to 1. The others are summed by themselves, lest a cell with nearly all of it leave them no
 * digits.
 *
 * @throws {NotComputable} `no-scatter` when all replicates agree exactly, or there are none.
 */
export function sharesOfOthers(summaries: readonly CellSummary[]): number[] {
  const cells = replicatedCells(summaries)
  const { sumOfSquares, scale } = pooledSquares(cells)
  if (sumOfSquares === 0) throw noScatter()
  const squares = Float64Array.from(cells, ({ df, sd }) => df * (sd / scale) ** 2)
  return Array.from(leaveOneOut(squares), (others) => others / sumOfSquares)
}

/**
 * The k that a share alpha exceeds: k_c² = F ν/(ν_i F + ν - ν_i), F its upper point on (ν_i, ν - ν_i). Exact for cells of
 * any size.
 *
 * @throws {NotComputable} `too-few-replicated-cells` when the cell is the only one with replicates.
 *
 * Source: Wilrich 2013.
 */
export function mandelKCritical({ df, pooledDf, alpha }: KOf & { readonly alpha: number }): number {
  requireOthers({ df, pooledDf })
  const f = fQuantileUpper(alpha, df, pooledDf - df)
  return Math.sqrt(pooledDf / (df + (pooledDf - df) / f))
}

/**
 * Upper p-value, from F = k² (ν - ν_i)/(ν - ν_i k²). Of k near its bound √(ν/ν_i) the difference keeps few digits; the
 * share of {@link sharesOfOthers}, which is (ν - ν_i k²)/ν, keeps all.
 *
 * @throws {NotComputable} `too-few-replicated-cells` when the cell is the only one with replicates.
 *
 * Source: Wilrich 2013.
 */
export function mandelKPValue(
  { k, df, pooledDf }: KOf & { readonly k: number },
  shareOfOthers?: number,
): number {
  requireOthers({ df, pooledDf })
  const room = shareOfOthers === undefined ? pooledDf - df * k * k : pooledDf * shareOfOthers
  // k at its bound: all other cells are without scatter, as far as can be told.
  if (room <= (shareOfOthers === undefined ? 8 * Number.EPSILON * pooledDf : 0)) return 0
  return fUpperTail((k * k * (pooledDf - df)) / room, df, pooledDf - df)
}

function requireThree(laboratories: number): void {
  if (laboratories >= 3) return
  throw new NotComputable('too-few-laboratories', '3 laboratories are needed to judge h.')
}

function requireOthers({ df, pooledDf }: KOf): void {
  if (pooledDf > df && df >= 1) return
  throw new NotComputable('too-few-replicated-cells', 'No other laboratory has a second result.')
}
