import { binaryScaleOf } from '@/lib/statistics/binary-scale'
import type { CellSummary } from '@/lib/statistics/cells'
import { fUpperTail } from '@/lib/statistics/distributions/f'
import { NotComputable } from '@/lib/statistics/not-computable'
import { requireLaboratories } from '@/lib/statistics/spread-of-means'

/**
 * Precision of one material from a one-way layout, laboratories by replicates, equal in number or not.
 *
 * Shape and units: `summaries` holds the cells that have results, in one unit u on the scale of deviations from the
 * material's offset. Means come back on that scale (the caller puts the offset back exactly), standard deviations in u,
 * variances and sums of squares in u squared.
 *
 * Each quantity has its own function, because each exists under its own conditions.
 *
 * Source: ISO 5725-2:1994, 7.4; ASTM E691, section 15. The general mean is weighted by the number of results.
 */
export interface OneWayPrecision {
  readonly means: GeneralMeans
  readonly repeatability: Repeatability
  readonly betweenLaboratories: BetweenLaboratories
  readonly reproducibility: Reproducibility
}

export interface GeneralMeans {
  /** p, the number of laboratories with results. */
  readonly laboratories: number
  /** N, the number of results. */
  readonly results: number
  /** m, the mean of all results. */
  readonly weighted: number
  /** The mean of the cell means. */
  readonly unweighted: number
}

export interface Repeatability {
  readonly sumOfSquares: number
  readonly df: number
  readonly variance: number
  readonly sd: number
}

export interface BetweenLaboratories {
  readonly sumOfSquares: number
  readonly df: number
  readonly meanSquare: number
  /** n̄, the divisor of the component: (N - Σn²/N)/(p - 1). */
  readonly effectiveReplicates: number
  /** n_h, the harmonic mean of the cell sizes. */
  readonly harmonicReplicates: number
  /** n_h times the variance of the cell means: the mean square that the confidence intervals use. */
  readonly meanSquareOfMeans: number
  /** s_L² as estimated, negative when the laboratories agree better than their own scatter lets expect. */
  readonly rawVariance: number
  /** The same, 0 when negative. */
  readonly variance: number
  readonly sd: number
}

export interface Reproducibility {
  /** What it rests on: s_L² + s_r², or the spread of single results where no laboratory replicated. */
  readonly basis: 'components' | 'single results'
  readonly variance: number
  readonly sd: number
}

/**
 * All of them at once.
 *
 * @throws {NotComputable} as soon as one of them does not exist: `no-results`, `too-few-laboratories`,
 *   `no-replicates`, `out-of-range`.
 *
 * Source: ISO 5725-2:1994, 7.4.
 */
export function oneWayPrecision(summaries: readonly CellSummary[]): OneWayPrecision {
  const means = generalMeans(summaries)
  const within = repeatability(summaries)
  const between = betweenFrom(summaries, means, within)
  return {
    means,
    repeatability: within,
    betweenLaboratories: between,
    reproducibility: reproducibilityFrom(between, within),
  }
}

/**
 * The general mean m = Σ n_i ȳ_i/N and, beside it, the unweighted mean of the cell means; equal when balanced. Both
 * are deviations in u.
 *
 * @throws {NotComputable} `no-results`.
 *
 * Source: ISO 5725-2:1994, 7.4.
 */
export function generalMeans(summaries: readonly CellSummary[]): GeneralMeans {
  if (summaries.length === 0) throw new NotComputable('no-results', 'There is no result.')
  const laboratories = summaries.length
  let results = 0
  for (const { n } of summaries) results += n
  let weighted = 0
  let unweighted = 0
  // Each mean is divided before it is added, lest two of 1e308 overflow.
  for (const { n, mean } of summaries) {
    weighted += mean * (n / results)
    unweighted += mean / laboratories
  }
  return { laboratories, results, weighted, unweighted }
}

/**
 * s_r² = Σ ν_i s_i²/Σ ν_i, the scatter of results of one laboratory. Variance in u², sd in u.
 *
 * @throws {NotComputable} `no-replicates` when no cell has a second result; `out-of-range`.
 *
 * Source: ISO 5725-2:1994, 7.4; ASTM E691, section 15.
 */
