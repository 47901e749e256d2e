import { binaryScale } from '@/lib/statistics/binary-scale'
import { replicatedCells, type CellSummary } from '@/lib/statistics/cells'
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
  return {
    means: generalMeans(summaries),
    repeatability: repeatability(summaries),
    betweenLaboratories: betweenLaboratories(summaries),
    reproducibility: reproducibility(summaries),
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
  const results = sumOver(summaries, (cell) => cell.n)
  return {
    laboratories,
    results,
    // Each mean is divided before it is added, lest two of 1e308 overflow.
    weighted: sumOver(summaries, (cell) => cell.mean * (cell.n / results)),
    unweighted: sumOver(summaries, (cell) => cell.mean / laboratories),
  }
}

/**
 * s_r² = Σ ν_i s_i²/Σ ν_i, the scatter of results of one laboratory. Variance in u², sd in u.
 *
 * @throws {NotComputable} `no-replicates` when no cell has a second result; `out-of-range`.
 *
 * Source: ISO 5725-2:1994, 7.4; ASTM E691, section 15.
 */
export function repeatability(summaries: readonly CellSummary[]): Repeatability {
  const cells = replicatedCells(summaries)
  const df = sumOver(cells, (cell) => cell.df)
  if (df === 0) throw new NotComputable('no-replicates', 'No laboratory has a second result.')

  const scale = binaryScale(cells.map((cell) => cell.sd))
  const sumOfSquares = sumOver(cells, (cell) => cell.df * (cell.sd / scale) ** 2)
  return {
    sumOfSquares: unscaled(sumOfSquares, scale),
    df,
    variance: unscaled(sumOfSquares / df, scale),
    sd: Math.sqrt(sumOfSquares / df) * scale,
  }
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
  const within = repeatability(summaries)
  const p = summaries.length
  const df = p - 1
  const { results, weighted, unweighted } = generalMeans(summaries)

  const scale = binaryScale(summaries.map((cell) => cell.mean - weighted))
  const sumOfSquares = unscaled(
    squaresAbout(summaries, { centre: weighted, scale, weight: (cell) => cell.n }),
    scale,
  )
  const squaresOfMeans = unscaled(
    squaresAbout(summaries, { centre: unweighted, scale, weight: () => 1 }),
    scale,
  )
  const meanSquare = sumOfSquares / df
  const effectiveReplicates = (results - sumOver(summaries, (cell) => cell.n ** 2) / results) / df
  const harmonicReplicates = p / sumOver(summaries, (cell) => 1 / cell.n)
  const rawVariance = (meanSquare - within.variance) / effectiveReplicates
  const variance = Math.max(0, rawVariance)
  return {
    sumOfSquares,
    df,
    meanSquare,
    effectiveReplicates,
    harmonicReplicates,
    meanSquareOfMeans: (harmonicReplicates * squaresOfMeans) / df,
    rawVariance,
    variance,
    sd: Math.sqrt(variance),
  }
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

  const variance = betweenLaboratories(summaries).variance + repeatability(summaries).variance
  return { basis: 'components', variance, sd: Math.sqrt(variance) }
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
  const between = betweenLaboratories(summaries)
  const within = repeatability(summaries)
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

function spreadOfSingleResults(summaries: readonly CellSummary[]): Reproducibility {
  const { unweighted } = generalMeans(summaries)
  const scale = binaryScale(summaries.map((cell) => cell.mean - unweighted))
  const squares = squaresAbout(summaries, { centre: unweighted, scale, weight: () => 1 })
  const mean = squares / (summaries.length - 1)
  return { basis: 'single results', variance: unscaled(mean, scale), sd: Math.sqrt(mean) * scale }
}

interface SquaresOf {
  centre: number
  scale: number
  weight: (cell: CellSummary) => number
}

/** Σ w (ȳ - centre)² in units of `scale` squared, less what rounding left in the centre. */
function squaresAbout(summaries: readonly CellSummary[], { centre, scale, weight }: SquaresOf): number {
  let squares = 0
  let left = 0
  let weights = 0
  for (const cell of summaries) {
    const residual = (cell.mean - centre) / scale
    squares += weight(cell) * residual * residual
    left += weight(cell) * residual
    weights += weight(cell)
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

function sumOver<T>(items: readonly T[], value: (item: T) => number): number {
  let sum = 0
  for (const item of items) sum += value(item)
  return sum
}
