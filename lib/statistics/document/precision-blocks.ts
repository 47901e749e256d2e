import type {
  BetweenLaboratoryBlock,
  IntermediateBlock,
  Interval,
  RepeatabilityBlock,
  ReproducibilityBlock,
  SatterthwaiteInterval,
} from '@/lib/statistics/analysis-document'
import type { CellSummary } from '@/lib/statistics/cells'
import type { WeightedMeanSquare } from '@/lib/statistics/combination-interval'
import { type Attempt, notComputable, once, required, withReasons } from '@/lib/statistics/document/attempt'
import type { NestedAnova } from '@/lib/statistics/nested-anova'
import { type NestedLayout, requireReplicate, RESIDUAL } from '@/lib/statistics/nested-layout'
import {
  betweenLaboratories,
  relativeSdPercent,
  repeatability,
  reproducibility,
} from '@/lib/statistics/one-way-precision'
import { requireLaboratories } from '@/lib/statistics/spread-of-means'
import { nestedTerms, oneWayTerms, sdInterval, sdSatterthwaite } from '@/lib/statistics/precision-intervals'

/** What the precision figures of one material are made from. */
export type PrecisionInput = {
  summaries: readonly CellSummary[]
  layout: NestedLayout
  anova: () => NestedAnova
  /** The general mean as such, for relative figures; `null` where there is none. */
  mean: number | null
  limitFactor: number
  trueZero: boolean
}

export type PrecisionBlocks = {
  repeatability: RepeatabilityBlock
  betweenLaboratory: BetweenLaboratoryBlock
  reproducibility: ReproducibilityBlock
  intermediate: IntermediateBlock[]
}

/** A variance with the mean squares its interval is built on. */
type Estimate = { raw: number; variance: number; terms: readonly WeightedMeanSquare[] }

/**
 * Repeatability, laboratory component, reproducibility and, in a nested layout, the intermediate precisions, from the
 * innermost set outwards. Variances in u², standard deviations, limits and intervals in u, relative ones in %.
 *
 * Variant: with one level they come from cell means and cell standard deviations, with more from the nested analysis
 * of variance; components are truncated one by one before they are added. Missing figures are `null` with a reason
 * (`not-separable`, `no-true-zero` and those of the statistics themselves).
 *
 * Source: ISO 5725-2, 7.4; ISO 5725-3.
 */
export function precisionBlocks(input: PrecisionInput): PrecisionBlocks {
  const isNested = input.layout.levels.length > 1
  const within = once(() => repeatabilityEstimate(input))
  const between = isNested ? () => nestedBetween(input) : () => oneWayBetween(input.summaries)
  const total = isNested ? () => nestedReproducibility(input) : () => oneWayReproducibility(input.summaries)
  return {
    repeatability: repeatabilityBlock(input, within),
    betweenLaboratory: betweenLaboratoryBlock(input, once(between)),
    reproducibility: reproducibilityBlock(input, once(total)),
    intermediate: input.layout.levels
      .slice(1)
      .map((_, inner, levels) => intermediateBlock(input, levels.slice(inner)))
      .reverse(),
  }
}

function repeatabilityBlock(
  input: PrecisionInput,
  estimate: () => Estimate & { df: number },
): RepeatabilityBlock {
  return withReasons((attempt) => {
    const found = attempt('variance', estimate)
    return {
      variance: found?.variance ?? null,
      sd: sdOf(found),
      df: found?.df ?? null,
      limit: limitOf(found, input),
      ci95: intervalBlock(estimate),
      relative: relativeSd(attempt, found, input),
    }
  })
}

function betweenLaboratoryBlock(input: PrecisionInput, estimate: () => Estimate): BetweenLaboratoryBlock {
  return withReasons((attempt) => {
    const found = attempt('variance', estimate)
    return {
      varianceRaw: found?.raw ?? null,
      variance: found?.variance ?? null,
      sd: sdOf(found),
      ci95: found !== null && found.raw < 0 ? explainedInterval(estimate) : intervalBlock(estimate),
      relative: relativeSd(attempt, found, input),
      satterthwaite95: satterthwaiteBlock(estimate),
    }
  })
}

function reproducibilityBlock(
  input: PrecisionInput,
  estimate: () => Estimate & { basis: 'components' | 'single results' },
): ReproducibilityBlock {
  return withReasons((attempt) => {
    const found = attempt('variance', estimate)
    return {
      variance: found?.variance ?? null,
      sd: sdOf(found),
      limit: limitOf(found, input),
      ci95: intervalBlock(estimate),
      relative: relativeSd(attempt, found, input),
      satterthwaite95: satterthwaiteBlock(estimate),
      basis: found?.basis ?? null,
    }
  })
}

function intermediateBlock(input: PrecisionInput, varies: string[]): IntermediateBlock {
  const estimate = once(() => intermediateEstimate(input, varies))
  return withReasons((attempt) => {
    const found = attempt('variance', estimate)
    return {
      varies,
      variance: found?.variance ?? null,
      sd: sdOf(found),
      ci95: intervalBlock(estimate),
      relative: relativeSd(attempt, found, input),
      satterthwaite95: satterthwaiteBlock(estimate),
    }
  })
}

