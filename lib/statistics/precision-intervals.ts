import {
  combinationInterval,
  satterthwaiteInterval,
  type WeightedMeanSquare,
} from '@/lib/statistics/combination-interval'
import { type AnovaRow, weightsFor } from '@/lib/statistics/nested-anova'

/** 95 % limits of a standard deviation. */
export type SdInterval = {
  lower: number
  upper: number
  /** A limit was moved to the reported value, which is another estimate than the one the limits are built on. */
  extended: boolean
}

export type SdSatterthwaite = { df: number; lower: number | null; upper: number | null }

/**
 * 95 % interval of a standard deviation whose variance is a combination of mean squares. Mean squares and
 * `reportedVariance` in u², limits in u.
 *
 * The limits are centred on the untruncated combination and cut at 0. The value reported beside them may differ
 * from it: it is cut at 0 too, and in the one-way layout it uses another divisor. Where it falls outside, the nearer
 * limit is moved to it, and `extended` says so.
 *
 * Source: Burdick & Graybill 1992, 3.3; exact for s_r alone. The moved limit is our own convention.
 */
export function sdInterval(terms: readonly WeightedMeanSquare[], reportedVariance: number): SdInterval {
  const limits = combinationInterval(terms)
  const lower = Math.sqrt(Math.max(0, limits.lower))
  const upper = Math.sqrt(Math.max(0, limits.upper))
  const reported = Math.sqrt(reportedVariance)
  if (reported < lower) return { lower: reported, upper, extended: true }
  if (reported > upper) return { lower, upper: reported, extended: true }
  return { lower, upper, extended: false }
}

/**
 * Satterthwaite's 95 % interval of the same standard deviation, in u, as a second opinion; nothing is moved here.
 * Limits are `null` on next to no degrees of freedom.
 *
 * @throws {NotComputable} `not-positive` when the combination is not above 0.
 *
 * Source: Burdick & Graybill 1992.
 */
export function sdSatterthwaite(terms: readonly WeightedMeanSquare[]): SdSatterthwaite {
  const { df, lower, upper } = satterthwaiteInterval(terms)
  return {
    df,
    lower: lower === null ? null : Math.sqrt(lower),
    upper: upper === null ? null : Math.sqrt(upper),
  }
}

/**
 * The mean squares behind s_L² and s_R² of a one-way layout: unweighted cell means with the harmonic mean of the
 * cell sizes. Variances in u², weights pure numbers.
 *
 * Variant: in a balanced layout these are the ordinary mean squares. Of the two usual choices this one keeps its
 * coverage when cell sizes differ badly and laboratories differ much; n̄ with the weighted mean square holds better
 * only when laboratories differ little.
 *
 * Source: Thomas & Hultquist 1978.
 */
export function oneWayTerms(one: {
  laboratories: number
  varianceOfCellMeans: number
  harmonicCellSize: number
  repeatabilityVariance: number
  repeatabilityDf: number
}): { betweenLaboratory: WeightedMeanSquare[]; reproducibility: WeightedMeanSquare[] } {
  const share = 1 / one.harmonicCellSize
  const between = {
    weight: share,
    ms: one.harmonicCellSize * one.varianceOfCellMeans,
    df: one.laboratories - 1,
  }
  const within = (weight: number): WeightedMeanSquare => ({
    weight,
    ms: one.repeatabilityVariance,
    df: one.repeatabilityDf,
  })
  return {
    betweenLaboratory: [between, within(-share)],
    reproducibility: [between, within(1 - share)],
  }
}

/**
 * The mean squares behind the sum of the named components of a nested layout, untruncated; rows of weight 0 are left
 * out. Mean squares in u².
 *
 * Source: Burdick & Graybill 1992; the weights by `weightsFor`.
 */
export function nestedTerms(rows: readonly AnovaRow[], sources: readonly string[]): WeightedMeanSquare[] {
  const wanted = Object.fromEntries(sources.map((source) => [source, 1]))
  const weights = weightsFor(rows, wanted)
  return rows
    .map(({ ms, df }, index) => ({ weight: weights[index]!, ms, df }))
    .filter(({ weight }) => weight !== 0)
}
