import { chiSquaredQuantileLower, chiSquaredQuantileUpper } from '@/lib/statistics/distributions/chi-squared'
import {
  chiSquaredDraws,
  type KeptChance,
  keptChances,
} from '@/lib/statistics/distributions/chi-squared-draws'
import { NotComputable } from '@/lib/statistics/not-computable'
import { orderStatistic } from '@/lib/statistics/order-statistic'

/**
 * How well a nested study of p laboratories will know its standard deviations.
 *
 * Parameters (our own choice). With σ_r = 1 the reproducibility variance is γ², γ = σ_R/σ_r, so γ² − 1 is what lies
 * between laboratories and between the groups of the inner levels, all together. Each inner level holds its `share` of
 * it, the laboratories what the shares leave.
 *
 * Half-width (our own definition): half the distance between the 2.5 % and the 97.5 % point of s/σ, s the reported
 * standard deviation and σ the true one. It is what s will miss σ by, above and below taken together, in 95 % of
 * studies; to first order in the variance of s both points lie 1.96 standard deviations from 1, and the half-width is
 * ISO 5725-1's A. In small studies s is skewed and at times truncated, which the first order does not see and the
 * points do. They are points of s about σ, not limits of one study's interval for σ.
 */
export type NestedDesign = {
  /** From the outermost inwards, without laboratory and replicate: groups in each group of the level before. */
  inner: readonly InnerLevel[]
  /** Replicates in each innermost group. With 1 the innermost level stands in the replicate's place. */
  n: number
  /** σ_R/σ_r. */
  gamma: number
}

export type InnerLevel = { source: string; groups: number; share: number }

export type NestedPrecision = {
  /** One for each set of inner levels that may vary, the innermost alone first, then it and the one around it, … */
  readonly intermediate: readonly number[]
  readonly reproducibility: number
}

/**
 * Half-widths for s_R and each intermediate standard deviation, as fractions of the value, by simulation: what comes back
 * answers for any number of laboratories, always from the same chance.
 *
 * Balanced, so the mean squares are independent multiples of chi-squared variables; these are drawn, not results, and the
 * distribution is the exact one of a study with normal components. Components are equated from them and truncated one by
 * one, as `nestedAnova` reports them. With 10,000 draws a half-width has a standard error of about 0.6 % of itself.
 * Without inner levels it is the one-way layout, to compare with `reproducibilityPrecision`.
 *
 * @throws {RangeError} for an inner level of fewer than 2 groups, below 1 replicate, a gamma below 1, shares that are
 *   negative or come to more than 1, fewer than 2 laboratories, or a design without any replication.
 *
 * Source: Searle, Casella & McCulloch 1992, for the mean squares; ISO 5725-1, 6.3, for what is asked.
 */
export function nestedStudies(
  design: NestedDesign,
  chance: { seed: number; draws: number },
): (laboratories: number) => NestedPrecision {
  requireDesign(design)
  const strata = strataOf(design)
  const chances = keptChances({ ...chance, streams: strata.length })
  // A search for the least number comes by the same numbers for each of its figures, and by those of the curve.
  const known = new Map<number, NestedPrecision>()

  return (laboratories) => {
    requireLaboratories(laboratories)
    const answered = known.get(laboratories)
    if (answered !== undefined) return answered
    const meanSquares = strata.map((stratum, level) =>
      drawnMeanSquares(stratum, laboratories, chances[level]!),
    )
    const [ofResidual, ...outer] = halfWidthsFromInside(strata, meanSquares)
    // With replicates the residual is repeatability, which is known exactly; without, it is the first of those asked for.
    const asked = design.n > 1 ? outer : [ofResidual!, ...outer]
    const answer = { intermediate: asked.slice(0, -1), reproducibility: asked.at(-1)! }
    known.set(laboratories, answer)
    return answer
  }
}

/**
 * Half-width for s_r as a fraction of it: (√(χ²_{0.975;ν}/ν) − √(χ²_{0.025;ν}/ν))/2 with ν the degrees of freedom of the
 * replicates. Exact, so nothing is drawn; `repeatabilityPrecision` is its first order.
 *
 * @throws {NotComputable} `no-replication` with one replicate.
 * @throws {RangeError} for a design or a number of laboratories that `nestedStudies` refuses.
 */
export function nestedRepeatabilityPrecision(design: NestedDesign, laboratories: number): number {
  requireDesign(design)
  requireLaboratories(laboratories)
  if (design.n < 2) {
    throw new NotComputable('no-replication', 'One replicate tells nothing of repeatability.')
  }
  const df = laboratories * groupsInLaboratory(design) * (design.n - 1)
  const ratio = (chiSquared: number) => Math.sqrt(chiSquared / df)
  return (ratio(chiSquaredQuantileUpper(0.025, df)) - ratio(chiSquaredQuantileLower(0.025, df))) / 2
}

/**
 * Half-width of the 95 % interval of the method's bias in units of σ_R: 1.96 times the standard deviation of the general
 * mean. Without inner levels it is ISO 5725-1's A.
 *
 * @throws {RangeError} for a design or a number of laboratories that `nestedStudies` refuses.
 */