function repeatabilityEstimate({ summaries, layout }: PrecisionInput): Estimate & { df: number } {
  requireReplicate(layout)
  const { variance, df } = repeatability(summaries)
  return { raw: variance, variance, df, terms: [{ weight: 1, ms: variance, df }] }
}

function oneWayBetween(summaries: readonly CellSummary[]): Estimate {
  const { rawVariance, variance } = betweenLaboratories(summaries)
  return { raw: rawVariance, variance, terms: termsOfMeans(summaries).betweenLaboratory }
}

function oneWayReproducibility(
  summaries: readonly CellSummary[],
): Estimate & { basis: 'components' | 'single results' } {
  const { variance, basis } = reproducibility(summaries)
  const terms =
    basis === 'single results'
      ? [{ weight: 1, ms: variance, df: summaries.length - 1 }]
      : termsOfMeans(summaries).reproducibility
  return { raw: variance, variance, basis, terms }
}

function termsOfMeans(summaries: readonly CellSummary[]): ReturnType<typeof oneWayTerms> {
  const within = repeatability(summaries)
  const between = betweenLaboratories(summaries)
  return oneWayTerms({
    laboratories: summaries.length,
    varianceOfCellMeans: between.meanSquareOfMeans / between.harmonicReplicates,
    harmonicCellSize: between.harmonicReplicates,
    repeatabilityVariance: within.variance,
    repeatabilityDf: within.df,
  })
}

function nestedBetween({ layout, anova, summaries }: PrecisionInput): Estimate {
  requireLaboratories(summaries, 2)
  const laboratory = layout.levels[0]!
  const { rows, components } = anova()
  const own = required(
    components.find(({ source }) => source === laboratory) ?? null,
    'The laboratories cannot be told from what lies inside them.',
  )
  return { raw: own.raw, variance: own.variance, terms: nestedTerms(rows, [laboratory]) }
}

function nestedReproducibility(input: PrecisionInput): Estimate & { basis: 'components' | 'single results' } {
  const { layout, anova, summaries } = input
  if (layout.confounded === layout.levels[0]) return oneWayReproducibility(summaries)
  nestedBetween(input)
  const { rows, components } = anova()
  const terms = nestedTerms(
    rows,
    components.map(({ source }) => source),
  )
  return {
    raw: sum(components.map(({ raw }) => raw)),
    variance: sum(components.map(({ variance }) => variance)),
    basis: 'components',
    terms,
  }
}

/**
 * Two results that differ by the named levels. A level in which every parent
 * has one child is not seen apart from its parent; if that parent lies outside
 * the set, the set's variance is not known.
 */
function intermediateEstimate({ layout, anova }: PrecisionInput, varies: readonly string[]): Estimate {
  const { rows, components } = anova()
  const outermost = varies[0]!
  if (layout.confounded !== outermost && !components.some(({ source }) => source === outermost)) {
    notComputable('not-separable', `The data do not show ${outermost} apart from the level around it.`)
  }
  const inside = components.filter(({ source }) => source === RESIDUAL || varies.includes(source))
  return {
    raw: sum(inside.map(({ raw }) => raw)),
    variance: sum(inside.map(({ variance }) => variance)),
    terms: nestedTerms(
      rows,
      inside.map(({ source }) => source),
    ),
  }
}

function sdOf(estimate: Estimate | null): number | null {
  return estimate === null ? null : Math.sqrt(estimate.variance)
}

function limitOf(estimate: Estimate | null, { limitFactor }: PrecisionInput): number | null {
  return estimate === null ? null : limitFactor * Math.sqrt(estimate.variance)
}

function relativeSd(attempt: Attempt, estimate: Estimate | null, input: PrecisionInput): number | null {
  if (estimate === null) return null
  return attempt('relative', () => {
    if (!input.trueZero) notComputable('no-true-zero', 'The scale has no true zero.')
    return relativeSdPercent(Math.sqrt(estimate.variance), required(input.mean, 'There is no mean.'))
  })
}

function intervalBlock(estimate: () => Estimate): Interval {
  return withReasons((attempt) => {
    const found = attempt('lower', () => {
      const { terms, variance } = estimate()
      return sdInterval(terms, variance)
    })
    return { lower: found?.lower ?? null, upper: found?.upper ?? null, extended: found?.extended ?? null }
  })
}

/** An interval that ends at 0 is no slip; it says why. */
function explainedInterval(estimate: () => Estimate): Interval {
  const block = intervalBlock(estimate)
  if (block.upper !== 0) return block
  return { ...block, reasons: { upper: 'The laboratories agree better than their own scatter allows.' } }
}

function satterthwaiteBlock(estimate: () => Estimate): SatterthwaiteInterval {
  return withReasons((attempt) => {
    const found = attempt('df', () => sdSatterthwaite(estimate().terms))
    if (found === null) return { lower: null, upper: null, df: null }
    const words = 'Too few degrees of freedom for limits.'
    return {
      lower: attempt('lower', () => required(found.lower, words)),
      upper: attempt('upper', () => required(found.upper, words)),
      df: found.df,
    }
  })
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0)
}
