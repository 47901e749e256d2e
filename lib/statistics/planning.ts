/**
 * How well a study of p laboratories with n replicates will know its standard
 * deviations: half-widths of the 95 % intervals, as a fraction of the value.
 *
 * `gamma` is σ_R/σ_r. The figure for reproducibility comes from a first-order
 * expansion: right to 6 % for gamma of 1.5 and more, 6 to 14 % too small at 1.
 *
 * Source: ISO 5725-1, 6.3.
 */
export type Plan = { p: number; n: number; gamma: number }

/**
 * A_r = 1.96 √(1/(2p(n − 1))): half-width of the 95 % interval of s_r as a fraction of it. `gamma` plays no part.
 *
 * @throws {RangeError} below 2 laboratories or 2 replicates.
 *
 * Source: ISO 5725-1, 6.3.
 */
export function repeatabilityPrecision({ p, n }: Plan): number {
  requirePlan({ p, n, gamma: 1 })
  if (n < 2) throw new RangeError('repeatabilityPrecision requires two replicates')
  return 1.96 * Math.sqrt(1 / (2 * p * (n - 1)))
}

/**
 * A_R = 1.96 √([p(1 + n(γ² − 1))² + (n − 1)(p − 1)]/(2γ⁴n²(p − 1)p)): half-width of the 95 % interval of s_R as a
 * fraction of it. First order: 6 to 14 % too small at γ = 1.
 *
 * @throws {RangeError} below 2 laboratories, 1 replicate or a gamma of 1.
 *
 * Source: ISO 5725-1, 6.3.
 */
export function reproducibilityPrecision(plan: Plan): number {
  requirePlan(plan)
  const { p, n, gamma } = plan
  const between = p * (1 + n * (gamma ** 2 - 1)) ** 2
  return 1.96 * Math.sqrt((between + (n - 1) * (p - 1)) / (2 * gamma ** 4 * n ** 2 * (p - 1) * p))
}

/**
 * A = 1.96 √((n(γ² − 1) + 1)/(γ²pn)): half-width of the 95 % interval of the method's bias, in units of σ_R.
 *
 * @throws {RangeError} below 2 laboratories, 1 replicate or a gamma of 1.
 *
 * Source: ISO 5725-1, 6.3.
 */
export function biasPrecision(plan: Plan): number {
  requirePlan(plan)
  const { p, n, gamma } = plan
  return 1.96 * Math.sqrt((n * (gamma ** 2 - 1) + 1) / (gamma ** 2 * p * n))
}

function requirePlan({ p, n, gamma }: Plan): void {
  if (!Number.isInteger(p) || p < 2) throw new RangeError('a plan requires at least two laboratories')
  if (!Number.isInteger(n) || n < 1) throw new RangeError('a plan requires at least one replicate')
  if (!(gamma >= 1)) throw new RangeError('a plan requires gamma of at least 1')
}