export function nestedBiasPrecision(design: NestedDesign, laboratories: number): number {
  requireDesign(design)
  requireLaboratories(laboratories)
  let groups = laboratories
  let variance = laboratoryShare(design) / groups
  for (const level of design.inner) {
    groups *= level.groups
    variance += level.share / groups
  }
  const { gamma } = design
  variance = variance * (gamma ** 2 - 1) + 1 / (groups * design.n)
  return 1.96 * Math.sqrt(variance / gamma ** 2)
}

/** The share of γ² − 1 that the inner levels leave to the laboratories; rounding must not leave less than nothing. */
export function laboratoryShare({ inner }: Pick<NestedDesign, 'inner'>): number {
  return Math.max(
    0,
    inner.reduce((left, { share }) => left - share, 1),
  )
}

/** A level of the analysis of variance, seen from one laboratory; the last stratum is the residual. */
type Stratum = {
  /** Degrees of freedom that each laboratory brings, and what is taken off once. */
  dfPerLaboratory: number
  dfLess: number
  /** Results in one group. */
  size: number
  /** With σ_r = 1; of the residual, all that varies within the innermost groups seen. */
  component: number
  expected: number
}

/** Outermost first. The components are taken from outside inwards, the expected mean squares from inside outwards. */
function strataOf(design: NestedDesign): Stratum[] {
  const between = design.gamma ** 2 - 1
  const named = [
    { groups: 1, component: laboratoryShare(design) * between },
    ...design.inner.map(({ groups, share }) => ({ groups, component: share * between })),
    { groups: design.n, component: 1 },
  ]
  // One replicate: nothing tells the innermost level from it, and the two are one residual.
  const seen =
    design.n > 1
      ? named
      : [...named.slice(0, -2), { ...named.at(-2)!, component: named.at(-2)!.component + 1 }]

  const strata: Stratum[] = []
  let size = 1
  let expected = 0
  let inLaboratory = seen.reduce((product, { groups }) => product * groups, 1)
  for (const { groups, component } of seen.toReversed()) {
    expected += size * component
    const isLaboratory = strata.length === seen.length - 1
    strata.unshift({
      dfPerLaboratory: isLaboratory ? 1 : inLaboratory - inLaboratory / groups,
      dfLess: isLaboratory ? 1 : 0,
      size,
      component,
      expected,
    })
    inLaboratory /= groups
    size *= groups
  }
  return strata
}

function drawnMeanSquares(stratum: Stratum, laboratories: number, chance: KeptChance): Float64Array {
  const df = stratum.dfPerLaboratory * laboratories - stratum.dfLess
  const factor = stratum.expected / df
  return chiSquaredDraws(chance, df).map((chiSquared) => factor * chiSquared)
}

/** For the residual alone, then with one more stratum each time, outwards. */
function halfWidthsFromInside(strata: readonly Stratum[], meanSquares: readonly Float64Array[]): number[] {
  const last = strata.length - 1
  const estimate = meanSquares[last]!.slice()
  let truth = strata[last]!.component
  const halfWidths = [halfWidth(estimate, truth)]
  for (let level = last - 1; level >= 0; level -= 1) {
    const { component, size } = strata[level]!
    const own = meanSquares[level]!
    const below = meanSquares[level + 1]!
    estimate.forEach((variance, draw) => {
      estimate[draw] = variance + Math.max(0, own[draw]! - below[draw]!) / size
    })
    truth += component
    halfWidths.push(halfWidth(estimate, truth))
  }
  return halfWidths
}

function halfWidth(variances: Float64Array, truth: number): number {
  const values = variances.slice()
  const at = (share: number) => {
    const rank = Math.round(share * (values.length - 1))
    return Math.sqrt(orderStatistic(values, rank) / truth)
  }
  return (at(0.975) - at(0.025)) / 2
}

function groupsInLaboratory({ inner }: NestedDesign): number {
  return inner.reduce((product, { groups }) => product * groups, 1)
}

function requireDesign({ inner, n, gamma }: NestedDesign): void {
  for (const { source, groups, share } of inner) {
    if (!Number.isInteger(groups) || groups < 2)
      throw new RangeError(`a nested plan requires at least two groups of ${source}`)
    if (!(share >= 0)) throw new RangeError(`the share of ${source} must be 0 or more`)
  }
  if (inner.reduce((sum, { share }) => sum + share, 0) > 1 + 1e-9)
    throw new RangeError('the shares of a nested plan must come to 1 at most')
  if (!Number.isInteger(n) || n < 1) throw new RangeError('a nested plan requires at least one replicate')
  if (!(gamma >= 1 && Number.isFinite(gamma)))
    throw new RangeError('a nested plan requires gamma of at least 1')
}

function requireLaboratories(laboratories: number): void {
  if (!Number.isInteger(laboratories) || laboratories < 2)
    throw new RangeError('a nested plan requires at least two laboratories')
}