export function repeatability(summaries: readonly CellSummary[]): Repeatability {
  const { sumOfSquares, df, scale } = pooledSquares(summaries)
  if (df === 0) throw new NotComputable('no-replicates', 'No laboratory has a second result.')
  return {
    sumOfSquares: unscaled(sumOfSquares, scale),
    df,
    variance: unscaled(sumOfSquares / df, scale),
    sd: Math.sqrt(sumOfSquares / df) * scale,
  }
}

export interface PooledSquares {
  /** Σ ν_i s_i² in units of `scale` squared. */
  readonly sumOfSquares: number
  readonly df: number
  /** A power of two near the largest standard deviation, in u. */
  readonly scale: number
}

/** The scatter inside the cells that have some, before it must be a double in u²; 0 on 0 df where none has a second result. */
export function pooledSquares(summaries: readonly CellSummary[]): PooledSquares {
  let largest = 0
  let df = 0
  for (const cell of summaries) {
    if (cell.df < 1 || cell.sd === undefined) continue
    if (cell.sd > largest) largest = cell.sd
    df += cell.df
  }
  const scale = binaryScaleOf(largest)
  const inverse = 1 / scale
  let sumOfSquares = 0
  for (const cell of summaries) {
    if (cell.df < 1 || cell.sd === undefined) continue
    const sd = cell.sd * inverse
    sumOfSquares += cell.df * (sd * sd)
  }
  return { sumOfSquares, df, scale }
}

/**
 * s_L² = (s_d² - s_r²)/n̄, with s_d² = Σ n_i (ȳ_i - m)²/(p - 1): what laboratories add to their own scatter. Variances
 * in u², sd in u.
 *
 * Variant: n̄ = (N - Σn²/N)/(p - 1) divides; a negative estimate is 0 in `variance` and stays in `rawVariance`.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2; `no-replicates`; `out-of-range`.
 *
 * Source: ISO 5725-2:1994, 7.4.
 */
export function betweenLaboratories(summaries: readonly CellSummary[]): BetweenLaboratories {
  requireLaboratories(summaries, 2)
  return betweenFrom(summaries, generalMeans(summaries), repeatability(summaries))
}

/**
 * s_R² = s_L² + s_r², the scatter of results of different laboratories; where every cell holds one result, the variance of
 * the results, and `basis` says so. Variance in u², sd in u.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2; `no-replicates` where some cell holds several results and
 *   yet none has a standard deviation; `out-of-range`.
 *
 * Source: ISO 5725-2:1994, 7.4; single results by our own convention.
 */
export function reproducibility(summaries: readonly CellSummary[]): Reproducibility {
  requireLaboratories(summaries, 2)
  if (summaries.every((cell) => cell.n === 1)) return spreadOfSingleResults(summaries)

  const within = repeatability(summaries)
  return reproducibilityFrom(betweenFrom(summaries, generalMeans(summaries), within), within)
}

export interface LaboratoryFTest {
  readonly f: number
  readonly df1: number
  readonly df2: number
  readonly pValue: number
}

/**
 * The one-way F test of equal laboratories, s_d²/s_r² on (p - 1, Σ ν_i) degrees of freedom; exact for cells of any size.
 *
 * @throws {NotComputable} as {@link betweenLaboratories}, and `no-scatter` when all replicates are equal.
 *
 * Source: Box, Hunter & Hunter, Statistics for Experimenters.
 */
export function laboratoryFTest(summaries: readonly CellSummary[]): LaboratoryFTest {
  requireLaboratories(summaries, 2)
  const within = repeatability(summaries)
  return fTestFrom(betweenFrom(summaries, generalMeans(summaries), within), within)
}

/**
 * {@link laboratoryFTest} from what was computed of the same cells.
 *
 * @throws {NotComputable} `no-scatter` when all replicates are equal.
 */
export function fTestFrom(between: BetweenLaboratories, within: Repeatability): LaboratoryFTest {
  if (within.variance === 0) throw noScatter()
  const f = between.meanSquare / within.variance
  return { f, df1: between.df, df2: within.df, pValue: fUpperTail(f, between.df, within.df) }
}

