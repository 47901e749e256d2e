import type {
  AssignedBlock,
  EqualityBlock,
  ScoresBlock,
  TruenessBlock,
} from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import { notComputable, required, withReasons } from '@/lib/statistics/document/attempt'
import { averageRange, halfWidth95, referenceCurve } from '@/lib/statistics/equality'
import { type NestedAnova, nestedTest } from '@/lib/statistics/nested-anova'
import type { NestedLayout } from '@/lib/statistics/nested-layout'
import { laboratoryFTest, repeatability } from '@/lib/statistics/one-way-precision'
import { enScore, zPrimeScore, zScore, zetaScore } from '@/lib/statistics/scores'
import { requireLaboratories } from '@/lib/statistics/spread-of-means'
import { biasInterval } from '@/lib/statistics/trueness'

/**
 * Variance of the general mean, in u²: each component over the number of its groups that the mean holds. In the
 * one-way layout s_L² Σn_i²/N² + s_r²/N.
 *
 * Source: ISO 5725-4, carried over to any nested layout; components as truncated.
 */
export function varianceOfMean(layout: NestedLayout, anova: NestedAnova): number {
  const results = layout.deviations.length
  let variance = 0
  layout.strata.forEach((stratum, level) => {
    let squares = 0
    for (const size of stratum.size) squares += (size / results) ** 2
    variance += anova.components[level]!.variance * squares
  })
  return variance
}

/**
 * Variance of each laboratory's mean, in u² and in the order given: its own component whole, and each inner one over
 * the number of its groups that the laboratory's mean holds.
 *
 * `observations` counts the results of each laboratory, in the order in which the layout holds them.
 */
export function variancesOfLaboratoryMeans(
  { strata }: NestedLayout,
  { components }: NestedAnova,
  observations: readonly number[],
): number[] {
  const laboratoryOf = observations.flatMap((count, laboratory) => new Array<number>(count).fill(laboratory))
  const variances = observations.map(() => 0)
  strata.forEach(({ size, firstMember }, level) => {
    size.forEach((members, group) => {
      const laboratory = laboratoryOf[firstMember[group]!]!
      variances[laboratory]! += components[level]!.variance * (members / observations[laboratory]!) ** 2
    })
  })
  return variances
}

/**
 * Bias of the method against an accepted reference value, with its 95 % interval; all in the unit of the results.
 * Missing parts are `null` with the reason of `biasInterval`. Source: ISO 5725-4; `trueness.ts`.
 */
export function truenessBlock(one: {
  reference: { deviation: number; value: number; uncertainty: number }
  /** The general mean as a deviation. */
  mean: () => number
  laboratories: number
  varianceOfMean: () => number
}): TruenessBlock {
  const bias = (): number => one.mean() - one.reference.deviation
  const interval = () =>
    biasInterval({
      bias: bias(),
      laboratories: one.laboratories,
      varianceOfMean: one.varianceOfMean(),
      referenceUncertainty: one.reference.uncertainty,
    })
  return withReasons((attempt) => {
    const found = attempt('standardUncertainty', interval)
    return {
      reference: one.reference.value,
      referenceUncertainty: one.reference.uncertainty,
      bias: attempt('bias', bias),
      standardUncertainty: found?.standardUncertainty ?? null,
      df: found?.df ?? null,
      ci95: withReasons((inner) => {
        const limits = inner('lower', interval)
        return {
          lower: limits?.lower ?? null,
          upper: limits?.upper ?? null,
          extended: limits === null ? null : false,
        }
      }),
    }
  })
}

/**
 * Are the laboratories alike? F test, range of averages and the reference curve, whose lengths are in the unit of the
 * results.
 *
 * Variant: in a nested layout the yardstick is the mean square that the laboratories are tested against, since their
 * averages differ by the inner levels too. Cells of unequal size are drawn with their harmonic mean.
 *
 * Source: Box, Hunter & Hunter; `equality.ts`.
 */
export function equalityBlock(one: {
  summaries: readonly CellSummary[]
  layout: NestedLayout
  anova: () => NestedAnova
  harmonicCellSize: () => number
}): EqualityBlock {
  const { summaries, layout } = one
  const test =
    layout.levels.length > 1
      ? () => nestedYardstick(layout, one.anova(), summaries)
      : () => oneWayYardstick(summaries)
  const curve = () => {
    const { variance, df } =
      layout.levels.length > 1 ? nestedYardstick(layout, one.anova(), summaries) : repeatability(summaries)
    return referenceCurve({ variance, df, n: commonSize(summaries) ?? one.harmonicCellSize() })
  }
  return withReasons((attempt) => {
    const found = attempt('f', test)
    const range = attempt('range', () =>
      averageRange(
        summaries.map(({ mean }) => mean),
        curve(),
      ),
    )
    return {
      f: found?.f ?? null,
      df: found === null ? null : [found.laboratoryDf, found.df],
      pValue: found?.pValue ?? null,
      range: range?.range ?? null,
      rangePValue: range?.pValue ?? null,
      reference: withReasons((inner) => {
        const { df = null, scale = null, n = null } = inner('scale', curve) ?? {}
        return { df, scale, n, halfWidth95: inner('halfWidth95', () => halfWidth95(curve())) }
      }),
    }
  })
}

