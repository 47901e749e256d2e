import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { buildNestedLayout, type NestedLayout, nestedTable } from '@/lib/statistics/nested-layout'
import { restrictedLikelihood } from '@/lib/statistics/nested-likelihood'

const seed = 20261204

/** A study as a tree of group sizes: laboratories, days, operators; alike in part, so that some groups are pooled. */
const sizes = fc.array(
  fc.array(fc.array(fc.integer({ min: 1, max: 3 }), { minLength: 1, maxLength: 3 }), {
    minLength: 1,
    maxLength: 3,
  }),
  { minLength: 2, maxLength: 5 },
)
const alike = fc
  .tuple(
    fc.integer({ min: 2, max: 4 }),
    fc.array(fc.array(fc.integer({ min: 1, max: 3 }), { minLength: 1, maxLength: 2 }), {
      minLength: 1,
      maxLength: 3,
    }),
  )
  .map(([laboratories, one]) => Array.from({ length: laboratories }, () => one))

const ratios = fc.tuple(...Array.from({ length: 3 }, () => fc.double({ min: 0, max: 5, noNaN: true })))

function layoutOf(study: readonly (readonly (readonly number[])[])[]): NestedLayout {
  let count = 0
  const observations = study.flatMap((days, laboratory) =>
    days.flatMap((operators, day) =>
      operators.flatMap((results, operator) =>
        Array.from({ length: results }, () => {
          count += 1
          const deviation = Math.sin(count * 12.9898) + 0.7 * Math.sin(laboratory * 78.233)
          return { path: [`L${laboratory}`, `${day}`, `${operator}`], deviation }
        }),
      ),
    ),
  )
  return buildNestedLayout(['laboratory', 'day', 'operator'], nestedTable(observations, 3))
}

/** The deviance from the whole covariance matrix, in units of the residual variance, which is profiled out. */
function denseDeviance({ strata, deviations }: NestedLayout, theta: readonly number[]): number {
  const n = deviations.length
  const random = strata.slice(0, -1)
  const matrix = Array.from({ length: n }, (_, i) =>
    Array.from({ length: n }, (_, j) =>
      random.reduce(
        (sum, { groupOf }, level) => sum + (groupOf[i] === groupOf[j] ? theta[level]! : 0),
        i === j ? 1 : 0,
      ),
    ),
  )
  const lower = cholesky(matrix)
  const [y, one] = [solved(lower, [...deviations]), solved(lower, new Array<number>(n).fill(1))]
  const information = dot(one, one)
  const mean = dot(one, y) / information
  const rest = y.map((value, index) => value - mean * one[index]!)
  const logDeterminant = 2 * lower.reduce((sum, row, index) => sum + Math.log(row[index]!), 0)
  const df = n - 1
  return logDeterminant + Math.log(information) + df * (1 + Math.log((2 * Math.PI * dot(rest, rest)) / df))
}

function cholesky(matrix: readonly (readonly number[])[]): number[][] {
  const lower: number[][] = []
  matrix.forEach((row, i) => {
    const own: number[] = []
    for (let j = 0; j <= i; j += 1) {
      let value = row[j]!
      for (let k = 0; k < j; k += 1) value -= own[k]! * (j === i ? own[k]! : lower[j]![k]!)
      own.push(j === i ? Math.sqrt(value) : value / lower[j]![j]!)
    }
    lower.push(own)
  })
  return lower
}

function solved(lower: readonly (readonly number[])[], right: readonly number[]): number[] {
  const solution: number[] = []
  right.forEach((value, i) => {
    let rest = value
    for (let k = 0; k < i; k += 1) rest -= lower[i]![k]! * solution[k]!
    solution.push(rest / lower[i]![i]!)
  })
  return solution
}

function dot(one: readonly number[], other: readonly number[]): number {
  return one.reduce((sum, value, index) => sum + value * other[index]!, 0)
}

/** About the means of the innermost groups that hold several results. */
function withinOf({ strata, deviations, mean }: NestedLayout): number {
  const innermost = strata.at(-2)
  return deviations.reduce(
    (sum, value, at) => sum + (value - (innermost ? innermost.mean[innermost.groupOf[at]!]! : mean)) ** 2,
    0,
  )
}

describe('the restricted likelihood of a nested layout', () => {
  it('is that of the whole covariance matrix, however groups are pooled and mixed', () => {
    let compared = 0
    fc.assert(
      fc.property(fc.oneof(sizes, alike), ratios, (study, wanted) => {
        const layout = layoutOf(study)
        const within = withinOf(layout)
        if (layout.strata.length < 2 || within === 0) return
        const theta = wanted.slice(0, layout.strata.length - 1)
        const { deviance } = restrictedLikelihood(layout, within)(theta)
        expect(Math.abs(deviance - denseDeviance(layout, theta))).toBeLessThan(
          1e-9 * (1 + Math.abs(deviance)),
        )
        compared += 1
      }),
      { seed, numRuns: 300 },
    )
    expect(compared).toBeGreaterThan(200)
  })

  it('has the slope and the curvature of its differences', () => {
    const layout = layoutOf([[[2, 1], [3]], [[2, 1], [3]], [[1], [2, 2], [1]], [[3]]])
    const evaluate = restrictedLikelihood(layout, withinOf(layout))
    const at = [0.7, 0.4, 0.2].slice(0, layout.strata.length - 1)
    const { gradient, curvature } = evaluate(at)
    at.forEach((_, index) => {
      const step = 1e-5
      const [above, below] = [step, -step].map((by) =>
        evaluate(at.map((ratio, place) => ratio + (place === index ? by : 0))),
      )
      expect((above!.deviance - below!.deviance) / (2 * step)).toBeCloseTo(gradient[index]!, 6)
      at.forEach((_, other) => {
        const difference = (above!.gradient[other]! - below!.gradient[other]!) / (2 * step)
        expect(difference).toBeCloseTo(curvature[index]![other]!, 5)
      })
    })
  })
})
