import { binaryScaleOf } from '@/lib/statistics/binary-scale'
import type { NestedLayout } from '@/lib/statistics/nested-layout'
import { RESIDUAL } from '@/lib/statistics/nested-layout'
import { type RestrictedLikelihood, restrictedLikelihood } from '@/lib/statistics/nested-likelihood'
import { NotComputable } from '@/lib/statistics/not-computable'

/** Components in u², mean and its standard error in u, u the unit of the results. */
export type RemlFit = {
  components: readonly { source: string; variance: number }[]
  deviance: number
  converged: boolean
  /** As a deviation from the material's offset. */
  mean: number
  meanStandardError: number
  boundary: readonly string[]
}

/** Relative gradient at which the search ends; well below what six figures need. */
const GRADIENT_TOLERANCE = 1e-10
const MOST_STEPS = 200

/**
 * Variance components of a nested layout by restricted maximum likelihood.
 *
 * The residual variance is profiled out; what is searched are the ratios of the other components to it, each at
 * least 0. The search is a damped Newton method with the exact gradient and curvature. A ratio whose best value is 0
 * is held there and named in `boundary`; `converged` tells whether the gradient came to rest. `startRatios` has one
 * entry for each level but the residual, outermost first.
 *
 * Variant: the deviance is log|V| + log(1′V⁻¹1) + (y − m̂)′V⁻¹(y − m̂) + (N − 1) log 2π, without the constant log N.
 *
 * @throws {NotComputable} `too-few-results`; `no-residual` when results of one group never differ, because the
 *   likelihood then has no maximum.
 *
 * Source: Searle, Casella & McCulloch 1992, Variance Components, chapter 6.
 */
export function fitReml(layout: NestedLayout, startRatios: readonly number[]): RemlFit {
  const unit = unitOf(layout)
  if (unit === 1) return fitInUnit(layout, startRatios)
  const fit = fitInUnit(inUnit(layout, unit), startRatios)
  return {
    ...fit,
    components: fit.components.map(({ source, variance }) => ({ source, variance: variance * unit ** 2 })),
    // Each of the N - 1 contrasts is larger by the unit.
    deviance: fit.deviance + 2 * (layout.deviations.length - 1) * Math.log(unit),
    mean: fit.mean * unit,
    meanStandardError: fit.meanStandardError * unit,
  }
}

/** The curvature holds fourth powers of the results, and its sums more: only between these are they sure to be doubles. */
const LARGEST_PLAIN = 1e30
const SMALLEST_PLAIN = 1e-30

/** 1 where the results can be searched as they are, otherwise a power of two near the largest of them. */
function unitOf({ deviations }: NestedLayout): number {
  let largest = 0
  for (const deviation of deviations) largest = Math.max(largest, Math.abs(deviation))
  return largest > SMALLEST_PLAIN && largest < LARGEST_PLAIN ? 1 : binaryScaleOf(largest)
}

function inUnit(layout: NestedLayout, unit: number): NestedLayout {
  const divided = (values: Float64Array): Float64Array => values.map((value) => value / unit)
  return {
    ...layout,
    deviations: divided(layout.deviations),
    mean: layout.mean / unit,
    strata: layout.strata.map((stratum) => ({ ...stratum, mean: divided(stratum.mean) })),
  }
}

function fitInUnit(layout: NestedLayout, startRatios: readonly number[]): RemlFit {
  const { strata } = layout
  const residual = strata.at(-1)
  if (residual === undefined) throw new NotComputable('too-few-results', 'Two results are needed.')
  const within = withinSumOfSquares(layout)
  if (within === 0) {
    throw new NotComputable(
      'no-residual',
      'The innermost results do not differ, so the likelihood has no maximum.',
    )
  }

  const random = strata.slice(0, -1)
  const evaluate = restrictedLikelihood(layout, within)
  // The surface can have more than one hollow: the search starts from the
  // analysis of variance and from equal components, and the lower end counts.
  const starts =
    random.length === 0 ? [[]] : [startRatios.map((ratio) => Math.max(ratio, 0.01)), random.map(() => 1)]
  const ends = starts.map((start) => minimise(evaluate, start))
  const best = ends.reduce((one, other) => (other.at.deviance < one.at.deviance - 1e-9 ? other : one))

  const residualVariance = best.at.residualVariance
  return {
    components: [
      ...random.map(({ source }, index) => ({ source, variance: best.ratios[index]! * residualVariance })),
      { source: RESIDUAL, variance: residualVariance },
    ],
    deviance: best.at.deviance,
    converged: best.converged,
    mean: best.at.mean,
    meanStandardError: Math.sqrt(residualVariance / best.at.information),
    boundary: random.filter((_, index) => best.ratios[index] === 0).map(({ source }) => source),
  }
}

