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

  let mean = median(values)
  const centre = mean
  let sd = MAD_FACTOR * median(values.map((value) => Math.abs(value - centre)))
  const largest = Math.max(...values.map((value) => Math.abs(value)))
  if (sd <= 8 * Number.EPSILON * largest) {
    throw new NotComputable('majority-equal', 'More than half of the cell means are equal.')
  }

  for (let iterations = 1; iterations <= MOST_ITERATIONS; iterations += 1) {
    const low = mean - CLIP * sd
    const high = mean + CLIP * sd
    const drawnIn = values.map((value) => Math.min(high, Math.max(low, value)))
    const nextMean = drawnIn.reduce((sum, value) => sum + value, 0) / count
    const squares = drawnIn.reduce((sum, value) => sum + (value - nextMean) ** 2, 0)
    const nextSd = SPREAD_FACTOR * Math.sqrt(squares / (count - 1))
    const still =
      Math.abs(nextMean - mean) <= TOLERANCE * nextSd && Math.abs(nextSd - sd) <= TOLERANCE * nextSd
    mean = nextMean
    sd = nextSd
    if (still) return { mean, sd, meanStandardError: (1.25 * sd) / Math.sqrt(count), iterations }
  }
  throw new NotComputable('no-convergence', 'Algorithm A did not settle.')
}
