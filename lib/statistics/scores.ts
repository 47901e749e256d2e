import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * Performance scores of one laboratory's cell mean, for its confidential report.
 *
 * Source: ISO 13528, clause 9.
 */
export type Assigned = { value: number; uncertainty: number }

/** @throws {NotComputable} `no-target` when σ is not above 0. */
export function zScore(value: number, assigned: Assigned, sigma: number): number {
  if (!(sigma > 0))
    throw new NotComputable('no-target', 'The standard deviation for the score is not above 0.')
  return (value - assigned.value) / sigma
}

/** z with the uncertainty of the assigned value in its divisor. */
export function zPrimeScore(value: number, assigned: Assigned, sigma: number): number {
  if (!(sigma > 0))
    throw new NotComputable('no-target', 'The standard deviation for the score is not above 0.')
  return (value - assigned.value) / Math.hypot(sigma, assigned.uncertainty)
}

/** With the laboratory's own standard uncertainty. */
export function zetaScore(value: number, assigned: Assigned, uncertainty: number): number {
  const together = Math.hypot(uncertainty, assigned.uncertainty)
  if (!(together > 0)) throw new NotComputable('no-uncertainty', 'Neither uncertainty is above 0.')
  return (value - assigned.value) / together
}

/** The same with expanded uncertainties, k = 2 on both sides. */
export function enScore(value: number, assigned: Assigned, uncertainty: number): number {
  return zetaScore(value, assigned, uncertainty) / 2
}