function withinSumOfSquares({ strata, deviations, mean }: NestedLayout): number {
  const innermost = strata.at(-2)
  let sum = 0
  let largest = 0
  for (let at = 0; at < deviations.length; at += 1) {
    const deviation = deviations[at]!
    const centre = innermost === undefined ? mean : innermost.mean[innermost.groupOf[at]!]!
    sum += (deviation - centre) ** 2
    largest = Math.max(largest, Math.abs(deviation))
  }
  return sum <= deviations.length * (4 * Number.EPSILON * largest) ** 2 ? 0 : sum
}

type Minimum = { ratios: number[]; at: RestrictedLikelihood; converged: boolean }

function minimise(
  evaluate: (ratios: readonly number[]) => RestrictedLikelihood,
  start: readonly number[],
): Minimum {
  let ratios = [...start]
  let at = evaluate(ratios)
  let damping = 1e-3
  for (let step = 0; step < MOST_STEPS; step += 1) {
    const free = ratios.map((ratio, index) => ratio > 0 || at.gradient[index]! < 0)
    const slope = relativeGradient(at, ratios, free)
    if (slope < GRADIENT_TOLERANCE) return { ratios, at, converged: true }

    const direction = dampedNewtonStep(at, ratios, free, damping)
    if (direction === null) {
      damping = Math.max(damping * 10, 1e-6)
      continue
    }
    const next = ratios.map((ratio, index) => (free[index] ? Math.max(0, ratio + direction[index]!) : ratio))
    const there = evaluate(next)
    // Close to the minimum the deviance no longer resolves a step; there the
    // gradient, which still does, decides.
    const level = Math.abs(there.deviance - at.deviance) <= 1e-11 * (1 + Math.abs(at.deviance))
    const nextFree = next.map((ratio, index) => ratio > 0 || there.gradient[index]! < 0)
    const better = level ? relativeGradient(there, next, nextFree) < slope : there.deviance < at.deviance
    if (better) {
      ratios = next
      at = there
      damping = damping < 1e-12 ? 0 : damping / 10
    } else {
      if (damping > 1e12) break
      damping = Math.max(damping * 10, 1e-6)
    }
  }
  return { ratios, at, converged: settled(at, ratios) }
}

/** Slope of the deviance per relative change of each free ratio, per degree of freedom. */
function relativeGradient(
  at: RestrictedLikelihood,
  ratios: readonly number[],
  free: readonly boolean[],
): number {
  let largest = 0
  ratios.forEach((ratio, index) => {
    if (!free[index]) return
    largest = Math.max(largest, (Math.abs(at.gradient[index]!) * Math.max(ratio, at.scale[index]!)) / at.df)
  })
  return largest
}

/** Rounding can stop a search just short of the tolerance; a hundred times that is still ten times finer than asked. */
function settled(at: RestrictedLikelihood, ratios: readonly number[]): boolean {
  const free = ratios.map((ratio, index) => ratio > 0 || at.gradient[index]! < 0)
  return relativeGradient(at, ratios, free) < 100 * GRADIENT_TOLERANCE
}

function dampedNewtonStep(
  at: RestrictedLikelihood,
  ratios: readonly number[],
  free: readonly boolean[],
  damping: number,
): number[] | null {
  const indices = ratios.map((_, index) => index).filter((index) => free[index])
  const matrix = indices.map((row) =>
    indices.map((column) => {
      const unit = Math.max(ratios[row]!, at.scale[row]!)
      return at.curvature[row]![column]! + (row === column ? (damping * at.df) / unit ** 2 : 0)
    }),
  )
  const solution = solvePositiveDefinite(
    matrix,
    indices.map((index) => -at.gradient[index]!),
  )
  if (solution === null) return null
  const step = ratios.map(() => 0)
  indices.forEach((index, position) => {
    step[index] = solution[position]!
  })
  return step
}

/** Cholesky solution, or `null` where the matrix is not positive definite. */
function solvePositiveDefinite(
  matrix: readonly (readonly number[])[],
  right: readonly number[],
): number[] | null {
  const lower: number[][] = []
  for (let row = 0; row < right.length; row += 1) {
    lower.push([])
    for (let column = 0; column <= row; column += 1) {
      let value = matrix[row]![column]!
      for (let inner = 0; inner < column; inner += 1) value -= lower[row]![inner]! * lower[column]![inner]!
      if (row > column) lower[row]!.push(value / lower[column]![column]!)
      else if (value > 0) lower[row]!.push(Math.sqrt(value))
      else return null
    }
  }
  const half: number[] = []
  right.forEach((value, row) => {
    let rest = value
    for (let inner = 0; inner < row; inner += 1) rest -= lower[row]![inner]! * half[inner]!
    half.push(rest / lower[row]![row]!)
  })
  const solution = half.slice()
  for (let row = right.length - 1; row >= 0; row -= 1) {
    for (let inner = row + 1; inner < right.length; inner += 1) {
      solution[row]! -= lower[inner]![row]! * solution[inner]!
    }
    solution[row]! /= lower[row]![row]!
  }
  return solution
}