/**
 * A standard deviation as a percentage of the mean, both in one unit. The mean is the real one, not a deviation.
 *
 * @throws {NotComputable} `no-positive-mean`; `out-of-range` when the quotient is no double. Whether the scale has a
 *   true zero the caller must know.
 *
 * Source: ASTM E177.
 */
export function relativeSdPercent(sd: number, mean: number): number {
  if (!(mean > 0)) throw new NotComputable('no-positive-mean', 'A relative value needs a mean above 0.')
  const percent = (sd / mean) * 100
  if (!Number.isFinite(percent)) throw outOfRange()
  return percent
}

/** The refusal `no-scatter`, to be thrown where replicates that all agree leave nothing to compare with. */
export function noScatter(): NotComputable {
  return new NotComputable('no-scatter', 'All replicates agree exactly: there is no scatter to compare with.')
}

function betweenFrom(
  summaries: readonly CellSummary[],
  { results, weighted, unweighted }: GeneralMeans,
  within: Repeatability,
): BetweenLaboratories {
  requireLaboratories(summaries, 2)
  const p = summaries.length
  const df = p - 1
  let squaredSizes = 0
  let inverseSizes = 0
  for (const { n } of summaries) {
    squaredSizes += n * n
    inverseSizes += 1 / n
  }
  const scale = binaryScaleOf(largestDistance(summaries, weighted))
  const sumOfSquares = unscaled(squaresAbout(summaries, { centre: weighted, scale, isWeighted: true }), scale)
  const ofMeans = unscaled(squaresAbout(summaries, { centre: unweighted, scale, isWeighted: false }), scale)
  const meanSquare = sumOfSquares / df
  const effectiveReplicates = (results - squaredSizes / results) / df
  const harmonicReplicates = p / inverseSizes
  const rawVariance = (meanSquare - within.variance) / effectiveReplicates
  const variance = Math.max(0, rawVariance)
  return {
    sumOfSquares,
    df,
    meanSquare,
    effectiveReplicates,
    harmonicReplicates,
    meanSquareOfMeans: (harmonicReplicates * ofMeans) / df,
    rawVariance,
    variance,
    sd: Math.sqrt(variance),
  }
}

function reproducibilityFrom(between: BetweenLaboratories, within: Repeatability): Reproducibility {
  const variance = between.variance + within.variance
  return { basis: 'components', variance, sd: Math.sqrt(variance) }
}

function spreadOfSingleResults(summaries: readonly CellSummary[]): Reproducibility {
  const { unweighted } = generalMeans(summaries)
  const scale = binaryScaleOf(largestDistance(summaries, unweighted))
  const squares = squaresAbout(summaries, { centre: unweighted, scale, isWeighted: false })
  const mean = squares / (summaries.length - 1)
  return { basis: 'single results', variance: unscaled(mean, scale), sd: Math.sqrt(mean) * scale }
}

function largestDistance(summaries: readonly CellSummary[], centre: number): number {
  let largest = 0
  for (const { mean } of summaries) largest = Math.max(largest, Math.abs(mean - centre))
  return largest
}

interface SquaresOf {
  centre: number
  scale: number
  /** Each mean counts as often as its cell has results. */
  isWeighted: boolean
}

/** Σ w (ȳ - centre)² in units of `scale` squared, less what rounding left in the centre. */
function squaresAbout(summaries: readonly CellSummary[], { centre, scale, isWeighted }: SquaresOf): number {
  const inverse = 1 / scale
  let squares = 0
  let left = 0
  let weights = 0
  for (const { n, mean } of summaries) {
    const residual = (mean - centre) * inverse
    const weight = isWeighted ? n : 1
    squares += weight * residual * residual
    left += weight * residual
    weights += weight
  }
  return Math.max(0, squares - (left * left) / weights)
}

/** Back to the unit of the results; a variance that no double holds is refused rather than shown as 0 or Infinity. */
function unscaled(square: number, scale: number): number {
  const value = square * scale * scale
  if (!Number.isFinite(value) || (square > 0 && value < 1e-300)) throw outOfRange()
  return value
}

function outOfRange(): NotComputable {
  return new NotComputable(
    'out-of-range',
    'The results are too large or too small to be squared; change their unit.',
  )
}
