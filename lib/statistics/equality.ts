import { studentizedRangeUpperTail } from '@/lib/statistics/distributions/studentized-range'
import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The curve of chance of one average: Student's t on `df` degrees of freedom, stretched by `scale`, which is in the
 * unit of the results.
 */
export type ReferenceCurve = { df: number; scale: number; n: number }

/**
 * Are the laboratories alike? The curve of chance that is slid along the axis of laboratory averages.
 *
 * Units: `variance` is that of one result, in u², estimated with `df` degrees of freedom, in the sense that an
 * average of n results has variance / n when the laboratories agree. Where laboratories differ in their number of
 * results, n is their harmonic mean. Scale √(variance / n) is in u.
 *
 * The picture decides nothing; the F test and {@link averageRange} do.
 *
 * Source: Box, Hunter & Hunter, Statistics for Experimenters (reference distribution for averages).
 */
export function referenceCurve(one: { variance: number; df: number; n: number }): ReferenceCurve {
  return { df: one.df, scale: Math.sqrt(one.variance / one.n), n: one.n }
}

/** On fewer the 97.5 % point of t nears the largest double and soon passes it. */
const LEAST_DF = 0.01

/**
 * How far the curve reaches to either side with 95 %: t_{0.975} scale, in the unit of the results.
 *
 * @throws {NotComputable} `out-of-range` on less than 0.01 degrees of freedom, which a denominator synthesised from mean
 *   squares that nearly cancel can have.
 * @throws {RangeError} for degrees of freedom that are not above 0.
 *
 * Source: Box, Hunter & Hunter.
 */
export function halfWidth95({ df, scale }: ReferenceCurve): number {
  if (df > 0 && df < LEAST_DF) {
    throw new NotComputable('out-of-range', 'Too few degrees of freedom for limits.')
  }
  return tQuantileUpper(0.025, df) * scale
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
  let [least, most] = [Infinity, -Infinity]
  for (const average of averages) {
    least = Math.min(least, average)
    most = Math.max(most, average)
  }
  const range = (most - least) / curve.scale
  return { range, pValue: studentizedRangeUpperTail(range, averages.length, curve.df) }
}
