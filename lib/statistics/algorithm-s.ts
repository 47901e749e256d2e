import { chiSquaredLowerTail, chiSquaredQuantileUpper } from '@/lib/statistics/distributions/chi-squared'
import { median } from '@/lib/statistics/median'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The pooled standard deviation in the unit of the cells' own. `generalised` says that cells differed in their
 * degrees of freedom.
 */
export type AlgorithmS = { sd: number; generalised: boolean; iterations: number }

const TOLERANCE = 1e-13
const MOST_ITERATIONS = 10_000
const CLIPPED_SHARE = 0.1

/**
 * Algorithm S: robust pooled standard deviation of cells.
 *
 * Standard deviations above η w are drawn in to it, from the median until w² moves by less than 1e-13 of itself.
 *
 * Units: `cells` in any order, `sd` in unit u with `df` degrees of freedom; those with none count nowhere. The
 * answer is in u.
 *
 * Variant: for cells of one size this is the standard's algorithm. The form for unequal ones, in which each
 * counts by its degrees of freedom, is our own and marked `generalised`. The constants are exact, not the
 * rounded ones of the printed table.
 *
 * @throws {NotComputable} `no-replication` without a cell of two results; `majority-zero` when the median
 *   standard deviation is 0; `no-convergence`.
 *
 * Source: ISO 13528, Annex C.4; ISO 5725-5.
 */
export function algorithmS(cells: readonly { sd: number; df: number }[]): AlgorithmS {
  const replicated = cells.filter(({ df }) => df >= 1)
  if (replicated.length === 0) {
    throw new NotComputable('no-replication', 'No cell holds two results.')
  }
  const start = median(replicated.map(({ sd }) => sd))
  if (start === 0) {
    throw new NotComputable('majority-zero', 'The median of the cell standard deviations is 0.')
  }

  const constants = new Map([...new Set(replicated.map(({ df }) => df))].map((df) => [df, constantsFor(df)]))
  const variances = Float64Array.from(replicated, ({ sd }) => sd ** 2)
  const weights = Float64Array.from(replicated, ({ df }) => df)
  const limits = Float64Array.from(replicated, ({ df }) => constants.get(df)!.limitSquared)
  const divisor = replicated.reduce((sum, { df }) => sum + df * constants.get(df)!.expectedShare, 0)

  let variance = start ** 2
  for (let iterations = 1; iterations <= MOST_ITERATIONS; iterations += 1) {
    const before = variance
    let sum = 0
    for (let at = 0; at < variances.length; at += 1)
      sum += weights[at]! * Math.min(variances[at]!, limits[at]! * before)
    variance = sum / divisor
    if (Math.abs(variance - before) <= TOLERANCE * variance) {
      return { sd: Math.sqrt(variance), generalised: constants.size > 1, iterations }
    }
  }
  throw new NotComputable('no-convergence', 'Algorithm S did not settle.')
}

/** η² for the degrees of freedom, and ξ⁻², the share of the variance that clipping leaves in normal data. */
function constantsFor(df: number): { limitSquared: number; expectedShare: number } {
  const limitSquared = chiSquaredQuantileUpper(CLIPPED_SHARE, df) / df
  return {
    limitSquared,
    expectedShare: chiSquaredLowerTail(df * limitSquared, df + 2) + CLIPPED_SHARE * limitSquared,
  }
}
