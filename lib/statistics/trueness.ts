import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { NotComputable } from '@/lib/statistics/not-computable'

/** The standard uncertainty of the general mean and the 95 % limits of the bias, in the unit of the results. */
export type BiasInterval = { standardUncertainty: number; df: number; lower: number; upper: number }

const MOST_DF = 1e9

/**
 * The 95 % interval of the method's bias δ = m − μ against an accepted reference value: δ ± t √(u_δ² + u_μ²).
 *
 * Units: `bias` and `referenceUncertainty` (standard, u_μ) in u, `varianceOfMean` (u_δ²) in u².
 *
 * Variant: Student's t in place of 1.96, which falls short of 95 % with few laboratories; its degrees of freedom are
 * those of the laboratories, enlarged as the reference's own uncertainty, taken as known, has the greater part:
 * (p − 1)(u_δ² + u_μ²)²/u_δ⁴.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2; `no-scatter` when the mean has no uncertainty;
 *   `out-of-range` when that of the reference cannot be squared.
 *
 * Source: ISO 5725-4; the interval as above.
 */
export function biasInterval(one: {
  bias: number
  laboratories: number
  varianceOfMean: number
  referenceUncertainty: number
}): BiasInterval {
  if (one.laboratories < 2) throw new NotComputable('too-few-laboratories', 'Two laboratories are needed.')
  if (one.varianceOfMean === 0) throw new NotComputable('no-scatter', 'The results do not differ at all.')
  const together = one.varianceOfMean + one.referenceUncertainty ** 2
  if (!Number.isFinite(together)) {
    throw new NotComputable('out-of-range', 'The uncertainty of the reference is too large to be squared.')
  }
  // A ratio first: the square of a small variance is no double. From the cap on, t is normal to all its digits.
  const df = Math.min(MOST_DF, (one.laboratories - 1) * (together / one.varianceOfMean) ** 2)
  const half = tQuantileUpper(0.025, df) * Math.sqrt(together)
  return {
    standardUncertainty: Math.sqrt(one.varianceOfMean),
    df,
    lower: one.bias - half,
    upper: one.bias + half,
  }
}
