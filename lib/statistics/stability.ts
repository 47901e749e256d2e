/** The difference, in the unit of the results, and what it comes to. */
export type StabilityVerdict = {
  /** |ȳ₁ − ȳ₂| */
  difference: number
  /** Within 0.3 σ. */
  basic: boolean
  /** Within 0.3 σ and twice the standard uncertainty of the difference. */
  expanded: boolean
}

/** One of the two means, early or late, with its standard uncertainty in the same unit. */
export type CheckedMean = { mean: number; standardUncertainty: number }

/**
 * Check of a material over the time of a study: has its mean moved by more than the study can bear?
 *
 * `target` is the standard deviation σ written down before the check, in the unit of the means. Basic: |ȳ₁ − ȳ₂| ≤ 0.3 σ,
 * as in the check of homogeneity; expanded: with 2 √(u²(ȳ₁) + u²(ȳ₂)) added.
 *
 * @throws {RangeError} for a target that is not above 0.
 *
 * Source: ISO 13528, Annex B.
 */
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
