import { chiSquaredQuantileUpper } from '@/lib/statistics/distributions/chi-squared'
import { fQuantileUpper, fUpperTail } from '@/lib/statistics/distributions/f'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * What the check found: `portions` of each unit; s_x̄, s_w and s_s in the unit u of the results, s_s² as estimated
 * in u²; and the factors F1 and F2 of the expanded criterion, pure numbers.
 */
export type HomogeneityFigures = {
  portions: number
  sx: number
  sw: number
  ssSquaredRaw: number
  ss: number
  f1: number
  f2: number
}

/**
 * Check before shipping: do the units of a material differ by more than the study can bear?
 *
 * Shape: `units[i][j]` is portion j of unit i, in unit u as a deviation from any origin; equally many portions a
 * unit. A negative s_s² = s_x̄² − s_w²/n is 0 in `ss` and keeps its raw value.
 *
 * @throws {NotComputable} `too-few-units` below 2; `unequal-portions`; `no-replication`.
 *
 * Source: ISO 13528, Annex B; Fearn & Thompson 2001 for F1 and F2.
 */
export function homogeneityFigures(units: readonly (readonly number[])[]): HomogeneityFigures {
  const g = units.length
  if (g < 2) throw new NotComputable('too-few-units', 'Two units are needed.')
  const n = units[0]!.length
  if (units.some((unit) => unit.length !== n)) {
    throw new NotComputable('unequal-portions', 'Every unit must have the same number of test portions.')
  }
  if (n < 2) throw new NotComputable('no-replication', 'Every unit needs two test portions.')

  const means = units.map((unit) => unit.reduce((sum, value) => sum + value, 0) / n)
  const centre = means.reduce((sum, value) => sum + value, 0) / g
  const between = means.reduce((sum, value) => sum + (value - centre) ** 2, 0) / (g - 1)
  let within = 0
  units.forEach((unit, index) => {
    for (const value of unit) within += (value - means[index]!) ** 2
  })
  within /= g * (n - 1)
  const ssSquaredRaw = between - within / n
  return {
    portions: n,
    sx: Math.sqrt(between),
    sw: Math.sqrt(within),
    ssSquaredRaw,
    ss: Math.sqrt(Math.max(0, ssSquaredRaw)),
    f1: chiSquaredQuantileUpper(0.05, g - 1) / (g - 1),
    f2: (fQuantileUpper(0.05, g - 1, g * (n - 1)) - 1) / n,
  }
}

/**
 * The three criteria against a target standard deviation σ written down before the check, in the figures' unit:
 * s_s ≤ 0.3 σ; the expanded s_s² ≤ F1 (0.3 σ)² + F2 s_w²; and s_w < 0.5 σ, without which the check is too coarse
 * to tell.
 *
 * Source: ISO 13528, Annex B; Fearn & Thompson 2001.
 */
export function homogeneityVerdict(
  figures: HomogeneityFigures,
  target: number,
): { basic: boolean; expanded: boolean; checkPrecise: boolean } {
  const allowed = (0.3 * target) ** 2
  return {
    basic: figures.ss <= 0.3 * target,
    expanded: figures.ss ** 2 <= figures.f1 * allowed + figures.f2 * figures.sw ** 2,
    checkPrecise: figures.sw < 0.5 * target,
  }
}

/**
 * One-way F test of equal units, on (g − 1, g (n − 1)) degrees of freedom; `units` is g. It decides nothing here.
 *
 * @throws {NotComputable} `no-scatter` when the portions of a unit never differ.
 */
export function homogeneityPValue(figures: HomogeneityFigures, units: number): number {
  if (figures.sw === 0) throw new NotComputable('no-scatter', 'The portions of a unit do not differ.')
  const f = (figures.portions * figures.sx ** 2) / figures.sw ** 2
  return fUpperTail(f, units - 1, units * (figures.portions - 1))
}
