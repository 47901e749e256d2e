import { tUpperTail } from '@/lib/statistics/distributions/students-t'

/**
 * What stands out in a laboratory's results without explaining a discrepancy:
 * identical results, a step coarser than asked, a trend in the order of the runs.
 * These never compete with explanations.
 */

/**
 * Chance, over all cells looked at, that the results of some cell agree in every digit by accident: a normal scatter
 * rounded to steps of `step`. (d/(s_r√(2π)))^(n−1)/√n times the number of cells, 1 at most.
 *
 * `step` (d) and `sd` (s_r, of the other laboratories) are in one unit; `results` is n. 1 where there is no scatter to
 * judge by.
 *
 * Source: our own.
 */
export function chanceOfIdentical(one: { results: number; step: number; sd: number; cells: number }): number {
  if (one.sd === 0) return 1
  const single = one.step / (one.sd * Math.sqrt(2 * Math.PI))
  return Math.min(1, (single ** (one.results - 1) / Math.sqrt(one.results)) * one.cells)
}

/**
 * The largest step of which all the numbers are multiples, in their unit; 0 when all are 0.
 *
 * Source: our own; Euclid's algorithm.
 */
export function commonStep(numbers: readonly bigint[]): bigint {
  let step = 0n
  for (const number of numbers) {
    step = greatestCommonDivisor(step, number)
    // Of a divisor of 1 nothing more can be taken.
    if (step === 1n) break
  }
  return step
}

/**
 * Two-sided p-value of a straight trend of results in the order of the runs.
 *
 * Shape: `cells[i][j]` is result j of cell i, its value in standard deviations of its material. Orders and results are
 * both taken about the mean of their cell, so that the means, which cost a degree of freedom each, cannot pass for a
 * trend. `null` where there is nothing to judge by, since this is noticed and never refused.
 *
 * Source: our own; Student's t of a slope.
 */
export function trendPValue(cells: readonly (readonly { order: number; value: number }[])[]): number | null {
  // In parts of the largest, so that no square leaves the doubles; a slope's t has no unit.
  const ofOrder = largestOf(cells, ({ order }) => order)
  const ofValue = largestOf(cells, ({ value }) => value)
  let orders = 0
  let products = 0
  let squares = 0
  let results = 0
  for (const cell of cells) {
    const order = cell.reduce((sum, one) => sum + one.order / ofOrder, 0) / cell.length
    const value = cell.reduce((sum, one) => sum + one.value / ofValue, 0) / cell.length
    for (const one of cell) {
      const [x, y] = [one.order / ofOrder - order, one.value / ofValue - value]
      orders += x ** 2
      products += x * y
      squares += y ** 2
      results += 1
    }
  }
  const df = results - cells.length - 1
  if (df < 1 || orders === 0 || squares === 0) return null
  const rest = squares - products ** 2 / orders
  if (rest <= squares * 1e-14) return 0
  const t = Math.abs(products) / Math.sqrt((orders * rest) / df)
  return Math.min(1, 2 * tUpperTail(t, df))
}

/** 1 where all are 0. */
function largestOf<One>(cells: readonly (readonly One[])[], sizeOf: (one: One) => number): number {
  let largest = 0
  for (const cell of cells) for (const one of cell) largest = Math.max(largest, Math.abs(sizeOf(one)))
  return largest === 0 ? 1 : largest
}

function greatestCommonDivisor(one: bigint, other: bigint): bigint {
  let [a, b] = [one < 0n ? -one : one, other < 0n ? -other : other]
  while (b !== 0n) [a, b] = [b, a % b]
  return a
}
