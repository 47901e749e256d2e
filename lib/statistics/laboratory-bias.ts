import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { NotComputable } from '@/lib/statistics/not-computable'

/** A bias and its 95 % limits, all in the unit of the results. */
export type LaboratoryBias = {
  bias: number
  lower: number
  upper: number
  /** What is left of the laboratory's bias beside that of the method, Δ − δ. */
  component: number
}

/**
 * Bias of one laboratory against an accepted reference value, Δ = ȳ − μ, with the 95 % interval of its random part alone,
 * ± t s_r/√n: the reference's uncertainty and the laboratory's days are not in it.
 *
 * Units: `bias` and `methodBias` (δ) in u, the variance of repeatability in u².
 *
 * @throws {NotComputable} `no-replicates` where repeatability has no degree of freedom.
 * @throws {RangeError} below one result.
 *
 * Source: ISO 5725-4; Student's t in place of 1.96.
 */
export function laboratoryBias(one: {
  bias: number
  methodBias: number
  /** n, on which the laboratory's mean rests. */
  results: number
  repeatability: { variance: number; df: number }
}): LaboratoryBias {
  const { bias, methodBias, results, repeatability } = one
  if (!(results >= 1)) throw new RangeError('laboratoryBias requires a result')
  if (repeatability.df < 1) throw new NotComputable('no-replicates', 'No laboratory has a second result.')
  const half = tQuantileUpper(0.025, repeatability.df) * Math.sqrt(repeatability.variance / results)
  return { bias, lower: bias - half, upper: bias + half, component: bias - methodBias }
}
