import { studentizedRangeUpperTail } from '@/lib/statistics/distributions/studentized-range'
import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The curve of chance of one average: Student's t on `df` degrees of freedom, stretched by `scale`. Scale and
 * half-width are in the unit of the results.
 */
export type ReferenceCurve = { df: number; scale: number; n: number; halfWidth95: number }

/**
 * Are the laboratories alike? The curve of chance that is slid along the axis of laboratory averages.
 *
 * Units: `variance` is that of one result, in u², estimated with `df` degrees of freedom, in the sense that an
 * average of n results has variance / n when the laboratories agree. Where laboratories differ in their number of
 * results, n is their harmonic mean. Scale √(variance / n) and half-width t_{0.975} scale are in u.
 *
 * The picture decides nothing; the F test and {@link averageRange} do.
 *
 * @throws {RangeError} for degrees of freedom that are not above 0.
 *
 * Source: Box, Hunter & Hunter, Statistics for Experimenters (reference distribution for averages).
 */
export function referenceCurve(one: { variance: number; df: number; n: number }): ReferenceCurve {
  const scale = Math.sqrt(one.variance / one.n)
  return { df: one.df, scale, n: one.n, halfWidth95: tQuantileUpper(0.025, one.df) * scale }
}

/**
 * The range of the laboratories' averages in units of the curve's scale, with the chance of so wide a one when
 * they agree (studentised range).
 *
 * `averages` in the curve's unit, one a laboratory, from any origin and in any order; the range is a pure number.
 * Exact for averages of equally many results.
 *
 * @throws {NotComputable} `too-few-laboratories` below 2; `no-scatter` when the scale is 0.
 *
 * Source: Box, Hunter & Hunter; Harter 1960 for the distribution.
 */
export function averageRange(
  averages: readonly number[],
  curve: ReferenceCurve,
): { range: number; pValue: number } {
  if (averages.length < 2) throw new NotComputable('too-few-laboratories', 'Two laboratories are needed.')
  if (curve.scale === 0)
    throw new NotComputable('no-scatter', 'The results inside the laboratories do not differ.')
  const range = (Math.max(...averages) - Math.min(...averages)) / curve.scale
  return { range, pValue: studentizedRangeUpperTail(range, averages.length, curve.df) }
}
