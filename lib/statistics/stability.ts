/**
 * Check of a material over the time of a study: has its mean moved by more than the study can bear?
 *
 * Source: ISO 13528, Annex B, with the same 0.3 σ as the check of homogeneity.
 */
export type StabilityVerdict = {
  /** |ȳ₁ − ȳ₂| */
  difference: number
  /** Within 0.3 σ. */
  basic: boolean
  /** Within 0.3 σ and twice the standard uncertainty of the difference. */
  expanded: boolean
}

export type CheckedMean = { mean: number; standardUncertainty: number }

/** `target` is the standard deviation written down before the check. */
export function stabilityVerdict(one: {
  first: CheckedMean
  second: CheckedMean
  target: number
}): StabilityVerdict {
  const { first, second, target } = one
  if (!(target > 0)) throw new RangeError('stabilityVerdict requires a target above 0')
  const difference = Math.abs(first.mean - second.mean)
  const allowed = 0.3 * target
  const allowance = 2 * Math.hypot(first.standardUncertainty, second.standardUncertainty)
  return { difference, basic: difference <= allowed, expanded: difference <= allowed + allowance }
}