/**
 * A value to measure laboratories by, in the unit of the results, and where it comes from: an accepted one, else
 * Algorithm A's mean (u = 1.25 s* / √p), else the general mean.
 *
 * σ is the given one, else that of a cell mean; `unequal-cells` where it differs from cell to cell.
 *
 * Source: ISO 13528, clause 9; the order of preference is our own.
 */
export function assignedBlock(one: {
  reference: { value: number; uncertainty: number } | null
  robust: { mean: number | null; meanStandardError: number | null }
  mean: number | null
  varianceOfMean: () => number
  sigma: number | null
  /** The variance of each laboratory's mean, in the order of `summaries`. */
  variancesOfCellMeans: () => readonly number[]
  summaries: readonly CellSummary[]
}): AssignedBlock {
  return withReasons((attempt) => {
    const { value, uncertainty, source } = assignedValue(one)
    return {
      value: attempt('value', () => required(value, 'There is no mean.')),
      uncertainty: attempt('uncertainty', uncertainty),
      source,
      sigma: attempt('sigma', () => one.sigma ?? commonSigma(one.variancesOfCellMeans())),
      sigmaSource: one.sigma === null ? (one.summaries.length === 0 ? null : 'cell mean') : 'given',
    }
  })
}

/**
 * Scores of one laboratory, pure numbers; σ is that of a mean of as many results, nested alike, as its own.
 *
 * ζ and E_n need the laboratory's own uncertainty, and are refused (`consensus-too-small`) against a consensus of fewer
 * than 12 laboratories, this one among them.
 *
 * Source: ISO 13528, clause 9; `scores.ts`.
 */
export function scoresBlock(one: {
  summary: CellSummary
  assigned: AssignedBlock
  /** The assigned value as a deviation, so that no digit is lost where results have much in common. */
  assignedDeviation: () => number
  laboratories: number
  sigma: () => number
  /** The laboratory's own standard uncertainty; `null` where it gave none. */
  uncertainty: number | null
}): ScoresBlock {
  const { mean } = one.summary
  const assigned = () => ({
    value: one.assignedDeviation(),
    uncertainty: required(one.assigned.uncertainty, 'The assigned value has no uncertainty.'),
  })
  const own = (): number => {
    if (one.assigned.source !== 'reference' && one.laboratories < FEWEST_FOR_CONSENSUS) {
      notComputable(
        'consensus-too-small',
        'The assigned value comes from fewer than 12 laboratories, this one among them.',
      )
    }
    return required(one.uncertainty, 'The laboratory gave no uncertainty.')
  }
  return withReasons((attempt) => ({
    z: attempt('z', () => zScore(mean, { ...assigned(), uncertainty: 0 }, one.sigma())),
    zPrime: attempt('zPrime', () => zPrimeScore(mean, assigned(), one.sigma())),
    zeta: attempt('zeta', () => zetaScore(mean, assigned(), own())),
    en: attempt('en', () => enScore(mean, assigned(), own())),
  }))
}

const FEWEST_FOR_CONSENSUS = 12

type Yardstick = { f: number; laboratoryDf: number; df: number; pValue: number; variance: number }

function oneWayYardstick(summaries: readonly CellSummary[]): Yardstick {
  const { f, df1, df2, pValue } = laboratoryFTest(summaries)
  return { f, laboratoryDf: df1, df: df2, pValue, variance: repeatability(summaries).variance }
}

function nestedYardstick(
  layout: NestedLayout,
  anova: NestedAnova,
  summaries: readonly CellSummary[],
): Yardstick {
  requireLaboratories(summaries, 2)
  const laboratory = layout.levels[0]!
  const row = required(
    anova.rows.find(({ source }) => source === laboratory) ?? null,
    'The laboratories cannot be told from what lies inside them.',
  )
  const { f, pValue, denominator } = nestedTest(anova.rows, laboratory)
  return { f, laboratoryDf: row.df, df: denominator.df, pValue, variance: denominator.ms }
}

function commonSize(summaries: readonly CellSummary[]): number | null {
  const [first, ...others] = summaries
  return first !== undefined && others.every(({ n }) => n === first.n) ? first.n : null
}

function assignedValue(one: {
  reference: { value: number; uncertainty: number } | null
  robust: { mean: number | null; meanStandardError: number | null }
  mean: number | null
  varianceOfMean: () => number
}): { value: number | null; uncertainty: () => number; source: AssignedBlock['source'] } {
  const { reference, robust } = one
  if (reference !== null) {
    return { value: reference.value, uncertainty: () => reference.uncertainty, source: 'reference' }
  }
  if (robust.mean !== null) {
    return {
      value: robust.mean,
      uncertainty: () => required(robust.meanStandardError, ''),
      source: 'algorithmA',
    }
  }
  return {
    value: one.mean,
    uncertainty: () => Math.sqrt(one.varianceOfMean()),
    source: one.mean === null ? null : 'mean',
  }
}

function commonSigma(variances: readonly number[]): number {
  const [first = null, ...others] = variances
  const variance = required(first, 'There is no result.')
  // In a nested layout equal sums can differ in their last bits.
  if (others.some((other) => Math.abs(other - variance) > 1e-12 * variance)) {
    notComputable('unequal-cells', 'It differs by cell size; each score uses that of its own cell.')
  }
  return Math.sqrt(variance)
}
