import { median } from '@/lib/statistics/median'
import { NotComputable } from '@/lib/statistics/not-computable'

/** Robust location and spread, both in the unit of the values. */
export type AlgorithmA = {
  mean: number
  sd: number
  /** 1.25 s* / √p. */
  meanStandardError: number
  iterations: number
}

const MAD_FACTOR = 1.483
const CLIP = 1.5
const SPREAD_FACTOR = 1.134
const TOLERANCE = 1e-12
const MOST_ITERATIONS = 10_000

/**
 * Algorithm A: robust location and spread of cell means, each counted once.
 *
 * Values further than 1.5 s* from x* are drawn in to that distance; x* is the mean of what results and s* is
 * 1.134 times its standard deviation; repeated from the median and 1.483 MAD until both move by less than
 * 1e-12 s*.
 *
 * Units: `values` are one a laboratory, in unit u, and may be deviations from any common origin; the location
 * comes back as such a deviation, the spread and the standard error in u. Order is irrelevant.
 *
 * Variant: the factors 1.483 and 1.134 are the standard's rounded ones.
 *
 * @throws {NotComputable} `too-few-laboratories` below 3; `majority-equal` when the median absolute deviation
 *   is 0; `no-convergence`.
 *
 * Source: ISO 13528, Annex C.3; ISO 5725-5.
 */
export function algorithmA(values: readonly number[]): AlgorithmA {
  const count = values.length
  if (count < 3) throw new NotComputable('too-few-laboratories', 'Algorithm A needs three laboratories.')

  const sorted = Float64Array.from(values).sort()
  let mean = median(sorted)
  const centre = mean
  let sd = MAD_FACTOR * median(sorted.map((value) => Math.abs(value - centre)))
  const largest = Math.max(Math.abs(sorted[0]!), Math.abs(sorted[count - 1]!))
  if (sd <= 8 * Number.EPSILON * largest) {
    throw new NotComputable('majority-equal', 'More than half of the cell means are equal.')
  }

  for (let iterations = 1; iterations <= MOST_ITERATIONS; iterations += 1) {
    const low = mean - CLIP * sd
    const high = mean + CLIP * sd
    const nextMean = sumOf(sorted, low, high) / count
    const nextSd = SPREAD_FACTOR * Math.sqrt(squaresAbout(sorted, nextMean, low, high) / (count - 1))
    const still =
      Math.abs(nextMean - mean) <= TOLERANCE * nextSd && Math.abs(nextSd - sd) <= TOLERANCE * nextSd
    mean = nextMean
    sd = nextSd
    if (still) return { mean, sd, meanStandardError: (1.25 * sd) / Math.sqrt(count), iterations }
  }
  throw new NotComputable('no-convergence', 'Algorithm A did not settle.')
}

/** Of the values drawn in to between the limits. */
function sumOf(values: Float64Array, low: number, high: number): number {
  let sum = 0
  for (let at = 0; at < values.length; at += 1) sum += drawnIn(values[at]!, low, high)
  return sum
}

function squaresAbout(values: Float64Array, centre: number, low: number, high: number): number {
  let squares = 0
  for (let at = 0; at < values.length; at += 1) squares += (drawnIn(values[at]!, low, high) - centre) ** 2
  return squares
}

function drawnIn(value: number, low: number, high: number): number {
  return value < low ? low : value > high ? high : value
}
