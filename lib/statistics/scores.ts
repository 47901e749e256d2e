import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The value a laboratory is measured by, with its standard uncertainty; all arguments below are in its unit, all scores
 * pure numbers.
 */
export type Assigned = { value: number; uncertainty: number }

/**
 * z = (x − x_pt)/σ_pt, a laboratory's cell mean against the assigned value. The uncertainty of the assigned value plays no
 * part: where it is above 0.3 σ_pt, z′ is shown instead.
 *
 * @throws {NotComputable} `no-target` when σ is not above 0.
 *
 * Source: ISO 13528, clause 9.
 */
export function zScore(value: number, assigned: Assigned, sigma: number): number {
  if (!(sigma > 0))
    throw new NotComputable('no-target', 'The standard deviation for the score is not above 0.')
  return (value - assigned.value) / sigma
}

/**
 * z′ = (x − x_pt)/√(σ_pt² + u²(x_pt)): z with the uncertainty of the assigned value in its divisor.
 *
 * @throws {NotComputable} `no-target` when σ is not above 0.
 *
 * Source: ISO 13528, clause 9.
 */
export function zPrimeScore(value: number, assigned: Assigned, sigma: number): number {
  if (!(sigma > 0))
    throw new NotComputable('no-target', 'The standard deviation for the score is not above 0.')
  return (value - assigned.value) / Math.hypot(sigma, assigned.uncertainty)
}

/**
 * ζ = (x − x_pt)/√(u²(x) + u²(x_pt)), with the laboratory's own standard uncertainty.
 *
 * @throws {NotComputable} `no-uncertainty` when neither uncertainty is above 0. That a small consensus which holds the
 *   laboratory itself is no yardstick the caller must know.
 *
 * Source: ISO 13528, clause 9.
 */
export function zetaScore(value: number, assigned: Assigned, uncertainty: number): number {
  const together = Math.hypot(uncertainty, assigned.uncertainty)
  if (!(together > 0)) throw new NotComputable('no-uncertainty', 'Neither uncertainty is above 0.')
  return (value - assigned.value) / together
}

/**
 * E_n: ζ with expanded uncertainties, k = 2 on both sides, and so half of ζ. Takes standard uncertainties.
 *
 * @throws {NotComputable} `no-uncertainty` when neither uncertainty is above 0.
 *
 * Source: ISO 13528, clause 9.
 */
export function enScore(value: number, assigned: Assigned, uncertainty: number): number {
  return zetaScore(value, assigned, uncertainty) / 2
}
